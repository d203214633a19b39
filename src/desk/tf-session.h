/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSession: what is open and chosen in one window. Main thread only. Widgets show it and change
 * it through these functions; they never speak to each other. Nothing here names a widget.
 *
 * Signals (none has arguments unless given):
 * "ledger-changed"   path, whether it is open, read-only, person, what opening found
 * "frames-changed"   the list of frames
 * "frame-changed"    the chosen frame, or its pixels came, or could not be had
 * "view-changed"     what part is seen, range, palette
 * "overlays-changed" what lies over the picture: switched, or lines and ghosts came
 * "regions-changed"  hints and marks on the plate
 * "choice-changed"   the chosen region, the draft, the tool, the measure of either
 * "points-changed"   the dots of the wings and the stretch picked on them
 * "shift-changed"    the forecaster's list, and whether it is in sight
 * "status-changed"   busy, problem, pending deeds, undo and redo
 * "message" (text)   something to be said once
 * "person-needed"    a deed waits for the name of who does it */

#include <gtk/gtk.h>

#include "tf-companion.h"
#include "tf-deed.h"
#include "tf-frame-item.h"
#include "tf-judge.h"
#include "tf-ledger-follow.h"
#include "tf-picture.h"
#include "tf-region-item.h"
#include "tf-shift.h"
#include "tf-split.h"
#include "tf-units.h"

G_BEGIN_DECLS

typedef enum
{
  TF_TOOL_NONE,
  TF_TOOL_OUTLINE, /* freehand */
  TF_TOOL_POLYGON, /* corner by corner */
  TF_TOOL_BRUSH_IN,
  TF_TOOL_BRUSH_OUT,
  TF_TOOL_SPLIT,     /* a line from edge to edge */
  TF_TOOL_LEAVE_OUT, /* freehand or corner by corner, round what is left out */
  TF_TOOL_CORNERS,   /* corners moved, put in, taken away */
  TF_TOOL_PIN,       /* a place for a pole */
  TF_TOOL_JOIN,      /* the next one chosen is joined with the chosen one */
} TfTool;

#define TF_TYPE_SESSION (tf_session_get_type ())
G_DECLARE_FINAL_TYPE (TfSession, tf_session, TF, SESSION, GObject)

TfSession *tf_session_new (void);
/** tf_session_close: lets the ledger go; deeds already handed on are written first. */
void tf_session_close (TfSession *session);

/* -- the ledger (tf-session-ledger.c) */
/** tf_session_open_ledger: @letter: 0 opens; A-Z makes a new one. */
void tf_session_open_ledger (TfSession *session, const char *path, char letter);
const char *tf_session_get_ledger_path (TfSession *session);
/** tf_session_get_ledger_name: without folder and ending; NULL without a ledger. */
char *tf_session_dup_ledger_name (TfSession *session);
gboolean tf_session_has_ledger (TfSession *session);
/** tf_session_get_ledger_problem: why it could not be opened, or why nothing can be written;
 * NULL. */
const char *tf_session_get_ledger_problem (TfSession *session);
gboolean tf_session_is_writable (TfSession *session);
const char *tf_session_get_person (TfSession *session);
void tf_session_set_person (TfSession *session, const char *name);
/** tf_session_refresh: reads again; @all: the whole roll, not only the chosen frame. */
void tf_session_refresh (TfSession *session, gboolean all);

/* -- frames (tf-session-frames.c) */
/** tf_session_get_frames: of TfFrameItem, in time order, those of the stretch picked on the
 * wings. */
GListModel *tf_session_get_frames (TfSession *session);
guint tf_session_get_n_frames (TfSession *session);
/** tf_session_add_frames: files and folders; into the ledger when one is open, else only to look
 * at. */
void tf_session_add_frames (TfSession *session, char *const *paths);
TfFrameItem *tf_session_get_frame_item (TfSession *session);
void tf_session_choose_frame (TfSession *session, TfFrameItem *item);
void tf_session_step_frame (TfSession *session, int step);
/** tf_session_step_waiting_frame: to the next (1) or previous (-1) other frame on which hints wait, of
 * those the roll shows. FALSE when there is none. */
