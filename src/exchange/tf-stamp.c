/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-stamp.h"

#include <math.h>

#include "tf-constants.h"

/* From a frame's pixels to a stamp's cells. A place on the plane is in cells: u from the grid's east
 * edge, v from the equator. */

enum
{
  MOST_CELLS = 4096,
  NET = 33,        /* places a side */
  MOST_CORNERS = 12 /* of a four-sided figure cut by four lines, and room */
};

typedef struct
{
  double u, v;
} Corner;

void
tf_stamp_clear (TfStamp *stamp)
{
  g_clear_pointer (&stamp->field, g_free);
}

/* -- the plane --------------------------------------------------------------------------------- */

static double
east_edge (const TfStamp *s)
{
  return -0.5 * s->width * s->step_deg; /* from the centre */
}

static gboolean
to_plane (const TfStamp *s, double lon_deg, double lat_deg, Corner *corner)
{
  double lon = remainder (lon_deg - s->centre_deg, 360.0);
  corner->u = (lon - east_edge (s)) / s->step_deg;
  corner->v = sin (lat_deg * TF_DEG) / (s->step_deg * TF_DEG);
  return isfinite (corner->u) && isfinite (corner->v);
}

/* -- the grid ---------------------------------------------------------------------------------- */

/* Side of a pixel where the frame looks straight down, as an angle on the Sun. */
static double
pixel_deg (const TfGeometry *g)
{
  double x = 0.5 * (g->width + 1.0), y = 0.5 * (g->height + 1.0);
  if (tf_geometry_is_map (g))
    return sqrt (tf_geometry_area (g, x, y)) / g->radius_mm / TF_DEG;
  double height = g->distance_mm - g->radius_mm;
  return tf_geometry_scale_arcsec (g) / 3600.0 * height / g->radius_mm;
}

static gboolean
frame_outline (TfStamp *s, const TfOutline *outline, double margin_deg)
{
  double lat, radius, west = 0, south = 90, north = -90;
  tf_outline_get_cap (outline, &s->centre_deg, &lat, &radius);
  for (guint k = 0; k < tf_outline_get_n_rings (outline); k++)
    {
      guint n;
      const TfVertex *ring = tf_outline_get_ring (outline, k, FALSE, &n);
      for (guint j = 0; j < n; j++)
        {
          west = fmax (west, fabs (remainder (ring[j].lon_deg - s->centre_deg, 360.0)));
          south = fmin (south, ring[j].lat_deg);
          north = fmax (north, ring[j].lat_deg);
        }
    }
  double half = west + margin_deg / fmax (0.1, cos (lat * TF_DEG));
  double cell = s->step_deg * TF_DEG;
  double low = floor (sin (fmax (-90, south - margin_deg) * TF_DEG) / cell),
         high = ceil (sin (fmin (90, north + margin_deg) * TF_DEG) / cell),
         columns = 2 * ceil (half / s->step_deg);
  if (!(columns >= 2 && columns <= MOST_CELLS && high - low <= MOST_CELLS && half < 180))
    return FALSE;
  s->width = (int)columns;
  s->height = (int)(high - low);
  s->first_row = (int)low;
  return TRUE;
}

/* -- sharing out ------------------------------------------------------------------------------- */

/* The part of a figure on one side of a line: along u or v, at least or at most @limit. */
static guint
clip (const Corner *from, guint n, Corner *to, gboolean along_u, gboolean least, double limit)
{
  guint m = 0;
  for (guint k = 0; k < n; k++)
    {
      const Corner *a = &from[k], *b = &from[(k + 1) % n];
      double pa = (along_u ? a->u : a->v) - limit, pb = (along_u ? b->u : b->v) - limit;
      gboolean in_a = least ? pa >= 0 : pa <= 0, in_b = least ? pb >= 0 : pb <= 0;
      if (in_a)
        to[m++] = *a;
      if (in_a != in_b)
        {
          double t = pa / (pa - pb);
          to[m++] = (Corner){ a->u + t * (b->u - a->u), a->v + t * (b->v - a->v) };
        }
    }
  return m;
}

