/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Outside regions: rows that came in a table of somebody else's, machine rows like hints. A table
 * goes in whole and once: its id is made from the file's checksum, the map of its columns and the
 * way its rows were linked; a row's id from that and its place in the file.
 *
 * A row keeps all that was taken of it as one JSON object of flat columns (6-commands), "flat";
 * numbers are finite, what is not there has no member. The source's own `mark` and `origin` stand
 * in source_mark and source_origin.
 */

#include <json-glib/json-glib.h>

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef struct
{
  gint64 id;      /* local key; 0 in what is put in */
  char *cid;      /* the same everywhere; NULL in what is put in */
  char *name;     /* of the file, without its folder */
  char *checksum; /* SHA-256 of the file */
  char *format;   /* "csv" ... */
  char *source, *licence, *about; /* texts kept as they were given; "" where none */
  char *columns;  /* canonical text of the map */
  char *linking;  /* "column", "place", "alone" */
  guint n_rows;   /* in the table */
  guint n_left;   /* left out for bad values */
  guint n_taken;  /* read only */
} TfOutsideTable;
void tf_outside_table_free (TfOutsideTable *table);

/** TfOutsideEntry: a row to be put in. */
typedef struct
{
  guint place;   /* line of a text file, row number elsewhere, from 1 */
  guint group;   /* index of the first entry of the same region, <= its own */
  char *region;  /* the source's name of it, or one made for linked rows */
  char *passage; /* rows of one passage share it */
  TfTime time;
  char *flat;
} TfOutsideEntry;
void tf_outside_entry_clear (TfOutsideEntry *entry);

/** TfOutsideRow: what a TfRow has beside its measure when it came in a table. */
typedef struct _TfOutsideRow
{
  gint64 table;       /* local key */
  guint32 group;      /* cluster of its region, apart from all others of the ledger */
  guint32 passage;    /* likewise of its passage */
  guint place;
  double leading_lat_deg, following_lat_deg; /* NaN: not told; there without polarities, too */
  gint8 leading_sure; /* 1, 0, -1 the source does not say */
  gint8 size;         /* 0 region, 1 ephemeral, -1 unknown */
  char *source, *licence; /* of the row, when it was outside before; else of its table */
  gboolean hinted;    /* the source calls it a hint */
  char *flat;
  JsonNode *parsed; /* of tf_outside_row_get_flat() */
} TfOutsideRow;
void tf_outside_row_free (TfOutsideRow *row);
/** tf_outside_row_get_flat: the columns; never NULL. Borrowed. */
JsonObject *tf_outside_row_get_flat (TfOutsideRow *row);

/** tf_row_new_flat: a row of flat columns; its texts and measure as far as they go, origin "outside",
 * no group. @flat: JSON object, taken. */
TfRow *tf_row_new_flat (char *flat, TfTime time);

/** tf_ledger_outside_cid: the id that a table has or will have. (transfer full) */
char *tf_ledger_outside_cid (const char *checksum, const char *columns, const char *linking);
/** tf_ledger_find_outside: local key of a table of that id, or of that file name (the newest);
 * 0 when there is none. */
gint64 tf_ledger_find_outside (TfLedger *ledger, const char *cid_or_name);
/** tf_ledger_add_outside: a table with its @entries (element-type TfOutsideEntry), in one
 * transaction; one that is there already is left as it is. Returns its local key, 0 on error. */
gint64 tf_ledger_add_outside (TfLedger *ledger, const TfOutsideTable *table, const GArray *entries,
                              GError **error);
/** tf_ledger_remove_outside: a table and its rows are taken out again; nothing else names them. */
gboolean tf_ledger_remove_outside (TfLedger *ledger, gint64 table, GError **error);
/** tf_ledger_outside_tables: (element-type TfOutsideTable) in the order they came. */
GPtrArray *tf_ledger_outside_tables (TfLedger *ledger, GError **error);
/** tf_ledger_has_mark_id: whether a live or replaced mark or a hint of this ledger has that text
 * id. */
gboolean tf_ledger_has_mark_id (TfLedger *ledger, const char *id);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfOutsideTable, tf_outside_table_free)

G_END_DECLS
