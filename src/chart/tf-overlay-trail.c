/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-overlay-private.h"

#include <math.h>

#include "tf-constants.h"

#define STEP_DEG   3.0  /* of a great circle, before it is halved where it bends */
#define JUMP_UNITS 6.0  /* steps shorter than this are straight and have no seam */
#define HALVINGS   14   /* of a step in which the line is lost */
#define STRAIGHT   0.15 /* units that the middle of a step may lie beside the straight line */
#define DEPTH      10
#define NEAR_UNITS 1.5 /* points nearer than this to the last are not drawn */

TfTrail *
tf_trail_new (void)
{
  TfTrail *trail = g_new0 (TfTrail, 1);
  trail->points = g_array_new (FALSE, FALSE, sizeof (TfTrailPoint));
  trail->starts = g_array_new (FALSE, FALSE, sizeof (guint));
  return trail;
}

void
tf_trail_free (TfTrail *trail)
{
  if (trail == NULL)
    return;
  g_array_unref (trail->points);
  g_array_unref (trail->starts);
  g_free (trail);
}

guint
tf_trail_get_n_pieces (const TfTrail *trail)
{
  return trail->starts->len;
}

const TfTrailPoint *
tf_trail_get_piece (const TfTrail *trail, guint k, guint *n)
{
  guint start = g_array_index (trail->starts, guint, k);
  guint end = k + 1 < trail->starts->len ? g_array_index (trail->starts, guint, k + 1)
                                         : trail->points->len;
  *n = end - start;
  return &g_array_index (trail->points, TfTrailPoint, start);
}

static void
begin_piece (TfTrail *trail, TfTrailPoint point)
{
  guint start = trail->points->len;
  g_array_append_val (trail->starts, start);
  g_array_append_val (trail->points, point);
}

static void
add_point (TfTrail *trail, TfTrailPoint point)
{
  g_array_append_val (trail->points, point);
}

/* -- following a line ------------------------------------------------------------------------ */

typedef struct
{
  const TfOverlay *overlay;
  TfTrailFunc func;
  gconstpointer line;
} Walk;

static gboolean
see (const Walk *walk, double t, TfTrailPoint *point)
{
  double lon, lat;
  walk->func (t, &lon, &lat, walk->line);
  return walk->overlay->project (lon, lat, &point->x, &point->y, walk->overlay->data)
         && isfinite (point->x) && isfinite (point->y);
}

static double
far_apart (TfTrailPoint a, TfTrailPoint b)
{
  return hypot (a.x - b.x, a.y - b.y);
}

/* The last place seen on the way from @seen to @lost (both in t); @lost becomes its t. */
static TfTrailPoint
find_limb (const Walk *walk, double seen, double *lost, TfTrailPoint at)
{
  for (int k = 0; k < HALVINGS; k++)
    {
      TfTrailPoint point;
      double middle = (seen + *lost) / 2;
      if (see (walk, middle, &point))
        {
          seen = middle;
          at = point;
        }
      else
        *lost = middle;
    }
  *lost = seen;
  return at;
}

/* On a smooth line the half-way point lies near the middle of the step; across a seam it lies at
 * one of its ends. */
static gboolean
jumps (TfTrailPoint a, TfTrailPoint middle, TfTrailPoint b)
{
  TfTrailPoint mean = { (a.x + b.x) / 2, (a.y + b.y) / 2 };
  return far_apart (middle, mean) > 0.4 * far_apart (a, b);
}

static void
find_seam (const Walk *walk, double t0, TfTrailPoint *a, double t1, TfTrailPoint *b)
{
  for (int k = 0; k < HALVINGS; k++)
    {
      TfTrailPoint point;
      double middle = (t0 + t1) / 2;
      if (!see (walk, middle, &point))
        return;
      if (far_apart (point, *a) < far_apart (point, *b))
        {
          t0 = middle;
          *a = point;
        }
      else
        {
          t1 = middle;
          *b = point;
        }
    }
}

/* How far the half-way point lies beside the straight line. */
static double
bend (TfTrailPoint a, TfTrailPoint middle, TfTrailPoint b)
{
  double length = far_apart (a, b);
  double cross = (b.x - a.x) * (middle.y - a.y) - (b.y - a.y) * (middle.x - a.x);
  return length > 0 ? fabs (cross) / length : 0;
}

