/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What may have come round the Sun: a passage that begins at the east limb where one that went over
 * the west limb should be by now. Each must be the other's nearest. Offered, never taken: behind the
 * limb a region may have gone and another come. */

#include "tf-follow-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

/* From last to first sight: on a disk 100 deg and 280 deg of synodic turn and a gap at each end;
 * between maps about one rotation. */
typedef struct
{
  double least_days, most_days;
} Wait;
static const Wait disk_wait = { 7.0, 24.0 }, map_wait = { 20.0, 35.0 };

#define SIDE_DEG 30.0 /* east or west of the middle, for a passage that ends where no frames are */

static gboolean
may_have_gone (const TfPassage *p, const TfSighting *s)
{
  return isnan (s->cmd_deg) || (p->ended != TF_END_ON_DISK && s->cmd_deg > SIDE_DEG);
}

static gboolean
may_have_come (const TfPassage *p, const TfSighting *s)
{
  return isnan (s->cmd_deg) || (p->born != TF_END_ON_DISK && s->cmd_deg < -SIDE_DEG);
}

/* How far the later place is from the carried one, in units of the tolerance; above 1: no. */
static double
distance (const TfSighting *a, const TfSighting *b, const TfFollowParams *params, TfReturn *out)
{
  double moved = tf_rotation_carry ((guint)params->law, a->lat_deg, b->time.s - a->time.s);
  out->lon_deg = tf_wrap_180 (b->lon_deg - a->lon_deg - moved);
  out->lat_deg = b->lat_deg - a->lat_deg;
  return hypot (out->lon_deg / params->return_lon_deg, out->lat_deg / params->return_lat_deg);
}

typedef struct
{
  int other;
  double distance;
  TfReturn offer;
} Nearest;

static void
consider (Nearest *nearest, guint k, guint other, double how_far, const TfReturn *offer)
{
  if (how_far <= 1.0 && (nearest[k].other < 0 || how_far < nearest[k].distance))
    nearest[k] = (Nearest){ (int)other, how_far, *offer };
}

static gboolean
is_declined (const TfPassages *passages, const TfTie *ties, guint n_ties, guint p, guint q)
{
  for (guint k = 0; k < n_ties; k++)
    {
      guint a = passages->passage[ties[k].a], b = passages->passage[ties[k].b];
      if (ties[k].cut && ((a == p && b == q) || (a == q && b == p)))
        return TRUE;
    }
  return FALSE;
}

/* Passages stand in the order of their first sightings, so that the later ones of a waiting time
 * follow each other. */
static void
compare_passage (const TfPassages *passages, const TfSighting *sightings, guint p,
                 const TfTie *ties, guint n_ties, const TfFollowParams *params, Nearest *later_of,
                 Nearest *earlier_of)
{
  const GArray *all = passages->passages;
  const TfPassage *gone = &g_array_index (all, TfPassage, p);
  const TfSighting *last = &sightings[gone->last];
  if (!may_have_gone (gone, last))
    return;
  for (guint q = p + 1; q < all->len; q++)
    {
      const TfPassage *come = &g_array_index (all, TfPassage, q);
      const TfSighting *first = &sightings[come->first];
      const Wait *wait = isnan (last->cmd_deg) ? &map_wait : &disk_wait;
      double days = (first->time.s - last->time.s) / TF_DAY_S;
      TfReturn offer = { .earlier = p, .later = q };
      if (!(days <= wait->most_days))
        break;
      if (days < wait->least_days || come->region == gone->region || !may_have_come (come, first)
          || isnan (last->cmd_deg) != isnan (first->cmd_deg)
          || !tf_sighting_one_vantage (last->observer_lon_deg, first->observer_lon_deg,
                                       params->vantage_deg)
          || is_declined (passages, ties, n_ties, p, q))
        continue;
      double how_far = distance (last, first, params, &offer);
      consider (later_of, p, q, how_far, &offer);
      consider (earlier_of, q, p, how_far, &offer);
    }
}

void
tf_follow_returns (TfPassages *passages, const TfSighting *sightings, const TfTie *ties,
                   guint n_ties, const TfFollowParams *params)
{
  guint n = passages->passages->len;
  g_autofree Nearest *later_of = g_new (Nearest, n + 1);
  g_autofree Nearest *earlier_of = g_new (Nearest, n + 1);
  for (guint k = 0; k < n; k++)
    later_of[k] = earlier_of[k] = (Nearest){ .other = -1 };
  for (guint k = 0; k < n; k++)
    compare_passage (passages, sightings, k, ties, n_ties, params, later_of, earlier_of);
  for (guint k = 0; k < n; k++)
    if (later_of[k].other >= 0 && earlier_of[later_of[k].other].other == (int)k)
      g_array_append_val (passages->returns, later_of[k].offer);
}
