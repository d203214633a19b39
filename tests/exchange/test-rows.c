/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-rows.h"

#include <glib/gstdio.h>
#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-export.h"
#include "tf-hint.h"

/* Rows from a ledger with the demo frame of 2013-10-12: its hints, one of them kept by a person. */

typedef struct
{
  char *folder, *path;
  TfLedger *ledger;
  guint n_hints;
} Fixture;

static void
keep_first (TfLedger *ledger, gint64 frame, GError **error)
{
  TfRowQuery query = { .hints = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, error);
  g_assert_no_error (*error);
  const TfRow *hint = g_ptr_array_index (rows, 0);
  TfMarkDeed deed = { .frame = frame,
                      .person = tf_ledger_person (ledger, "north", error),
                      .hint = hint->mark,
                      .origin = TF_MARK_KEPT,
                      .outline = hint->outline,
                      .measure = &hint->measure,
                      .method = "flux-centroid/1 kept",
                      .label = "gannet" };
  g_assert_cmpint (tf_ledger_keep (ledger, &deed, error), >, 0);
  g_assert_no_error (*error);
}

static void
set_up (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *file = g_build_filename (data, "brindle-20131012-0600.fits", NULL);
  TfFrameSpec spec = { 0 };
  TfHintParams params;
  TfMeasureParams measure;
  f->folder = g_dir_make_tmp ("tf-exchange-XXXXXX", NULL);
  f->path = g_build_filename (f->folder, "test.ledger", NULL);
  g_autoptr (TfFrame) frame = tf_frame_open (file, &spec, NULL, &error);
  g_assert_no_error (error);
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  g_autoptr (GPtrArray) hints = tf_hints_find (frame, &params, &measure, NULL, &error);
  g_assert_no_error (error);
  f->n_hints = hints->len;
  f->ledger = tf_ledger_create (f->path, 'T', &error);
  g_assert_no_error (error);
  gint64 id
      = tf_ledger_add_frame (f->ledger, file, "aa", 2, 1, tf_frame_get_info (frame), 8.0, &error);
  g_assert_no_error (error);
  g_assert_true (tf_ledger_add_hints (f->ledger, id, "rule/1", hints, "flux-centroid/1", &error));
  keep_first (f->ledger, id, &error);
}

static void
tear_down (Fixture *f, gconstpointer data)
{
  const char *name;
  tf_ledger_close (f->ledger);
  g_autoptr (GDir) dir = g_dir_open (f->folder, 0, NULL);
  while ((name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (f->folder, name, NULL);
      g_unlink (path);
    }
  g_rmdir (f->folder);
  g_free (f->folder);
  g_free (f->path);
}

static const TfColumn *
column (const char *name)
{
  for (const TfColumn *c = tf_columns; c->name != NULL; c++)
    if (strcmp (c->name, name) == 0)
      return c;
  g_assert_not_reached ();
}

static char *
text_of (const TfExportRow *row, const char *name)
{
  return column (name)->text (row);
}

static void
test_marks_alone (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GArray) rows = tf_export_rows (f->ledger, study, FALSE, &keep, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (rows->len, ==, 1);
  const TfExportRow *row = &g_array_index (rows, TfExportRow, 0);
  g_autofree char *person = text_of (row, "person"), *label = text_of (row, "label"),
                  *origin = text_of (row, "origin");
  g_autofree char *region = text_of (row, "region"), *frame = text_of (row, "frame"),
                  *time = text_of (row, "time");
  g_assert_cmpstr (person, ==, "north");
  g_assert_cmpstr (label, ==, "gannet");
  g_assert_cmpstr (origin, ==, "kept as hinted");
  g_assert_true (g_str_has_prefix (region, "T2013-"));
  g_assert_cmpstr (frame, ==, "brindle-20131012-0600.fits");
  g_assert_cmpstr (time, ==, "2013-10-12T06:00:00.000Z");
  tf_check_near ("cycle", column ("cycle")->number (row), 24.0, 0.0);
  tf_check_near ("simulated", column ("simulated")->number (row), 1.0, 0.0);
}

/* The demo sun has one region that breaks the rule: its row, and no other, says so. */
static void
test_judged_under_the_study (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GArray) rows = tf_export_rows (f->ledger, study, TRUE, &keep, &error);
  guint breaks = 0;
  g_assert_no_error (error);
  g_assert_cmpuint (rows->len, ==, f->n_hints); /* the kept one is a mark now */
  for (guint k = 0; k < rows->len; k++)
    {
      const TfExportRow *row = &g_array_index (rows, TfExportRow, k);
      TfVerdict again = tf_study_judge_measure (study, &row->row->measure);
      g_assert_cmpint (row->verdict.kind, ==, again.kind);
      g_assert_cmpstr (row->verdict.reason, ==, again.reason);
      double tilt = column ("axis_tilt_deg")->number (row),
             polarity = column ("polarity_tilt_deg")->number (row);
      if (row->verdict.kind == TF_VERDICT_KEEPS)
        tf_check_near ("polarity tilt of one that keeps", polarity, tilt, 1e-9);
      if (row->verdict.kind != TF_VERDICT_BREAKS)
        continue;
      breaks++;
      tf_check_angle ("polarity tilt of one that breaks", polarity, tilt + 180.0, 1e-9);
      tf_check_near ("its latitude (truth: -13)", column ("lat_deg")->number (row), -13.0, 0.3);
    }
  g_assert_cmpuint (breaks, ==, 1);
}

void
add_row_tests (const char *demo_folder)
{
  g_test_add ("/exchange/rows/without-hints-a-ledger-gives-the-marks-alone", Fixture, demo_folder,
              set_up, test_marks_alone, tear_down);
  g_test_add ("/exchange/rows/rows-are-judged-under-the-study", Fixture, demo_folder, set_up,
              test_judged_under_the_study, tear_down);
}
