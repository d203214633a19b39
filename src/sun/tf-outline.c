/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-outline-private.h"

#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"

G_DEFINE_QUARK (tf - outline - error - quark, tf_outline_error)

/* -- making ---------------------------------------------------------------------------------- */

static void
ring_free (gpointer data)
{
  TfRing *ring = data;
  g_free (ring->vertices);
  g_free (ring->u);
  g_free (ring->v);
  g_free (ring->slab_start);
  g_free (ring->slab_edges);
  g_free (ring);
}

static void
clear (gpointer data)
{
  TfOutline *outline = data;
  g_ptr_array_unref (outline->rings);
  g_ptr_array_unref (outline->left_out);
  for (guint k = 0; k < outline->n_pins; k++)
    {
      g_free ((char *)outline->pins[k].reason);
      g_free ((char *)outline->pins[k].person);
    }
}

TfOutline *
tf_outline_ref (TfOutline *outline)
{
  return g_atomic_rc_box_acquire (outline);
}

void
tf_outline_unref (TfOutline *outline)
{
  g_atomic_rc_box_release_full (outline, clear);
}

TfOutline *
tf_outline_start (TfTime time)
{
  TfOutline *outline = g_atomic_rc_box_new0 (TfOutline);
  outline->time = time;
  outline->rings = g_ptr_array_new_with_free_func (ring_free);
  outline->left_out = g_ptr_array_new_with_free_func (ring_free);
  return outline;
}

static gboolean
check_vertices (const TfVertex *vertices, guint n, const char *name, GError **error)
{
  if (n < 3)
    {
      g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                   _ ("The outline's %s has too few vertices (%u); give at least 3."), name, n);
      return FALSE;
    }
  for (guint k = 0; k < n; k++)
    if (!isfinite (vertices[k].lon_deg) || !(fabs (vertices[k].lat_deg) <= 90.0)
        || !(fabs (vertices[k].lon_deg) < 1e6))
      {
        g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                     _ ("Vertex %u of the outline's %s is no place on the Sun; give a finite "
                        "longitude and a latitude "
                        "from -90 to 90 degrees."),
                     k + 1, name);
        return FALSE;
      }
  return TRUE;
}

gboolean
tf_outline_fill (TfOutline *outline, const TfVertex *vertices, guint n, gboolean left_out,
                 const char *name, GError **error)
{
  if (!check_vertices (vertices, n, name, error))
    return FALSE;
  if (n > TF_OUTLINE_MOST_VERTICES - outline->n_vertices)
    {
      g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                   _ ("The outline has more than %d vertices; draw it more simply."),
                   TF_OUTLINE_MOST_VERTICES);
      return FALSE;
    }
  outline->n_vertices += n;
  TfRing *ring = g_new0 (TfRing, 1);
  ring->n = n;
  ring->u = g_new (double, n);
  ring->v = g_new (double, n);
  ring->vertices = g_memdup2 (vertices, n * sizeof *vertices);
  ring->vertices[0].lon_deg = tf_wrap_360 (vertices[0].lon_deg);
  for (guint k = 1; k < n; k++)
    {
      double before = ring->vertices[k - 1].lon_deg, lon = vertices[k].lon_deg;
      ring->vertices[k].lon_deg = lon + 360.0 * round ((before - lon) / 360.0);
    }
  g_ptr_array_add (left_out ? outline->left_out : outline->rings, ring);
  return TRUE;
}

/* A pole of the same polarity gives way. */
void
tf_outline_fill_pin (TfOutline *outline, const TfPinnedPole *pin)
{
  guint k = 0;
  while (k < outline->n_pins && outline->pins[k].polarity != pin->polarity)
    k++;
  if (k == G_N_ELEMENTS (outline->pins))
    return;
  TfPinnedPole old = outline->pins[k];
  outline->pins[k] = *pin;
  outline->pins[k].lon_deg = tf_wrap_360 (pin->lon_deg);
  outline->pins[k].reason = g_strdup (pin->reason);
  outline->pins[k].person = g_strdup (pin->person);
  outline->n_pins = MAX (outline->n_pins, k + 1);
  g_free ((char *)old.reason);
  g_free ((char *)old.person);
}

