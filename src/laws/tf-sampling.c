/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sampling.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-distinct.h"

const char *const tf_sampling_names[]
    = { "greatest-flux", "central-meridian", "mean", "every-mark", NULL };

#define O(member) offsetof (TfSamplingParams, member)
const TfOption tf_sampling_options[] = {
  { "sampling", TF_OPTION_CHOICE, "", TF_SAMPLING_FLUX, 0, 3, tf_sampling_names,
    N_ ("which mark stands for a passage"), O (rule) },
  { "sampling-mu", TF_OPTION_NUMBER, "", 0.5, 0, 1, NULL,
    N_ ("greatest-flux: least mu of the marks it is looked for among"), O (mu_min) },
  { "sampling-cmd", TF_OPTION_NUMBER, "deg", 45, 0, 90, NULL,
    N_ ("mean: marks this near the central meridian are averaged"), O (mean_cmd_deg) },
  { NULL },
};
#undef O

/* The plain means of a pick, by the places of their columns. */
static const gsize averaged[] = {
  offsetof (TfSampleRow, lat_deg),
  offsetof (TfSampleRow, leading_lat_deg),
  offsetof (TfSampleRow, following_lat_deg),
  offsetof (TfSampleRow, cmd_deg),
  offsetof (TfSampleRow, mu),
  offsetof (TfSampleRow, tilt_sigma_deg), /* marks of one region share their errors: not divided */
  offsetof (TfSampleRow, separation_deg),
  offsetof (TfSampleRow, separation_sigma_deg),
  offsetof (TfSampleRow, flux_mx),
  offsetof (TfSampleRow, imbalance),
  offsetof (TfSampleRow, compactness),
  offsetof (TfSampleRow, axial_dipole_gauss),
  offsetof (TfSampleRow, axial_dipole_sigma_gauss),
};

/* Sums of the marks of one passage for the mean. */
typedef struct
{
  guint n[G_N_ELEMENTS (averaged)], leads[3];
  double sum[G_N_ELEMENTS (averaged)], time, tilt[2], bearing[2]; /* cosines, sines of twice */
  guint marks, tilts, bearings;
} Sums;

/* A passage while its marks come by. */
typedef struct
{
  const TfSampleRow *best, *first, *last; /* best: NULL while none is within the limits */
  guint marks, place; /* place: of the best among the marks */
  Sums *sums; /* of the mean, else NULL */
} Passage;

static double
off_meridian (const TfSampleRow *row)
{
  return isnan (row->cmd_deg) ? 0.0 : fabs (row->cmd_deg);
}

static gboolean
is_within (const TfSampleRow *row, const TfSamplingParams *params)
{
  if (params->rule == TF_SAMPLING_FLUX)
    return !(row->mu < params->mu_min);
  return params->rule != TF_SAMPLING_MEAN || off_meridian (row) <= params->mean_cmd_deg;
}

/* Whether @row is to be taken rather than @than; equal ones by time. */
static gboolean
is_better (const TfSampleRow *row, const TfSampleRow *than, const TfSamplingParams *params)
{
  if (params->rule == TF_SAMPLING_FLUX && !(isnan (row->flux_mx) && isnan (than->flux_mx)))
    {
      if (isnan (row->flux_mx) || isnan (than->flux_mx))
        return isnan (than->flux_mx);
      if (row->flux_mx > than->flux_mx || row->flux_mx < than->flux_mx)
        return row->flux_mx > than->flux_mx;
      return row->time.s < than->time.s;
    }
  double here = off_meridian (row), there = off_meridian (than);
  return here < there || (!(here > there) && row->time.s < than->time.s);
}

static void
add_axis (double sums[2], guint *n, double angle_deg)
{
  if (isnan (angle_deg))
    return;
  sums[0] += cos (2.0 * angle_deg * TF_DEG);
  sums[1] += sin (2.0 * angle_deg * TF_DEG);
  (*n)++;
}

static void
add_to_sums (Sums *sums, const TfSampleRow *row)
{
  for (guint c = 0; c < G_N_ELEMENTS (averaged); c++)
    {
      double value = G_STRUCT_MEMBER (double, row, averaged[c]);
      if (isnan (value))
        continue;
      sums->sum[c] += value;
      sums->n[c]++;
    }
  sums->time += row->time.s;
  sums->leads[1 + row->leading_polarity]++;
  sums->marks++;
  add_axis (sums->tilt, &sums->tilts, row->axis_tilt_deg);
  add_axis (sums->bearing, &sums->bearings, row->axis_bearing_deg);
}

static double
axis_of (const double sums[2], guint n)
{
  return n == 0 ? NAN : 0.5 * atan2 (sums[1], sums[0]) / TF_DEG;
}

