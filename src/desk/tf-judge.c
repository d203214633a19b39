/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-judge.h"

#include "tf-study-again.h"

struct _TfJudge
{
  TfStudy *study;
  TfDivides *divides;
};

TfJudge *
tf_judge_new (void)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  return tf_judge_new_for (study);
}

TfJudge *
tf_judge_new_for (const TfStudy *study)
{
  TfJudge *judge = g_atomic_rc_box_new0 (TfJudge);
  judge->study = tf_study_copy (study);
  judge->divides = judge->study->divides != NULL ? tf_divides_with_params (
                                                       judge->study->divides, &judge->study->divide)
                                                 : tf_divides_new (&judge->study->divide);
  return judge;
}

TfJudge *
tf_judge_ref (TfJudge *judge)
{
  return g_atomic_rc_box_acquire (judge);
}

static void
judge_clear (gpointer data)
{
  TfJudge *judge = data;
  tf_divides_unref (judge->divides);
  tf_study_free (judge->study);
}

void
tf_judge_unref (TfJudge *judge)
{
  if (judge != NULL)
    g_atomic_rc_box_release_full (judge, judge_clear);
}

const TfDivides *
tf_judge_get_divides (const TfJudge *judge)
{
  return judge->divides;
}

const TfVerdictParams *
tf_judge_get_params (const TfJudge *judge)
{
  return &judge->study->verdict;
}

TfVerdict
tf_judge_measure (const TfJudge *judge, const TfMeasure *measure, TfSampleRow *row)
{
  TfSampleRow own;
  TfSampleRow *out = row != NULL ? row : &own;
  TfRow bare = { .measure = *measure }; /* borrows; a sample row owns nothing */
  tf_study_row (&bare, out);
  return tf_verdict_judge (out, judge->divides, &judge->study->verdict);
}

TfVerdict
tf_judge_point (const TfJudge *judge, const TfPoint *point)
{
  TfSampleRow row;
  tf_study_point (point, &row);
  return tf_verdict_judge (&row, judge->divides, &judge->study->verdict);
}
