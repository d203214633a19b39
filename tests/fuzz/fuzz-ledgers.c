/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* A small ledger, mutated from a seed, opened, checked, read and written to: errors and findings,
 * no crash, no hang. Two kinds of mutation by turns: bytes of the file, and values in its tables
 * (the file itself is then sound, and what is wrong reaches the readers of bodies, outlines, notes
 * and headers). Usage: fuzz-ledgers [MUTATIONS [SEED]]. */

#include <glib.h>
#include <glib/gstdio.h>
#include <math.h>
#include <sqlite3.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "tf-fuzz.h"
#include "tf-ledger.h"

typedef struct
{
  char *folder, *path, *state;
} Place;

static TfLedger *
open_at (const Place *place, GError **error)
{
  return tf_ledger_open_how (
      place->path, &(TfLedgerHow){ .create = TRUE, .letter = 'F', .state_dir = place->state },
      error);
}

static void
fill_measure (TfMeasure *measure, TfTime time)
{
  *measure = (TfMeasure){ .time = time,
                          .floor_kind = TF_FLOOR_EVEN,
                          .floor_gauss = 50,
                          .scale = NAN,
                          .leading_polarity = 1,
                          .lat_deg = 12,
                          .axis_tilt_deg = 5,
                          .flux_unsigned_mx = 2e22,
                          .pieces = 2,
                          .cautions = tf_notes_new () };
}

static gint64
add_frame (TfLedger *ledger, int n)
{
  g_autoptr (TfHeader) header = tf_header_read (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCRPIX1  = 20\nCRPIX2  = 20\nCDELT1  = 60\n"
      "CDELT2  = 60\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nBUNIT   = 'G'\n"
      "DATE-OBS= '2013-10-12T06:00:00'\n",
      -1);
  g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 40, 40);
  g_autofree char *checksum = g_strdup_printf ("%064d", n);
  return tf_ledger_add_frame (ledger, "/frames/a.fits", checksum, 1, 1, info, 9, NULL);
}

static gint64
keep (TfLedger *ledger, gint64 frame, gint64 person, gint64 follows)
{
  TfTime time = tf_time_read ("2013-10-12T06:00:00Z");
  g_autoptr (TfOutline) outline = tf_outline_new_cap (time, 100, 12, 4, 8);
  g_auto (TfMeasure) measure = { 0 };
  fill_measure (&measure, time);
  TfMarkDeed deed = { .frame = frame,
                      .person = person,
                      .follows = follows,
                      .origin = TF_MARK_DRAWN,
                      .outline = outline,
                      .measure = &measure,
                      .method = "flux-centroid/1" };
  return tf_ledger_keep (ledger, &deed, NULL);
}

static void
hint_free (gpointer data)
{
  tf_hint_free (data);
}

/* All tables in use, in one file without a log beside it. */
static GBytes *
make_ledger (const Place *place)
{
  g_autoptr (TfLedger) ledger = open_at (place, NULL);
  gint64 person = tf_ledger_person (ledger, "north", NULL), frame = add_frame (ledger, 1);
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func (hint_free);
  for (int k = 0; k < 3; k++)
    {
      TfHint *hint = g_new0 (TfHint, 1);
      hint->outline = tf_outline_new_cap (tf_time_read ("2013-10-12T06:00:00Z"), 50 + k, 12, 4, 8);
      fill_measure (&hint->measure, tf_time_read ("2013-10-12T06:00:00Z"));
      hint->cautions = tf_notes_new ();
      g_ptr_array_add (hints, hint);
    }
  gboolean ok = tf_ledger_add_hints (ledger, frame, "plain/1", hints, "flux-centroid/1", NULL);
  gint64 one = keep (ledger, frame, person, 0), two = keep (ledger, frame, person, one);
  ok = ok && two != 0 && tf_ledger_drop_hint (ledger, 1, person, NULL)
       && tf_ledger_set_note (ledger, 1, person, "n", NULL)
       && tf_ledger_set_class (ledger, 1, frame, person, "β", "m", NULL)
       && tf_ledger_undo (ledger, person, NULL, NULL)
       && tf_ledger_set_draft (ledger, frame, person, "d", NULL);
  g_clear_pointer (&ledger, tf_ledger_close);
  sqlite3 *db = NULL;
  char *bytes = NULL;
  gsize n = 0;
  ok = ok && sqlite3_open (place->path, &db) == SQLITE_OK
       && sqlite3_exec (db, "PRAGMA journal_mode = DELETE", NULL, NULL, NULL) == SQLITE_OK;
  sqlite3_close (db);
  if (!ok || !g_file_get_contents (place->path, &bytes, &n, NULL))
    abort ();
  return g_bytes_new_take (bytes, n);
}

