/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "hints-compare.h"

#include <math.h>

static const double MU_LEAST = 0.17; /* as far out as anything is measured */

static double
pixel_flux (const TfFrame *frame, const TfMaskPixel *pixel)
{
  double field = fabs ((double)pixel->field);
  if (tf_frame_get_info (frame)->field != TF_FIELD_RADIAL)
    field /= pixel->mu;
  return field * pixel->area_mm2 * 1e16;
}

HintOverlap
hints_overlap (const TfFrame *frame, const TfOutline *a, const TfOutline *b)
{
  g_autoptr (TfMask) one = tf_mask_new (frame, a, MU_LEAST, 0), two = tf_mask_new (frame, b, MU_LEAST, 0);
  g_autoptr (GHashTable) inside = g_hash_table_new (NULL, NULL);
  guint width = tf_frame_get_width (frame);
  double flux[2] = { 0.0, 0.0 }, area[2] = { 0.0, 0.0 }; /* both, either */
  for (guint k = 0; k < tf_mask_get_n (one); k++)
    {
      const TfMaskPixel *pixel = tf_mask_get (one, k);
      g_hash_table_add (inside, GUINT_TO_POINTER (pixel->y * width + pixel->x + 1));
      flux[1] += pixel_flux (frame, pixel);
      area[1] += pixel->area_mm2;
    }
  for (guint k = 0; k < tf_mask_get_n (two); k++)
    {
      const TfMaskPixel *pixel = tf_mask_get (two, k);
      guint in = g_hash_table_contains (inside, GUINT_TO_POINTER (pixel->y * width + pixel->x + 1)) ? 0 : 1;
      flux[in] += pixel_flux (frame, pixel);
      area[in] += pixel->area_mm2;
    }
  return (HintOverlap){ flux[1] > 0.0 ? flux[0] / flux[1] : 0.0, area[1] > 0.0 ? area[0] / area[1] : 0.0 };
}

double
hints_flux (const TfFrame *frame, const TfOutline *outline)
{
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, MU_LEAST, 0);
  double flux = 0.0;
  for (guint k = 0; k < tf_mask_get_n (mask); k++)
    flux += pixel_flux (frame, tf_mask_get (mask, k));
  return flux;
}

/* Outlines farther apart than their radii need no pixels. */
static gboolean
may_meet (const TfOutline *a, const TfOutline *b)
{
  double lon[2], lat[2], radius[2];
  tf_outline_get_cap (a, &lon[0], &lat[0], &radius[0]);
  tf_outline_get_cap (b, &lon[1], &lat[1], &radius[1]);
  return tf_sphere_distance (lon[0], lat[0], lon[1], lat[1]) < radius[0] + radius[1] + 6.0;
}

const TfHint *
hints_best (const TfFrame *frame, const GPtrArray *hints, const TfOutline *outline, HintOverlap *overlap)
{
  const TfHint *best = NULL;
  HintOverlap most = { 0.0, 0.0 };
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      HintOverlap here = may_meet (hint->outline, outline) ? hints_overlap (frame, hint->outline, outline) : (HintOverlap){ 0 };
      if (here.flux > most.flux)
        {
          most = here;
          best = hint;
        }
    }
  if (overlap != NULL)
    *overlap = most;
  return best;
}

GPtrArray *
hints_find (const TfFrame *frame)
{
  TfHintParams params;
  TfMeasureParams measure;
  g_autoptr (GError) error = NULL;
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  measure.outline_term = FALSE;
  GPtrArray *hints = tf_hints_find (frame, &params, &measure, NULL, &error);
  g_assert_no_error (error);
  return hints;
}

TfFrame *
hints_frame (const TfFrame *like, const TfGeometry *geometry, const float *pixels)
{
  TfFrameInfo *info = tf_frame_info_copy (tf_frame_get_info (like));
  info->geometry = *geometry;
  return tf_frame_new (info, pixels, NULL);
}

void
hints_print (const char *what, const TfFrame *frame, const GPtrArray *hints)
{
  g_test_message ("%s: %u hints", what, hints->len);
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      const TfMeasure *m = &hint->measure;
      g_autofree char *codes = tf_notes_dup_codes (hint->cautions);
      guint n;
      tf_outline_get_ring (hint->outline, 0, FALSE, &n);
      g_test_message ("  %-8s N%+6.1f W%+6.1f mu %.2f flux %.2e leader %+d tilt %+6.1f sep %5.1f imbalance %+.2f area %6.0f "
                      "vertices %u [%s]",
                      hint->unipolar ? "unipolar" : "bipole", m->lat_deg, m->cmd_deg, m->mu, m->flux_unsigned_mx,
                      m->leading_polarity, m->axis_tilt_deg, m->separation_mm, m->imbalance,
                      tf_outline_area (hint->outline, tf_frame_get_geometry (frame)->radius_mm), n, codes);
    }
}
