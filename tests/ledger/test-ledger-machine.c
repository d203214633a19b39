/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Machine rows: put in once, the same everywhere; views; gathering. */

#include "test-ledger.h"

#include <string.h>

static gint64
add_file (Fixture *f, const char *path, const char *checksum)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrameInfo) info = fixture_info (0);
  gint64 id = tf_ledger_add_frame (f->ledger, path, checksum, 1, 1, info, 9.5, &error);
  g_assert_no_error (error);
  return id;
}

#define SUM_A "aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa"
#define SUM_B "bbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbb"

static void
test_frame_once (Fixture *f, gconstpointer data)
{
  g_autofree char *one = g_build_filename (f->folder, "one.fits", NULL),
                  *two = g_build_filename (f->folder, "two.fits", NULL);
  g_file_set_contents (one, "first", -1, NULL);
  g_file_set_contents (two, "first", -1, NULL);
  gint64 id = add_file (f, one, SUM_A);
  g_assert_cmpint (tf_ledger_find_file (f->ledger, one), ==, id);
  g_assert_cmpint (tf_ledger_find_file (f->ledger, two), ==, 0);
  g_assert_cmpint (add_file (f, two, SUM_A), ==, id);
  g_assert_cmpint (tf_ledger_find_file (f->ledger, two), ==, id);
  g_assert_cmpint (tf_ledger_find_frame (f->ledger, SUM_A, 1, 1), ==, id);
  g_assert_cmpint (tf_ledger_find_frame (f->ledger, SUM_A, 2, 1), ==, 0);
  {
    g_autoptr (TfFrameRow) row = tf_ledger_frame (f->ledger, id, NULL);
    g_assert_cmpstr (row->path, ==, two);
    g_assert_cmpuint (strlen (row->content_id), ==, 64);
  }
  g_file_set_contents (one, "another", -1, NULL);
  g_assert_cmpint (tf_ledger_find_file (f->ledger, one), ==, 0);
  gint64 other = add_file (f, one, SUM_B);
  g_assert_cmpint (other, !=, id);
  g_assert_cmpint (tf_ledger_find_file (f->ledger, one), ==, other);
  g_autoptr (GPtrArray) rows = tf_ledger_frames (f->ledger, NULL);
  g_assert_cmpuint (rows->len, ==, 2);
  fixture_check (f->ledger, "");
}

static void
test_info_comes_back (Fixture *f, gconstpointer data)
{
  g_autoptr (TfFrameInfo) given = fixture_info (3);
  given->refusal = tf_note_new ("ledger-copied", "s", "x");
  tf_notes_add (given->cautions, "clock-set-back", "sd", "x", 2.5);
  g_autoptr (GError) error = NULL;
  gint64 id = tf_ledger_add_frame (f->ledger, "/frames/x.fits", SUM_A, 2, 3, given, NAN, &error);
  g_autoptr (TfFrameRow) row = tf_ledger_frame (f->ledger, id, &error);
  g_assert_no_error (error);
  const TfFrameInfo *info = row->info;
  g_assert_cmpint (row->hdu, ==, 2);
  g_assert_cmpint (row->plane, ==, 3);
  tf_check_nan ("noise", row->noise_gauss);
  g_assert_nonnull (row->refusal);
  g_assert_cmpstr (tf_note_get_code (info->refusal), ==, "ledger-copied");
  tf_check_near ("a caution's number",
                 tf_note_get_number (tf_notes_find (info->cautions, "clock-set-back"), 1), 2.5, 0);
  g_assert_cmpint (info->kind, ==, TF_KIND_DISK);
  g_assert_cmpint (info->field, ==, TF_FIELD_LOS);
  g_assert_cmpstr (info->time_source, ==, "T_OBS");
  g_assert_cmpstr (info->instrument, ==, "Brindle Head");
  tf_check_near ("time", info->time.s, given->time.s, 0);
  tf_check_nan ("rotation number", info->rotation_number);
  TfPlace a, b;
  g_assert_true (tf_geometry_pixel_to_sun (&given->geometry, 300, 200, &a));
  g_assert_true (tf_geometry_pixel_to_sun (&info->geometry, 300, 200, &b));
  tf_check_near ("longitude", b.carrington_lon_deg, a.carrington_lon_deg, 0);
  tf_check_near ("latitude", b.lat_deg, a.lat_deg, 0);
  tf_check_near ("mu", b.mu, a.mu, 0);
}

