/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The members of TfSession, for the tf-session-*.c files alone. */

#include "tf-feed.h"
#include "tf-lane.h"
#include "tf-loader.h"
#include "tf-session.h"
#include "tf-tracer.h"
#include "tf-watch.h"
#include "tf-wings.h"
#include "tf-writer.h"

G_BEGIN_DECLS

typedef enum
{
  TF_SIGNAL_LEDGER,
  TF_SIGNAL_FRAMES,
  TF_SIGNAL_FRAME,
  TF_SIGNAL_VIEW,
  TF_SIGNAL_OVERLAYS,
  TF_SIGNAL_REGIONS,
  TF_SIGNAL_CHOICE,
  TF_SIGNAL_POINTS,
  TF_SIGNAL_STATUS,
  TF_SIGNAL_SHIFT,
  TF_SIGNAL_PERSON_NEEDED,
  TF_SIGNAL_LAWS,
} TfSessionSignal;

typedef struct _TfSessionLaws TfSessionLaws;

struct _TfSession
{
  GObject parent;
  TfJudge *judge;
  TfPool *pool;
  TfWorkers *workers;
  TfMeasureParams params;
  char *method; /* canonical text of params */

  char *path;
  gboolean open;
  char *trouble;   /* why it could not be opened */
  char *read_only; /* why nothing can be written */
  TfLane *reader;
  GCancellable *reading; /* raised when the ledger is let go */
  TfWriter *writer;
  gboolean refreshing, refresh_again, refresh_all;
  gboolean outdated; /* something was written since the reading under way began */
  gint64 version; /* of the file, as last read */
  guint watch;
  char *person;
  gboolean
      wrote; /* the writer knows best what can be undone: only its connection writes under this replica */
  gboolean can_undo, can_redo;
  char *saved;
  char *class_hoped; /* of class_region, on its way into the ledger; the next key builds on it */
  gint64 class_region;

  GListStore *frames;
  GtkCustomFilter *filter;
  GtkFilterListModel *shown;
  TfFrameItem *frame_item;
  TfFrame *frame;
  char *frame_problem;
  gboolean loading;
  TfLoader *loader;
  TfFeed *feed;
  char *progress; /* words of the feed */
  double progress_share;
  struct _TfSaving *saving; /* tf-save-as.c */
  char **to_add;      /* frames that wait until the ledger is open or others are in */
  TfRollFilter roll_filter;
  char *roll_instrument; /* NULL: all */
  TfWatch *arrivals;     /* of the folder that is watched */
  gboolean feed_quiet;   /* the feed in hand was not asked for: only news are said */
  gboolean look_again;   /* the chosen frame's file was found: open it when the roll is read */
  char *feed_trouble; /* files that could not be taken in, one sentence a line */

  TfCorrection correction; /* the person's, of the frame on the plate; none */
  TfCorrection preview;    /* being tried; none */
  gboolean reopening;      /* the frame in hand comes again under another correction */

  TfView view;
  gboolean fitted, north_up;
  gboolean pointer_in; /* over the plate */
  double pointer_x, pointer_y;
  double range;
  TfPalette palette;

  GHashTable *witnesses; /* TfFrame -> TfNote: what the orientation witness said */
  guint witness_timer;

  guint overlays; /* one bit a TfOverlayPart */
  TfTracer *tracer;
  GPtrArray *ghosts;  /* TfGhost; NULL */
  guint ghost_serial; /* of the newest question for them */

  GListStore *regions;
  TfRegionItem *region;
  gint64 want_mark; /* to be chosen when it comes; 0 */
  gboolean want_hint;
  gboolean want_next_hint;
  gboolean want_new; /* what undoing or redoing brings back is chosen */
  char *want_region; /* the same on another frame, where there is nothing to compare with: its number; NULL */
  GPtrArray *seen;   /* TfRegionItem: what was there when undoing was asked for; NULL */