/* Halved until it is straight to a fraction of a pixel. */
static void
step_in_sight (TfTrail *trail, const Walk *walk, double t0, TfTrailPoint a, double t1,
               TfTrailPoint b, int depth)
{
  TfTrailPoint middle;
  double t = (t0 + t1) / 2;
  if (far_apart (a, b) < JUMP_UNITS || !see (walk, t, &middle))
    add_point (trail, b);
  else if (jumps (a, middle, b))
    {
      TfTrailPoint leave = a, enter = b;
      find_seam (walk, t0, &leave, t1, &enter);
      add_point (trail, leave);
      begin_piece (trail, enter);
      add_point (trail, b);
    }
  else if (depth < DEPTH && bend (a, middle, b) > STRAIGHT)
    {
      step_in_sight (trail, walk, t0, a, t, middle, depth + 1);
      step_in_sight (trail, walk, t, middle, t1, b, depth + 1);
    }
  else
    add_point (trail, b);
}

static void
step_on (TfTrail *trail, const Walk *walk, double t0, gboolean saw0, TfTrailPoint a, double t1,
         gboolean saw1, TfTrailPoint b)
{
  if (saw0 && saw1)
    step_in_sight (trail, walk, t0, a, t1, b, 0);
  else if (saw0)
    {
      double last = t1;
      TfTrailPoint limb = find_limb (walk, t0, &last, a);
      step_in_sight (trail, walk, t0, a, last, limb, 0);
    }
  else if (saw1)
    {
      double first = t0;
      TfTrailPoint limb = find_limb (walk, t1, &first, b);
      begin_piece (trail, limb);
      step_in_sight (trail, walk, first, limb, t1, b, 0);
    }
}

void
tf_trail_add_line (TfTrail *trail, const TfOverlay *overlay, TfTrailFunc func, gconstpointer line,
                   guint n, gboolean joined)
{
  Walk walk = { overlay, func, line };
  TfTrailPoint a = { 0, 0 }, b = { 0, 0 };
  gboolean saw0 = see (&walk, 0, &a);
  if (saw0 && !(joined && trail->points->len > 0))
    begin_piece (trail, a);
  for (guint k = 1; k <= n; k++)
    {
      double t0 = (double)(k - 1) / n, t1 = (double)k / n;
      gboolean saw1 = see (&walk, t1, &b);
      step_on (trail, &walk, t0, saw0, a, t1, saw1, b);
      a = b;
      saw0 = saw1;
    }
}

/* -- great circles --------------------------------------------------------------------------- */

typedef struct
{
  double a[3], b[3]; /* unit vectors of the ends; b at right angles to a */
  double angle;      /* rad */
} Arc;

static void
unit_of (TfVertex v, double u[3])
{
  double lat = v.lat_deg * TF_DEG, lon = v.lon_deg * TF_DEG;
  u[0] = cos (lat) * cos (lon);
  u[1] = cos (lat) * sin (lon);
  u[2] = sin (lat);
}

static Arc
arc_of (TfVertex from, TfVertex to)
{
  Arc arc;
  double end[3], dot = 0, length = 0;
  unit_of (from, arc.a);
  unit_of (to, end);
  for (int k = 0; k < 3; k++)
    dot += arc.a[k] * end[k];
  for (int k = 0; k < 3; k++)
    {
      arc.b[k] = end[k] - dot * arc.a[k];
      length += arc.b[k] * arc.b[k];
    }
  length = sqrt (length);
  for (int k = 0; k < 3; k++)
    arc.b[k] = length > 0 ? arc.b[k] / length : 0;
  arc.angle = atan2 (length, dot);
  return arc;
}

static void
along_arc (double t, double *lon_deg, double *lat_deg, gconstpointer line)
{
  const Arc *arc = line;
  double u[3];
  for (int k = 0; k < 3; k++)
    u[k] = cos (t * arc->angle) * arc->a[k] + sin (t * arc->angle) * arc->b[k];
  double lon = atan2 (u[1], u[0]) / TF_DEG;
  *lon_deg = lon < 0 ? lon + 360 : lon;
  *lat_deg = atan2 (u[2], hypot (u[0], u[1])) / TF_DEG;
}

void
tf_trail_add_arc (TfTrail *trail, const TfOverlay *overlay, TfVertex from, TfVertex to,
                  gboolean joined)
{
  if (!isfinite (from.lon_deg + from.lat_deg + to.lon_deg + to.lat_deg))
    return;
  Arc arc = arc_of (from, to);
  guint n = (guint)CLAMP (ceil (arc.angle / TF_DEG / STEP_DEG), 1, 180);
  tf_trail_add_line (trail, overlay, along_arc, &arc, n, joined);
}

