/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The figures that are sums over the nodes of the reference grid. Each node stands for step x step
 * Mm2; 1 Mm2 = 1e16 cm2. */

#include <math.h>
#include <string.h>

#include "tf-complexity-private.h"
#include "tf-constants.h"

static const double CM2_IN_MM2 = 1e16;
static const double FWHM_SIGMA = 2.3548200450309493; /* 2 sqrt (2 ln 2) */
static const double REACH_SIGMAS = 4.0;

static double
node_flux (const TfTraced *t, gsize k)
{
  return fabs (t->field[k]) * t->patch->step_mm * t->patch->step_mm * CM2_IN_MM2;
}

/* Whether a node of that sign with strong field is within one node of (x, y), sides and corners:
 * dilation by 3 x 3. */
static gboolean
touches (const TfTraced *t, guint x, guint y, double sign, double strong)
{
  const TfPatch *p = t->patch;
  for (guint j = y > 0 ? y - 1 : 0; j <= MIN (y + 1, p->height - 1); j++)
    for (guint i = x > 0 ? x - 1 : 0; i <= MIN (x + 1, p->width - 1); i++)
      {
        gsize k = (gsize)j * p->width + i;
        if (t->inside[k] && sign * t->field[k] > strong)
          return TRUE;
      }
  return FALSE;
}

static void
convolve (const double *in, double *out, guint width, guint height, gsize across,
          const double *kernel, int reach)
{
  guint length = across == 1 ? width : height;
  for (guint y = 0; y < height; y++)
    for (guint x = 0; x < width; x++)
      {
        gsize k = (gsize)y * width + x;
        int at = (int)(across == 1 ? x : y);
        double sum = 0.0;
        for (int d = MAX (-reach, -at); d <= MIN (reach, (int)length - 1 - at); d++)
          sum += kernel[d + reach] * in[(gssize)k + d * (gssize)across];
        out[k] = sum;
      }
}

/* Gaussian of @sigma nodes, of unit area or unit peak. */
static void
spread (double *map, guint width, guint height, double sigma, gboolean peak)
{
  int reach = (int)ceil (REACH_SIGMAS * sigma);
  g_autofree double *kernel = g_new (double, 2 * reach + 1),
                    *half = g_new (double, (gsize)width *height);
  double sum = 0.0;
  for (int d = -reach; d <= reach; d++)
    sum += kernel[d + reach] = exp (-0.5 * d * d / (sigma * sigma));
  for (int d = 0; d <= 2 * reach && !peak; d++)
    kernel[d] /= sum;
  convolve (map, half, width, height, 1, kernel, reach);
  convolve (half, map, width, height, width, kernel, reach);
}

/* Schrijver 2007 (from memory): bitmaps of field above +150 and below -150 Mx/cm2, each dilated by
 * a 3 x 3 kernel; their overlap is the strong-gradient polarity separation line; convolved with a
 * Gaussian of FWHM 15 Mm it weighs the unsigned flux. */
double
tf_complexity_r (const TfTraced *t, const TfComplexityParams *params)
{
  const TfPatch *p = t->patch;
  g_autofree double *map = g_new0 (double, p->n);
  double sum = 0.0;
  for (guint y = 0; y < p->height; y++)
    for (guint x = 0; x < p->width; x++)
      {
        gsize k = (gsize)y * p->width + x;
        map[k] = t->inside[k] && touches (t, x, y, 1.0, params->strong_gauss)
                 && touches (t, x, y, -1.0, params->strong_gauss);
      }
  spread (map, p->width, p->height, params->near_mm / FWHM_SIGMA / p->step_mm,
          params->r_weight == 1);
  for (gsize k = 0; k < p->n; k++)
    if (t->inside[k])
      sum += map[k] * node_flux (t, k);
  return sum;
}