/* The mean as a row; what is no quantity is as in the mark nearest the central meridian. */
static TfSampleRow
mean_row (const Passage *passage)
{
  const Sums *sums = passage->sums;
  TfSampleRow row = *passage->best;
  for (guint c = 0; c < G_N_ELEMENTS (averaged); c++)
    G_STRUCT_MEMBER (double, &row, averaged[c]) = sums->n[c] == 0 ? NAN : sums->sum[c] / sums->n[c];
  row.time.s = sums->time / sums->marks;
  row.axis_tilt_deg = axis_of (sums->tilt, sums->tilts);
  row.axis_bearing_deg = axis_of (sums->bearing, sums->bearings);
  if (sums->leads[0] > 0 && sums->leads[2] > 0)
    {
      row.leading_polarity = sums->leads[2] > sums->leads[0] ? 1 : -1;
      row.leading_sure = 0;
    }
  else if (sums->leads[0] + sums->leads[2] > 0)
    row.leading_polarity = sums->leads[2] > 0 ? 1 : -1;
  return row;
}

static void
take_mark (Passage *passage, const TfSampleRow *row, guint place, const TfSamplingParams *params)
{
  passage->marks++;
  if (passage->first == NULL || row->time.s < passage->first->time.s)
    passage->first = row;
  if (passage->last == NULL || row->time.s > passage->last->time.s)
    passage->last = row;
  if (!is_within (row, params))
    return;
  if (passage->best == NULL || is_better (row, passage->best, params))
    {
      passage->best = row;
      passage->place = place;
    }
  if (params->rule == TF_SAMPLING_MEAN)
    {
      passage->sums = passage->sums != NULL ? passage->sums : g_new0 (Sums, 1);
      add_to_sums (passage->sums, row);
    }
}

/* The passages in the order in which they first come (element-type Passage). */
static GArray *
gather (const TfSample *marks, const TfSamplingParams *params)
{
  GArray *passages = g_array_new (FALSE, TRUE, sizeof (Passage));
  g_autoptr (TfDistinct) numbers = tf_distinct_new (tf_sample_get_n (marks));
  for (guint k = 0; k < tf_sample_get_n (marks); k++)
    {
      const TfSampleRow *row = tf_sample_get (marks, k);
      guint number = tf_distinct_add (numbers, row->passage);
      if (number == passages->len)
        g_array_set_size (passages, number + 1);
      take_mark (&g_array_index (passages, Passage, number), row, k, params);
    }
  return passages;
}

static void
pick (const Passage *passage, const TfSamplingParams *params, TfSample *picks,
      TfSamplingTally *tally)
{
  if (passage->best == NULL)
    {
      tally->without += passage->marks;
      return;
    }
  if (params->rule == TF_SAMPLING_MEAN)
    {
      TfSampleRow row = mean_row (passage);
      tf_sample_add (picks, &row);
      return;
    }
  tf_sample_add_place (picks, passage->place);
  if (params->rule != TF_SAMPLING_FLUX)
    return;
  gboolean bracketed = passage->best != passage->first && passage->best != passage->last;
  tf_sample_set_bracketed (picks, bracketed);
  tally->not_bracketed += !bracketed;
}

static gboolean
are_alone (const TfSample *marks)
{
  return tf_sample_count_passages (marks) == tf_sample_get_n (marks);
}

/* As long as nothing is linked a mark is its passage's first, last and best. */
static TfSample *
pick_alone (const TfSample *marks, const TfSamplingParams *params, TfSamplingTally *tally)
{
  guint n = tf_sample_get_n (marks);
  TfSample *picks = tf_sample_new_part (marks);
  tally->passages = n;
  for (guint k = 0; k < n; k++)
    {
      const TfSampleRow *mark = tf_sample_get (marks, k);
      const Passage passage = { is_within (mark, params) ? mark : NULL, mark, mark, 1, k, NULL };
      pick (&passage, params, picks, tally);
    }
  return picks;
}

TfSample *
tf_sampling_pick (const TfSample *marks, const TfSamplingParams *params, TfSamplingTally *tally)
{
  TfSamplingTally own = { 0 };
  if (params->rule < TF_SAMPLING_MEAN && are_alone (marks))
    {
      TfSample *alone = pick_alone (marks, params, &own);
      if (tally != NULL)
        *tally = own;
      return alone;
    }
  g_autoptr (GArray) passages = gather (marks, params);
  gboolean every = params->rule == TF_SAMPLING_EVERY;
  TfSample *picks = params->rule == TF_SAMPLING_MEAN ? tf_sample_new_sized (passages->len)
                                                     : tf_sample_new_part (marks);
  own.passages = passages->len;
  for (guint k = 0; every && k < tf_sample_get_n (marks); k++)
    tf_sample_add_place (picks, k);
  for (guint p = 0; p < passages->len; p++)
    {
      Passage *passage = &g_array_index (passages, Passage, p);
      if (!every)
        pick (passage, params, picks, &own);
      g_free (passage->sums);
    }
  if (tally != NULL)
    *tally = own;
  return picks;
}
