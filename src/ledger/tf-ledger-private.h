/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the files of this folder share. Ids inside C are lower-case hex text; in the file they are
 * blobs.
 *
 * Statements are kept by the ledger and handed out by tf_query(); an autoptr to one resets it and
 * gives it back, it never owns it. The same text must not be in use twice at a time. */

#include <sodium.h>
#include <sqlite3.h>

#include "tf-ledger-outside.h"
#include "tf-ledger-studies.h"
#include "tf-ledger.h"

G_BEGIN_DECLS

#define TF_LEDGER_APPLICATION 0x54466c64 /* "TFld" */
#define TF_LEDGER_VERSION     10
#define TF_ID_HEX             32 /* digits of a UUID */
#define TF_CID_HEX            64 /* digits of a content id or hash */

struct _TfLedger
{
  sqlite3 *db;
  char *path;
  char *uri; /* file:///... as it was opened, for attaching */
  char *state_dir;
  int busy_ms;
  gint64 (*now) (gpointer data); /* ms since 1970 */
  gpointer now_data;
  GHashTable *statements; /* SQL text -> sqlite3_stmt, owned */
  TfNote *read_only;
  TfNotes *notices;
  gint64 replica;          /* this copy's own replica; 0 until its first deed */
  char *replica_id;        /* hex */
  gboolean replica_is_new; /* begun in the transaction in hand */
  char letter;
  const char *bundle_as; /* acts in hand are done as one, under this word; NULL */
  gint64 bundle;         /* seq of its first act; 0 before there is one */
};

/* -- tf-ledger-sql.c
 * ------------------------------------------------------------------------------- */
/* Binding letters: i gint64; k gint64 key (0 is NULL); d double (NaN is NULL); t text (NULL
 * allowed); h hex text as a blob; b bytes: const void *, gsize. */
sqlite3_stmt *tf_query (TfLedger *ledger, GError **error, const char *sql, const char *types, ...);
/* 1: a row; 0: no more; -1: error. */
int tf_query_step (TfLedger *ledger, sqlite3_stmt *query, GError **error);
void tf_query_done (sqlite3_stmt *query);
GHashTable *tf_statements_new (void);
gboolean tf_run (TfLedger *ledger, GError **error, const char *sql, const char *types, ...);
/* First column of the first row; @fallback when there is none, it is NULL, or on error. */
gint64 tf_value (TfLedger *ledger, GError **error, gint64 fallback, const char *sql,
                 const char *types, ...);
char *tf_text_value (TfLedger *ledger, GError **error, const char *sql, const char *types, ...);
/* Several statements without results. */
gboolean tf_run_script (TfLedger *ledger, const char *sql, GError **error);

double tf_column_double (sqlite3_stmt *query, int column); /* NULL is NaN */
const char *
tf_column_text (sqlite3_stmt *query, int column); /* NULL is "" ; borrowed until the next step */
char *tf_column_dup_hex (sqlite3_stmt *query, int column);

/* A write: read-only is an error, the lock is waited for. After a failure inside:
 * tf_ledger_rollback. */
gboolean tf_ledger_begin (TfLedger *ledger, GError **error);
/* Inside a bundle a write joins the transaction of the bundle, and its commit waits for that. */
gboolean tf_ledger_commit (TfLedger *ledger, GError **error);
void tf_ledger_rollback (TfLedger *ledger);
void tf_ledger_set_error (GError **error, sqlite3 *db, int rc, const char *path);

/* -- tf-ledger-digest.c
 * ---------------------------------------------------------------------------- */
/* BLAKE2b over parts, each with its length before it. */
typedef struct
{
  crypto_generichash_state state;
} TfDigest;
void tf_digest_begin (TfDigest *digest, const char *tag);
void tf_digest_add (TfDigest *digest, const void *bytes, gsize n);
void tf_digest_add_text (TfDigest *digest, const char *text);
void tf_digest_add_int (TfDigest *digest, gint64 value);
char *tf_digest_end (TfDigest *digest); /* 64 hex digits */
/* Digest of columns @first .. @last of the row in hand, types included. */
char *tf_digest_row (sqlite3_stmt *query, const char *tag, int first, int last);
char *tf_uuid7 (gint64 now_ms);                                    /* 32 hex digits */
char *tf_content_id (const char *tag, ...) G_GNUC_NULL_TERMINATED; /* of texts; 64 hex digits */

/* -- tf-ledger-schema.c
 * ---------------------------------------------------------------------------- */
