/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Drawing: the line in hand and the draft that it becomes. The draft is kept in the ledger as a
 * draft, so that it outlives the window; it is a mark only when it was kept. Both are measured by
 * tf-session-measure.c. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"

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
  g_clear_pointer (&self->other, tf_outline_unref);
  g_clear_pointer (&self->stroke_before, tf_outline_unref);
  g_ptr_array_set_size (self->joined, 0);
  self->other_measured = self->brushing = FALSE;
  self->keeping = self->draft_looked = self->slow = FALSE;
  g_clear_pointer (&self->draft_text, g_free);
  tf_session_forget_measure (self);
}

/* -- as text ---------------------------------------------------------------------------------- */

static void
build_taken (JsonBuilder *builder, TfRegionItem *item)
{
  const TfRow *row = tf_region_item_get_row (item);
  json_builder_begin_object (builder);
  tf_json_int (builder, row->is_hint ? "hint" : "mark", row->mark);
  json_builder_end_object (builder);
}

/* {draft, other, replaces, joined}: keys are local, and so is a draft. */
static char *
dup_draft_text (TfSession *self)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "draft");
  tf_outline_build_json (self->draft, builder);
  json_builder_set_member_name (builder, "other");
  if (self->other != NULL)
    tf_outline_build_json (self->other, builder);
  else
    json_builder_add_null_value (builder);
  json_builder_set_member_name (builder, "replaces");
  if (self->replaced != NULL)
    build_taken (builder, self->replaced);
  else
    json_builder_add_null_value (builder);
  tf_json_bool (builder, "in_place", self->replaces);
  json_builder_set_member_name (builder, "joined");
  json_builder_begin_array (builder);
  for (guint k = 0; k < self->joined->len; k++)
    build_taken (builder, self->joined->pdata[k]);
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  return tf_json_node_dup_text (root, FALSE);
}

static TfRegionItem *
find_taken (TfSession *self, JsonNode *node)
{
  if (node == NULL || !JSON_NODE_HOLDS_OBJECT (node))
    return NULL;
  JsonObject *object = json_node_get_object (node);
  gboolean hint = json_object_has_member (object, "hint");
  gint64 key = tf_json_member_int (object, hint ? "hint" : "mark", 0);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (tf_region_item_is (item, key, hint))
        return item; /* the list holds it */
    }
  return NULL;
}

static TfOutline *
read_outline (JsonObject *object, const char *name)
{
  JsonNode *node = json_object_get_member (object, name);
  return node != NULL && JSON_NODE_HOLDS_OBJECT (node) ? tf_outline_read_json (node, NULL) : NULL;
}

static void
read_joined (TfSession *self, JsonObject *object)
{
  JsonArray *joined = tf_json_member_array (object, "joined");
  for (guint k = 0; joined != NULL && k < json_array_get_length (joined); k++)
    {
      TfRegionItem *item = find_taken (self, json_array_get_element (joined, k));
      if (item != NULL)
        g_ptr_array_add (self->joined, g_object_ref (item));
    }
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
  deed->text = self->draft != NULL ? dup_draft_text (self) : NULL;
  tf_writer_push (self->writer, deed);
}

void
tf_session_discard_draft (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  gboolean given_up = self->draft != NULL && !self->keeping; /* else the ledger knows that it was kept */
  if (given_up)
    tf_session_remember (self);
  tf_session_drop_draft (self);
  self->draft_looked = TRUE;
  if (given_up)
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
  if (self->tool == TF_TOOL_SPLIT && self->line->len > 1)
    g_array_set_size (self->line, 1); /* its other end moves */
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
  if ((self->tool != TF_TOOL_POLYGON && self->tool != TF_TOOL_LEAVE_OUT) || self->line->len == 0)
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
  g_clear_pointer (&self->other, tf_outline_unref);
  g_ptr_array_set_size (self->joined, 0);
  self->other_measured = FALSE;
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
  tf_session_remember (self);
  take_draft (self, tf_outline_ref (outline));
  tf_session_store_draft (self);
}

static gboolean
drop_line (TfSession *self)
{
  g_array_set_size (self->line, 0);
  if (self->draft != NULL)
    tf_session_measure_draft (self);
  else
    tf_session_forget_measure (self);
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  return FALSE;
}

/* The line as a new outline. */
static gboolean
finish_outline (TfSession *self)
{
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
  tf_session_remember (self);
  take_draft (self,
              freehand ? tf_outline_simplify (outline, simplify_deg) : tf_outline_ref (outline));
  tf_session_store_draft (self);
  return TRUE;
}

gboolean
tf_session_finish_line (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfTool tool = self->tool;
  guint n = self->line->len;
  if (self->frame == NULL || n < (tool == TF_TOOL_SPLIT ? 2 : MIN_VERTICES))
    return drop_line (self);
  if (tool != TF_TOOL_SPLIT && tool != TF_TOOL_LEAVE_OUT)
    return finish_outline (self);
  g_autofree TfVertex *line = g_memdup2 (self->line->data, n * sizeof *line);
  g_array_set_size (self->line, 0);
  gboolean done = tool == TF_TOOL_SPLIT ? tf_session_split (self, line[0], line[n - 1])
                                        : tf_session_leave_out (self, line, n);
  return done || drop_line (self);
}

static gboolean
restore_from (TfSession *self, JsonNode *root)
{
  JsonObject *object = json_node_get_object (root);
  g_autoptr (TfOutline) draft = read_outline (object, "draft");
  if (draft == NULL)
    return FALSE;
  take_draft (self, tf_outline_ref (draft));
  g_set_object (&self->replaced, find_taken (self, json_object_get_member (object, "replaces")));
  self->replaces = tf_json_member_bool (object, "in_place", TRUE);
  read_joined (self, object);
  self->other = read_outline (object, "other");
  if (self->other != NULL)
    tf_session_measure_draft (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
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
  self->draft_looked = TRUE;
  g_autoptr (JsonNode) root = json_from_string (text, NULL);
  if (root != NULL && JSON_NODE_HOLDS_OBJECT (root)
      && json_object_has_member (json_node_get_object (root), "draft"))
    {
      restore_from (self, root);
      return;
    }
  g_autoptr (TfOutline) outline = tf_outline_from_text (text, NULL); /* of an older version */
  if (outline != NULL)
    take_draft (self, tf_outline_ref (outline));
}
