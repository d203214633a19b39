/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Drawing: the line in hand and the draft that it becomes. The draft is kept in the ledger as a
 * draft, so that it outlives the window; it is a mark only when it was kept. Both are measured by
 * tf-session-measure.c. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

enum
{
  MIN_VERTICES = 3
};
static const double step_min_deg = 0.05; /* nearer vertices of a freehand line are left out */
static const double simplify_deg = 0.06; /* of a finished freehand line */

TfTool
tf_session_get_tool (TfSession *self)
{
  return self->tool;
}

void
tf_session_get_line (TfSession *self, const TfVertex **line, guint *n)
{
  *line = (const TfVertex *)(gconstpointer)self->line->data;
  *n = self->line->len;
}

TfOutline *
tf_session_get_draft (TfSession *self)
{
  return self->draft;
}

TfRegionItem *
tf_session_get_replaced (TfSession *self)
{
  return self->replaced;
}

gboolean
tf_session_get_replaces (TfSession *self)
{
  return self->replaced != NULL && self->replaces;
}

void
tf_session_set_replaces (TfSession *self, gboolean replaces)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->replaces == replaces)
    return;
  self->replaces = replaces;
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_drop_draft (TfSession *self)
{
  self->tool = TF_TOOL_NONE;
  g_array_set_size (self->line, 0);
  g_clear_pointer (&self->draft, tf_outline_unref);
  g_clear_object (&self->replaced);
  self->keeping = self->draft_looked = self->slow = FALSE;
  g_clear_pointer (&self->draft_text, g_free);
  tf_session_forget_measure (self);
}

void
tf_session_store_draft (TfSession *self)
{
  if (self->writer == NULL || self->frame_item == NULL || !tf_session_is_writable (self))
    return;
  if (self->person == NULL)
    {
      tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED); /* stored when there is a name */
      return;
    }
  TfDeed *deed = tf_deed_new (TF_DEED_DRAFT, self->person);
  deed->frame = tf_frame_item_get_row (self->frame_item)->id;
  deed->text = self->draft != NULL ? tf_outline_dup_text (self->draft) : NULL;
  tf_writer_push (self->writer, deed);
}

void
tf_session_discard_draft (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  gboolean stored = self->draft != NULL;
  tf_session_drop_draft (self);
  self->draft_looked = TRUE;
  if (stored)
    tf_session_store_draft (self);
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_set_tool (TfSession *self, TfTool tool)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->tool = self->frame != NULL ? tool : TF_TOOL_NONE;
  self->slow = FALSE;
  g_array_set_size (self->line, 0);
  if (self->tool != TF_TOOL_NONE)
    g_clear_pointer (&self->saved, g_free);
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

/* -- the line in hand ------------------------------------------------------------------------ */

void
tf_session_draw_to (TfSession *self, double lon_deg, double lat_deg)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->tool == TF_TOOL_NONE || !isfinite (lon_deg) || !isfinite (lat_deg))
    return;
  TfVertex vertex = { lon_deg, lat_deg };
  if (self->line->len > 0)
    {
      const TfVertex *last = &g_array_index (self->line, TfVertex, self->line->len - 1);
      double away = tf_sphere_distance (last->lon_deg, last->lat_deg, lon_deg, lat_deg);
      if (away < step_min_deg)
        return;
      vertex.lon_deg += 360.0 * round ((last->lon_deg - lon_deg) / 360.0); /* runs on over 0/360 */
    }
  g_array_append_val (self->line, vertex);
}

gboolean
tf_session_take_back_corner (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (self->tool != TF_TOOL_POLYGON || self->line->len == 0)
    return FALSE;
  g_array_set_size (self->line, self->line->len - 1);
  tf_session_measure_line (self);
  return TRUE;
}

/* -- the draft ------------------------------------------------------------------------------- */

static gboolean
holds_region (const TfOutline *outline, TfRegionItem *item)
{
  const TfMeasure *measure = &tf_region_item_get_row (item)->measure;
  double unit[3];
  if (!isfinite (measure->carrington_lon_deg))
    return FALSE;
  tf_sphere_unit (measure->carrington_lon_deg, measure->lat_deg, unit);
  return tf_outline_contains (outline, unit);
}

/* A draft drawn round a hint or mark is offered in its place: the chosen one first. The slip
 * says so and lets it be refused. */
static void
find_replaced (TfSession *self)
{
  g_clear_object (&self->replaced);
  self->replaces = TRUE;
  if (self->region != NULL && holds_region (self->draft, self->region))
    {
      self->replaced = g_object_ref (self->region);
      return;
    }
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n && self->replaced == NULL; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (holds_region (self->draft, item))
        self->replaced = g_steal_pointer (&item);
    }
}

static void
take_draft (TfSession *self, TfOutline *outline)
{
  g_clear_pointer (&self->draft, tf_outline_unref);
  self->draft = outline;
  self->tool = TF_TOOL_NONE;
  self->draft_looked = TRUE;
  g_array_set_size (self->line, 0);
  find_replaced (self);
  tf_session_measure_draft (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

void
tf_session_set_draft (TfSession *self, TfOutline *outline)
{
  g_return_if_fail (TF_IS_SESSION (self) && outline != NULL);
  if (self->frame == NULL)
    return;
  take_draft (self, tf_outline_ref (outline));
  tf_session_store_draft (self);
}

gboolean
tf_session_finish_line (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (self->frame == NULL || self->line->len < MIN_VERTICES)
    {
      g_array_set_size (self->line, 0);
      tf_session_forget_measure (self);
      tf_session_judge_choice (self);
      tf_session_emit (self, TF_SIGNAL_CHOICE);
      return FALSE;
    }
  g_autoptr (GError) error = NULL;
  TfTime time = tf_frame_get_info (self->frame)->time;
  g_autoptr (TfOutline) outline = tf_outline_new (
      time, (const TfVertex *)(gconstpointer)self->line->data, self->line->len, &error);
  gboolean freehand = self->tool == TF_TOOL_OUTLINE;
  g_array_set_size (self->line, 0);
  if (outline == NULL)
    {
      tf_session_say (self, error->message);
      tf_session_emit (self, TF_SIGNAL_CHOICE);
      return FALSE;
    }
  take_draft (self,
              freehand ? tf_outline_simplify (outline, simplify_deg) : tf_outline_ref (outline));
  tf_session_store_draft (self);
  return TRUE;
}

void
tf_session_restore_draft (TfSession *self, const char *text)
{
  if (self->draft_looked || text == NULL || self->draft != NULL || self->line->len > 0)
    return;
  if (self->frame == NULL || self->loading)
    {
      g_free (self->draft_text);
      self->draft_text = g_strdup (text);
      return;
    }
  g_autoptr (TfOutline) outline = tf_outline_from_text (text, NULL);
  self->draft_looked = TRUE;
  if (outline != NULL)
    take_draft (self, tf_outline_ref (outline));
}