typedef struct
{
  int to;                 /* user_version after it */
  const char *const *sql; /* scripts, NULL-ended; all migrations run in one transaction */
} TfMigration;
extern const TfMigration tf_ledger_migrations[]; /* ends with sql NULL */
/* The tables that check makes anew, a script a version, NULL-ended. */
extern const char *const tf_ledger_projections[];
/* @is_new: an empty file becomes a ledger. */
gboolean tf_ledger_migrate (TfLedger *ledger, int from, gboolean is_new, GError **error);

/* -- tf-ledger-replica.c
 * --------------------------------------------------------------------------- */
gboolean tf_replica_choose (TfLedger *ledger, GError **error);
gboolean tf_replica_begin (TfLedger *ledger, GError **error); /* inside a transaction */
void tf_replica_store_state (TfLedger *ledger);               /* after a commit */

/* -- tf-ledger-draft.c
 * ----------------------------------------------------------------------------- */
/* Inside a transaction. */
gboolean tf_draft_remove (TfLedger *ledger, gint64 frame, gint64 person, GError **error);

/* -- tf-ledger-acts.c
 * ------------------------------------------------------------------------------ */
/* Appends one act and projects it; inside a transaction. @body: an object built to its end. */
gboolean tf_act_append (TfLedger *ledger, const char *kind, const char *subject, JsonBuilder *body,
                        GError **error);
char *tf_act_hash (const char *before, const char *replica, gint64 seq, gint64 clock, gint64 wall,
                   const char *kind, const char *subject, const void *body, gsize n_body,
                   const char *after);
/* "replica:seq ..." of what an act replaces, sorted. */
char *tf_act_dup_after (TfLedger *ledger, gint64 replica, gint64 seq, GError **error);
char *tf_subject (char tag, ...) G_GNUC_NULL_TERMINATED; /* of ids */

/* -- tf-ledger-journal.c
 * ---------------------------------------------------------------------------- */
/* What an act says, for people. */
typedef struct
{
  char *what;                /* its kind, or what it is a part of */
  char *as, *of;             /* as in TfJournalEntry */
  char *region, *frame_time; /* "" where none */
  char *text;
  gint64 frame; /* 0 where none */
} TfActAbout;
void tf_act_about (TfLedger *ledger, gint64 replica, gint64 seq, TfActAbout *about);
void tf_act_about_clear (TfActAbout *about);

/* -- tf-ledger-project.c
 * --------------------------------------------------------------------------- */
typedef struct
{
  gint64 replica, seq, clock;
  const char *kind, *subject;
  JsonObject *body;
} TfAct;
gboolean tf_project_act (TfLedger *ledger, const TfAct *act, GError **error);
gboolean tf_act_is_deed (const char *kind); /* can be undone */
/* The act that speaks for a subject; seq 0 when none stands. */
gboolean tf_project_current (TfLedger *ledger, const char *subject, gint64 *replica, gint64 *seq,
                             GError **error);

/* -- tf-ledger-studies.c
 * --------------------------------------------------------------------------- */
/* @table: "study" or "edition", which is also the kind of act. */
gboolean tf_named_put (TfLedger *ledger, const TfAct *act, GError **error);
gboolean tf_named_project (TfLedger *ledger, const char *table, const char *subject, GError **error);

/* -- tf-ledger-outside.c
 * --------------------------------------------------------------------------- */
gboolean tf_outside_gather (TfLedger *ledger, TfLedger *part, GError **error);
/* Rows of outside tables as TfRow into @rows; @key 0: all. */
gboolean tf_outside_read_rows (TfLedger *ledger, gint64 key, GPtrArray *rows, GError **error);

/* -- tf-ledger-points.c
 * ---------------------------------------------------------------------------- */
gboolean tf_point_refresh_mark (TfLedger *ledger, gint64 mark, GError **error);
gboolean tf_point_refresh_hint (TfLedger *ledger, gint64 hint, GError **error);
gboolean tf_point_refresh_frame (TfLedger *ledger, gint64 frame, GError **error);
gboolean tf_point_refresh_outside (TfLedger *ledger, gint64 outside, GError **error);
extern const char
    tf_point_all_sql[]; /* every point as it should be, in the order of the table's columns */

/* -- tf-ledger-geometry.c: [["name", "x,y,radius,north"], ...]; NULL when there is none
 * --------------------------------------------------------------------------- */
GPtrArray *tf_geometries_from_store (const char *text);

/* -- tf-ledger-frames.c, tf-ledger-hints.c: inside a transaction
 * ------------------------------------- */
gint64 tf_frame_put (TfLedger *ledger, const char *path, const char *checksum, int hdu, int plane,
                     const TfFrameInfo *info, double noise_gauss, GError **error);
gboolean tf_place_put (TfLedger *ledger, gint64 frame, const char *path, gint64 size, gint64 mtime,
                       GError **error);