/* -- mutations
 * ---------------------------------------------------------------------------------------- */
static void
mutate_file (const Place *place, GBytes *source, GRand *chance)
{
  gsize n = 0;
  const guint8 *data = g_bytes_get_data (source, &n);
  g_autoptr (GByteArray) out = g_byte_array_new ();
  g_byte_array_append (out, data, (guint)n);
  guint page = (guint)g_rand_int_range (chance, 0, (gint)(n / 4096)) * 4096;
  switch (g_rand_int_range (chance, 0, 6))
    {
    case 0:
      g_byte_array_set_size (out, (guint)g_rand_int_range (chance, 1, (gint)n));
      break;
    case 1: /* one page over another */
      memcpy (out->data + page, data + (guint)g_rand_int_range (chance, 0, (gint)(n / 4096)) * 4096,
              4096);
      break;
    case 2: /* the head of a page */
      for (int k = 0; k < 3; k++)
        out->data[page + (guint)g_rand_int_range (chance, 0, 24)]
            = (guint8)g_rand_int_range (chance, 0, 256);
      break;
    default:
      fuzz_flip (out, chance, 20);
    }
  if (!g_file_set_contents (place->path, (const char *)out->data, out->len, NULL))
    abort ();
}

typedef struct
{
  const char *table, *column;
} Cell;

static const Cell cells[] = {
  { "act", "body" },     { "act", "subject" },   { "act", "kind" },        { "act", "clock" },
  { "act", "hash" },     { "frame", "info" },    { "frame", "kind" },      { "frame", "time" },
  { "frame", "cid" },    { "measure", "notes" }, { "measure", "leading" }, { "measure", "lat_deg" },
  { "hint", "outline" }, { "hint", "notes" },    { "hint", "cid" },        { "mark", "outline" },
  { "mark", "origin" },  { "mark", "uid" },      { "region", "number" },   { "region", "uid" },
  { "person", "name" },  { "person", "uid" },    { "deed", "undone" },     { "point", "time" },
  { "replica", "id" },   { "setting", "value" }, { "run", "rule" },        { "have", "upto" },
  { "note", "text" },    { "method", "text" },
};

static GByteArray *
mutate_value (const guint8 *bytes, int n, GRand *chance)
{
  GByteArray *out = g_byte_array_new ();
  if (n > 0)
    g_byte_array_append (out, bytes, (guint)n);
  switch (g_rand_int_range (chance, 0, 5))
    {
    case 0:
      g_byte_array_set_size (out, (guint)g_rand_int_range (chance, 0, n + 1));
      break;
    case 1: /* a number made awkward */
      for (guint k = 0; k < out->len; k++)
        if (g_ascii_isdigit (out->data[k]) && g_rand_int_range (chance, 0, 6) == 0)
          out->data[k] = (guint8) "0123456789-.eE[]{}\""[g_rand_int_range (chance, 0, 19)];
      break;
    default:
      fuzz_flip (out, chance, 4);
    }
  return out;
}

static void
write_value (sqlite3 *db, const Cell *cell, sqlite3_stmt *old, GRand *chance)
{
  g_autofree char *sql
      = g_strdup_printf ("UPDATE OR IGNORE %s SET %s = ?1", cell->table, cell->column);
  sqlite3_stmt *query = NULL;
  int type = sqlite3_column_type (old, 0);
  g_autoptr (GByteArray) value
      = mutate_value (sqlite3_column_blob (old, 0), sqlite3_column_bytes (old, 0), chance);
  if (sqlite3_prepare_v2 (db, sql, -1, &query, NULL) != SQLITE_OK)
    abort ();
  if (type == SQLITE_TEXT)
    sqlite3_bind_text (query, 1, (const char *)value->data, (int)value->len, SQLITE_TRANSIENT);
  else if (type == SQLITE_BLOB)
    sqlite3_bind_blob (query, 1, value->data, (int)value->len, SQLITE_TRANSIENT);
  else
    sqlite3_bind_int64 (query, 1, (gint64)g_rand_int (chance) << g_rand_int_range (chance, 0, 32));
  sqlite3_step (query);
  sqlite3_finalize (query);
}

