/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-inversion.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-contour-private.h"
#include "tf-inversion-private.h"
#include "tf-json.h"

void
tf_inversion_clear (TfInversion *inversion)
{
  for (guint k = 0; k < inversion->n; k++)
    g_free (inversion->lines[k].points);
  g_free (inversion->lines);
  memset (inversion, 0, sizeof *inversion);
}

void
tf_inversion_copy (TfInversion *to, const TfInversion *from)
{
  to->n = from->n;
  to->lines = g_memdup2 (from->lines, from->n * sizeof *from->lines);
  for (guint k = 0; k < to->n; k++)
    to->lines[k].points
        = g_memdup2 (from->lines[k].points, from->lines[k].n * sizeof *from->lines[k].points);
}

double
tf_inversion_length (const TfInversion *inversion)
{
  double sum = 0.0;
  for (guint k = 0; k < inversion->n; k++)
    sum += inversion->lines[k].length_mm;
  return sum;
}

static double
stretch_mm (const TfInversionPoint *a, const TfInversionPoint *b, double radius_mm)
{
  return tf_sphere_distance (a->lon_deg, a->lat_deg, b->lon_deg, b->lat_deg) * TF_DEG * radius_mm;
}

void
tf_inversion_sum (const TfInversion *inversion, double radius_mm, double least_gradient,
                  double least_transverse, double *length_mm, double *weighted_gauss)
{
  double length = 0.0, weighted = 0.0;
  for (guint k = 0; k < inversion->n; k++)
    for (guint i = 1; i < inversion->lines[k].n; i++)
      {
        const TfInversionPoint *a = &inversion->lines[k].points[i - 1], *b = a + 1;
        double gradient = 0.5 * (a->gradient_gauss_mm + b->gradient_gauss_mm);
        if (!(gradient >= least_gradient)
            || !(0.5 * (a->transverse_gauss + b->transverse_gauss) >= least_transverse))
          continue;
        double d = stretch_mm (a, b, radius_mm);
        length += d;
        weighted += gradient * d;
      }
  if (length_mm != NULL)
    *length_mm = length;
  if (weighted_gauss != NULL)
    *weighted_gauss = weighted;
}

/* -- tracing ----------------------------------------------------------------------------------- */

typedef struct
{
  const TfTraced *t;
  const TfComplexityParams *params;
} Judge;

/* Whether the field of that sign reaches the strong level on its side before it turns over. */
static gboolean
reaches (const Judge *judge, double x, double y, double cos_a, double sin_a, int sign)
{
  const TfTraced *t = judge->t;
  double step = t->patch->step_mm;
  for (double s = step; s <= judge->params->side_mm + 1e-9; s += step)
    {
      double field
          = sign * tf_patch_at (t->patch, t->field, x + sign * s * cos_a, y + sign * s * sin_a);
      if (field >= judge->params->strong_gauss)
        return TRUE;
      if (!(field > 0.0))
        return FALSE;
    }
  return FALSE;
}

/* A point of the zero line in plane coordinates: FALSE when it is not a part of an inversion line
 * of the region. */
static gboolean
judge_point (const Judge *judge, double x, double y, TfInversionPoint *point)
{
  const TfTraced *t = judge->t;
  double unit[3], gx, gy;
  tf_patch_unit (t->patch, x, y, unit);
  if (!tf_fill_contains (t->fill, unit) || !tf_traced_gradient (t, x, y, &gx, &gy))
    return FALSE;
  double size = hypot (gx, gy);
  if (!(size > 0.0))
    return FALSE;
  if (!reaches (judge, x, y, gx / size, gy / size, 1)
      || !reaches (judge, x, y, gx / size, gy / size, -1))
    return FALSE;
  tf_sphere_lonlat (unit, &point->lon_deg, &point->lat_deg);
  point->gradient_gauss_mm = size;
  point->transverse_gauss
      = t->transverse != NULL ? tf_patch_at (t->patch, t->transverse, x, y) : 0.0;
  return TRUE;
}

