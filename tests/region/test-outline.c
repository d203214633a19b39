/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The claimed outline term against outlines as people draw them, on real frames.
 *
 * How a person's outline is made here: the region's hint is what all agree on. A person clicks
 * 12 to 22 points around it, evenly in arc, joined by straight lines. Each person leaves a
 * margin of their own (normal, mean 0, sigma 0.35 deg or 5 % of the radius, whichever is
 * more), moves off the middle (normal, half as much each way), and misses with each click
 * (normal, as much as the margin; one click's miss is shared half with its neighbours, as a
 * hand that is off stays off for a while). Nothing of the term's own sixteen deformations is
 * used. The spread is 1.4826 MAD over 60 people; the term must agree with it within a factor
 * of 1.5, taken as the median over the bipolar regions of the real frames, for the tilt, the
 * separation and the fluxes.
 */

#include <math.h>
#include <stdlib.h>

#include "region-builder.h"
#include "tf-constants.h"
#include "tf-hint.h"

enum
{
  PEOPLE = 60,
  QUANTITIES = 4,
  MOST_REGIONS = 32
};

static const char *const names[QUANTITIES]
    = { "tilt", "separation", "positive flux", "negative flux" };
static const char *const frames[]
    = { "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits",
        "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", "sdo-hmi_2011-02-14_20-34-12.fits" };

static double
normal (GRand *rand)
{
  double u = 1.0 - g_rand_double (rand), v = g_rand_double (rand);
  return sqrt (-2.0 * log (u)) * cos (2.0 * TF_PI * v);
}

/* Points at even steps along the ring. */
static void
click_ring (const TfVertex *ring, guint n, TfVertex *clicks, guint n_clicks, double start)
{
  double whole = 0.0, at = 0.0;
  for (guint k = 0; k < n; k++)
    whole += tf_sphere_distance (ring[k].lon_deg, ring[k].lat_deg, ring[(k + 1) % n].lon_deg,
                                 ring[(k + 1) % n].lat_deg);
  guint k = 0;
  double here
      = tf_sphere_distance (ring[0].lon_deg, ring[0].lat_deg, ring[1].lon_deg, ring[1].lat_deg);
  for (guint c = 0; c < n_clicks; c++)
    {
      double want = whole * (c + start) / n_clicks;
      while (at + here < want && k + 1 < n)
        {
          at += here;
          k++;
          const TfVertex *a = &ring[k], *b = &ring[(k + 1) % n];
          here = tf_sphere_distance (a->lon_deg, a->lat_deg, b->lon_deg, b->lat_deg);
        }
      const TfVertex *a = &ring[k], *b = &ring[(k + 1) % n];
      double t = here > 0.0 ? CLAMP ((want - at) / here, 0.0, 1.0) : 0.0;
      clicks[c].lon_deg = a->lon_deg + t * tf_wrap_180 (b->lon_deg - a->lon_deg);
      clicks[c].lat_deg = a->lat_deg + t * (b->lat_deg - a->lat_deg);
    }
}

static TfOutline *
person (const TfOutline *agreed, GRand *rand)
{
  TfVertex clicks[22];
  double miss[22], lon, lat, radius;
  guint n, n_clicks = (guint)g_rand_int_range (rand, 12, 23);
  const TfVertex *ring = tf_outline_get_ring (agreed, 0, FALSE, &n);
  tf_outline_get_cap (agreed, &lon, &lat, &radius);
  double size = fmax (0.35, 0.05 * radius);
  double margin = size * normal (rand), west = 0.5 * size * normal (rand),
         north = 0.5 * size * normal (rand);
  click_ring (ring, n, clicks, n_clicks, g_rand_double (rand));
  for (guint k = 0; k < n_clicks; k++)
    miss[k] = size * normal (rand);
  for (guint k = 0; k < n_clicks; k++)
    {
      double shared = 0.5 * (miss[(k + n_clicks - 1) % n_clicks] + miss[(k + 1) % n_clicks]);
      double out = margin + (miss[k] + shared) / sqrt (1.5);
      double c = cos (lat * TF_DEG), dx = tf_wrap_180 (clicks[k].lon_deg - lon) * c,
             dy = clicks[k].lat_deg - lat;
      double r = hypot (dx, dy), scale = fmax (0.1, (r + out) / r);
      clicks[k].lon_deg = lon + (west + dx * scale) / c;
      clicks[k].lat_deg = lat + north + dy * scale;
    }
  return tf_outline_new (tf_outline_get_time (agreed), clicks, n_clicks, NULL);
}

