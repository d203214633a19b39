/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Invented regions that turn with the Sun, and the outlines that a rule would draw of them: what is
 * linked is known. The Sun turns by another law than the one that follows it, and every region has a
 * motion of its own. */

#include "tf-follow.h"

typedef struct
{
  guint n_regions; /* in pairs whose middles are @neighbour_deg apart */
  double days, cadence_hours;
  double neighbour_deg;
  double missed;       /* share of outlines that the rule missed */
  double missing_days; /* share of days without frames */
  double jitter_deg;   /* of an outline's middle; its radius differs by a tenth */
  guint law;           /* by which the Sun turns */
  guint32 seed;
} MadeParams;

typedef struct
{
  GArray *sightings; /* TfSighting */
  GArray *truth;     /* guint: the region of each */
  GArray *lookouts;  /* TfLookout */
  GPtrArray *texts, *outlines;
} MadeSky;

void made_params_init (MadeParams *params);
MadeSky *made_sky_new (const MadeParams *params);
void made_sky_free (MadeSky *sky);
/* One more sighting: a circle. */
void made_sky_add (MadeSky *sky, guint truth, TfTime time, const char *frame_id, double lon_deg,
                   double lat_deg, double radius_deg, double observer_lon_deg, double cmd_deg);
MadeSky *made_sky_empty (void);

typedef struct
{
  guint pairs,
      right;   /* of neighbours in time, within the gap, of one region; those that are linked */
  guint wrong; /* links of two regions */
  guint mixed; /* passages with two regions */
} MadeScore;
MadeScore
made_sky_score (const MadeSky *sky, const GArray *links, const TfPassages *found, double gap_s);
GArray *made_sky_links (const MadeSky *sky, const TfFollowParams *params);
TfPassages *made_sky_follow (const MadeSky *sky, const GArray *links, const TfFollowParams *params);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (MadeSky, made_sky_free)