gboolean tf_session_step_waiting_frame (TfSession *session, int step);
gboolean tf_session_has_waiting_frame (TfSession *session);
/** tf_session_get_frame: (nullable): the open frame, borrowed */
TfFrame *tf_session_get_frame (TfSession *session);
/** tf_session_get_frame_problem: why the chosen frame cannot be shown */
const char *tf_session_get_frame_problem (TfSession *session);
gboolean tf_session_is_loading (TfSession *session);
/** tf_session_get_progress: (nullable): words of the long work under way; @share 0-1 or negative
 * when unknown */
const char *tf_session_get_progress (TfSession *session, double *share);
void tf_session_cancel (TfSession *session);
/** tf_session_get_feed_trouble: (nullable): what could not be taken in, one sentence a line */
const char *tf_session_get_feed_trouble (TfSession *session);
void tf_session_forget_feed_trouble (TfSession *session);
/** tf_session_get_newest: time of the newest frame and the usual step between frames, s; unknown
 * and NaN */
TfTime tf_session_get_newest (TfSession *session, double *cadence_s);

/* -- the roll (tf-session-roll.c) */
typedef enum
{
  TF_ROLL_ALL,
  TF_ROLL_UNTOUCHED,
  TF_ROLL_WAITING,
  TF_ROLL_DONE,
  TF_ROLL_REFUSED,
  TF_N_ROLL_FILTERS
} TfRollFilter;
/** tf_roll_filter_name: "all", "untouched", ...: of the action */
const char *tf_roll_filter_name (TfRollFilter filter);
TfRollFilter tf_session_get_roll_filter (TfSession *session);
void tf_session_set_roll_filter (TfSession *session, TfRollFilter filter);
/** tf_session_get_roll_instrument: (nullable): whose frames alone the roll shows */
const char *tf_session_get_roll_instrument (TfSession *session);
void tf_session_set_roll_instrument (TfSession *session, const char *instrument);
/** tf_session_dup_instruments: of all frames, in order of name */
char **tf_session_dup_instruments (TfSession *session);
/** tf_session_get_watched: (nullable): the folder whose new frames are taken in as they arrive */
const char *tf_session_get_watched (TfSession *session);
/** tf_session_set_watched: NULL: none. FALSE when it cannot be watched, which is said. */
gboolean tf_session_set_watched (TfSession *session, const char *folder);
/** tf_session_find_moved: looks in a folder for frames whose file is not where it was. */
void tf_session_find_moved (TfSession *session, const char *folder);
/** tf_session_is_file_missing: the chosen frame cannot be shown because its file is gone. */
gboolean tf_session_is_file_missing (TfSession *session);

/* -- the view (tf-session-view.c) */
const TfView *tf_session_get_view (TfSession *session);
void tf_session_set_view_size (TfSession *session, double width, double height);
void tf_session_pan (TfSession *session, double dx, double dy);
void tf_session_zoom (TfSession *session, double factor, double vx, double vy);
void tf_session_fit (TfSession *session);
/** tf_session_set_pointer: where the pointer is over the view, if it is. */
void tf_session_set_pointer (TfSession *session, gboolean in, double vx, double vy);
gboolean tf_session_get_pointer (TfSession *session, double *vx, double *vy);
/** tf_session_get_pixels_a_degree: of the view, in the middle of the disk, on maps along a row. */
double tf_session_get_pixels_a_degree (TfSession *session);
/** tf_session_set_look: the point under the pointer stays there. */
void tf_session_set_look (TfSession *session, TfLook look);
gboolean tf_session_get_north_up (TfSession *session);
void tf_session_set_north_up (TfSession *session, gboolean north_up);
double tf_session_get_range (TfSession *session);
void tf_session_set_range (TfSession *session, double gauss);
TfPalette tf_session_get_palette (TfSession *session);
void tf_session_set_palette (TfSession *session, TfPalette palette);
TfPool *tf_session_get_pool (TfSession *session);
TfWorkers *tf_session_get_workers (TfSession *session);

