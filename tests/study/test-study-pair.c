/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-ledger-scales.h"
#include "tf-pair.h"
#include "tf-rotation.h"

/* Bipoles on the Sun at the epoch: latitude, Carrington longitude, half a separation, radius, G. */
static const double bipoles[][5]
    = { { 15, 100, 3, 2.0, 900 }, { -20, 120, 4, 2.5, -1200 }, { 10, 75, 2, 1.5, 600 },
        { -12, 85, 3, 2.0, 800 }, { 25, 125, 3, 2.5, -700 },   { -28, 95, 4, 3.0, 500 } };

/* The radial field at a place, seconds after the epoch, all turned by the rotation law. */
static double
field_at (double lon, double lat, double seconds)
{
  double sum = 0.0;
  for (guint k = 0; k < G_N_ELEMENTS (bipoles); k++)
    for (int side = -1; side <= 1; side += 2)
      {
        double centre
            = bipoles[k][1] + side * bipoles[k][2] + tf_rotation_carry (0, bipoles[k][0], seconds);
        double away = tf_sphere_distance (lon, lat, centre, bipoles[k][0]);
        sum += side * bipoles[k][4] * exp (-0.5 * away * away / (bipoles[k][3] * bipoles[k][3]));
      }
  return sum;
}

/* A frame of an instrument that reads 1/@factor of the field and @offset more, with noise. */
static TfFrame *
frame_of (const char *instrument, const char *time, guint size, double scale_arcsec, double factor,
          double offset, double noise, guint32 seed)
{
  double seconds = tf_time_read (time).s - tf_time_read ("2013-06-01T00:00:00Z").s;
  g_autofree char *cards = g_strdup_printf (
      "SIMPLE  = T\nBITPIX  = -32\nNAXIS   = 2\nNAXIS1  = %u\nNAXIS2  = %u\nCTYPE1  = 'HPLN-TAN'\n"
      "CTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = %g\nCRPIX2  = %g\n"
      "CRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = %g\nCDELT2  = %g\nCROTA2  = 0\nDATE-OBS= '%s'\n"
      "TELESCOP= '%s'\nINSTRUME= '%s'\nBUNIT   = 'Gauss'\nCONTENT = 'MAGNETOGRAM'\n"
      "CRLN_OBS= %g\nCRLT_OBS= 0\nDSUN_OBS= 1.496e11\n",
      size, size, 0.5 * (size + 1), 0.5 * (size + 1), scale_arcsec, scale_arcsec, time, instrument,
      instrument, 100.0 - 14.1844 * seconds / TF_DAY_S + 0.98565 * seconds / TF_DAY_S);
  g_autoptr (TfHeader) header = tf_header_read (cards, -1);
  TfFrameInfo *info = tf_frame_info_read (header, size, size);
  g_assert_cmpint (info->role, ==, TF_ROLE_FIELD);
  g_autofree float *pixels = g_new (float, size *size);
  g_autoptr (GRand) rand = g_rand_new_with_seed (seed);
  for (guint k = 0; k < size * size; k++)
    {
      TfPlace place;
      double normal = 0.0;
      for (int j = 0; j < 12; j++)
        normal += g_rand_double (rand) - 0.5;
      gboolean on = tf_geometry_pixel_to_sun (&info->geometry, k % size + 1, k / size + 1, &place);
      pixels[k]
          = on ? (float)(place.mu * field_at (place.carrington_lon_deg, place.lat_deg, seconds)
                             / factor
                         + offset * place.mu + noise * normal)
               : NAN;
    }
  return tf_frame_new (info, pixels, NULL);
}

/* 1.4 between instruments of other pixels, noise and two hours apart comes back within its interval
 * and within 3 %. */
static void
test_known_scale (void)
{
  TfPairParams params;
  tf_options_reset (tf_pair_options, &params);
  g_autoptr (TfFrame) a = frame_of ("DIM", "2013-06-01T02:00:00Z", 320, 6.5, 1.4, 1.5, 8.0, 1);
  g_autoptr (TfFrame) b = frame_of ("PLAIN", "2013-06-01T00:00:00Z", 256, 8.0, 1.0, 0.0, 5.0, 2);
  g_autoptr (TfPairScale) scale = tf_pair_frames (a, b, &params);
  g_assert_nonnull (scale);
  g_assert_cmpstr (scale->instrument, ==, "DIM");
  tf_check_near ("factor", scale->factor, 1.4, 0.04);
  tf_check_between ("in the interval", 1.4, scale->interval.low - 0.02,
                    scale->interval.high + 0.02);
  tf_check_between ("its width", scale->interval.high - scale->interval.low, 0.0, 0.2);
  tf_check_near ("offset", scale->offset_gauss, -1.5 * 1.4, 0.5);
  tf_check_near ("hours", scale->hours, 2.0, 1e-9);
  for (int k = 0; k < TF_PAIR_MU_BINS; k++)
    if (isfinite (scale->by_mu[k].interval.low))
      tf_check_between ("the same at every mu", 1.4, scale->by_mu[k].interval.low - 0.05,
                        scale->by_mu[k].interval.high + 0.05);
  g_autoptr (TfPairScale) back = tf_pair_frames (b, a, &params);
  tf_check_near ("the other way round it is the inverse", back->factor * scale->factor, 1.0, 0.01);
}