/* Marks the nodes within @reach steps of a plane place. */
static void
mark_about (const TfPatch *p, guint8 *marked, double x, double y, double reach)
{
  double u = (x - p->x0) / p->step_mm, v = (y - p->y0) / p->step_mm;
  int first_y = MAX (0, (int)ceil (v - reach)),
      last_y = MIN ((int)p->height - 1, (int)floor (v + reach));
  for (int j = first_y; j <= last_y; j++)
    {
      double half = sqrt (MAX (0.0, reach * reach - (j - v) * (j - v)));
      int first_x = MAX (0, (int)ceil (u - half)),
          last_x = MIN ((int)p->width - 1, (int)floor (u + half));
      for (int i = first_x; i <= last_x; i++)
        marked[(gsize)j * p->width + (gsize)i] = 1;
    }
}

/* Calls for both ends and the middle of every strong-gradient stretch. */
static void
mark_strong (const TfTraced *t, const TfInversion *inversion, const TfComplexityParams *params,
             double reach_mm, guint8 *marked)
{
  for (guint k = 0; k < inversion->n; k++)
    for (guint i = 1; i < inversion->lines[k].n; i++)
      {
        const TfInversionPoint *ends = &inversion->lines[k].points[i - 1];
        double unit[3], x[2], y[2];
        if (!(ends[0].gradient_gauss_mm + ends[1].gradient_gauss_mm
              >= 2.0 * params->gradient_gauss_mm))
          continue;
        for (guint e = 0; e < 2; e++)
          {
            tf_sphere_unit (ends[e].lon_deg, ends[e].lat_deg, unit);
            tf_patch_plane (t->patch, unit, &x[e], &y[e]);
          }
        for (guint e = 0; e <= 2; e++)
          mark_about (t->patch, marked, x[0] + 0.5 * e * (x[1] - x[0]),
                      y[0] + 0.5 * e * (y[1] - y[0]), reach_mm / t->patch->step_mm);
      }
}

double
tf_complexity_flux_near (const TfTraced *t, const TfInversion *inversion,
                         const TfComplexityParams *params)
{
  g_autofree guint8 *marked = g_new0 (guint8, t->patch->n);
  double sum = 0.0;
  mark_strong (t, inversion, params, params->near_mm, marked);
  for (gsize k = 0; k < t->patch->n; k++)
    if (marked[k] && t->inside[k])
      sum += node_flux (t, k);
  return sum;
}

/* -- pieces ------------------------------------------------------------------------------------ */

static int
strong_sign (const TfTraced *t, gsize k, double strong)
{
  if (!t->inside[k] || !(fabs (t->field[k]) >= strong))
    return 0;
  return t->field[k] > 0.0 ? 1 : -1;
}

/* Flux of the piece that node @start belongs to; its signs become 0. */
static double
take_piece (const TfTraced *t, gint8 *signs, gsize start, GArray *stack)
{
  const TfPatch *p = t->patch;
  gint8 sign = signs[start];
  double flux = 0.0;
  g_array_append_val (stack, start);
  signs[start] = 0;
  while (stack->len > 0)
    {
      gsize at = g_array_index (stack, gsize, stack->len - 1);
      guint x = (guint)(at % p->width), y = (guint)(at / p->width);
      g_array_set_size (stack, stack->len - 1);
      flux += node_flux (t, at);
      for (guint j = y > 0 ? y - 1 : 0; j <= MIN (y + 1, p->height - 1); j++)
        for (guint i = x > 0 ? x - 1 : 0; i <= MIN (x + 1, p->width - 1); i++)
          {
            gsize next = (gsize)j * p->width + i;
            if (signs[next] != sign)
              continue;
            signs[next] = 0;
            g_array_append_val (stack, next);
          }
    }
  return flux;
}

guint
tf_complexity_pieces (const TfTraced *t, double strong_gauss, double share)
{
  g_autofree gint8 *signs = g_new (gint8, t->patch->n);
  g_autoptr (GArray) stack = g_array_new (FALSE, FALSE, sizeof (gsize));
  g_autoptr (GArray) fluxes = g_array_new (FALSE, FALSE, sizeof (double));
  double sum = 0.0;
  guint n = 0;
  for (gsize k = 0; k < t->patch->n; k++)
    signs[k] = (gint8)strong_sign (t, k, strong_gauss);
  for (gsize k = 0; k < t->patch->n; k++)
    if (signs[k] != 0)
      {
        double flux = take_piece (t, signs, k, stack);
        g_array_append_val (fluxes, flux);
        sum += flux;
      }
  for (guint k = 0; k < fluxes->len; k++)
    n += g_array_index (fluxes, double, k) >= share * sum;
  return n;
}

