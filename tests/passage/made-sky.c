/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "made-sky.h"

#include <math.h>

#include "tf-rotation.h"

#define DAY_S           86400.0
#define EPOCH           "2013-10-06T00:00:00Z"
#define L0_DEG          180.0   /* of the observer at the epoch */
#define SYNODIC_DEG_DAY 13.1988 /* by which the central meridian goes back */
#define SEEN_CMD_DEG    68.0    /* a rule sees no farther */

typedef struct
{
  double lon_deg, lat_deg;         /* at the epoch */
  double lon_deg_day, lat_deg_day; /* own motion */
  double born_days, grow_days, radius_deg;
} Region;

void
made_params_init (MadeParams *params)
{
  *params = (MadeParams){ 60, 12.0, 6.0, 8.0, 0.05, 0.15, 0.3, 5, 1 };
}

MadeSky *
made_sky_empty (void)
{
  MadeSky *sky = g_new0 (MadeSky, 1);
  sky->sightings = g_array_new (FALSE, TRUE, sizeof (TfSighting));
  sky->truth = g_array_new (FALSE, FALSE, sizeof (guint));
  sky->lookouts = g_array_new (FALSE, FALSE, sizeof (TfLookout));
  sky->texts = g_ptr_array_new_with_free_func (g_free);
  sky->outlines = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_outline_unref);
  return sky;
}

void
made_sky_free (MadeSky *sky)
{
  g_array_unref (sky->sightings);
  g_array_unref (sky->truth);
  g_array_unref (sky->lookouts);
  g_ptr_array_unref (sky->texts);
  g_ptr_array_unref (sky->outlines);
  g_free (sky);
}

static const char *
keep_text (MadeSky *sky, char *text)
{
  g_ptr_array_add (sky->texts, text);
  return text;
}

void
made_sky_add (MadeSky *sky, guint truth, TfTime time, const char *frame_id, double lon_deg,
              double lat_deg, double radius_deg, double observer_lon_deg, double cmd_deg)
{
  TfOutline *outline = tf_outline_new_cap (time, tf_wrap_360 (lon_deg), lat_deg, radius_deg, 32);
  g_assert_nonnull (outline);
  g_ptr_array_add (sky->outlines, outline);
  TfSighting s = {
    .id
    = keep_text (sky, g_strdup_printf ("%08x%04u", g_str_hash (frame_id) ^ (truth * 2654435761u),
                                       sky->sightings->len)),
    .time = time,
    .frame = g_str_hash (frame_id),
    .frame_id = keep_text (sky, g_strdup (frame_id)),
    .outline = outline,
    .lon_deg = tf_wrap_360 (lon_deg),
    .lat_deg = lat_deg,
    .observer_lon_deg = observer_lon_deg,
    .cmd_deg = cmd_deg,
  };
  g_array_append_val (sky->sightings, s);
  g_array_append_val (sky->truth, truth);
}

static Region *
make_regions (const MadeParams *params, GRand *lot)
{
  Region *regions = g_new (Region, params->n_regions + 1);
  for (guint k = 0; k < params->n_regions; k++)
    {
      Region *r = &regions[k];
      double side = k % 4 < 2 ? 1.0 : -1.0;
      r->lat_deg = side * g_rand_double_range (lot, 6.0, 30.0);
      /* Pairs all round, so far apart that no others are neighbours. */
      r->lon_deg = 360.0 * 2.0 * (k / 4) / (params->n_regions / 2.0)
                   + g_rand_double_range (lot, -1.0, 1.0);
      if (k % 2 == 1)
        {
          double bearing = g_rand_double_range (lot, 0.0, 2.0 * G_PI);
          r->lat_deg = regions[k - 1].lat_deg + params->neighbour_deg * sin (bearing) * 0.5;
          double dlat = r->lat_deg - regions[k - 1].lat_deg;
          double across = sqrt (params->neighbour_deg * params->neighbour_deg - dlat * dlat);
          r->lon_deg = regions[k - 1].lon_deg + across / cos (r->lat_deg * G_PI / 180.0);
        }
      r->lon_deg_day
          = k % 2 == 1 ? regions[k - 1].lon_deg_day : g_rand_double_range (lot, -0.15, 0.15);
      r->lat_deg_day
          = k % 2 == 1 ? regions[k - 1].lat_deg_day : g_rand_double_range (lot, -0.05, 0.05);
      r->born_days
          = g_rand_double (lot) < 0.3 ? g_rand_double_range (lot, 0.0, params->days * 0.7) : -10.0;
      r->grow_days = g_rand_double_range (lot, 0.5, 2.5);
      r->radius_deg = g_rand_double_range (lot, 2.0, 3.7);
    }
  return regions;
}

static double
jitter (GRand *lot, double size)
{
  return size * (g_rand_double (lot) + g_rand_double (lot) + g_rand_double (lot) - 1.5) * 2.0;
}

