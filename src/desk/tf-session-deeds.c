/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What a person does: each deed is handed to the writer; the plate and the roll show it when the
 * ledger has it. */

#include "tf-session-laws-private.h"

#include <string.h>
#include <glib/gi18n-lib.h>

static gboolean
has_person (TfSession *self)
{
  if (self->person == NULL)
    tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
  return self->person != NULL;
}

static TfDeed *
deed_new (TfSession *self, TfDeedKind kind)
{
  TfDeed *deed = tf_deed_new (kind, self->person);
  if (self->frame_item != NULL)
    deed->frame = tf_frame_item_get_row (self->frame_item)->id;
  return deed;
}

static gboolean
push (TfSession *self, TfDeed *deed)
{
  g_free (self->saved);
  self->saved = g_strdup (_ ("saving…"));
  tf_writer_push (self->writer, deed);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  return TRUE;
}

void
tf_session_push_deed (TfSession *self, TfDeed *deed)
{
  push (self, deed);
}

static const TfRow *
chosen_row (TfSession *self)
{
  return self->region != NULL ? tf_region_item_get_row (self->region) : NULL;
}

/* -- keep, drop, withdraw -------------------------------------------------------------------- */

gboolean
tf_session_can_keep (TfSession *self)
{
  if (!tf_session_is_writable (self) || self->keeping || self->line->len > 0)
    return FALSE;
  if (self->draft != NULL)
    return self->measured;
  const TfRow *row = chosen_row (self);
  return row != NULL && row->is_hint && row->mark != self->judging;
}

static void
fill_from_hint (TfDeed *deed, const TfRow *row)
{
  deed->hint = row->mark;
  deed->origin = TF_MARK_KEPT;
  deed->outline = tf_outline_ref (row->outline);
  tf_measure_copy (&deed->measure, &row->measure);
  deed->method = g_strdup (row->method);
}

static void
fill_from_draft (TfSession *self, TfDeed *deed)
{
  deed->origin = TF_MARK_DRAWN;
  if (tf_session_get_replaces (self))
    {
      const TfRow *row = tf_region_item_get_row (self->replaced);
      deed->origin = TF_MARK_CHANGED;
      *(row->is_hint ? &deed->hint : &deed->follows) = row->mark;
    }
  deed->outline = tf_outline_ref (self->draft);
  tf_measure_copy (&deed->measure, &self->measure);
  deed->method = g_strdup (self->method);
}

gboolean
tf_session_keep (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_keep (self) || !has_person (self))
    return FALSE;
  if (self->draft == NULL && tf_session_is_elsewhere (chosen_row (self)))
    {
      g_autoptr (TfRegionItem) hint = g_object_ref (self->region);
      tf_session_set_draft (self, chosen_row (self)->outline);
      g_set_object (&self->replaced, hint);
      tf_session_emit (self, TF_SIGNAL_CHOICE);
      tf_session_say (self, _ ("The geometry of this frame was corrected: the hint is measured "
                               "anew as a draft. K keeps it."));
      return TRUE;
    }
  TfDeed *deed = deed_new (self, TF_DEED_KEEP);
  if (self->draft != NULL)
    {
      fill_from_draft (self, deed);
      self->keeping = TRUE;
    }
  else
    {
      fill_from_hint (deed, chosen_row (self));
      self->judging = deed->hint;
    }
  return push (self, deed);
}

gboolean
tf_session_can_drop (TfSession *self)
{
  const TfRow *row = chosen_row (self);
  return tf_session_is_writable (self) && self->draft == NULL && row != NULL && row->is_hint
         && row->mark != self->judging;
}

gboolean
tf_session_drop (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_drop (self) || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_new (self, TF_DEED_DROP);
  self->judging = deed->hint = chosen_row (self)->mark;
  return push (self, deed);
}

gboolean
tf_session_can_describe (TfSession *self)
{
  const TfRow *row = chosen_row (self);
  return tf_session_is_writable (self) && self->draft == NULL && row != NULL && !row->is_hint;
}

gboolean
tf_session_can_withdraw (TfSession *self)
{
  return tf_session_can_describe (self) && chosen_row (self)->mark != self->judging;
}

gboolean
tf_session_withdraw (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_withdraw (self) || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_new (self, TF_DEED_WITHDRAW);
  self->judging = deed->follows = chosen_row (self)->mark;
  return push (self, deed);
}

/* -- note and class -------------------------------------------------------------------------- */

