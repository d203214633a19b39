/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>
#include <gsl/gsl_randist.h>
#include <gsl/gsl_rng.h>
#include <math.h>

#include "tf-constants.h"
#include "tf-cycle.h"
#include "tf-joy.h"
#include "tf-sun-private.h"

/* A sun as active as asked, followed through some frames. Latitudes are those expected of the
 * cycle at that date, with a spread of 5 deg; about a minimum a third of the regions belong to
 * the other cycle. Tilts are Joy's with their scatter, leaders Hale's but for the share that is
 * to break it. Sizes and fluxes are invented.
 */

static const char *const style_names[]
    = { "standard", "turned", "old-pixels", "ground", "tai", NULL };

const TfOption tf_simulate_options[] = {
  { "size", TF_OPTION_INT, "px", 512, 32, 8192, NULL, N_ ("pixels a side"),
    offsetof (TfSimulateParams, size) },
  { "n-frames", TF_OPTION_INT, "", 4, 1, 10000, NULL, N_ ("how many frames"),
    offsetof (TfSimulateParams, n_frames) },
  { "start-year", TF_OPTION_NUMBER, "", 2013.75, 1976, 2040, NULL,
    N_ ("time of the first frame, as a decimal year"), offsetof (TfSimulateParams, start_year) },
  { "cadence-hours", TF_OPTION_NUMBER, "h", 24, 0.01, 1e5, NULL, N_ ("time from frame to frame"),
    offsetof (TfSimulateParams, cadence_hours) },
  { "n-regions", TF_OPTION_INT, "", 8, 0, 200, NULL,
    N_ ("regions on the Earth's side in the middle of the time"),
    offsetof (TfSimulateParams, n_regions) },
  { "anti-hale-share", TF_OPTION_NUMBER, "", 0.05, 0, 1, NULL,
    N_ ("share of regions that break Hale's law"), offsetof (TfSimulateParams, anti_hale_share) },
  { "noise-gauss", TF_OPTION_NUMBER, "G", 8, 0, 1000, NULL, N_ ("noise of a pixel, one sigma"),
    offsetof (TfSimulateParams, noise_gauss) },
  { "style", TF_OPTION_CHOICE, "", TF_STYLE_STANDARD, 0, TF_STYLE_TAI, style_names,
    N_ ("habit of the headers"), offsetof (TfSimulateParams, style) },
  { "seed", TF_OPTION_INT, "", 1, 0, G_MAXINT, NULL, N_ ("equal seeds give equal bytes"),
    offsetof (TfSimulateParams, seed) },
  { NULL },
};

gboolean
tf_simulate_make_folder (const char *folder, GError **error)
{
  if (g_mkdir_with_parents (folder, 0777) == 0)
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_WRITE,
               _ ("the folder %s cannot be made: %s. Choose one in a place that you may write to"),
               folder, g_strerror (errno));
  return FALSE;
}

static double
months_between (TfTime from, TfTime to)
{
  return (to.s - from.s) / (TF_DAY_S * 30.4375);
}

/* The cycle a new region belongs to, and how far that cycle is, months. */
static int
choose_cycle (gsl_rng *rng, TfTime time, double *months)
{
  int cycle = tf_cycle_by_date (time);
  double since = months_between (tf_cycle_minimum (cycle), time);
  double to_next = -months_between (time, tf_cycle_minimum (cycle + 1)); /* NaN when not listed */
  gboolean other = gsl_rng_uniform (rng) < 1.0 / 3.0;
  *months = since;
  if (other && since < 18.0 && tf_cycle_find (cycle - 1) != NULL)
    {
      *months = months_between (tf_cycle_minimum (cycle - 1), time);
      return cycle - 1;
    }
  if (other && to_next > -18.0)
    {
      *months = to_next;
      return cycle + 1;
    }
  return cycle;
}

