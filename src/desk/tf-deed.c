/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-deed.h"

#include <glib/gi18n-lib.h>

#include "tf-daily-summary.h"
#include "tf-intake.h"
#include "tf-ledger-studies.h"

TfDeed *
tf_deed_new (TfDeedKind kind, const char *person)
{
  TfDeed *deed = g_new0 (TfDeed, 1);
  deed->kind = kind;
  deed->person = g_strdup (person);
  return deed;
}

TfDeed *
tf_deed_new_together (const char *as, const char *person)
{
  TfDeed *deed = tf_deed_new (TF_DEED_TOGETHER, person);
  deed->as = as;
  deed->parts = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_deed_free);
  return deed;
}

void
tf_deed_add (TfDeed *deed, TfDeed *part)
{
  g_return_if_fail (deed->kind == TF_DEED_TOGETHER && part->kind != TF_DEED_TOGETHER);
  g_ptr_array_add (deed->parts, part);
}

TfDeed *
tf_deed_copy (const TfDeed *deed)
{
  TfDeed *copy = tf_deed_new (deed->kind, deed->person);
  copy->frame = deed->frame;
  copy->hint = deed->hint;
  copy->follows = deed->follows;
  copy->region = deed->region;
  copy->author = deed->author;
  copy->joins = deed->joins;
  copy->ends_draft = deed->ends_draft;
  copy->origin = deed->origin;
  copy->outline = deed->outline != NULL ? tf_outline_ref (deed->outline) : NULL;
  if (deed->kind == TF_DEED_KEEP)
    tf_measure_copy (&copy->measure, &deed->measure);
  copy->pixels = deed->pixels != NULL ? tf_frame_ref (deed->pixels) : NULL;
  copy->params = deed->params;
  copy->method = g_strdup (deed->method);
  copy->text = g_strdup (deed->text);
  copy->ends[0] = deed->ends[0];
  copy->ends[1] = deed->ends[1];
  copy->as = deed->as;
  copy->study = g_strdup (deed->study);
  copy->name = g_strdup (deed->name);
  copy->divide = deed->divide != NULL ? tf_moved_divide_copy (deed->divide) : NULL;
  copy->scale = deed->scale != NULL ? tf_kept_scale_copy (deed->scale) : NULL;
  if (deed->kind != TF_DEED_TOGETHER)
    return copy;
  copy->parts = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_deed_free);
  for (guint k = 0; k < deed->parts->len; k++)
    g_ptr_array_add (copy->parts, tf_deed_copy (deed->parts->pdata[k]));
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
  g_clear_pointer (&deed->pixels, tf_frame_unref);
  g_free (deed->method);
  g_free (deed->text);
  g_clear_pointer (&deed->parts, g_ptr_array_unref);
  tf_undone_clear (&deed->undone);
  g_free (deed->study);
  g_free (deed->name);
  tf_moved_divide_free (deed->divide);
  tf_kept_scale_free (deed->scale);
  g_free (deed);
}

/* A hand quicker than the outline term: what is kept has it all the same. */
static void
measure_fully (TfDeed *deed)
{
  g_auto (TfMeasure) full = { 0 };
  deed->params.outline_term = TRUE;
  if (deed->pixels == NULL
      || !tf_measure_region (&full, deed->pixels, deed->outline, &deed->params, NULL))
    return;
  tf_measure_clear (&deed->measure);
  deed->measure = full;
  full = (TfMeasure){ 0 };
  g_clear_pointer (&deed->pixels, tf_frame_unref);
}

static gint64
region_of (const TfDeed *deed, TfLedger *ledger, gint64 person)
{
  if (deed->region != 0 || deed->follows != 0 || deed->joins == TF_JOINS_NOTHING)
    return deed->region;
  gint64 hint = deed->joins == TF_JOINS_BY_HINT ? deed->hint : 0;
  return tf_ledger_region_to_join (ledger, deed->frame, person, hint, deed->outline, NULL);
}

static gboolean
run_keep (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  measure_fully (deed);
  TfMarkDeed mark = { .frame = deed->frame,
                      .person = person,
                      .hint = deed->hint,
                      .follows = deed->follows,
                      .region = region_of (deed, ledger, person),
                      .origin = deed->origin,
                      .ends_draft = deed->ends_draft,
                      .outline = deed->outline,
                      .measure = &deed->measure,
                      .method = deed->method };
  deed->mark = tf_ledger_keep (ledger, &mark, error);
  return deed->mark != 0;
}

static gboolean run_together (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error);

static gboolean
run_geometry (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  TfCorrection correction;
  tf_correction_from_text (&correction, deed->text); /* none from "" */
  return tf_ledger_set_geometry (ledger, deed->frame, person, &correction, error);
}

/* What is no summary can never be one: it is said and taken off. */
static gboolean
run_bring (const TfDeed *deed, TfLedger *ledger, GError **error)
{
  g_autofree char *bytes = NULL, *name = g_path_get_basename (deed->text);
  gsize n;
  g_autoptr (GError) reason = NULL;
  g_autoptr (TfDailySummary) summary = NULL;
  if (g_file_get_contents (deed->text, &bytes, &n, &reason))
    summary = tf_daily_summary_read (bytes, n, name, &reason);
  if (summary == NULL)
    {
      g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE, reason->message);
      return FALSE;
    }
  g_autofree char *checksum
      = g_compute_checksum_for_data (G_CHECKSUM_SHA256, (const guchar *)bytes, n);
  return tf_daily_summary_bring (summary, ledger, name, checksum, NULL, error) != 0;
}

