/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-ledger.h"

#include <string.h>

#include "test-ledger-sql.h"

static gint64
fixture_now (gpointer data)
{
  return ((Fixture *)data)->now;
}

TfLedger *
fixture_open (Fixture *f, const char *path, GError **error)
{
  TfLedgerHow how = { .create = TRUE,
                      .letter = 'T',
                      .state_dir = f->state,
                      .busy_ms = 300,
                      .now = fixture_now,
                      .now_data = f };
  return tf_ledger_open_how (path, &how, error);
}

void
fixture_reopen (Fixture *f)
{
  g_autoptr (GError) error = NULL;
  g_clear_pointer (&f->ledger, tf_ledger_close);
  f->ledger = fixture_open (f, f->path, &error);
  g_assert_no_error (error);
}

void
fixture_set_up (Fixture *f, gconstpointer data)
{
  f->folder = g_dir_make_tmp ("tf-ledger-XXXXXX", NULL);
  f->path = g_build_filename (f->folder, "test.ledger", NULL);
  f->state = g_build_filename (f->folder, "state", NULL);
  f->now = G_GINT64_CONSTANT (1381557600000); /* 2013-10-12T06:00:00Z */
  fixture_reopen (f);
}

void
fixture_remove_folder (const char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  const char *name;
  while (dir != NULL && (name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR))
        fixture_remove_folder (path);
      else
        g_unlink (path);
    }
  g_rmdir (folder);
}

void
fixture_tear_down (Fixture *f, gconstpointer data)
{
  g_clear_pointer (&f->ledger, tf_ledger_close);
  fixture_remove_folder (f->folder);
  g_free (f->folder);
  g_free (f->path);
  g_free (f->state);
}

TfFrameInfo *
fixture_info (int n)
{
  TfFrameInfo info = { .kind = TF_KIND_DISK, .role = TF_ROLE_FIELD, .time_source = "T_OBS" };
  info.time = tf_time_add (tf_time_read ("2013-10-12T06:00:00Z"), n * 21600.0);
  info.time_span_s = 720;
  TfObserver observer = { 1.4929e11, 5.9, 0.0, 211.25, TF_OBSERVER_HEADER };
  g_assert_true (
      tf_geometry_make_disk (&info.geometry, 512, 512, 256.5, 256.5, 4.0, 12.5, &observer, 696.0));
  info.instrument = (char *)"Brindle Head";
  info.unit = (char *)"G";
  info.to_gauss = 1;
  info.field = TF_FIELD_LOS;
  info.distance_given_m = info.rotation_number = info.fill_value = NAN;
  info.n_planes = 1;
  info.simulated = TRUE;
  return tf_frame_info_copy (&info);
}

gint64
fixture_frame (TfLedger *ledger, int n)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrameInfo) info = fixture_info (n);
  g_autofree char *checksum = g_strdup_printf ("%064d", n);
  g_autofree char *path = g_strdup_printf ("/frames/%d.fits", n);
  gint64 id = tf_ledger_add_frame (ledger, path, checksum, 1, 1, info, 9.5, &error);
  g_assert_no_error (error);
  g_assert_cmpint (id, >, 0);
  return id;
}

TfOutline *
fixture_outline (int n)
{
  TfTime time = tf_time_add (tf_time_read ("2013-10-12T06:00:00Z"), n * 21600.0);
  return tf_outline_new_cap (time, 200 + n % 50, 17.5, 4, 24);
}

void
fixture_measure (TfMeasure *measure, int n)
{
  *measure = (TfMeasure){ 0 };
  measure->time = tf_time_add (tf_time_read ("2013-10-12T06:00:00Z"), n * 21600.0);
  measure->floor_kind = TF_FLOOR_EVEN;
  measure->floor_gauss = 57.25;
  measure->noise_gauss = 9.5;
  measure->scale = NAN;
  measure->positive = (TfPole){ .flux_mx = 1.25e22 + n,
                                .flux_sigma_mx = 2e20,
                                .lon_deg = -11.3,
                                .carrington_lon_deg = 199.9,
                                .lat_deg = 18.4,
                                .place_sigma_deg = 0.1,
                                .rms_radius_deg = 1.5,
                                .pixels = 411 };
  measure->negative = (TfPole){ .flux_mx = 1.1e22,
                                .flux_sigma_mx = 2e20,
                                .lon_deg = -6.1,
                                .carrington_lon_deg = 205.2,
                                .lat_deg = 17.2,
                                .place_sigma_deg = 0.1,
                                .rms_radius_deg = 1.2,
                                .pixels = 380 };
  measure->leading_polarity = -1;
  measure->leading_sure = TRUE;
  measure->witnesses[0] = measure->witnesses[1] = -1;
  measure->witnesses[2] = n % 2 == 0 ? 1 : TF_WITNESS_ABSENT;
  measure->lat_deg = 17.8;
  measure->carrington_lon_deg = 202.55;
  measure->stonyhurst_lon_deg = measure->cmd_deg = -8.7;
  measure->mu = 0.94;
  measure->axis_bearing_deg = -13.6;
  measure->axis_tilt_deg = n % 5 == 4 ? NAN : 13.6;
  measure->tilt_terms = (TfTiltTerms){ 0.4, 0.9, 0.2, 1.005 };
  measure->separation_deg = 5.2;
  measure->separation_mm = 63.1;
  measure->compactness = 1.9;
  measure->pieces = 2;
  measure->flux_unsigned_mx = 2.35e22 + n;
  measure->imbalance = 0.064;
  measure->axial_dipole_gauss = 1.0 / 3;
  measure->cautions = tf_notes_new ();
}

