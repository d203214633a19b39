/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLedger: one SQLite file holding everything a person or team has recorded.
 *
 * One handle is one connection and belongs to one thread at a time; several handles, threads and processes may have the same
 * file open (WAL). Every function that writes is one transaction: when it returns TRUE the deed is on the disk.
 *
 * A person's deeds are append-only acts keyed (replica, seq) without gaps, hash-chained; marks, notes, classes and so on are
 * projections that tf_ledger_check() rebuilds and compares. Machine-made rows (frames, hints, measures) have content ids and are put in
 * once however often they come. Nothing judged (cycle, verdict) is stored. The schema is drawn in tf-ledger-schema.c.
 *
 * Ids in this header: int64 keys are local to the file; text ids (32 or 64 hex digits) are the same everywhere.
 */

#include <glib.h>

#include "tf-complexity.h"
#include "tf-frame.h"
#include "tf-hint.h"
#include "tf-measure.h"
#include "tf-outline.h"

G_BEGIN_DECLS

#define TF_LEDGER_ERROR (tf_ledger_error_quark ())
GQuark tf_ledger_error_quark (void);
typedef enum
{
  TF_LEDGER_ERROR_OPEN,      /* not there, not a ledger, not readable */
  TF_LEDGER_ERROR_READ_ONLY, /* newer version, folder or file not writable: reading works */
  TF_LEDGER_ERROR_BUSY,      /* another program held the lock for longer than we wait (10 s) */
  TF_LEDGER_ERROR_FULL,      /* disk full: nothing was changed */
  TF_LEDGER_ERROR_DAMAGED,   /* the file or the chain of acts is damaged */
  TF_LEDGER_ERROR_FORK,      /* this file is a copy of another that went on: a new replica was begun; informational when opening */
  TF_LEDGER_ERROR_STATE,     /* the deed does not fit what is recorded (no such mark, nothing to undo) */
  TF_LEDGER_ERROR_DATABASE,  /* anything else SQLite says */
} TfLedgerError;

typedef struct _TfLedger TfLedger;

/* -- the file -------------------------------------------------------------------------------- */
/** tf_ledger_create: fails when the file is there. @letter: A-Z, of own region numbers. */
TfLedger *tf_ledger_create (const char *path, char letter, GError **error);
/** tf_ledger_open: migrates an older one (backing it up beside itself first), opens a newer or unwritable one read-only.
 * A copied or restored file is told from its replica's state (in the user's state folder, or @state_dir) and gets a new replica. */
TfLedger *tf_ledger_open (const char *path, GError **error);
/** tf_ledger_open_or_create: what `fill` does. */
TfLedger *tf_ledger_open_or_create (const char *path, char letter, GError **error);

/** TfLedgerHow: what the plain functions leave at its default; zero-initialise. */
typedef struct
{
  gboolean create;              /* make it when it is not there */
  gboolean must_be_new;         /* an error when it is */
  char letter;                  /* of own region numbers, when made; 0: T */
  const char *state_dir;        /* NULL: the user's state folder, tiltfield/replicas */
  int busy_ms;                  /* how long a lock is waited for; 0: 10,000 */
  gint64 (*now) (gpointer data); /* ms since 1970; NULL: the machine's clock */
  gpointer now_data;
} TfLedgerHow;
TfLedger *tf_ledger_open_how (const char *path, const TfLedgerHow *how, GError **error);
/** tf_ledger_close: NULL is allowed. */
void tf_ledger_close (TfLedger *ledger);
const char *tf_ledger_get_path (const TfLedger *ledger);
/** tf_ledger_get_read_only: why nothing can be written, or NULL. Borrowed. */
const TfNote *tf_ledger_get_read_only (const TfLedger *ledger);
/** tf_ledger_get_notices: what opening found worth saying (fork noticed, migrated with a backup at ..., clock set back). Borrowed. */
const TfNotes *tf_ledger_get_notices (const TfLedger *ledger);
/** tf_ledger_get_version: PRAGMA data_version: changes when another connection has written. */
gint64 tf_ledger_get_version (TfLedger *ledger);

/* -- persons --------------------------------------------------------------------------------- */
/** tf_ledger_person: local key of a person's name, recorded by an act when new; 0 on error. */
gint64 tf_ledger_person (TfLedger *ledger, const char *name, GError **error);
/** tf_ledger_dup_persons: (transfer full): NULL-ended names in order of first deed. */
char **tf_ledger_dup_persons (TfLedger *ledger);

