/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"

/* Outlines united and taken from each other, in the gnomonic plane of the first, where great circles
 * are straight. After Weiler & Atherton 1977, SIGGRAPH 11, 214: both boundaries are parted where
 * they cross; of each the parts on the right side of the other are kept and strung together. Under
 * even-odd a boundary that crosses itself needs no care, and the turning of rings none either.
 *
 * Every vertex that is kept is the very one that was there. Where a vertex of one boundary lies on
 * the other the crossing is no clean one: the second outline is then moved by about 1e-8 rad
 * (10 m on the Sun) and the parting done again.
 */

typedef struct
{
  double u, v;
  TfVertex vertex;
} Corner;

typedef struct
{
  guint loop, edge;
  double along; /* 0-1 on the edge */
} Spot;

typedef struct
{
  Corner corner;
  Spot on[2]; /* on the first and on the second boundary */
} Node;

typedef struct
{
  guint from, to;  /* nodes */
  GArray *corners; /* Corner, between them */
  gboolean used;
} Part;

typedef struct
{
  const TfTangent *tangent;
  GPtrArray *sides[2]; /* of GArray of Corner: the loops of both boundaries */
  GArray *nodes;       /* Node */
  GPtrArray *parts;    /* Part */
  GPtrArray *whole;    /* GArray of Corner: loops kept as they are; borrowed */
  gboolean keep_inside[2]; /* of a side: keep what lies inside the other */
} Combine;

enum
{
  TRIES = 6,
  STAMP = 24 /* vertices of a brush's circle */
};
static const double clean = 1e-9;    /* nearer to an edge's end than this share of it is no clean crossing */
static const double sliver = 1e-12;  /* smallest area of a ring, rad2 */

static void
part_free (gpointer data)
{
  Part *part = data;
  g_array_unref (part->corners);
  g_free (part);
}

static const Corner *
corner_at (const GArray *loop, guint k)
{
  return &g_array_index (loop, Corner, k % loop->len);
}

static gboolean
inside (const GPtrArray *loops, double u, double v)
{
  gboolean in = FALSE;
  for (guint l = 0; l < loops->len; l++)
    {
      const GArray *loop = loops->pdata[l];
      const Corner *p = corner_at (loop, loop->len - 1);
      for (guint k = 0; k < loop->len; k++)
        {
          const Corner *q = corner_at (loop, k);
          if ((p->v > v) != (q->v > v) && u < p->u + (q->u - p->u) * (v - p->v) / (q->v - p->v))
            in = !in;
          p = q;
        }
    }
  return in;
}

/* -- crossings ------------------------------------------------------------------------------- */

typedef enum
{
  APART,
  CROSS,
  UNCLEAN
} Meeting;

static gboolean
near_end (double t)
{
  return fabs (t) < clean || fabs (t - 1.0) < clean;
}

static Meeting
meet (const Corner *p, const Corner *q, const Corner *a, const Corner *b, double *s, double *t)
{
  double pu = q->u - p->u, pv = q->v - p->v, au = b->u - a->u, av = b->v - a->v;
  double across = pu * av - pv * au, du = a->u - p->u, dv = a->v - p->v;
  double size = hypot (pu, pv) * hypot (au, av);
  if (fabs (across) <= 1e-12 * size)
    return fabs (du * pv - dv * pu) <= 1e-12 * hypot (pu, pv) && size > 0.0 ? UNCLEAN : APART;
  *s = (du * av - dv * au) / across;
  *t = (du * pv - dv * pu) / across;
  if (*s < -clean || *s > 1.0 + clean || *t < -clean || *t > 1.0 + clean)
    return APART;
  return near_end (*s) || near_end (*t) ? UNCLEAN : CROSS;
}

static void
add_node (Combine *c, const Corner *p, const Corner *q, Spot first, Spot second)
{
  double unit[3];
  Node node = { .on = { first, second } };
  node.corner.u = p->u + first.along * (q->u - p->u);
  node.corner.v = p->v + first.along * (q->v - p->v);
  tf_tangent_lift (c->tangent, node.corner.u, node.corner.v, unit);
  node.corner.vertex = tf_vertex_of (unit);
  g_array_append_val (c->nodes, node);
}

