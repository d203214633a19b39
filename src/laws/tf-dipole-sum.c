/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-dipole-sum.h"

#include <math.h>

enum
{
  SIDES = 3, /* south, on the equator, north */
  KINDS = 3  /* of TfVerdictKind */
};

/* Sums over rows. Marks of one region share their errors: the error of its mean is that of one. */
typedef struct
{
  guint rows; /* with a dipole */
  guint row;  /* the first of them */
  double gauss, variance;
} Sum;

/* A region in a cycle. */
typedef struct
{
  int cycle;
  guint all[SIDES][KINDS]; /* rows with a dipole or without */
  Sum sums[SIDES][KINDS];
} Part;

static void
add_row (Part *part, guint k, const TfSampleRow *row, const TfVerdict *verdict)
{
  int side = row->lat_deg > 0.0 ? 2 : row->lat_deg < 0.0 ? 0 : 1;
  Sum *sum = &part->sums[side][verdict->kind];
  part->all[side][verdict->kind]++;
  if (isnan (row->axial_dipole_gauss))
    return;
  sum->row = sum->rows == 0 ? k : sum->row;
  sum->rows++;
  sum->gauss += row->axial_dipole_gauss;
  sum->variance += row->axial_dipole_sigma_gauss * row->axial_dipole_sigma_gauss;
}

/* The regions (element-type Part), each once a cycle, in the order of their first rows. */
static GArray *
gather (const TfSample *sample, const TfVerdict *verdicts)
{
  GArray *parts = g_array_new (FALSE, TRUE, sizeof (Part));
  g_autoptr (GHashTable) places = g_hash_table_new (NULL, NULL);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      if (!verdicts[k].cycle.sure)
        continue;
      gpointer key = GSIZE_TO_POINTER ((gsize)row->region * 64 + (gsize)verdicts[k].cycle.number);
      gpointer place = NULL;
      if (!g_hash_table_lookup_extended (places, key, NULL, &place))
        {
          place = GUINT_TO_POINTER (parts->len);
          g_hash_table_insert (places, key, place);
          g_array_set_size (parts, parts->len + 1);
          g_array_index (parts, Part, parts->len - 1).cycle = verdicts[k].cycle.number;
        }
      add_row (&g_array_index (parts, Part, GPOINTER_TO_UINT (place)), k, row, &verdicts[k]);
    }
  return parts;
}

/* What a region has in the group; FALSE when it is not there. */
static gboolean
collect (const Part *part, const TfDipoleSum *group, Sum *sum)
{
  guint all = 0;
  *sum = (Sum){ .row = G_MAXUINT };
  for (int side = 0; side < SIDES; side++)
    for (int kind = 0; kind < KINDS; kind++)
      {
        const Sum *cell = &part->sums[side][kind];
        if ((group->hemisphere != 0 && side != group->hemisphere + 1)
            || (group->verdict >= 0 && kind != group->verdict))
          continue;
        all += part->all[side][kind];
        sum->row = cell->rows > 0 ? MIN (sum->row, cell->row) : sum->row;
        sum->rows += cell->rows;
        sum->gauss += cell->gauss;
        sum->variance += cell->variance;
      }
  return all > 0 && part->cycle == group->cycle;
}

/* @whole: the cycle's sum, against which a region may work. */
static void
add_up (TfDipoleSum *group, const GArray *parts, double whole)
{
  double variance = 0.0;
  for (guint k = 0; k < parts->len; k++)
    {
      Sum sum;
      if (!collect (&g_array_index (parts, Part, k), group, &sum))
        continue;
      if (sum.rows == 0)
        {
          group->without++;
          continue;
        }
      double gauss = sum.gauss / sum.rows;
      group->regions++;
      group->sum_gauss += gauss;
      variance += sum.variance / sum.rows;
      if (gauss * whole < 0.0 && fabs (gauss) > fabs (group->costliest_gauss))
        {
          group->costliest = sum.row;
          group->costliest_gauss = gauss;
        }
    }
  group->sigma_gauss = group->regions == 0 ? NAN : sqrt (variance);
}

static TfDipoleSum
sum_of (int cycle, int hemisphere, int verdict, const GArray *parts, double whole)
{
  TfDipoleSum group
      = { .cycle = cycle, .hemisphere = hemisphere, .verdict = verdict, .costliest = -1 };
  add_up (&group, parts, whole);
  return group;
}

GArray *
tf_dipole_sums (const TfSample *sample, const TfVerdict *verdicts)
{
  static const int hemispheres[] = { 1, -1, 0 };
  static const int kinds[] = { TF_VERDICT_KEEPS, TF_VERDICT_BREAKS, TF_VERDICT_CANNOT_SAY, -1 };
  GArray *sums = g_array_new (FALSE, FALSE, sizeof (TfDipoleSum));
  g_autoptr (GArray) parts = gather (sample, verdicts);
  int last = 0;
  for (guint k = 0; k < parts->len; k++)
    last = MAX (last, g_array_index (parts, Part, k).cycle);
  for (int cycle = 1; cycle <= last; cycle++)
    {
      TfDipoleSum whole = sum_of (cycle, 0, -1, parts, 0.0);
      if (whole.regions + whole.without == 0)
        continue;
      for (guint h = 0; h < G_N_ELEMENTS (hemispheres); h++)
        for (guint v = 0; v < G_N_ELEMENTS (kinds); v++)
          {
            TfDipoleSum sum = sum_of (cycle, hemispheres[h], kinds[v], parts, whole.sum_gauss);
            g_array_append_val (sums, sum);
          }
    }
  return sums;
}
