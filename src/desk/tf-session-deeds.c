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

TfDeed *
tf_session_new_deed (TfSession *self, TfDeedKind kind)
{
  TfDeed *deed = tf_deed_new (kind, self->person);
  if (self->frame_item != NULL)
    deed->frame = tf_frame_item_get_row (self->frame_item)->id;
  return deed;
}

gboolean
tf_session_push_deed (TfSession *self, TfDeed *deed)
{
  if (deed->kind != TF_DEED_UNDO && deed->kind != TF_DEED_REDO)
    tf_session_forget_history (self);
  g_free (self->saved);
  self->saved = g_strdup (_ ("saving…"));
  tf_writer_push (self->writer, deed);
  tf_session_emit (self, TF_SIGNAL_STATUS);
  return TRUE;
}

static const TfRow *
chosen_row (TfSession *self)
{
  return self->region != NULL ? tf_region_item_get_row (self->region) : NULL;
}

/* -- keep, drop, withdraw -------------------------------------------------------------------- */

static gboolean
is_open_hint (TfSession *self, TfRegionItem *item)
{
  const TfRow *row = tf_region_item_get_row (item);
  return row->is_hint && row->mark != self->judging;
}

/* Where the geometry was corrected a hint is to be measured anew first. */
static gboolean
is_keepable (TfSession *self, TfRegionItem *item)
{
  return is_open_hint (self, item) && !tf_session_is_elsewhere (tf_region_item_get_row (item));
}

static gboolean
is_own_mark (TfSession *self, TfRegionItem *item)
{
  const TfRow *row = tf_region_item_get_row (item);
  return !row->is_hint && row->mark != self->judging;
}

/* How many of those chosen are such. */
static guint
count_chosen (TfSession *self, gboolean (*is) (TfSession *, TfRegionItem *))
{
  g_autoptr (GPtrArray) chosen = tf_session_dup_chosen (self);
  guint n = 0;
  for (guint k = 0; k < chosen->len; k++)
    n += is (self, chosen->pdata[k]) ? 1 : 0;
  return n;
}

gboolean
tf_session_can_keep (TfSession *self)
{
  if (!tf_session_is_writable (self) || self->keeping || self->line->len > 0 || self->brushing)
    return FALSE;
  if (self->draft != NULL)
    return self->measured && (self->other == NULL || self->other_measured);
  return count_chosen (self, is_open_hint) > 0;
}

/* A carried outline takes the hint at its place along; a hint that continues a carried region is of
 * that region. */
static TfDeed *
deed_of_hint (TfSession *self, TfRegionItem *item)
{
  const TfRow *row = tf_region_item_get_row (item);
  TfDeed *deed = tf_session_new_deed (self, TF_DEED_KEEP);
  if (tf_region_item_is_carried (item))
    {
      TfRegionItem *hint = tf_session_find_hint_of_carried (self, item);
      deed->hint = hint != NULL ? tf_region_item_get_row (hint)->mark : 0;
      deed->region = row->region_key;
      deed->origin = TF_MARK_CHANGED;
    }
  else
    {
      deed->hint = row->mark;
      deed->region = tf_session_get_continued_key (self, item);
      deed->joins = TF_JOINS_BY_HINT;
      deed->origin = TF_MARK_KEPT;
    }
  deed->outline = tf_outline_ref (row->outline);
  tf_measure_copy (&deed->measure, &row->measure);
  deed->method = g_strdup (row->method);
  return deed;
}

/* What the draft takes the place of: a hint, a mark, or a carried outline, whose region it then is. */
static void
take_place (TfSession *self, TfDeed *deed, TfRegionItem *of)
{
  const TfRow *row = tf_region_item_get_row (of);
  deed->origin = TF_MARK_CHANGED;
  if (tf_region_item_is_carried (of))
    {
      TfRegionItem *hint = tf_session_find_hint_of_carried (self, of);
      deed->hint = hint != NULL ? tf_region_item_get_row (hint)->mark : 0;
      deed->region = row->region_key;
    }
  else if (row->is_hint)
    {
      deed->hint = row->mark;
      deed->region = tf_session_get_continued_key (self, of);
      deed->joins = TF_JOINS_BY_HINT;
    }
  else
    deed->follows = row->mark;
}

static void
take_measured (TfSession *self, TfDeed *deed, TfOutline *outline, const TfMeasure *measure,
               gboolean at_rest)
{
  deed->outline = tf_outline_ref (outline);
  tf_measure_copy (&deed->measure, measure);
  deed->method = g_strdup (self->method);
  deed->params = self->params;
  deed->pixels = at_rest ? NULL : tf_frame_ref (self->frame);
}

static TfDeed *
deed_of_draft (TfSession *self)
{
  TfDeed *deed = tf_session_new_deed (self, TF_DEED_KEEP);
  deed->origin = TF_MARK_DRAWN;
  deed->ends_draft = TRUE;
  deed->joins = TF_JOINS_BY_OUTLINE;
  if (tf_session_get_replaces (self))
    take_place (self, deed, self->replaced);
  take_measured (self, deed, self->draft, &self->measure, self->at_rest);
  return deed;
}