static gboolean
boxes_apart (const Corner *p, const Corner *q, const Corner *a, const Corner *b)
{
  return MAX (p->u, q->u) < MIN (a->u, b->u) || MIN (p->u, q->u) > MAX (a->u, b->u)
         || MAX (p->v, q->v) < MIN (a->v, b->v) || MIN (p->v, q->v) > MAX (a->v, b->v);
}

static gboolean
cross_loops (Combine *c, guint l, guint m)
{
  const GArray *one = c->sides[0]->pdata[l], *other = c->sides[1]->pdata[m];
  for (guint j = 0; j < one->len; j++)
    for (guint k = 0; k < other->len; k++)
      {
        double s = 0.0, t = 0.0;
        const Corner *p = corner_at (one, j), *q = corner_at (one, j + 1);
        const Corner *a = corner_at (other, k), *b = corner_at (other, k + 1);
        Meeting meeting = boxes_apart (p, q, a, b) ? APART : meet (p, q, a, b, &s, &t);
        if (meeting == UNCLEAN)
          return FALSE;
        if (meeting == CROSS)
          add_node (c, p, q, (Spot){ l, j, s }, (Spot){ m, k, t });
      }
  return TRUE;
}

/* -- parts ----------------------------------------------------------------------------------- */

typedef struct
{
  const GArray *nodes;
  guint side;
} Order;

static int
by_place (gconstpointer a, gconstpointer b, gpointer data)
{
  const Order *order = data;
  const Spot *p = &g_array_index (order->nodes, Node, *(const guint *)a).on[order->side],
             *q = &g_array_index (order->nodes, Node, *(const guint *)b).on[order->side];
  if (p->edge != q->edge)
    return p->edge < q->edge ? -1 : 1;
  return (p->along > q->along) - (p->along < q->along);
}

static GArray *
nodes_on (const Combine *c, guint side, guint loop)
{
  GArray *list = g_array_new (FALSE, FALSE, sizeof (guint));
  Order order = { c->nodes, side };
  for (guint k = 0; k < c->nodes->len; k++)
    if (g_array_index (c->nodes, Node, k).on[side].loop == loop)
      g_array_append_val (list, k);
  g_array_sort_with_data (list, by_place, &order);
  return list;
}

static gboolean
is_kept (const Combine *c, guint side, double u, double v)
{
  return (inside (c->sides[1 - side], u, v) != 0) == (c->keep_inside[side] != 0);
}

static void
add_part (Combine *c, guint side, const GArray *loop, guint from, guint to)
{
  const Node *a = &g_array_index (c->nodes, Node, from), *b = &g_array_index (c->nodes, Node, to);
  const Spot *start = &a->on[side], *end = &b->on[side];
  Part *part = g_new0 (Part, 1);
  part->from = from;
  part->to = to;
  part->corners = g_array_new (FALSE, FALSE, sizeof (Corner));
  guint n = (end->edge + loop->len - start->edge) % loop->len;
  if (n == 0 && end->along <= start->along) /* all the way round */
    n = loop->len;
  g_array_set_size (part->corners, 0);
  for (guint k = 1; k <= n; k++)
    g_array_append_vals (part->corners, corner_at (loop, start->edge + k), 1);
  const Corner *next = n > 0 ? &g_array_index (part->corners, Corner, 0) : &b->corner;
  if (is_kept (c, side, (a->corner.u + next->u) / 2.0, (a->corner.v + next->v) / 2.0))
    g_ptr_array_add (c->parts, part);
  else
    part_free (part);
}

static void
part_loop (Combine *c, guint side, guint l)
{
  GArray *loop = c->sides[side]->pdata[l];
  g_autoptr (GArray) nodes = nodes_on (c, side, l);
  for (guint k = 0; k < nodes->len; k++)
    add_part (c, side, loop, g_array_index (nodes, guint, k),
              g_array_index (nodes, guint, (k + 1) % nodes->len));
  if (nodes->len == 0 && is_kept (c, side, corner_at (loop, 0)->u, corner_at (loop, 0)->v))
    g_ptr_array_add (c->whole, loop);
}