/* -- frames ---------------------------------------------------------------------------------- */
/** TfPersonGeometry: one person's correction of a frame. */
typedef struct
{
  char *person;
  TfCorrection correction;
} TfPersonGeometry;

typedef struct
{
  gint64 id;
  char *content_id;   /* of checksum, HDU and plane */
  char *path;         /* last place it was seen; absolute */
  char *checksum;     /* SHA-256 of the file */
  int hdu, plane;
  TfFrameInfo *info;  /* as it was read; geometry included; never NULL */
  double noise_gauss; /* at mu 0.5, as observed; NaN for refused */
  guint n_hints;      /* not yet judged */
  guint n_marks;      /* live marks on it */
  gboolean done;      /* no hint waits and somebody has judged */
  GPtrArray *geometries; /* of TfPersonGeometry: who corrected it, the last one first; NULL when nobody did */
  char *refusal;      /* English sentence; NULL when usable */
} TfFrameRow;
void tf_frame_row_free (TfFrameRow *row);

/** tf_ledger_add_frame: puts a frame in once; a known checksum at a new path updates the path. @noise_gauss: NaN when refused.
 * Returns its local key, 0 on error. */
gint64 tf_ledger_add_frame (TfLedger *ledger, const char *path, const char *checksum, int hdu, int plane,
                            const TfFrameInfo *info, double noise_gauss, GError **error);
/** tf_ledger_find_frame: by checksum, HDU, plane; 0 when not there. tf_ledger_find_file: size and mtime unchanged since last seen at this path. */
gint64 tf_ledger_find_frame (TfLedger *ledger, const char *checksum, int hdu, int plane);
gint64 tf_ledger_find_file (TfLedger *ledger, const char *path);
/** tf_ledger_frames: (element-type TfFrameRow) in time order, unknown times last. */
GPtrArray *tf_ledger_frames (TfLedger *ledger, GError **error);
/** tf_ledger_frames_between: the same, those of known time in a stretch, ends included. */
GPtrArray *tf_ledger_frames_between (TfLedger *ledger, TfTime from, TfTime to, GError **error);
TfFrameRow *tf_ledger_frame (TfLedger *ledger, gint64 id, GError **error);
/** tf_frame_row_get_correction: what that person (NULL: nobody) corrected on the frame; none when nothing. */
TfCorrection tf_frame_row_get_correction (const TfFrameRow *row, const char *person);
/** tf_ledger_set_geometry: a person's correction of the frame; none takes it back to the header. */
gboolean tf_ledger_set_geometry (TfLedger *ledger, gint64 frame, gint64 person, const TfCorrection *correction, GError **error);

/* -- hints and measures (machine rows) -------------------------------------------------------- */
/** tf_ledger_add_hints: all hints of one frame by one rule, with their measures; a second time changes nothing. An empty array records that
 * the rule was run. @rule, @method: canonical option texts. */
gboolean tf_ledger_add_hints (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
                              const char *method, GError **error);
/** TfComplexityRow: the figures of one measured outline as they are kept. They describe the field and are no forecast. */
typedef struct
{
  gboolean there;  /* worked out and given; else all below but mu is without meaning */
  double mu;       /* at the middle of the outline */
  double r_mx;     /* Schrijver's R */
  double strong_gradient_length_mm, gradient_weighted_gauss, flux_near_mx;
  guint pieces;    /* of strong field */
  gboolean delta_candidate;
} TfComplexityRow;
/** TfComplexityRows: one a hint, by one method (canonical option text). */
typedef struct
{
  const char *method;
  const TfComplexityRow *rows;
  guint n;
} TfComplexityRows;
/** tf_complexity_row: what is kept of @complexity. */
TfComplexityRow tf_complexity_row (const TfComplexity *complexity);
/** tf_ledger_add_hints_with: as tf_ledger_add_hints, with the figures of each hint in the same transaction. */
gboolean tf_ledger_add_hints_with (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
                                   const char *method, const TfComplexityRows *complexity, GError **error);
/** tf_ledger_add_complexity: the figures of marks or hints that are there, in one transaction, each once. Whether there was a figure or
 * none (near the limb) is kept, so that nobody looks twice. Parallel arrays of @n; @hints: the key is a hint's. */
gboolean tf_ledger_add_complexity (TfLedger *ledger, guint n, const gint64 *keys, const gboolean *hints, const char *method,
                                   const TfComplexityRow *rows, GError **error);

/** tf_ledger_has_hints: whether the rule was run on the frame. */
gboolean tf_ledger_has_hints (TfLedger *ledger, gint64 frame, const char *rule);

