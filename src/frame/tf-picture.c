/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-picture.h"

#include <math.h>

#include "tf-constants.h"

/* A row of the view becomes places in a pyramid level, places become field values, values
 * become colours through a table. Places are counted from 0, integers at the centres of the
 * level's pixels. DISK is affine; UNROLLED and CLOSE are worked out on a grid of STEP view
 * pixels and interpolated, exactly only in cells that the limb, a map's seam or the view's end
 * of the Sun goes through. */

enum
{
  STEP = 8,
  COLOURS = 2048,
};

typedef struct
{
  const TfView *view;
  const TfGeometry *geometry;
  const float *data; /* the level */
  guint width, height;
  double shrink; /* frame pixels a level pixel: 2^level */
  float rim[3];  /* centre and squared radius at which un-projected looks end */
  float sky[3];  /* centre and squared reach of the disk in the level: no look beyond */
  gboolean nearest;
  guint columns, rows; /* of the view */
  double scale;        /* colours a gauss */
  guint32 ground;
  guint32 colours[COLOURS + 1];
  guint32 *out;
  guint stride;
} Render;

/* -- colours --------------------------------------------------------------------------------- */

static guint32
mix (guint32 from, guint32 to, double t)
{
  guint32 colour = 0xff000000u;
  for (guint shift = 0; shift < 24; shift += 8)
    {
      double a = (from >> shift) & 255, b = (to >> shift) & 255;
      colour |= (guint32)(a + (b - a) * t + 0.5) << shift;
    }
  return colour;
}

guint32
tf_paint_colour (const TfPaint *paint, double share)
{
  double t = CLAMP (share, -1, 1);
  guint32 zero = paint->dark ? 0xff15181du : 0xfffbfaf7u;
  return paint->palette == TF_PALETTE_GREY
             ? mix (0xff000000u, 0xffffffffu, 0.5 * (t + 1))
             : mix (zero, t < 0 ? 0xff4b5fd6u : 0xffd98a00u, fabs (t));
}

static void
fill_colours (Render *render, const TfPaint *paint)
{
  for (guint k = 0; k <= COLOURS; k++)
    render->colours[k] = tf_paint_colour (paint, 2.0 * k / COLOURS - 1);
}

/* -- sampling -------------------------------------------------------------------------------- */

/* The four pixels about (u, v), those with a value alone, weighted; NaN when they have less
 * than half of the weight. */
static float
edge_value (const Render *r, float u, float v)
{
  if (!(u > -1 && v > -1 && u < (float)r->width && v < (float)r->height))
    return NAN;
  int x = (int)floorf (u), y = (int)floorf (v);
  float fu = u - (float)x, fv = v - (float)y, sum = 0, weight = 0;
  for (int j = 0; j < 2; j++)
    for (int i = 0; i < 2; i++)
      {
        if (x + i < 0 || y + j < 0 || x + i >= (int)r->width || y + j >= (int)r->height)
          continue;
        float value = r->data[(gsize)(y + j) * r->width + (gsize)(x + i)];
        float w = (i == 1 ? fu : 1 - fu) * (j == 1 ? fv : 1 - fv);
        if (!isnan (value))
          {
            sum += w * value;
            weight += w;
          }
      }
  return weight >= 0.4999f ? sum / weight : NAN;
}

