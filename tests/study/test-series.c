/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Series of one passage: what is derived, from which window, what has no part in it; the error of a
 * mean of correlated marks. */

#include "test-study.h"

#include <math.h>

#include "tf-check.h"
#include "tf-series.h"

#define FLOOR 50.0
#define HOUR  3600.0

typedef struct
{
  double hours, flux_mx, tilt_deg, cmd_deg;
} Made;

static TfRow *
row_new (gint64 frame, const Made *made)
{
  TfRow *row = g_new0 (TfRow, 1);
  row->measure = test_study_measure (15.0, -1);
  TfMeasure *m = &row->measure;
  m->time = tf_time_add (tf_time_read ("2013-06-01T00:00:00Z"), made->hours * HOUR);
  m->floor_kind = TF_FLOOR_EVEN;
  m->floor_gauss = FLOOR;
  m->flux_unsigned_mx = made->flux_mx;
  m->positive.flux_mx = m->negative.flux_mx = made->flux_mx / 2;
  m->positive.flux_sigma_mx = 3e19, m->negative.flux_sigma_mx = 4e19;
  m->axis_tilt_deg = made->tilt_deg;
  m->cmd_deg = made->cmd_deg;
  m->mu = cos (made->cmd_deg * G_PI / 180.0);
  row->frame = frame;
  row->mark = frame;
  row->origin = "drawn new";
  row->region = g_strdup ("T2013-0001");
  row->passage = g_strdup ("p");
  return row;
}

static TfSeries *
series_new (const Made *made, guint n)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  TfSeriesParams params;
  tf_series_params_init (&params);
  GPtrArray *rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  for (guint k = 0; k < n; k++)
    g_ptr_array_add (rows, row_new (k + 1, &made[k]));
  return tf_series_new (rows, study, FLOOR, &params);
}

/* From CMD -45: a rise by 1e20 Mx/h from 0 to 48 h, level to 72 h, a decay by 2.5e19 Mx/h. */
static void
make_life (Made *made, guint n, double first_cmd)
{
  for (guint k = 0; k < n; k++)
    {
      double h = 6.0 * k;
      made[k].hours = h;
      made[k].flux_mx = h <= 48 ? 1e20 * h : h <= 72 ? 4.8e21 : 4.8e21 - 2.5e19 * (h - 72);
      made[k].tilt_deg = 20 - h / 12;
      made[k].cmd_deg = first_cmd + 13.2 * h / 24;
    }
}

static void
test_life (void)
{
  Made made[28];
  make_life (made, 28, -45);
  made[10].flux_mx *= 1.01; /* at 60 h */
  g_autoptr (TfSeries) series = series_new (made, 28);
  const TfDerived *d = &series->derived;
  g_assert_cmpuint (series->points->len, ==, 28);
  g_assert_cmpuint (series->n_other_floor, ==, 0);
  tf_check_near ("greatest flux", d->greatest_flux.value, 4.8e21 * 1.01, 1e15);
  tf_check_near ("its sigma", d->greatest_flux.sigma, 5e19, 1e15);
  g_assert_true (d->bracketed);
  tf_check_near ("emergence", d->emergence.value, 1e20, 1e16);
  tf_check_near ("begins at 10 % and less",
                 d->emergence.from.s - tf_time_read ("2013-06-01T00:00:00Z").s, 0.0, 1.0);
  tf_check_near ("ends at 90 %", (d->emergence.to.s - d->emergence.from.s) / HOUR, 48.0, 1e-6);
  g_assert_cmpuint (d->emergence.n, ==, 9);
  tf_check_between ("decay", d->decay.value, -2.6e19, -2.3e19);
  g_assert_null (d->decay.reason);
  tf_check_near ("tilt at greatest flux", d->tilt_at_greatest.value, 15.0, 1e-9);
  tf_check_near ("CMD nearest the meridian", d->meridian_cmd_deg, -45 + 13.2 * 84 / 24, 1e-9);
  tf_check_near ("tilt there", d->tilt_at_meridian.value, 20 - 7.0, 1e-9);
  g_assert_cmpuint (d->tilt_mean.n, ==, 28);
  g_assert_cmpuint (d->of, ==, 28);
  g_assert_cmpuint (d->held, ==, 28);
}

/* The limb is flagged and stays in the series; what is derived does without it. */
static void
test_limb (void)
{
  Made made[28];
  make_life (made, 28, -66);
  made[1].flux_mx = 9e21; /* at CMD -63: a bright limb is no greatest flux */
  g_autoptr (TfSeries) series = series_new (made, 28);
  g_assert_cmpuint (series->points->len, ==, 28);
  guint limb = 0;
  for (guint k = 0; k < 28; k++)
    limb += (g_array_index (series->points, TfSeriesPoint, k).flags & TF_POINT_LIMB) != 0;
  g_assert_cmpuint (limb, ==, 2);
  tf_check_near ("greatest flux", series->derived.greatest_flux.value, 4.8e21, 1e15);
  tf_check_near ("first mark of the rise is away from the limb",
                 (series->derived.emergence.from.s - tf_time_read ("2013-06-01T00:00:00Z").s)
                     / HOUR,
                 12.0, 1e-6);
}