static int
compare (const void *a, const void *b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

static double
median (double *v, guint n)
{
  qsort (v, n, sizeof *v, compare);
  return n % 2 ? v[n / 2] : 0.5 * (v[n / 2 - 1] + v[n / 2]);
}

static double
mad (double *v, guint n)
{
  double middle = median (v, n);
  for (guint k = 0; k < n; k++)
    v[k] = fabs (v[k] - middle);
  return 1.4826 * median (v, n);
}

static void
take (const TfMeasure *m, const TfMeasure *of, double v[QUANTITIES])
{
  v[0] = remainder (m->axis_bearing_deg - of->axis_bearing_deg, 180.0);
  v[1] = m->separation_deg;
  v[2] = m->positive.flux_mx;
  v[3] = m->negative.flux_mx;
}

/* What the outline term is: sigma without noise and floor. */
static void
terms_of (const TfFrame *frame, const TfOutline *outline, TfMeasureParams params,
          double v[QUANTITIES])
{
  g_auto (TfMeasure) with = { 0 };
  g_auto (TfMeasure) without = { 0 };
  params.outline_term = TRUE;
  tf_measure_region (&with, frame, outline, &params, NULL);
  params.outline_term = FALSE;
  tf_measure_region (&without, frame, outline, &params, NULL);
  v[0] = with.tilt_terms.outline;
  v[1] = sqrt (pow (with.separation_sigma_deg, 2) - pow (without.separation_sigma_deg, 2));
  v[2] = sqrt (pow (with.positive.flux_sigma_mx, 2) - pow (without.positive.flux_sigma_mx, 2));
  v[3] = sqrt (pow (with.negative.flux_sigma_mx, 2) - pow (without.negative.flux_sigma_mx, 2));
}

static void
compare_region (const TfFrame *frame, const TfHint *hint, const TfMeasureParams *params,
                GRand *rand, double ratio[QUANTITIES])
{
  double values[QUANTITIES][PEOPLE], v[QUANTITIES], terms[QUANTITIES];
  for (guint k = 0; k < PEOPLE; k++)
    {
      g_autoptr (TfOutline) outline = person (hint->outline, rand);
      g_auto (TfMeasure) m = { 0 };
      g_assert_nonnull (outline);
      g_assert_true (tf_measure_region (&m, frame, outline, params, NULL));
      take (&m, &hint->measure, v);
      for (guint q = 0; q < QUANTITIES; q++)
        values[q][k] = v[q];
    }
  terms_of (frame, hint->outline, *params, terms);
  double spread[QUANTITIES];
  for (guint q = 0; q < QUANTITIES; q++)
    {
      spread[q] = mad (values[q], PEOPLE);
      ratio[q] = terms[q] / spread[q];
    }
  g_test_message ("N%+.0f W%+.0f: tilt term %.2f, people %.2f deg; separation %.2f, %.2f deg; "
                  "fluxes %.1e, %.1e and %.1e, %.1e Mx",
                  hint->measure.lat_deg, hint->measure.cmd_deg, terms[0], spread[0], terms[1],
                  spread[1], terms[2], spread[2], terms[3], spread[3]);
}

static guint
compare_frame (const char *name, double ratios[QUANTITIES][MOST_REGIONS], guint n, GRand *rand)
{
  const char *path = builder_real (name);
  g_autoptr (GError) error = NULL;
  TfHintParams hint_params;
  TfMeasureParams params;
  tf_hint_params_init (&hint_params);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  g_autoptr (TfFrame) frame = tf_frame_open (path, &(TfFrameSpec){ 0 }, NULL, &error);
  g_assert_no_error (error);
  g_autoptr (GPtrArray) hints = tf_hints_find (frame, &hint_params, &params, NULL, &error);
  g_assert_no_error (error);
  for (guint k = 0; k < hints->len && n < MOST_REGIONS; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      double ratio[QUANTITIES];
      if (hint->unipolar || hint->measure.mu < 0.5 || hint->measure.flux_unsigned_mx < 1e21)
        continue;
      compare_region (frame, hint, &params, rand, ratio);
      for (guint q = 0; q < QUANTITIES; q++)
        ratios[q][n] = ratio[q];
      n++;
    }
  return n;
}

static void
test_people (void)
{
  double ratios[QUANTITIES][MOST_REGIONS];
  guint n = 0;
  g_autoptr (GRand) rand = g_rand_new_with_seed (20110401);
  for (guint f = 0; f < G_N_ELEMENTS (frames); f++)
    {
      if (builder_real (frames[f]) == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      n = compare_frame (frames[f], ratios, n, rand);
    }
  g_assert_cmpuint (n, >=, 8);
  for (guint q = 0; q < QUANTITIES; q++)
    {
      double middle = median (ratios[q], n);
      g_test_message ("%s: term over people's spread, median of %u regions: %.2f", names[q], n,
                      middle);
      tf_check_between (names[q], middle, 1.0 / 1.5, 1.5);
    }
}

void
add_outline_tests (void)
{
  g_test_add_func ("/region/outline/the-claimed-term-is-the-spread-of-people's-outlines",
                   test_people);
}