/* -- the frame's geometry (tf-session-geometry.c) */
/** tf_session_get_header_geometry: (nullable): as the frame's header has it */
const TfGeometry *tf_session_get_header_geometry (TfSession *session);
/** tf_session_get_correction: the person's correction that is in force; none */
TfCorrection tf_session_get_correction (TfSession *session);
/** tf_session_can_correct: a disk or cut-out is open, whose rows run with the Sun. */
gboolean tf_session_can_correct (TfSession *session);
/** tf_session_get_witness: (nullable): what the orientation witness says of the frame on the plate;
 * comes with "overlays-changed" */
const TfNote *tf_session_get_witness (TfSession *session);
/** tf_session_set_preview: a correction that is being tried: drawn over the plate. NULL: none */
void tf_session_set_preview (TfSession *session, const TfCorrection *correction);
TfCorrection tf_session_get_preview (TfSession *session);
/** tf_session_fit_limb: looks for the limb in the pixels; when found, centre and radius of the
 * preview are the limb's. Off the main thread. */
void tf_session_fit_limb (TfSession *session);
/** tf_session_keep_geometry: the preview becomes the person's correction; one that equals the header
 * takes it back. FALSE when it cannot be kept. */
gboolean tf_session_keep_geometry (TfSession *session);
/** tf_session_count_elsewhere: own marks on this frame that were measured under another geometry */
guint tf_session_count_elsewhere (TfSession *session);
/** tf_session_is_elsewhere: whether its numbers are of another geometry than the one shown */
gboolean tf_session_is_elsewhere (const TfRow *row);
/** tf_session_measure_again: measures those anew, round the same pixels; each a new mark that takes
 * the place of the old one. */
gboolean tf_session_measure_again (TfSession *session);

/* -- what lies over the picture (tf-session-overlays.c) */
typedef enum
{
  TF_OVERLAY_GRATICULE,
  TF_OVERLAY_OUTLINES,
  TF_OVERLAY_AXES,
  TF_OVERLAY_INVERSION,
  TF_OVERLAY_SPOTS,
  TF_OVERLAY_GHOSTS,
  TF_N_OVERLAYS
} TfOverlayPart;
/** tf_overlay_name: "graticule", ...: of the action and the preference */
const char *tf_overlay_name (TfOverlayPart part);
gboolean tf_session_get_overlay (TfSession *session, TfOverlayPart part);
void tf_session_set_overlay (TfSession *session, TfOverlayPart part, gboolean on);
/** tf_session_dup_lines: (element-type TfOverlayLine): inversion lines and spots that are on and
 * found; their points are borrowed until the next signal. */
GArray *tf_session_dup_lines (TfSession *session);
/** tf_session_get_spots: (nullable): what the companion intensity frame shows in the outline that is
 * drawn or chosen; comes with "overlays-changed" */
const TfSpots *tf_session_get_spots (TfSession *session);
/** tf_session_is_tracing: lines are still looked for. */
gboolean tf_session_is_tracing (TfSession *session);
typedef struct
{
  TfOutline *outline; /* carried to this frame's time */
  char *label;        /* region; "" of a hint */
} TfGhost;
/** tf_session_get_ghosts: (nullable) (element-type TfGhost): of the frame before, when they are on */
const GPtrArray *tf_session_get_ghosts (TfSession *session);
/** tf_session_find_companion: (nullable): the intensity frame of the roll that shows the same Sun */
const TfFrameRow *tf_session_find_companion (TfSession *session);

/* -- hints, marks, the choice */
/** tf_session_get_regions: of TfRegionItem, strongest first */
GListModel *tf_session_get_regions (TfSession *session);
TfRegionItem *tf_session_get_region (TfSession *session);
void tf_session_choose_region (TfSession *session, TfRegionItem *item);
/** tf_session_step_hint: FALSE when there is none */
gboolean tf_session_step_hint (TfSession *session, int step);

