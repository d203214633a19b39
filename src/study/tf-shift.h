/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfShift: the disk as a forecaster needs it at one frame: every region known by then or new on it,
 * in order, with what changed since the day before, what was noted, and what comes back over the
 * east limb.
 *
 * Order: by the last person's class (the more tangled first), then by the newest R of Schrijver
 * measured at mu >= 0.7, then what is new or was never measured, then what was measured and has
 * R = 0, then what is due back. What nobody measured is a group of its own: it is not taken for
 * quiet. Within a group by R, then by flux.
 *
 * The frame's vantage alone is looked at. Nothing here is a forecast, and "complexity-describes"
 * and "decisions-elsewhere" are among the cautions wherever a shift is shown. NaN: no value.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-follow.h"
#include "tf-ledger.h"

G_BEGIN_DECLS

typedef enum
{
  TF_SHIFT_CLASSED,
  TF_SHIFT_TANGLED,    /* R above 0 */
  TF_SHIFT_UNMEASURED, /* new, or neither class nor R */
  TF_SHIFT_QUIET,      /* R is 0 */
  TF_SHIFT_DUE,        /* behind the east limb */
  TF_SHIFT_N_GROUPS
} TfShiftGroup;

typedef enum
{
  TF_SEEN_MARK, /* a person's outline is on the frame */
  TF_SEEN_HINT, /* a hint of the frame */
  TF_SEEN_NOT,  /* it should be in sight, and nothing is there */
  TF_SEEN_DUE,  /* behind the east limb */
} TfSeen;

/** TfShiftValue: a number now and a day before. */
typedef struct
{
  double now, before;
  TfTime now_time, before_time;
} TfShiftValue;

/** TfOthers: what somebody else's list says of a region; it stands beside our own values. */
typedef struct
{
  char *number, *mw_class, *source; /* "" where not told */
  double area_msh;                  /* of its spots, in white light */
  TfTime time;                      /* for which it holds */
  double apart_deg;                 /* proposed: from our region's carried place */
  guint sharing;                    /* proposed: how many of their regions are nearest to this one of ours; 1 as a rule */
} TfOthers;

typedef struct
{
  TfShiftGroup group;
  TfSeen seen;
  gint64 region;  /* local key; 0: nobody has marked it */
  char *number;   /* "T2013-0412"; "" */
  char *label, *external;
  gint64 mark;    /* the mark or hint on the frame; 0 where there is none */
  gboolean is_hint;
  gboolean is_new;  /* no outline of the days before explains it */
  TfTime first;     /* first seen, within the days looked at */
  double lat_deg, carrington_lon_deg, cmd_deg, mu; /* on the frame; carried where nothing stands there */
  TfTime crosses;   /* DUE: when its middle crosses the east limb */
  char *class_now, *class_before, *class_person;  /* "" where none */
  TfTime class_time;
  TfShiftValue r_mx;      /* at mu >= 0.7 */
  gboolean delta_candidate; /* of the measurement that R is from */
  TfShiftValue flux_mx, area_msh;
  double flux_sigma_mx;
  gboolean floors_differ; /* flux and area of the two days cannot be compared: before is NaN */
  GPtrArray *notes;       /* (element-type TfRegionNote), newest first */
  TfOthers *others;       /* of the number a person gave it; NULL */
  GPtrArray *proposed;    /* (element-type TfOthers): listed within 5 deg of it; nobody has said that they are it */
} TfShiftRow;

typedef struct
{
  gint64 frame;   /* local key */
  char *frame_path;
  TfTime time;    /* of the frame */
  gboolean compared;  /* there was a frame in the days before to compare with */
  TfTime since;   /* the last hand-over, by the clock; unknown */
  char *since_person;
  GPtrArray *rows; /* (element-type TfShiftRow), in order */
  guint count[TF_SHIFT_N_GROUPS], n_new;
  GPtrArray *loose; /* (element-type TfRegionNote): open notes on regions not listed: they carry over, too */
  GPtrArray *unmatched; /* (element-type TfOthers): listed by others, and nothing of ours is near */
  TfNotes *cautions;
} TfShift;

/** tf_shift_read: @frame: local key; 0: the newest that can be used. NULL with
 * TF_LEDGER_ERROR_STATE when there is none. Reads only. */
TfShift *tf_shift_read (TfLedger *ledger, gint64 frame, GError **error);
void tf_shift_free (TfShift *shift);

/* -- the order (tf-shift-order.c): pure ------------------------------------------------------- */
/** tf_shift_class_rank: 0 for βγδ, then γδ, βδ, γ, βγ, β, α; 7 for none or an unknown one. */
guint tf_shift_class_rank (const char *mw_class);
/** tf_shift_group: of a row whose other members are set. */
TfShiftGroup tf_shift_group (const TfShiftRow *row);
/** tf_shift_compare: GCompareFunc of TfShiftRow *, by the order above. */
int tf_shift_compare (gconstpointer a, gconstpointer b);
/** tf_shift_share: change of a value as a share of what it was; NaN where one is missing or was 0. */
double tf_shift_share (const TfShiftValue *value);
/** tf_shift_dup_age: "2.1 d ago", "in 5 h", "now": in the current language. @seconds: how long ago. */
char *tf_shift_dup_age (double seconds);
const char *tf_shift_group_name (TfShiftGroup group);  /* English, for JSON: "class" "r" "not measured" "quiet" "due back" */
const char *tf_shift_group_title (TfShiftGroup group); /* in the current language */
/** TfNoteState: how a note stands to the hand-over. */
typedef enum
{
  TF_NOTE_STATE_NEW,     /* written since */
  TF_NOTE_STATE_CARRIED, /* older and not settled: it carries over */
  TF_NOTE_STATE_SETTLED,
} TfNoteState;
TfNoteState tf_shift_note_state (const TfRegionNote *note, TfTime since);

/* -- what others list (tf-shift-others.c): pure ------------------------------------------------- */
/** tf_shift_match: each of @listings (element-type TfListing) to the row it has the number of, else as a proposal to the nearest row
 * within 5 deg, carried from @now to the moment it holds for, else to @unmatched. */
void tf_shift_match (GPtrArray *rows, TfTime now, const GPtrArray *listings, guint law, GPtrArray *unmatched);

/* -- the east limb (tf-shift-due.c) ------------------------------------------------------------ */
/** tf_shift_limb_cmd: CMD (0 to 180 deg) at which a latitude crosses the limb of an observer at @b0_deg; 90 where it never does. */
double tf_shift_limb_cmd (double lat_deg, double b0_deg);
/** tf_shift_crossing: when a place last seen at @seen crosses the east limb next after @from, carried by rotation law @law, for
 * an observer of fixed Stonyhurst longitude; to a minute. */
TfTime tf_shift_crossing (double carrington_lon_deg, double lat_deg, TfTime seen, TfTime from, double stonyhurst_lon_deg, guint law);

/** tf_shift_build_json: the shift sheet as one object. @who: (nullable): the desk. */
void tf_shift_build_json (const TfShift *shift, const char *who, JsonBuilder *builder);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfShift, tf_shift_free)

G_END_DECLS
