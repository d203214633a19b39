/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* How a passage began and ended: what the frames just before and after it show of its place. Only
 * frames with the whole disk tell, and only where the place is well in sight. */

#include "tf-follow-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

#define HIDDEN_DAYS                                                                                \
  22.0 /* longest from the last good sight of a place to the next: 240 deg behind 60 deg east and west, slowest latitudes, and a gap */

const char *
tf_end_name (TfEnd end)
{
  static const char *const names[] = { "unknown", "on disk", "over the limb", "far side" };
  return end >= 0 && (guint)end < G_N_ELEMENTS (names) ? names[end] : names[0];
}

/* Cosine of the angle from the middle of the disk; the observer far away, which is good enough well
 * inside the limb. */
static double
mu_of (const TfSighting *s, const TfLookout *look, const TfFollowParams *params)
{
  double lon
      = s->lon_deg + tf_rotation_carry ((guint)params->law, s->lat_deg, look->time.s - s->time.s);
  return cos (TF_DEG
              * tf_sphere_distance (lon, s->lat_deg, look->carrington_lon_deg, look->b0_deg));
}

static int
compare_lookouts (gconstpointer a, gconstpointer b)
{
  const TfLookout *p = *(const TfLookout *const *)a, *q = *(const TfLookout *const *)b;
  return (p->time.s > q->time.s) - (p->time.s < q->time.s);
}

/* First lookout at or after @time. */
static guint
find_time (const GPtrArray *looks, double time_s)
{
  guint low = 0, high = looks->len;
  while (low < high)
    {
      guint middle = (low + high) / 2;
      if (((const TfLookout *)g_ptr_array_index (looks, middle))->time.s < time_s)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

typedef struct
{
  gboolean any,
      in_sight; /* frames of the vantage within the gap, and whether one showed the place */
  gboolean far; /* whether any frame showed the place within HIDDEN_DAYS */
} View;

/* Looks from a sighting into the past (-1) or the future (1). */
static View
look (const TfSighting *s, const GPtrArray *looks, int way, const TfFollowParams *params)
{
  View view = { 0 };
  guint at = find_time (looks, s->time.s);
  int k = way < 0 ? (int)at - 1 : (int)at;
  for (; k >= 0 && k < (int)looks->len && !view.in_sight && !view.far; k += way)
    {
      const TfLookout *l = g_ptr_array_index (looks, (guint)k);
      double days = way * (l->time.s - s->time.s) / TF_DAY_S;
      if (days > HIDDEN_DAYS)
        break;
      if (!l->whole || days * TF_DAY_S < 1.0) /* its own frame */
        continue;
      gboolean seen = mu_of (s, l, params) >= params->seen_mu;
      if (days > params->gap_days)
        view.far = seen;
      else if (tf_sighting_one_vantage (s->observer_lon_deg, l->observer_lon_deg,
                                        params->vantage_deg))
        {
          view.any = TRUE;
          view.in_sight = seen;
        }
    }
  return view;
}

/* @known: another passage of the region, or one that may be, lies on that side. */
static TfEnd
judge (const View *view, gboolean known)
{
  if (view->in_sight)
    return TF_END_ON_DISK;
  if (!view->any)
    return TF_END_UNKNOWN;
  return view->far && !known ? TF_END_FAR_SIDE : TF_END_LIMB;
}

/* Whether a passage has one before it (-1) or after it (1), of its region or as a return. */
static gboolean *
list_known (const TfPassages *passages, const TfSighting *sightings, int way)
{
  guint n = passages->passages->len;
  gboolean *known = g_new0 (gboolean, n + 1);
  g_autofree double *reach = g_new (double, n + 1); /* earliest first or latest last of a region */
  for (guint k = 0; k < n; k++)
    reach[k] = NAN;
  for (guint k = 0; k < n; k++)
    {
      const TfPassage *p = &g_array_index (passages->passages, TfPassage, k);
      double *its = &reach[p->region];
      *its = way < 0 ? fmin (*its, sightings[p->first].time.s)
                     : fmax (*its, sightings[p->last].time.s);
    }
  for (guint k = 0; k < n; k++)
    {
      const TfPassage *p = &g_array_index (passages->passages, TfPassage, k);
      known[k] = way < 0 ? reach[p->region] < sightings[p->first].time.s
                         : reach[p->region] > sightings[p->last].time.s;
    }
  for (guint k = 0; k < passages->returns->len; k++)
    {
      const TfReturn *r = &g_array_index (passages->returns, TfReturn, k);
      known[way < 0 ? r->later : r->earlier] = TRUE;
    }
  return known;
}

void
tf_follow_ends (TfPassages *passages, const TfSighting *sightings, const TfLookout *lookouts,
                guint n_lookouts, const TfFollowParams *params)
{
  g_autoptr (GPtrArray) looks = g_ptr_array_new ();
  for (guint k = 0; k < n_lookouts; k++)
    if (tf_time_is_known (lookouts[k].time) && isfinite (lookouts[k].carrington_lon_deg))
      g_ptr_array_add (looks, (gpointer)&lookouts[k]);
  g_ptr_array_sort (looks, compare_lookouts);
  g_autofree gboolean *before = list_known (passages, sightings, -1);
  g_autofree gboolean *after = list_known (passages, sightings, 1);
  for (guint k = 0; k < passages->passages->len; k++)
    {
      TfPassage *p = &g_array_index (passages->passages, TfPassage, k);
      View past = look (&sightings[p->first], looks, -1, params);
      View future = look (&sightings[p->last], looks, 1, params);
      p->born = judge (&past, before[k]);
      p->ended = judge (&future, after[k]);
    }
}