void
tf_outline_fill_pins_of (TfOutline *outline, const TfOutline *from)
{
  for (guint k = 0; k < from->n_pins; k++)
    tf_outline_fill_pin (outline, &from->pins[k]);
}

TfOutline *
tf_outline_finish (TfOutline *outline, GError **error)
{
  g_autoptr (TfOutline) made = outline;
  if (made->rings->len == 0)
    g_set_error (error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
                 _ ("The outline has no ring; give at least one."));
  else if (!tf_outline_project (made))
    g_set_error (
        error, TF_OUTLINE_ERROR, TF_OUTLINE_ERROR_SHAPE,
        _ ("The outline reaches further than 89 degrees from its centre; draw a smaller one."));
  else
    return g_steal_pointer (&made);
  return NULL;
}

TfOutline *
tf_outline_new (TfTime time, const TfVertex *ring, guint n, GError **error)
{
  g_autoptr (TfOutline) outline = tf_outline_start (time);
  if (!tf_outline_fill (outline, ring, n, FALSE, _ ("ring"), error))
    return NULL;
  return tf_outline_finish (g_steal_pointer (&outline), error);
}

TfOutline *
tf_outline_new_cap (TfTime time, double carrington_lon_deg, double lat_deg, double radius_deg,
                    guint n_vertices)
{
  guint n = n_vertices == 0 ? 72 : MAX (n_vertices, 3);
  double centre[3], r = tan (radius_deg * TF_DEG);
  if (!isfinite (carrington_lon_deg) || !(fabs (lat_deg) <= 90.0)
      || !(radius_deg > 0.0 && radius_deg < 89.0))
    return NULL;
  tf_sphere_unit (carrington_lon_deg, lat_deg, centre);
  TfTangent tangent = tf_tangent_at (centre);
  g_autofree TfVertex *ring = g_new (TfVertex, n);
  for (guint k = 0; k < n; k++)
    {
      double angle = 2.0 * TF_PI * k / n, unit[3];
      tf_tangent_lift (&tangent, r * cos (angle), r * sin (angle), unit);
      ring[k] = tf_vertex_of (unit);
    }
  return tf_outline_new (time, ring, n, NULL);
}

/* -- copies with something changed ----------------------------------------------------------- */

static void
fill_rings_of (TfOutline *outline, const TfOutline *from)
{
  for (int left_out = 0; left_out < 2; left_out++)
    {
      GPtrArray *rings = left_out ? from->left_out : from->rings;
      for (guint k = 0; k < rings->len; k++)
        {
          const TfRing *ring = g_ptr_array_index (rings, k);
          tf_outline_fill (outline, ring->vertices, ring->n, left_out, "", NULL);
        }
    }
}

TfOutline *
tf_outline_with_ring (const TfOutline *outline, const TfVertex *ring, guint n, gboolean left_out,
                      GError **error)
{
  g_autoptr (TfOutline) copy = tf_outline_start (outline->time);
  fill_rings_of (copy, outline);
  tf_outline_fill_pins_of (copy, outline);
  if (!tf_outline_fill (copy, ring, n, left_out, left_out ? _ ("left-out area") : _ ("ring"),
                        error))
    return NULL;
  return tf_outline_finish (g_steal_pointer (&copy), error);
}

TfOutline *
tf_outline_with_ring_changed (const TfOutline *outline, guint k, gboolean left_out,
                              const TfVertex *ring, guint n, GError **error)
{
  g_autoptr (TfOutline) copy = tf_outline_start (outline->time);
  for (int out = 0; out < 2; out++)
    {
      GPtrArray *rings = out ? outline->left_out : outline->rings;
      for (guint j = 0; j < rings->len; j++)
        {
          const TfRing *old = rings->pdata[j];
          gboolean this_one = j == k && (out != 0) == (left_out != 0);
          if (this_one && n == 0)
            continue;
          if (!tf_outline_fill (copy, this_one ? ring : old->vertices, this_one ? n : old->n, out,
                                out ? _ ("left-out area") : _ ("ring"), error))
            return NULL;
        }
    }
  tf_outline_fill_pins_of (copy, outline);
  return tf_outline_finish (g_steal_pointer (&copy), error);
}

