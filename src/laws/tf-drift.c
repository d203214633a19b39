/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-drift.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-many.h"

#define O(member) offsetof (TfDriftParams, member)
const TfOption tf_drift_options[] = {
  { "drift-level", TF_OPTION_NUMBER, "", 0.95, 0.5, 0.999, NULL,
    N_ ("confidence level of the drift's interval"), O (level) },
  { "drift-draws", TF_OPTION_INT, "", 1000, 0, 100000, NULL,
    N_ ("bootstrap draws of the drift; 0: none"), O (draws) },
  { "drift-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of those draws"), O (seed) },
  { "drift-from", TF_OPTION_INT, "months", 18, 0, 120, NULL,
    N_ ("the curves begin so long after the minimum"), O (from_months) },
  { "drift-before-end", TF_OPTION_INT, "months", 24, 0, 120, NULL,
    N_ ("the curves end so long before the next"), O (before_end_months) },
  { NULL },
};
#undef O

#define MONTH_S (365.25 / 12.0 * TF_DAY_S)

enum
{
  YEARS = 18,
  FIRST_YEAR = -2,
  STEPS = 2200, /* of a tenth of a month, from FIRST_YEAR on */
  MIN_ROWS = 10,
  MIN_MONTHS = 24
};

/* The rows of one drift: months since the minimum and |lat|. */
typedef struct
{
  guint n;
  double *months, *lats;
  guint32 *regions;
} Columns;

static void
columns_clear (Columns *c)
{
  g_free (c->months);
  g_free (c->lats);
  g_free (c->regions);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Columns, columns_clear)

static Columns
gather (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group)
{
  guint all = tf_sample_get_n (sample);
  Columns c = { 0, tf_new_many (double, all + 1), tf_new_many (double, all + 1), tf_new_many (guint32, all + 1) };
  double minimum = tf_cycle_minimum (group->cycle).s;
  for (guint k = 0; k < all; k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      if (!tf_group_holds (group, row, &verdicts[k], TRUE) || isnan (row->lat_deg))
        continue;
      c.months[c.n] = (row->time.s - minimum) / MONTH_S;
      c.lats[c.n] = fabs (row->lat_deg);
      c.regions[c.n++] = row->region;
    }
  return c;
}

/* The year of a row, from FIRST_YEAR on; YEARS: none. */
static guint
year_of (double months)
{
  double year = floor (months / 12.0) - FIRST_YEAR;
  return year >= 0.0 && year < YEARS ? (guint)year : YEARS;
}

static void
list_years (const Columns *c, TfDrift *drift)
{
  TfDriftYear years[YEARS + 1] = { { 0 } };
  double squares[YEARS + 1] = { 0 };
  guint start[YEARS + 2] = { 0 };
  g_autofree guint32 *regions = tf_new_many (guint32, c->n + 1);
  for (guint k = 0; k < c->n; k++)
    start[year_of (c->months[k]) + 1]++;
  for (guint y = 0; y <= YEARS; y++)
    start[y + 1] += start[y];
  for (guint k = 0; k < c->n; k++)
    {
      guint y = year_of (c->months[k]);
      double off = c->lats[k] - years[y].mean_deg;
      regions[start[y] + years[y].n++] = c->regions[k];
      years[y].mean_deg += off / years[y].n;
      squares[y] += off * (c->lats[k] - years[y].mean_deg);
    }
  drift->years = g_array_new (FALSE, FALSE, sizeof (TfDriftYear));
  for (guint y = 0; y < YEARS; y++)
    {
      TfDriftYear *year = &years[y];
      year->year = (int)y + FIRST_YEAR;
      year->regions = tf_count_distinct (regions + start[y], year->n);
      year->sd_deg = year->n > 1 ? sqrt (squares[y] / (year->n - 1.0)) : NAN;
      year->expected_deg = tf_cycle_latitude (12.0 * year->year + 6.0);
      if (year->n > 0)
        g_array_append_val (drift->years, *year);
    }
}

/* deg a year, through the rows given; NULL: all. */
static double
slope_of (const guint *rows, guint n, gpointer data)
{
  const Columns *c = data;
  double x = 0, y = 0, xx = 0, xy = 0;
  for (guint j = 0; j < n; j++)
    {
      guint k = rows != NULL ? rows[j] : j;
      double dx = c->months[k] / 12.0 - x, dy = c->lats[k] - y;
      x += dx / (j + 1.0);
      y += dy / (j + 1.0);
      xx += dx * (c->months[k] / 12.0 - x);
      xy += dx * (c->lats[k] - y);
    }
  return xx > 0.0 ? xy / xx : NAN;
}

/* Rows of one step: the exponential hardly changes within a tenth of a month. */
typedef struct
{
  double n, months, lats; /* number; mean; sum */
} Step;