static void
finish_line (GArray *lines, GArray *points, double radius_mm)
{
  if (points->len < 2)
    {
      g_array_set_size (points, 0);
      return;
    }
  TfInversionLine line = { .n = points->len };
  line.points = g_memdup2 (points->data, points->len * sizeof (TfInversionPoint));
  double weighted = 0.0;
  for (guint i = 0; i < line.n; i++)
    {
      TfInversionPoint *p = &line.points[i];
      line.max_gradient_gauss_mm = MAX (line.max_gradient_gauss_mm, p->gradient_gauss_mm);
      if (i == 0)
        continue;
      double d = stretch_mm (p - 1, p, radius_mm);
      p->lon_deg = p[-1].lon_deg + tf_wrap_180 (p->lon_deg - p[-1].lon_deg);
      line.length_mm += d;
      weighted += d * 0.5 * (p[-1].gradient_gauss_mm + p->gradient_gauss_mm);
    }
  const TfInversionPoint *last = &line.points[line.n - 1];
  line.closed = line.n > 3 && stretch_mm (line.points, last, radius_mm) < 1e-9;
  line.mean_gradient_gauss_mm
      = line.length_mm > 0.0 ? weighted / line.length_mm : line.max_gradient_gauss_mm;
  g_array_append_val (lines, line);
  g_array_set_size (points, 0);
}

/* The parts of one contour that are inversion lines. A closed contour that is not one throughout is
 * begun after a gap, so that no part is cut where the contour happens to begin. */
static void
split_contour (GArray *lines, const Judge *judge, const GArray *contour)
{
  const TfPatch *p = judge->t->patch;
  guint n = contour->len, first = 0;
  const TfContourPoint *at = &g_array_index (contour, TfContourPoint, 0);
  g_autofree TfInversionPoint *points = g_new (TfInversionPoint, n);
  g_autofree gboolean *kept = g_new (gboolean, n);
  g_autoptr (GArray) run = g_array_new (FALSE, FALSE, sizeof (TfInversionPoint));
  for (guint i = 0; i < n; i++)
    kept[i] = judge_point (judge, p->x0 + p->step_mm * at[i].x, p->y0 + p->step_mm * at[i].y,
                           &points[i]);
  gboolean loop = n > 3 && hypot (at[0].x - at[n - 1].x, at[0].y - at[n - 1].y) < 1e-12;
  while (loop && first < n && kept[first])
    first++;
  if (first == n)
    loop = FALSE, first = 0;
  /* of a loop the last point is the first again */
  guint round = loop ? n - 1 : n;
  for (guint i = 0; i < round; i++)
    {
      guint k = loop ? (first + i) % round : i;
      if (kept[k])
        g_array_append_val (run, points[k]);
      else
        finish_line (lines, run, p->radius_mm);
    }
  finish_line (lines, run, p->radius_mm);
}

static gint
by_length (gconstpointer a, gconstpointer b)
{
  double la = ((const TfInversionLine *)a)->length_mm, lb = ((const TfInversionLine *)b)->length_mm;
  return (la < lb) - (la > lb);
}

void
tf_inversion_trace (TfInversion *inversion, const TfTraced *traced,
                    const TfComplexityParams *params)
{
  Judge judge = { traced, params };
  const TfPatch *p = traced->patch;
  g_autoptr (GPtrArray) contours = tf_contours (traced->field, p->seen, p->width, p->height, 0.0);
  GArray *lines = g_array_new (FALSE, FALSE, sizeof (TfInversionLine));
  for (guint k = 0; k < contours->len; k++)
    split_contour (lines, &judge, contours->pdata[k]);
  g_array_sort (lines, by_length);
  inversion->n = lines->len;
  inversion->lines = (TfInversionLine *)(void *)g_array_free (lines, FALSE);
}

/* -- JSON -------------------------------------------------------------------------------------- */

static void
build_line (const TfInversionLine *line, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  tf_json_number (builder, "length_mm", line->length_mm);
  tf_json_number (builder, "mean_gradient_gauss_mm", line->mean_gradient_gauss_mm);
  tf_json_number (builder, "max_gradient_gauss_mm", line->max_gradient_gauss_mm);
  tf_json_bool (builder, "closed", line->closed);
  json_builder_set_member_name (builder, "points");
  json_builder_begin_array (builder);
  for (guint i = 0; i < line->n; i++)
    {
      const double place[2] = { line->points[i].lon_deg, line->points[i].lat_deg };
      tf_json_numbers (builder, NULL, place, 2);
    }
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "gradients_gauss_mm");
  json_builder_begin_array (builder);
  for (guint i = 0; i < line->n; i++)
    json_builder_add_double_value (builder, line->points[i].gradient_gauss_mm);
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

void
tf_inversion_build_json (const TfInversion *inversion, JsonBuilder *builder)
{
  json_builder_begin_array (builder);
  for (guint k = 0; k < inversion->n; k++)
    build_line (&inversion->lines[k], builder);
  json_builder_end_array (builder);
}