TfOutline *
tf_outline_with_pin (const TfOutline *outline, const TfPinnedPole *pin)
{
  TfOutline *copy = tf_outline_start (outline->time);
  fill_rings_of (copy, outline);
  if (pin != NULL)
    {
      tf_outline_fill_pins_of (copy, outline);
      tf_outline_fill_pin (copy, pin);
    }
  return tf_outline_finish (copy, NULL);
}

/* -- reading --------------------------------------------------------------------------------- */

TfTime
tf_outline_get_time (const TfOutline *outline)
{
  return outline->time;
}

guint
tf_outline_get_n_rings (const TfOutline *outline)
{
  return outline->rings->len;
}

guint
tf_outline_get_n_left_out (const TfOutline *outline)
{
  return outline->left_out->len;
}

const TfVertex *
tf_outline_get_ring (const TfOutline *outline, guint k, gboolean left_out, guint *n)
{
  GPtrArray *rings = left_out ? outline->left_out : outline->rings;
  g_return_val_if_fail (k < rings->len, NULL);
  const TfRing *ring = g_ptr_array_index (rings, k);
  *n = ring->n;
  return ring->vertices;
}

guint
tf_outline_get_n_pins (const TfOutline *outline)
{
  return outline->n_pins;
}

const TfPinnedPole *
tf_outline_get_pin (const TfOutline *outline, guint k)
{
  g_return_val_if_fail (k < outline->n_pins, NULL);
  return &outline->pins[k];
}

void
tf_outline_get_cap (const TfOutline *outline, double *lon_deg, double *lat_deg, double *radius_deg)
{
  *lon_deg = outline->cap_lon;
  *lat_deg = outline->cap_lat;
  *radius_deg = outline->cap_radius;
}

/* -- equality -------------------------------------------------------------------------------- */

static gboolean
same_number (double a, double b)
{
  return fabs (a - b) <= 0.0;
}

static gboolean
same_rings (GPtrArray *a, GPtrArray *b)
{
  if (a->len != b->len)
    return FALSE;
  for (guint k = 0; k < a->len; k++)
    {
      const TfRing *p = g_ptr_array_index (a, k), *q = g_ptr_array_index (b, k);
      if (p->n != q->n)
        return FALSE;
      for (guint j = 0; j < p->n; j++)
        if (!same_number (p->vertices[j].lon_deg, q->vertices[j].lon_deg)
            || !same_number (p->vertices[j].lat_deg, q->vertices[j].lat_deg))
          return FALSE;
    }
  return TRUE;
}

static gboolean
same_pins (const TfOutline *a, const TfOutline *b)
{
  if (a->n_pins != b->n_pins)
    return FALSE;
  for (guint k = 0; k < a->n_pins; k++)
    {
      const TfPinnedPole *p = &a->pins[k], *q = &b->pins[k];
      if (p->polarity != q->polarity || !same_number (p->lon_deg, q->lon_deg)
          || !same_number (p->lat_deg, q->lat_deg) || g_strcmp0 (p->reason, q->reason) != 0
          || g_strcmp0 (p->person, q->person) != 0)
        return FALSE;
    }
  return TRUE;
}

/* Times are kept to a microsecond in text, and no closer here. */
gboolean
tf_outline_equal (const TfOutline *a, const TfOutline *b)
{
  gboolean unknown = !tf_time_is_known (a->time) && !tf_time_is_known (b->time);
  if (!unknown && !(fabs (a->time.s - b->time.s) < 2e-6))
    return FALSE;
  return same_rings (a->rings, b->rings) && same_rings (a->left_out, b->left_out)
         && same_pins (a, b);
}