static void
see (MadeSky *sky, const MadeParams *params, const Region *r, guint k, double days,
     const char *frame_id, GRand *lot)
{
  double lat = r->lat_deg + r->lat_deg_day * days;
  double lon
      = r->lon_deg + r->lon_deg_day * days + tf_rotation_carry (params->law, lat, days * DAY_S);
  double cmd = tf_wrap_180 (lon - (L0_DEG - SYNODIC_DEG_DAY * days)), age = days - r->born_days;
  double dlat = jitter (lot, params->jitter_deg), dlon = jitter (lot, params->jitter_deg),
         size = 1.0 + jitter (lot, 0.1);
  gboolean missed = g_rand_double (lot) < params->missed;
  if (age < 0.05 || fabs (cmd) > SEEN_CMD_DEG || missed)
    return;
  double radius = r->radius_deg * fmax (0.35, fmin (1.0, sqrt (age / r->grow_days))) * size;
  made_sky_add (sky, k, tf_time_add (tf_time_read (EPOCH), days * DAY_S), frame_id, lon + dlon,
                lat + dlat, radius, 0.0, cmd);
}

MadeSky *
made_sky_new (const MadeParams *params)
{
  MadeSky *sky = made_sky_empty ();
  GRand *lot = g_rand_new_with_seed (params->seed);
  g_autofree Region *regions = make_regions (params, lot);
  int day = -1;
  gboolean missing = FALSE;
  for (guint n = 0; n * params->cadence_hours / 24.0 < params->days; n++)
    {
      double days = n * params->cadence_hours / 24.0;
      if ((int)days != day)
        missing = g_rand_double (lot) < params->missing_days;
      day = (int)days;
      g_autofree char *frame_id = g_strdup_printf ("%08x", n * 2654435761u);
      TfLookout look = { tf_time_add (tf_time_read (EPOCH), days * DAY_S), 0.0,
                         tf_wrap_360 (L0_DEG - SYNODIC_DEG_DAY * days), 5.9, TRUE };
      if (!missing)
        g_array_append_val (sky->lookouts, look);
      for (guint k = 0; k < params->n_regions && !missing; k++)
        see (sky, params, &regions[k], k, days, frame_id, lot);
    }
  g_rand_free (lot);
  return sky;
}

GArray *
made_sky_links (const MadeSky *sky, const TfFollowParams *params)
{
  return tf_follow_links ((const TfSighting *)(void *)sky->sightings->data, sky->sightings->len,
                          NULL, 0, params);
}

TfPassages *
made_sky_follow (const MadeSky *sky, const GArray *links, const TfFollowParams *params)
{
  return tf_follow_passages ((const TfSighting *)(void *)sky->sightings->data, sky->sightings->len,
                             (const TfLink *)(void *)links->data, links->len, NULL, 0,
                             (const TfLookout *)(void *)sky->lookouts->data, sky->lookouts->len,
                             params);
}

/* -- score ---------------------------------------------------------------------------------- */
static gboolean
is_linked (const GArray *links, guint a, guint b)
{
  for (guint k = 0; k < links->len; k++)
    {
      const TfLink *l = &g_array_index (links, TfLink, k);
      if (l->kind == TF_LINK_NEXT && l->a == a && l->b == b)
        return TRUE;
    }
  return FALSE;
}

/* Sightings stand in order of time, so that the next of the same region is the next one there. */
static void
score_pairs (const MadeSky *sky, const GArray *links, double gap_s, MadeScore *score)
{
  for (guint a = 0; a < sky->sightings->len; a++)
    for (guint b = a + 1; b < sky->sightings->len; b++)
      {
        if (g_array_index (sky->truth, guint, a) != g_array_index (sky->truth, guint, b))
          continue;
        double wait = g_array_index (sky->sightings, TfSighting, b).time.s
                      - g_array_index (sky->sightings, TfSighting, a).time.s;
        score->pairs += wait <= gap_s;
        score->right += wait <= gap_s && is_linked (links, a, b);
        break;
      }
}

MadeScore
made_sky_score (const MadeSky *sky, const GArray *links, const TfPassages *found, double gap_s)
{
  MadeScore score = { 0 };
  score_pairs (sky, links, gap_s, &score);
  for (guint k = 0; k < links->len; k++)
    {
      const TfLink *l = &g_array_index (links, TfLink, k);
      score.wrong
          += l->kind == TF_LINK_NEXT
             && g_array_index (sky->truth, guint, l->a) != g_array_index (sky->truth, guint, l->b);
    }
  g_autofree guint *first = g_new0 (guint, found->passages->len + 1);
  g_autofree guint8 *mixed = g_new0 (guint8, found->passages->len + 1);
  for (guint k = 0; k < sky->sightings->len; k++)
    {
      guint passage = found->passage[k], truth = g_array_index (sky->truth, guint, k) + 1;
      mixed[passage] |= first[passage] != 0 && first[passage] != truth;
      first[passage] = truth;
    }
  for (guint k = 0; k < found->passages->len; k++)
    score.mixed += mixed[k];
  return score;
}
