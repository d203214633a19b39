/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"

/* Splitting works in the gnomonic plane, where the line is straight. The first ring is cut in two;
 * every other ring that meets the line is cut by it too, the rest go with the half that they lie
 * in.
 */

typedef struct
{
  double u, v;
  TfVertex vertex;
} Corner;

typedef struct
{
  double u, v, du, dv; /* from a, towards b */
} Cut;

/* Positive to the left of the line. */
static double
side (const Cut *cut, double u, double v)
{
  return cut->du * (v - cut->v) - cut->dv * (u - cut->u);
}

static Corner
corner (const TfRing *ring, guint k)
{
  return (Corner){ ring->u[k], ring->v[k], ring->vertices[k] };
}

/* Where the edge from corner @p to @q meets the endless line; @along: 0 at a, 1 at b. */
static gboolean
meet (const TfTangent *tangent, const Cut *cut, const Corner *p, const Corner *q, Corner *at,
      double *along)
{
  double s = side (cut, p->u, p->v), t = side (cut, q->u, q->v), unit[3];
  if ((s > 0.0) == (t > 0.0))
    return FALSE;
  double f = s / (s - t);
  at->u = p->u + f * (q->u - p->u);
  at->v = p->v + f * (q->v - p->v);
  tf_tangent_lift (tangent, at->u, at->v, unit);
  at->vertex = tf_vertex_of (unit);
  *along = ((at->u - cut->u) * cut->du + (at->v - cut->v) * cut->dv)
           / (cut->du * cut->du + cut->dv * cut->dv);
  return TRUE;
}

static guint
count_meetings (const TfTangent *tangent, const Cut *cut, const TfRing *ring, guint edges[2],
                Corner at[2])
{
  guint n = 0;
  for (guint k = 0; k < ring->n; k++)
    {
      Corner p = corner (ring, k), q = corner (ring, (k + 1) % ring->n), x;
      double along;
      if (!meet (tangent, cut, &p, &q, &x, &along) || along < 0.0 || along > 1.0)
        continue;
      if (n < 2)
        {
          edges[n] = k;
          at[n] = x;
        }
      n++;
    }
  return n;
}

/* From meeting @from round the ring to meeting @to. */
static GArray *
part_between (const TfRing *ring, guint from, const Corner *at_from, guint to, const Corner *at_to)
{
  GArray *part = g_array_new (FALSE, FALSE, sizeof (Corner));
  g_array_append_vals (part, at_from, 1);
  for (guint k = (from + 1) % ring->n;; k = (k + 1) % ring->n)
    {
      Corner c = corner (ring, k);
      g_array_append_val (part, c);
      if (k == to)
        break;
    }
  g_array_append_vals (part, at_to, 1);
  return part;
}

static double
signed_area (const GArray *part)
{
  double sum = 0.0;
  for (guint k = 0; k < part->len; k++)
    {
      const Corner *p = &g_array_index (part, Corner, k),
                   *q = &g_array_index (part, Corner, (k + 1) % part->len);
      sum += p->u * q->v - q->u * p->v;
    }
  return sum / 2.0;
}

/* A part's last edge runs along the cut; its inside is to the left of that edge when the part turns
 * to the left. */
static gboolean
is_left (const Cut *cut, const GArray *part)
{
  const Corner *first = &g_array_index (part, Corner, 0),
               *last = &g_array_index (part, Corner, part->len - 1);
  double forward = (first->u - last->u) * cut->du + (first->v - last->v) * cut->dv;
  return (signed_area (part) > 0.0) == (forward > 0.0);
}

static gboolean
fill_part (TfOutline *outline, const GArray *part, gboolean left_out)
{
  if (part->len < 3)
    return FALSE;
  g_autofree TfVertex *vertices = g_new (TfVertex, part->len);
  for (guint k = 0; k < part->len; k++)
    vertices[k] = g_array_index (part, Corner, k).vertex;
  return tf_outline_fill (outline, vertices, part->len, left_out, _ ("ring"), NULL);
}

/* The part of a ring on one side of the endless line: Sutherland & Hodgman 1974, CACM 17, 32. Edges
 * along the line that are run through twice cancel in even-odd. */
static GArray *
clip (const TfTangent *tangent, const Cut *cut, const TfRing *ring, gboolean left)
{
  GArray *part = g_array_new (FALSE, FALSE, sizeof (Corner));
  for (guint k = 0; k < ring->n; k++)
    {
      Corner p = corner (ring, k), q = corner (ring, (k + 1) % ring->n), at;
      double along;
      if ((side (cut, p.u, p.v) > 0.0) == left)
        g_array_append_val (part, p);
      if (meet (tangent, cut, &p, &q, &at, &along))
        g_array_append_val (part, at);
    }
  return part;
}

