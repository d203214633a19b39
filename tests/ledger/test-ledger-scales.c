/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Scales of instruments: deeds that can be undone, one an instrument. */

#include "test-ledger.h"

#include "tf-check.h"
#include "tf-ledger-scales.h"

static double
factor_of (TfLedger *ledger, const char *instrument)
{
  g_autoptr (GPtrArray) scales = tf_ledger_scales (ledger, NULL);
  for (guint k = 0; k < scales->len; k++)
    {
      const TfKeptScale *scale = g_ptr_array_index (scales, k);
      if (g_str_equal (scale->instrument, instrument))
        return scale->factor;
    }
  return NAN;
}

static void
test_kept (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfKeptScale scale = { (char *)"B", (char *)"A", 1.4, 0.02, (char *)"pair/1", NULL };
  g_assert_true (tf_ledger_set_scale (f->ledger, &scale, north, NULL));
  g_autoptr (GPtrArray) kept = tf_ledger_scales (f->ledger, NULL);
  const TfKeptScale *one = g_ptr_array_index (kept, 0);
  g_assert_cmpuint (kept->len, ==, 1);
  g_assert_cmpstr (one->reference, ==, "A");
  g_assert_cmpstr (one->person, ==, "north");
  g_assert_cmpstr (one->evidence, ==, "pair/1");
  tf_check_near ("factor", one->factor, 1.4, 0.0);
  tf_check_near ("sigma", one->sigma, 0.02, 0.0);
  fixture_check (f->ledger, "");
}

static void
test_undone (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfKeptScale scale = { (char *)"B", (char *)"A", 1.4, NAN, NULL, NULL };
  g_assert_true (tf_ledger_set_scale (f->ledger, &scale, north, NULL));
  scale.factor = 1.2;
  g_assert_true (tf_ledger_set_scale (f->ledger, &scale, north, NULL));
  scale.factor = NAN; /* taken back */
  g_assert_true (tf_ledger_set_scale (f->ledger, &scale, north, NULL));
  tf_check_nan ("taken back", factor_of (f->ledger, "B"));
  g_assert_true (tf_ledger_undo (f->ledger, north, NULL, NULL));
  tf_check_near ("again", factor_of (f->ledger, "B"), 1.2, 0.0);
  g_assert_true (tf_ledger_undo (f->ledger, north, NULL, NULL));
  tf_check_near ("the first", factor_of (f->ledger, "B"), 1.4, 0.0);
  g_assert_true (tf_ledger_undo (f->ledger, north, NULL, NULL));
  tf_check_nan ("none", factor_of (f->ledger, "B"));
  g_assert_true (tf_ledger_redo (f->ledger, north, NULL, NULL));
  tf_check_near ("redone", factor_of (f->ledger, "B"), 1.4, 0.0);
  fixture_check (f->ledger, "");
}

static void
test_refused (Fixture *f, gconstpointer data)
{
  static const struct
  {
    const char *instrument, *reference;
    double factor;
  } bad[] = { { "B", "B", 1.4 }, { "", "A", 1.4 }, { "B", "A", -1.0 }, { "B", "A", 0.0 } };
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  for (guint k = 0; k < G_N_ELEMENTS (bad); k++)
    {
      g_autoptr (GError) error = NULL;
      TfKeptScale scale
          = { (char *)bad[k].instrument, (char *)bad[k].reference, bad[k].factor, NAN, NULL, NULL };
      g_assert_false (tf_ledger_set_scale (f->ledger, &scale, north, &error));
      g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
    }
}

void
add_scales_tests (void)
{
  FIXTURE_TEST ("/ledger/scales/one-an-instrument", test_kept);
  FIXTURE_TEST ("/ledger/scales/undone-and-redone", test_undone);
  FIXTURE_TEST ("/ledger/scales/nonsense-is-refused", test_refused);
}
