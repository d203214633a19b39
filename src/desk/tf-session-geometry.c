/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Where the disk of the frame is: as the header has it, as the person corrected it, as is being
 * tried. What was measured under another geometry than the one shown lies round the same pixels. */

#include "tf-session-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-witness.h"

static const char elsewhere[] = "measured-elsewhere";

/* -- what is known --------------------------------------------------------------------------- */

const TfGeometry *
tf_session_get_header_geometry (TfSession *self)
{
  return self->frame_item != NULL ? &tf_frame_item_get_row (self->frame_item)->info->geometry : NULL;
}

TfCorrection
tf_session_get_correction (TfSession *self)
{
  return self->correction;
}

gboolean
tf_session_can_correct (TfSession *self)
{
  const TfGeometry *header = tf_session_get_header_geometry (self);
  TfGeometry corrected;
  if (self->frame == NULL || header == NULL)
    return FALSE;
  TfCorrection same = tf_correction_of (header);
  return tf_correction_is_set (&same) && tf_correction_apply (&same, header, &corrected);
}

void
tf_session_update_method (TfSession *self)
{
  g_free (self->method);
  self->method = tf_measure_dup_method (&self->params, &self->correction);
}

void
tf_session_check_geometry (TfSession *self)
{
  if (self->frame_item == NULL)
    return;
  if (self->look_again && !tf_session_is_file_missing (self))
    {
      self->look_again = FALSE;
      if (self->frame == NULL && !self->loading)
        tf_session_reopen_frame (self);
    }
  TfCorrection now
      = tf_frame_row_get_correction (tf_frame_item_get_row (self->frame_item), self->person);
  if (tf_correction_equal (&now, &self->correction))
    return;
  self->correction = now;
  self->preview = tf_correction_none ();
  tf_session_update_method (self);
  tf_session_reopen_frame (self);
  tf_session_refresh (self, FALSE); /* the outlines move */
}

/* -- outlines of another geometry ------------------------------------------------------------ */

static gboolean
geometry_under (TfSession *self, const TfCorrection *correction, TfGeometry *geometry)
{
  const TfGeometry *header = tf_session_get_header_geometry (self);
  if (header == NULL)
    return FALSE;
  *geometry = *header;
  return !tf_correction_is_set (correction) || tf_correction_apply (correction, header, geometry);
}

void
tf_session_move_row (TfSession *self, TfRow *row)
{
  TfMeasureParams params;
  TfCorrection its;
  TfGeometry from, to;
  if (row->outline == NULL || !tf_measure_read_method (row->method, &params, &its)
      || tf_correction_equal (&its, &self->correction))
    return;
  TfOutline *moved = geometry_under (self, &its, &from)
                             && geometry_under (self, &self->correction, &to)
                         ? tf_outline_between (row->outline, &from, &to)
                         : NULL;
  if (moved != NULL)
    {
      tf_outline_unref (row->outline);
      row->outline = moved;
    }
  if (row->measure.cautions == NULL)
    row->measure.cautions = tf_notes_new ();
  tf_notes_add (row->measure.cautions, elsewhere, "");
}

void
tf_session_move_draft (TfSession *self, TfFrame *frame)
{
  if (self->draft == NULL || self->frame == NULL)
    return;
  TfOutline *moved = tf_outline_between (self->draft, tf_frame_get_geometry (self->frame),
                                         tf_frame_get_geometry (frame));
  if (moved == NULL)
    return;
  tf_outline_unref (self->draft);
  self->draft = moved;
  tf_session_forget_measure (self);
  tf_session_store_draft (self);
}

gboolean
tf_session_is_elsewhere (const TfRow *row)
{
  return tf_notes_find (row->measure.cautions, elsewhere) != NULL;
}

static gboolean
is_own_elsewhere (TfSession *self, const TfRow *row)
{
  return !row->is_hint && g_strcmp0 (row->person, self->person) == 0
         && tf_session_is_elsewhere (row);
}

guint
tf_session_count_elsewhere (TfSession *self)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions)), found = 0;
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      found += is_own_elsewhere (self, tf_region_item_get_row (item)) ? 1 : 0;
    }
  return found;
}

/* -- measuring again ------------------------------------------------------------------------- */

typedef struct
{
  TfFrame *frame;
  TfMeasureParams params;
  GPtrArray *deeds; /* TfDeed: outline given, measure to be found */
} Again;

static void
again_free (gpointer data)
{
  Again *again = data;
  tf_frame_unref (again->frame);
  g_ptr_array_unref (again->deeds);
  g_free (again);
}

