/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-dipole-sum.h"

#include <math.h>
#include <string.h>

#include "tf-distinct.h"
#include "tf-many.h"

/* Sums over rows. Marks of one region share their errors: the error of its mean is that of one. */
typedef struct
{
  guint all;  /* rows with a dipole or without */
  guint rows; /* with one */
  guint row;  /* the first of them */
  double gauss, variance;
} Sum;

/* The rows of one cycle in order, and a number for the region of each, in the order of their first
 * rows in the cycle. */
typedef struct
{
  const TfSample *sample;
  const TfVerdict *verdicts;
  guint n, n_regions;
  guint *rows, *regions;
  Sum *sums; /* of the group in hand, one a region */
} Part;

static void
take_cycle (Part *part, int cycle)
{
  g_autoptr (TfDistinct) numbers = tf_distinct_new (tf_sample_get_n (part->sample));
  part->n = 0;
  for (guint k = 0; k < tf_sample_get_n (part->sample); k++)
    {
      const TfCycleCall *call = &part->verdicts[k].cycle;
      if (!call->sure || call->number != cycle)
        continue;
      part->regions[part->n] = tf_distinct_add (numbers, tf_sample_get (part->sample, k)->region);
      part->rows[part->n++] = k;
    }
  part->n_regions = tf_distinct_get_n (numbers);
}

static void
sum_regions (Part *part, const TfDipoleSum *group)
{
  memset (part->sums, 0, part->n_regions * sizeof *part->sums);
  for (guint j = 0; j < part->n; j++)
    {
      const TfSampleRow *row = tf_sample_get (part->sample, part->rows[j]);
      int side = row->lat_deg > 0.0 ? 1 : row->lat_deg < 0.0 ? -1 : 0;
      if ((group->hemisphere != 0 && side != group->hemisphere)
          || (group->verdict >= 0 && (int)part->verdicts[part->rows[j]].kind != group->verdict))
        continue;
      Sum *sum = &part->sums[part->regions[j]];
      sum->all++;
      if (isnan (row->axial_dipole_gauss))
        continue;
      sum->row = sum->rows == 0 ? part->rows[j] : sum->row;
      sum->rows++;
      sum->gauss += row->axial_dipole_gauss;
      sum->variance += row->axial_dipole_sigma_gauss * row->axial_dipole_sigma_gauss;
    }
}

/* @whole: the cycle's sum, against which a region may work. */
static void
add_up (TfDipoleSum *group, Part *part, double whole)
{
  double variance = 0.0;
  sum_regions (part, group);
  for (guint k = 0; k < part->n_regions; k++)
    {
      const Sum *sum = &part->sums[k];
      if (sum->all == 0)
        continue;
      if (sum->rows == 0)
        {
          group->without++;
          continue;
        }
      double gauss = sum->gauss / sum->rows;
      group->regions++;
      group->sum_gauss += gauss;
      variance += sum->variance / sum->rows;
      if (gauss * whole < 0.0 && fabs (gauss) > fabs (group->costliest_gauss))
        {
          group->costliest = sum->row;
          group->costliest_gauss = gauss;
        }
    }
  group->sigma_gauss = group->regions == 0 ? NAN : sqrt (variance);
}

static TfDipoleSum
sum_of (int cycle, int hemisphere, int verdict, Part *part, double whole)
{
  TfDipoleSum group
      = { .cycle = cycle, .hemisphere = hemisphere, .verdict = verdict, .costliest = -1 };
  add_up (&group, part, whole);
  return group;
}

GArray *
tf_dipole_sums (const TfSample *sample, const TfVerdict *verdicts)
{
  static const int hemispheres[] = { 1, -1, 0 };
  static const int kinds[] = { TF_VERDICT_KEEPS, TF_VERDICT_BREAKS, TF_VERDICT_CANNOT_SAY, -1 };
  GArray *sums = g_array_new (FALSE, FALSE, sizeof (TfDipoleSum));
  guint n = tf_sample_get_n (sample);
  g_autofree guint *rows = tf_new_many (guint, n + 1), *regions = tf_new_many (guint, n + 1);
  g_autofree Sum *room = tf_new_many (Sum, n + 1);
  Part part = { sample, verdicts, 0, 0, rows, regions, room };
  int last = 0;
  for (guint k = 0; k < n; k++)
    if (verdicts[k].cycle.sure)
      last = MAX (last, verdicts[k].cycle.number);
  for (int cycle = 1; cycle <= last; cycle++)
    {
      take_cycle (&part, cycle);
      TfDipoleSum whole = sum_of (cycle, 0, -1, &part, 0.0);
      if (whole.regions + whole.without == 0)
        continue;
      for (guint h = 0; h < G_N_ELEMENTS (hemispheres); h++)
        for (guint v = 0; v < G_N_ELEMENTS (kinds); v++)
          {
            TfDipoleSum sum = sum_of (cycle, hemispheres[h], kinds[v], &part, whole.sum_gauss);
            g_array_append_val (sums, sum);
          }
    }
  return sums;
}
