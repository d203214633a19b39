/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-tally.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-joy-line-private.h"
#include "tf-joy-slope.h"
#include "tf-many.h"
#include "tf-sort.h"

enum
{
  BLOCK = 1024,    /* rows of the line that share a sum */
  MAX_CYCLES = 64, /* more than any table will hold */
  SIDES = 3        /* south, none, north */
};
#define WING_MONTHS 13.0 /* the year beside a divide in which it matters, and a month for safety */
#define MONTH_S     (365.25 * TF_DAY_S / 12.0)

/* What a row counts as now. */
typedef struct
{
  gint8 kind, cycle, side;
  gint8 in_line; /* it has a tilt, a latitude and all else that the line asks but the verdict */
  gint8 changes; /* its passage does: never a verdict */
} Row;

typedef struct
{
  guint keeps, breaks, cannot_say;
  double false_sum;
  guint false_n;
} Count;

struct _TfTally
{
  const TfSample *sample;
  TfVerdictParams verdict;
  TfJoyParams joy;
  guint n;
  Row *rows;
  float *chance; /* tf_hale_expected_false */
  guint *by_time;
  double *times; /* in that order */
  Count counts[MAX_CYCLES][SIDES]; /* cycle 0: unknown */
  /* the line */
  guint n_ratio, n_line, no_polarity;
  guint *place;   /* of a row among the ratios; G_MAXUINT: none */
  double *ratio, *weight;
  guint8 *member; /* of the line now */
  double *block;  /* sums of the members' weights */
};

gboolean
tf_tally_offers (const TfJoyParams *joy)
{
  return joy->estimator == TF_JOY_ROBUST && joy->form != TF_JOY_LINEAR_FREE;
}

/* -- counting -------------------------------------------------------------------------------- */

static void
count (TfTally *tally, guint k, int sign)
{
  const Row *row = &tally->rows[k];
  Count *c = &tally->counts[CLAMP (row->cycle, 0, MAX_CYCLES - 1)][row->side + 1];
  guint step = (guint)sign; /* modulo: minus one takes away */
  c->keeps += row->kind == TF_VERDICT_KEEPS ? step : 0;
  c->breaks += row->kind == TF_VERDICT_BREAKS ? step : 0;
  c->cannot_say += row->kind == TF_VERDICT_CANNOT_SAY ? step : 0;
  if (row->kind != TF_VERDICT_CANNOT_SAY && isfinite (tally->chance[k]))
    {
      c->false_n += step;
      c->false_sum += sign * (double)tally->chance[k];
    }
}

static void
set_member (TfTally *tally, guint k, gboolean member)
{
  guint at = tally->place[k];
  gboolean was = at != G_MAXUINT ? tally->member[at] : tally->rows[k].in_line == 2;
  if (was == member)
    return;
  guint step = member ? 1u : (guint)-1;
  tally->n_line += step;
  tally->no_polarity += tf_sample_get (tally->sample, k)->leading_polarity == 0 ? step : 0;
  if (at == G_MAXUINT)
    {
      tally->rows[k].in_line = member ? 2 : 1;
      return;
    }
  tally->member[at] = (guint8)member;
  tally->block[at / BLOCK] += member ? tally->weight[at] : -tally->weight[at];
}

static gboolean
belongs (const TfTally *tally, guint k)
{
  return tally->rows[k].in_line
         && (tally->rows[k].kind != TF_VERDICT_BREAKS || tally->joy.with_breaks);
}

static void
take_verdict (TfTally *tally, guint k, const TfVerdict *verdict)
{
  tally->rows[k].kind = tally->rows[k].changes ? TF_VERDICT_CANNOT_SAY : (gint8)verdict->kind;
  tally->rows[k].cycle = (gint8)verdict->cycle.number;
}

/* -- making ---------------------------------------------------------------------------------- */

static void
judge_all (TfTally *tally, const TfVerdict *verdicts, const TfDivides *divides)
{
  const TfVerdict keeps = { .kind = TF_VERDICT_KEEPS };
  for (guint k = 0; k < tally->n; k++)
    {
      const TfSampleRow *row = tf_sample_get (tally->sample, k);
      TfVerdict verdict = verdicts != NULL ? verdicts[k]
                                           : tf_verdict_judge (row, divides, &tally->verdict);
      tally->rows[k].changes = g_strcmp0 (verdict.reason, "hale-changes") == 0;
      take_verdict (tally, k, &verdict);
      tally->rows[k].side = row->lat_deg > 0 ? 1 : row->lat_deg < 0 ? -1 : 0;
      tally->rows[k].in_line = tf_joy_uses (row, &keeps, &tally->joy) != FALSE;
      tally->chance[k] = (float)tf_hale_expected_false (row);
      count (tally, k, 1);
    }
}