/* The second half of a split is a region of its own: a new one, or the one that its own outline is
 * recognised as. */
static TfDeed *
deed_of_other (TfSession *self, const TfDeed *first)
{
  TfDeed *deed = tf_session_new_deed (self, TF_DEED_KEEP);
  deed->origin = first->origin;
  deed->hint = first->hint;
  deed->joins = TF_JOINS_BY_OUTLINE;
  take_measured (self, deed, self->other, &self->other_measure, self->other_at_rest);
  return deed;
}

static TfDeed *
deed_of_taking_away (TfSession *self, TfRegionItem *item)
{
  const TfRow *row = tf_region_item_get_row (item);
  TfDeed *deed = tf_session_new_deed (self, row->is_hint ? TF_DEED_DROP : TF_DEED_WITHDRAW);
  *(row->is_hint ? &deed->hint : &deed->follows) = row->mark;
  return deed;
}

static TfDeed *
deed_of_drawing (TfSession *self)
{
  TfDeed *first = deed_of_draft (self);
  if (self->other == NULL && self->joined->len == 0)
    return first;
  TfDeed *all = tf_deed_new_together (self->other != NULL ? "split" : "join", self->person);
  all->frame = first->frame;
  tf_deed_add (all, first);
  if (self->other != NULL)
    tf_deed_add (all, deed_of_other (self, first));
  for (guint k = 0; k < self->joined->len; k++)
    if (!tf_region_item_is_carried (self->joined->pdata[k]))
      tf_deed_add (all, deed_of_taking_away (self, self->joined->pdata[k]));
  return all;
}

/* The same deed for all chosen that can have it: one alone, or several as one. */
static TfDeed *
deed_of_chosen (TfSession *self, gboolean (*is) (TfSession *, TfRegionItem *),
                TfDeed *(*make) (TfSession *, TfRegionItem *))
{
  g_autoptr (GPtrArray) chosen = tf_session_dup_chosen (self);
  TfDeed *all = tf_deed_new_together ("several", self->person);
  all->frame = tf_frame_item_get_row (self->frame_item)->id;
  for (guint k = 0; k < chosen->len; k++)
    if (is (self, chosen->pdata[k]))
      tf_deed_add (all, make (self, chosen->pdata[k]));
  if (all->parts->len > 1)
    return all;
  TfDeed *only = all->parts->len == 1 ? g_ptr_array_steal_index (all->parts, 0) : NULL;
  tf_deed_free (all);
  return only;
}

static TfDeed *
as_new_region (TfDeed *deed)
{
  for (guint k = 0; deed->kind == TF_DEED_TOGETHER && k < deed->parts->len; k++)
    as_new_region (deed->parts->pdata[k]);
  deed->region = 0;
  deed->joins = TF_JOINS_NOTHING;
  return deed;
}

static gboolean
keep (TfSession *self, TfDeed *(*how) (TfDeed *))
{
  if (!tf_session_can_keep (self) || !has_person (self))
    return FALSE;
  if (self->draft == NULL && self->also->len == 0 && tf_session_is_elsewhere (chosen_row (self)))
    {
      g_autoptr (TfRegionItem) hint = g_object_ref (self->region);
      tf_session_set_draft (self, chosen_row (self)->outline);
      g_set_object (&self->replaced, hint);
      tf_session_emit (self, TF_SIGNAL_CHOICE);
      tf_session_say (self, _ ("The geometry of this frame was corrected: the hint is measured "
                               "anew as a draft. K keeps it."));
      return TRUE;
    }
  if (self->draft != NULL)
    {
      self->keeping = TRUE;
      return tf_session_push_deed (self, how (deed_of_drawing (self)));
    }
  TfDeed *deed = deed_of_chosen (self, is_keepable, deed_of_hint);
  if (deed == NULL)
    return FALSE;
  self->judging = chosen_row (self)->mark;
  return tf_session_push_deed (self, how (deed));
}

static TfDeed *
as_it_is (TfDeed *deed)
{
  return deed;
}

gboolean
tf_session_keep (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  return keep (self, as_it_is);
}

gboolean
tf_session_can_keep_new (TfSession *self)
{
  return tf_session_can_keep (self)
         && (tf_session_get_joins (self) != NULL || tf_session_get_other_joins (self) != NULL);
}

gboolean
tf_session_keep_new (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  return keep (self, as_new_region);
}

gboolean
tf_session_can_drop (TfSession *self)
{
  return tf_session_is_writable (self) && self->draft == NULL && self->frame_item != NULL
         && count_chosen (self, is_open_hint) > 0;
}

static gboolean
is_droppable (TfSession *self, TfRegionItem *item)
{
  return is_open_hint (self, item) && !tf_region_item_is_carried (item);
}