gboolean
tf_session_set_note (TfSession *self, const char *text)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && text != NULL, FALSE);
  return tf_session_can_describe (self) && tf_session_set_note_of (self, self->region, text);
}

gboolean
tf_session_set_note_of (TfSession *self, TfRegionItem *region, const char *text)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && TF_IS_REGION_ITEM (region) && text != NULL, FALSE);
  const TfRow *row = tf_region_item_get_row (region);
  if (!tf_session_is_writable (self) || row->is_hint || strcmp (row->note, text) == 0
      || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_new (self, TF_DEED_NOTE);
  deed->region = row->region_key;
  deed->text = g_strdup (text);
  return push (self, deed);
}

/* "δ" is put to or taken from the class that stands; α with δ is no class. */
static char *
class_after (const char *now, const char *key)
{
  gboolean delta = strstr (now, "δ") != NULL;
  g_autofree char *base = g_strdup (now);
  char *at = strstr (base, "δ");
  if (at != NULL)
    *at = '\0';
  if (strcmp (key, "") == 0)
    return g_strdup ("");
  if (strcmp (key, "δ") == 0)
    return g_strconcat (base, delta ? "" : "δ", NULL);
  return g_strconcat (key, delta && strcmp (key, "α") != 0 ? "δ" : "", NULL);
}

static const char *
class_now (TfSession *self, const TfRow *row)
{
  gboolean hoped = self->class_hoped != NULL && self->class_region == row->region_key;
  return hoped ? self->class_hoped : row->mw_class;
}

void
tf_session_forget_hoped (TfSession *self)
{
  g_clear_pointer (&self->class_hoped, g_free);
}

gboolean
tf_session_set_class (TfSession *self, const char *key)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && key != NULL, FALSE);
  if (!tf_session_can_describe (self))
    return FALSE;
  const TfRow *row = chosen_row (self);
  g_autofree char *text = class_after (class_now (self, row), key);
  if (strcmp (text, "αδ") == 0 || strcmp (text, "δ") == 0)
    {
      tf_session_say (self, _ ("δ needs two polarities: give β, βγ or γ first."));
      return FALSE;
    }
  if (strcmp (text, class_now (self, row)) == 0 || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_new (self, TF_DEED_CLASS);
  deed->region = self->class_region = row->region_key;
  g_free (self->class_hoped);
  self->class_hoped = g_strdup (text);
  deed->text = g_steal_pointer (&text);
  return push (self, deed);
}

/* -- undo and redo --------------------------------------------------------------------------- */

gboolean
tf_session_can_undo (TfSession *self)
{
  if (self->tool == TF_TOOL_POLYGON && self->line->len > 0)
    return TRUE;
  return tf_session_is_writable (self) && self->person != NULL && self->can_undo;
}

gboolean
tf_session_undo (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (tf_session_take_back_corner (self))
    return TRUE;
  if (!tf_session_can_undo (self))
    return FALSE;
  return push (self, deed_new (self, TF_DEED_UNDO));
}

gboolean
tf_session_can_redo (TfSession *self)
{
  return tf_session_is_writable (self) && self->person != NULL && self->can_redo;
}

gboolean
tf_session_redo (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  return tf_session_can_redo (self) && push (self, deed_new (self, TF_DEED_REDO));
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

static void
saved (TfWriter *writer, TfDeed *deed, TfSession *self)
{
  self->wrote = TRUE;
  self->can_undo = deed->can_undo;
  self->can_redo = deed->can_redo;
  if (deed->kind == TF_DEED_DRAFT)
    {
      tf_session_emit (self, TF_SIGNAL_STATUS);
      return;
    }
  if (deed->kind == TF_DEED_DIVIDE)
    tf_session_divide_saved (self);
  if (deed->kind == TF_DEED_KEEP)
    after_keep (self, deed);
  else if (deed->kind == TF_DEED_DROP)
    self->want_next_hint = TRUE;
  else if (deed->kind == TF_DEED_UNDO || deed->kind == TF_DEED_REDO)
    {
      self->want_new = TRUE;
      say_undone (self, deed);
    }
  g_free (self->saved);
  self->saved = g_strdup (_ ("saved"));
  tf_session_refresh (self, deed->kind == TF_DEED_UNDO || deed->kind == TF_DEED_REDO);
  tf_session_emit (self, TF_SIGNAL_STATUS);
}

static void
refused (TfWriter *writer, TfDeed *deed, const char *message, TfSession *self)
{
  if (deed->kind == TF_DEED_KEEP)
    self->keeping = FALSE;
  if (deed->kind == TF_DEED_DIVIDE)
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
}