static void
order_times (TfTally *tally)
{
  g_autofree double *times = tf_new_many (double, tally->n + 1);
  g_autofree guint *rows = tf_new_many (guint, tally->n + 1);
  guint n = 0;
  for (guint k = 0; k < tally->n; k++)
    if (tf_time_is_known (tf_sample_get (tally->sample, k)->time))
      {
        times[n] = tf_sample_get (tally->sample, k)->time.s;
        rows[n++] = k;
      }
  g_autofree guint *order = tf_sort_order (times, n);
  for (guint k = 0; k < n; k++)
    {
      tally->by_time[k] = rows[order[k]];
      tally->times[k] = times[order[k]];
    }
  for (guint k = n; k < tally->n; k++)
    tally->times[k] = INFINITY;
}

static void
order_ratios (TfTally *tally)
{
  g_autofree double *ratios = tf_new_many (double, tally->n + 1), *weights = tf_new_many (double, tally->n + 1);
  g_autofree guint *rows = tf_new_many (guint, tally->n + 1);
  guint n = 0;
  for (guint k = 0; k < tally->n; k++)
    {
      const TfSampleRow *row = tf_sample_get (tally->sample, k);
      double x = tf_joy_x (tally->joy.form, fabs (row->lat_deg));
      tally->place[k] = G_MAXUINT;
      if (!tally->rows[k].in_line || !(x > 0))
        continue;
      ratios[n] = tf_joy_y (tally->joy.form, row->axis_tilt_deg) / x;
      weights[n] = x;
      rows[n++] = k;
    }
  g_autofree guint *order = tf_sort_order (ratios, n);
  tally->n_ratio = n;
  tally->ratio = tf_new_many (double, n + 1);
  tally->weight = tf_new_many (double, n + 1);
  tally->member = tf_new0_many (guint8, n + 1);
  tally->block = g_new0 (double, n / BLOCK + 1);
  for (guint at = 0; at < n; at++)
    {
      tally->place[rows[order[at]]] = at;
      tally->ratio[at] = ratios[order[at]];
      tally->weight[at] = weights[order[at]];
    }
}

TfTally *
tf_tally_new (const TfSample *sample, const TfVerdict *verdicts, const TfDivides *divides,
              const TfVerdictParams *verdict, const TfJoyParams *joy)
{
  g_return_val_if_fail (sample != NULL && divides != NULL && verdict != NULL && joy != NULL, NULL);
  TfTally *tally = g_new0 (TfTally, 1);
  tally->sample = sample;
  tally->verdict = *verdict;
  tally->joy = *joy;
  tally->n = tf_sample_get_n (sample);
  tally->rows = tf_new0_many (Row, tally->n + 1);
  tally->chance = tf_new_many (float, tally->n + 1);
  tally->by_time = tf_new_many (guint, tally->n + 1);
  tally->times = tf_new_many (double, tally->n + 1);
  tally->place = tf_new_many (guint, tally->n + 1);
  judge_all (tally, verdicts, divides);
  order_times (tally);
  order_ratios (tally);
  for (guint k = 0; k < tally->n; k++)
    if (belongs (tally, k))
      set_member (tally, k, TRUE);
  return tally;
}

void
tf_tally_free (TfTally *tally)
{
  if (tally == NULL)
    return;
  g_free (tally->rows);
  g_free (tally->chance);
  g_free (tally->by_time);
  g_free (tally->times);
  g_free (tally->place);
  g_free (tally->ratio);
  g_free (tally->weight);
  g_free (tally->member);
  g_free (tally->block);
  g_free (tally);
}

/* -- moving ---------------------------------------------------------------------------------- */

