/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-mask.h"

#include <math.h>
#include <string.h>

#include "tf-fill-private.h"
#include "tf-mask-box-private.h"

enum
{
  CUT_SAMPLES = 32,
  BLOCK = 32, /* columns that are looked through at once */
};

struct _TfMask
{
  TfMaskBox box;
  TfMaskPixel *pixels; /* row by row */
  guint n;
  guint missing;
  double cut;
};

typedef double Unit[3];

/* Room for one row of the box. */
typedef struct
{
  Unit *unit;
  double *mu, *area;
  guint8 *inside;
  guint *at; /* columns of the box that are looked at */
} Row;

typedef struct
{
  const TfGeometry *geometry;
  double mu_min;
  double all, seen;
} Cut;

static void
add_sample (const double unit[3], double weight, gpointer data)
{
  Cut *cut = data;
  double lon, lat, x, y, mu;
  cut->all += weight;
  tf_sphere_lonlat (unit, &lon, &lat);
  if (!tf_geometry_sun_to_pixel (cut->geometry, lon, lat, &x, &y, &mu))
    return;
  gboolean map = tf_geometry_is_map (cut->geometry);
  if (x >= 0.5 && x <= cut->geometry->width + 0.5 && y >= 0.5 && y <= cut->geometry->height + 0.5
      && (map || mu >= cut->mu_min))
    cut->seen += weight;
}

static double
find_cut (const TfGeometry *geometry, const TfFill *fill, const TfMaskBox *box, double mu_min)
{
  Cut cut = { geometry, mu_min, 0.0, 0.0 };
  if (box->whole)
    return 0.0;
  if (box->width == 0)
    return 1.0;
  tf_fill_sample (fill, CUT_SAMPLES, add_sample, &cut);
  return cut.all > 0.0 ? 1.0 - cut.seen / cut.all : 0.0;
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static guint
count_above (const float *field, guint n, float least)
{
  guint above = 0;
  for (guint k = 0; k < n; k++)
    above += fabsf (field[k]) >= least;
  return above;
}

/* How many pixels there can be at most. */
static gsize
count_most (const TfMask *mask, const TfFrame *frame, float least)
{
  const TfMaskBox *box = &mask->box;
  gsize n = (gsize)box->width * box->height;
  if (!(least > 0.0f))
    return n;
  n = 0;
  for (guint y = box->y0; y < box->y0 + box->height; y++)
    n += count_above (tf_frame_get_pixels (frame) + (gsize)y * tf_frame_get_width (frame) + box->x0, box->width, least);
  return n;
}

/* Puts the columns @from up to @to that come into question behind the @n there are. @least > 0: weaker pixels, and those
 * without a value, are passed over. */
static guint
choose_columns (const Row *row, const float *field, guint from, guint to, guint n, double mu_min, float least, gboolean map)
{
  for (guint k = from; k < to; k++) /* without a branch: strong and weak pixels lie mixed */
    {
      gboolean strong = !(least > 0.0f) | (fabsf (field[k]) >= least);
      gboolean near = map | (row->mu[k] >= mu_min);
      memmove (row->unit[n], row->unit[k], sizeof (Unit));
      row->at[n] = k;
      n += strong & near;
    }
  return n;
}

/* How far from @k on every block has a pixel of @least or more. */
static guint
find_end (const float *field, guint k, guint width, float least)
{
  if (!(least > 0.0f))
    return width;
  while (k < width && count_above (field + k, MIN (BLOCK, width - k), least) > 0)
    k += MIN (BLOCK, width - k);
  return k;
}

/* The columns of a row that come into question, and where they are on the Sun. Blocks without any are passed over. */
static guint
find_places (const TfGeometry *g, const TfMaskBox *box, guint y, const float *field, double mu_min, float least,
             const Row *row)
{
  guint n = 0;
  for (guint k = 0, end; k < box->width; k = end)
    {
      end = find_end (field, k, box->width, least);
      if (end == k)
        {
          end += MIN (BLOCK, box->width - k);
          continue;
        }
      tf_geometry_row_sun (g, y + 1.0, box->x0 + k + 1.0, end - k, row->unit + k, row->mu + k, row->area + k);
      n = choose_columns (row, field, k, end, n, mu_min, least, tf_geometry_is_map (g));
    }
  return n;
}

static void
fill_row (TfMask *mask, const TfFrame *frame, const TfFill *fill, double mu_min, float least,
          guint y, const Row *row)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  const TfMaskBox *box = &mask->box;
  gboolean map = tf_geometry_is_map (g);
  const float *field
      = tf_frame_get_pixels (frame) + (gsize)y * tf_frame_get_width (frame) + box->x0;
  guint n = find_places (g, box, y, field, mu_min, least, row);
  tf_fill_row (fill, (const Unit *)row->unit, n, row->inside);
  TfMaskPixel *pixel = mask->pixels + mask->n;
  for (guint j = 0; j < n; j++)
    {
      guint k = row->at[j];
      if (!row->inside[j])
        continue;
      if (!isfinite (field[k]))
        {
          mask->missing++;
          continue;
        }
      pixel->x = box->x0 + k;
      pixel->y = y;
      pixel->field = field[k];
      pixel->mu = map ? 1.0f : (float)row->mu[k];
      pixel->area_mm2 = row->area[k];
      memcpy (pixel->unit, row->unit[j], sizeof pixel->unit);
      pixel++;
    }
  mask->n = (guint)(pixel - mask->pixels);
}

