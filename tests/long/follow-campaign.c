/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* follow-campaign [--seeds N] [--frames] : passages of 60 invented regions over 12 days against what was put there. By default outlines are
 * made; with --frames every outline is a hint found on an invented magnetogram. One line a sky: cadence, links right, links of two regions,
 * passages of two regions. Says nothing about good or bad. */

#include <math.h>
#include <stdio.h>

#include "made-sky.h"
#include "tf-hint.h"
#include "tf-rotation.h"
#include "tf-simulate.h"

#define DAY_S 86400.0
#define EPOCH "2013-10-06T00:00:00Z"

static const double cadences[] = { 1.6, 6.0, 12.0, 24.0 };

typedef struct
{
  guint pairs, right, wrong, mixed;
} Sum;

static void
score (const MadeSky *sky, double cadence, guint32 seed, Sum *sum)
{
  TfFollowParams params;
  tf_follow_params_init (&params);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  MadeScore s = made_sky_score (sky, links, found, params.gap_days * DAY_S);
  printf ("seed %u, every %.1f h: %u sightings, %u of %u links right (%.2f %%), %u of two regions, "
          "%u passages of two regions\n",
          seed, cadence, sky->sightings->len, s.right, s.pairs, 100.0 * s.right / MAX (s.pairs, 1),
          s.wrong, s.mixed);
  fflush (stdout);
  sum->pairs += s.pairs;
  sum->right += s.right;
  sum->wrong += s.wrong;
  sum->mixed += s.mixed;
}

/* -- hints on invented frames ---------------------------------------------------------------- */
typedef struct
{
  double lon_deg, lat_deg;
} Place;

/* 30 pairs of bipoles 8 deg apart, far from the others. */
static TfSun *
make_sun (guint32 seed, Place *places, guint n)
{
  TfSun *sun = tf_sun_new (tf_time_read (EPOCH), seed);
  g_autoptr (GRand) lot = g_rand_new_with_seed (seed);
  for (guint k = 0; k < n; k++)
    {
      double side = k % 4 < 2 ? 1.0 : -1.0;
      places[k].lat_deg = side * g_rand_double_range (lot, 8.0, 28.0);
      places[k].lon_deg = 360.0 * 2.0 * (k / 4) / (n / 2.0);
      if (k % 2 == 1)
        {
          places[k].lat_deg = places[k - 1].lat_deg + g_rand_double_range (lot, -4.0, 4.0);
          double dlat = places[k].lat_deg - places[k - 1].lat_deg;
          places[k].lon_deg = places[k - 1].lon_deg
                              + sqrt (64.0 - dlat * dlat) / cos (places[k].lat_deg * G_PI / 180.0);
        }
      TfBipole bipole = { .lat_deg = places[k].lat_deg,
                          .carrington_lon_deg = tf_wrap_360 (places[k].lon_deg),
                          .separation_deg = g_rand_double_range (lot, 2.5, 3.5),
                          .axis_tilt_deg = g_rand_double_range (lot, -10.0, 20.0),
                          .leading_polarity = side > 0 ? -1 : 1,
                          .flux_mx = g_rand_double_range (lot, 2e21, 8e21),
                          .lead_radius_deg = 0.7,
                          .follow_radius_deg = 1.0 };
      if (k % 3 == 0)
        {
          bipole.born_s = g_rand_double_range (lot, 0.0, 8.0) * DAY_S;
          bipole.grow_s = 1.5 * DAY_S;
        }
      g_autofree char *name = g_strdup_printf ("r%u", k);
      tf_sun_add_bipole (sun, name, "bipole", &bipole);
    }
  return sun;
}

/* The region whose middle is nearest to the middle of the hint's outline. */
static guint
nearest (const Place *places, guint n, double lon, double lat, double seconds)
{
  guint best = 0;
  double least = INFINITY;
  for (guint k = 0; k < n; k++)
    {
      double away = tf_sphere_distance (places[k].lon_deg
                                            + tf_rotation_carry (0, places[k].lat_deg, seconds),
                                        places[k].lat_deg, lon, lat);
      if (away < least)
        {
          least = away;
          best = k;
        }
    }
  return best;
}