/* Bilinear without branches, so that it vectorises: NaN when one of the four is, or outside. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
sample_bilinear (const float *data, int width, int height, const float *u, const float *v, guint n,
                 float *out)
{
  float right = (float)(width - 1), top = (float)(height - 1);
  for (guint k = 0; k < n; k++)
    {
      gboolean inside = u[k] >= 0 && u[k] < right && v[k] >= 0 && v[k] < top;
      float cu = inside ? u[k] : 0, cv = inside ? v[k] : 0;
      int x = (int)cu, y = (int)cv;
      float fu = cu - (float)x, fv = cv - (float)y;
      const float *p = data + (gssize)y * width + x;
      float low = p[0] + fu * (p[1] - p[0]), high = p[width] + fu * (p[width + 1] - p[width]);
      out[k] = inside ? low + fv * (high - low) : NAN;
    }
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
sample_nearest (const float *data, int width, int height, const float *u, const float *v, guint n,
                float *out)
{
  float right = (float)width - 0.5f, top = (float)height - 0.5f;
  for (guint k = 0; k < n; k++)
    {
      gboolean inside = u[k] >= -0.5f && u[k] < right && v[k] >= -0.5f && v[k] < top;
      float cu = inside ? u[k] + 0.5f : 0, cv = inside ? v[k] + 0.5f : 0;
      float value = data[(gssize)(int)cv * width + (int)cu];
      out[k] = inside ? value : NAN;
    }
}

/* TRUE when one of @n values is none. */
__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static gboolean
has_hole (const float *values, guint n)
{
  int holes = 0;
  for (guint k = 0; k < n; k++)
    holes |= !(values[k] - values[k] <= 0);
  return holes != 0;
}

/* Fills what the quick way left open from @first on. */
static void
fill_holes (const Render *r, guint first, guint n, gboolean all, const float *u, const float *v,
            float *out)
{
  for (guint k = first; k < first + n; k++)
    {
      float dx = u[k] - r->sky[0], dy = v[k] - r->sky[1];
      if (all || isnan (out[k]))
        out[k] = dx * dx + dy * dy > r->sky[2] ? NAN : edge_value (r, u[k], v[k]);
    }
}

static void
sample_row (const Render *r, const float *u, const float *v, float *out)
{
  enum
  {
    PIECE = 32
  };
  gboolean small = r->width < 2 || r->height < 2;
  if (r->nearest)
    {
      sample_nearest (r->data, (int)r->width, (int)r->height, u, v, r->columns, out);
      return;
    }
  if (!small)
    sample_bilinear (r->data, (int)r->width, (int)r->height, u, v, r->columns, out);
  for (guint k = 0; k < r->columns; k += PIECE)
    {
      guint n = MIN (PIECE, r->columns - k);
      if (small || has_hole (out + k, n))
        fill_holes (r, k, n, small, u, v, out);
    }
}

__attribute__ ((target_clones ("arch=x86-64-v3", "default"))) static void
colour_row (const float *values, guint n, float scale, const guint32 *colours, guint32 ground,
            guint32 *out)
{
  for (guint k = 0; k < n; k++)
    {
      float at = values[k] * scale + 0.5f * COLOURS + 0.5f;
      at = at > 0 ? at : 0;
      at = at < COLOURS ? at : COLOURS;
      guint32 colour = colours[(int)at];
      out[k] = values[k] - values[k] <= 0 ? colour : ground;
    }
}

/* -- places ---------------------------------------------------------------------------------- */

static void
to_level (const Render *r, double x, double y, float *u, float *v)
{
  *u = (float)((x - 0.5) / r->shrink - 0.5);
  *v = (float)((y - 0.5) / r->shrink - 0.5);
}

static void
exact_place (const Render *r, double vx, double vy, float *u, float *v)
{
  double x, y;
  *u = *v = NAN;
  if (tf_view_to_pixel (r->view, r->geometry, vx, vy, &x, &y))
    to_level (r, x, y, u, v);
}

static void
disk_places (const Render *r, guint row, float *u, float *v)
{
  double c = cos (r->view->turn_deg * TF_DEG) / (r->view->zoom * r->shrink);
  double s = sin (r->view->turn_deg * TF_DEG) / (r->view->zoom * r->shrink);
  double x, y;
  tf_view_to_pixel (r->view, r->geometry, 0.5, row + 0.5, &x, &y);
  double u0 = (x - 0.5) / r->shrink - 0.5, v0 = (y - 0.5) / r->shrink - 0.5;
  for (guint k = 0; k < r->columns; k++)
    {
      u[k] = (float)(u0 + c * k);
      v[k] = (float)(v0 + s * k);
    }
}

/* The grid's nodes of a band of rows: node (i, j) is view point (i STEP + 0.5, first + j STEP +
 * 0.5). */
typedef struct
{
  float *u, *v;
  guint across;
} Grid;

