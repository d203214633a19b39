/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-follow.h"

G_BEGIN_DECLS

/* A shape is an outline made ready for many comparisons: points spread evenly inside it. */
typedef struct
{
  const TfOutline *outline;
  double lon_deg, lat_deg, radius_deg; /* a circle that holds it */
  double area_deg2;
  GArray *points; /* TfVertex */
} TfShape;
void tf_shape_init (TfShape *shape, const TfOutline *outline);
void tf_shape_clear (TfShape *shape);
/* What both cover, deg2, with @a carried over @seconds. */
double tf_shape_common (const TfShape *a, const TfShape *b, double seconds, guint law);

/* In order of time, then frame, then id: the order in which everything is done. */
int tf_sighting_compare (const TfSighting *a, const TfSighting *b);
/* Whether two observers see one passage. */
gboolean tf_sighting_one_vantage (double lon_a_deg, double lon_b_deg, double within_deg);

/* Whether two sightings can belong to one disk passage: one vantage, and the limb not crossed. */
gboolean
tf_sighting_one_passage (const TfSighting *a, const TfSighting *b, const TfFollowParams *params);

/* -- tf-follow-ends.c: how each passage was born and ended; lookouts in any order. First without,
 * then with what is known of returns. */
void tf_follow_ends (TfPassages *passages, const TfSighting *sightings, const TfLookout *lookouts,
                     guint n_lookouts, const TfFollowParams *params);
/* -- tf-follow-returns.c: which passages may be the return of which. */
void tf_follow_returns (TfPassages *passages, const TfSighting *sightings, const TfTie *ties,
                        guint n_ties, const TfFollowParams *params);

G_END_DECLS
