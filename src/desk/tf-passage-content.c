/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-passage-content.h"

#include <math.h>

#include "tf-rotation.h"
#include "tf-study.h"

static const double gap_steps = 2.2, margin = 1.2, least_half_deg = 3, most_half_deg = 20,
                    day_s = 86400, around_days = 1.05;

static void
content_clear (gpointer data)
{
  TfPassageContent *c = data;
  g_clear_pointer (&c->passage, tf_passage_row_free);
  g_clear_pointer (&c->points, g_array_unref);
  g_clear_pointer (&c->looks, g_ptr_array_unref);
  g_clear_pointer (&c->series, tf_series_free);
  g_clear_pointer (&c->links, g_array_unref);
  g_clear_pointer (&c->returns, g_array_unref);
  g_clear_pointer (&c->others, g_ptr_array_unref);
  g_clear_pointer (&c->study, tf_study_free);
}

TfPassageContent *
tf_passage_content_ref (TfPassageContent *c)
{
  return g_atomic_rc_box_acquire (c);
}

void
tf_passage_content_unref (TfPassageContent *c)
{
  g_atomic_rc_box_release_full (c, content_clear);
}

int
tf_passage_content_find (const TfPassageContent *c, TfSight sight)
{
  for (guint k = 0; k < c->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (c->rows, k);
      if (row->mark == sight.mark && row->is_hint == sight.is_hint)
        return (int)k;
    }
  return -1;
}

/* -- the place that turns with the Sun ------------------------------------------------------- */

typedef struct
{
  double lon_deg, lat_deg;
  TfTime time;
  guint law;
} Anchor;

static Anchor
anchor_of (const TfPassageContent *c, guint law)
{
  const TfRow *best = NULL;
  for (guint k = 0; k < c->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (c->rows, k);
      if (best == NULL || row->measure.mu > best->measure.mu)
        best = row;
    }
  double lon, lat, radius;
  tf_outline_get_cap (best->outline, &lon, &lat, &radius);
  return (Anchor){ lon, lat, tf_outline_get_time (best->outline), law };
}

static double
anchor_lon (const Anchor *anchor, TfTime time)
{
  double moved = tf_rotation_carry (anchor->law, anchor->lat_deg, time.s - anchor->time.s);
  return isfinite (moved) ? anchor->lon_deg + moved : anchor->lon_deg;
}

/* As high as the largest outline reaches from the anchor on any frame. */
static double
half_height (const TfPassageContent *c, const Anchor *anchor)
{
  double reach = least_half_deg / margin;
  for (guint k = 0; k < c->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (c->rows, k);
      double lon, lat, radius;
      tf_outline_get_cap (row->outline, &lon, &lat, &radius);
      reach = fmax (reach, radius * 0.8 + fabs (lat - anchor->lat_deg));
    }
  return fmin (reach * margin, most_half_deg);
}

/* -- one look -------------------------------------------------------------------------------- */

static gboolean
share_of (const TfView *view, const TfGeometry *geometry, double lon, double lat, double share[2])
{
  double x, y;
  if (!isfinite (lon) || !isfinite (lat) || !tf_view_from_sun (view, geometry, lon, lat, &x, &y))
    return FALSE;
  share[0] = x / view->width;
  share[1] = y / view->height;
  return TRUE;
}

static void
add_ring (TfLookSpec *spec, const TfGeometry *geometry, const TfVertex *ring, guint n)
{
  double share[2], end[2] = { NAN, NAN };
  for (guint k = 0; k < n; k++)
    if (share_of (&spec->view, geometry, ring[k].lon_deg, ring[k].lat_deg, share))
      g_array_append_vals (spec->edge, share, 2);
  g_array_append_vals (spec->edge, end, 2);
}

static void
set_edge (TfLookSpec *spec, const TfGeometry *geometry, TfOutline *outline, guint law)
{
  g_autoptr (TfOutline) there = tf_outline_carry (outline, spec->time, law);
  spec->edge = g_array_new (FALSE, FALSE, sizeof (double));
  for (guint k = 0; there != NULL && k < tf_outline_get_n_rings (there); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (there, k, FALSE, &n);
      add_ring (spec, geometry, ring, n);
    }
}

