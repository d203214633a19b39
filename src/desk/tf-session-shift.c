/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The forecaster's list: read beside the main thread whenever the ledger or the frame on the plate
 * changes and the list is in sight; what a desk hands over; sheets as files. */

#include "tf-session-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-sheets.h"

/* -- the list ---------------------------------------------------------------------------------- */

static gpointer
read_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  return tf_shift_read (ledger, *(const gint64 *)data, error);
}

static gint64
frame_on_plate (TfSession *self)
{
  const TfFrameRow *row = self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item) : NULL;
  return row != NULL && row->refusal == NULL && !tf_geometry_is_map (&row->info->geometry)
                 && tf_time_is_known (row->info->time)
             ? row->id
             : 0;
}

void
tf_session_take_shift (TfSession *self, TfShift *shift)
{
  g_clear_pointer (&self->shift, tf_shift_free);
  self->shift = shift;
  tf_session_emit (self, TF_SIGNAL_SHIFT);
}

static void
read_done (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  g_autoptr (GError) error = NULL;
  TfShift *shift = tf_lane_finish (result, &error);
  self->shift_asked--;
  if (self->shift_asked > 0 || g_task_get_cancellable (G_TASK (result)) != self->reading)
    tf_shift_free (shift); /* a newer one is on its way, or the ledger was let go */
  else
    tf_session_take_shift (self, shift);
}

void
tf_session_update_shift (TfSession *self)
{
  gint64 frame = frame_on_plate (self);
  if (!self->list_shown || self->reader == NULL)
    return;
  if (frame == 0)
    {
      tf_session_take_shift (self, NULL);
      return;
    }
  self->shift_asked++;
  tf_lane_push (self->reader, self, self->reading, read_in_lane, g_memdup2 (&frame, sizeof frame),
                g_free, (GDestroyNotify)tf_shift_free, read_done, NULL);
}

void
tf_session_set_list_shown (TfSession *self, gboolean shown)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->list_shown == (shown != FALSE))
    return;
  self->list_shown = shown != FALSE;
  tf_session_emit (self, TF_SIGNAL_SHIFT);
  tf_session_update_shift (self);
}

gboolean
tf_session_get_list_shown (TfSession *self)
{
  return self->list_shown;
}

const TfShift *
tf_session_get_shift (TfSession *self)
{
  gboolean fits = self->shift != NULL && self->shift->frame == frame_on_plate (self);
  return fits ? self->shift : NULL;
}

const TfShiftRow *
tf_session_get_shift_row (TfSession *self)
{
  const TfShift *shift = tf_session_get_shift (self);
  const TfRow *chosen = self->region != NULL ? tf_region_item_get_row (self->region) : NULL;
  for (guint k = 0; shift != NULL && chosen != NULL && k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      if (chosen->is_hint ? row->is_hint && row->mark == chosen->mark
                          : row->region == chosen->region_key)
        return row;
    }
  return NULL;
}

gboolean
tf_session_choose_mark (TfSession *self, gint64 mark, gboolean is_hint)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; mark != 0 && k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (!tf_region_item_is (item, mark, is_hint))
        continue;
      tf_session_choose_region (self, item);
      return TRUE;
    }
  return FALSE;
}

/* In the list's order, from the chosen one; what is not on the frame is passed over. */
gboolean
tf_session_step_listed (TfSession *self, int step)
{
  const TfShift *shift = tf_session_get_shift (self);
  const TfShiftRow *now = tf_session_get_shift_row (self);
  int n = shift != NULL ? (int)shift->rows->len : 0, at = step > 0 ? -1 : n;
  for (int k = 0; k < n; k++)
    if (g_ptr_array_index (shift->rows, k) == now)
      at = k;
  for (at += step; at >= 0 && at < n; at += step)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, at);
      if (tf_session_choose_mark (self, row->mark, row->is_hint))
        return TRUE;
    }
  return FALSE;
}

gboolean
tf_session_choose_newest (TfSession *self)
{
  GListModel *list = G_LIST_MODEL (self->shown);
  for (guint k = g_list_model_get_n_items (list); k > 0; k--)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (list, k - 1);
      if (tf_frame_item_get_state (item) == TF_FRAME_REFUSED)
        continue;
      tf_session_choose_frame (self, item);
      return TRUE;
    }
  return FALSE;
}

/* -- deeds of a shift -------------------------------------------------------------------------- */

static gboolean
can_write (TfSession *self)
{
  if (!tf_session_is_writable (self))
    return FALSE;
  if (self->person == NULL)
    tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
  return self->person != NULL;
}

static const TfRegionNote *
open_note (TfSession *self)
{
  const TfShiftRow *row = tf_session_get_shift_row (self);
  for (guint k = 0; row != NULL && k < row->notes->len; k++)
    {
      const TfRegionNote *note = g_ptr_array_index (row->notes, k);
      if (!note->resolved)
        return note;
    }
  return NULL;
}

gboolean
tf_session_can_settle (TfSession *self)
{
  return tf_session_is_writable (self) && open_note (self) != NULL;
}

gboolean
tf_session_settle (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  const TfRegionNote *note = open_note (self);
  if (note == NULL || !can_write (self))
    return FALSE;
  TfDeed *deed = tf_deed_new (TF_DEED_SETTLE, self->person);
  deed->region = note->region;
  deed->author = note->author;
  return tf_session_push_deed (self, deed);
}

gboolean
tf_session_hand_over (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  return can_write (self) && tf_session_push_deed (self, tf_deed_new (TF_DEED_HAND_OVER, self->person));
}

