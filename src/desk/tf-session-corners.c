/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Corners moved, put in and taken away. A finely drawn outline has more corners than a hand can
 * hold apart: handles stand only where there is room for them, and the corners between a handle and
 * its neighbours go along, the nearer the more. */

#include "tf-session-private.h"

#include <math.h>

static const TfVertex *
ring_of (TfSession *self, TfCornerPlace place, guint *n)
{
  TfOutline *base = tf_session_get_base (self);
  guint rings = base == NULL      ? 0
                : place.left_out ? tf_outline_get_n_left_out (base)
                                 : tf_outline_get_n_rings (base);
  *n = 0;
  return place.ring < rings ? tf_outline_get_ring (base, place.ring, place.left_out, n) : NULL;
}

static double
between (TfVertex a, TfVertex b)
{
  return tf_sphere_distance (a.lon_deg, a.lat_deg, b.lon_deg, b.lat_deg);
}

TfVertex
tf_session_get_corner (TfSession *self, TfCornerPlace place)
{
  guint n;
  const TfVertex *ring = ring_of (self, place, &n);
  return place.corner < n ? ring[place.corner] : (TfVertex){ NAN, NAN };
}

static void
list_ring (TfSession *self, TfCornerPlace place, double apart_deg, GArray *list)
{
  guint n;
  const TfVertex *ring = ring_of (self, place, &n);
  TfVertex first = n > 0 ? ring[0] : (TfVertex){ 0, 0 }, last = first;
  for (guint k = 0; k < n; k++)
    {
      place.corner = k;
      if (k > 0 && (between (ring[k], last) < apart_deg || between (ring[k], first) < apart_deg))
        continue;
      g_array_append_val (list, place);
      last = ring[k];
    }
}

GArray *
tf_session_list_corners (TfSession *self, double apart_deg)
{
  GArray *list = g_array_new (FALSE, TRUE, sizeof (TfCornerPlace));
  TfOutline *base = tf_session_get_base (self);
  if (base == NULL)
    return list;
  for (int out = 0; out < 2; out++)
    {
      guint n = out ? tf_outline_get_n_left_out (base) : tf_outline_get_n_rings (base);
      for (guint k = 0; k < n; k++)
        list_ring (self, (TfCornerPlace){ .ring = k, .left_out = out }, apart_deg, list);
    }
  return list;
}

static void
change_ring (TfSession *self, TfCornerPlace place, const TfVertex *ring, guint n, gboolean live)
{
  g_autoptr (GError) error = NULL;
  TfOutline *changed = tf_outline_with_ring_changed (tf_session_get_base (self), place.ring,
                                                     place.left_out, ring, n, &error);
  if (changed == NULL)
    tf_session_say (self, error->message);
  else if (!live)
    tf_session_change_draft (self, changed, NULL);
  else
    {
      if (self->draft == NULL)
        g_set_object (&self->replaced, self->region);
      g_clear_pointer (&self->draft, tf_outline_unref);
      g_clear_pointer (&self->other, tf_outline_unref);
      self->other_measured = FALSE;
      self->draft = changed;
      self->draft_looked = self->replaces = TRUE;
    }
}

/* How far the corners on either side without a handle reach. */
static guint
reach (const TfVertex *ring, guint n, guint corner, int step, double apart_deg)
{
  guint k = 1;
  while (k < n / 2 && between (ring[corner], ring[(corner + n + (guint)(step * (int)k)) % n]) < apart_deg)
    k++;
  return k;
}

void
tf_session_move_corner (TfSession *self, TfCornerPlace place, TfVertex to, double apart_deg,
                        gboolean done)
{
  guint n;
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->stroke_before == NULL)
    {
      TfOutline *base = tf_session_get_base (self);
      if (base == NULL || self->frame == NULL)
        return;
      tf_session_remember (self);
      self->stroke_before = tf_outline_ref (base); /* as it was when the hand took hold */
      self->brushing = TRUE;
      self->slow = FALSE;
    }
  const TfVertex *ring
      = tf_outline_get_ring (self->stroke_before, place.ring, place.left_out, &n);
  g_autofree TfVertex *moved = g_memdup2 (ring, n * sizeof *ring);
  double west = remainder (to.lon_deg - ring[place.corner].lon_deg, 360),
         north = to.lat_deg - ring[place.corner].lat_deg;
  for (int step = -1; step <= 1; step += 2)
    {
      guint far = reach (ring, n, place.corner, step, apart_deg);
      for (guint k = step > 0 ? 0 : 1; k < far; k++)
        {
          guint at = (place.corner + n + (guint)(step * (int)k)) % n;
          double share = 1.0 - (double)k / far;
          moved[at].lon_deg += share * west;
          moved[at].lat_deg = CLAMP (moved[at].lat_deg + share * north, -90, 90);
        }
    }
  change_ring (self, place, moved, n, TRUE);
  if (done)
    tf_session_brush_end (self);
}

/* -- put in, take away ------------------------------------------------------------------------- */

/* How far @at lies from the edge, and where along it (0-1); small regions: a plane will do. */
static double
edge_distance (TfVertex at, TfVertex a, TfVertex b)
{
  double shrink = cos (at.lat_deg * G_PI / 180);
  double bx = remainder (b.lon_deg - a.lon_deg, 360) * shrink, by = b.lat_deg - a.lat_deg;
  double px = remainder (at.lon_deg - a.lon_deg, 360) * shrink, py = at.lat_deg - a.lat_deg;
  double square = bx * bx + by * by;
  double t = square > 0 ? CLAMP ((px * bx + py * by) / square, 0, 1) : 0;
  return hypot (px - t * bx, py - t * by);
}

static double
nearest_edge (TfSession *self, TfVertex at, TfCornerPlace *best)
{
  double least = INFINITY;
  g_autoptr (GArray) corners = tf_session_list_corners (self, 0);
  for (guint k = 0; k < corners->len; k++)
    {
      guint n;
      TfCornerPlace place = g_array_index (corners, TfCornerPlace, k);
      const TfVertex *ring = ring_of (self, place, &n);
      double away = edge_distance (at, ring[place.corner], ring[(place.corner + 1) % n]);
      if (away < least)
        {
          least = away;
          *best = place;
        }
    }
  return least;
}

gboolean
tf_session_insert_corner (TfSession *self, TfVertex at, double within_deg, TfCornerPlace *place)
{
  guint n;
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (self->frame == NULL || !(nearest_edge (self, at, place) <= within_deg))
    return FALSE;
  const TfVertex *ring = ring_of (self, *place, &n);
  g_autofree TfVertex *more = g_new (TfVertex, (gsize)n + 1);
  guint here = place->corner + 1;
  for (guint k = 0; k <= n; k++)
    more[k] = k < here ? ring[k] : k == here ? at : ring[k - 1];
  place->corner = here;
  change_ring (self, *place, more, n + 1, FALSE);
  return TRUE;
}

gboolean
tf_session_remove_corner (TfSession *self, TfCornerPlace place)
{
  guint n;
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  const TfVertex *ring = ring_of (self, place, &n);
  if (self->frame == NULL || place.corner >= n || (n <= 3 && !place.left_out))
    return FALSE;
  g_autofree TfVertex *fewer = g_new (TfVertex, n);
  for (guint k = 0; k + 1 < n; k++)
    fewer[k] = ring[k < place.corner ? k : k + 1];
  change_ring (self, place, fewer, n > 3 ? n - 1 : 0, FALSE);
  return TRUE;
}
