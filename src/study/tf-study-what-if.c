/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-bands.h"
#include "tf-joy-slope.h"
#include "tf-many.h"
#include "tf-study-choice-private.h"
#include "tf-study-private.h"
#include "tf-study-quick.h"

/* What the results would be under another choice: each alone, all else as chosen. */

const char *
tf_what_if_missing (const char *missing)
{
  if (g_strcmp0 (missing, "not-measured") == 0)
    return _ ("not measured");
  if (g_strcmp0 (missing, "not-linked") == 0)
    return _ ("marks are not linked");
  if (g_strcmp0 (missing, "no-scale") == 0)
    return _ ("no scale was kept");
  return g_strcmp0 (missing, "no-hints") == 0 ? _ ("no hints") : "";
}

/* -- one row ------------------------------------------------------------------------------------ */

/* Everything a choice may start from; shared by the threads, so nothing here changes. */
typedef struct
{
  const TfStudy *study;
  const TfStudyRows *rows;
  const TfFindings *findings;
  const TfStudyQuick *quick; /* NULL: none is offered */
  TfLedger *ledger; /* of the calling thread alone */
  GArray *out;      /* TfWhatIf; name NULL: not to be shown */
} Context;

static void
count_verdicts (TfWhatIf *row, const TfSample *sample, const TfVerdict *verdicts)
{
  guint n = tf_sample_get_n (sample);
  g_autofree guint32 *regions = tf_new_many (guint32, n + 1);
  for (guint k = 0; k < n; k++)
    {
      if (verdicts[k].kind == TF_VERDICT_CANNOT_SAY)
        continue;
      regions[row->n++] = tf_sample_get (sample, k)->region;
      row->breaks += verdicts[k].kind == TF_VERDICT_BREAKS;
      row->leaning += g_strcmp0 (verdicts[k].cycle.reason, "cycle-provisional") == 0;
    }
  row->regions = tf_count_distinct (regions, row->n);
  row->share = row->n > 0 ? (double)row->breaks / row->n : NAN;
}

static void
fill_row (TfWhatIf *row, const TfVariant *v, const TfSample *sample, const TfVerdict *verdicts)
{
  const TfGroup all = tf_group_of (0, 0);
  TfJoyFit fit = tf_joy_slope (sample, verdicts, &all, &v->study.joy);
  row->slope = fit.slope;
  row->n_tilts = fit.n;
  count_verdicts (row, sample, verdicts);
}

static gboolean
is_kept (const TfVariant *v, const TfSample *sample, guint k)
{
  return !(v->bracketed && tf_sample_get_bracketed (sample, k) == 0)
         && !(v->marks_alone && tf_sample_get (sample, k)->origin == TF_ORIGIN_HINT);
}

/* The rows of @sample that the variant keeps, where its options cannot say so. */
static TfSample *
keep (const TfVariant *v, const TfSample *sample)
{
  TfSample *part = tf_sample_new_part (sample);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    if (is_kept (v, sample, k))
      tf_sample_add_place (part, k);
  return part;
}

static void
fill_from (TfWhatIf *row, const TfVariant *v, TfChoiceFrom from, const TfStudyRows *rows,
           const Context *context)
{
  const TfFindings *findings = context->findings;
  const TfStudyQuick *quick = context->quick;
  if (from == TF_FROM_FIT)
    {
      if (quick == NULL || !tf_study_quick_fill (quick, &v->study, findings->sample, 0.0, row))
        fill_row (row, v, findings->sample, findings->verdicts);
      return;
    }
  g_autoptr (TfSample) marks = from >= TF_FROM_MARKS ? tf_study_marks (&v->study, rows, NULL) : NULL;
  g_autoptr (TfSample) some = marks != NULL && v->marks_alone ? keep (v, marks) : NULL;
  const TfSample *every = some != NULL ? some : marks != NULL ? marks : findings->every;
  g_autoptr (TfSample) picks
      = from >= TF_FROM_PICKS ? tf_study_picks (&v->study, rows, every, NULL) : NULL;
  g_autoptr (TfSample) part = v->bracketed ? keep (v, picks) : NULL;
  const TfSample *sample = part != NULL ? part : picks != NULL ? picks : findings->sample;
  if (quick != NULL && tf_study_quick_fill (quick, &v->study, sample, v->later_s, row))
    return;
  g_autofree TfVerdict *verdicts = tf_study_judge (&v->study, sample, v->later_s);
  if (v->study.sampling.rule != TF_SAMPLING_EVERY)
    tf_study_hold (findings, sample, verdicts);
  fill_row (row, v, sample, verdicts);
}

/* How many of the rows lack a measure with that floor. */
static guint
count_unmeasured (const TfStudyRows *rows, double floor)
{
  guint n = 0;
  for (guint k = 0; k < tf_sample_get_n (rows->all); k++)
    {
      const TfStudyFact fact = tf_study_fact (rows, tf_sample_get (rows->all, k)->row);
      n += !tf_study_fact_has_floor (&fact, floor);
    }
  return n;
}

/* Whether what was counted when the rows were taken says all: then nothing is read. */
static gboolean
fill_from_counts (TfWhatIf *row, const TfVariant *v, const Context *context)
{
  const TfStudyTaken *taken = context->rows->taken;
  if (taken == NULL || taken->rows != NULL)
    return FALSE;
  gboolean lower = v->floor_factor < 1.0;
  if (v->with_hints && taken->n_hints == 0)
    row->missing = "no-hints";
  else if (v->floor_factor > 0.0 && !v->with_hints && taken->floor > 0.0 && taken->n_lacking[lower ? 0 : 1] > 0)
    {
      row->missing = "not-measured";
      row->n_missing = taken->n_lacking[lower ? 0 : 1];
    }
  else if (v->floor_factor <= 0.0 && taken->n_even == 0)
    fill_from (row, v, TF_FROM_MARKS, context->rows, context);
  else
    return FALSE;
  return TRUE;
}