static TfLookSpec *
look_of_frame (const TfPassageContent *c, const Anchor *anchor, const TfFrameRow *frame)
{
  TfLookSpec *spec = g_new0 (TfLookSpec, 1);
  spec->point = -1;
  spec->frame = frame->id;
  spec->time = frame->info->time;
  spec->path = g_strdup (frame->path);
  spec->which = (TfFrameSpec){ frame->hdu, frame->plane };
  spec->view = (TfView){ .look = TF_LOOK_CLOSE,
                         .width = TF_LOOK_WIDTH,
                         .height = TF_LOOK_HEIGHT,
                         .zoom = TF_LOOK_HEIGHT / 2.0 / c->half_deg,
                         .centre_lon_deg = anchor_lon (anchor, spec->time),
                         .centre_lat_deg = anchor->lat_deg };
  return spec;
}

static void
add_sighting (TfPassageContent *c, const Anchor *anchor, const TfFrameRow *frame, guint point)
{
  const TfRow *row = g_ptr_array_index (c->rows, point);
  const TfGeometry *geometry = &frame->info->geometry;
  TfLookSpec *spec = look_of_frame (c, anchor, frame);
  spec->kind = TF_LOOK_SIGHTING;
  spec->point = (int)point;
  spec->mark = row->mark;
  spec->is_hint = row->is_hint;
  set_edge (spec, geometry, row->outline, anchor->law);
  const TfMeasure *m = &row->measure;
  spec->poles = m->leading_polarity != 0
                && share_of (&spec->view, geometry, m->positive.carrington_lon_deg,
                             m->positive.lat_deg, spec->positive)
                && share_of (&spec->view, geometry, m->negative.carrington_lon_deg,
                             m->negative.lat_deg, spec->negative);
  g_ptr_array_add (c->looks, spec);
}

/* A frame of the same vantage on which nothing was marked or hinted here, although it should be in
 * sight: the nearest outline is carried there. */
static void
add_ghost (TfPassageContent *c, const Anchor *anchor, const TfFrameRow *frame)
{
  const TfRow *near = NULL;
  for (guint k = 0; k < c->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (c->rows, k);
      double away = fabs (row->measure.time.s - frame->info->time.s);
      if (near == NULL || away < fabs (near->measure.time.s - frame->info->time.s))
        near = row;
    }
  TfLookSpec *spec = look_of_frame (c, anchor, frame);
  TfPlace place;
  double x, y;
  const TfGeometry *geometry = &frame->info->geometry;
  if (!tf_view_from_sun (&spec->view, geometry, spec->view.centre_lon_deg, anchor->lat_deg, &x, &y)
      || !tf_view_to_sun (&spec->view, geometry, x, y, &place) || !(place.mu > 0.17))
    {
      tf_look_spec_free (spec);
      return;
    }
  spec->kind = TF_LOOK_GHOST;
  set_edge (spec, geometry, near->outline, anchor->law);
  g_ptr_array_add (c->looks, spec);
}

/* -- all looks ------------------------------------------------------------------------------- */

static gboolean
is_between (const TfPassageContent *c, const TfFrameRow *frame, double observer_lon)
{
  double lon = frame->info->geometry.observer.stonyhurst_lon_deg;
  return frame->refusal == NULL && !tf_geometry_is_map (&frame->info->geometry)
         && fabs (remainder (lon - observer_lon, 360)) <= 15;
}

static double
vantage_lon (const TfPassageContent *c, const GPtrArray *frames)
{
  const TfRow *first = g_ptr_array_index (c->rows, 0);
  for (guint k = 0; k < frames->len; k++)
    {
      const TfFrameRow *frame = g_ptr_array_index (frames, k);
      if (frame->id == first->frame)
        return frame->info->geometry.observer.stonyhurst_lon_deg;
    }
  return NAN;
}

static void
add_looks (TfPassageContent *c, const GPtrArray *frames, const Anchor *anchor)
{
  double observer_lon = vantage_lon (c, frames);
  for (guint k = 0; k < frames->len; k++)
    {
      const TfFrameRow *frame = g_ptr_array_index (frames, k);
      gboolean seen = FALSE;
      for (guint j = 0; j < c->rows->len; j++)
        if (((const TfRow *)g_ptr_array_index (c->rows, j))->frame == frame->id)
          {
            add_sighting (c, anchor, frame, j);
            seen = TRUE;
          }
      if (!seen && is_between (c, frame, observer_lon))
        add_ghost (c, anchor, frame);
    }
}

