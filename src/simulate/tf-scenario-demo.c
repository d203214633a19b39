/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"
#include "tf-sun-private.h"

/* The demo frames: Brindle Head Solar Station, a small invented observatory. One disk passage
 * in October 2013 (cycle 24) with a normal, an anti-Hale and a complex region among ordinary
 * ones; disks on both sides of two minima, with the old cycle near the equator and the new one
 * at high latitudes; a frame from off the Earth's line, an old header, a ground network's
 * header, a continuum companion, a map. Everything is in the tables below.
 */

typedef struct
{
  const char *name, *what;
  double cmd_deg, lat_deg; /* of the midpoint, at the sun's epoch, from the Earth */
  double separation_deg, axis_tilt_deg;
  int leading;
  double flux_mx;
  double lead_radius_deg, follow_radius_deg;
  guint fragments;
  double born_days, grow_days, decay_days; /* grow 0: constant */
} Region;

typedef struct
{
  double cmd_deg, lat_deg, radius_deg, flux_mx;
  const char *name, *what;
} Patch;

typedef struct
{
  const char *epoch;
  guint64 seed;
  guint network;
  double network_mx;
  const Region *regions; /* end with name NULL */
  const Region *complex; /* two, or NULL */
  const Patch *patches;  /* end with name NULL, or NULL */
} Sky;

/* -- October 2013: cycle 24, negative leads in the north -------------------------------------- */

/* clang-format off */
static const Region autumn_regions[] = {
  { "gannet", "bipole", -4.0, 14.0, 6.4, 6.5, -1, 9.0e21, 1.2, 1.8, 7, 0, 0, 0 },
  { "dunlin", "anti-hale", -22.0, -13.0, 5.6, -8.0, -1, 6.0e21, 1.2, 1.6, 6, 0, 0, 0 },
  { "avocet", "bipole", -41.0, 21.0, 5.8, 11.0, -1, 5.5e21, 1.1, 1.7, 5, 0, 0, 0 },
  { "curlew", "bipole", 6.0, -19.0, 7.2, 9.0, 1, 8.0e21, 1.3, 1.9, 7, 0, 0, 0 },
  { "fulmar", "bipole", 37.0, -9.0, 4.6, 3.0, 1, 4.0e21, 1.0, 1.4, 4, 0, 0, 0 },
  { "merlin", "bipole", 47.0, 11.0, 5.2, 1.5, -1, 5.0e21, 1.1, 1.5, 5, 0, 0, 0 },
  { "plover", "bipole", -53.0, -16.0, 6.0, 12.0, 1, 6.5e21, 1.2, 1.8, 6, 0, 0, 0 },
  { "siskin", "bipole", 24.0, -25.0, 4.4, 14.0, 1, 3.6e21, 1.0, 1.3, 3, -3.5, 2.5, 9.0 },
  { "dotterel", "bipole", -18.0, 30.0, 4.2, 10.0, -1, 3.2e21, 1.0, 1.4, 4, 0, 0, 0 },
  { NULL },
};

static const Region autumn_complex[] = {
  { "kestrel", "quadrupole", 18.0, 19.2, 3.8, 9.0, -1, 7.0e21, 1.1, 1.5, 6, 0, 0, 0 },
  { "kestrel", "quadrupole", 19.2, 17.4, 3.4, -12.0, 1, 6.0e21, 1.0, 1.3, 4, 0, 0, 0 },
  { NULL },
};

static const Patch autumn_patches[] = {
  { -37.0, 3.0, 3.4, 3.0e21, "tern", "decayed plage" },
  { 58.0, -27.0, 3.6, -2.8e21, "teal", "decayed plage" },
  { 0, 0, 0, 0, NULL, NULL },
};

static const Sky autumn = { "2013-10-12T06:00:00Z", 20131012, 420, 4.0e19, autumn_regions, autumn_complex, autumn_patches };

/* -- about the minimum of December 2008: cycle 23 (positive leads in the north) and 24 -------- */