static guint
first_at (const TfTally *tally, double time)
{
  guint low = 0, high = tally->n;
  while (low < high)
    {
      guint middle = low + (high - low) / 2;
      if (tally->times[middle] < time)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

guint
tf_tally_move (TfTally *tally, const TfDivides *divides, int cycle, int hemisphere)
{
  g_return_val_if_fail (tally != NULL && divides != NULL, 0);
  const TfDivideParams *params = tf_divides_get_params (divides);
  double minimum = tf_cycle_minimum (cycle).s;
  if (isnan (minimum))
    minimum = tf_time_from_year (params->provisional_year).s;
  double from = minimum - (params->before_months + WING_MONTHS) * MONTH_S,
         to = minimum + (params->after_months + WING_MONTHS) * MONTH_S;
  guint changed = 0;
  for (guint j = first_at (tally, from); j < tally->n && tally->times[j] <= to; j++)
    {
      guint k = tally->by_time[j];
      if (tally->rows[k].side * hemisphere < 0)
        continue;
      TfVerdict verdict
          = tf_verdict_judge (tf_sample_get (tally->sample, k), divides, &tally->verdict);
      if (tally->rows[k].changes)
        verdict.kind = TF_VERDICT_CANNOT_SAY;
      if (verdict.kind == (TfVerdictKind)tally->rows[k].kind
          && verdict.cycle.number == tally->rows[k].cycle)
        continue;
      count (tally, k, -1);
      take_verdict (tally, k, &verdict);
      count (tally, k, 1);
      set_member (tally, k, belongs (tally, k));
      changed++;
    }
  return changed;
}

/* -- what it says ---------------------------------------------------------------------------- */

static void
add_count (Count *sum, const Count *c)
{
  sum->keeps += c->keeps;
  sum->breaks += c->breaks;
  sum->cannot_say += c->cannot_say;
  sum->false_sum += c->false_sum;
  sum->false_n += c->false_n;
}

static void
append_row (GArray *table, int cycle, int hemisphere, const Count *c, double level)
{
  const TfInterval none = { NAN, NAN };
  TfHaleRow row = { .cycle = cycle,
                    .hemisphere = hemisphere,
                    .n = c->keeps + c->breaks,
                    .keeps = c->keeps,
                    .breaks = c->breaks,
                    .cannot_say = c->cannot_say,
                    .cluster = none };
  guint all = row.n + row.cannot_say;
  row.share = row.n == 0 ? NAN : (double)row.breaks / row.n;
  row.bounds.low = all == 0 ? NAN : (double)row.breaks / all;
  row.bounds.high = all == 0 ? NAN : (double)(row.breaks + row.cannot_say) / all;
  row.expected_false = c->false_n == 0 ? NAN : fmax (c->false_sum / c->false_n, 0.0);
  row.wilson = tf_wilson (row.breaks, row.n, level);
  row.clopper_pearson = tf_clopper_pearson (row.breaks, row.n, level);
  g_array_append_val (table, row);
}

GArray *
tf_tally_hale (const TfTally *tally, double level)
{
  g_return_val_if_fail (tally != NULL, NULL);
  GArray *table = g_array_new (FALSE, FALSE, sizeof (TfHaleRow));
  Count all = { 0 };
  for (int cycle = 0; cycle < MAX_CYCLES; cycle++)
    {
      const Count *side = tally->counts[cycle];
      Count both = { 0 };
      for (int s = 0; s < SIDES; s++)
        add_count (&both, &side[s]);
      add_count (&all, &both);
      if (cycle == 0 || both.keeps + both.breaks + both.cannot_say == 0)
        continue;
      append_row (table, cycle, 1, &side[2], level);
      append_row (table, cycle, -1, &side[0], level);
      append_row (table, cycle, 0, &both, level);
    }
  append_row (table, 0, 0, &all, level);
  return table;
}

static double
find_slope (const TfTally *tally)
{
  double total = 0.0, before = 0.0;
  guint n_blocks = tally->n_ratio / BLOCK + 1, block = 0;
  for (guint b = 0; b < n_blocks; b++)
    total += tally->block[b];
  TfJoyRunning median = { .half = 0.5 * total, .value = NAN };
  while (block + 1 < n_blocks && before + tally->block[block] < median.half * (1.0 - 1e-9))
    before += tally->block[block++];
  median.sum = before;
  for (guint at = block * BLOCK; at < tally->n_ratio && !median.done; at++)
    if (tally->member[at])
      tf_joy_running_add (&median, tally->ratio[at], tally->weight[at]);
  return median.value;
}

TfJoyFit
tf_tally_joy (const TfTally *tally)
{
  const TfInterval none = { NAN, NAN };
  TfJoyFit fit = { .n = tally->n_line,
                   .no_polarity = tally->no_polarity,
                   .slope = NAN,
                   .intercept = NAN,
                   .slope_ci = none,
                   .intercept_ci = none,
                   .scatter_deg = NAN,
                   .mean_tilt_deg = NAN,
                   .median_tilt_deg = NAN,
                   .axial_mean_deg = NAN,
                   .axial_resultant = NAN };
  if (tally->n_line >= 3 && tf_tally_offers (&tally->joy))
    fit.slope = find_slope (tally);
  return fit;
}