static gboolean
part_all (Combine *c)
{
  for (guint l = 0; l < c->sides[0]->len; l++)
    for (guint m = 0; m < c->sides[1]->len; m++)
      if (!cross_loops (c, l, m))
        return FALSE;
  for (guint side = 0; side < 2; side++)
    for (guint l = 0; l < c->sides[side]->len; l++)
      part_loop (c, side, l);
  g_autofree guint *ends = g_new0 (guint, c->nodes->len + 1);
  for (guint k = 0; k < c->parts->len; k++)
    {
      const Part *part = c->parts->pdata[k];
      ends[part->from]++;
      ends[part->to]++;
    }
  for (guint k = 0; k < c->nodes->len; k++)
    if (ends[k] != 2)
      return FALSE;
  return TRUE;
}

/* -- strung together ------------------------------------------------------------------------- */

static Part *
next_part (const Combine *c, guint node)
{
  for (guint k = 0; k < c->parts->len; k++)
    {
      Part *part = c->parts->pdata[k];
      if (!part->used && (part->from == node || part->to == node))
        return part;
    }
  return NULL;
}

/* Takes the part from @node to its other end, which is returned. */
static guint
run_through (const Combine *c, Part *part, guint node, GArray *loop)
{
  gboolean forward = part->from == node;
  guint n = part->corners->len;
  part->used = TRUE;
  g_array_append_vals (loop, &g_array_index (c->nodes, Node, node).corner, 1);
  for (guint k = 0; k < n; k++)
    g_array_append_vals (loop, &g_array_index (part->corners, Corner, forward ? k : n - 1 - k), 1);
  return forward ? part->to : part->from;
}

static double
loop_area (const GArray *loop)
{
  double sum = 0.0;
  for (guint k = 0; k < loop->len; k++)
    {
      const Corner *p = corner_at (loop, k), *q = corner_at (loop, k + 1);
      sum += p->u * q->v - q->u * p->v;
    }
  return fabs (sum) / 2.0;
}

static GPtrArray *
string_together (Combine *c)
{
  GPtrArray *loops = g_ptr_array_new_with_free_func ((GDestroyNotify)g_array_unref);
  for (guint k = 0; k < c->whole->len; k++)
    g_ptr_array_add (loops, g_array_ref (c->whole->pdata[k]));
  for (guint k = 0; k < c->parts->len; k++)
    {
      Part *part = c->parts->pdata[k];
      if (part->used)
        continue;
      GArray *loop = g_array_new (FALSE, FALSE, sizeof (Corner));
      guint first = part->from, node = run_through (c, part, first, loop);
      while (node != first && (part = next_part (c, node)) != NULL)
        node = run_through (c, part, node, loop);
      if (loop->len >= 3 && loop_area (loop) > sliver)
        g_ptr_array_add (loops, loop);
      else
        g_array_unref (loop);
    }
  return loops;
}

/* -- loops and outlines ---------------------------------------------------------------------- */

static GPtrArray *
loops_new (void)
{
  return g_ptr_array_new_with_free_func ((GDestroyNotify)g_array_unref);
}

static gboolean
add_loop (GPtrArray *loops, const TfTangent *tangent, const TfVertex *vertices, guint n)
{
  GArray *loop = g_array_sized_new (FALSE, FALSE, sizeof (Corner), n);
  g_ptr_array_add (loops, loop);
  for (guint k = 0; k < n; k++)
    {
      double unit[3];
      Corner corner = { .vertex = vertices[k] };
      tf_sphere_unit (vertices[k].lon_deg, vertices[k].lat_deg, unit);
      if (!tf_tangent_project (tangent, unit, &corner.u, &corner.v))
        return FALSE;
      g_array_append_val (loop, corner);
    }
  return TRUE;
}

static GPtrArray *
loops_of (const TfTangent *tangent, GPtrArray *rings, GError **error)
{
  g_autoptr (GPtrArray) loops = loops_new ();
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = rings->pdata[k];
      if (add_loop (loops, tangent, ring->vertices, ring->n))
        continue;
      g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                   _ ("The two outlines lie 89 degrees or more apart; they cannot be joined."));
      return NULL;
    }
  return g_steal_pointer (&loops);
}