  TfTool tool;
  GArray *line; /* TfVertex, Carrington */
  TfOutline *draft;
  TfRegionItem *replaced;
  gboolean replaces;
  guint64 draft_serial;
  gboolean at_rest;
  gboolean keeping;      /* the draft is on its way into the ledger */
  gint64 judging;        /* the hint or mark whose deed is on its way: not judged twice */
  gboolean draft_looked; /* the ledger was asked for a draft on this frame */
  char *draft_text;      /* came before the pixels */
  gboolean slow;         /* the line in hand takes too long for the main thread */
  gboolean live_busy;    /* a worker measures the line in hand */
  TfOutline *other;      /* the second half of a split */
  TfMeasure other_measure;
  gboolean other_measured, other_at_rest;
  GPtrArray *joined;     /* TfRegionItem: that a join takes the place of, besides replaced */
  GHashTable *histories; /* of drafts, by the frame's id */
  double brush_deg;
  gboolean brushing; /* a stroke is in hand */
  TfOutline *stroke_before;
  TfVertex stroke_last;
  GPtrArray *also;    /* TfRegionItem: chosen besides region */
  GPtrArray *carried; /* TfRegionItem: offered on carried_frame */
  gint64 carried_frame;
  TfMeasure measure;     /* of the line or the draft, when measured */
  gboolean measured;
  char *measure_problem;
  TfSampleRow sample;
  TfVerdict verdict;

  gboolean list_shown;
  TfShift *shift;    /* as last read; NULL */
  guint shift_asked; /* readings on their way */

  TfUnits units;

  TfProposal *proposal;      /* for proposal_base; NULL */
  TfOutline *proposal_base;  /* for which it was looked for; NULL */
  TfOutline *proposal_left;  /* for which it was put away; NULL */
  guint proposal_serial;

  TfLane *follower; /* passages are made anew there; NULL */
  TfCancel *follow_cancel;
  gboolean passages_due; /* marks were drawn since */
  GHashTable *joins;     /* hint -> number of the region it joins when kept; NULL */
  char *draft_joins[2];  /* likewise of the draft and the other half; NULL */
  guint join_serial;

  GArray *points;    /* TfPoint */
  GArray *all_dots;  /* TfWingsDot, one a point */
  GArray *mark_dots; /* TfWingsDot, of marks alone */
  gboolean show_hints;
  double pick_from, pick_to;  /* years; NaN: all */
  double pick_low, pick_high; /* latitudes; NaN: all */
  GHashTable *pick_frames;    /* keys of frames with a region in the band; NULL: all */
  TfSessionLaws *laws;
};

void tf_session_emit (TfSession *session, TfSessionSignal signal);
void tf_session_say (TfSession *session, const char *text);
/** tf_session_replace_frames: (transfer full) (element-type TfFrameRow): the whole roll */
void tf_session_replace_frames (TfSession *session, GPtrArray *rows);
void tf_session_clear_frames (TfSession *session);
TfFrameItem *tf_session_find_frame (TfSession *session, gint64 id);
/** tf_session_replace_regions: (element-type TfRow): takes the rows out of the array */
void tf_session_replace_regions (TfSession *session, GPtrArray *rows);
/** tf_session_replace_points: (transfer full) */
void
tf_session_replace_points (TfSession *session, GArray *points, GArray *dots, GArray *mark_dots);
/** tf_session_store_draft: the stored draft follows the one on the plate. */
void tf_session_store_draft (TfSession *session);
void tf_session_judge_choice (TfSession *session);
void tf_session_drop_draft (TfSession *session);
/** tf_session_forget_measure: what a worker still has in hand will be dropped. */
void tf_session_forget_measure (TfSession *session);
/** tf_session_measure_draft: and the other half, when there is one: at once, and by workers with the outline term. */
void tf_session_measure_draft (TfSession *session);
/** tf_session_measure_live: at once or by a worker, without the outline term. */
void tf_session_measure_live (TfSession *session, TfOutline *outline);
/* tf-session-hand.c */
void tf_session_init_hand (TfSession *session);
void tf_session_clear_hand (TfSession *session);
/** tf_session_remember: the draft as it is now can be come back to. */
void tf_session_remember (TfSession *session);
void tf_session_forget_history (TfSession *session);
gboolean tf_session_can_step_back (TfSession *session, gboolean forward);
gboolean tf_session_step_back (TfSession *session, gboolean forward);
/** tf_session_change_draft: (transfer full) @outline, @other (nullable): the draft is this now, at rest; the chosen one is what it takes
 * the place of when there was no draft. */