static const Region spring_2008[] = {
  { "lapwing", "old cycle", -24.0, 6.5, 5.0, 2.0, 1, 4.5e21, 1.1, 1.5, 5, 0, 0, 0 },
  { "pipit", "old cycle", 22.0, -7.0, 4.6, 4.5, -1, 3.8e21, 1.0, 1.4, 4, 0, 0, 0 },
  { "wheatear", "new cycle", 8.0, 31.0, 4.2, 12.0, -1, 2.6e21, 1.0, 1.3, 3, 0, 0, 0 },
  { NULL },
};

static const Region winter_2008[] = {
  { "redshank", "old cycle", 14.0, -5.5, 4.8, 3.0, -1, 4.2e21, 1.1, 1.4, 4, 0, 0, 0 },
  { "whinchat", "new cycle", -16.0, 29.0, 4.6, 11.0, -1, 4.4e21, 1.0, 1.5, 5, 0, 0, 0 },
  { "stonechat", "new cycle", 34.0, -33.0, 4.2, 15.0, 1, 3.0e21, 1.0, 1.3, 3, 0, 0, 0 },
  { NULL },
};

static const Region spring_2009[] = {
  { "goosander", "new cycle", -12.0, 27.0, 5.4, 9.5, -1, 5.0e21, 1.1, 1.6, 5, 0, 0, 0 },
  { "eider", "new cycle", 28.0, -30.0, 4.8, 13.0, 1, 4.0e21, 1.0, 1.4, 4, 0, 0, 0 },
  { "scoter", "old cycle", 4.0, 4.8, 4.0, 1.0, 1, 2.6e21, 0.9, 1.2, 3, 0, 0, 0 },
  { NULL },
};

static const Sky sky_2008_spring = { "2008-05-04T06:00:00Z", 20080504, 360, 3.0e19, spring_2008, NULL, NULL };
static const Sky sky_2008_winter = { "2008-11-03T06:00:00Z", 20081103, 360, 3.0e19, winter_2008, NULL, NULL };
static const Sky sky_2009_spring = { "2009-05-10T06:00:00Z", 20090510, 360, 3.0e19, spring_2009, NULL, NULL };

/* -- about the minimum of December 2019: cycle 24 and 25 (positive leads in the north) -------- */

static const Region summer_2019[] = {
  { "brambling", "old cycle", -18.0, 5.5, 4.8, 2.5, -1, 4.0e21, 1.0, 1.4, 4, 0, 0, 0 },
  { "twite", "new cycle", 20.0, -29.0, 4.2, 12.0, -1, 2.8e21, 0.9, 1.3, 3, 0, 0, 0 },
  { NULL },
};

static const Region spring_2020[] = {
  { "whimbrel", "new cycle", 11.0, 31.0, 5.2, 13.0, 1, 5.0e21, 1.1, 1.6, 5, 0, 0, 0 },
  { "turnstone", "new cycle", -28.0, -26.0, 4.6, 8.0, -1, 3.8e21, 1.0, 1.4, 4, 0, 0, 0 },
  { "sanderling", "old cycle", 33.0, -5.0, 4.0, 1.5, 1, 2.8e21, 0.9, 1.2, 3, 0, 0, 0 },
  { NULL },
};

static const Sky sky_2019_summer = { "2019-06-15T06:00:00Z", 20190615, 360, 3.0e19, summer_2019, NULL, NULL };
static const Sky sky_2020_spring = { "2020-05-28T06:00:00Z", 20200528, 360, 3.0e19, spring_2020, NULL, NULL };

/* -- the frames ------------------------------------------------------------------------------- */

typedef struct
{
  const Sky *sky;
  const char *time, *name, *desk, *instrument;
  TfHeaderStyle style;
  double dx, dy;             /* disk centre off the middle, pixels */
  double turn_deg;
  double lon_deg, b0_deg, au; /* observer; au 0: the Earth */
  gboolean intensity;
  int rotation;              /* not 0: a map */
} Plan;

#define STATION "BRINDLE-1K"

