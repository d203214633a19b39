/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What came of a deed once the writer has it, and taking deeds back. */

#include "tf-session-laws-private.h"

#include <glib/gi18n-lib.h>

/* -- undo and redo --------------------------------------------------------------------------- */

static gboolean
has_corner (TfSession *self)
{
  return (self->tool == TF_TOOL_POLYGON || self->tool == TF_TOOL_LEAVE_OUT) && self->line->len > 0;
}

/* First the corner just set, then what was done to the draft, then deeds. */
gboolean
tf_session_can_undo (TfSession *self)
{
  return has_corner (self) || tf_session_can_step_back (self, FALSE)
         || (tf_session_is_writable (self) && self->person != NULL && self->can_undo);
}

gboolean
tf_session_undo (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (tf_session_take_back_corner (self) || tf_session_step_back (self, FALSE))
    return TRUE;
  if (!tf_session_can_undo (self))
    return FALSE;
  tf_session_note_seen (self);
  return tf_session_push_deed (self, tf_session_new_deed (self, TF_DEED_UNDO));
}

gboolean
tf_session_can_redo (TfSession *self)
{
  return tf_session_can_step_back (self, TRUE)
         || (tf_session_is_writable (self) && self->person != NULL && self->can_redo);
}

gboolean
tf_session_redo (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (tf_session_step_back (self, TRUE))
    return TRUE;
  if (!tf_session_can_redo (self))
    return FALSE;
  tf_session_note_seen (self);
  return tf_session_push_deed (self, tf_session_new_deed (self, TF_DEED_REDO));
}

/* -- what came of it ------------------------------------------------------------------------- */

static void
say_undone (TfSession *self, const TfDeed *deed)
{
  const TfUndone *undone = &deed->undone;
  g_autofree char *text
      = g_strdup_printf (deed->kind == TF_DEED_UNDO ? _ ("Undone: %s %s") : _ ("Done again: %s %s"),
                         tf_deed_word (undone->what), undone->region != NULL ? undone->region : "");
  tf_session_say (self, g_strchomp (text));
}

/* What is undone elsewhere is shown where it was. */
static void
go_where_undone (TfSession *self, const TfDeed *deed)
{
  TfFrameItem *item
      = deed->undone.frame != 0 ? tf_session_find_frame (self, deed->undone.frame) : NULL;
  if (item == NULL || item == self->frame_item || deed->frame == deed->undone.frame)
    return;
  tf_session_choose_frame (self, item);
  self->want_new = FALSE;
  g_free (self->want_region);
  self->want_region = g_strdup (deed->undone.region);
}

static void
after_keep (TfSession *self, const TfDeed *deed)
{
  gint64 now = self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->id : 0;
  if (deed->frame != now)
    return;
  if (self->draft != NULL && self->keeping)
    tf_session_discard_draft (self);
  self->want_mark = deed->mark;
  self->want_hint = FALSE;
}

/* Deeds that the laws part counts until they are in the ledger. */
static gboolean
is_of_study (const TfDeed *deed)
{
  return deed->kind == TF_DEED_DIVIDE || deed->kind == TF_DEED_STUDY
         || (deed->kind == TF_DEED_TOGETHER
             && ((TfDeed *)deed->parts->pdata[0])->kind == TF_DEED_STUDY);
}

/* A hint that is kept or dropped changes no passage. */
static gboolean
changes_marks (const TfDeed *deed)
{
  static const guint kinds = 1u << TF_DEED_WITHDRAW | 1u << TF_DEED_LINK | 1u << TF_DEED_CUT
                             | 1u << TF_DEED_UNDO | 1u << TF_DEED_REDO | 1u << TF_DEED_TOGETHER;
  return (kinds >> deed->kind & 1u) != 0
         || (deed->kind == TF_DEED_KEEP && deed->origin != TF_MARK_KEPT);
}

static void
saved (TfWriter *writer, TfDeed *deed, TfSession *self)
{
  self->wrote = self->outdated = TRUE;
  self->can_undo = deed->can_undo;
  self->can_redo = deed->can_redo;
  if (deed->kind == TF_DEED_DRAFT)
    {
      if (self->draft == NULL && !self->draft_looked) /* a draft waits on this frame, perhaps */
        tf_session_refresh (self, FALSE);
      tf_session_emit (self, TF_SIGNAL_STATUS);
      return;
    }
  if (is_of_study (deed))
    tf_session_divide_saved (self);
  self->passages_due = self->passages_due || changes_marks (deed);
  if (deed->kind == TF_DEED_KEEP || deed->mark != 0)
    after_keep (self, deed);
  else if (deed->kind == TF_DEED_DROP)
    self->want_next_hint = TRUE;
  else if (deed->kind == TF_DEED_UNDO || deed->kind == TF_DEED_REDO)
    {
      self->want_new = TRUE;
      say_undone (self, deed);
      go_where_undone (self, deed);
    }
  g_free (self->saved);
  self->saved = g_strdup (_ ("saved"));
  tf_session_refresh (self, deed->kind == TF_DEED_UNDO || deed->kind == TF_DEED_REDO);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static void
refused (TfWriter *writer, TfDeed *deed, const char *message, TfSession *self)
{
  self->keeping = FALSE;
  if (is_of_study (deed))
    tf_session_divide_saved (self);
  self->judging = 0;
  tf_session_forget_hoped (self);
  g_clear_pointer (&self->saved, g_free);
  tf_session_say (self, message);
  tf_session_refresh (self, FALSE);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static void
writer_changed (TfSession *self)
{
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

void
tf_session_connect_writer (TfSession *self)
{
  g_signal_connect (self->writer, "saved", G_CALLBACK (saved), self);
  g_signal_connect (self->writer, "refused", G_CALLBACK (refused), self);
  g_signal_connect_swapped (self->writer, "notify", G_CALLBACK (writer_changed), self);
}

guint
tf_session_get_pending (TfSession *self)
{
  return self->writer != NULL ? tf_writer_get_pending (self->writer) : 0;
}

const char *
tf_session_get_saved (TfSession *self)
{
  return self->saved;
}

const char *
tf_session_get_problem (TfSession *self)
{
  return self->writer != NULL ? tf_writer_get_problem (self->writer) : NULL;
}

void
tf_session_retry (TfSession *self)
{
  if (self->writer != NULL)
    tf_writer_retry (self->writer);
}

void
tf_session_give_up (TfSession *self)
{
  if (self->writer == NULL)
    return;
  tf_session_forget_hoped (self);
  tf_session_divide_saved (self);
  self->keeping = FALSE; /* the draft stays on the plate */
  self->judging = 0;
  g_clear_pointer (&self->saved, g_free);
  tf_writer_give_up (self->writer);
  tf_session_refresh (self, FALSE);
}