static void
test_unknown_times_last (Fixture *f, gconstpointer data)
{
  g_autoptr (TfFrameInfo) info = fixture_info (0);
  info->time = TF_TIME_UNKNOWN;
  tf_ledger_add_frame (f->ledger, "/frames/u.fits", SUM_B, 1, 1, info, 9, NULL);
  fixture_frame (f->ledger, 5);
  fixture_frame (f->ledger, 2);
  g_autoptr (GPtrArray) rows = tf_ledger_frames (f->ledger, NULL);
  g_assert_cmpstr (((TfFrameRow *)g_ptr_array_index (rows, 0))->path, ==, "/frames/2.fits");
  g_assert_cmpstr (((TfFrameRow *)g_ptr_array_index (rows, 1))->path, ==, "/frames/5.fits");
  g_assert_cmpstr (((TfFrameRow *)g_ptr_array_index (rows, 2))->path, ==, "/frames/u.fits");
}

static void
test_hints_once (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) hints = fixture_hints (1), none = g_ptr_array_new ();
  gint64 frame = fixture_frame (f->ledger, 1), quiet = fixture_frame (f->ledger, 2);
  g_assert_false (tf_ledger_has_hints (f->ledger, frame, "plain/1"));
  for (int k = 0; k < 2; k++)
    {
      g_assert_true (
          tf_ledger_add_hints (f->ledger, frame, "plain/1", hints, "flux-centroid/1", &error));
      fixture_count (f->ledger, 0, 3);
    }
  g_assert_true (tf_ledger_has_hints (f->ledger, frame, "plain/1"));
  g_assert_true (
      tf_ledger_add_hints (f->ledger, quiet, "plain/1", none, "flux-centroid/1", &error));
  g_assert_true (tf_ledger_has_hints (f->ledger, quiet, "plain/1"));
  g_autoptr (GPtrArray) rows
      = tf_ledger_rows (f->ledger, &(TfRowQuery){ .hints = TRUE, .frame = frame }, &error);
  const TfRow *row = g_ptr_array_index (rows, 2);
  g_assert_cmpuint (rows->len, ==, 3);
  g_assert_cmpstr (row->origin, ==, "hint");
  g_assert_cmpstr (row->region, ==, "");
  g_assert_cmpstr (row->person, ==, "");
  g_assert_true (row->unipolar);
  g_assert_false (tf_ledger_add_hints (f->ledger, 999, "plain/1", hints, "m", &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  fixture_check (f->ledger, "");
}

static void
test_newer_rule (Fixture *f, gconstpointer data)
{
  g_autoptr (GPtrArray) hints = fixture_hints (1), others = fixture_hints (4);
  gint64 frame = fixture_frame (f->ledger, 1), person = tf_ledger_person (f->ledger, "north", NULL);
  tf_ledger_add_hints (f->ledger, frame, "plain/1", hints, "flux-centroid/1", NULL);
  gint64 mark = fixture_keep (f->ledger, frame, person, fixture_hint (f->ledger, 0), 0, 10);
  g_ptr_array_remove_index (others, 2);
  g_assert_true (
      tf_ledger_add_hints (f->ledger, frame, "plain/1 reach=50", others, "flux-centroid/1", NULL));
  fixture_count (f->ledger, 1, 2); /* the mark stays, the open hints are the newer rule's */
  g_assert_true (tf_ledger_withdraw (f->ledger, mark, person, NULL));
  fixture_count (f->ledger, 0, 2);
  fixture_check (f->ledger, "");
}

static char *
ids_of (TfLedger *ledger)
{
  return fixture_sql_text (tf_ledger_get_path (ledger),
                           "SELECT group_concat (hex (cid)) FROM (SELECT cid FROM (SELECT cid FROM "
                           "frame UNION ALL SELECT cid"
                           " FROM hint UNION ALL SELECT cid FROM measure) ORDER BY cid)");
}

static void
fill_frames (TfLedger *ledger, const int *order, int n)
{
  for (int k = 0; k < n; k++)
    {
      g_autoptr (GPtrArray) hints = fixture_hints (order[k]);
      gint64 frame = fixture_frame (ledger, order[k]);
      g_assert_true (
          tf_ledger_add_hints (ledger, frame, "plain/1", hints, "flux-centroid/1", NULL));
    }
}

/* Parts, overlapping and in another order, gathered twice: the rows of a single run. */
static void
test_gather (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *a = g_build_filename (f->folder, "a.ledger", NULL),
                  *b = g_build_filename (f->folder, "b.ledger", NULL);
  g_autofree char *all = g_build_filename (f->folder, "all.ledger", NULL);
  g_autoptr (TfLedger) one = fixture_open (f, a, NULL);
  g_autoptr (TfLedger) two = fixture_open (f, b, NULL);
  g_autoptr (TfLedger) single = fixture_open (f, all, NULL);
  g_autoptr (TfNotes) said = tf_notes_new ();
  fill_frames (one, (int[]){ 5, 1, 3 }, 3);
  fill_frames (two, (int[]){ 4, 2, 1 }, 3);
  fill_frames (single, (int[]){ 1, 2, 3, 4, 5 }, 5);
  guint frames = 0, hints = 0;
  g_assert_true (tf_ledger_gather (f->ledger, two, &frames, &hints, said, &error));
  g_assert_cmpuint (frames, ==, 3);
  g_assert_cmpuint (hints, ==, 9);
  g_assert_true (tf_ledger_gather (f->ledger, one, &frames, &hints, said, &error));
  g_assert_cmpuint (frames, ==, 2);
  g_assert_true (tf_ledger_gather (f->ledger, one, &frames, &hints, said, &error));
  g_assert_cmpuint (frames + hints, ==, 0);
  g_autofree char *got = ids_of (f->ledger), *expected = ids_of (single);
  g_assert_cmpstr (got, ==, expected);
  fixture_count (f->ledger, 0, 15);
  g_assert_cmpuint (said->len, ==, 0);
  fixture_keep (one, 1, tf_ledger_person (one, "north", NULL), 0, 0, 7);
  g_assert_true (tf_ledger_gather (f->ledger, one, NULL, NULL, said, &error));
  g_assert_nonnull (tf_notes_find (said, "gather-acts-left"));
  fixture_check (f->ledger, "");
}

/* The flat columns of tables, without those that are judged on reading. */
static const char flat_columns[]
    = "region passage mark origin label frame frame_checksum method program_version field_used "
      "size time time_source kind "
      "instrument scale person vantage leading_lat_deg leading_carrington_lon_deg "
      "following_lat_deg following_carrington_lon_deg "
      "lat_deg cmd_deg stonyhurst_lon_deg carrington_lon_deg mu axis_bearing_deg axis_tilt_deg "
      "tilt_sigma_deg separation_deg "
      "separation_sigma_deg separation_mm compactness pieces leading_polarity leading_sure "
      "flux_unsigned_mx flux_positive_mx "
      "flux_negative_mx imbalance magnetic_area_msh class axial_dipole_gauss floor_gauss "
      "floor_kind cautions r_schrijver_mx strong_gradient_length_mm gradient_weighted_length_gauss "
      "flux_near_line_mx strong_pieces delta_candidate complexity_mu external_number";

static char *
query_text (Fixture *f, const char *sql)
{
  return fixture_sql_text (f->path, sql);
}

static void
test_views (Fixture *f, gconstpointer data)
{
  fill_frames (f->ledger, (int[]){ 1 }, 1);
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  gint64 mark = fixture_keep (f->ledger, 1, person, fixture_hint (f->ledger, 0), 0, 11);
  g_assert_true (tf_ledger_set_class (f->ledger, fixture_region (f->ledger, mark), 1, person, "βδ",
                                      "magnetogram", NULL));
  const char *const views[] = { "marks", "hints" };
  for (guint k = 0; k < G_N_ELEMENTS (views); k++)
    {
      g_autofree char *sql = g_strdup_printf (
          "SELECT group_concat (name, ' ') FROM pragma_table_info ('%s')", views[k]);
      g_autofree char *columns = query_text (f, sql);
      g_assert_cmpstr (columns, ==, flat_columns);
    }
  g_autofree char *row = query_text (
      f,
      "SELECT region || ' ' || origin || ' ' || time || ' ' || kind || ' ' || class || ' ' || "
      "leading_lat_deg || ' ' || following_lat_deg || ' ' || floor_kind || ' ' || size FROM marks");
  /* frame 11 of the fixture: 2013-10-12T06:00 and 11 times six hours */
  g_assert_cmpstr (row, ==,
                   "T2013-0001 kept as hinted 2013-10-15T00:00:00Z disk βδ 17.2 18.4 even region");
  g_autofree char *counts = query_text (
      f, "SELECT (SELECT count (*) FROM hints) || ' ' || (SELECT marks || ' ' || hints FROM frames)"
         " || ' ' || (SELECT region || ' ' || marks FROM regions)");
  g_assert_cmpstr (counts, ==, "2 1 2 T2013-0001 1");
  g_autofree char *kinds
      = query_text (f, "SELECT group_concat (kind || ':' || coalesce (person, '-')) FROM journal");
  g_assert_cmpstr (kinds, ==, "begin:-,person:north,keep:north,class:north");
}

void
add_machine_tests (void)
{
  FIXTURE_TEST ("/ledger/machine/a-frame-is-put-in-once-and-its-place-kept", test_frame_once);
  FIXTURE_TEST ("/ledger/machine/what-a-header-said-comes-back", test_info_comes_back);
  FIXTURE_TEST ("/ledger/machine/frames-without-a-time-come-last", test_unknown_times_last);
  FIXTURE_TEST ("/ledger/machine/hints-are-put-in-once-and-none-counts-too", test_hints_once);
  FIXTURE_TEST ("/ledger/machine/a-newer-rule-takes-the-place-of-open-hints", test_newer_rule);
  FIXTURE_TEST ("/ledger/machine/parts-gathered-are-a-single-run", test_gather);
  FIXTURE_TEST ("/ledger/machine/views-have-the-flat-columns", test_views);
}