void tf_session_change_draft (TfSession *session, TfOutline *outline, TfOutline *other);
void tf_session_measure_split (TfSession *session, TfVertex a, TfVertex b);
/** tf_session_note_seen: what undoing or redoing brings back is what is not there now. */
void tf_session_note_seen (TfSession *session);
/* tf-session-choice.c */
void tf_session_choose_also_again (TfSession *session);
/* tf-session-carry.c */
void tf_session_add_carried (TfSession *session, GPtrArray *items);
/** tf_session_drop_carried: FALSE when it is not a carried one */
gboolean tf_session_drop_carried (TfSession *session, TfRegionItem *item);
TfRegionItem *tf_session_find_hint_of_carried (TfSession *session, TfRegionItem *carried);
gint64 tf_session_get_continued_key (TfSession *session, TfRegionItem *hint);
/* tf-session-proposal.c */
void tf_session_init_proposal (TfSession *session);
void tf_session_clear_proposal (TfSession *session);
/* tf-session-join.c */
/** tf_session_find_person: local key of a name that the ledger knows; 0: it is not recorded by asking. */
gint64 tf_session_find_person (TfLedger *ledger, const char *name);
/** tf_session_make_passages: anew, off the main thread. */
void tf_session_make_passages (TfSession *session);
/** tf_session_read_joins: in a lane: hint -> number of the region it joins when kept. */
GHashTable *tf_session_read_joins (TfLedger *ledger, const GPtrArray *rows, gint64 person);
/** tf_session_ask_join: which regions the draft and the other half would join. */
void tf_session_ask_join (TfSession *session);
void tf_session_close_join (TfSession *session);
void tf_session_update_pick (TfSession *session);
/** tf_session_restore_draft: from the ledger's text */
void tf_session_restore_draft (TfSession *session, const char *text);
/** tf_session_forget_hoped: what was on its way into the ledger is there, or will not come. */
void tf_session_forget_hoped (TfSession *self);
void tf_session_connect_writer (TfSession *session);
/** tf_session_update_shift: reads the list again when it is in sight. */
void tf_session_update_shift (TfSession *session);
/** tf_session_take_shift: (transfer full) (nullable) */
void tf_session_take_shift (TfSession *session, TfShift *shift);
/** tf_session_connect_shift: figures of what is kept follow it. */
void tf_session_connect_shift (TfSession *session);
/** tf_session_reopen_frame: under the correction that is in force now. */
void tf_session_reopen_frame (TfSession *session);
/** tf_session_check_geometry: when the ledger says another correction than the one shown. */
void tf_session_check_geometry (TfSession *session);
/** tf_session_update_method: the text that measures made now are kept with. */
void tf_session_update_method (TfSession *session);
/** tf_session_move_draft: the draft lies round the same pixels of @frame, which comes next. */
void tf_session_move_draft (TfSession *session, TfFrame *frame);
/** tf_session_move_row: what was measured under another geometry than the one shown lies round the
 * same pixels, and says so. */
void tf_session_move_row (TfSession *session, TfRow *row);
/** tf_session_shows_frame: as filter and wings have it. */
gboolean tf_session_shows_frame (TfSession *session, TfFrameItem *item);
void tf_session_init_witness (TfSession *session);
void tf_session_clear_witness (TfSession *session);
void tf_session_clear_roll (TfSession *session);
void tf_session_init_overlays (TfSession *session);
void tf_session_clear_overlays (TfSession *session);
/** tf_session_update_overlays: asks for the lines and ghosts of what is on the plate now. */
void tf_session_update_overlays (TfSession *session);
/** tf_session_push_deed: (transfer full): to the writer; TRUE */
gboolean tf_session_push_deed (TfSession *session, TfDeed *deed);
/** tf_session_new_deed: by the person, on the frame in view */
TfDeed *tf_session_new_deed (TfSession *session, TfDeedKind kind);
/** tf_session_in_band: whether a latitude is in the band picked on the wings. */
gboolean tf_session_in_band (TfSession *session, double lat_deg);

G_END_DECLS