/** tf_ledger_gather: the machine rows of a part ledger (its frames, hints, measures) into @ledger, in which they end as if they had been
 * filled in there. What people did in @part is not taken: that travels in parcels; @said gets a note when there is any.
 * @n_frames, @n_hints: (out) (nullable): new ones */
gboolean tf_ledger_gather (TfLedger *ledger, TfLedger *part, guint *n_frames, guint *n_hints, TfNotes *said, GError **error);

/** tf_ledger_has_measure: whether that outline was measured on the frame by that method. @measure: (out) (nullable): cleared by the caller. */
gboolean tf_ledger_has_measure (TfLedger *ledger, gint64 frame, const TfOutline *outline, const char *method, TfMeasure *measure);
/** tf_ledger_add_measures: more measures of outlines that are there (another floor), in one transaction; each once.
 * Parallel arrays of @n. */
gboolean tf_ledger_add_measures (TfLedger *ledger, guint n, const gint64 *frames, TfOutline *const *outlines,
                                 char *const *methods, const TfMeasure *measures, GError **error);

/* -- marks ----------------------------------------------------------------------------------- */
typedef enum
{
  TF_MARK_KEPT,    /* "kept as hinted" */
  TF_MARK_CHANGED, /* from a hint or an older mark */
  TF_MARK_DRAWN,   /* "drawn new" */
} TfMarkOrigin;

/** TfMarkDeed: what a person keeps. */
typedef struct
{
  gint64 frame;
  gint64 person;
  gint64 hint;             /* the hint it came from; 0 */
  gint64 follows;          /* the mark it takes the place of; 0. Keeps the region */
  gint64 region;           /* an existing region it belongs to; 0 with follows 0: a new region with the next number */
  TfMarkOrigin origin;
  const TfOutline *outline;
  const TfMeasure *measure;
  const char *method;      /* canonical option text */
  const char *label;       /* nullable */
  gboolean ends_draft;     /* the person's draft on the frame is this mark from now on */
} TfMarkDeed;

/** tf_ledger_keep: returns the mark's local key, 0 on error. */
gint64 tf_ledger_keep (TfLedger *ledger, const TfMarkDeed *deed, GError **error);
/** tf_ledger_drop_hint: the person says it is no region (or takes that back by undo). */
gboolean tf_ledger_drop_hint (TfLedger *ledger, gint64 hint, gint64 person, GError **error);
/** tf_ledger_withdraw: a mark is taken back; it stays in the journal. */
gboolean tf_ledger_withdraw (TfLedger *ledger, gint64 mark, gint64 person, GError **error);
gboolean tf_ledger_set_note (TfLedger *ledger, gint64 region, gint64 person, const char *text, GError **error);
/** tf_ledger_set_label: a person's own name of a region; tf_ledger_set_external: its number in an official or other list. "" clears. */
gboolean tf_ledger_set_label (TfLedger *ledger, gint64 region, gint64 person, const char *text, GError **error);
gboolean tf_ledger_set_external (TfLedger *ledger, gint64 region, gint64 person, const char *text, GError **error);
/** tf_ledger_set_class: Mount Wilson class of a region at a time by a person: "β", "βγδ" ...; "" clears. @evidence: "magnetogram", ... */
gboolean tf_ledger_set_class (TfLedger *ledger, gint64 region, gint64 frame, gint64 person, const char *class_text,
                              const char *evidence, GError **error);
/** tf_ledger_begin_bundle: the deeds up to tf_ledger_end_bundle are one: all are recorded or none, and undone together. @as: what they
 * are together, a static English word ("split", "join"). One person's; that person is known already (tf_ledger_person before it). */
gboolean tf_ledger_begin_bundle (TfLedger *ledger, const char *as, GError **error);
/** tf_ledger_end_bundle: @ok: FALSE takes all of it back (one of them failed). FALSE when nothing was recorded. */
gboolean tf_ledger_end_bundle (TfLedger *ledger, gboolean ok, GError **error);

/* -- shifts and notes ------------------------------------------------------------------------- */
/** TfRegionNote: what one person says of one region now. */
typedef struct
{
  gint64 region, author; /* local keys */
  char *number;          /* of the region */
  char *text, *person;
  TfTime written;        /* when it was written; this machine's clock at the time */
  gboolean resolved;     /* somebody settled this text */
  char *resolver;        /* who did; NULL */
} TfRegionNote;
void tf_region_note_free (TfRegionNote *note);
/** tf_ledger_notes: (element-type TfRegionNote): all that stand, newest first. */
GPtrArray *tf_ledger_notes (TfLedger *ledger, GError **error);
/** tf_ledger_resolve: the note of @author on @region, as it stands now, is settled (or, @resolved FALSE, open again). STATE without such a
 * note. Another text is open again by itself. */
