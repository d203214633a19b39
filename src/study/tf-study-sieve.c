/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-study-private.h"

/* Which rows a study takes. Mark conditions (kind, CMD, mu) first, then region conditions (size,
 * flux, separation). A condition on something that a row lacks does not drop it; how many passed so
 * is counted. */

typedef struct
{
  const char *reason; /* why a row is left out */
  double value, limit;
  gboolean above; /* the value must not be above the limit; else not below it */
  gboolean active;
} Condition;

enum
{
  CONDITIONS = 5
};

static void
list_conditions (const TfSieveParams *p, const TfSampleRow *row, Condition conditions[CONDITIONS])
{
  const Condition list[CONDITIONS] = {
    { "cmd-beyond", fabs (row->cmd_deg), p->cmd_max_deg, TRUE, TRUE },
    { "mu-below", row->mu, p->mu_min, FALSE, p->mu_min > 0 },
    { "ephemeral", row->size < 0 ? NAN : row->size, 0, TRUE, !p->with_ephemeral },
    { "flux-below", row->flux_mx, p->flux_min_mx, FALSE, p->flux_min_mx > 0 },
    { "separation-below", row->separation_deg, p->separation_min_deg, FALSE,
      p->separation_min_deg > 0 },
  };
  memcpy (conditions, list, sizeof list);
}

/* Why a row is not taken, as a code for the count; NULL when it is. */
static const char *
find_reason (const TfSieveParams *p, const TfRow *row, const Condition conditions[CONDITIONS])
{
  if (!p->with_models && g_strcmp0 (row->kind, "model map") == 0)
    return "model-map";
  if (row->is_hint && row->unipolar)
    return "unipolar-hint";
  for (guint k = 0; k < CONDITIONS; k++)
    {
      const Condition *c = &conditions[k];
      if (c->active && (c->above ? c->value > c->limit : c->value < c->limit))
        return c->reason;
    }
  return NULL;
}

void
tf_study_count (GHashTable *counts, const char *key)
{
  guint n = GPOINTER_TO_UINT (g_hash_table_lookup (counts, key));
  g_hash_table_insert (counts, (gpointer)key, GUINT_TO_POINTER (n + 1));
}

static void
take_row (TfFindings *findings, const TfRow *row, const TfSampleRow *s)
{
  findings->marks[tf_sample_get_n (findings->sample)] = row->is_hint ? -row->mark : row->mark;
  tf_sample_add (findings->sample, s);
  findings->n_marks += !row->is_hint;
  findings->n_hints += row->is_hint != FALSE;
  findings->n_other_floor += !tf_study_has_floor (row, findings->even_floor_gauss);
  findings->simulated += row->simulated != FALSE;
}

void
tf_study_take_rows (TfFindings *findings, const TfStudy *study, const GPtrArray *rows)
{
  findings->marks = g_new0 (gint64, rows->len + 1);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      TfSampleRow s;
      Condition conditions[CONDITIONS];
      tf_study_row (row, &s);
      list_conditions (&study->sieve, &s, conditions);
      const char *reason = find_reason (&study->sieve, row, conditions);
      if (reason != NULL)
        {
          tf_study_count (findings->left_out, reason);
          continue;
        }
      for (guint c = 0; c < CONDITIONS; c++)
        if (conditions[c].active && isnan (conditions[c].value))
          tf_study_count (findings->passed_without, conditions[c].reason);
      take_row (findings, row, &s);
    }
}