/* -- several chosen, and carried from another frame (tf-session-choice.c, tf-session-carry.c) */
/** tf_session_is_chosen: the chosen one or one of those chosen with it */
gboolean tf_session_is_chosen (TfSession *session, TfRegionItem *item);
guint tf_session_get_n_chosen (TfSession *session);
/** tf_session_toggle_region: to those chosen, or away from them */
void tf_session_toggle_region (TfSession *session, TfRegionItem *item);
/** tf_session_extend_hint: the next hint is chosen too; FALSE when there is none */
gboolean tf_session_extend_hint (TfSession *session, int step);
/** tf_session_choose_all: all hints, or all marks when no hint waits */
void tf_session_choose_all (TfSession *session);
gboolean tf_session_step_mark (TfSession *session, int step);
/** tf_session_dup_chosen: (element-type TfRegionItem): the chosen one first */
GPtrArray *tf_session_dup_chosen (TfSession *session);
/** tf_session_join: those chosen become one draft; with one chosen the tool waits for the next. */
gboolean tf_session_can_join (TfSession *session);
gboolean tf_session_join (TfSession *session);
/** tf_session_carry: offers the regions of the last frame before this one that has marks, carried to this one. */
gboolean tf_session_can_carry (TfSession *session);
gboolean tf_session_carry (TfSession *session);
/** tf_session_carry_on: goes to the next frame and offers the chosen regions there. */
gboolean tf_session_can_carry_on (TfSession *session);
gboolean tf_session_carry_on (TfSession *session);
/** tf_session_get_joins: (nullable): number of the region that what K keeps is then a mark of, since its passage has that one region or it was
 * carried; NULL: a new region, or (a mark) its own. tf_session_get_other_joins: likewise of the other half of a split. */
const char *tf_session_get_joins (TfSession *session);
const char *tf_session_get_other_joins (TfSession *session);
/** tf_session_get_continued: (nullable): number of the carried region that a hint continues */
const char *tf_session_get_continued (TfSession *session, TfRegionItem *hint);

/* -- the hand on an outline (tf-session-hand.c): of the draft, else of the chosen hint or mark, which it then takes the place of */
/** tf_session_get_base: (nullable): what the tools work on */
TfOutline *tf_session_get_base (TfSession *session);
double tf_session_get_brush (TfSession *session);
void tf_session_set_brush (TfSession *session, double radius_deg);
void tf_session_brush_begin (TfSession *session, double lon_deg, double lat_deg);
void tf_session_brush_to (TfSession *session, double lon_deg, double lat_deg);
void tf_session_brush_end (TfSession *session);
/** tf_session_has_stroke: the brush or a corner is in the hand: the draft changes with every move. */
gboolean tf_session_has_stroke (TfSession *session);
/** tf_session_get_other_half: (nullable): the second half of a split in hand, with its measure */
TfOutline *tf_session_get_other_half (TfSession *session);
const TfMeasure *tf_session_get_other_measure (TfSession *session);
/** tf_session_split: the base along a line, as two drafts. FALSE with a message when it does not cross. */
gboolean tf_session_split (TfSession *session, TfVertex a, TfVertex b);
gboolean tf_session_leave_out (TfSession *session, const TfVertex *ring, guint n);
/** tf_session_pin_pole: @polarity 1, -1; 0 takes the pins away */
gboolean tf_session_pin_pole (TfSession *session, int polarity, double lon_deg, double lat_deg, const char *reason);

/* -- the split that is proposed (tf-session-proposal.c) */
typedef struct
{
  TfSplitLine line;
  TfOutline *outline[2]; /* the stronger half first */
  TfMeasure half[2];     /* without the outline term */
} TfProposal;
/** tf_session_get_proposal: (nullable): for what is in hand at rest when it has more pieces than one bipole; comes with "choice-changed" */
const TfProposal *tf_session_get_proposal (TfSession *session);
gboolean tf_session_split_proposed (TfSession *session);
/** tf_session_leave_proposal: it is not shown again for this outline. FALSE when there is none. */
gboolean tf_session_leave_proposal (TfSession *session);

/** TfCornerPlace: one corner of the base */
typedef struct
{
  guint ring, corner;
  gboolean left_out;
} TfCornerPlace;
/** tf_session_list_corners: (element-type TfCornerPlace): those that stand far enough from each other for a hand, @apart_deg */
GArray *tf_session_list_corners (TfSession *session, double apart_deg);
TfVertex tf_session_get_corner (TfSession *session, TfCornerPlace place);
/** tf_session_move_corner: neighbours nearer than @apart_deg that have no handle of their own go along; @done: the hand let go */
void tf_session_move_corner (TfSession *session, TfCornerPlace place, TfVertex to, double apart_deg, gboolean done);
/** tf_session_insert_corner: in the edge nearest to a place; FALSE further than @within_deg away. @place: (out): where it stands now */
gboolean tf_session_insert_corner (TfSession *session, TfVertex at, double within_deg, TfCornerPlace *place);
gboolean tf_session_remove_corner (TfSession *session, TfCornerPlace place);