/* A little larger about its middle, and a little aside. */
static GPtrArray *
shaken (GPtrArray *loops, guint turn)
{
  GPtrArray *moved = loops_new ();
  for (guint l = 0; l < loops->len; l++)
    {
      GArray *loop = g_array_copy (loops->pdata[l]);
      double size = 1.0 + 1.37e-7 * turn, aside = 1.13e-8 * turn;
      const Corner *middle = corner_at (loops->pdata[0], 0);
      for (guint k = 0; k < loop->len; k++)
        {
          Corner *corner = &g_array_index (loop, Corner, k);
          corner->u = middle->u + (corner->u - middle->u) * size + aside;
          corner->v = middle->v + (corner->v - middle->v) * size - 0.71 * aside;
        }
      g_ptr_array_add (moved, loop);
    }
  return moved;
}

/* The loops of one with other (@with) or without it; NULL when they cannot be parted cleanly. */
static GPtrArray *
combine (const TfTangent *tangent, GPtrArray *one, GPtrArray *other, gboolean with)
{
  for (guint turn = 0; turn < TRIES; turn++)
    {
      g_autoptr (GPtrArray) moved = shaken (other, turn);
      g_autoptr (GArray) nodes = g_array_new (FALSE, FALSE, sizeof (Node));
      g_autoptr (GPtrArray) parts = g_ptr_array_new_with_free_func (part_free);
      g_autoptr (GPtrArray) whole = g_ptr_array_new ();
      Combine c = { .tangent = tangent,
                    .sides = { one, moved },
                    .nodes = nodes,
                    .parts = parts,
                    .whole = whole,
                    .keep_inside = { FALSE, !with } };
      if (part_all (&c))
        return string_together (&c);
    }
  return NULL;
}

static gboolean
fill_loops (TfOutline *outline, const GPtrArray *loops, gboolean left_out, GError **error)
{
  for (guint l = 0; l < loops->len; l++)
    {
      const GArray *loop = loops->pdata[l];
      g_autofree TfVertex *vertices = g_new (TfVertex, loop->len);
      for (guint k = 0; k < loop->len; k++)
        vertices[k] = corner_at (loop, k)->vertex;
      if (!tf_outline_fill (outline, vertices, loop->len, left_out, _ ("ring"), error))
        return FALSE;
    }
  return TRUE;
}

static gboolean
fill_combined (TfOutline *outline, const TfTangent *tangent, GPtrArray *one, GPtrArray *other,
               gboolean with, gboolean left_out, GError **error)
{
  g_autoptr (GPtrArray) made = combine (tangent, one, other, with);
  if (made != NULL)
    return fill_loops (outline, made, left_out, error);
  g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
               _ ("The two shapes touch in too many places; move one a little."));
  return FALSE;
}

/* -- joining --------------------------------------------------------------------------------- */

static gboolean
fill_as_they_are (TfOutline *outline, GPtrArray *rings, GError **error)
{
  for (guint k = 0; k < rings->len; k++)
    {
      const TfRing *ring = rings->pdata[k];
      if (!tf_outline_fill (outline, ring->vertices, ring->n, TRUE, _ ("left-out area"), error))
        return FALSE;
    }
  return TRUE;
}

TfOutline *
tf_outline_join (const TfOutline *outline, const TfOutline *other, GError **error)
{
  g_autoptr (GPtrArray) one = loops_of (&outline->tangent, outline->rings, error);
  g_autoptr (GPtrArray) two
      = one != NULL ? loops_of (&outline->tangent, other->rings, error) : NULL;
  g_autoptr (TfOutline) joined = tf_outline_start (outline->time);
  if (two == NULL
      || !fill_combined (joined, &outline->tangent, one, two, TRUE, FALSE, error)
      || !fill_as_they_are (joined, outline->left_out, error)
      || !fill_as_they_are (joined, other->left_out, error))
    return NULL;
  tf_outline_fill_pins_of (joined, other);
  tf_outline_fill_pins_of (joined, outline);
  return tf_outline_finish (g_steal_pointer (&joined), error);
}

/* -- the brush ------------------------------------------------------------------------------- */

static int
by_u (gconstpointer a, gconstpointer b)
{
  const Corner *p = a, *q = b;
  if (p->u < q->u || p->u > q->u)
    return p->u < q->u ? -1 : 1;
  return (p->v > q->v) - (p->v < q->v);
}