static void
mutate_values (const Place *place, GBytes *source, GRand *chance)
{
  gsize n = 0;
  const char *data = g_bytes_get_data (source, &n);
  const Cell *cell = &cells[g_rand_int_range (chance, 0, G_N_ELEMENTS (cells))];
  g_autofree char *sql = g_strdup_printf ("SELECT %s FROM %s LIMIT 1 OFFSET %d", cell->column,
                                          cell->table, g_rand_int_range (chance, 0, 3));
  sqlite3 *db = NULL;
  sqlite3_stmt *query = NULL;
  if (!g_file_set_contents (place->path, data, (gssize)n, NULL)
      || sqlite3_open (place->path, &db) != SQLITE_OK
      || sqlite3_prepare_v2 (db, sql, -1, &query, NULL) != SQLITE_OK)
    abort ();
  sqlite3_exec (db, "PRAGMA synchronous = OFF", NULL, NULL, NULL);
  if (sqlite3_step (query) == SQLITE_ROW)
    {
      sqlite3_stmt *old = query;
      write_value (db, cell, old, chance);
    }
  sqlite3_finalize (query);
  sqlite3_close (db);
}

/* -- what is done with it
 * ------------------------------------------------------------------------------ */
static void
must_say (GError **error, gboolean ok, const char *what)
{
  if (!ok && *error == NULL)
    {
      printf ("not ok - %s failed and said nothing\n", what);
      abort ();
    }
  g_clear_error (error);
}

/* TRUE when something was found wrong or said. */
static gboolean
use (const Place *place)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = open_at (place, &error);
  if (ledger == NULL)
    {
      must_say (&error, FALSE, "opening");
      return TRUE;
    }
  g_autoptr (TfNotes) findings = tf_notes_new ();
  gboolean checked = tf_ledger_check (ledger, findings, &error),
           wrong = !checked || findings->len > 0;
  must_say (&error, checked, "check");
  for (guint k = 0; k < findings->len; k++)
    g_free (tf_note_dup_text (tf_notes_get (findings, k), TRUE));
  TfRowQuery query = { .marks = TRUE, .hints = TRUE, .judged_hints = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, &error);
  must_say (&error, rows != NULL, "rows");
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, &error);
  must_say (&error, frames != NULL, "frames");
  g_autoptr (GArray) points = tf_ledger_points (ledger, &error);
  must_say (&error, points != NULL, "points");
  g_autoptr (GPtrArray) journal = tf_ledger_journal (ledger, 100, &error);
  must_say (&error, journal != NULL, "journal");
  gint64 person = tf_ledger_person (ledger, "north", &error);
  must_say (&error, person != 0, "person");
  gboolean undone = person != 0 && tf_ledger_undo (ledger, person, NULL, &error);
  must_say (&error, undone || person == 0, "undo");
  keep (ledger, 1, person, 1);
  return wrong;
}

static void
clean_up (const Place *place)
{
  g_autofree char *wal = g_strconcat (place->path, "-wal", NULL),
                  *shm = g_strconcat (place->path, "-shm", NULL);
  g_autofree char *journal = g_strconcat (place->path, "-journal", NULL);
  g_unlink (wal);
  g_unlink (shm);
  g_unlink (journal);
}

static void
remove_all (const char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  for (const char *name; dir != NULL && (name = g_dir_read_name (dir)) != NULL;)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR))
        remove_all (path);
      g_remove (path);
    }
  g_remove (folder);
}

int
main (int argc, char **argv)
{
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 200, found = 0;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 20131012;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  /* memory, where there is such a folder: each mutation is some ten writes that wait for the disk */
  const char *top = g_file_test ("/dev/shm", G_FILE_TEST_IS_DIR) ? "/dev/shm" : g_get_tmp_dir ();
  g_autofree char *folder = g_mkdtemp (g_build_filename (top, "tf-fuzz-XXXXXX", NULL)),
                  *path = g_build_filename (folder, "a.ledger", NULL);
  g_autofree char *state = g_build_filename (folder, "state", NULL);
  Place place = { folder, path, state };
  g_autoptr (GBytes) source = make_ledger (&place);
  gboolean clean = !use (&place);
  printf ("%s 1 - the ledger itself is clean\n", clean ? "ok" : "not ok");
  for (guint k = 0; k < n; k++)
    {
      clean_up (&place);
      if (k % 2 == 0)
        mutate_file (&place, source, chance);
      else
        mutate_values (&place, source, chance);
      if (g_getenv ("TF_FUZZ_KEEP") != NULL)
        {
          g_autofree char *bytes = NULL;
          gsize size = 0;
          if (g_file_get_contents (path, &bytes, &size, NULL))
            g_file_set_contents (g_getenv ("TF_FUZZ_KEEP"), bytes, (gssize)size, NULL);
        }
      found += use (&place);
    }
  printf ("ok 2 - %u mutations from seed %u, %u of them found out, end in errors and findings\n", n,
          seed, found);
  /* what is not found out: free pages, values set to what they were, drafts */
  gboolean most = found > n / 2;
  printf ("%s 3 - most mutations are found out\n1..3\n", most ? "ok" : "not ok");
  remove_all (folder);
  return clean && most ? 0 : 1;
}