static void
test_not_bracketed (void)
{
  Made made[8];
  make_life (made, 8, -10);
  g_autoptr (TfSeries) rising = series_new (made, 8);
  g_assert_false (rising->derived.bracketed);
  g_assert_cmpstr (rising->derived.decay.reason, ==, "series-no-decay");
  tf_check_near ("emergence", rising->derived.emergence.value, 1e20, 1e16);
  for (guint k = 0; k < 8; k++)
    made[k].flux_mx = 3e21 * (1 + 0.01 * (k % 3));
  g_autoptr (TfSeries) level = series_new (made, 8);
  g_assert_cmpstr (level->derived.emergence.reason, ==, "series-no-rise");
  g_assert_true (isnan (level->derived.emergence.value));
  g_autoptr (TfSeries) one = series_new (made, 1);
  g_assert_cmpstr (one->derived.emergence.reason, ==, "series-no-rise");
  tf_check_nan ("error of a mean of one mark", one->derived.tilt_mean.sigma);
  g_autoptr (TfSeries) none = series_new (made, 0);
  g_assert_cmpstr (none->derived.greatest_flux.reason, ==, "series-few-marks");
  g_assert_cmpstr (none->derived.tilt_mean.reason, ==, "series-no-tilt");
}

/* Two outlines of one frame: a person's stands for it; another floor has no part in what is derived. */
static void
test_who_stands (void)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  TfSeriesParams params;
  tf_series_params_init (&params);
  GPtrArray *rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  Made made[3] = { { 0, 1e21, 5, 0 }, { 0, 2e21, 6, 0 }, { 6, 9e21, 7, 3 } };
  for (guint k = 0; k < 3; k++)
    g_ptr_array_add (rows, row_new (k == 2 ? 2 : 1, &made[k]));
  ((TfRow *)g_ptr_array_index (rows, 0))->is_hint = TRUE;
  ((TfRow *)g_ptr_array_index (rows, 2))->measure.floor_gauss = 80;
  g_autoptr (TfSeries) series = tf_series_new (rows, study, FLOOR, &params);
  g_assert_cmpuint (g_array_index (series->points, TfSeriesPoint, 0).flags, ==,
                    TF_POINT_HINT | TF_POINT_SECOND);
  g_assert_cmpuint (g_array_index (series->points, TfSeriesPoint, 1).flags, ==, 0);
  g_assert_cmpuint (g_array_index (series->points, TfSeriesPoint, 2).flags, ==,
                    TF_POINT_OTHER_FLOOR);
  g_assert_cmpuint (series->n_other_floor, ==, 1);
  tf_check_near ("greatest flux", series->derived.greatest_flux.value, 2e21, 1e12);
}

/* Gaussian deviates in pairs (Box & Muller 1958). */
static double
normal (GRand *lot)
{
  return sqrt (-2.0 * log (1.0 - g_rand_double (lot))) * cos (2.0 * G_PI * g_rand_double (lot));
}

/* Invented first-order autoregressions about a known mean, at uneven spacings: the error covers the
 * mean in about 68 of 100 series (+-1 sigma) and 95 (+-2), where scatter over the root of n would
 * cover it far less often. */
static void
test_coverage (void)
{
  static const double persistences[] = { 0.0, 0.5, 1.5 };
  enum
  {
    SERIES = 400,
    MARKS = 48
  };
  g_autoptr (GRand) lot = g_rand_new_with_seed (11);
  for (guint p = 0; p < G_N_ELEMENTS (persistences); p++)
    {
      guint one = 0, two = 0, naive = 0;
      for (int s = 0; s < SERIES; s++)
        {
          double tilts[MARKS], days[MARKS], sigma, scatter, worth, persistence, r = normal (lot);
          for (int k = 0; k < MARKS; k++)
            {
              double step = k == 0 ? 0.0 : g_rand_double_range (lot, 0.1, 0.3);
              double rho = persistences[p] > 0 ? exp (-step / persistences[p]) : 0.0;
              days[k] = (k == 0 ? 0.0 : days[k - 1]) + step;
              r = k == 0 ? r : rho * r + sqrt (1.0 - rho * rho) * normal (lot);
              tilts[k] = 6.0 + 4.0 * r;
            }
          double off = fabs (
              tf_series_mean (tilts, days, MARKS, &sigma, &scatter, &worth, &persistence) - 6.0);
          one += off <= sigma;
          two += off <= 2 * sigma;
          naive += off <= scatter / sqrt (MARKS);
        }
      g_test_message (
          "persistence %g d: within 1 sigma %.3f, 2 sigma %.3f; by scatter over root n %.3f",
          persistences[p], (double)one / SERIES, (double)two / SERIES, (double)naive / SERIES);
      tf_check_between ("share within one sigma", (double)one / SERIES, 0.58, 0.88);
      tf_check_between ("share within two sigma", (double)two / SERIES, 0.86, 1.0);
      if (persistences[p] > 1)
        tf_check_between ("share within scatter over root n", (double)naive / SERIES, 0.0, 0.45);
    }
}

/* Axes: tilts of 88 and -88 deg are 4 deg apart. */
static void
test_axial (void)
{
  double tilts[40], days[40], sigma, scatter, worth, persistence;
  for (int k = 0; k < 40; k++)
    {
      tilts[k] = k % 2 == 0 ? 88 : -88;
      days[k] = k;
    }
  double mean = tf_series_mean (tilts, days, 40, &sigma, &scatter, &worth, &persistence);
  tf_check_near ("mean of axes about 90 deg", fabs (mean), 90.0, 1e-9);
  tf_check_near ("their scatter", scatter, 2.0, 0.05);
  tf_check_between ("marks that alternate are worth nearly all of themselves", worth, 36, 40);
}

void
test_study_add_series (void)
{
  g_test_add_func ("/study/series/a-life-from-rise-to-decay", test_life);
  g_test_add_func ("/study/series/the-limb-is-flagged-and-has-no-say", test_limb);
  g_test_add_func ("/study/series/a-peak-is-not-bracketed", test_not_bracketed);
  g_test_add_func ("/study/series/who-stands-for-a-frame", test_who_stands);
  g_test_add_func ("/study/series/the-error-of-a-mean-covers-it", test_coverage);
  g_test_add_func ("/study/series/tilts-are-axes", test_axial);
}