static void
hint_free (gpointer data)
{
  TfHint *hint = data;
  tf_outline_unref (hint->outline);
  tf_measure_clear (&hint->measure);
  g_ptr_array_unref (hint->cautions);
  g_free (hint);
}

GPtrArray *
fixture_hints (int n)
{
  GPtrArray *hints = g_ptr_array_new_with_free_func (hint_free);
  for (int k = 0; k < 3; k++)
    {
      TfHint *hint = g_new0 (TfHint, 1);
      hint->unipolar = k == 2;
      hint->outline = fixture_outline (10 * n + k);
      fixture_measure (&hint->measure, 10 * n + k);
      hint->cautions = tf_notes_new ();
      g_ptr_array_add (hints, hint);
    }
  return hints;
}

gint64
fixture_keep (TfLedger *ledger, gint64 frame, gint64 person, gint64 hint, gint64 follows, int n)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfOutline) outline = fixture_outline (n);
  g_auto (TfMeasure) measure = { 0 };
  fixture_measure (&measure, n);
  TfMarkDeed deed = { .frame = frame,
                      .person = person,
                      .hint = hint,
                      .follows = follows,
                      .origin = hint != 0 ? TF_MARK_KEPT : TF_MARK_DRAWN,
                      .outline = outline,
                      .measure = &measure,
                      .method = "flux-centroid/1 floor-kind=even",
                      .label = "one" };
  gint64 mark = tf_ledger_keep (ledger, &deed, &error);
  g_assert_no_error (error);
  g_assert_cmpint (mark, >, 0);
  return mark;
}

void
fixture_count (TfLedger *ledger, guint marks, guint hints)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) rows
      = tf_ledger_rows (ledger, &(TfRowQuery){ .marks = TRUE, .hints = TRUE }, &error);
  g_assert_no_error (error);
  g_autoptr (GArray) points = tf_ledger_points (ledger, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (rows->len, ==, marks + hints);
  g_assert_cmpuint (points->len, ==, marks + hints);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      const TfPoint *point = &g_array_index (points, TfPoint, k);
      g_assert_cmpint (row->mark, ==, point->mark);
      g_assert_cmpint (row->is_hint, ==, point->hint);
      g_assert_cmpint (row->frame, ==, point->frame);
      g_assert_cmpint (row->region_key, ==, point->region);
      tf_check_near ("flux of a point", point->flux_mx, row->measure.flux_unsigned_mx, 1e16);
      tf_check_near ("time of a point", point->time.s, row->measure.time.s, 0);
      marks -= row->is_hint ? 0 : 1;
    }
  g_assert_cmpuint (marks, ==, 0);
}

gint64
fixture_region (TfLedger *ledger, gint64 mark)
{
  g_autoptr (TfRow) row = tf_ledger_row (ledger, mark, FALSE, NULL);
  return row != NULL ? row->region_key : 0;
}

gint64
fixture_hint (TfLedger *ledger, guint k)
{
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &(TfRowQuery){ .hints = TRUE }, NULL);
  g_assert_cmpuint (k, <, rows->len);
  return ((TfRow *)g_ptr_array_index (rows, k))->mark;
}

void
fixture_check (TfLedger *ledger, const char *codes)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_assert_true (tf_ledger_check (ledger, findings, &error));
  g_assert_no_error (error);
  g_autofree char *found = tf_notes_dup_codes (findings);
  g_assert_cmpstr (found, ==, codes);
}

gboolean
fixture_finds (TfLedger *ledger, const char *code)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_assert_true (tf_ledger_check (ledger, findings, &error));
  g_assert_no_error (error);
  return tf_notes_find (findings, code) != NULL;
}

void
fixture_sql (const char *path, const char *sql)
{
  sqlite3 *db = NULL;
  g_assert_cmpint (sqlite3_open (path, &db), ==, SQLITE_OK);
  sqlite3_busy_timeout (db, 2000);
  fixture_sql_all (db, sql);
  sqlite3_close (db);
}

char *
fixture_sql_text (const char *path, const char *sql)
{
  sqlite3 *db = NULL;
  sqlite3_stmt *query = NULL;
  g_assert_cmpint (sqlite3_open (path, &db), ==, SQLITE_OK);
  if (sqlite3_prepare_v2 (db, sql, -1, &query, NULL) != SQLITE_OK)
    g_error ("%s: %s", sql, sqlite3_errmsg (db));
  char *text = NULL;
  if (sqlite3_step (query) == SQLITE_ROW)
    text = g_strdup ((const char *)sqlite3_column_text (query, 0));
  sqlite3_finalize (query);
  sqlite3_close (db);
  return text;
}
