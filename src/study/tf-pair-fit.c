/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-line.h"
#include "tf-pair-private.h"

/* The line through the cells of two instruments, over all and by bins. */

enum
{
  MIN_CELLS = 10
};

static const double mu_edges[TF_PAIR_MU_BINS + 1] = { 0.0, 0.6, 0.75, 0.88, HUGE_VAL };
static const double field_edges[TF_PAIR_FIELD_BINS + 1] = { 0.0, 10.0, 30.0, 100.0, HUGE_VAL };

/* Columns of the cells of one bin. */
typedef struct
{
  guint n;
  double *x, *y, *wx, *wy;
  guint32 *block;
} Columns;

static void
columns_clear (Columns *c)
{
  g_free (c->x);
  g_free (c->y);
  g_free (c->wx);
  g_free (c->wy);
  g_free (c->block);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Columns, columns_clear)

static double
strength (const TfPairCell *cell)
{
  return 0.5 * (fabs (cell->field[0]) + fabs (cell->field[1]));
}

static double
weight (double sigma, double field, const TfPairParams *params)
{
  return 1.0 / (sigma * sigma + params->change_share * params->change_share * field * field);
}

typedef double (*Quantity) (const TfPairCell *cell);

/* Cells with from <= quantity < to; NULL: all. What changes on the Sun between the frames is shared
 * out to both by the strength of the two together, so that neither is favoured. */
static Columns
columns_of (const GArray *cells, Quantity quantity, double from, double to,
            const TfPairParams *params)
{
  Columns c = { 0,
                g_new (double, cells->len + 1),
                g_new (double, cells->len + 1),
                g_new (double, cells->len + 1),
                g_new (double, cells->len + 1),
                g_new (guint32, cells->len + 1) };
  for (guint k = 0; k < cells->len; k++)
    {
      const TfPairCell *cell = &g_array_index (cells, TfPairCell, k);
      if (quantity != NULL && !(quantity (cell) >= from && quantity (cell) < to))
        continue;
      c.x[c.n] = cell->field[0];
      c.y[c.n] = cell->field[1];
      c.wx[c.n] = weight (cell->sigma[0], strength (cell) * G_SQRT2 / 2.0, params);
      c.wy[c.n] = weight (cell->sigma[1], strength (cell) * G_SQRT2 / 2.0, params);
      c.block[c.n++] = cell->block;
    }
  return c;
}

static double
draw_slope (const guint *rows, guint n, gpointer data)
{
  const Columns *c = data;
  g_auto (Columns) d = {
    n,   g_new (double, n + 1), g_new (double, n + 1), g_new (double, n + 1), g_new (double, n + 1),
    NULL
  };
  for (guint k = 0; k < n; k++)
    {
      d.x[k] = c->x[rows[k]];
      d.y[k] = c->y[rows[k]];
      d.wx[k] = c->wx[rows[k]];
      d.wy[k] = c->wy[rows[k]];
    }
  return tf_line_york (d.x, d.y, d.wx, d.wy, n).slope;
}

static TfInterval
interval_of (Columns *c, const TfPairParams *params)
{
  return tf_bootstrap_clusters (c->block, c->n, (guint)MAX (params->draws, 0),
                                (guint64)params->seed, params->level, NULL, draw_slope, c);
}

static TfPairBin
bin_of (const GArray *cells, Quantity quantity, double from, double to, const TfPairParams *params)
{
  g_auto (Columns) c = columns_of (cells, quantity, from, to, params);
  TfPairBin bin = { from, to, c.n, NAN, { NAN, NAN } };
  if (c.n < MIN_CELLS)
    return bin;
  bin.factor = tf_line_york (c.x, c.y, c.wx, c.wy, c.n).slope;
  bin.interval = interval_of (&c, params);
  return bin;
}

static double
mu_of (const TfPairCell *cell)
{
  return cell->mu;
}

void
tf_pair_fit (TfPairScale *scale, const GArray *cells, const TfPairParams *params)
{
  g_auto (Columns) c = columns_of (cells, NULL, 0.0, 0.0, params);
  TfLine line = tf_line_york (c.x, c.y, c.wx, c.wy, c.n);
  scale->cells = c.n;
  scale->factor = line.slope;
  scale->offset_gauss = line.intercept;
  scale->chi2 = c.n > 2 ? line.chi2 / (c.n - 2.0) : NAN;
  double wider = sqrt (fmax (1.0, scale->chi2));
  scale->sigma = line.slope_sd * wider;
  scale->offset_sigma = line.intercept_sd * wider;
  scale->interval = interval_of (&c, params);
  for (int b = 0; b < TF_PAIR_MU_BINS; b++)
    scale->by_mu[b] = bin_of (cells, mu_of, mu_edges[b], mu_edges[b + 1], params);
  for (int b = 0; b < TF_PAIR_FIELD_BINS; b++)
    scale->by_field[b] = bin_of (cells, strength, field_edges[b], field_edges[b + 1], params);
}
