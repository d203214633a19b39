/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-complexity.h"

#include <math.h>
#include <string.h>

#include "tf-complexity-private.h"
#include "tf-constants.h"

/* A share of coarse nodes or of missing ones above this is said. */
static const double SHARE_SAID = 0.02;

void
tf_complexity_clear (TfComplexity *c)
{
  g_clear_pointer (&c->refusal, tf_note_free);
  g_clear_pointer (&c->delta_reason, tf_note_free);
  g_clear_pointer (&c->notes, g_ptr_array_unref);
  tf_inversion_clear (&c->inversion);
  memset (c, 0, sizeof *c);
}

void
tf_complexity_copy (TfComplexity *to, const TfComplexity *from)
{
  *to = *from;
  to->refusal = from->refusal != NULL ? tf_note_copy (from->refusal) : NULL;
  to->delta_reason = from->delta_reason != NULL ? tf_note_copy (from->delta_reason) : NULL;
  to->notes = tf_notes_new ();
  for (guint k = 0; k < tf_notes_get_n (from->notes); k++)
    tf_notes_add_copy (to->notes, tf_notes_get (from->notes, k));
  tf_inversion_copy (&to->inversion, &from->inversion);
}

static void
set_nothing (TfComplexity *c, const TfMeasureParams *measure, const TfComplexityParams *params)
{
  memset (c, 0, sizeof *c);
  c->notes = tf_notes_new ();
  c->field_used = (TfFieldUsed)measure->field_used;
  c->fwhm_mm = params->fwhm_mm;
  c->step_mm = params->step_mm;
  c->length_mm = c->strong_field_length_mm = c->strong_gradient_length_mm = NAN;
  c->gradient_weighted_gauss = c->max_gradient_gauss_mm = NAN;
  c->r_mx = c->r_log10 = c->flux_near_mx = c->delta_distance_mm = c->mu = NAN;
}

/* Why the figures are not given, or NULL. */
static TfNote *
find_refusal (TfComplexity *c, const TfFrame *frame, const TfOutline *outline,
              const TfComplexityParams *params)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double lon, lat, radius, x, y, mu;
  if (tf_geometry_is_map (g))
    return tf_note_new ("complexity-map", "");
  tf_outline_get_cap (outline, &lon, &lat, &radius);
  gboolean there = tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, &mu);
  c->mu = there ? mu : 0.0;
  if (c->mu >= params->mu_min || (params->anyway && there))
    return NULL;
  return tf_note_new ("complexity-near-limb", "dd", c->mu, params->mu_min);
}

static void
add_cautions (TfComplexity *c, const TfTraced *t, const TfComplexityParams *params)
{
  const TfPatch *p = t->patch;
  gsize inside = 0, unseen = 0;
  for (gsize k = 0; k < p->n; k++)
    {
      double x, y, unit[3];
      inside += t->inside[k];
      if (p->seen[k])
        continue;
      tf_patch_node (p, k, &x, &y);
      tf_patch_unit (p, x, y, unit);
      unseen += tf_fill_contains (t->fill, unit);
    }
  tf_notes_add (c->notes, "complexity-describes", "");
  if (c->mu < params->mu_min)
    tf_notes_add (c->notes, "complexity-limb-asked", "dd", c->mu, params->mu_min);
  if (p->coarse > SHARE_SAID)
    tf_notes_add (c->notes, "complexity-coarse", "d", params->fwhm_mm);
  if (unseen > SHARE_SAID * (double)(inside + unseen))
    tf_notes_add (c->notes, "complexity-missing-data", "d",
                  100.0 * (double)unseen / (double)(inside + unseen));
}

static void
set_lines (TfComplexity *c, const TfTraced *t, const TfComplexityParams *params)
{
  double radius = t->patch->radius_mm;
  tf_inversion_trace (&c->inversion, t, params);
  c->length_mm = tf_inversion_length (&c->inversion);
  tf_inversion_sum (&c->inversion, radius, 0.0, params->transverse_gauss,
                    &c->strong_field_length_mm, &c->gradient_weighted_gauss);
  tf_inversion_sum (&c->inversion, radius, params->gradient_gauss_mm, params->transverse_gauss,
                    &c->strong_gradient_length_mm, NULL);
  for (guint k = 0; k < c->inversion.n; k++)
    c->max_gradient_gauss_mm
        = fmax (c->max_gradient_gauss_mm, c->inversion.lines[k].max_gradient_gauss_mm);
}

/* R is a sum over a few nodes beside a line: where the nodes happen to stand matters. So it is the
 * mean over four grids that stand half a step apart. */
static void
set_r (TfComplexity *c, const TfTraced *first, const TfFrame *frame, const TfOutline *here,
       const TfMeasureParams *measure, const TfComplexityParams *params)
{
  double sum = tf_complexity_r (first, params);
  for (guint k = 1; k < 4; k++)
    {
      g_autoptr (TfTraced) t
          = tf_traced_new (frame, here, measure, params, 0.5 * (k % 2), 0.5 * (k / 2), FALSE);
      sum += tf_complexity_r (t, params);
    }
  c->r_mx = 0.25 * sum;
  c->r_log10 = c->r_mx > 0.0 ? log10 (c->r_mx) : (double)NAN;
}

static gboolean
has_inside (const TfTraced *t)
{
  for (gsize k = 0; k < t->patch->n; k++)
    if (t->inside[k])
      return TRUE;
  return FALSE;
}

void
tf_complexity_region (TfComplexity *c, const TfFrame *frame, const TfOutline *outline,
                      const TfMeasureParams *measure, const TfComplexityParams *params)
{
  g_return_if_fail (c != NULL && frame != NULL && outline != NULL && measure != NULL
                    && params != NULL);
  set_nothing (c, measure, params);
  g_autoptr (TfOutline) here = tf_mask_outline (frame, outline, (guint)measure->law);
  c->refusal = find_refusal (c, frame, here, params);
  if (c->refusal != NULL)
    return;
  g_autoptr (TfTraced) t = tf_traced_new (frame, here, measure, params, 0.0, 0.0, TRUE);
  if (!has_inside (t))
    {
      c->refusal = tf_note_new ("complexity-no-values", "d", params->fwhm_mm);
      return;
    }
  c->given = TRUE;
  set_lines (c, t, params);
  set_r (c, t, frame, here, measure, params);
  c->flux_near_mx = tf_complexity_flux_near (t, &c->inversion, params);
  c->pieces = tf_complexity_pieces (t, params->strong_gauss, measure->piece_share);
  tf_complexity_delta (c, t, params);
  add_cautions (c, t, params);
}