gboolean tf_ledger_resolve (TfLedger *ledger, gint64 region, gint64 author, gint64 person, gboolean resolved, GError **error);
/** TfMoment: a frame of a vantage, without what it holds. */
typedef struct
{
  gint64 frame;
  TfTime time;
  gboolean marked; /* somebody's outlines are on it */
} TfMoment;
/** tf_ledger_moments: (element-type TfMoment): usable disks and cut-outs of a vantage from @from to @until, in time order. */
GArray *tf_ledger_moments (TfLedger *ledger, const char *vantage, TfTime from, TfTime until, GError **error);
/** tf_ledger_newest: local key of the newest usable disk or cut-out; 0 without one. */
gint64 tf_ledger_newest (TfLedger *ledger);

/** TfRegionClass: what one person called a region on one frame. */
typedef struct
{
  gint64 region, frame; /* local keys */
  TfTime time;          /* of the frame */
  char *mw_class, *person, *evidence;
} TfRegionClass;
void tf_region_class_free (TfRegionClass *entry);
/** tf_ledger_classes: (element-type TfRegionClass): all that stand, oldest frame first; of one frame the last word last. */
GPtrArray *tf_ledger_classes (TfLedger *ledger, GError **error);
/** TfListing: a region as a daily list of others has it (tf-daily-summary.h). */
typedef struct
{
  char *number, *mw_class, *source; /* "" where not told */
  TfTime time;
  double lat_deg, cmd_deg, carrington_lon_deg, spot_area_msh; /* NaN: not told */
  gboolean due; /* it is expected back, not seen */
} TfListing;
void tf_listing_free (TfListing *listing);
/** tf_ledger_listings: (element-type TfListing): of daily lists that hold for a time from @from to @until. */
GPtrArray *tf_ledger_listings (TfLedger *ledger, TfTime from, TfTime until, GError **error);
/** tf_ledger_hand_over: a shift ends at @time (its frame's or the clock's); cannot be undone, a later one takes its place. */
gboolean tf_ledger_hand_over (TfLedger *ledger, gint64 person, TfTime time, GError **error);
/** tf_ledger_last_shift: when the last hand-over was recorded, by this machine's clock; unknown without one. @person: (out) (nullable)
 * (transfer full) */
TfTime tf_ledger_last_shift (TfLedger *ledger, char **person);

/* -- undo ------------------------------------------------------------------------------------- */
/** TfUndone: what an undo or redo was about. */
typedef struct
{
  char *what;   /* "keep", "drop", "split" ... */
  char *region; /* number; "" where none */
  gint64 frame; /* 0 where none */
} TfUndone;
void tf_undone_clear (TfUndone *undone);
/** tf_ledger_undo: undoes the person's last deed of this replica that is not undone (redo: the last undo), and those done as one with it.
 * @undone: (out) (nullable); STATE when there is none. */
gboolean tf_ledger_undo (TfLedger *ledger, gint64 person, TfUndone *undone, GError **error);
gboolean tf_ledger_redo (TfLedger *ledger, gint64 person, TfUndone *undone, GError **error);
gboolean tf_ledger_can_undo (TfLedger *ledger, gint64 person);
gboolean tf_ledger_can_redo (TfLedger *ledger, gint64 person);

/* -- rows: the flat columns of 6-commands, without what is judged ----------------------------- */
typedef struct
{
  gint64 mark;          /* local key of the mark, or of the hint */
  gboolean is_hint;
  char *mark_id;        /* text id, the same everywhere */
  gint64 frame;
  gint64 region_key;    /* 0 for a hint */
  char *region;         /* "T2013-0412"; "" for a hint */
  char *passage;        /* content id; of a mark that follow has not seen: its own id; of a hint: "" */
  gint64 passage_key;   /* local key (tf-ledger-follow.h); 0 when follow has not seen it */
  gint64 same;          /* rows of one region share it, whatever their passages: local key of a passage; 0 with passage_key 0 */
  int born;             /* TfEnd of its passage (tf-follow.h): unknown, on disk, over the limb, far side */
  const char *origin;   /* "hint", "kept as hinted", "changed", "drawn new", "outside": static */
  char *label, *note, *mw_class; /* "" where none */
  char *external; /* number in an official or other list; "" */
  char *frame_path, *frame_checksum, *method, *program_version, *person, *instrument, *vantage;
  const char *kind;     /* of the frame, static */
  gboolean unipolar;    /* hints */
  TfOutline *outline;   /* NULL when the query asked for none */
  TfMeasure measure;    /* time, floors, poles, tilt, cautions ... */
  TfComplexityRow complexity; /* when the query asked for it */
  char *complexity_method;    /* by which figures were worked out, or refused; NULL: nobody tried */
  char *time_source;
  gboolean simulated;
  struct _TfOutsideRow *outside; /* of a row that came in a table (tf-ledger-outside.h); NULL: own */
} TfRow;
void tf_row_free (TfRow *row);