static void
add_gaps (TfPassageContent *c)
{
  double usual = tf_series_chart_cadence ((const TfSeriesMoment *)(gconstpointer)c->points->data,
                                          c->points->len);
  for (guint k = 1; k < c->looks->len && usual > 0; k++)
    {
      const TfLookSpec *before = g_ptr_array_index (c->looks, k - 1),
                       *after = g_ptr_array_index (c->looks, k);
      double step = after->time.s - before->time.s;
      if (step <= gap_steps * usual)
        continue;
      TfLookSpec *gap = g_new0 (TfLookSpec, 1);
      gap->kind = TF_LOOK_GAP;
      gap->point = -1;
      gap->gap_s = step;
      gap->time = tf_time_add (before->time, step / 2);
      g_ptr_array_insert (c->looks, (int)k, gap);
      k++;
    }
}

/* -- figures --------------------------------------------------------------------------------- */

static void
add_points (TfPassageContent *c)
{
  for (guint k = 0; k < c->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (c->rows, k);
      const TfMeasure *m = &row->measure;
      TfSeriesMoment p = {
        .time = m->time,
        .tilt_deg = m->axis_tilt_deg,
        .tilt_sigma_deg = m->tilt_terms.total,
        .positive_mx = m->positive.flux_mx,
        .negative_mx = m->negative.flux_mx,
        .positive_sigma_mx = m->positive.flux_sigma_mx,
        .negative_sigma_mx = m->negative.flux_sigma_mx,
        .separation_mm = m->separation_mm,
        .separation_sigma_mm = m->separation_mm * m->separation_sigma_deg / m->separation_deg,
        .line_mm = row->complexity.there ? row->complexity.strong_gradient_length_mm : NAN,
        .mu = m->mu,
        .hint = row->is_hint,
      };
      g_array_append_val (c->points, p);
    }
}

static gboolean
read_series (TfPassageContent *c, TfLedger *ledger, GError **error)
{
  TfSeriesParams params;
  tf_series_params_init (&params);
  c->study = tf_study_new_default ();
  double floor = tf_series_floor (ledger, c->passage->id, error);
  if (!tf_study_read_divides (c->study, ledger, error))
    return FALSE;
  c->series = tf_series_read (ledger, c->passage->id, floor, c->study, &params, error);
  c->rows = c->series != NULL ? c->series->rows : NULL;
  return c->series != NULL;
}

static gboolean
read_others (TfPassageContent *c, TfLedger *ledger, GError **error)
{
  g_autoptr (GPtrArray) all = tf_ledger_passages (ledger, error);
  c->links = all != NULL ? tf_ledger_passage_links (ledger, c->passage->id, error) : NULL;
  c->returns = c->links != NULL ? tf_ledger_returns (ledger, c->passage->id, error) : NULL;
  if (c->returns == NULL)
    return FALSE;
  g_ptr_array_set_free_func (all, NULL);
  for (guint k = 0; k < all->len; k++)
    {
      TfPassageRow *row = g_ptr_array_index (all, k);
      gboolean wanted = row->id != c->passage->id && row->same == c->passage->same;
      for (guint j = 0; j < c->returns->len; j++)
        {
          const TfReturnOffer *offer = &g_array_index (c->returns, TfReturnOffer, j);
          wanted = wanted
                   || (row->id != c->passage->id
                       && (row->id == offer->earlier || row->id == offer->later));
        }
      if (wanted)
        g_ptr_array_add (c->others, row);
      else
        tf_passage_row_free (row);
    }
  return TRUE;
}

TfPassageContent *
tf_passage_content_read (TfLedger *ledger, gint64 passage, GError **error)
{
  g_autoptr (TfPassageContent) c = g_atomic_rc_box_new0 (TfPassageContent);
  c->points = g_array_new (FALSE, FALSE, sizeof (TfSeriesMoment));
  c->looks = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_look_spec_free);
  c->others = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_passage_row_free);
  c->passage = tf_ledger_passage (ledger, passage, error);
  if (c->passage == NULL)
    return NULL;
  if (!read_series (c, ledger, error) || !read_others (c, ledger, error))
    return NULL;
  double around = around_days * day_s;
  g_autoptr (GPtrArray) frames = tf_ledger_frames_between (
      ledger, tf_time_add (c->passage->first_time, -around),
      tf_time_add (c->passage->last_time, around), error);
  if (frames == NULL)
    return NULL;
  add_points (c);
  if (c->rows->len > 0)
    {
      TfFollowParams params;
      tf_ledger_follow_params (ledger, &params);
      Anchor anchor = anchor_of (c, (guint)params.law);
      c->half_deg = half_height (c, &anchor);
      add_looks (c, frames, &anchor);
      add_gaps (c);
    }
  return g_steal_pointer (&c);
}
