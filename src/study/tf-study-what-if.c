/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-study-private.h"

/* What the results would be under the other choice: each alone, from the same rows. */

/* Share that breaks and slope of one study on a sample. */
static TfWhatIf
judge_and_fit (const char *name, const TfStudy *study, const TfSample *sample)
{
  g_autofree TfVerdict *verdicts = tf_study_judge (study, sample);
  TfJoyParams joy = study->joy;
  joy.draws = 0; /* the interval is not shown here */
  TfJoyFit fit = tf_joy_fit (sample, verdicts, 0, 0, &joy);
  TfWhatIf row = { .name = name, .slope = fit.slope };
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      row.breaks += verdicts[k].kind == TF_VERDICT_BREAKS;
      row.n += verdicts[k].kind != TF_VERDICT_CANNOT_SAY;
    }
  row.share = row.n > 0 ? (double)row.breaks / row.n : NAN;
  return row;
}

/* The rows of @sample for which @separation and |CMD| pass. */
static TfSample *
narrow (const TfSample *sample, double separation_deg, double cmd_deg)
{
  TfSample *part = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      if (!(row->separation_deg < separation_deg) && !(fabs (row->cmd_deg) > cmd_deg))
        tf_sample_add (part, row);
    }
  return part;
}

static void
add (GArray *rows, TfWhatIf row)
{
  g_array_append_val (rows, row);
}

static void
add_narrow (GArray *rows, const char *name, const TfStudy *study, const TfSample *sample, double separation_deg, double cmd_deg)
{
  g_autoptr (TfSample) part = narrow (sample, separation_deg, cmd_deg);
  add (rows, judge_and_fit (name, study, part));
}

/* Every unsure cycle read as the likelier one: the verdict it would have. */
static TfWhatIf
latitude_alone (const TfStudy *study, const TfSample *sample)
{
  TfStudy other = *study;
  other.divide.band_deg = 0;
  other.divide.far_lat_deg = 90;
  other.divide.near_lat_deg = 0;
  other.divides = NULL;
  return judge_and_fit ("cycle-by-latitude-alone", &other, sample);
}

GArray *
tf_study_what_if (const TfStudy *study, const TfSample *sample)
{
  GArray *rows = g_array_new (FALSE, FALSE, sizeof (TfWhatIf));
  add (rows, judge_and_fit ("as-chosen", study, sample));

  TfStudy other = *study;
  other.divides = NULL;
  other.divide.by_date_only = TRUE;
  add (rows, judge_and_fit ("cycle-by-date-only", &other, sample));
  add (rows, latitude_alone (study, sample));

  other = *study;
  other.verdict.equator_deg = 5;
  add (rows, judge_and_fit ("equator-zone-5", &other, sample));
  other = *study;
  other.joy.estimator = TF_JOY_LEAST_SQUARES;
  add (rows, judge_and_fit ("least-squares", &other, sample));
  other = *study;
  other.joy.steep_max_deg = 75;
  add (rows, judge_and_fit ("steep-left-out", &other, sample));
  add_narrow (rows, "separation-above-2.5", study, sample, 2.5, HUGE_VAL);
  add_narrow (rows, "cmd-within-45", study, sample, 0, 45);
  return rows;
}
