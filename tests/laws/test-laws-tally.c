/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <math.h>

#include "tf-check.h"
#include "tf-tally.h"

/* Regions from the fifth year of cycle 22 to the fifth of cycle 25, many near the minima; some that
 * cannot be said. */
static TfSample *
make_sample (guint n, GRand *random)
{
  TfSample *sample = tf_sample_new ();
  for (guint k = 0; k < n; k++)
    {
      TfSampleRow row = test_laws_row (g_rand_double_range (random, -36, 36),
                                       g_rand_boolean (random) ? 1 : -1);
      row.time = test_laws_month (23 + g_rand_int_range (random, 0, 3),
                                  g_rand_double_range (random, -50, 70));
      row.region = row.passage = k + 1;
      row.axis_tilt_deg = g_rand_double_range (random, -80, 80);
      row.leading_sure = g_rand_double (random) > 0.05;
      row.compactness = g_rand_double_range (random, 0.3, 3);
      if (g_rand_double (random) < 0.02)
        row.axis_tilt_deg = NAN;
      if (g_rand_double (random) < 0.02)
        row.leading_polarity = 0;
      tf_sample_add (sample, &row);
    }
  return sample;
}

static void
compare (const TfTally *tally, const TfSample *sample, const TfDivides *divides,
         const TfVerdictParams *verdict, const TfHaleParams *hale, const TfJoyParams *joy)
{
  guint n = tf_sample_get_n (sample);
  g_autofree TfVerdict *verdicts = g_new (TfVerdict, n + 1);
  for (guint k = 0; k < n; k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, verdict);
  g_autoptr (GArray) table = tf_hale_table (sample, verdicts, hale);
  g_autoptr (GArray) kept = tf_tally_hale (tally, hale->level);
  g_assert_cmpuint (kept->len, ==, table->len);
  for (guint k = 0; k < table->len; k++)
    {
      const TfHaleRow *a = &g_array_index (kept, TfHaleRow, k),
                      *b = &g_array_index (table, TfHaleRow, k);
      g_assert_cmpint (a->cycle, ==, b->cycle);
      g_assert_cmpint (a->hemisphere, ==, b->hemisphere);
      g_assert_cmpuint (a->breaks, ==, b->breaks);
      g_assert_cmpuint (a->keeps, ==, b->keeps);
      g_assert_cmpuint (a->cannot_say, ==, b->cannot_say);
      if (b->n > 0)
        tf_check_near ("expected", a->expected_false, b->expected_false, 1e-6);
    }
  TfJoyFit slow = tf_joy_fit (sample, verdicts, 0, 0, joy), quick = tf_tally_joy (tally);
  g_assert_cmpuint (quick.n, ==, slow.n);
  g_assert_cmpuint (quick.no_polarity, ==, slow.no_polarity);
  tf_check_near ("slope", quick.slope, slow.slope, 1e-12);
}

/* After any number of moves the tally says what judging everything anew says. */
static void
test_moves (void)
{
  GRand *random = g_rand_new_with_seed (11);
  g_autoptr (TfSample) sample = make_sample (6000, random);
  TfVerdictParams verdict = test_laws_verdict_params ();
  TfHaleParams hale = { 0 };
  TfJoyParams joy = { 0 };
  tf_options_reset (tf_hale_options, &hale);
  tf_options_reset (tf_joy_options, &joy);
  hale.draws = joy.draws = 0;
  for (int form = TF_JOY_LINEAR; form <= TF_JOY_SINE_OF_TILT; form++)
    {
      joy.form = form;
      g_assert_true (tf_tally_offers (&joy) == (form != TF_JOY_LINEAR_FREE));
      if (!tf_tally_offers (&joy))
        continue;
      TfDivides *divides = test_laws_divides ();
      g_autoptr (TfTally) tally = tf_tally_new (sample, NULL, divides, &verdict, &joy);
      compare (tally, sample, divides, &verdict, &hale, &joy);
      guint changed = 0;
      for (int move = 0; move < 12; move++)
        {
          int cycle = 23 + g_rand_int_range (random, 0, 3), side = g_rand_boolean (random) ? 1 : -1;
          TfTime times[] = { test_laws_month (cycle, -24), test_laws_month (cycle, 18) };
          double lats[] = { g_rand_double_range (random, 5, 40), g_rand_double_range (random, 5, 40) };
          TfDivides *next = tf_divides_with (divides, cycle, side, times, lats, move % 4 == 3 ? 0 : 2);
          tf_divides_unref (divides);
          divides = next;
          changed += tf_tally_move (tally, divides, cycle, side);
          compare (tally, sample, divides, &verdict, &hale, &joy);
        }
      g_assert_cmpuint (changed, >, 100);
      tf_divides_unref (divides);
    }
  g_rand_free (random);
}

/* A pick whose passage changes has no verdict wherever the divide stands. */
static void
test_changing (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  for (guint k = 0; k < 3; k++)
    {
      TfSampleRow row = test_laws_row (20, 1);
      row.time = test_laws_month (24, 0);
      row.region = row.passage = k + 1;
      tf_sample_add (sample, &row);
    }
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams params = test_laws_verdict_params ();
  TfVerdict verdicts[3];
  for (guint k = 0; k < 3; k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, &params);
  verdicts[1].kind = TF_VERDICT_CANNOT_SAY;
  verdicts[1].reason = "hale-changes";
  TfJoyParams joy = { 0 };
  tf_options_reset (tf_joy_options, &joy);
  g_autoptr (TfTally) tally = tf_tally_new (sample, verdicts, divides, &params, &joy);
  for (int lat = 5; lat <= 35; lat += 30)
    {
      TfTime times[] = { test_laws_month (24, -24), test_laws_month (24, 18) };
      const double lats[] = { lat, lat };
      g_autoptr (TfDivides) moved = tf_divides_with (divides, 24, 1, times, lats, 2);
      tf_tally_move (tally, moved, 24, 1);
      g_autoptr (GArray) table = tf_tally_hale (tally, 0.95);
      const TfHaleRow *all = &g_array_index (table, TfHaleRow, table->len - 1);
      g_assert_cmpuint (all->n, ==, 2);
      g_assert_cmpuint (all->breaks, ==, lat < 20 ? 2 : 0);
      g_assert_cmpuint (all->cannot_say, ==, 1);
    }
}

static void
test_nothing (void)
{
  g_autoptr (TfSample) sample = tf_sample_new ();
  g_autoptr (TfDivides) divides = test_laws_divides ();
  TfVerdictParams verdict = test_laws_verdict_params ();
  TfJoyParams joy = { 0 };
  tf_options_reset (tf_joy_options, &joy);
  g_autoptr (TfTally) tally = tf_tally_new (sample, NULL, divides, &verdict, &joy);
  g_assert_cmpuint (tf_tally_move (tally, divides, 24, 1), ==, 0);
  g_autoptr (GArray) table = tf_tally_hale (tally, 0.95);
  g_assert_cmpuint (table->len, ==, 1);
  tf_check_nan ("no share", g_array_index (table, TfHaleRow, 0).share);
  tf_check_nan ("no slope", tf_tally_joy (tally).slope);
}

void
test_laws_add_tally (void)
{
  g_test_add_func ("/laws/tally/after-any-moves-as-if-judged-anew", test_moves);
  g_test_add_func ("/laws/tally/what-changes-in-its-passage-has-no-verdict", test_changing);
  g_test_add_func ("/laws/tally/nothing-to-count", test_nothing);
}
