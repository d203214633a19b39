/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-sun-private.h"

/* From a sun to a picture of its disk. A pixel is the mean over supersample^2 points, those on
 * the disk alone; it has a value when its middle is on the disk. Elements are added up only
 * inside the box of pixels that holds their disc of 5 sigma, and bands of rows are apart, so
 * that the result is the same for any number of threads.
 */

static const double STRONGEST_GAUSS = 5000.0;

void
tf_shot_init (TfShot *shot)
{
  *shot = (TfShot){
    .size = 512,
    .noise_gauss = 8.0,
    .quantum_gauss = 1.0,
    .style = TF_STYLE_STANDARD,
    .observer = { .source = TF_OBSERVER_UNKNOWN },
    .instrument = "BRINDLE-1K",
  };
}

/* -- geometry --------------------------------------------------------------------------------- */

static TfObserver
place_observer (const TfShot *shot, TfTime time)
{
  TfObserver observer = shot->observer;
  if (observer.source == TF_OBSERVER_UNKNOWN)
    return tf_observer_earth (time);
  if (isnan (observer.carrington_lon_deg))
    observer.carrington_lon_deg
        = tf_wrap_360 (tf_earth_l0 (time, TF_L0_IMAGE) + observer.stonyhurst_lon_deg);
  return observer;
}

gboolean
tf_shot_geometry (const TfShot *shot, TfTime time, TfGeometry *geometry, GError **error)
{
  if (!tf_style_check (shot, error))
    return FALSE;
  TfObserver observer = place_observer (shot, time);
  double ratio = TF_RADIUS_MM * 1e6 / observer.distance_m, scale = shot->scale_arcsec;
  if (!(scale > 0.0))
    scale = asin (ratio) / TF_ARCSEC / (0.46 * shot->size);
  double middle = 0.5 * (shot->size + 1.0), turn = shot->north_angle_deg;
  if (shot->style == TF_STYLE_TURNED)
    turn += 179.93;
  if (shot->size >= 8 && shot->size <= 16384
      && tf_geometry_make_disk (geometry, shot->size, shot->size, middle + shot->centre_dx,
                                middle + shot->centre_dy, scale, tf_wrap_180 (turn), &observer,
                                TF_RADIUS_MM))
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_OPTION,
               _ ("no picture of %u pixels a side can be drawn from %.4f au: the side must be 8 to "
                  "16384 pixels and the "
                  "observer outside the Sun"),
               shot->size, observer.distance_m / TF_AU_M);
  return FALSE;
}

/* -- boxes ------------------------------------------------------------------------------------ */

typedef struct
{
  int x0, x1, y0, y1; /* FITS pixels, both ends included; x1 < x0: not on the disk */
} Box;

static void
box_add (Box *box, const TfGeometry *g, const double unit[3])
{
  double lon, lat, x, y;
  tf_sphere_lonlat (unit, &lon, &lat);
  if (!tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, NULL))
    return;
  box->x0 = MIN (box->x0, (int)floor (x));
  box->x1 = MAX (box->x1, (int)ceil (x));
  box->y0 = MIN (box->y0, (int)floor (y));
  box->y1 = MAX (box->y1, (int)ceil (y));
}

/* Points of two circles within the element's disc and its middle, with a margin for what lies
 * between them. */
static Box
lit_box (const TfLit *lit, const TfGeometry *g)
{
  enum
  {
    AROUND = 24
  };
  Box box = { G_MAXINT / 2, G_MININT / 2, G_MAXINT / 2, G_MININT / 2 };
  double west[3], north[3], reach = acos (CLAMP (lit->cos_cut, -1.0, 1.0));
  tf_tangents (lit->unit, west, north);
  box_add (&box, g, lit->unit);
  for (int ring = 1; ring <= 2; ring++)
    for (int k = 0; k < AROUND; k++)
      {
        double at[3], angle = 2.0 * TF_PI * k / AROUND, r = 0.5 * ring * reach;
        for (int j = 0; j < 3; j++)
          at[j]
              = cos (r) * lit->unit[j] + sin (r) * (cos (angle) * west[j] + sin (angle) * north[j]);
        box_add (&box, g, at);
      }
  if (box.x1 < box.x0)
    return box;
  int margin = 2 + MAX (box.x1 - box.x0, box.y1 - box.y0) / 10;
  box.x0 = MAX (1, box.x0 - margin);
  box.y0 = MAX (1, box.y0 - margin);
  box.x1 = MIN ((int)g->width, box.x1 + margin);
  box.y1 = MIN ((int)g->height, box.y1 + margin);
  return box;
}

