/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-inversion-private.h"
#include "tf-measure-private.h"
#include "tf-plane-field-private.h"

enum
{
  MOST_NODES = 1200
};
/* About the outline's box, so that a potential field and a smoothing have their surroundings. */
static const double MARGIN_MM = 30.0;

void
tf_traced_spec (TfPatchSpec *spec, const TfFrame *frame, const TfOutline *outline,
                const TfComplexityParams *params, double shift_x, double shift_y)
{
  double radius;
  *spec = (TfPatchSpec){ .step_mm = params->step_mm,
                         .fwhm_mm = params->fwhm_mm,
                         .shift_x = shift_x,
                         .shift_y = shift_y,
                         .most_nodes = MOST_NODES };
  tf_outline_get_cap (outline, &spec->lon_deg, &spec->lat_deg, &radius);
  spec->half_x_mm = spec->half_y_mm
      = 2.0 * tf_frame_get_geometry (frame)->radius_mm * sin (0.5 * radius * TF_DEG) + MARGIN_MM;
}

/* The node's field as the measurement uses it, except for the potential one. */
static void
take_field (TfTraced *t)
{
  const TfPatch *p = t->patch;
  for (gsize k = 0; k < p->n; k++)
    {
      double factor = !p->seen[k] ? 0.0 : t->divides ? t->scale / p->mu[k] : t->scale;
      t->field[k] = factor * p->value[k];
      t->dx[k] = factor * p->dx[k];
      t->dy[k] = factor * p->dy[k];
    }
}

/* After take_field: the derivatives' difference is kept, for places between the nodes. */
static void
take_potential (TfTraced *t, const TfPlaneField *plane)
{
  t->more_dx = g_new0 (double, t->patch->n);
  t->more_dy = g_new0 (double, t->patch->n);
  for (gsize k = 0; k < t->patch->n; k++)
    {
      if (!t->patch->seen[k])
        continue;
      t->more_dx[k] = t->scale * plane->bz_dx[k] - t->dx[k];
      t->more_dy[k] = t->scale * plane->bz_dy[k] - t->dy[k];
      t->field[k] = t->scale * plane->bz[k];
      t->dx[k] += t->more_dx[k];
      t->dy[k] += t->more_dy[k];
    }
}

gboolean
tf_traced_gradient (const TfTraced *t, double x, double y, double *dx, double *dy)
{
  double value, mu = tf_patch_at (t->patch, t->patch->mu, x, y);
  if (!tf_patch_look (t->patch, x, y, &value, dx, dy) || !(mu > 0.0))
    return FALSE;
  double factor = t->divides ? t->scale / mu : t->scale;
  *dx = factor * *dx + (t->more_dx != NULL ? tf_patch_at (t->patch, t->more_dx, x, y) : 0.0);
  *dy = factor * *dy + (t->more_dy != NULL ? tf_patch_at (t->patch, t->more_dy, x, y) : 0.0);
  return TRUE;
}

static void
take_transverse (TfTraced *t, const TfPlaneField *plane, double scale)
{
  t->transverse = g_new0 (double, t->patch->n);
  for (gsize k = 0; k < t->patch->n && plane != NULL; k++)
    t->transverse[k] = scale * hypot (plane->bx[k], plane->by[k]);
}

/* The potential field's foot is what the observer sees (potential field used) or the field used
 * itself, standing upright. */
static void
make_fields (TfTraced *t, const TfFrame *frame, const TfMeasureParams *measure, gboolean full)
{
  const TfPatch *p = t->patch;
  gboolean flat = tf_geometry_is_map (tf_frame_get_geometry (frame))
                  || tf_frame_get_info (frame)->field == TF_FIELD_RADIAL;
  gboolean potential = measure->field_used == TF_FIELD_USED_POTENTIAL && !flat;
  g_autoptr (TfPlaneField) plane = NULL;
  t->scale = tf_region_scale (measure);
  t->divides = measure->field_used != TF_FIELD_USED_OBSERVED && !flat;
  take_field (t);
  if (potential)
    plane = tf_plane_field_new (p->width, p->height, p->step_mm, p->value,
                                (const double (*)[3])p->line, p->seen);
  if (plane != NULL)
    take_potential (t, plane);
  if (!full)
    return;
  if (plane != NULL)
    {
      take_transverse (t, plane, t->scale);
      return;
    }
  plane = tf_plane_field_new (p->width, p->height, p->step_mm, t->field, NULL, p->seen);
  take_transverse (t, plane, 1.0);
}

static void
find_inside (TfTraced *t, double mu_min)
{
  TfPatch *p = t->patch;
  for (gsize k = 0; k < p->n; k++)
    {
      double x, y, unit[3];
      tf_patch_node (p, k, &x, &y);
      tf_patch_unit (p, x, y, unit);
      p->seen[k] = p->seen[k] && p->mu[k] >= mu_min;
      t->inside[k] = p->seen[k] && tf_fill_contains (t->fill, unit);
    }
}

TfTraced *
tf_traced_new (const TfFrame *frame, const TfOutline *outline, const TfMeasureParams *measure,
               const TfComplexityParams *params, double shift_x, double shift_y, gboolean full)
{
  TfTraced *t = g_new0 (TfTraced, 1);
  TfPatchSpec spec;
  tf_traced_spec (&spec, frame, outline, params, shift_x, shift_y);
  t->fill = tf_fill_new (outline);
  if (!full && measure->field_used != TF_FIELD_USED_POTENTIAL)
    spec.only = t->fill;
  t->patch = tf_patch_new (frame, &spec);
  gsize n = t->patch->n;
  t->inside = g_new0 (guint8, n);
  t->field = g_new0 (double, n);
  t->dx = g_new0 (double, n);
  t->dy = g_new0 (double, n);
  find_inside (t, measure->mu_min);
  make_fields (t, frame, measure, full);
  return t;
}

void
tf_traced_free (TfTraced *t)
{
  if (t == NULL)
    return;
  tf_patch_free (t->patch);
  tf_fill_free (t->fill);
  g_free (t->inside);
  g_free (t->field);
  g_free (t->dx);
  g_free (t->dy);
  g_free (t->more_dx);
  g_free (t->more_dy);
  g_free (t->transverse);
  g_free (t);
}