static const Plan plans[] = {
  { &sky_2008_spring, "2008-05-04T06:00:00Z", "brindle-20080504-0600", "north", "BRINDLE-OLD", TF_STYLE_OLD_PIXELS, 1.3, -0.8 },
  { &sky_2008_winter, "2008-11-03T06:00:00Z", "brindle-20081103-0600", "south", STATION, TF_STYLE_STANDARD, 0.4, 0.3 },
  { &sky_2009_spring, "2009-05-10T06:00:00Z", "brindle-20090510-0600", "north", STATION, TF_STYLE_STANDARD, -0.6, 0.9 },
  { &autumn, "2013-10-06T06:00:00Z", "brindle-20131006-0600", "north", STATION, TF_STYLE_STANDARD, 0.2, 0.4 },
  { &autumn, "2013-10-07T06:00:00Z", "brindle-20131007-0600", "south", STATION, TF_STYLE_STANDARD, -0.3, 0.1 },
  { &autumn, "2013-10-08T06:00:00Z", "brindle-20131008-0600", "north", STATION, TF_STYLE_STANDARD, 0.5, -0.2, 2.4 },
  { &autumn, "2013-10-09T06:00:00Z", "brindle-20131009-0600", "south", "BRINDLE-2K", TF_STYLE_TURNED, 0.7, 0.6 },
  { &autumn, "2013-10-10T06:00:00Z", "brindle-20131010-0600", "north", STATION, TF_STYLE_STANDARD, -0.1, 0.2 },
  { &autumn, "2013-10-11T06:00:00Z", "brindle-20131011-0600", "south", STATION, TF_STYLE_STANDARD, 0.3, -0.5 },
  { &autumn, "2013-10-12T06:00:00Z", "brindle-20131012-0600", "north", STATION, TF_STYLE_STANDARD, 0.0, 0.0 },
  { &autumn, "2013-10-12T06:00:00Z", "brindle-20131012-0600-continuum", "north", STATION, TF_STYLE_STANDARD, 0.0, 0.0, .intensity = TRUE },
  { &autumn, "2013-10-12T06:00:00Z", "brindle-20131012-0600-far", "north", "BRINDLE-FAR", TF_STYLE_STANDARD, 4.2, -3.1, 31.0, -34.0, 3.6, 0.78 },
  { &autumn, "2013-10-12T12:00:00Z", "brindle-20131012-1200", "south", STATION, TF_STYLE_STANDARD, 0.2, 0.1 },
  { &autumn, "2013-10-12T18:00:00Z", "brindle-20131012-1800", "night", STATION, TF_STYLE_STANDARD, 0.1, -0.3 },
  { &autumn, "2013-10-13T00:00:00Z", "brindle-20131013-0000", "night", STATION, TF_STYLE_STANDARD, -0.2, 0.2 },
  { &autumn, "2013-10-13T06:00:00Z", "brindle-20131013-0600", "north", STATION, TF_STYLE_STANDARD, 0.4, 0.3 },
  { &autumn, "2013-10-14T06:00:00Z", "brindle-20131014-0600", "south", "BRINDLE-NET", TF_STYLE_GROUND, 0.9, -0.4 },
  { &autumn, "2013-10-15T06:00:00Z", "brindle-20131015-0600", "north", STATION, TF_STYLE_STANDARD, 0.0, 0.5 },
  { &autumn, "2013-10-16T06:00:00Z", "brindle-20131016-0600", "south", "BRINDLE-TAI", TF_STYLE_TAI, -0.4, -0.1 },
  { &autumn, "2013-10-17T06:00:00Z", "brindle-20131017-0600", "north", STATION, TF_STYLE_STANDARD, 0.6, 0.0 },
  { &autumn, "2013-10-18T06:00:00Z", "brindle-20131018-0600", "south", STATION, TF_STYLE_STANDARD, 0.1, 0.2 },
  { &autumn, NULL, "brindle-map-2142", "night", STATION, TF_STYLE_STANDARD, .rotation = 2142 },
  { &sky_2019_summer, "2019-06-15T06:00:00Z", "brindle-20190615-0600", "south", STATION, TF_STYLE_STANDARD, 0.2, -0.2 },
  { &sky_2020_spring, "2020-05-28T06:00:00Z", "brindle-20200528-0600", "north", STATION, TF_STYLE_STANDARD, -0.3, 0.4 },
};