static void
fill_grid (const Render *r, guint first, guint n, Grid *grid)
{
  guint down = (n + STEP - 1) / STEP + 1;
  grid->across = (r->columns + STEP - 1) / STEP + 1;
  grid->u = g_new (float, (gsize)down * grid->across);
  grid->v = g_new (float, (gsize)down * grid->across);
  for (guint j = 0; j < down; j++)
    for (guint i = 0; i < grid->across; i++)
      exact_place (r, i * STEP + 0.5, first + j * STEP + 0.5, &grid->u[j * grid->across + i],
                   &grid->v[j * grid->across + i]);
}

/* TRUE when the cell whose first node is @at is smooth: all four nodes on the Sun and no seam
 * between them. */
static gboolean
is_smooth (const Render *r, const Grid *grid, guint at)
{
  float jump = tf_geometry_is_map (r->geometry) ? 0.5f * (float)r->width : (float)INFINITY;
  float u = grid->u[at];
  const guint corners[3] = { at + 1, at + grid->across, at + grid->across + 1 };
  if (isnan (u))
    return FALSE;
  for (guint k = 0; k < 3; k++)
    if (!(fabsf (grid->u[corners[k]] - u) < jump))
      return FALSE;
  return TRUE;
}

static gboolean
is_empty (const Grid *grid, guint at)
{
  return isnan (grid->u[at]) && isnan (grid->u[at + 1]) && isnan (grid->u[at + grid->across])
         && isnan (grid->u[at + grid->across + 1]);
}

/* Between nodes, of the row @down rows below the nodes' row. */
static void
cell_places (const Grid *grid, guint at, guint down, guint n, float *u, float *v)
{
  const float *gu = grid->u + at, *gv = grid->v + at;
  float t = (float)down / STEP;
  float u0 = gu[0] + t * (gu[grid->across] - gu[0]),
        u1 = gu[1] + t * (gu[grid->across + 1] - gu[1]);
  float v0 = gv[0] + t * (gv[grid->across] - gv[0]),
        v1 = gv[1] + t * (gv[grid->across + 1] - gv[1]);
  for (guint k = 0; k < n; k++)
    {
      u[k] = u0 + (u1 - u0) * (float)k / STEP;
      v[k] = v0 + (v1 - v0) * (float)k / STEP;
    }
}

static void
grid_places (const Render *r, const Grid *grid, guint first, guint row, float *u, float *v)
{
  guint j = (row - first) / STEP, down = (row - first) % STEP;
  for (guint i = 0; i + 1 < grid->across; i++)
    {
      guint at = j * grid->across + i, x = i * STEP, n = MIN (STEP, r->columns - x);
      if (is_smooth (r, grid, at))
        cell_places (grid, at, down, n, u + x, v + x);
      else
        for (guint k = 0; k < n; k++)
          {
            u[x + k] = v[x + k] = NAN;
            if (!is_empty (grid, at))
              exact_place (r, x + k + 0.5, row + 0.5, &u[x + k], &v[x + k]);
          }
    }
}

/* The last pixel before the limb is there in one row and not in the next: un-projected, that is a comb. They end a pixel sooner. */
static void
cut_rim (const Render *r, float *u, float *v)
{
  for (guint k = 0; k < r->columns; k++)
    {
      float dx = u[k] - r->rim[0], dy = v[k] - r->rim[1];
      if (dx * dx + dy * dy > r->rim[2])
        u[k] = v[k] = NAN;
    }
}

static void
find_rim (Render *r)
{
  double x, y, radius = tf_geometry_disk_radius (r->geometry) - 1.5;
  r->rim[2] = INFINITY;
  if (!tf_geometry_disk_centre (r->geometry, &x, &y) || !(radius > 0))
    return;
  to_level (r, x, y, &r->rim[0], &r->rim[1]);
  r->rim[2] = (float)(radius / r->shrink * radius / r->shrink);
}

/* -- rendering ------------------------------------------------------------------------------- */

