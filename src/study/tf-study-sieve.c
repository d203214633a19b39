/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-sieve.h"
#include "tf-study-private.h"

/* Which rows a study takes. Mark conditions (kind, CMD, mu) first, then one pick a passage, then
 * region conditions (size, flux, separation) on the pick. A condition on something that a row lacks
 * does not drop it; how many passed so is counted. */

typedef struct
{
  const char *reason; /* why a row is left out */
  double value, limit;
  gboolean above; /* the value must not be above the limit; else not below it */
  gboolean active;
} Condition;

enum
{
  MARK_CONDITIONS = 2,
  REGION_CONDITIONS = 4
};

static void
mark_conditions (const TfSieveParams *p, const TfSampleRow *row, Condition list[MARK_CONDITIONS])
{
  list[0] = (Condition){ "cmd-beyond", fabs (row->cmd_deg), p->cmd_max_deg, TRUE, TRUE };
  list[1] = (Condition){ "mu-below", row->mu, p->mu_min, FALSE, p->mu_min > 0 };
}

static void
region_conditions (const TfSieveParams *p, const TfSampleRow *row,
                   Condition list[REGION_CONDITIONS])
{
  double size = row->size < 0 ? NAN : row->size;
  list[0] = (Condition){ "ephemeral", size, 0, TRUE, p->ephemeral == TF_EPHEMERAL_OUT };
  list[1] = (Condition){ "not-ephemeral", size, 1, FALSE, p->ephemeral == TF_EPHEMERAL_ALONE };
  list[2] = (Condition){ "flux-below", row->flux_mx, p->flux_min_mx, FALSE, p->flux_min_mx > 0 };
  list[3] = (Condition){ "separation-below", row->separation_deg, p->separation_min_deg, FALSE,
                         p->separation_min_deg > 0 };
}

/* The first condition that a row does not meet; NULL when it meets all. */
static const char *
find_reason (const Condition *conditions, guint n)
{
  for (guint k = 0; k < n; k++)
    {
      const Condition *c = &conditions[k];
      if (c->active && (c->above ? c->value > c->limit : c->value < c->limit))
        return c->reason;
    }
  return NULL;
}

/* What the sample row does not tell. */
static const char *
find_row_reason (const TfSieveParams *p, const TfStudyFact *fact)
{
  if (!p->with_hints && fact->is_hint)
    return "hint";
  if (!p->with_models && fact->model_map)
    return "model-map";
  if (fact->outside_hint)
    return "outside-hint";
  return fact->is_hint && fact->unipolar ? "unipolar-hint" : NULL;
}

void
tf_study_count_more (GHashTable *counts, const char *key, guint more)
{
  guint n = GPOINTER_TO_UINT (g_hash_table_lookup (counts, key));
  g_hash_table_insert (counts, (gpointer)key, GUINT_TO_POINTER (n + more));
}

void
tf_study_count (GHashTable *counts, const char *key)
{
  tf_study_count_more (counts, key, 1);
}

/* Counts a row that is left out, or the conditions that it passed for want of the quantity. Hints
 * that nobody asked for are not worth a count. */
static gboolean
settle (const char *reason, const Condition *conditions, guint n, TfFindings *findings)
{
  if (findings == NULL)
    return reason == NULL;
  if (reason != NULL && strcmp (reason, "hint") != 0)
    tf_study_count (findings->left_out, reason);
  for (guint c = 0; reason == NULL && c < n; c++)
    if (conditions[c].active && isnan (conditions[c].value))
      tf_study_count (findings->passed_without, conditions[c].reason);
  return reason == NULL;
}

/* Conditions beyond the sieve's options, of those the first that @s does not meet; what it lacks is
 * counted. They read the row of the mark that stands for it. */
static const char *
ask_more (const GPtrArray *more, const TfStudy *study, const TfDivides *divides,
          const TfStudyRows *rows, const TfSampleRow *s, TfFindings *findings)
{
  if (more->len == 0 || rows->rows == NULL)
    return NULL;
  const TfExportRow row = { .row = g_ptr_array_index (rows->rows, s->row),
                            .sample = *s,
                            .verdict = tf_verdict_judge (s, divides, &study->verdict) };
  for (guint k = 0; k < more->len; k++)
    {
      const TfCondition *condition = g_ptr_array_index (more, k);
      int holds = tf_condition_holds (condition, &row);
      if (holds > 0)
        continue;
      g_autofree char *text = tf_condition_dup_text (condition);
      const char *key = g_intern_string (text);
      if (holds == 0)
        return key;
      if (findings != NULL)
        tf_study_count (findings->passed_without, key);
    }
  return NULL;
}

TfSample *
tf_study_marks (const TfStudy *study, const TfStudyRows *rows, TfFindings *findings)
{
  TfSample *marks = tf_sample_new_part (rows->all);
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  for (guint k = 0; k < tf_sample_get_n (rows->all); k++)
    {
      const TfSampleRow *s = tf_sample_get (rows->all, k);
      const TfStudyFact fact = tf_study_fact (rows, s->row);
      Condition conditions[MARK_CONDITIONS];
      mark_conditions (&study->sieve, s, conditions);
      const char *reason = find_row_reason (&study->sieve, &fact);
      if (reason == NULL)
        reason = find_reason (conditions, MARK_CONDITIONS);
      if (reason == NULL)
        reason = ask_more (study->mark_conditions, study, divides, rows, s, findings);
      if (settle (reason, conditions, MARK_CONDITIONS, findings))
        tf_sample_add_place (marks, k);
    }
  return marks;
}

TfSample *
tf_study_picks (const TfStudy *study, const TfStudyRows *rows, const TfSample *marks,
                TfFindings *findings)
{
  TfSamplingTally tally;
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  TfSample *found = tf_sampling_pick (marks, &study->sampling, &tally), *picks = tf_sample_new_part (found);
  tally.not_bracketed = 0;
  for (guint k = 0; k < tf_sample_get_n (found); k++)
    {
      const TfSampleRow *s = tf_sample_get (found, k);
      Condition conditions[REGION_CONDITIONS];
      region_conditions (&study->sieve, s, conditions);
      const char *reason = find_reason (conditions, REGION_CONDITIONS);
      if (reason == NULL)
        reason = ask_more (study->region_conditions, study, divides, rows, s, findings);
      if (!settle (reason, conditions, REGION_CONDITIONS, findings))
        continue;
      tally.not_bracketed += tf_sample_get_bracketed (found, k) == 0;
      tf_sample_add_place (picks, k);
    }
  tf_sample_take_whole (picks, found);
  if (findings != NULL)
    {
      findings->sampling = tally;
      if (tally.without > 0)
        g_hash_table_insert (findings->left_out, (gpointer) "beyond-the-sampling-rule",
                             GUINT_TO_POINTER (tally.without));
    }
  return picks;
}
