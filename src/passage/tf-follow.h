/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Which outlines on different frames are one region.
 *
 * A sighting is one outline, of a hint or of a mark, on one frame. Outlines are carried point by
 * point by a rotation law to the time of another sighting, and two sightings are linked when each is
 * the other's best overlap, across gaps of up to three days. Pure functions of arrays: what comes
 * out does not depend on the order of what goes in, and whether two sightings are linked depends
 * only on what lies between them in time, so that a part can be done again alone.
 *
 * Nothing is forced: where one outline becomes two, or two one, the larger overlap goes on and the
 * other passage begins or ends there, and says so. Times are times at the Sun (the light's travel
 * taken off); longitudes Carrington, west positive; angles deg.
 */

#include <glib.h>

#include "tf-option.h"
#include "tf-outline.h"

G_BEGIN_DECLS

#define TF_FOLLOW_METHOD "overlap/1"

typedef struct
{
  int law;               /* rotation law (tf-rotation.h) */
  double gap_days;       /* 3: longest gap across which two sightings are linked */
  double share;          /* 0.3: least overlap, as a share of the smaller outline */
  double same_share;     /* 0.5: two people's outlines on one frame are one region from this on */
  double vantage_deg;    /* 15: observers within this longitude of each other see one passage */
  double across_hours;   /* 24: most time between sightings of two vantages that are compared */
  double seen_mu;        /* 0.5: a place nearer the limb than this cannot be said to be empty */
  double return_lon_deg; /* 8: how far from its carried place a region may come back, ... */
  double return_lat_deg; /* 4 */
} TfFollowParams;
extern const TfOption tf_follow_options[];
void tf_follow_params_init (TfFollowParams *params);

typedef struct
{
  const char *id;           /* borrowed; the same in every ledger: settles ties */
  TfTime time;              /* at the Sun */
  guint32 frame;            /* sightings of one frame share it; any numbers */
  const char *frame_id;     /* borrowed; the same in every ledger: orders frames of one instant */
  const TfOutline *outline; /* borrowed; NULL where only passages are worked out from links */
  double lon_deg, lat_deg;  /* its middle, at its time */
  double observer_lon_deg;  /* Stonyhurst, of the observer; NaN: no vantage (maps) */
  double cmd_deg;           /* of its middle; NaN on maps */
  guint32 author;           /* 0: a rule; else who drew it */
  guint32 region;           /* what a person says it belongs to; 0: nobody has said */
} TfSighting;

/** TfLookout: a frame, whether or not anything was seen on it. */
typedef struct
{
  TfTime time;                                         /* at the Sun */
  double observer_lon_deg, carrington_lon_deg, b0_deg; /* of the observer; NaN on maps */
  gboolean whole;                                      /* the whole disk is on it */
} TfLookout;

/** TfTie: what a person says of two sightings. */
typedef struct
{
  guint a, b;   /* indices */
  gboolean cut; /* not one region; else: one region */
} TfTie;

typedef enum
{
  TF_LINK_SAME,   /* two people's outlines of one region on one frame */
  TF_LINK_NEXT,   /* each is the other's best overlap */
  TF_LINK_ACROSS, /* likewise, seen from two vantages */
  TF_LINK_FROM,   /* @b has no link of its own back; most of what it overlaps there is @a */
  TF_LINK_INTO,   /* @a has no link of its own on; most of what it overlaps there is @b */
  TF_LINK_HAND,   /* a person says so */
} TfLinkKind;

/** TfLink: a is on the earlier frame (in the order of time, then frame id). */
typedef struct
{
  guint a, b; /* indices of sightings */
  TfLinkKind kind;
  double overlap; /* share of the smaller outline, 0 to 1; NaN by hand */
} TfLink;

/**
 * tf_follow_links: (element-type TfLink): all links among @n sightings, sorted; of the ties only the
 * cuts matter here. A link from time t to time u depends on no sighting before t or after u.
 */
GArray *tf_follow_links (const TfSighting *sightings, guint n, const TfTie *ties, guint n_ties,
                         const TfFollowParams *params);

/** tf_follow_overlap: share of the smaller of two outlines that both cover, @a carried to @b's
 * time over @seconds. */
double tf_follow_overlap (const TfOutline *a, const TfOutline *b, double seconds,
                          const TfFollowParams *params);

typedef enum
{
  TF_END_UNKNOWN,  /* no frame was taken near that time */
  TF_END_ON_DISK,  /* the place was in sight and nothing was there */
  TF_END_LIMB,     /* it came over the limb, or went */
  TF_END_FAR_SIDE, /* over the limb, and its place was empty half a rotation before or after */
} TfEnd;
const char *tf_end_name (TfEnd end); /* "unknown" "on disk" "over the limb" "far side" */

typedef struct
{
  guint first, last; /* indices of its first and last sighting */
  guint n;           /* sightings */
  TfEnd born, ended;
  int split_from, merged_into; /* passages; -1 */
  guint region;                /* passages that are one region have one number, the least of them */
  double observer_lon_deg;     /* mean */
} TfPassage;

/** TfReturn: a region that may have come round: offered, never taken. */
typedef struct
{
  guint earlier, later;    /* passages */
  double lon_deg, lat_deg; /* later place less carried place */
} TfReturn;

typedef struct
{
  guint *passage;   /* of each sighting */
  GArray *passages; /* TfPassage, in order of time, then id, of the first sighting */
  GArray *returns;  /* TfReturn */
} TfPassages;

/**
 * tf_follow_passages: passages from links and ties. Marks of one region seen from one vantage before
 * it can have gone round the limb are one passage, unless a cut lies between them. A hand-made link
 * likewise makes one passage of its two; one between rotations or vantages makes passages one region.
 */
TfPassages *
tf_follow_passages (const TfSighting *sightings, guint n, const TfLink *links, guint n_links,
                    const TfTie *ties, guint n_ties, const TfLookout *lookouts, guint n_lookouts,
                    const TfFollowParams *params);
void tf_passages_free (TfPassages *passages);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPassages, tf_passages_free)

G_END_DECLS