/* -- drawing (tf-session-draft.c) */
TfTool tf_session_get_tool (TfSession *session);
void tf_session_set_tool (TfSession *session, TfTool tool);
/** tf_session_draw_to: one more vertex (Carrington, deg) of the line in hand */
void tf_session_draw_to (TfSession *session, double lon_deg, double lat_deg);
/** tf_session_get_line: borrowed vertices of the line in hand */
void tf_session_get_line (TfSession *session, const TfVertex **line, guint *n);
/** tf_session_measure_line: measures the line in hand as if it were closed; called once a frame
 * of animation */
void tf_session_measure_line (TfSession *session);
/** tf_session_finish_line: closes it: the draft. FALSE when it is no outline. */
gboolean tf_session_finish_line (TfSession *session);
/** tf_session_take_back_corner: FALSE when there is none */
gboolean tf_session_take_back_corner (TfSession *session);
void tf_session_discard_draft (TfSession *session);
void tf_session_set_draft (TfSession *session, TfOutline *outline);
TfOutline *tf_session_get_draft (TfSession *session);
/** tf_session_get_replaced: (nullable): the hint or mark whose place the draft would take */
TfRegionItem *tf_session_get_replaced (TfSession *session);
gboolean tf_session_get_replaces (TfSession *session);
void tf_session_set_replaces (TfSession *session, gboolean replaces);

/* -- what the slip shows: of the line in hand, else the draft, else the chosen region */
const TfMeasure *tf_session_get_measure (TfSession *session);
const TfSampleRow *tf_session_get_sample (TfSession *session);
TfVerdict tf_session_get_verdict (TfSession *session);
/** tf_session_get_measure_problem: why there are no numbers for the line in hand */
const char *tf_session_get_measure_problem (TfSession *session);
/** tf_session_is_at_rest: the outline term is in */
gboolean tf_session_is_at_rest (TfSession *session);
const char *tf_session_get_method (TfSession *session);
/** tf_session_get_params: how drafts are measured. tf_session_set_params: the draft in hand is
 * measured anew; the method's text goes with every mark. */
const TfMeasureParams *tf_session_get_params (TfSession *session);
void tf_session_set_params (TfSession *session, const TfMeasureParams *params);
/** tf_session_get_units: in which the window shows numbers; set, all that shows them is told. */
TfUnits tf_session_get_units (TfSession *session);
void tf_session_set_unit (TfSession *session, TfUnitKind kind, guint choice);
TfJudge *tf_session_get_judge (TfSession *session);
const TfDivides *tf_session_get_divides (TfSession *session);

/* -- deeds (tf-session-deeds.c); FALSE: not possible now (the actions ask the tf_session_can_
 * twins) */
gboolean tf_session_can_keep (TfSession *session);
gboolean tf_session_keep (TfSession *session);
/** tf_session_keep_new: as a new region, whatever its passage belongs to. */
gboolean tf_session_can_keep_new (TfSession *session);
gboolean tf_session_keep_new (TfSession *session);
gboolean tf_session_can_drop (TfSession *session);
gboolean tf_session_drop (TfSession *session);
gboolean tf_session_can_withdraw (TfSession *session);
gboolean tf_session_withdraw (TfSession *session);
gboolean tf_session_can_describe (TfSession *session); /* note and class: a mark is chosen */
gboolean tf_session_set_note (TfSession *session, const char *text);
/** tf_session_set_note_of: the note of a mark that need not be the chosen one any more. */
gboolean tf_session_set_note_of (TfSession *session, TfRegionItem *region, const char *text);
gboolean tf_session_set_class (TfSession *session, const char *text);
/** tf_session_set_label_of, tf_session_set_external_of: facts about the region of a mark */
gboolean tf_session_set_label_of (TfSession *session, TfRegionItem *region, const char *text);
gboolean tf_session_set_external_of (TfSession *session, TfRegionItem *region, const char *text);
/** tf_session_tie: two sightings, on whatever frames, are one region or (@cut) are not. */
gboolean tf_session_tie (TfSession *session, TfSight a, TfSight b, gboolean cut, const char *reason);
gboolean tf_session_can_undo (TfSession *session);
gboolean tf_session_undo (TfSession *session);
gboolean tf_session_can_redo (TfSession *session);
gboolean tf_session_redo (TfSession *session);
guint tf_session_get_pending (TfSession *session);
/** tf_session_get_saved: words about the last deed ("saved"), or NULL */
const char *tf_session_get_saved (TfSession *session);
const char *tf_session_get_problem (TfSession *session);
void tf_session_retry (TfSession *session);
void tf_session_give_up (TfSession *session);

