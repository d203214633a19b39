/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-emergence.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-many.h"
#include "tf-proportion.h"
#include "tf-sort.h"

#define O(member) offsetof (TfEmergenceParams, member)
const TfOption tf_emergence_options[] = {
  { "emergence-share", TF_OPTION_NUMBER, "", 0.10, 0.01, 0.9, NULL,
    N_ ("share of the greatest flux at which a region's age begins"), O (rise_share) },
  { "emergence-bin", TF_OPTION_NUMBER, "days", 0.5, 0.05, 10, NULL, N_ ("width of a bin of age"),
    O (bin_days) },
  { "emergence-before", TF_OPTION_NUMBER, "days", 1, 0, 10, NULL,
    N_ ("how far before that time to look"), O (before_days) },
  { "emergence-after", TF_OPTION_NUMBER, "days", 10, 1, 15, NULL, N_ ("how far after it"),
    O (after_days) },
  { "emergence-mu", TF_OPTION_NUMBER, "", 0.5, 0, 1, NULL, N_ ("marks below this mu are left out"),
    O (mu_min) },
  { NULL },
};
#undef O

enum
{
  QUANTITIES = 3 /* tilt, separation, flux */
};

/* One region at one age, seen in one half of the disk or in either. */
typedef struct
{
  guint n[QUANTITIES], marks;
  double sum[QUANTITIES]; /* separation, flux; of the tilt the cosines of the doubled angles */
  double sines;
} Cell;

/* All values of one bin and side. */
typedef struct
{
  guint regions;
  GArray *values[QUANTITIES];
} Bin;

typedef struct
{
  const TfSample *every;
  const TfEmergenceParams *params;
  guint n_bins;
  Bin *bins;   /* [side][bin] */
  Cell *cells; /* the same, of the passage in hand */
  GArray *sights; /* of the emergence */
} Ages;

/* Rows with a flux, a time and a place on the disk, by passage and time. */
static GArray *
order_rows (const TfSample *every)
{
  guint n = tf_sample_get_n (every), m = 0;
  g_autofree double *keys = tf_new_many (double, n + 1);
  g_autofree guint *rows = tf_new_many (guint, n + 1);
  for (guint k = 0; k < n; k++)
    if (tf_sample_get (every, k)->flux_mx > 0.0 && tf_time_is_known (tf_sample_get (every, k)->time))
      {
        rows[m] = k;
        keys[m++] = tf_sample_get (every, k)->time.s;
      }
  g_autofree guint *by_time = tf_sort_order (keys, m);
  for (guint k = 0; k < m; k++)
    keys[k] = tf_sample_get (every, rows[by_time[k]])->passage;
  g_autofree guint *by_passage = tf_sort_order (keys, m);
  GArray *ordered = g_array_sized_new (FALSE, FALSE, sizeof (guint), m);
  for (guint k = 0; k < m; k++)
    g_array_append_val (ordered, rows[by_time[by_passage[k]]]);
  return ordered;
}

static const TfSampleRow *
row_at (const Ages *ages, const guint *rows, guint k)
{
  return tf_sample_get (ages->every, rows[k]);
}

/* When the flux first reached the share, linear between two marks; the first mark's time when it is
 * above it already. */
static double
find_zero (const Ages *ages, const guint *rows, guint n, gboolean *late)
{
  double greatest = 0.0;
  for (guint k = 0; k < n; k++)
    greatest = fmax (greatest, row_at (ages, rows, k)->flux_mx);
  double wanted = ages->params->rise_share * greatest;
  guint k = 0;
  while (row_at (ages, rows, k)->flux_mx < wanted)
    k++;
  *late = k == 0;
  const TfSampleRow *after = row_at (ages, rows, k);
  if (k == 0)
    return after->time.s;
  const TfSampleRow *before = row_at (ages, rows, k - 1);
  double part = (wanted - before->flux_mx) / (after->flux_mx - before->flux_mx);
  return before->time.s + part * (after->time.s - before->time.s);
}

static void
add_to_cell (Cell *cell, const TfSampleRow *row)
{
  double doubled = 2.0 * row->axis_tilt_deg * TF_DEG;
  const double values[QUANTITIES] = { cos (doubled), row->separation_deg, row->flux_mx };
  cell->marks++;
  cell->sines += isnan (doubled) ? 0.0 : sin (doubled);
  for (int q = 0; q < QUANTITIES; q++)
    if (!isnan (values[q]))
      {
        cell->sum[q] += values[q];
        cell->n[q]++;
      }
}

static void
add_marks (const Ages *ages, const guint *rows, guint n, double zero)
{
  for (guint k = 0; k < n; k++)
    {
      const TfSampleRow *row = row_at (ages, rows, k);
      double age = (row->time.s - zero) / TF_DAY_S;
      double bin = floor ((age + ages->params->before_days) / ages->params->bin_days);
      if (!(bin >= 0.0 && bin < ages->n_bins) || row->mu < ages->params->mu_min)
        continue;
      add_to_cell (&ages->cells[(guint)bin], row);
      if (row->cmd_deg < 0.0)
        add_to_cell (&ages->cells[TF_EMERGENCE_EAST * ages->n_bins + (guint)bin], row);
      if (row->cmd_deg > 0.0)
        add_to_cell (&ages->cells[TF_EMERGENCE_WEST * ages->n_bins + (guint)bin], row);
    }
}