static double
area_of (const Corner *c, guint n)
{
  double twice = 0;
  for (guint k = 0; k < n; k++)
    twice += c[k].u * c[(k + 1) % n].v - c[(k + 1) % n].u * c[k].v;
  return 0.5 * fabs (twice);
}

/* What a figure and one cell share, in cells. */
static double
shared_area (const Corner quad[4], double u, double v)
{
  Corner a[MOST_CORNERS], b[MOST_CORNERS];
  guint n = clip (quad, 4, a, TRUE, TRUE, u);
  n = clip (a, n, b, TRUE, FALSE, u + 1);
  n = clip (b, n, a, FALSE, TRUE, v);
  n = clip (a, n, b, FALSE, FALSE, v + 1);
  return n >= 3 ? area_of (b, n) : 0;
}

typedef struct
{
  TfStamp *stamp;
  double *sum, *cover; /* of cells: field times area, area */
} Sharing;

static void
share_out (Sharing *all, const Corner quad[4], double field)
{
  const TfStamp *s = all->stamp;
  double low_u = HUGE_VAL, high_u = -HUGE_VAL, low_v = HUGE_VAL, high_v = -HUGE_VAL;
  for (guint k = 0; k < 4; k++)
    {
      low_u = fmin (low_u, quad[k].u);
      high_u = fmax (high_u, quad[k].u);
      low_v = fmin (low_v, quad[k].v);
      high_v = fmax (high_v, quad[k].v);
    }
  if (high_u - low_u > 0.5 * 360.0 / s->step_deg)
    return; /* torn apart on the far side of the centre */
  int first = (int)fmax (0, floor (low_u)), last = (int)fmin (s->width - 1.0, floor (high_u));
  int bottom = (int)fmax (s->first_row, floor (low_v)),
      top = (int)fmin (s->first_row + s->height - 1.0, floor (high_v));
  for (int v = bottom; v <= top; v++)
    for (int u = first; u <= last; u++)
      {
        double area = shared_area (quad, u, v);
        gsize at = (gsize)(v - s->first_row) * (gsize)s->width + (gsize)u;
        all->sum[at] += area * field;
        all->cover[at] += area;
      }
}

/* Field of a pixel along the radius; NaN where it is not to be used. */
static double
radial (const TfFrame *frame, guint x, guint y, double mu_min)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double field = tf_frame_value (frame, x, y);
  if (tf_geometry_is_map (g))
    return field;
  double mu = tf_geometry_mu (g, x, y);
  if (!(mu >= mu_min))
    return NAN;
  return tf_frame_get_info (frame)->field == TF_FIELD_RADIAL ? field : field / mu;
}

/* Pixels of the frame, from 1, that may touch the grid. */
typedef struct
{
  guint x0, x1, y0, y1;
} Box;

/* By a net of places over the grid; FALSE when none is on the frame. */
static gboolean
find_box (const TfStamp *s, const TfGeometry *g, Box *box)
{
  double low[2] = { HUGE_VAL, HUGE_VAL }, high[2] = { -HUGE_VAL, -HUGE_VAL };
  for (guint k = 0; k < NET * NET; k++)
    {
      double lon = s->centre_deg + east_edge (s) * (1 - 2.0 * (k % NET) / (NET - 1));
      double sine = (s->first_row + (double)s->height * (k / NET) / (NET - 1)) * s->step_deg * TF_DEG;
      double x, y;
      if (!tf_geometry_sun_to_pixel (g, lon, asin (CLAMP (sine, -1, 1)) / TF_DEG, &x, &y, NULL))
        continue;
      low[0] = fmin (low[0], x);
      high[0] = fmax (high[0], x);
      low[1] = fmin (low[1], y);
      high[1] = fmax (high[1], y);
    }
  double room_x = 2 + (high[0] - low[0]) / NET, room_y = 2 + (high[1] - low[1]) / NET;
  *box = (Box){ (guint)fmax (1, floor (low[0] - room_x)), (guint)fmax (0, fmin (g->width, ceil (high[0] + room_x))),
                (guint)fmax (1, floor (low[1] - room_y)), (guint)fmax (0, fmin (g->height, ceil (high[1] + room_y))) };
  return isfinite (low[0]) && box->x0 <= box->x1 && box->y0 <= box->y1;
}