static TfBipole
draw_region (gsl_rng *rng, TfTime time, double l0_deg, double anti_share, const char **what)
{
  double months, tilt, scatter;
  int cycle = choose_cycle (rng, time, &months), hemisphere = gsl_rng_uniform (rng) < 0.5 ? 1 : -1;
  double lat = CLAMP (tf_cycle_latitude (months) + gsl_ran_gaussian (rng, 5.0), 4.0, 45.0);
  double separation = 3.6 + 4.4 * gsl_rng_uniform (rng), radius = 0.14 * separation + 0.35;
  gboolean anti = gsl_rng_uniform (rng) < anti_share;
  tf_joy_expected (lat, separation, &tilt, &scatter);
  *what = anti ? "anti-hale" : "bipole";
  return (TfBipole){
    .lat_deg = hemisphere * lat,
    .carrington_lon_deg = tf_wrap_360 (l0_deg - 65.0 + 130.0 * gsl_rng_uniform (rng)),
    .separation_deg = separation,
    .axis_tilt_deg = CLAMP (tilt + gsl_ran_gaussian (rng, scatter), -70.0, 70.0),
    .leading_polarity = tf_hale_expected (cycle, hemisphere) * (anti ? -1 : 1),
    .flux_mx = 1.6e20 * pow (separation, 2.1) * exp (gsl_ran_gaussian (rng, 0.25)),
    .lead_radius_deg = radius,
    .follow_radius_deg = radius * (1.2 + 0.4 * gsl_rng_uniform (rng)),
    .fragments = 3 + (guint)gsl_rng_uniform_int (rng, 5),
  };
}

/* Far enough from those before that no two regions mix. */
static gboolean
is_free (const GArray *others, const TfBipole *b)
{
  for (guint k = 0; k < others->len; k++)
    {
      const TfBipole *o = &g_array_index (others, TfBipole, k);
      double need = 0.5 * (o->separation_deg + b->separation_deg)
                    + 3.0 * (o->follow_radius_deg + b->follow_radius_deg);
      if (tf_sphere_distance (o->carrington_lon_deg, o->lat_deg, b->carrington_lon_deg, b->lat_deg)
          < need)
        return FALSE;
    }
  return TRUE;
}

static TfSun *
make_sun (const TfSimulateParams *params, TfTime epoch)
{
  TfSun *sun = tf_sun_new (epoch, (guint64)params->seed);
  gsl_rng *rng = gsl_rng_alloc (gsl_rng_mt19937);
  double l0 = tf_earth_l0 (epoch, TF_L0_IMAGE);
  g_autoptr (GArray) placed = g_array_new (FALSE, FALSE, sizeof (TfBipole));
  gsl_rng_set (rng, (unsigned long)params->seed + 7919u);
  for (int k = 0; k < params->n_regions; k++)
    {
      const char *what = "bipole";
      TfBipole bipole = draw_region (rng, epoch, l0, params->anti_hale_share, &what);
      for (int tries = 0; tries < 300 && !is_free (placed, &bipole); tries++)
        bipole = draw_region (rng, epoch, l0, params->anti_hale_share, &what);
      g_autofree char *name = g_strdup_printf ("region-%03d", k + 1);
      tf_sun_add_bipole (sun, name, what, &bipole);
      g_array_append_val (placed, bipole);
    }
  tf_sun_add_network (sun, 400, 4.0e19);
  gsl_rng_free (rng);
  return sun;
}

gboolean
tf_simulate_frames (const char *folder, const TfSimulateParams *params, const TfWork *work,
                    GError **error)
{
  double step = params->cadence_hours * 3600.0;
  TfTime first = tf_time_from_year (params->start_year);
  TfShot shot;
  if (!tf_simulate_make_folder (folder, error))
    return FALSE;
  first.s = rint (first.s); /* whole seconds */
  g_autoptr (TfSun) sun
      = make_sun (params, tf_time_add (first, 0.5 * step * (params->n_frames - 1)));
  tf_shot_init (&shot);
  shot.size = (guint)params->size;
  shot.noise_gauss = params->noise_gauss;
  shot.style = (TfHeaderStyle)params->style;
  for (int k = 0; k < params->n_frames; k++)
    {
      g_autofree char *name = g_strdup_printf ("frame-%04d.fits", k + 1);
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (!tf_sun_write (sun, path, tf_time_add (first, k * step), &shot,
                         (guint64)params->seed * 100003u + (guint)k, work, error))
        return FALSE;
    }
  return TRUE;
}