/* Unturned, two hours of rotation would spoil it: the law matters. */
static void
test_rotation_matters (void)
{
  TfPairParams params;
  tf_options_reset (tf_pair_options, &params);
  params.draws = 0;
  g_autoptr (TfFrame) a = frame_of ("A", "2013-06-01T12:00:00Z", 200, 10, 1.0, 0.0, 1.0, 1);
  g_autoptr (TfFrame) b = frame_of ("B", "2013-06-01T00:00:00Z", 200, 10, 1.0, 0.0, 1.0, 2);
  g_autoptr (TfPairScale) scale = tf_pair_frames (a, b, &params);
  tf_check_near ("half a day apart", scale->factor, 1.0, 0.03);
  tf_check_nan ("no draws, no interval", scale->interval.low);
}

static const TfWhatIf *
what_if (const TfFindings *findings, const char *name)
{
  for (guint k = 0; k < findings->what_if->len; k++)
    if (strcmp (g_array_index (findings->what_if, TfWhatIf, k).name, name) == 0)
      return &g_array_index (findings->what_if, TfWhatIf, k);
  return NULL;
}

/* Pooled without a scale is said; a kept scale is applied when told, and what-if shows it before. */
static void
test_study_with_scales (void)
{
  g_auto (TestLedger) t = { 0 };
  test_study_ledger_open (&t);
  gint64 one = test_study_frame (&t, "2013-06-01T00:00:00Z", "TEST-A", 20);
  gint64 two = test_study_frame (&t, "2013-06-01T01:00:00Z", "TEST-B", 20);
  test_study_mark (&t, one, 0, test_study_measure (15, -1));
  test_study_mark (&t, two, 0, test_study_measure (-15, 1));
  g_autoptr (TfStudy) study = tf_study_new_default ();
  study->hale.draws = study->joy.draws = study->drift.draws = 0;
  study->sieve.flux_min_mx = 0.9e22;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFindings) bare = tf_study_run (study, t.ledger, &error);
  g_assert_no_error (error);
  g_assert_nonnull (tf_notes_find (bare->cautions, "instruments-unscaled-pooled"));
  g_assert_cmpstr (what_if (bare, "instruments-scaled")->missing, ==, "no-scale");
  const TfKeptScale scale = { (char *)"TEST-B", (char *)"TEST-A", 0.5, 0.01, NULL, NULL };
  g_assert_true (tf_ledger_set_scale (t.ledger, &scale, t.person, &error));
  g_autoptr (TfFindings) kept = tf_study_run (study, t.ledger, &error);
  g_assert_cmpuint (tf_sample_get_n (kept->sample), ==, 2); /* never applied silently */
  g_assert_nonnull (tf_notes_find (kept->cautions, "instruments-unscaled-pooled"));
  g_assert_cmpuint (what_if (kept, "instruments-scaled")->n, ==, 1);
  study->sieve.with_scales = TRUE;
  g_autoptr (TfFindings) scaled = tf_study_run (study, t.ledger, &error);
  g_assert_cmpuint (tf_sample_get_n (scaled->sample), ==, 1);
  g_assert_null (tf_notes_find (scaled->cautions, "instruments-unscaled-pooled"));
  g_assert_nonnull (tf_notes_find (scaled->cautions, "instruments-scaled"));
  g_assert_cmpuint (what_if (scaled, "instruments-not-scaled")->n, ==, 2);
}

void
test_study_add_pair (void)
{
  g_test_add_func ("/study/pair/a-known-scale-comes-back", test_known_scale);
  g_test_add_func ("/study/pair/half-a-day-of-rotation-is-turned-back", test_rotation_matters);
  g_test_add_func ("/study/pair/scales-are-applied-when-told", test_study_with_scales);
}