static void
fill_rows (TfMask *mask, const TfFrame *frame, const TfFill *fill, double mu_min, float least)
{
  guint n = mask->box.width;
  Row row = { .unit = g_new (Unit, n),
              .mu = g_new (double, n),
              .area = g_new (double, n),
              .inside = g_new (guint8, n),
              .at = g_new (guint, n) };
  for (guint y = 0; y < mask->box.height; y++)
    fill_row (mask, frame, fill, mu_min, least, mask->box.y0 + y, &row);
  g_free (row.unit);
  g_free (row.mu);
  g_free (row.area);
  g_free (row.inside);
  g_free (row.at);
}

TfOutline *
tf_mask_outline (const TfFrame *frame, const TfOutline *outline, guint law)
{
  TfTime time = tf_frame_get_info (frame)->time;
  if (tf_geometry_is_map (tf_frame_get_geometry (frame)) || !tf_time_is_known (time)
      || !tf_time_is_known (tf_outline_get_time (outline)))
    return tf_outline_ref ((TfOutline *)outline);
  TfOutline *carried = tf_outline_carry (outline, time, law);
  return carried != NULL ? carried : tf_outline_ref ((TfOutline *)outline);
}

TfMask *
tf_mask_new (const TfFrame *frame, const TfOutline *outline, double mu_min, guint law)
{
  return tf_mask_new_above (frame, outline, mu_min, law, 0.0f);
}

TfMask *
tf_mask_new_above (const TfFrame *frame, const TfOutline *outline, double mu_min, guint law,
                   float least_gauss)
{
  g_return_val_if_fail (frame != NULL && outline != NULL, NULL);
  TfMask *mask = g_new0 (TfMask, 1);
  const TfGeometry *g = tf_frame_get_geometry (frame);
  g_autoptr (TfOutline) here = tf_mask_outline (frame, outline, law);
  g_autoptr (TfFill) fill = tf_fill_new (here);
  mask->box = tf_mask_box (g, here, fill, mu_min);
  mask->pixels = g_new (TfMaskPixel, MAX (count_most (mask, frame, least_gauss), 1));
  mask->cut = find_cut (g, fill, &mask->box, mu_min);
  if (mask->box.width > 0)
    fill_rows (mask, frame, fill, mu_min, least_gauss);
  mask->pixels = g_renew (TfMaskPixel, mask->pixels, MAX (mask->n, 1));
  return mask;
}

void
tf_mask_free (TfMask *mask)
{
  if (mask == NULL)
    return;
  g_free (mask->pixels);
  g_free (mask);
}

guint
tf_mask_get_n (const TfMask *mask)
{
  return mask->n;
}

const TfMaskPixel *
tf_mask_get (const TfMask *mask, guint k)
{
  g_return_val_if_fail (k < mask->n, NULL);
  return &mask->pixels[k];
}

guint
tf_mask_get_missing (const TfMask *mask)
{
  return mask->missing;
}

double
tf_mask_get_cut (const TfMask *mask)
{
  return mask->cut;
}

void
tf_mask_get_box (const TfMask *mask, guint *x0, guint *y0, guint *width, guint *height)
{
  *x0 = mask->box.x0;
  *y0 = mask->box.y0;
  *width = mask->box.width;
  *height = mask->box.height;
}