/* -- the forecaster's list (tf-session-shift.c) */
/** tf_session_set_list_shown: it is read only while it is in sight. */
void tf_session_set_list_shown (TfSession *session, gboolean shown);
gboolean tf_session_get_list_shown (TfSession *session);
/** tf_session_get_shift: (nullable): of the frame on the plate; borrowed until "shift-changed" */
const TfShift *tf_session_get_shift (TfSession *session);
/** tf_session_get_shift_row: (nullable): the row of the chosen region */
const TfShiftRow *tf_session_get_shift_row (TfSession *session);
/** tf_session_choose_mark: FALSE when it is not on the plate */
gboolean tf_session_choose_mark (TfSession *session, gint64 mark, gboolean is_hint);
/** tf_session_step_listed: to the next (1) or previous (-1) region of the list that is on the frame. */
gboolean tf_session_step_listed (TfSession *session, int step);
gboolean tf_session_choose_newest (TfSession *session);
/** tf_session_settle: the newest open note of the chosen region is settled. */
gboolean tf_session_can_settle (TfSession *session);
gboolean tf_session_settle (TfSession *session);
/** tf_session_hand_over: the shift ends: notes written from now on are new to the next desk. */
gboolean tf_session_hand_over (TfSession *session);
/** tf_session_confirm: the chosen region gets the number that others give to what lies there. */
gboolean tf_session_can_confirm (TfSession *session);
gboolean tf_session_confirm (TfSession *session);
/** tf_session_bring: a daily region summary goes into the ledger. */
gboolean tf_session_bring (TfSession *session, const char *path);
/** tf_session_write_shift: the shift sheet of the frame on the plate; "message" says when it is there. */
gboolean tf_session_write_shift (TfSession *session, const char *path);
gboolean tf_session_can_write_region (TfSession *session);
gboolean tf_session_write_region (TfSession *session, const char *path);

/* -- the journal (tf-session-journal.c) */
/** tf_session_read_journal: newest first; @region: 0: all of it */
void tf_session_read_journal (TfSession *session, gint64 region, GAsyncReadyCallback done, gpointer data);
/** tf_session_read_journal_finish: (transfer full) (element-type TfJournalEntry) */
GPtrArray *tf_session_read_journal_finish (GAsyncResult *result, GError **error);

/* -- the wings (tf-session-wings.c) */
/** tf_session_get_dots: (element-type TfWingsDot): those shown; @n_hidden: (out): hints not shown
 */
GArray *tf_session_get_dots (TfSession *session, guint *n_hidden);
guint tf_session_get_n_marks (TfSession *session);
gboolean tf_session_get_show_hints (TfSession *session);
void tf_session_set_show_hints (TfSession *session, gboolean show);
/** tf_session_choose_sighting: that frame (0: the one it lies on), with that mark or hint on it chosen (mark 0: none). */
void tf_session_choose_sighting (TfSession *session, gint64 frame, TfSight sight);
void tf_session_choose_dot (TfSession *session, gint64 id);
/** tf_session_get_chosen_dot: 0: none */
gint64 tf_session_get_chosen_dot (TfSession *session);
/** tf_session_pick: a stretch of years; NaN: all */
void tf_session_pick (TfSession *session, double from, double to);
void tf_session_get_pick (TfSession *session, double *from, double *to);

G_END_DECLS