static void
fill_steps (const Columns *c, Step *steps)
{
  for (guint k = 0; k < c->n; k++)
    {
      int at = (int)floor ((c->months[k] - 12.0 * FIRST_YEAR) * 10.0);
      Step *step = &steps[CLAMP (at, 0, STEPS - 1)];
      step->n += 1.0;
      step->months += (c->months[k] - step->months) / step->n;
      step->lats += c->lats[k];
    }
}

/* How much less the sum of squares about start exp (-rate t) is than that about 0, with the start
 * that makes it least. */
static double
gain (const Step *steps, double rate, double *start)
{
  double up = 0, down = 0;
  for (guint k = 0; k < STEPS; k++)
    {
      if (!(steps[k].n > 0.0))
        continue;
      double e = exp (-rate * steps[k].months);
      up += e * steps[k].lats;
      down += steps[k].n * e * e;
    }
  *start = up / down;
  return up * up / down;
}

/* The exponential by golden section over its rate, a month: from rising to falling in half a year. */
static void
fit_exponential (const Columns *c, TfDrift *drift)
{
  const double golden = 0.5 * (sqrt (5.0) - 1.0);
  double low = -0.02, high = 0.15, start;
  g_autofree Step *steps = g_new0 (Step, STEPS);
  fill_steps (c, steps);
  while (high - low > 1e-10)
    {
      double left = high - golden * (high - low), right = low + golden * (high - low);
      if (gain (steps, left, &start) > gain (steps, right, &start))
        high = right;
      else
        low = left;
    }
  double rate = 0.5 * (low + high);
  gain (steps, rate, &drift->start_deg);
  drift->tau_months = rate > 1e-6 ? 1.0 / rate : INFINITY;
}

/* Leaves the rows of the curves alone. */
static void
cut (Columns *c, int cycle, const TfDriftParams *params)
{
  guint n = 0;
  double end = tf_cycle_find (cycle + 1) == NULL
                   ? INFINITY
                   : (tf_cycle_minimum (cycle + 1).s - tf_cycle_minimum (cycle).s) / MONTH_S;
  for (guint k = 0; k < c->n; k++)
    {
      if (!(c->months[k] >= params->from_months && c->months[k] <= end - params->before_end_months))
        continue;
      c->months[n] = c->months[k];
      c->lats[n] = c->lats[k];
      c->regions[n++] = c->regions[k];
    }
  c->n = n;
}

/* Months from the first row to the last. */
static double
span_of (const Columns *c)
{
  double first = INFINITY, last = -INFINITY;
  for (guint k = 0; k < c->n; k++)
    {
      first = fmin (first, c->months[k]);
      last = fmax (last, c->months[k]);
    }
  return last - first;
}

static TfDrift
drift_of (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
          const TfDriftParams *params)
{
  TfGroup group = tf_group_of (cycle, hemisphere);
  TfDrift drift = { .cycle = cycle,
                    .hemisphere = hemisphere,
                    .slope_deg_per_year = NAN,
                    .slope_ci = { NAN, NAN },
                    .start_deg = NAN,
                    .tau_months = NAN };
  g_auto (Columns) c = gather (sample, verdicts, &group);
  list_years (&c, &drift);
  cut (&c, cycle, params);
  drift.n = c.n;
  drift.regions = tf_count_distinct (c.regions, c.n);
  if (c.n < MIN_ROWS || !(span_of (&c) >= MIN_MONTHS))
    return drift;
  drift.slope_deg_per_year = slope_of (NULL, c.n, &c);
  drift.slope_ci = tf_bootstrap_clusters (c.regions, c.n, (guint)MAX (params->draws, 0),
                                          (guint64)params->seed, params->level, params->cancel,
                                          slope_of, &c);
  fit_exponential (&c, &drift);
  return drift;
}

void
tf_drift_clear (TfDrift *drift)
{
  g_clear_pointer (&drift->years, g_array_unref);
}

static void
clear_drift (gpointer drift)
{
  tf_drift_clear (drift);
}

GArray *
tf_drifts (const TfSample *sample, const TfVerdict *verdicts, const TfDriftParams *params)
{
  static const int hemispheres[] = { 1, -1, 0 };
  GArray *drifts = g_array_new (FALSE, FALSE, sizeof (TfDrift));
  g_array_set_clear_func (drifts, clear_drift);
  gboolean there[64] = { FALSE };
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    if (verdicts[k].cycle.sure)
      there[CLAMP (verdicts[k].cycle.number, 0, 63)] = TRUE;
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    for (guint h = 0; there[c->number] && h < G_N_ELEMENTS (hemispheres); h++)
      {
        TfDrift drift = drift_of (sample, verdicts, c->number, hemispheres[h], params);
        g_array_append_val (drifts, drift);
      }
  return drifts;
}
