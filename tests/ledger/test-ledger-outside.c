/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Tables brought in: once, whole, told apart from marks; taken out, gathered, checked. */

#include "test-ledger.h"

#include <string.h>

#include "tf-ledger-outside.h"

static GArray *
make_entries (void)
{
  static const char *const flats[] = {
    "{\"time\":\"1950-03-01T12:00:00.000Z\",\"lat_deg\":12.5,\"axis_tilt_deg\":4.25,"
    "\"leading_lat_deg\":12,\"following_lat_deg\":13,\"leading_polarity\":-1,\"class\":\"\xce\xb2\"}",
    "{\"time\":\"1950-03-02T12:00:00.000Z\",\"lat_deg\":12.75,\"leading_sure\":0}",
    "{\"time\":\"1950-03-03T12:00:00.000Z\",\"lat_deg\":-8,\"source_origin\":\"hint\"}",
  };
  GArray *entries = g_array_new (FALSE, FALSE, sizeof (TfOutsideEntry));
  g_array_set_clear_func (entries, (GDestroyNotify)tf_outside_entry_clear);
  for (guint k = 0; k < G_N_ELEMENTS (flats); k++)
    {
      TfOutsideEntry entry = { .place = k + 2,
                               .group = k == 1 ? 0 : k,
                               .region = g_strdup (k == 2 ? "B" : "A"),
                               .passage = g_strdup (k == 2 ? "B" : "A"),
                               .time = tf_time_from_calendar (1950, 3, (int)k + 1, 12, 0, 0,
                                                              TF_SCALE_UTC),
                               .flat = g_strdup (flats[k]) };
      g_array_append_val (entries, entry);
    }
  return entries;
}

static gint64
bring (TfLedger *ledger, const char *checksum)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GArray) entries = make_entries ();
  TfOutsideTable table = { .name = (char *)"old.csv",
                           .checksum = (char *)checksum,
                           .format = (char *)"csv",
                           .source = (char *)"an old book",
                           .licence = (char *)"free",
                           .about = (char *)"",
                           .columns = (char *)"",
                           .linking = (char *)"column",
                           .n_rows = 4,
                           .n_left = 1 };
  gint64 id = tf_ledger_add_outside (ledger, &table, entries, &error);
  g_assert_no_error (error);
  return id;
}

static GPtrArray *
rows_of (TfLedger *ledger)
{
  TfRowQuery query = { .marks = TRUE, .outside = TRUE };
  GPtrArray *rows = tf_ledger_rows (ledger, &query, NULL);
  g_assert_nonnull (rows);
  return rows;
}

static void
test_rows (Fixture *f, gconstpointer data)
{
  gint64 id = bring (f->ledger, "abc");
  g_assert_cmpint (bring (f->ledger, "abc"), ==, id);
  g_assert_cmpint (bring (f->ledger, "abd"), !=, id);
  g_autoptr (GPtrArray) tables = tf_ledger_outside_tables (f->ledger, NULL);
  g_assert_cmpuint (tables->len, ==, 2);
  const TfOutsideTable *t = g_ptr_array_index (tables, 0);
  g_assert_cmpstr (t->licence, ==, "free");
  g_assert_cmpuint (t->n_taken, ==, 3);
  g_autoptr (GPtrArray) rows = rows_of (f->ledger);
  g_assert_cmpuint (rows->len, ==, 6);
  const TfRow *one = g_ptr_array_index (rows, 0), *two = g_ptr_array_index (rows, 2),
              *three = g_ptr_array_index (rows, 4), *other = g_ptr_array_index (rows, 1);
  g_assert_cmpstr (one->origin, ==, "outside");
  g_assert_cmpstr (one->mw_class, ==, "\xce\xb2");
  tf_check_near ("tilt", one->measure.axis_tilt_deg, 4.25, 0);
  tf_check_near ("leading pole", one->measure.negative.lat_deg, 12, 0);
  tf_check_near ("time", one->measure.time.s,
                 tf_time_from_calendar (1950, 3, 1, 12, 0, 0, TF_SCALE_UTC).s, 1e-6);
  tf_check_nan ("no tilt", two->measure.axis_tilt_deg);
  g_assert_cmpint (one->outside->leading_sure, ==, -1);
  g_assert_cmpint (two->outside->leading_sure, ==, 0);
  g_assert_cmpuint (one->outside->group, ==, two->outside->group);
  g_assert_cmpuint (one->outside->group, !=, three->outside->group);
  g_assert_cmpuint (one->outside->group, !=, other->outside->group);
  g_assert_true (three->outside->hinted);
  fixture_check (f->ledger, "");
}