/* clang-format on */

static TfBipole
bipole_of (const Region *region, double l0_deg)
{
  return (TfBipole){
    .lat_deg = region->lat_deg,
    .carrington_lon_deg = tf_wrap_360 (l0_deg + region->cmd_deg),
    .separation_deg = region->separation_deg,
    .axis_tilt_deg = region->axis_tilt_deg,
    .leading_polarity = region->leading,
    .flux_mx = region->flux_mx,
    .lead_radius_deg = region->lead_radius_deg,
    .follow_radius_deg = region->follow_radius_deg,
    .fragments = region->fragments,
    .born_s = region->born_days * TF_DAY_S,
    .grow_s = region->grow_days * TF_DAY_S,
    .decay_s = region->decay_days * TF_DAY_S,
  };
}

static TfSun *
make_sun (const Sky *sky)
{
  TfTime epoch = tf_time_read (sky->epoch);
  TfSun *sun = tf_sun_new (epoch, sky->seed);
  double l0 = tf_earth_l0 (epoch, TF_L0_IMAGE);
  for (const Region *r = sky->regions; r->name != NULL; r++)
    {
      TfBipole bipole = bipole_of (r, l0);
      tf_sun_add_bipole (sun, r->name, r->what, &bipole);
    }
  if (sky->complex != NULL)
    {
      TfBipole first = bipole_of (&sky->complex[0], l0), second = bipole_of (&sky->complex[1], l0);
      tf_sun_add_quadrupole (sun, sky->complex[0].name, &first, &second);
    }
  for (const Patch *p = sky->patches; p != NULL && p->name != NULL; p++)
    {
      TfBlob blob = { p->lat_deg, tf_wrap_360 (l0 + p->cmd_deg), p->radius_deg, p->flux_mx };
      tf_sun_add_blob (sun, p->name, p->what, &blob);
    }
  tf_sun_add_network (sun, sky->network, sky->network_mx);
  return sun;
}

static void
shot_of (const Plan *plan, TfShot *shot)
{
  tf_shot_init (shot);
  shot->style = plan->style;
  shot->instrument = plan->instrument;
  shot->desk = plan->desk;
  shot->centre_dx = plan->dx;
  shot->centre_dy = plan->dy;
  shot->north_angle_deg = plan->turn_deg;
  shot->psf_arcsec = 5.0;
  shot->intensity = plan->intensity;
  if (plan->intensity)
    {
      shot->noise_gauss = 20.0; /* counts */
      shot->quantum_gauss = 4.0;
    }
  if (plan->au > 0.0)
    shot->observer = (TfObserver){ .distance_m = plan->au * TF_AU_M,
                                   .b0_deg = plan->b0_deg,
                                   .stonyhurst_lon_deg = plan->lon_deg,
                                   .carrington_lon_deg = NAN,
                                   .source = TF_OBSERVER_HEADER };
}

static gboolean
make_frame (const TfSun *sun, const Plan *plan, const char *folder, guint64 seed,
            const TfWork *work, GError **error)
{
  TfShot shot;
  g_autofree char *name = g_strconcat (plan->name, ".fits", NULL),
                  *path = g_build_filename (folder, name, NULL);
  shot_of (plan, &shot);
  if (plan->rotation != 0)
    return tf_sun_write_map (sun, path, plan->rotation, 360, 180, &shot, seed, error);
  return tf_sun_write (sun, path, tf_time_read (plan->time), &shot, seed, work, error);
}

gboolean
tf_simulate_demo (const char *folder, const TfWork *work, GError **error)
{
  g_autoptr (TfSun) sun = NULL;
  if (!tf_simulate_make_folder (folder, error))
    return FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (plans); k++)
    {
      if (k == 0 || plans[k].sky != plans[k - 1].sky)
        {
          g_clear_pointer (&sun, tf_sun_free);
          sun = make_sun (plans[k].sky);
        }
      if (!make_frame (sun, &plans[k], folder, 1000 + k, work, error))
        return FALSE;
    }
  return TRUE;
}