static const TfOthers *
first_proposed (TfSession *self)
{
  const TfShiftRow *row = tf_session_get_shift_row (self);
  return row != NULL && row->region != 0 && row->proposed->len > 0
             ? g_ptr_array_index (row->proposed, 0)
             : NULL;
}

gboolean
tf_session_can_confirm (TfSession *self)
{
  return tf_session_is_writable (self) && first_proposed (self) != NULL;
}

gboolean
tf_session_confirm (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  const TfOthers *others = first_proposed (self);
  if (others == NULL || !can_write (self))
    return FALSE;
  TfDeed *deed = tf_deed_new (TF_DEED_EXTERNAL, self->person);
  deed->region = tf_session_get_shift_row (self)->region;
  deed->text = g_strdup (others->number);
  return tf_session_push_deed (self, deed);
}

gboolean
tf_session_bring (TfSession *self, const char *path)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && path != NULL, FALSE);
  if (!can_write (self))
    return FALSE;
  TfDeed *deed = tf_deed_new (TF_DEED_BRING, self->person);
  deed->text = g_strdup (path);
  return tf_session_push_deed (self, deed);
}

/* Drawn outlines have no figures yet: they follow the mark, behind what is still to be written. */
static void
kept (TfWriter *writer, TfDeed *deed, TfSession *self)
{
  gboolean drawn = deed->kind == TF_DEED_KEEP && deed->origin != TF_MARK_KEPT;
  if (!drawn && deed->kind != TF_DEED_TOGETHER)
    return;
  TfDeed *tangle = tf_deed_new (TF_DEED_TANGLE, deed->person);
  tangle->frame = deed->frame != 0 || deed->parts == NULL || deed->parts->len == 0
                      ? deed->frame
                      : ((TfDeed *)g_ptr_array_index (deed->parts, 0))->frame;
  tf_writer_push (self->writer, tangle);
}

void
tf_session_connect_shift (TfSession *self)
{
  g_signal_connect (self->writer, "saved", G_CALLBACK (kept), self);
}

/* -- sheets ------------------------------------------------------------------------------------ */

typedef struct
{
  char *path, *who;
  gint64 frame;
  gint64 mark; /* 0: the shift sheet */
  gboolean is_hint;
  TfFrame *pixels;
  TfMeasureParams measure;
  double range_gauss;
} Sheet;

static void
sheet_free (gpointer data)
{
  Sheet *sheet = data;
  g_free (sheet->path);
  g_free (sheet->who);
  g_clear_pointer (&sheet->pixels, tf_frame_unref);
  g_free (sheet);
}

static const TfShiftRow *
find_row (const TfShift *shift, const TfRow *of)
{
  for (guint k = 0; k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      if (of->is_hint ? row->is_hint && row->mark == of->mark : row->region == of->region_key)
        return row;
    }
  return NULL;
}

static gboolean
write_region (const Sheet *sheet, TfLedger *ledger, const TfShift *shift, GError **error)
{
  g_autoptr (TfRow) row = tf_ledger_row (ledger, sheet->mark, sheet->is_hint, error);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  if (row == NULL)
    return FALSE;
  const TfRegionPage page = { .frame = sheet->pixels,
                              .row = row,
                              .shift = find_row (shift, row),
                              .since = shift->since,
                              .study = study,
                              .measure = sheet->measure,
                              .range_gauss = sheet->range_gauss,
                              .who = sheet->who };
  return tf_region_page_write (sheet->path, &page, error);
}

static gpointer
write_in_lane (TfLedger *ledger, gpointer data, GError **error)
{
  const Sheet *sheet = data;
  g_autoptr (TfShift) shift = tf_shift_read (ledger, sheet->frame, error);
  if (shift == NULL)
    return NULL;
  gboolean done = sheet->mark != 0 ? write_region (sheet, ledger, shift, error)
                                   : tf_shift_write (sheet->path, shift, sheet->who, error);
  return done ? g_strdup (sheet->path) : NULL;
}

static void
written (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *path = tf_lane_finish (result, &error);
  g_autofree char *text = path != NULL ? g_strdup_printf (_ ("The sheet is saved as %s."), path)
                                       : g_strdup (error->message);
  tf_session_say (TF_SESSION (source), text);
}

static gboolean
write_sheet (TfSession *self, const char *path, const TfRow *row)
{
  gint64 frame = frame_on_plate (self);
  if (frame == 0 || self->reader == NULL)
    return FALSE;
  Sheet *sheet = g_new0 (Sheet, 1);
  sheet->path = g_strdup (path);
  sheet->who = g_strdup (self->person);
  sheet->frame = frame;
  sheet->mark = row != NULL ? row->mark : 0;
  sheet->is_hint = row != NULL && row->is_hint;
  sheet->pixels = row != NULL ? tf_frame_ref (self->frame) : NULL;
  sheet->measure = self->params;
  sheet->range_gauss = self->range;
  tf_lane_push (self->reader, self, self->reading, write_in_lane, sheet, sheet_free, g_free, written,
                NULL);
  return TRUE;
}

gboolean
tf_session_write_shift (TfSession *self, const char *path)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && path != NULL, FALSE);
  return write_sheet (self, path, NULL);
}

gboolean
tf_session_can_write_region (TfSession *self)
{
  return self->reader != NULL && self->frame != NULL && self->region != NULL
         && frame_on_plate (self) != 0;
}

gboolean
tf_session_write_region (TfSession *self, const char *path)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && path != NULL, FALSE);
  return tf_session_can_write_region (self)
         && write_sheet (self, path, tf_region_item_get_row (self->region));
}