/* Plain row queries and the frame's own rows do not meet them. */
static void
test_apart (Fixture *f, gconstpointer data)
{
  gint64 person = tf_ledger_person (f->ledger, "north", NULL), frame = fixture_frame (f->ledger, 0);
  fixture_keep (f->ledger, frame, person, 0, 0, 1);
  bring (f->ledger, "abc");
  TfRowQuery query = { .marks = TRUE, .hints = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (f->ledger, &query, NULL);
  g_assert_cmpuint (rows->len, ==, 1);
  g_autoptr (GArray) points = tf_ledger_points (f->ledger, NULL);
  guint outside = 0, hints = 0;
  for (guint k = 0; k < points->len; k++)
    {
      outside += g_array_index (points, TfPoint, k).outside != 0;
      hints += g_array_index (points, TfPoint, k).hint != 0;
    }
  g_assert_cmpuint (points->len, ==, 3);
  g_assert_cmpuint (outside, ==, 2); /* what the source calls a hint is no point */
  g_assert_cmpuint (hints, ==, 0);
  fixture_check (f->ledger, "");
}

static void
test_taken_out (Fixture *f, gconstpointer data)
{
  bring (f->ledger, "abc");
  gint64 id = tf_ledger_find_outside (f->ledger, "old.csv");
  g_assert_cmpint (id, !=, 0);
  g_assert_true (tf_ledger_remove_outside (f->ledger, id, NULL));
  g_autoptr (GPtrArray) rows = rows_of (f->ledger);
  g_autoptr (GArray) points = tf_ledger_points (f->ledger, NULL);
  g_assert_cmpuint (rows->len + points->len, ==, 0);
  fixture_check (f->ledger, "");
}

static void
test_gathered (Fixture *f, gconstpointer data)
{
  g_autofree char *path = g_build_filename (f->folder, "part.ledger", NULL);
  g_autoptr (GError) error = NULL;
  TfLedgerHow how = { .create = TRUE, .letter = 'T', .state_dir = f->state };
  g_autoptr (TfLedger) part = tf_ledger_open_how (path, &how, &error);
  g_assert_no_error (error);
  bring (f->ledger, "abd");
  bring (part, "abc");
  bring (part, "abd");
  for (int k = 0; k < 2; k++)
    g_assert_true (tf_ledger_gather (f->ledger, part, NULL, NULL, NULL, &error));
  g_autoptr (GPtrArray) mine = rows_of (f->ledger), theirs = rows_of (part);
  g_assert_cmpuint (mine->len, ==, 6);
  g_assert_cmpuint (theirs->len, ==, 6);
  g_autoptr (GHashTable) ids = g_hash_table_new (g_str_hash, g_str_equal);
  for (guint k = 0; k < 6; k++)
    g_hash_table_add (ids, ((TfRow *)g_ptr_array_index (mine, k))->mark_id);
  for (guint k = 0; k < 6; k++)
    g_assert_true (
        g_hash_table_contains (ids, ((TfRow *)g_ptr_array_index (theirs, k))->mark_id));
  fixture_check (f->ledger, "");
}

static const struct
{
  const char *sql, *code;
} tamperings[] = {
  { "UPDATE outside SET licence = 'none'", "check-machine-row" },
  { "UPDATE outside_row SET axis_tilt_deg = 5 WHERE id = 1", "check-machine-row" },
  { "UPDATE outside_row SET flat = replace (flat, '4.25', '4.26')", "check-machine-row" },
  { "DELETE FROM point WHERE hint = 2 AND mark = 1", "check-points" },
};

static void
test_tampering (Fixture *f, gconstpointer data)
{
  for (guint k = 0; k < G_N_ELEMENTS (tamperings); k++)
    {
      g_autofree char *number = g_strdup_printf ("%u", k);
      gint64 id = bring (f->ledger, number);
      fixture_check (f->ledger, "");
      fixture_sql (f->path, tamperings[k].sql);
      g_assert_true (fixture_finds (f->ledger, tamperings[k].code));
      g_assert_true (tf_ledger_remove_outside (f->ledger, id, NULL));
    }
}

void
add_outside_tests (void)
{
  FIXTURE_TEST ("/ledger/outside/a-table-goes-in-once-with-its-rows", test_rows);
  FIXTURE_TEST ("/ledger/outside/rows-are-apart-from-marks", test_apart);
  FIXTURE_TEST ("/ledger/outside/a-table-is-taken-out-again", test_taken_out);
  FIXTURE_TEST ("/ledger/outside/tables-are-gathered-once", test_gathered);
  FIXTURE_TEST ("/ledger/outside/what-is-changed-is-found", test_tampering);
}
