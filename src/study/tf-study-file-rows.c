/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-file-rows.h"

#include "tf-ledger-scales.h"
#include "tf-study-private.h"

TfStudySource *
tf_study_source_new (double floor_gauss)
{
  TfStudySource *source = g_new0 (TfStudySource, 1);
  source->rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  source->scales = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_kept_scale_free);
  source->all = tf_sample_new ();
  source->floor_gauss = floor_gauss;
  return source;
}

void
tf_study_source_free (TfStudySource *source)
{
  if (source == NULL)
    return;
  g_clear_pointer (&source->rows, g_ptr_array_unref);
  g_clear_pointer (&source->scales, g_ptr_array_unref);
  g_clear_pointer (&source->all, tf_sample_free);
  g_free (source);
}

TfStudySource *
tf_study_source_read (const TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, NULL);
  g_autoptr (TfStudySource) source = g_new0 (TfStudySource, 1);
  source->floor_gauss = tf_study_even_floor (ledger, NULL);
  source->rows = tf_study_read_rows (study, ledger, source->floor_gauss, error);
  source->scales = source->rows != NULL ? tf_ledger_scales (ledger, error) : NULL;
  if (source->scales == NULL)
    return NULL;
  source->all = tf_study_sample_rows (source->rows);
  return g_steal_pointer (&source);
}

TfFindings *
tf_study_run_source (const TfStudy *study, const TfStudySource *source)
{
  g_return_val_if_fail (study != NULL && source != NULL, NULL);
  g_autoptr (TfSample) all = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (source->all); k++)
    tf_sample_add (all, tf_sample_get (source->all, k));
  const TfStudyRows rows = { .rows = source->rows, .all = all, .scales = source->scales };
  if (study->sieve.with_scales)
    tf_study_scale (all, &rows, TRUE);
  return tf_study_run_rows (study, &rows, NULL, source->floor_gauss, TRUE);
}