/* @complexity: figures of each hint by one method; n 0: none. */
gboolean tf_hints_put (TfLedger *ledger, gint64 frame, const char *rule, const GPtrArray *hints,
                       const char *method, const TfComplexityRows *complexity, const char *program,
                       GError **error);

/* -- tf-ledger-measures.c
 * -------------------------------------------------------------------------- */
gint64 tf_method_key (TfLedger *ledger, const char *text, GError **error);
/* Puts it in once; its local key, 0 on error. @program: version that measured. @cid: (out)
 * (nullable) */
gint64 tf_measure_put (TfLedger *ledger, gint64 frame, const char *frame_cid, const char *method,
                       const char *outline_text, const TfMeasure *measure, const char *program,
                       char **cid, GError **error);
/* The content id of a measure; the measure of that id, if it is there. */
char *tf_measure_dup_cid (const char *frame_cid, const char *method, const char *outline_text);
gboolean tf_measure_find (TfLedger *ledger, const char *cid, TfMeasure *measure);
/* Reads the columns of tf_measure_columns_sql beginning at @column. */
void tf_measure_from_row (TfMeasure *measure, sqlite3_stmt *query, int column);
char *tf_measure_dup_columns (const char *alias); /* "e.time, e.field_used, ..." */
guint tf_measure_n_columns (void);

/* -- tf-ledger-complexity.c
 * ------------------------------------------------------------------------ */
/* Puts the figures of a measured outline in once; inside a transaction. */
gboolean tf_complexity_put (TfLedger *ledger, gint64 measure, const char *method,
                            const TfComplexityRow *row, const char *program, GError **error);
extern const char tf_complexity_columns_sql[]; /* "x.given, x.mu ...", the method's text last */
extern const char tf_complexity_join_sql[];    /* x: the newest figures of measure e */
enum
{
  TF_COMPLEXITY_COLUMNS = 8
};
/* Reads them beginning at @column. FALSE: nobody worked them out. */
gboolean tf_complexity_from_row (TfComplexityRow *row, sqlite3_stmt *query, int column);

/* -- tf-ledger-points.c, tf-ledger-pack.c
 * -------------------------------------------------------------- */
void tf_point_read (TfPoint *point, sqlite3_stmt *query);
/* The tables that hold rows in blocks. */
typedef enum
{
  TF_PACK_POINT, /* of TfPoint */
  TF_PACK_BRIEF, /* of TfBrief */
  TF_PACKS
} TfPack;
enum
{
  TF_POINT_BLOCK = 256, /* marks, hints or outside rows of a block of points */
  TF_BRIEF_BLOCK = 64   /* marks or hints of a block of briefs */
};
/* The blocks that hold a mark or hint (kind as point.hint), or all of a frame's hints, of an outside
 * table's rows, of the ledger, are to be filled anew before the commit; of measures: briefs alone. */
gboolean tf_pack_spoil (TfLedger *ledger, int kind, gint64 mark, GError **error);
gboolean tf_pack_spoil_frame (TfLedger *ledger, gint64 frame, GError **error);
gboolean tf_pack_spoil_measures (TfLedger *ledger, gint64 frame, GError **error);
gboolean tf_pack_spoil_outside (TfLedger *ledger, gint64 outside, GError **error);
gboolean tf_pack_spoil_all (TfLedger *ledger, GError **error);
gboolean tf_pack_fill (TfLedger *ledger, GError **error);
gboolean tf_pack_is_there (TfLedger *ledger, TfPack pack);
/* Calls @func for each block's items, in the order of kinds and keys. */
typedef void (*TfPackFunc) (gconstpointer items, guint n, gpointer user);
gboolean tf_pack_each (TfLedger *ledger, TfPack pack, TfPackFunc func, gpointer user, GError **error);
gboolean tf_pack_check (TfLedger *ledger, TfPack pack, TfNotes *findings, GError **error);
/* Briefs of the marks (@kind 0) or open hints (1) with keys from @first to before @end: TfBrief, each
 * mark's own first. */
gboolean tf_brief_append (TfLedger *ledger, int kind, gint64 first, gint64 end, GArray *items,
                          GError **error);

/* -- tf-ledger-info.c
 * ------------------------------------------------------------------------------ */
char *tf_info_dup_text (const TfFrameInfo *info);
TfFrameInfo *tf_info_from_text (const char *text, GError **error);

/* -- tf-ledger-check.c
 * ----------------------------------------------------------------------------- */
gboolean tf_digest_store (TfLedger *ledger, const char *table, gint64 id, GError **error);
extern const char *const tf_digest_tables[]; /* NULL-ended */

G_DEFINE_AUTOPTR_CLEANUP_FUNC (sqlite3_stmt, tf_query_done)

G_END_DECLS