/* -- delta candidate --------------------------------------------------------------------------- */

typedef struct
{
  double unit[3];
} Core;

/* Not on the rim of its core: never the nearest. */
static gboolean
lies_within (const TfTraced *t, gsize k, int sign, double core_gauss)
{
  const TfPatch *p = t->patch;
  guint x = (guint)(k % p->width), y = (guint)(k / p->width);
  return x > 0 && y > 0 && x + 1 < p->width && y + 1 < p->height
         && strong_sign (t, k - 1, core_gauss) == sign && strong_sign (t, k + 1, core_gauss) == sign
         && strong_sign (t, k - p->width, core_gauss) == sign
         && strong_sign (t, k + p->width, core_gauss) == sign;
}

static GArray *
find_cores (const TfTraced *t, int sign, double core_gauss, const guint8 *near_line)
{
  GArray *cores = g_array_new (FALSE, FALSE, sizeof (Core));
  for (gsize k = 0; k < t->patch->n; k++)
    {
      double x, y;
      Core core;
      if (strong_sign (t, k, core_gauss) != sign || (near_line != NULL && !near_line[k])
          || lies_within (t, k, sign, core_gauss))
        continue;
      tf_patch_node (t->patch, k, &x, &y);
      tf_patch_unit (t->patch, x, y, core.unit);
      g_array_append_val (cores, core);
    }
  return cores;
}

/* Least great-circle distance between cores of the two signs, Mm; NaN when one is not there. */
static double
nearest (const GArray *a, const GArray *b, double radius_mm)
{
  double best = NAN;
  for (guint i = 0; i < a->len; i++)
    for (guint j = 0; j < b->len; j++)
      {
        const double *u = g_array_index (a, Core, i).unit, *v = g_array_index (b, Core, j).unit;
        double chord2 = 0.0;
        for (guint k = 0; k < 3; k++)
          chord2 += (u[k] - v[k]) * (u[k] - v[k]);
        best = fmin (best, chord2);
      }
  return 2.0 * radius_mm * asin (MIN (1.0, 0.5 * sqrt (best)));
}

/* A delta is umbrae of opposite polarity in one penumbra, less than 2 deg apart (Kuenzel 1960, from
 * memory). A magnetogram shows no penumbra: two strong cores that near, on either side of a
 * strong-gradient stretch of line, are a candidate and no more. */
void
tf_complexity_delta (TfComplexity *c, const TfTraced *t, const TfComplexityParams *params)
{
  double radius = t->patch->radius_mm, reach = params->core_deg * TF_DEG * radius;
  g_autoptr (GArray) plus = find_cores (t, 1, params->core_gauss, NULL);
  g_autoptr (GArray) minus = find_cores (t, -1, params->core_gauss, NULL);
  if (plus->len == 0 || minus->len == 0)
    {
      c->delta_reason = tf_note_new ("delta-no-cores", "d", params->core_gauss);
      return;
    }
  c->delta_distance_mm = nearest (plus, minus, radius);
  if (c->delta_distance_mm >= reach)
    {
      c->delta_reason = tf_note_new ("delta-apart", "dd", c->delta_distance_mm, reach);
      return;
    }
  g_autofree guint8 *near_line = g_new0 (guint8, t->patch->n);
  mark_strong (t, &c->inversion, params, reach, near_line);
  g_autoptr (GArray) plus_near = find_cores (t, 1, params->core_gauss, near_line);
  g_autoptr (GArray) minus_near = find_cores (t, -1, params->core_gauss, near_line);
  double distance = nearest (plus_near, minus_near, radius);
  c->delta_candidate = distance < reach;
  if (c->delta_candidate)
    c->delta_reason = tf_note_new ("delta-candidate", "ddd", params->core_gauss, distance,
                                   c->max_gradient_gauss_mm);
  else
    c->delta_reason
        = tf_note_new ("delta-gentle", "dd", c->delta_distance_mm, params->gradient_gauss_mm);
}