/* Carried outlines are only offers: they go without a deed. */
static gboolean
drop_carried (TfSession *self)
{
  g_autoptr (GPtrArray) chosen = tf_session_dup_chosen (self);
  gboolean some = FALSE;
  for (guint k = 0; k < chosen->len; k++)
    some = tf_session_drop_carried (self, chosen->pdata[k]) || some;
  return some;
}

gboolean
tf_session_drop (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_drop (self) || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_of_chosen (self, is_droppable, deed_of_taking_away);
  gboolean offers = drop_carried (self);
  if (deed != NULL)
    {
      self->judging = chosen_row (self)->mark;
      return tf_session_push_deed (self, deed);
    }
  self->want_next_hint = offers;
  tf_session_refresh (self, FALSE);
  return offers;
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
  return tf_session_is_writable (self) && self->draft == NULL && self->frame_item != NULL
         && count_chosen (self, is_own_mark) > 0;
}

gboolean
tf_session_withdraw (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (!tf_session_can_withdraw (self) || !has_person (self))
    return FALSE;
  TfDeed *deed = deed_of_chosen (self, is_own_mark, deed_of_taking_away);
  self->judging = chosen_row (self)->mark;
  return tf_session_push_deed (self, deed);
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
  TfDeed *deed = tf_session_new_deed (self, TF_DEED_NOTE);
  deed->region = row->region_key;
  deed->text = g_strdup (text);
  return tf_session_push_deed (self, deed);
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

/* NULL when nothing would change. */
static TfDeed *
deed_of_class (TfSession *self, TfRegionItem *item, const char *key)
{
  const TfRow *row = tf_region_item_get_row (item);
  g_autofree char *text = class_after (class_now (self, row), key);
  if (strcmp (text, "αδ") == 0 || strcmp (text, "δ") == 0)
    {
      tf_session_say (self, _ ("δ needs two polarities: give β, βγ or γ first."));
      return NULL;
    }
  if (strcmp (text, class_now (self, row)) == 0)
    return NULL;
  TfDeed *deed = tf_session_new_deed (self, TF_DEED_CLASS);
  deed->region = row->region_key;
  deed->text = g_steal_pointer (&text);
  return deed;
}

static void
hope_for (TfSession *self, const TfDeed *deed)
{
  self->class_region = deed->region;
  g_free (self->class_hoped);
  self->class_hoped = g_strdup (deed->text);
}

gboolean
tf_session_set_class (TfSession *self, const char *key)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && key != NULL, FALSE);
  if (!tf_session_can_describe (self) || !has_person (self))
    return FALSE;
  g_autoptr (GPtrArray) chosen = tf_session_dup_chosen (self);
  TfDeed *all = tf_deed_new_together ("several", self->person);
  for (guint k = 0; k < chosen->len; k++)
    {
      TfDeed *deed = tf_region_item_get_row (chosen->pdata[k])->is_hint
                         ? NULL
                         : deed_of_class (self, chosen->pdata[k], key);
      if (deed != NULL)
        tf_deed_add (all, deed);
    }
  if (all->parts->len > 1)
    return tf_session_push_deed (self, all);
  TfDeed *only = all->parts->len == 1 ? g_ptr_array_steal_index (all->parts, 0) : NULL;
  tf_deed_free (all);
  if (only == NULL)
    return FALSE;
  hope_for (self, only);
  return tf_session_push_deed (self, only);
}

static gboolean
set_fact_of (TfSession *self, TfDeedKind kind, TfRegionItem *region, const char *text)
{
  const TfRow *row = tf_region_item_get_row (region);
  const char *now = kind == TF_DEED_LABEL ? row->label : row->external;
  if (!tf_session_is_writable (self) || row->is_hint || strcmp (now, text) == 0
      || !has_person (self))
    return FALSE;
  TfDeed *deed = tf_session_new_deed (self, kind);
  deed->region = row->region_key;
  deed->text = g_strdup (text);
  return tf_session_push_deed (self, deed);
}

gboolean
tf_session_set_label_of (TfSession *self, TfRegionItem *region, const char *text)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && TF_IS_REGION_ITEM (region) && text != NULL, FALSE);
  return set_fact_of (self, TF_DEED_LABEL, region, text);
}

gboolean
tf_session_set_external_of (TfSession *self, TfRegionItem *region, const char *text)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && TF_IS_REGION_ITEM (region) && text != NULL, FALSE);
  return set_fact_of (self, TF_DEED_EXTERNAL, region, text);
}

/* -- passages -------------------------------------------------------------------------------- */

gboolean
tf_session_tie (TfSession *self, TfSight a, TfSight b, gboolean cut, const char *reason)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && a.mark != 0 && b.mark != 0, FALSE);
  if (!tf_session_is_writable (self) || !has_person (self))
    return FALSE;
  TfDeed *deed = tf_deed_new (cut ? TF_DEED_CUT : TF_DEED_LINK, self->person);
  deed->ends[0] = a;
  deed->ends[1] = b;
  deed->text = g_strdup (reason != NULL ? reason : "");
  return tf_session_push_deed (self, deed);
}