static gboolean
run_tangle (const TfDeed *deed, TfLedger *ledger, GError **error)
{
  const TfRowQuery query = { .marks = TRUE, .frame = deed->frame };
  TfComplexityParams params;
  tf_complexity_params_init (&params);
  return tf_intake_complexity (ledger, &query, &params, NULL, NULL, error);
}

/* Of the version that stands: it was kept just before. */
static gboolean
run_edition (const TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  g_autoptr (GError) problem = NULL;
  g_autoptr (TfNamed) study = tf_ledger_study (ledger, deed->study, &problem);
  if (problem != NULL)
    {
      g_propagate_error (error, g_steal_pointer (&problem));
      return FALSE;
    }
  return tf_ledger_keep_edition (ledger, deed->name, deed->study, study != NULL ? study->version : 0,
                                 deed->text, person, error);
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
    case TF_DEED_LABEL:
      return tf_ledger_set_label (ledger, deed->region, person, deed->text, error);
    case TF_DEED_EXTERNAL:
      return tf_ledger_set_external (ledger, deed->region, person, deed->text, error);
    case TF_DEED_LINK:
      return tf_ledger_link (ledger, deed->ends[0], deed->ends[1], person, deed->text, error);
    case TF_DEED_CUT:
      return tf_ledger_cut (ledger, deed->ends[0], deed->ends[1], person, deed->text, error);
    case TF_DEED_UNDO:
      return tf_ledger_undo (ledger, person, &deed->undone, error);
    case TF_DEED_REDO:
      return tf_ledger_redo (ledger, person, &deed->undone, error);
    case TF_DEED_DRAFT:
      return tf_ledger_set_draft (ledger, deed->frame, person, deed->text, error);
    case TF_DEED_TOGETHER:
      return run_together (deed, ledger, person, error);
    case TF_DEED_GEOMETRY:
      return run_geometry (deed, ledger, person, error);
    case TF_DEED_DIVIDE:
      return tf_ledger_set_divide (ledger, deed->study, deed->divide, person, error);
    case TF_DEED_SETTLE:
      return tf_ledger_resolve (ledger, deed->region, deed->author, person, TRUE, error);
    case TF_DEED_HAND_OVER:
      return tf_ledger_hand_over (ledger, person, TF_TIME_UNKNOWN, error);
    case TF_DEED_BRING:
      return run_bring (deed, ledger, error);
    case TF_DEED_TANGLE:
      return run_tangle (deed, ledger, error);
    case TF_DEED_STUDY:
      return tf_ledger_keep_study (ledger, deed->study, deed->text, person, error) != 0;
    case TF_DEED_EDITION:
      return run_edition (deed, ledger, person, error);
    case TF_DEED_SCALE:
      return tf_ledger_set_scale (ledger, deed->scale, person, error);
    default:
      g_return_val_if_reached (FALSE);
    }
}

static gboolean
run_together (TfDeed *deed, TfLedger *ledger, gint64 person, GError **error)
{
  gboolean ok = TRUE;
  if (!tf_ledger_begin_bundle (ledger, deed->as, error))
    return FALSE;
  for (guint k = 0; ok && k < deed->parts->len; k++)
    {
      TfDeed *part = deed->parts->pdata[k];
      ok = run_one (part, ledger, person, error);
      if (deed->mark == 0)
        deed->mark = part->mark;
    }
  return tf_ledger_end_bundle (ledger, ok, ok ? error : NULL) && ok;
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
    N_ ("the label"),
    N_ ("the external number"),
    N_ ("the link"),
    N_ ("the cut"),
    N_ ("undoing"),
    N_ ("redoing"),
    N_ ("the draft"),
    N_ ("several deeds as one"),
    N_ ("the geometry of the frame"),
    N_ ("moving the divide"),
    N_ ("settling the note"),
    N_ ("handing over"),
    N_ ("bringing in the summary"),
    N_ ("the complexity of the mark"),
    N_ ("keeping the study"),
    N_ ("keeping the edition"),
    N_ ("the scale of the instrument"),
  };
  return _ (names[deed->kind]);
}

const char *
tf_deed_word (const char *what)
{
  static const char *const words[][2] = {
    { "keep", N_ ("kept") },
    { "drop", N_ ("hint dropped") },
    { "withdraw", N_ ("mark withdrawn") },
    { "class", N_ ("class") },
    { "note", N_ ("note") },
    { "label", N_ ("label") },
    { "external", N_ ("external number") },
    { "resolve", N_ ("note settled") },
    { "geometry", N_ ("geometry corrected") },
    { "divide", N_ ("divide moved") },
    { "shift", N_ ("shift handed over") },
    { "link", N_ ("linked by hand") },
    { "cut", N_ ("cut by hand") },
    { "undo", N_ ("undone") },
    { "redo", N_ ("done again") },
    { "person", N_ ("first deed of this person") },
    { "begin", N_ ("this copy of the ledger begun") },
    { "split", N_ ("split in two") },
    { "join", N_ ("joined") },
    { "several", N_ ("several at once") },
    { "study", N_ ("study kept") },
    { "edition", N_ ("edition kept") },
    { "rename", N_ ("study renamed") },
    { "scale", N_ ("scale kept") },
  };
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    if (g_strcmp0 (words[k][0], what) == 0)
      return _ (words[k][1]);
  return what;
}