/* Corners of a box's pixels between two rows of the frame; u NaN: off the Sun. */
static void
place_corners (const TfStamp *s, const TfGeometry *g, const Box *box, double y, Corner *corners)
{
  for (guint k = box->x0 - 1; k <= box->x1; k++)
    {
      TfPlace place;
      corners[k] = (Corner){ NAN, NAN };
      if (tf_geometry_pixel_to_sun (g, k + 0.5, y, &place))
        to_plane (s, place.carrington_lon_deg, place.lat_deg, &corners[k]);
    }
}

static gboolean
is_near (const TfStamp *s, const Corner *c)
{
  return c->u > -2 && c->u < s->width + 2.0 && c->v > s->first_row - 2.0
         && c->v < s->first_row + s->height + 2.0;
}

static void
share_row (Sharing *all, const TfFrame *frame, const Box *box, guint y, const Corner *below,
           const Corner *above, double mu_min)
{
  for (guint x = box->x0; x <= box->x1; x++)
    {
      const Corner quad[4] = { below[x - 1], below[x], above[x], above[x - 1] };
      gboolean there = isfinite (quad[0].u + quad[1].u + quad[2].u + quad[3].u);
      if (!there || !(is_near (all->stamp, &quad[0]) || is_near (all->stamp, &quad[2])))
        continue;
      double field = radial (frame, x, y, mu_min);
      if (isfinite (field))
        share_out (all, quad, field);
    }
}

/* Cells' means, and the flux of those that have one. */
static gboolean
finish (TfStamp *s, const Sharing *all)
{
  double cell_cm2 = pow (s->step_deg * TF_DEG * TF_RADIUS_MM * 1e8, 2);
  gsize n = (gsize)s->width * (gsize)s->height, there = 0;
  s->field = g_new (float, n);
  for (gsize k = 0; k < n; k++)
    {
      double field = all->cover[k] >= 0.5 ? all->sum[k] / all->cover[k] : NAN;
      s->field[k] = (float)field;
      there += isfinite (field) != 0;
      if (isfinite (field))
        s->flux_mx[field < 0] += fabs (field) * cell_cm2;
    }
  return there > 0;
}

gboolean
tf_stamp_cut (TfStamp *stamp, const TfFrame *frame, const TfOutline *outline, guint law,
              double mu_min, double margin_deg)
{
  g_return_val_if_fail (stamp != NULL && frame != NULL && outline != NULL, FALSE);
  const TfGeometry *g = tf_frame_get_geometry (frame);
  g_autoptr (TfOutline) here = tf_mask_outline (frame, outline, law);
  *stamp = (TfStamp){ .step_deg = pixel_deg (g) };
  Box box;
  if (here == NULL || !(stamp->step_deg > 0) || !frame_outline (stamp, here, margin_deg)
      || !find_box (stamp, g, &box))
    return FALSE;
  gsize n = (gsize)stamp->width * (gsize)stamp->height;
  g_autofree double *sum = g_new0 (double, n), *cover = g_new0 (double, n);
  g_autofree Corner *below = g_new (Corner, g->width + 1), *above = g_new (Corner, g->width + 1);
  Sharing all = { stamp, sum, cover };
  place_corners (stamp, g, &box, box.y0 - 0.5, below);
  for (guint y = box.y0; y <= box.y1; y++)
    {
      place_corners (stamp, g, &box, y + 0.5, above);
      share_row (&all, frame, &box, y, below, above, mu_min);
      Corner *next = below;
      below = above;
      above = next;
    }
  return finish (stamp, &all);
}