/* The passage's means into the bins; the cells are empty again. */
static void
take_cells (const Ages *ages, guint32 passage)
{
  for (guint k = 0; k < TF_EMERGENCE_SIDES * ages->n_bins; k++)
    {
      Cell *cell = &ages->cells[k];
      Bin *bin = &ages->bins[k];
      const TfEmergenceSight sight = { k, passage };
      if (k < ages->n_bins && cell->marks > 0)
        g_array_append_val (ages->sights, sight);
      bin->regions += cell->marks > 0;
      for (int q = 0; q < QUANTITIES; q++)
        {
          double mean = q == 0 ? 0.5 * atan2 (cell->sines, cell->sum[0]) / TF_DEG
                               : cell->sum[q] / cell->n[q];
          if (cell->n[q] > 0)
            g_array_append_val (bin->values[q], mean);
        }
      *cell = (Cell){ 0 };
    }
}

/* FALSE when it was not born on the disk. */
static gboolean
take_passage (const Ages *ages, const guint *rows, guint n, gboolean *late)
{
  int born = row_at (ages, rows, 0)->born;
  double zero = find_zero (ages, rows, n, late);
  if (born == 0 || (born < 0 && *late))
    return FALSE;
  add_marks (ages, rows, n, zero);
  take_cells (ages, row_at (ages, rows, 0)->passage);
  return TRUE;
}

static TfSpread
spread_of (GArray *values)
{
  double *sorted = (double *)(void *)values->data;
  tf_sort_numbers (sorted, values->len);
  return (TfSpread){ values->len, tf_quantile (sorted, values->len, 0.25),
                     tf_quantile (sorted, values->len, 0.5),
                     tf_quantile (sorted, values->len, 0.75) };
}

static GArray *
list_ages (const Ages *ages, int side)
{
  GArray *list = g_array_sized_new (FALSE, FALSE, sizeof (TfEmergenceAge), ages->n_bins);
  for (guint b = 0; b < ages->n_bins; b++)
    {
      Bin *bin = &ages->bins[(guint)side * ages->n_bins + b];
      TfEmergenceAge age
          = { .age_days = (b + 0.5) * ages->params->bin_days - ages->params->before_days,
              .regions = bin->regions,
              .tilt_deg = spread_of (bin->values[0]),
              .separation_deg = spread_of (bin->values[1]),
              .flux_mx = spread_of (bin->values[2]) };
      g_array_append_val (list, age);
    }
  return list;
}

static void
take_passages (const Ages *ages, TfEmergence *emergence)
{
  g_autoptr (GArray) rows = order_rows (ages->every);
  const guint *order = (const guint *)(const void *)rows->data;
  emergence->unmeasured = tf_sample_count_passages (ages->every);
  for (guint first = 0, next = 0; first < rows->len; first = next)
    {
      gboolean late = FALSE;
      guint32 passage = row_at (ages, order, first)->passage;
      while (next < rows->len && row_at (ages, order, next)->passage == passage)
        next++;
      emergence->unmeasured--;
      if (!take_passage (ages, order + first, next - first, &late))
        emergence->elsewhere++;
      else
        {
          emergence->passages++;
          emergence->late += late != FALSE;
        }
    }
}

TfEmergence *
tf_emergence_new (const TfSample *every, const TfEmergenceParams *params)
{
  TfEmergence *emergence = g_new0 (TfEmergence, 1);
  emergence->params = *params;
  emergence->sights = g_array_new (FALSE, FALSE, sizeof (TfEmergenceSight));
  Ages ages = { every, params, 0, NULL, NULL, emergence->sights };
  ages.n_bins = (guint)ceil ((params->before_days + params->after_days) / params->bin_days - 1e-9);
  guint n = TF_EMERGENCE_SIDES * ages.n_bins;
  g_autofree Bin *bins = g_new0 (Bin, n);
  g_autofree Cell *cells = g_new0 (Cell, n);
  ages.bins = bins;
  ages.cells = cells;
  for (guint k = 0; k < n; k++)
    for (int q = 0; q < QUANTITIES; q++)
      bins[k].values[q] = g_array_new (FALSE, FALSE, sizeof (double));
  take_passages (&ages, emergence);
  for (int side = 0; side < TF_EMERGENCE_SIDES; side++)
    emergence->ages[side] = list_ages (&ages, side);
  for (guint k = 0; k < n; k++)
    for (int q = 0; q < QUANTITIES; q++)
      g_array_unref (bins[k].values[q]);
  return emergence;
}

void
tf_emergence_free (TfEmergence *emergence)
{
  for (int side = 0; emergence != NULL && side < TF_EMERGENCE_SIDES; side++)
    g_array_unref (emergence->ages[side]);
  if (emergence != NULL)
    g_array_unref (emergence->sights);
  g_free (emergence);
}
