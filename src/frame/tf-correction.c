/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-correction.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-number.h"

static const double radius_min = 4, far_px = 1e6;

TfCorrection
tf_correction_none (void)
{
  return (TfCorrection){ NAN, NAN, NAN, NAN };
}

gboolean
tf_correction_is_set (const TfCorrection *correction)
{
  return correction != NULL && isfinite (correction->radius_px);
}

static gboolean
same (double a, double b)
{
  return fabs (a - b) < 1e-6;
}

gboolean
tf_correction_equal (const TfCorrection *a, const TfCorrection *b)
{
  if (!tf_correction_is_set (a) || !tf_correction_is_set (b))
    return tf_correction_is_set (a) == tf_correction_is_set (b);
  return same (a->centre_x, b->centre_x) && same (a->centre_y, b->centre_y)
         && same (a->radius_px, b->radius_px) && same (a->north_angle_deg, b->north_angle_deg);
}

TfCorrection
tf_correction_of (const TfGeometry *geometry)
{
  TfCorrection c = tf_correction_none ();
  if (tf_geometry_is_map (geometry)
      || !tf_geometry_disk_centre (geometry, &c.centre_x, &c.centre_y))
    return tf_correction_none ();
  c.radius_px = tf_geometry_disk_radius (geometry);
  c.north_angle_deg = tf_geometry_north_angle (geometry);
  return c;
}

static gboolean
is_plausible (const TfCorrection *c)
{
  return fabs (c->centre_x) < far_px && fabs (c->centre_y) < far_px && c->radius_px > radius_min
         && c->radius_px < far_px && fabs (c->north_angle_deg) <= 360;
}

/* The disk's radius in the tangent plane is R / sqrt (D^2 - R^2), the tangent of its angular
 * radius; the scale is that over the radius in pixels. */
gboolean
tf_correction_apply (const TfCorrection *correction, const TfGeometry *geometry,
                     TfGeometry *corrected)
{
  g_return_val_if_fail (correction != NULL && geometry != NULL && corrected != NULL, FALSE);
  double turn = geometry->cd[0][0] * geometry->cd[1][1] - geometry->cd[0][1] * geometry->cd[1][0];
  if (geometry->projection != TF_PROJECTION_TAN || !is_plausible (correction) || !(turn > 0))
    return FALSE;
  double d = geometry->distance_mm, r = geometry->radius_mm;
  double scale = r / sqrt ((d - r) * (d + r)) / TF_DEG * 3600.0 / correction->radius_px;
  return tf_geometry_make_disk (corrected, geometry->width, geometry->height, correction->centre_x,
                                correction->centre_y, scale, correction->north_angle_deg,
                                &geometry->observer, geometry->radius_mm);
}

char *
tf_correction_dup_text (const TfCorrection *c)
{
  if (!tf_correction_is_set (c))
    return g_strdup ("");
  g_autofree char *x = tf_number_dup (c->centre_x), *y = tf_number_dup (c->centre_y),
                  *r = tf_number_dup (c->radius_px), *n = tf_number_dup (c->north_angle_deg);
  return g_strjoin (",", x, y, r, n, NULL);
}

gboolean
tf_correction_from_text (TfCorrection *c, const char *text)
{
  g_return_val_if_fail (c != NULL && text != NULL, FALSE);
  *c = tf_correction_none ();
  TfCorrection read;
  double *const members[]
      = { &read.centre_x, &read.centre_y, &read.radius_px, &read.north_angle_deg };
  g_auto (GStrv) parts = g_strsplit (text, ",", -1);
  if (g_strv_length (parts) != G_N_ELEMENTS (members))
    return FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (members); k++)
    if (!tf_number_read (parts[k], members[k]))
      return FALSE;
  if (!is_plausible (&read))
    return FALSE;
  *c = read;
  return TRUE;
}

TfFrame *
tf_frame_corrected (TfFrame *frame, const TfCorrection *correction, const TfWork *work)
{
  g_return_val_if_fail (frame != NULL, NULL);
  TfGeometry geometry;
  if (!tf_correction_is_set (correction))
    return tf_frame_ref (frame);
  if (!tf_correction_apply (correction, tf_frame_get_geometry (frame), &geometry))
    return NULL;
  return tf_frame_with_geometry (frame, &geometry, work);
}

/* -- outlines -------------------------------------------------------------------------------- */

static gboolean
move_vertex (TfVertex *vertex, const TfGeometry *from, const TfGeometry *to)
{
  double x, y;
  TfPlace place;
  if (!tf_geometry_sun_to_pixel (from, vertex->lon_deg, vertex->lat_deg, &x, &y, NULL)
      || !tf_geometry_pixel_to_sun (to, x, y, &place))
    return FALSE;
  /* longitudes run on within a ring */
  vertex->lon_deg += remainder (place.carrington_lon_deg - vertex->lon_deg, 360);
  vertex->lat_deg = place.lat_deg;
  return TRUE;
}

static TfOutline *
with_ring (TfOutline *before, const TfOutline *outline, guint k, gboolean left_out,
           const TfGeometry *from, const TfGeometry *to)
{
  guint n;
  const TfVertex *ring = tf_outline_get_ring (outline, k, left_out, &n);
  g_autofree TfVertex *moved = g_memdup2 (ring, n * sizeof *ring);
  g_autoptr (TfOutline) whole = before;
  for (guint j = 0; j < n; j++)
    if (!move_vertex (&moved[j], from, to))
      return NULL;
  return whole == NULL ? tf_outline_new (tf_outline_get_time (outline), moved, n, NULL)
                       : tf_outline_with_ring (whole, moved, n, left_out, NULL);
}

static TfOutline *
with_pin (TfOutline *before, const TfPinnedPole *pin, const TfGeometry *from, const TfGeometry *to)
{
  g_autoptr (TfOutline) whole = before;
  TfVertex place = { pin->lon_deg, pin->lat_deg };
  TfPinnedPole moved = *pin;
  if (!move_vertex (&place, from, to))
    return NULL;
  moved.lon_deg = place.lon_deg;
  moved.lat_deg = place.lat_deg;
  return tf_outline_with_pin (whole, &moved);
}

TfOutline *
tf_outline_between (const TfOutline *outline, const TfGeometry *from, const TfGeometry *to)
{
  g_return_val_if_fail (outline != NULL && from != NULL && to != NULL, NULL);
  TfOutline *moved = NULL;
  guint rings = tf_outline_get_n_rings (outline), left_out = tf_outline_get_n_left_out (outline),
        pins = tf_outline_get_n_pins (outline);
  for (guint k = 0; k < rings && (k == 0 || moved != NULL); k++)
    moved = with_ring (moved, outline, k, FALSE, from, to);
  for (guint k = 0; k < left_out && moved != NULL; k++)
    moved = with_ring (moved, outline, k, TRUE, from, to);
  for (guint k = 0; k < pins && moved != NULL; k++)
    moved = with_pin (moved, tf_outline_get_pin (outline, k), from, to);
  return moved;
}
