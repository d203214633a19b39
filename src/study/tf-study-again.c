/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-again.h"

#include <math.h>
#include <string.h>

#include "tf-sieve.h"
#include "tf-study-private.h"

gboolean
tf_stretch_is_all (const TfStretch *s)
{
  return isnan (s->from_year) && isnan (s->to_year) && isnan (s->low_deg) && isnan (s->high_deg);
}

static gboolean
is_same (double a, double b)
{
  return (isnan (a) && isnan (b)) || (a <= b && a >= b);
}

gboolean
tf_stretch_is_same (const TfStretch *a, const TfStretch *b)
{
  return is_same (a->from_year, b->from_year) && is_same (a->to_year, b->to_year)
         && is_same (a->low_deg, b->low_deg) && is_same (a->high_deg, b->high_deg);
}

static gpointer
copy_condition (gconstpointer condition, gpointer data)
{
  return tf_condition_copy (condition);
}

static GPtrArray *
copy_conditions (GPtrArray *conditions)
{
  return g_ptr_array_copy (conditions, copy_condition, NULL);
}

TfStudy *
tf_study_copy (const TfStudy *study)
{
  TfStudy *copy = g_memdup2 (study, sizeof *study);
  copy->name = g_strdup (study->name);
  copy->mark_conditions = copy_conditions (study->mark_conditions);
  copy->region_conditions = copy_conditions (study->region_conditions);
  copy->divides = study->divides != NULL ? tf_divides_ref (study->divides) : NULL;
  copy->divides_shown = g_strdup (study->divides_shown);
  return copy;
}

/* -- rows ------------------------------------------------------------------------------------ */

static gboolean
within (const TfStretch *s, const TfSampleRow *row)
{
  double year = tf_time_year (row->time);
  return !(year < s->from_year) && !(year > s->to_year) && !(row->lat_deg < s->low_deg)
         && !(row->lat_deg > s->high_deg);
}

static TfSample *
narrow (const TfSample *all, const TfStretch *stretch)
{
  TfSample *part = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (all); k++)
    if (within (stretch, tf_sample_get (all, k)))
      tf_sample_add (part, tf_sample_get (all, k));
  return part;
}

/* -- findings -------------------------------------------------------------------------------- */

static void
take_what_if (TfFindings *out, const TfFindings *before)
{
  g_array_unref (out->what_if);
  out->what_if = g_array_copy (before->what_if);
  memcpy (out->cycle_choice, before->cycle_choice, sizeof out->cycle_choice);
}

TfFindings *
tf_study_again (const TfStudyTaken *taken, const TfStudy *study, const TfStretch *stretch,
                TfFindingsDepth depth, TfLedger *ledger, const TfFindings *before,
                const TfCancel *cancel)
{
  g_return_val_if_fail (taken != NULL && study != NULL && stretch != NULL, NULL);
  gboolean all = tf_stretch_is_all (stretch);
  g_autoptr (TfStudy) own = tf_study_copy (study);
  if (depth < TF_FINDINGS_COMPLETE)
    own->hale.draws = own->joy.draws = own->drift.draws = 0;
  own->hale.cancel = own->joy.cancel = own->drift.cancel = cancel;
  g_autoptr (TfSample) part = all ? NULL : narrow (taken->all, stretch);
  TfStudyRows rows = tf_study_taken_rows (taken);
  if (!all)
    {
      rows.all = part;
      rows.taken = NULL; /* what was counted when they were taken was of all */
    }
  /* other measures and the hints are read for the whole ledger, not for a stretch */
  TfFindings *findings = tf_study_run_rows (own, &rows, all ? ledger : NULL, taken->floor,
                                            depth == TF_FINDINGS_WHAT_IF);
  if (tf_cancel_is_raised (cancel))
    {
      tf_findings_free (findings);
      return NULL;
    }
  if (before != NULL && depth == TF_FINDINGS_COMPLETE)
    take_what_if (findings, before);
  return findings;
}