static double
turn_of (const Corner *o, const Corner *a, const Corner *b)
{
  return (a->u - o->u) * (b->v - o->v) - (a->v - o->v) * (b->u - o->u);
}

/* Andrew 1979, Inf. Proc. Lett. 9, 216: the hull, by its lower and upper chains. */
static GArray *
hull (GArray *points)
{
  GArray *chain = g_array_new (FALSE, FALSE, sizeof (Corner));
  g_array_sort (points, by_u);
  for (int upper = 0; upper < 2; upper++)
    {
      guint base = chain->len;
      for (guint j = 0; j < points->len; j++)
        {
          const Corner *p
              = &g_array_index (points, Corner, upper ? points->len - 1 - j : j);
          while (chain->len >= base + 2
                 && turn_of (&g_array_index (chain, Corner, chain->len - 2),
                             &g_array_index (chain, Corner, chain->len - 1), p)
                        <= 0.0)
            g_array_set_size (chain, chain->len - 1);
          g_array_append_vals (chain, p, 1);
        }
      g_array_set_size (chain, chain->len - 1); /* it begins the other chain */
    }
  return chain;
}

static gboolean
add_circle (GArray *points, const TfTangent *tangent, TfVertex middle, double radius_deg)
{
  double centre[3];
  tf_sphere_unit (middle.lon_deg, middle.lat_deg, centre);
  TfTangent here = tf_tangent_at (centre);
  double r = tan (radius_deg * TF_DEG);
  for (guint k = 0; k < STAMP; k++)
    {
      double unit[3], angle = 2.0 * TF_PI * (k + 0.31) / STAMP;
      Corner corner;
      tf_tangent_lift (&here, r * cos (angle), r * sin (angle), unit);
      if (!tf_tangent_project (tangent, unit, &corner.u, &corner.v))
        return FALSE;
      corner.vertex = tf_vertex_of (unit);
      g_array_append_val (points, corner);
    }
  return TRUE;
}

static GPtrArray *
stroke (const TfTangent *tangent, TfVertex from, TfVertex to, double radius_deg)
{
  g_autoptr (GArray) points = g_array_new (FALSE, FALSE, sizeof (Corner));
  if (!(radius_deg > 0.0 && radius_deg < 45.0) || !add_circle (points, tangent, from, radius_deg)
      || !add_circle (points, tangent, to, radius_deg))
    return NULL;
  GPtrArray *loops = loops_new ();
  g_ptr_array_add (loops, hull (points));
  return loops;
}

/* Brushed in, a left-out area is no longer left out there. */
static gboolean
fill_left_out (TfOutline *to, const TfOutline *outline, GPtrArray *brush, gboolean in,
               GError **error)
{
  if (!in)
    return fill_as_they_are (to, outline->left_out, error);
  for (guint k = 0; k < outline->left_out->len; k++)
    {
      const TfRing *ring = outline->left_out->pdata[k];
      g_autoptr (GPtrArray) one = loops_new ();
      if (!add_loop (one, &outline->tangent, ring->vertices, ring->n))
        continue;
      if (!fill_combined (to, &outline->tangent, one, brush, FALSE, TRUE, error))
        return FALSE;
    }
  return TRUE;
}

TfOutline *
tf_outline_brush (const TfOutline *outline, TfVertex from, TfVertex to, double radius_deg,
                  gboolean in, GError **error)
{
  g_autoptr (TfOutline) brushed = tf_outline_start (outline->time);
  g_autoptr (GPtrArray) loops = loops_of (&outline->tangent, outline->rings, error);
  g_autoptr (GPtrArray) brush = stroke (&outline->tangent, from, to, radius_deg);
  if (brush == NULL)
    g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                 _ ("The brush is too far from the outline."));
  if (loops == NULL || brush == NULL
      || !fill_combined (brushed, &outline->tangent, loops, brush, in, FALSE, error)
      || !fill_left_out (brushed, outline, brush, in, error))
    return NULL;
  if (brushed->rings->len == 0)
    {
      g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                   _ ("Nothing of the outline would be left."));
      return NULL;
    }
  tf_outline_fill_pins_of (brushed, outline);
  return tf_outline_finish (g_steal_pointer (&brushed), error);
}