/* -- rows ------------------------------------------------------------------------------------- */

typedef struct
{
  const TfGeometry *geometry;
  TfLit *lit;
  Box *boxes;
  guint n_lit, supersample;
  gboolean intensity;
  float *pixels;
} Shoot;

typedef struct
{
  double (*unit)[3];
  double *mu, *field, *sum;
  guint *n;
} Line;

static void
line_alloc (Line *line, guint width)
{
  line->unit = g_malloc_n (width, sizeof *line->unit);
  line->mu = g_new (double, width);
  line->field = g_new (double, width);
  line->sum = g_new (double, width);
  line->n = g_new (guint, width);
}

static void
line_free (Line *line)
{
  g_free (line->unit);
  g_free (line->mu);
  g_free (line->field);
  g_free (line->sum);
  g_free (line->n);
}

static void
add_lit (const Shoot *shoot, guint y, Line *line)
{
  for (guint k = 0; k < shoot->n_lit; k++)
    {
      const Box *box = &shoot->boxes[k];
      const TfLit *lit = &shoot->lit[k];
      if ((int)y < box->y0 || (int)y > box->y1)
        continue;
      for (int x = box->x0 - 1; x < box->x1; x++)
        {
          const double *u = line->unit[x];
          double cosine = lit->unit[0] * u[0] + lit->unit[1] * u[1] + lit->unit[2] * u[2];
          if (cosine >= lit->cos_cut) /* FALSE off the disk, where it is NaN */
            line->field[x] += lit->peak_gauss * exp ((cosine - 1.0) * lit->inverse);
        }
    }
}

/* Limb darkening 1 - 0.6 (1 - mu); a field of 900 G takes away 0.6 (1 - 1/e) of the light:
 * invented, spots to look at. */
static double
brightness (double field, double mu)
{
  double strength = field / 900.0;
  return 10000.0 * (1.0 - 0.6 * (1.0 - mu)) * (1.0 - 0.6 * (1.0 - exp (-strength * strength)));
}

static void
add_points (const Shoot *shoot, guint y, double dx, double dy, Line *line)
{
  guint width = shoot->geometry->width;
  tf_geometry_row_sun (shoot->geometry, y + dy, 1.0 + dx, width, line->unit, line->mu, NULL);
  memset (line->field, 0, width * sizeof *line->field);
  add_lit (shoot, y, line);
  for (guint x = 0; x < width; x++)
    {
      double mu = line->mu[x];
      if (isnan (mu))
        continue;
      line->sum[x] += shoot->intensity ? brightness (line->field[x], mu) : line->field[x] * mu;
      line->n[x]++;
    }
}

static void
shoot_row (const Shoot *shoot, guint y, Line *line)
{
  const TfGeometry *g = shoot->geometry;
  guint s = shoot->supersample;
  memset (line->sum, 0, g->width * sizeof *line->sum);
  memset (line->n, 0, g->width * sizeof *line->n);
  for (guint j = 0; j < s; j++)
    for (guint i = 0; i < s; i++)
      add_points (shoot, y, (i + 0.5) / s - 0.5, (j + 0.5) / s - 0.5, line);
  tf_geometry_row_sun (g, y, 1.0, g->width, NULL, line->mu, NULL);
  float *out = shoot->pixels + (gsize)(y - 1) * g->width;
  for (guint x = 0; x < g->width; x++)
    out[x] = isnan (line->mu[x]) || line->n[x] == 0 ? NAN : (float)(line->sum[x] / line->n[x]);
}

static void
shoot_band (guint band, guint first, guint n, guint worker, gpointer data)
{
  Line line;
  line_alloc (&line, ((Shoot *)data)->geometry->width);
  for (guint row = first; row < first + n; row++)
    shoot_row (data, row + 1, &line);
  line_free (&line);
}