static gboolean
part_contains (const GArray *part, double u, double v)
{
  gboolean in = FALSE;
  for (guint k = 0; k < part->len; k++)
    {
      const Corner *p = &g_array_index (part, Corner, k),
                   *q = &g_array_index (part, Corner, (k + 1) % part->len);
      if ((p->v > v) != (q->v > v) && u < p->u + (q->u - p->u) * (v - p->v) / (q->v - p->v))
        in = !in;
    }
  return in;
}

typedef struct
{
  const TfTangent *tangent;
  Cut cut;
  GArray *parts[2];     /* of Corner; [1] is to the left */
  TfOutline *halves[2]; /* being filled */
} Split;

static int
half_of (const Split *split, double u, double v)
{
  for (int half = 0; half < 2; half++)
    if (part_contains (split->parts[half], u, v))
      return half;
  return side (&split->cut, u, v) > 0.0;
}

static void
share_ring (Split *split, const TfRing *ring, gboolean left_out)
{
  guint edges[2];
  Corner at[2];
  if (count_meetings (split->tangent, &split->cut, ring, edges, at) == 0)
    {
      int half = half_of (split, ring->u[0], ring->v[0]);
      tf_outline_fill (split->halves[half], ring->vertices, ring->n, left_out, "", NULL);
      return;
    }
  for (int half = 0; half < 2; half++)
    {
      g_autoptr (GArray) part = clip (split->tangent, &split->cut, ring, half == 1);
      fill_part (split->halves[half], part, left_out);
    }
}

static void
share_pins (Split *split, const TfOutline *outline)
{
  for (guint k = 0; k < outline->n_pins; k++)
    {
      double unit[3], u, v;
      const TfPinnedPole *pin = &outline->pins[k];
      tf_sphere_unit (pin->lon_deg, pin->lat_deg, unit);
      if (tf_tangent_project (split->tangent, unit, &u, &v))
        tf_outline_fill_pin (split->halves[half_of (split, u, v)], pin);
    }
}

static gboolean
cut_first_ring (Split *split, const TfOutline *outline, GError **error)
{
  guint edges[2];
  Corner at[2];
  const TfRing *ring = g_ptr_array_index (outline->rings, 0);
  guint n = count_meetings (split->tangent, &split->cut, ring, edges, at);
  if (n != 2)
    {
      g_set_error (
          error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
          _ ("The line must cross the outline exactly twice (crossings: %u); draw it right "
             "across."),
          n);
      return FALSE;
    }
  GArray *a = part_between (ring, edges[0], &at[0], edges[1], &at[1]);
  GArray *b = part_between (ring, edges[1], &at[1], edges[0], &at[0]);
  gboolean a_left = is_left (&split->cut, a);
  split->parts[1] = a_left ? a : b;
  split->parts[0] = a_left ? b : a;
  return TRUE;
}

static gboolean
place_cut (Split *split, TfVertex a, TfVertex b, GError **error)
{
  double ua[3], ub[3], u, v;
  tf_sphere_unit (a.lon_deg, a.lat_deg, ua);
  tf_sphere_unit (b.lon_deg, b.lat_deg, ub);
  if (!tf_tangent_project (split->tangent, ua, &split->cut.u, &split->cut.v)
      || !tf_tangent_project (split->tangent, ub, &u, &v))
    {
      g_set_error (
          error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
          _ ("The line ends 89 degrees or more from the outline; draw it across the outline."));
      return FALSE;
    }
  split->cut.du = u - split->cut.u;
  split->cut.dv = v - split->cut.v;
  return TRUE;
}

gboolean
tf_outline_split (const TfOutline *outline, TfVertex a, TfVertex b, TfOutline **one,
                  TfOutline **other, GError **error)
{
  Split split = { .tangent = &outline->tangent };
  *one = *other = NULL;
  if (!place_cut (&split, a, b, error) || !cut_first_ring (&split, outline, error))
    return FALSE;
  for (int half = 0; half < 2; half++)
    {
      split.halves[half] = tf_outline_start (outline->time);
      fill_part (split.halves[half], split.parts[half], FALSE);
    }
  for (guint k = 1; k < outline->rings->len; k++)
    share_ring (&split, g_ptr_array_index (outline->rings, k), FALSE);
  for (guint k = 0; k < outline->left_out->len; k++)
    share_ring (&split, g_ptr_array_index (outline->left_out, k), TRUE);
  share_pins (&split, outline);
  g_array_unref (split.parts[0]);
  g_array_unref (split.parts[1]);
  *one = tf_outline_finish (split.halves[1], error);
  *other = tf_outline_finish (split.halves[0], *one != NULL ? error : NULL);
  if (*one != NULL && *other != NULL)
    return TRUE;
  g_clear_pointer (one, tf_outline_unref);
  g_clear_pointer (other, tf_outline_unref);
  return FALSE;
}
