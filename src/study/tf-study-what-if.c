/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-study-private.h"

/* What the results would be under the other choice: each alone, from the same rows. */

#define HALF_A_YEAR_S (0.5 * 365.25 * TF_DAY_S)

/* Share that breaks and slope of one study on a sample, had every minimum come @later_s seconds
 * later. */
static TfWhatIf
judge_later (const char *name, const TfStudy *study, const TfSample *sample, double later_s)
{
  g_autofree TfVerdict *verdicts = tf_study_judge (study, sample, later_s);
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

static TfWhatIf
judge_and_fit (const char *name, const TfStudy *study, const TfSample *sample)
{
  return judge_later (name, study, sample, 0.0);
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
add_narrow (GArray *rows, const char *name, const TfStudy *study, const TfSample *sample,
            double separation_deg, double cmd_deg)
{
  g_autoptr (TfSample) part = narrow (sample, separation_deg, cmd_deg);
  add (rows, judge_and_fit (name, study, part));
}

/* The rows that are not hints. */
static void
add_without_hints (GArray *rows, const TfStudy *study, const TfSample *sample)
{
  g_autoptr (TfSample) part = tf_sample_new ();
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    if (tf_sample_get (sample, k)->origin != TF_ORIGIN_HINT)
      tf_sample_add (part, tf_sample_get (sample, k));
  if (tf_sample_get_n (part) < tf_sample_get_n (sample))
    add (rows, judge_and_fit ("hints-left-out", study, part));
}

/* The ways of telling a cycle: the date alone; every unsure one read as the likelier; minima moved.
 */
static void
add_cycle_choices (GArray *rows, const TfStudy *study, const TfSample *sample)
{
  TfStudy other = *study;
  other.divide.by_date_only = TRUE;
  add (rows, judge_and_fit ("cycle-by-date-only", &other, sample));
  other = *study;
  other.divide.band_deg = 0;
  other.divide.far_lat_deg = other.divide.late_lat_deg = 90;
  other.divide.near_lat_deg = 0;
  add (rows, judge_and_fit ("cycle-by-latitude-alone", &other, sample));
  add (rows, judge_later ("minima-half-a-year-earlier", study, sample, -HALF_A_YEAR_S));
  add (rows, judge_later ("minima-half-a-year-later", study, sample, HALF_A_YEAR_S));
}

/* The equator left out to other latitudes. */
static void
add_equator_zones (GArray *rows, const TfStudy *study, const TfSample *sample)
{
  static const struct
  {
    const char *name;
    double deg;
  } zones[] = { { "equator-zone-0", 0 },
                { "equator-zone-3", 3 },
                { "equator-zone-5", 5 },
                { "equator-zone-8", 8 } };
  for (guint k = 0; k < G_N_ELEMENTS (zones); k++)
    {
      TfStudy other = *study;
      other.verdict.equator_deg = zones[k].deg;
      if (fabs (zones[k].deg - study->verdict.equator_deg) > 1e-9)
        add (rows, judge_and_fit (zones[k].name, &other, sample));
    }
}

static void
add_estimator (GArray *rows, const char *name, TfJoyEstimator estimator, const TfStudy *study,
               const TfSample *sample)
{
  TfStudy other = *study;
  other.joy.estimator = estimator;
  if (study->joy.estimator != (int)estimator)
    add (rows, judge_and_fit (name, &other, sample));
}

GArray *
tf_study_what_if (const TfStudy *study, const TfSample *sample)
{
  GArray *rows = g_array_new (FALSE, FALSE, sizeof (TfWhatIf));
  add (rows, judge_and_fit ("as-chosen", study, sample));
  add_cycle_choices (rows, study, sample);
  add_equator_zones (rows, study, sample);
  add_estimator (rows, "least-squares", TF_JOY_LEAST_SQUARES, study, sample);
  add_estimator (rows, "robust", TF_JOY_ROBUST, study, sample);
  TfStudy other = *study;
  other.joy.steep_max_deg = 75;
  add (rows, judge_and_fit ("steep-left-out", &other, sample));
  add_narrow (rows, "separation-above-2.5", study, sample, 2.5, HUGE_VAL);
  add_narrow (rows, "cmd-within-45", study, sample, 0, 45);
  add_without_hints (rows, study, sample);
  return rows;
}
