/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Passages in a ledger: what follow has found, and what people say of it.
 *
 * A passage is the marks and hints of one region through one disk passage from one vantage. It is
 * derived, like the wings' points: made from live marks, open hints and people's links and cuts, and
 * made again whenever those change. Its content id (follow's method, vantage, first sighting) is the
 * same in every ledger. A mark that is kept from a hint, or takes the place of another, stands in
 * that one's passage at once; one that is drawn new belongs to none until follow has run.
 *
 * Links and cuts are deeds between two sightings (marks or hints), whatever passages those lie in.
 */

#include "tf-follow.h"
#include "tf-ledger.h"

G_BEGIN_DECLS

/** TfSight: a mark or a hint by its local key. */
typedef struct
{
  gint64 mark;
  gboolean is_hint;
} TfSight;

typedef struct
{
  gint64 id;        /* local key */
  char *content_id; /* hex, the same in every ledger */
  char *vantage;    /* "earth", or the mean Stonyhurst longitude: "E022"; "unknown" for maps */
  TfTime first_time, last_time; /* of the frames */
  TfSight first, last;
  guint n_frames, n_marks, n_hints; /* n_marks, n_hints: live marks, open hints */
  TfEnd born, ended;
  gint64 split_from, merged_into; /* passages; 0 */
  gint64
      same; /* passages that are one region share it: two vantages, or because a person said so */
  gint64
      region; /* that its marks belong to, else those of passages that are one region with it; 0: hints only */
  char *number; /* of that region; "" */
  guint
      n_regions; /* regions among its marks: more than one were numbered apart before they were linked */
} TfPassageRow;
void tf_passage_row_free (TfPassageRow *row);

/** tf_ledger_passages: (element-type TfPassageRow) in order of time. */
GPtrArray *tf_ledger_passages (TfLedger *ledger, GError **error);
TfPassageRow *tf_ledger_passage (TfLedger *ledger, gint64 passage, GError **error);
/** tf_ledger_passage_of: the passage a mark or hint lies in; 0 when follow has not seen it yet. */
gint64 tf_ledger_passage_of (TfLedger *ledger, TfSight sight);
/** tf_ledger_passage_rows: (element-type TfRow) its live marks and open hints in time order. With
 * @same: those of all passages that are one region with it. */
GPtrArray *tf_ledger_passage_rows (TfLedger *ledger, gint64 passage, gboolean same,
                                   gboolean outlines, GError **error);

/** TfPassageLink: why two sightings of a passage are together, or a passage begins or ends at another. */
typedef struct
{
  TfSight a, b;
  TfLinkKind kind;
  double overlap;        /* NaN by hand */
  char *reason, *person; /* by hand; else NULL */
} TfPassageLink;
/** tf_ledger_passage_links: (element-type TfPassageLink, which its array frees) with an end in the passage. */
GArray *tf_ledger_passage_links (TfLedger *ledger, gint64 passage, GError **error);

/** TfReturnOffer: a passage that may be the return of another; a link by hand takes it, a cut declines it. */
typedef struct
{
  gint64 earlier, later;   /* passages */
  TfSight last, first;     /* what to link: last sighting of the earlier, first of the later */
  double lon_deg, lat_deg; /* later place less carried place */
} TfReturnOffer;
/** tf_ledger_returns: (element-type TfReturnOffer) of that passage; 0: all. */
GArray *tf_ledger_returns (TfLedger *ledger, gint64 passage, GError **error);

/* -- what people say ------------------------------------------------------------------------- */
/** tf_ledger_link: these two are one region. tf_ledger_cut: they are not. The last word on a pair stands; undone as other deeds are. Passages are as
 * said when tf_ledger_follow() has run again. @reason: "" allowed. */
gboolean tf_ledger_link (TfLedger *ledger, TfSight a, TfSight b, gint64 person, const char *reason,
                         GError **error);
gboolean tf_ledger_cut (TfLedger *ledger, TfSight a, TfSight b, gint64 person, const char *reason,
                        GError **error);

/* -- following ------------------------------------------------------------------------------- */
typedef struct
{
  guint sightings, fresh;                 /* in all; not seen by follow before */
  guint passages, hint_passages, regions; /* hint passages: without a mark */
  guint splits, mergers, returns;
  guint ties, ties_lost; /* links and cuts by hand; those that name what is not there any more */
  gboolean changed;
} TfFollowSum;
/**
 * tf_ledger_follow: passages made anew from what the ledger holds now. Only what lies near new, changed or gone sightings is compared; the
 * result is that of doing everything again. @sum: (out) (nullable)
 * Returns: FALSE with an error, or with TF_LEDGER_ERROR_STATE when cancelled: passages are then as they were.
 */
gboolean tf_ledger_follow (TfLedger *ledger, const TfFollowParams *params, const TfWork *work,
                           TfFollowSum *sum, GError **error);
/** tf_ledger_follow_params: those of the last run, else the defaults. */
void tf_ledger_follow_params (TfLedger *ledger, TfFollowParams *params);
/** tf_ledger_follow_is_due: whether marks, hints, links or cuts have changed since. */
gboolean tf_ledger_follow_is_due (TfLedger *ledger);

/* -- recognising ----------------------------------------------------------------------------- */
/** tf_ledger_region_of_passage: local key of the region of the passage's first mark, else of those one with it; 0. Give it to
 * TfMarkDeed.region when a mark is kept whose passage already has a region. */
gint64 tf_ledger_region_of_passage (TfLedger *ledger, gint64 passage);

/**
 * tf_ledger_region_to_join: marks of one passage are one region. The region of a mark that @person keeps on @frame from @hint, or (@hint 0) with
 * @outline: that of the passage the hint lies in, else of the one the outline is recognised as.
 * @number: (out) (nullable): its number; NULL without one
 * Returns: its local key; 0: a new region, since there is no passage, or it has no region or more than one, or @person has marked that region on this
 * frame already.
 */
gint64 tf_ledger_region_to_join (TfLedger *ledger, gint64 frame, gint64 person, gint64 hint, const TfOutline *outline, char **number);

/** TfKnown: a region that should be on a frame. */
typedef struct
{
  gint64 passage;
  TfSight before;   /* its newest sighting before the frame */
  TfSight here;     /* its sighting on the frame; mark 0: none */
  TfOutline *ghost; /* the outline of @before, carried to the frame */
  double overlap;   /* of ghost and @here, or of ghost and the outline asked about; NaN */
} TfKnown;
void tf_known_free (TfKnown *known);
/** tf_ledger_known: (element-type TfKnown) passages with a sighting in the gap before the frame, from its vantage, whose carried place is in sight. */
GPtrArray *tf_ledger_known (TfLedger *ledger, gint64 frame, GError **error);
/** tf_ledger_recognise: the passage that an outline on a frame belongs to by its overlap with what is known (on that frame, before it or after it within
 * the gap); 0. For outlines that follow has not seen. */
gint64 tf_ledger_recognise (TfLedger *ledger, gint64 frame, const TfOutline *outline);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPassageRow, tf_passage_row_free)

G_END_DECLS