typedef struct
{
  gboolean marks, hints; /* which */
  gint64 frame;          /* 0: all */
  gint64 passage;        /* 0: all; else only its marks and open hints (@frame and @judged_hints have no say) */
  gboolean same;         /* with @passage: of all passages that are one region with it */
  gboolean judged_hints; /* hints that a person kept or dropped, too */
  gboolean complexity;   /* figures, too */
  gboolean outside;      /* rows of outside tables, too; their mark is a local key of its own kind */
  gboolean no_outlines;  /* outline is NULL: several times faster where it is not asked for (studies, tables) */
} TfRowQuery;
/** tf_ledger_rows: (element-type TfRow) live marks and open hints in time order. */
GPtrArray *tf_ledger_rows (TfLedger *ledger, const TfRowQuery *query, GError **error);
TfRow *tf_ledger_row (TfLedger *ledger, gint64 mark, gboolean is_hint, GError **error);

/* -- points: the narrow table behind the wings ------------------------------------------------ */
typedef struct
{
  gint64 mark;
  gint64 frame;
  double year;       /* decimal */
  TfTime time;
  float lat_deg, flux_mx, tilt_deg, mu, cmd_deg, separation_deg;
  gint8 leading;     /* 1, -1, 0 */
  gint8 leading_sure, hint, unipolar, straddles, witnesses_differ;
  gint8 outside;     /* a row of an outside table: mark is its local key there, frame 0 */
  float imbalance;
  guint32 region;    /* local key, 0 for hints */
} TfPoint;
/** tf_ledger_points: (element-type TfPoint) all live marks, open hints and outside rows, in time order. */
GArray *tf_ledger_points (TfLedger *ledger, GError **error);

/* -- drafts ---------------------------------------------------------------------------------- */
/** tf_ledger_set_draft: strokes between keeps: durable, local, does not travel. NULL @text removes. */
gboolean tf_ledger_set_draft (TfLedger *ledger, gint64 frame, gint64 person, const char *text, GError **error);
char *tf_ledger_dup_draft (TfLedger *ledger, gint64 frame, gint64 person);

/* -- journal and check ------------------------------------------------------------------------ */
typedef struct
{
  gint64 seq;
  char *replica;  /* short */
  TfTime wall;
  char *kind;     /* "keep", "drop", "undo", ... */
  char *person;
  char *subject;  /* hex ids of what it is about, one after the other */
  gboolean undone;
  char *as;       /* what it is a part of ("split"); "" when alone */
  char *of;       /* of an undo or redo: the kind of what it undoes; "" */
  char *region;   /* number; "" where none */
  char *frame_time; /* ISO; "" where none */
  char *text;     /* class, note, label, name ...; "" */
} TfJournalEntry;
void tf_journal_entry_free (TfJournalEntry *entry);
/** tf_ledger_journal: (element-type TfJournalEntry) newest first, at most @limit. */
GPtrArray *tf_ledger_journal (TfLedger *ledger, guint limit, GError **error);
/** tf_ledger_journal_of: those about one region alone. */
GPtrArray *tf_ledger_journal_of (TfLedger *ledger, gint64 region, guint limit, GError **error);
/** tf_ledger_check: file integrity, foreign keys, schema, chain of acts, projections rebuilt and compared, points. Adds what it
 * finds wrong to @findings. FALSE only when the check itself could not run. */
gboolean tf_ledger_check (TfLedger *ledger, TfNotes *findings, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfLedger, tf_ledger_close)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFrameRow, tf_frame_row_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfRegionClass, tf_region_class_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfRegionNote, tf_region_note_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfRow, tf_row_free)
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfUndone, tf_undone_clear)

G_END_DECLS