static void
measure_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Again *again = data;
  for (guint k = again->deeds->len; k > 0; k--)
    {
      TfDeed *deed = g_ptr_array_index (again->deeds, k - 1);
      if (!tf_measure_region (&deed->measure, again->frame, deed->outline, &again->params, NULL))
        g_ptr_array_remove_index (again->deeds, k - 1);
    }
  g_task_return_boolean (task, TRUE);
}

static void
measured_again (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  Again *again = g_task_get_task_data (G_TASK (result));
  if (again->frame != self->frame || self->writer == NULL)
    return; /* gone on meanwhile */
  while (again->deeds->len > 0)
    tf_writer_push (self->writer, g_ptr_array_steal_index (again->deeds, 0));
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static TfDeed *
deed_for (TfSession *self, const TfRow *row)
{
  TfDeed *deed = tf_deed_new (TF_DEED_KEEP, self->person);
  deed->frame = row->frame;
  deed->follows = row->mark;
  deed->origin = TF_MARK_CHANGED;
  deed->outline = tf_outline_ref (row->outline);
  deed->method = g_strdup (self->method);
  return deed;
}

gboolean
tf_session_measure_again (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_is_writable (self) || self->person == NULL || self->frame == NULL
      || self->loading || tf_session_count_elsewhere (self) == 0)
    return FALSE;
  Again *again = g_new0 (Again, 1);
  again->frame = tf_frame_ref (self->frame);
  again->params = self->params;
  again->params.outline_term = TRUE;
  again->deeds = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_deed_free);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      const TfRow *row = tf_region_item_get_row (item);
      if (is_own_elsewhere (self, row))
        g_ptr_array_add (again->deeds, deed_for (self, row));
    }
  g_autoptr (GTask) task = g_task_new (NULL, NULL, measured_again, g_object_ref (self));
  g_task_set_task_data (task, again, again_free);
  g_task_run_in_thread (task, measure_in_thread);
  return TRUE;
}

/* -- trying and keeping ---------------------------------------------------------------------- */

void
tf_session_set_preview (TfSession *self, const TfCorrection *correction)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfCorrection next = correction != NULL ? *correction : tf_correction_none ();
  if (tf_correction_equal (&next, &self->preview))
    return;
  self->preview = next;
  tf_session_emit (self, TF_SIGNAL_OVERLAYS);
}

TfCorrection
tf_session_get_preview (TfSession *self)
{
  return self->preview;
}

typedef struct
{
  TfFrame *frame;
  TfLimbFit fit;
} Limb;

static void
limb_free (gpointer data)
{
  Limb *limb = data;
  tf_frame_unref (limb->frame);
  g_free (limb);
}

static void
fit_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Limb *limb = data;
  limb->fit = tf_limb_fit (tf_frame_get_pixels (limb->frame), tf_frame_get_geometry (limb->frame));
  g_task_return_boolean (task, TRUE);
}

static void
limb_fitted (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  const Limb *limb = g_task_get_task_data (G_TASK (result));
  if (limb->frame != self->frame)
    return;
  if (!limb->fit.found)
    {
      tf_session_say (self, _ ("No limb could be found in the pixels: too little of it is in the "
                               "picture. Put the circle by hand."));
      return;
    }
  TfCorrection next = tf_correction_is_set (&self->preview)
                          ? self->preview
                          : tf_correction_of (tf_frame_get_geometry (self->frame));
  next.centre_x = limb->fit.centre_x;
  next.centre_y = limb->fit.centre_y;
  next.radius_px = limb->fit.radius_px;
  tf_session_set_preview (self, &next);
}

void
tf_session_fit_limb (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (!tf_session_can_correct (self))
    return;
  Limb *limb = g_new0 (Limb, 1);
  limb->frame = tf_frame_ref (self->frame);
  g_autoptr (GTask) task = g_task_new (NULL, NULL, limb_fitted, g_object_ref (self));
  g_task_set_task_data (task, limb, limb_free);
  g_task_run_in_thread (task, fit_in_thread);
}

gboolean
tf_session_keep_geometry (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_correct (self) || !tf_session_is_writable (self)
      || !tf_correction_is_set (&self->preview))
    return FALSE;
  if (self->person == NULL)
    {
      tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
      return FALSE;
    }
  TfCorrection header = tf_correction_of (tf_session_get_header_geometry (self));
  gboolean back = tf_correction_equal (&header, &self->preview);
  TfCorrection none = tf_correction_none ();
  if (tf_correction_equal (back ? &none : &self->preview, &self->correction))
    return FALSE;
  TfDeed *deed = tf_deed_new (TF_DEED_GEOMETRY, self->person);
  deed->frame = tf_frame_item_get_row (self->frame_item)->id;
  deed->text = tf_correction_dup_text (back ? &none : &self->preview);
  tf_writer_push (self->writer, deed);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  return TRUE;
}