static void
render_band (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Render *r = data;
  g_autofree float *memory = g_new (float, (gsize)3 * r->columns);
  float *u = memory, *v = memory + r->columns, *values = memory + 2 * (gsize)r->columns;
  Grid grid = { NULL, NULL, 0 };
  if (r->view->look != TF_LOOK_DISK)
    fill_grid (r, first, n, &grid);
  for (guint row = first; row < first + n; row++)
    {
      if (r->view->look == TF_LOOK_DISK)
        disk_places (r, row, u, v);
      else
        {
          grid_places (r, &grid, first, row, u, v);
          cut_rim (r, u, v);
        }
      sample_row (r, u, v, values);
      colour_row (values, r->columns, (float)r->scale, r->colours, r->ground,
                  r->out + (gsize)row * r->stride);
    }
  g_free (grid.u);
  g_free (grid.v);
}

/* The sky begins two level pixels beyond the limb, unless the picture has values there. */
static void
find_sky (const TfFrame *frame, Render *r)
{
  double x, y, radius = tf_geometry_disk_radius (r->geometry);
  const TfGeometry *g = r->geometry;
  r->sky[2] = INFINITY;
  if (!tf_geometry_disk_centre (g, &x, &y) || !(radius > 0) || !isnan (tf_frame_value (frame, 1, 1))
      || !isnan (tf_frame_value (frame, g->width, g->height)))
    return;
  to_level (r, x, y, &r->sky[0], &r->sky[1]);
  r->sky[2] = (float)((radius / r->shrink + 2) * (radius / r->shrink + 2));
}

/* Frame pixels a view pixel, in the middle of the view. */
static double
coarseness (const TfView *view, const TfGeometry *g)
{
  double x[3], y[3], mx = view->width / 2, my = view->height / 2;
  if (view->look == TF_LOOK_DISK)
    return 1 / view->zoom;
  if (tf_view_to_pixel (view, g, mx, my, &x[0], &y[0])
      && tf_view_to_pixel (view, g, mx + 1, my, &x[1], &y[1])
      && tf_view_to_pixel (view, g, mx, my + 1, &x[2], &y[2]))
    {
      double area = fabs ((x[1] - x[0]) * (y[2] - y[0]) - (x[2] - x[0]) * (y[1] - y[0]));
      if (area > 0 && area < 1e6)
        return sqrt (area);
    }
  double r = tf_geometry_disk_radius (g);
  return isnan (r) ? g->width / 360.0 / view->zoom : r * TF_DEG / view->zoom;
}

static void
choose_level (const TfFrame *frame, Render *r)
{
  double coarse = coarseness (r->view, r->geometry);
  guint level = 0;
  r->nearest = coarse < 0.5;
  for (r->shrink = 1; r->shrink * 1.42 < coarse;
       r->shrink *= 2) /* drawn at 0.7 to 1.4 of the level's own size */
    {
      if (level == tf_frame_get_n_levels (frame))
        break;
      level++;
    }
  r->data = tf_frame_get_level (frame, level, &r->width, &r->height);
}

gboolean
tf_picture_render (const TfFrame *frame, const TfView *view, const TfPaint *paint, guint32 *out,
                   guint stride, const TfWork *work)
{
  g_return_val_if_fail (frame != NULL && view != NULL && paint != NULL && out != NULL, FALSE);
  Render render = { .view = view,
                    .geometry = tf_frame_get_geometry (frame),
                    .ground = paint->ground,
                    .out = out,
                    .stride = stride };
  if (!(view->zoom > 0) || !(paint->range_gauss > 0) || !(view->width >= 0.5 && view->width < 65536)
      || !(view->height >= 0.5 && view->height < 65536))
    return FALSE;
  render.columns = (guint)(view->width + 0.5);
  render.rows = (guint)(view->height + 0.5);
  g_return_val_if_fail (stride >= render.columns, FALSE);
  render.scale = COLOURS / (2 * paint->range_gauss);
  fill_colours (&render, paint);
  choose_level (frame, &render);
  find_sky (frame, &render);
  find_rim (&render);
  return tf_bands_run (work, render.rows, render_band, &render);
}
