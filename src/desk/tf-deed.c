/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-deed.h"

#include <glib/gi18n-lib.h>

TfDeed *
tf_deed_new (TfDeedKind kind, const char *person)
{
  TfDeed *deed = g_new0 (TfDeed, 1);
  deed->kind = kind;
  deed->person = g_strdup (person);
  return deed;
}

TfDeed *
tf_deed_copy (const TfDeed *deed)
{
  TfDeed *copy = tf_deed_new (deed->kind, deed->person);
  copy->frame = deed->frame;
  copy->hint = deed->hint;
  copy->follows = deed->follows;
  copy->region = deed->region;
  copy->origin = deed->origin;
  copy->outline = deed->outline != NULL ? tf_outline_ref (deed->outline) : NULL;
  if (deed->kind == TF_DEED_KEEP)
    tf_measure_copy (&copy->measure, &deed->measure);
  copy->method = g_strdup (deed->method);
  copy->text = g_strdup (deed->text);
  return copy;
}

void
tf_deed_free (TfDeed *deed)
{
  if (deed == NULL)
    return;
  g_free (deed->person);
  g_clear_pointer (&deed->outline, tf_outline_unref);
  tf_measure_clear (&deed->measure);
  g_free (deed->method);
  g_free (deed->text);
  g_free (deed->what);
  g_free (deed);
}

static gboolean
run_keep (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  TfMarkDeed mark = { .frame = deed->frame,
                      .person = person,
                      .hint = deed->hint,
                      .follows = deed->follows,
                      .region = deed->region,
                      .origin = deed->origin,
                      .outline = deed->outline,
                      .measure = &deed->measure,
                      .method = deed->method };
  deed->mark = tf_ledger_keep (ledger, &mark, error);
  return deed->mark != 0;
}

static gboolean
run_one (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  switch (deed->kind)
    {
    case TF_DEED_KEEP:
      return run_keep (deed, ledger, person, error);
    case TF_DEED_DROP:
      return tf_ledger_drop_hint (ledger, deed->hint, person, error);
    case TF_DEED_WITHDRAW:
      return tf_ledger_withdraw (ledger, deed->follows, person, error);
    case TF_DEED_NOTE:
      return tf_ledger_set_note (ledger, deed->region, person, deed->text, error);
    case TF_DEED_CLASS:
      return tf_ledger_set_class (ledger, deed->region, deed->frame, person, deed->text,
                                  "magnetogram", error);
    case TF_DEED_UNDO:
      return tf_ledger_undo (ledger, person, &deed->what, error);
    case TF_DEED_REDO:
      return tf_ledger_redo (ledger, person, &deed->what, error);
    case TF_DEED_DRAFT:
      return tf_ledger_set_draft (ledger, deed->frame, person, deed->text, error);
    default:
      g_return_val_if_reached (FALSE);
    }
}

gboolean
tf_deed_run (TfDeed *deed, TfLedger *ledger, GError **error)
{
  gint64 person = tf_ledger_person (ledger, deed->person, error);
  if (person == 0 || !run_one (deed, ledger, person, error))
    return FALSE;
  deed->can_undo = tf_ledger_can_undo (ledger, person);
  deed->can_redo = tf_ledger_can_redo (ledger, person);
  return TRUE;
}

const char *
tf_deed_name (const TfDeed *deed)
{
  static const char *const names[] = {
    N_ ("keeping the outline"),
    N_ ("dropping the hint"),
    N_ ("withdrawing the mark"),
    N_ ("the note"),
    N_ ("the class"),
    N_ ("undoing"),
    N_ ("redoing"),
    N_ ("the draft"),
  };
  return _ (names[deed->kind]);
}