float *
tf_shoot_disk (const TfSun *sun, TfTime time, const TfShot *shot, const TfGeometry *geometry,
               guint64 seed, const TfWork *work, GError **error)
{
  guint n_elements = tf_sun_get_n_elements (sun) + 1;
  g_autofree TfLit *lit = g_new (TfLit, n_elements);
  g_autofree Box *boxes = g_new (Box, n_elements);
  gsize n = (gsize)geometry->width * geometry->height;
  Shoot shoot = { .geometry = geometry,
                  .lit = lit,
                  .boxes = boxes,
                  .intensity = shot->intensity,
                  .supersample = shot->supersample == 0 ? 2 : shot->supersample };
  shoot.n_lit = tf_sun_light (sun, time, lit);
  for (guint k = 0; k < shoot.n_lit; k++)
    boxes[k] = lit_box (&lit[k], geometry);
  shoot.pixels = g_new (float, n);
  if (!tf_bands_run (work, geometry->height, shoot_band, &shoot))
    {
      g_free (shoot.pixels);
      g_set_error_literal (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_CANCELLED,
                           _ ("stopped before the frame was drawn"));
      return NULL;
    }
  tf_detector_blur (shoot.pixels, geometry->width, geometry->height,
                    shot->psf_arcsec / tf_geometry_scale_arcsec (geometry));
  tf_detector_read (shoot.pixels, n, shot->noise_gauss, shot->quantum_gauss, seed);
  return shoot.pixels;
}

/* -- a frame, a file -------------------------------------------------------------------------- */

TfFrame *
tf_sun_shoot (const TfSun *sun, TfTime time, const TfShot *shot, guint64 seed, const TfWork *work,
              GError **error)
{
  TfGeometry geometry;
  g_return_val_if_fail (!shot->intensity, NULL);
  if (!tf_shot_geometry (shot, time, &geometry, error))
    return NULL;
  g_autofree float *pixels = tf_shoot_disk (sun, time, shot, &geometry, seed, work, error);
  if (pixels == NULL)
    return NULL;
  g_autoptr (TfHeader) header = tf_style_header (shot, &geometry, time, seed);
  TfFrameInfo *info = tf_frame_info_read (header, geometry.width, geometry.height);
  info->geometry = geometry; /* all its digits */
  info->time = time;
  return tf_frame_new (info, pixels, work);
}

/* 16 bits unless the steps are too fine for them to hold the strongest fields. */
static gboolean
write_frame (const char *path, const TfHeader *header, const float *pixels,
             const TfGeometry *geometry, const TfShot *shot, GError **error)
{
  TfFrameWrite how = { .bitpix = -32, .no_date = TRUE };
  gboolean fine = 32767 * shot->quantum_gauss < STRONGEST_GAUSS;
  if (shot->quantum_gauss > 0.0)
    how = (TfFrameWrite){ .bitpix = fine ? 32 : 16,
                          .bscale = shot->quantum_gauss,
                          .blank = fine ? G_MININT32 : -32768,
                          .has_blank = TRUE,
                          .compress = TRUE,
                          .no_date = TRUE };
  return tf_frame_write (path, header, pixels, geometry->width, geometry->height, &how, error);
}

gboolean
tf_sun_write (const TfSun *sun, const char *path, TfTime time, const TfShot *shot, guint64 seed,
              const TfWork *work, GError **error)
{
  TfGeometry geometry;
  if (!tf_shot_geometry (shot, time, &geometry, error))
    return FALSE;
  g_autofree float *pixels = tf_shoot_disk (sun, time, shot, &geometry, seed, work, error);
  g_autoptr (TfHeader) header = tf_style_header (shot, &geometry, time, seed);
  return pixels != NULL && write_frame (path, header, pixels, &geometry, shot, error)
         && tf_truth_write (sun, path, time, 0, shot, &geometry, seed, error);
}

TfFrame *
tf_sun_shoot_map (const TfSun *sun, int rotation, guint width, guint height, const TfShot *shot,
                  guint64 seed, GError **error)
{
  TfGeometry geometry;
  if (!tf_shot_map_geometry (width, height, &geometry, error))
    return NULL;
  g_autofree float *pixels = tf_shoot_map (sun, rotation, shot, &geometry, seed);
  g_autoptr (TfHeader) header = tf_style_map_header (shot, &geometry, rotation, seed);
  TfFrameInfo *info = tf_frame_info_read (header, width, height);
  info->geometry = geometry;
  return tf_frame_new (info, pixels, NULL);
}

gboolean
tf_sun_write_map (const TfSun *sun, const char *path, int rotation, guint width, guint height,
                  const TfShot *shot, guint64 seed, GError **error)
{
  TfGeometry geometry;
  if (!tf_shot_map_geometry (width, height, &geometry, error))
    return FALSE;
  g_autofree float *pixels = tf_shoot_map (sun, rotation, shot, &geometry, seed);
  g_autoptr (TfHeader) header = tf_style_map_header (shot, &geometry, rotation, seed);
  TfTime middle = tf_carrington_time (rotation + 0.5);
  return write_frame (path, header, pixels, &geometry, shot, error)
         && tf_truth_write (sun, path, middle, rotation, shot, &geometry, seed, error);
}