static void
add_hints (MadeSky *sky, const TfSun *sun, const Place *places, guint n, double days, guint32 seed)
{
  TfShot shot;
  TfHintParams rule;
  TfMeasureParams method;
  tf_shot_init (&shot);
  tf_hint_params_init (&rule);
  tf_measure_params_init (&method);
  method.outline_term = FALSE;
  shot.size = 512;
  shot.noise_gauss = 8.0;
  TfTime time = tf_time_add (tf_time_read (EPOCH), days * DAY_S);
  g_autoptr (TfFrame) frame = tf_sun_shoot (sun, time, &shot, seed, NULL, NULL);
  const TfObserver *o = &tf_frame_get_geometry (frame)->observer;
  TfLookout look = { time, 0.0, o->carrington_lon_deg, o->b0_deg, TRUE };
  g_array_append_val (sky->lookouts, look);
  g_autoptr (GPtrArray) hints = tf_hints_find (frame, &rule, &method, NULL, NULL);
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      double lon, lat, radius;
      tf_outline_get_cap (hint->outline, &lon, &lat, &radius);
      guint truth = nearest (places, n, lon, lat, days * DAY_S);
      g_autofree char *id = g_strdup_printf ("%08.3f", days);
      made_sky_add (sky, truth, time, id, lon, lat, radius, 0.0,
                    tf_wrap_180 (lon - o->carrington_lon_deg));
      TfSighting *s = &g_array_index (sky->sightings, TfSighting, sky->sightings->len - 1);
      s->outline = tf_outline_ref (hint->outline);
      g_ptr_array_add (sky->outlines, (gpointer)s->outline);
    }
}

static MadeSky *
sky_of_frames (double cadence, guint32 seed)
{
  Place places[60];
  TfSun *sun = make_sun (seed, places, G_N_ELEMENTS (places));
  MadeSky *sky = made_sky_empty ();
  g_autoptr (GRand) lot = g_rand_new_with_seed (seed + 1000);
  for (int day = 0; day < 12; day++)
    {
      gboolean missing = g_rand_double (lot) < 0.2;
      for (double hour = fmod (cadence - fmod (24.0 * day, cadence), cadence);
           hour < 24.0 && !missing; hour += cadence)
        add_hints (sky, sun, places, G_N_ELEMENTS (places), day + hour / 24.0, seed);
    }
  tf_sun_free (sun);
  return sky;
}

int
main (int argc, char **argv)
{
  int seeds = 10;
  gboolean frames = FALSE;
  const GOptionEntry entries[] = {
    { "seeds", 0, 0, G_OPTION_ARG_INT, &seeds, "skies a cadence", "N" },
    { "frames", 0, 0, G_OPTION_ARG_NONE, &frames, "hints of invented magnetograms", NULL },
    { NULL },
  };
  g_autoptr (GError) error = NULL;
  g_autoptr (GOptionContext) context = g_option_context_new (NULL);
  g_option_context_add_main_entries (context, entries, NULL);
  if (!g_option_context_parse (context, &argc, &argv, &error))
    {
      fprintf (stderr, "%s\n", error->message);
      return 2;
    }
  Sum sum = { 0 };
  for (guint c = G_N_ELEMENTS (cadences); c-- > 0;)
    for (int seed = 1; seed <= seeds; seed++)
      {
        MadeParams made;
        made_params_init (&made);
        made.cadence_hours = cadences[c];
        made.seed = (guint32)seed;
        made.missing_days = 0.2;
        g_autoptr (MadeSky) sky
            = frames ? sky_of_frames (cadences[c], (guint32)seed) : made_sky_new (&made);
        score (sky, cadences[c], (guint32)seed, &sum);
      }
  printf ("in all: %u of %u links right (%.2f %%), %u of two regions, %u passages of two regions\n",
          sum.right, sum.pairs, 100.0 * sum.right / MAX (sum.pairs, 1), sum.wrong, sum.mixed);
  return 0;
}