/* Rows of the ledger with another floor, or with the hints. */
static void
fill_from_ledger (TfWhatIf *row, const TfVariant *v, const Context *context)
{
  if (fill_from_counts (row, v, context))
    return;
  double floor = context->findings->even_floor_gauss * v->floor_factor;
  g_autoptr (TfStudyTaken) taken = tf_study_take_with (&v->study, context->ledger, floor, NULL);
  const TfStudyRows rows = taken != NULL ? tf_study_taken_rows (taken) : (TfStudyRows){ 0 };
  if (taken != NULL && floor > 0.0 && !v->with_hints)
    row->n_missing = count_unmeasured (&rows, floor);
  if (taken == NULL || row->n_missing > 0)
    row->missing = "not-measured";
  else if (v->with_hints && tf_sample_get_n (rows.all) == tf_sample_get_n (context->rows->all))
    row->missing = "no-hints";
  else
    fill_from (row, v, TF_FROM_MARKS, &rows, context);
}

/* The same rows with the scales on, or off. Of one instrument there is nothing to say. */
static void
fill_scaled (TfWhatIf *row, const TfVariant *v, const Context *context)
{
  const TfStudyRows *own = context->rows;
  gboolean any = own->scales != NULL && own->scales->len > 0;
  guint n = any ? tf_sample_get_n (own->all) : 0;
  g_autoptr (TfSample) all = tf_sample_new_sized (n);
  for (guint k = 0; k < n; k++)
    tf_sample_add (all, tf_sample_get (own->all, k));
  if (tf_study_scale (all, own, v->study.sieve.with_scales) > 0)
    {
      TfStudyRows rows = *own;
      rows.all = all;
      fill_from (row, v, TF_FROM_MARKS, &rows, context);
    }
  else if (tf_study_unscaled (context->findings, context->study, own))
    row->missing = "no-scale";
  else
    row->name = NULL;
}

/* Choices among the marks of a passage say nothing while each has one. */
static gboolean
needs_passages (const TfChoice *choice, const TfVariant *v)
{
  return g_str_has_prefix (choice->name, "sampling-") || v->bracketed;
}

static gboolean
is_linked (const TfFindings *findings)
{
  return findings->sampling.passages < tf_sample_get_n (findings->every);
}

/* The floor of a table's rows is its source's affair: another of ours would seem to change nothing. */
static gboolean
is_all_outside (const TfFindings *findings)
{
  return findings->n_outside > 0 && findings->n_marks + findings->n_hints == 0;
}

static void
add_choice (const TfChoice *choice, const Context *context, TfWhatIf *row)
{
  TfVariant v = { .study = *context->study, .floor_factor = 1.0 };
  if (!choice->change (&v))
    return;
  *row = (TfWhatIf){ .name = choice->name, .title = choice->title, .share = NAN, .slope = NAN };
  if (v.turn_scales)
    fill_scaled (row, &v, context);
  else if (needs_passages (choice, &v) && !is_linked (context->findings))
    row->missing = "not-linked";
  else if (choice->from == TF_FROM_ROWS
           && (context->ledger == NULL || (!v.with_hints && is_all_outside (context->findings))))
    row->missing = "not-measured";
  else if (choice->from == TF_FROM_ROWS)
    fill_from_ledger (row, &v, context);
  else
    fill_from (row, &v, choice->from, context->rows, context);
}

/* Each choice fills its own place: any number of threads gives the same. */
static void
run_choice (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Context *context = data;
  if (tf_choices[band].from != TF_FROM_ROWS)
    add_choice (&tf_choices[band], context, &g_array_index (context->out, TfWhatIf, band));
}

static const TfWhatIf *
find_row (const GArray *rows, const char *name)
{
  for (guint k = 0; k < rows->len; k++)
    {
      const TfWhatIf *row = &g_array_index (rows, TfWhatIf, k);
      if (g_strcmp0 (row->name, name) == 0)
        return row;
    }
  return &g_array_index (rows, TfWhatIf, 0);
}

/* The three ways of telling a cycle; one that is the study's own is the first row. */
static void
note_cycle_choice (TfFindings *findings, const GArray *rows)
{
  static const char *const names[]
      = { "cycle-by-date-only", "cycle-by-latitude-alone", "cycle-unsure-left-out" };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    findings->cycle_choice[k] = *find_row (rows, names[k]);
}

GArray *
tf_study_what_if (const TfStudy *study, const TfStudyRows *rows, TfFindings *findings,
                  TfLedger *ledger, TfWorkers *workers)
{
  guint n = tf_choices_get_n ();
  g_autoptr (GArray) all = g_array_sized_new (FALSE, TRUE, sizeof (TfWhatIf), n);
  g_array_set_size (all, n);
  g_autoptr (TfStudyQuick) quick = tf_study_quick_new (study, findings, rows->all, workers);
  Context context = { study, rows, findings, quick, ledger, all };
  const TfWork work = { .workers = workers };
  tf_bands_run (&work, n * TF_BAND_ROWS, run_choice, &context);
  for (guint k = 0; k < n; k++)
    if (tf_choices[k].from == TF_FROM_ROWS)
      add_choice (&tf_choices[k], &context, &g_array_index (all, TfWhatIf, k));
  note_cycle_choice (findings, all);
  GArray *shown = g_array_new (FALSE, FALSE, sizeof (TfWhatIf));
  for (guint k = 0; k < n; k++)
    if (g_array_index (all, TfWhatIf, k).name != NULL)
      g_array_append_val (shown, g_array_index (all, TfWhatIf, k));
  return shown;
}
