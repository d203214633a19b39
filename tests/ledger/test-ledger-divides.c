/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Moved divides: deeds that can be undone, one a study, minimum and hemisphere. */

#include "test-ledger.h"

#include "tf-ledger-divides.h"

static TfTime times[] = { { 2.3e8 }, { 2.6e8 }, { 2.9e8 } };
static double lats[] = { 18.5, 16, 12.25 };

static const TfMovedDivide *
only (GPtrArray *divides)
{
  g_assert_cmpuint (divides->len, ==, 1);
  return g_ptr_array_index (divides, 0);
}

static void
test_there_and_back (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfMovedDivide divide = { 24, 1, 3, times, lats };
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  g_autoptr (GPtrArray) kept = tf_ledger_divides (f->ledger, "default", NULL);
  const TfMovedDivide *got = only (kept);
  g_assert_cmpint (got->cycle, ==, 24);
  g_assert_cmpint (got->hemisphere, ==, 1);
  g_assert_cmpuint (got->n, ==, 3);
  g_assert_false (got->shown);
  g_assert_cmpstr (got->person, ==, "north");
  for (guint k = 0; k < 3; k++)
    {
      tf_check_near ("time", got->times[k].s, times[k].s, 0.51);
      tf_check_near ("latitude", got->lats[k], lats[k], 0);
    }
  g_autoptr (GPtrArray) other = tf_ledger_divides (f->ledger, "another", NULL);
  g_assert_cmpuint (other->len, ==, 0);
  fixture_check (f->ledger, "");
}

static void
test_undone (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfMovedDivide divide = { 24, 1, 3, times, lats };
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  divide.n = 0; /* back to computed */
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  {
    g_autoptr (GPtrArray) none = tf_ledger_divides (f->ledger, "default", NULL);
    g_assert_cmpuint (none->len, ==, 0);
  }
  g_auto (TfUndone) undone = { 0 };
  g_assert_true (tf_ledger_undo (f->ledger, north, &undone, NULL));
  g_assert_cmpstr (undone.what, ==, "divide");
  {
    g_autoptr (GPtrArray) again = tf_ledger_divides (f->ledger, "default", NULL);
    g_assert_cmpuint (only (again)->n, ==, 3);
  }
  g_assert_true (tf_ledger_undo (f->ledger, north, NULL, NULL));
  {
    g_autoptr (GPtrArray) none = tf_ledger_divides (f->ledger, "default", NULL);
    g_assert_cmpuint (none->len, ==, 0);
  }
  g_assert_true (tf_ledger_redo (f->ledger, north, NULL, NULL));
  g_autoptr (GPtrArray) again = tf_ledger_divides (f->ledger, "default", NULL);
  g_assert_cmpuint (only (again)->n, ==, 3);
  fixture_check (f->ledger, "");
}

/* What was once drawn with polarity in sight is told until the divide is computed again. */
static void
test_shown (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfMovedDivide divide = { 25, -1, 2, times, lats, TRUE };
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  divide.shown = FALSE;
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  {
    g_autoptr (GPtrArray) divides = tf_ledger_divides (f->ledger, "default", NULL);
    g_assert_true (only (divides)->shown);
  }
  divide.n = 0;
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  divide.n = 2;
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, north, NULL));
  g_autoptr (GPtrArray) divides = tf_ledger_divides (f->ledger, "default", NULL);
  g_assert_false (only (divides)->shown);
  g_autofree char *body = fixture_sql_text (
      f->path, "SELECT count (*) FROM act WHERE kind = 'divide' AND CAST (body AS TEXT) LIKE "
               "'%\"polarity_shown\":true%'");
  g_assert_cmpstr (body, ==, "2");
  fixture_check (f->ledger, "");
}

static void
test_refused (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL);
  TfTime back[] = { { 2.9e8 }, { 2.3e8 } };
  double high[] = { 10, 95 };
  const TfMovedDivide bad[] = { { 24, 1, 2, back, lats }, { 24, 1, 2, times, high }, { 0, 1, 2, times, lats } };
  for (guint k = 0; k < G_N_ELEMENTS (bad); k++)
    {
      g_autoptr (GError) error = NULL;
      g_assert_false (tf_ledger_set_divide (f->ledger, "default", &bad[k], north, &error));
      g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
    }
  fixture_check (f->ledger, "");
}

void
add_divides_tests (void)
{
  FIXTURE_TEST ("/ledger/divides/a-moved-divide-comes-back-as-it-was-drawn", test_there_and_back);
  FIXTURE_TEST ("/ledger/divides/moving-and-setting-back-are-undone", test_undone);
  FIXTURE_TEST ("/ledger/divides/polarity-once-in-sight-is-told-until-set-back", test_shown);
  FIXTURE_TEST ("/ledger/divides/what-is-no-line-is-refused", test_refused);
}
