/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The dots of the wings, and the stretch of time picked on them. A dot's id is its place in the
 * list of points, from 1. */

#include "tf-session-private.h"

#include <math.h>

static GArray *
dots_or_none (GArray *dots)
{
  return dots != NULL ? dots : g_array_new (FALSE, FALSE, sizeof (TfWingsDot));
}

void
tf_session_replace_points (TfSession *self, GArray *points, GArray *dots, GArray *mark_dots)
{
  g_clear_pointer (&self->points, g_array_unref);
  g_clear_pointer (&self->all_dots, g_array_unref);
  g_clear_pointer (&self->mark_dots, g_array_unref);
  self->points = points != NULL ? points : g_array_new (FALSE, FALSE, sizeof (TfPoint));
  self->all_dots = dots_or_none (dots);
  self->mark_dots = dots_or_none (mark_dots);
  tf_session_emit (self, TF_SIGNAL_POINTS);
}

GArray *
tf_session_get_dots (TfSession *self, guint *n_hidden)
{
  if (n_hidden != NULL)
    *n_hidden = self->show_hints ? 0 : self->all_dots->len - self->mark_dots->len;
  return self->show_hints ? self->all_dots : self->mark_dots;
}

guint
tf_session_get_n_marks (TfSession *self)
{
  return self->mark_dots->len;
}

gboolean
tf_session_get_show_hints (TfSession *self)
{
  return self->show_hints;
}

void
tf_session_set_show_hints (TfSession *self, gboolean show)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->show_hints = show;
  tf_session_emit (self, TF_SIGNAL_POINTS);
}

void
tf_session_choose_dot (TfSession *self, gint64 id)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (id < 1 || id > self->points->len)
    return;
  const TfPoint *point = &g_array_index (self->points, TfPoint, (guint)id - 1);
  TfFrameItem *item = tf_session_find_frame (self, point->frame);
  if (item == NULL)
    return;
  gint64 mark = point->mark;
  gboolean hint = point->hint;
  tf_session_choose_frame (self, item);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) region = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (tf_region_item_is (region, mark, hint))
        {
          tf_session_choose_region (self, region);
          return;
        }
    }
  self->want_mark = mark;
  self->want_hint = hint;
}

gint64
tf_session_get_chosen_dot (TfSession *self)
{
  if (self->region == NULL)
    return 0;
  const TfRow *row = tf_region_item_get_row (self->region);
  for (guint k = 0; k < self->points->len; k++)
    {
      const TfPoint *point = &g_array_index (self->points, TfPoint, k);
      if (point->mark == row->mark && point->hint == (gint8)row->is_hint && !point->outside)
        return (gint64)k + 1;
    }
  return 0;
}

void
tf_session_pick (TfSession *self, double from, double to)
{
  g_return_if_fail (TF_IS_SESSION (self));
  gboolean all = isnan (from) || isnan (to);
  self->pick_from = all ? NAN : fmin (from, to);
  self->pick_to = all ? NAN : fmax (from, to);
  tf_session_update_pick (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
}

void
tf_session_get_pick (TfSession *self, double *from, double *to)
{
  *from = self->pick_from;
  *to = self->pick_to;
}
