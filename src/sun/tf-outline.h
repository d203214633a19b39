/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfOutline: the closed curve(s) on the Sun around one region.
 *
 * Kept in Carrington coordinates with their time. A ring is not repeated at its end; its vertices
 * are joined by great circles; inside is by even-odd over all rings, so a hole is a ring;
 * longitudes run on over 0/360 within a ring. Left-out rings take away. All rings lie within 89 deg
 * of their common centre. Reference counted, immutable once made, so that threads may share it;
 * every edit makes a new one.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-geometry.h"

G_BEGIN_DECLS

#define TF_OUTLINE_ERROR (tf_outline_error_quark ())
GQuark tf_outline_error_quark (void);
typedef enum
{
  TF_OUTLINE_ERROR_FORM,  /* not an outline: what is missing or of the wrong form */
  TF_OUTLINE_ERROR_SHAPE, /* fewer than 3 vertices, latitude out of range, too large or too many */
} TfOutlineError;

enum
{
  TF_OUTLINE_MOST_VERTICES = 20000 /* of all rings together; more is refused */
};

typedef struct _TfOutline TfOutline;

typedef struct
{
  double lon_deg, lat_deg; /* Carrington */
} TfVertex;

/** TfPinnedPole: a pole placed by hand. */
typedef struct
{
  int polarity; /* 1 or -1 */
  double lon_deg, lat_deg;
  const char *reason, *person; /* borrowed */
} TfPinnedPole;

/** tf_outline_new: one ring of @n >= 3 vertices (copied). */
TfOutline *tf_outline_new (TfTime time, const TfVertex *ring, guint n, GError **error);
/** tf_outline_new_cap: circle of @n_vertices (0: 72) about a point, radius deg, over 0 and below
 * 89; the vertices lie on the circle. NULL for numbers out of range. */
TfOutline *tf_outline_new_cap (TfTime time, double carrington_lon_deg, double lat_deg,
                               double radius_deg, guint n_vertices);
TfOutline *tf_outline_ref (TfOutline *outline);
void tf_outline_unref (TfOutline *outline);

/** tf_outline_with_ring: a copy with one more ring; @left_out: among the left-out areas. */
TfOutline *tf_outline_with_ring (const TfOutline *outline, const TfVertex *ring, guint n,
                                 gboolean left_out, GError **error);
/** tf_outline_with_pin: a copy with a pinned pole of that polarity (replacing one of the same);
 * NULL @pin takes pins away. */
TfOutline *tf_outline_with_pin (const TfOutline *outline, const TfPinnedPole *pin);

TfTime tf_outline_get_time (const TfOutline *outline);
guint tf_outline_get_n_rings (const TfOutline *outline);
guint tf_outline_get_n_left_out (const TfOutline *outline);
/** tf_outline_get_ring: borrowed vertices; rings first .. n_rings-1, then left-out rings by
 * @left_out. */
const TfVertex *
tf_outline_get_ring (const TfOutline *outline, guint k, gboolean left_out, guint *n);
guint tf_outline_get_n_pins (const TfOutline *outline);
const TfPinnedPole *tf_outline_get_pin (const TfOutline *outline, guint k);

/** tf_outline_contains: unit vector in the Carrington frame (tf_sphere_unit); left-out areas are
 * outside. */
gboolean tf_outline_contains (const TfOutline *outline, const double unit[3]);
/** tf_outline_contains_rings: as above but left-out areas count as inside. */
gboolean tf_outline_contains_rings (const TfOutline *outline, const double unit[3]);
/** tf_outline_get_cap: a circle that holds every vertex of the rings: centre (mean direction along
 * the edges) and radius, deg. */
void
tf_outline_get_cap (const TfOutline *outline, double *lon_deg, double *lat_deg, double *radius_deg);
/** tf_outline_area: area inside, Mm2, for a sphere of @radius_mm; left-out areas and holes are not
 * in it. Good to 1e-9 of itself up to 2,000 vertices, to about 1e-4 above. */
double tf_outline_area (const TfOutline *outline, double radius_mm);

/**
 * tf_outline_deform: used for the outline term of the uncertainty and for hand-like test outlines.
 * The outline is moved in the (equidistant) tangent plane at its centre: shifted by @west_deg and
 * @north_deg, scaled by @scale, and each vertex's distance from the centre changed by
 *   sum over k = 1..3 of amplitude[k-1] * cos (k * (angle - phase[k-1])) deg,
 * angle and phase in radians, from west towards north. Left-out rings go along, pins stay.
 * Returns: (nullable): NULL when it would reach too far.
 */
TfOutline *tf_outline_deform (const TfOutline *outline, double west_deg, double north_deg,
                              double scale, const double amplitude_deg[3], const double phase[3]);
/** tf_outline_simplify: Douglas-Peucker with @tolerance_deg, never below 3 vertices a ring. */
TfOutline *tf_outline_simplify (const TfOutline *outline, double tolerance_deg);
/** tf_outline_split: along the great-circle line from a to b, which must cross the first ring
 * exactly twice. @one lies to the left of the line as seen from outside the Sun with north up (west
 * is right); other rings, left-out areas and pins are shared out, and cut where the line crosses
 * them. */
gboolean tf_outline_split (const TfOutline *outline, TfVertex a, TfVertex b, TfOutline **one,
                           TfOutline **other, GError **error);
/** tf_outline_join: what lies in either of the two; apart from each other they become two rings. Left-out areas of both
 * stay left out; of two pins of one polarity the first outline's stays. */
TfOutline *tf_outline_join (const TfOutline *outline, const TfOutline *other, GError **error);
/** tf_outline_brush: with (@in) or without a stroke of a round brush of @radius_deg (above 0, below 45) that runs along the great circle
 * @from - @to, which may be one place. Vertices that the stroke does not touch are the very same after it. Brushed in, left-out areas
 * come back. An error when nothing would be left. */
TfOutline *tf_outline_brush (const TfOutline *outline, TfVertex from, TfVertex to, double radius_deg, gboolean in, GError **error);
/** tf_outline_simplify_new: as tf_outline_simplify, of the vertices that @before has not; its own stay as they are. */
TfOutline *tf_outline_simplify_new (const TfOutline *outline, const TfOutline *before, double tolerance_deg);
/** tf_outline_with_ring_changed: a copy with ring @k (or left-out ring) replaced; @n 0 takes it away. */
TfOutline *tf_outline_with_ring_changed (const TfOutline *outline, guint k, gboolean left_out, const TfVertex *ring, guint n, GError **error);
/** tf_outline_carry: moved to @time by a rotation law, vertex by vertex (tf-rotation.h), pins too.
 * NULL when a time is unknown or the rotation has drawn the outline out over more than a
 * hemisphere. */
TfOutline *tf_outline_carry (const TfOutline *outline, TfTime time, guint law);

/** tf_outline_build_json: {frame:"carrington", time, rings, left_out, pinned} as the builder's next
 * value. pinned is null, one object, or an array of two; time is null when unknown, and is kept to
 * a microsecond. */
void tf_outline_build_json (const TfOutline *outline, JsonBuilder *builder);
TfOutline *tf_outline_read_json (JsonNode *node, GError **error);
char *tf_outline_dup_text (const TfOutline *outline);
TfOutline *tf_outline_from_text (const char *json, GError **error);
gboolean tf_outline_equal (const TfOutline *a, const TfOutline *b);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfOutline, tf_outline_unref)

G_END_DECLS