/* When the ring's first vertex is in sight the last piece runs on into the first. */
static void
make_whole (TfTrail *trail, gboolean first_seen)
{
  if (!first_seen || trail->starts->len == 0)
    return;
  if (trail->starts->len == 1)
    {
      trail->closed = TRUE;
      return;
    }
  guint n_first, n_last, last = trail->starts->len - 1;
  const TfTrailPoint *piece = tf_trail_get_piece (trail, last, &n_last);
  g_autoptr (GArray) moved = g_array_new (FALSE, FALSE, sizeof (TfTrailPoint));
  g_array_append_vals (moved, piece, n_last);
  tf_trail_get_piece (trail, 0, &n_first);
  g_array_set_size (trail->points, trail->points->len - n_last);
  g_array_set_size (trail->starts, last);
  g_array_prepend_vals (trail->points, moved->data, n_last);
  for (guint k = 1; k < trail->starts->len; k++)
    g_array_index (trail->starts, guint, k) += n_last;
}

TfTrail *
tf_trail_new_ring (const TfOverlay *overlay, const TfVertex *ring, guint n)
{
  TfTrail *trail = tf_trail_new ();
  double x, y;
  for (guint k = 0; k < n; k++)
    tf_trail_add_arc (trail, overlay, ring[k], ring[(k + 1) % n], k > 0);
  if (n > 0)
    make_whole (trail, overlay->project (ring[0].lon_deg, ring[0].lat_deg, &x, &y, overlay->data));
  return trail;
}

/* -- reading --------------------------------------------------------------------------------- */

static void
piece_path (const TfTrailPoint *points, guint n, cairo_t *cr)
{
  TfTrailPoint last = points[0];
  cairo_new_sub_path (cr);
  cairo_line_to (cr, last.x, last.y);
  for (guint j = 1; j < n; j++)
    if (j == n - 1 || far_apart (points[j], last) >= NEAR_UNITS)
      {
        last = points[j];
        cairo_line_to (cr, last.x, last.y);
      }
}

void
tf_trail_path (const TfTrail *trail, cairo_t *cr)
{
  for (guint k = 0; k < tf_trail_get_n_pieces (trail); k++)
    {
      guint n;
      const TfTrailPoint *points = tf_trail_get_piece (trail, k, &n);
      piece_path (points, n, cr);
      if (trail->closed)
        cairo_close_path (cr);
    }
}

gboolean
tf_trail_contains (const TfTrail *trail, double x, double y)
{
  gboolean inside = FALSE;
  for (guint k = 0; k < tf_trail_get_n_pieces (trail); k++)
    {
      guint n;
      const TfTrailPoint *p = tf_trail_get_piece (trail, k, &n);
      for (guint j = 0, i = n - 1; j < n; i = j++)
        if ((p[j].y > y) != (p[i].y > y)
            && x < (p[i].x - p[j].x) * (y - p[j].y) / (p[i].y - p[j].y) + p[j].x)
          inside = !inside;
    }
  return inside;
}

static double
piece_area (const TfTrailPoint *p, guint n)
{
  double twice = 0;
  for (guint j = 0, i = n - 1; j < n; i = j++)
    twice += p[i].x * p[j].y - p[j].x * p[i].y;
  return fabs (twice) / 2;
}

double
tf_trail_area (const TfTrail *trail)
{
  double all = 0;
  for (guint k = 0; k < tf_trail_get_n_pieces (trail); k++)
    {
      guint n;
      const TfTrailPoint *points = tf_trail_get_piece (trail, k, &n);
      all += piece_area (points, n);
    }
  return all;
}

void
tf_trail_widen (const TfTrail *trail, double box[4])
{
  double largest = -1;
  const TfTrailPoint *points = NULL;
  guint n_points = 0;
  for (guint k = 0; k < tf_trail_get_n_pieces (trail); k++)
    {
      guint n;
      const TfTrailPoint *piece = tf_trail_get_piece (trail, k, &n);
      double area = piece_area (piece, n);
      if (area > largest)
        {
          largest = area;
          points = piece;
          n_points = n;
        }
    }
  for (guint k = 0; k < n_points; k++)
    {
      box[0] = MIN (box[0], points[k].x);
      box[1] = MIN (box[1], points[k].y);
      box[2] = MAX (box[2], points[k].x);
      box[3] = MAX (box[3], points[k].y);
    }
}
