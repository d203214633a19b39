/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-potential.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-patch-private.h"
#include "tf-plane-field-private.h"

/* Nodes a side, at most: a wider box has coarser steps. */
enum
{
  MOST_NODES = 512
};
/* Where the Sun is seen at a grazing angle nothing is added. */
static const double LEAST_MU = 0.1;

struct _TfPotential
{
  TfPatch *patch;
  double *added; /* G: radial estimate less value / mu, one a node */
  double left;
};

static TfPatch *
make_patch (const TfFrame *frame, const TfOutline *outline, double step_mm, double margin_mm)
{
  TfPatchSpec spec = { .most_nodes = MOST_NODES };
  double radius;
  tf_outline_get_cap (outline, &spec.lon_deg, &spec.lat_deg, &radius);
  spec.half_x_mm = spec.half_y_mm
      = 2.0 * tf_frame_get_geometry (frame)->radius_mm * sin (0.5 * radius * TF_DEG) + margin_mm;
  spec.step_mm = MAX (step_mm, 2.0 * spec.half_x_mm / (MOST_NODES - 2));
  spec.fwhm_mm = spec.step_mm;
  return tf_patch_new (frame, &spec);
}

static void
fill_added (TfPotential *p, const TfPlaneField *field)
{
  for (gsize k = 0; k < p->patch->n; k++)
    if (p->patch->seen[k] && p->patch->mu[k] >= LEAST_MU)
      p->added[k] = field->bz[k] - p->patch->value[k] / p->patch->mu[k];
}

TfPotential *
tf_potential_new (const TfFrame *frame, const TfOutline *outline, double step_mm, double margin_mm)
{
  g_return_val_if_fail (frame != NULL && outline != NULL && step_mm > 0.0, NULL);
  if (tf_geometry_is_map (tf_frame_get_geometry (frame))
      || tf_frame_get_info (frame)->field == TF_FIELD_RADIAL)
    return NULL;
  g_autoptr (TfPatch) patch = make_patch (frame, outline, step_mm, margin_mm);
  g_autoptr (TfPlaneField) field
      = tf_plane_field_new (patch->width, patch->height, patch->step_mm, patch->value,
                            (const double (*)[3])patch->line, patch->seen);
  if (field == NULL)
    return NULL;
  TfPotential *p = g_new0 (TfPotential, 1);
  p->patch = g_steal_pointer (&patch);
  p->added = g_new0 (double, p->patch->n);
  p->left = field->left;
  fill_added (p, field);
  return p;
}

void
tf_potential_free (TfPotential *p)
{
  if (p == NULL)
    return;
  tf_patch_free (p->patch);
  g_free (p->added);
  g_free (p);
}

double
tf_potential_radial (const TfPotential *p, const double unit[3], double observed_gauss, double mu)
{
  double x, y, radial = observed_gauss / mu;
  if (!tf_patch_plane (p->patch, unit, &x, &y))
    return radial;
  double added = tf_patch_at (p->patch, p->added, x, y);
  return isnan (added) ? radial : radial + added;
}

double
tf_potential_get_left (const TfPotential *p)
{
  return p->left;
}
