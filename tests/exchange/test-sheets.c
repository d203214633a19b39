/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Shift and region sheets made of a demo frame: what they say, and that they are whole files. */

#include <string.h>
#include <glib/gstdio.h>

#include "test-sheets.h"
#include "tf-check.h"
#include "tf-export.h"
#include "tf-sheets.h"

typedef struct
{
  char *folder;
  TfLedger *ledger;
  TfFrame *frame;
  gint64 person;
  TfRow *row; /* the mark */
} Fixture;

static void
fill (Fixture *f, const char *file)
{
  g_autoptr (GError) error = NULL;
  TfFrameSpec spec = { 0 };
  TfHintParams params;
  TfMeasureParams measure;
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  f->frame = tf_frame_open (file, &spec, NULL, &error);
  g_assert_no_error (error);
  g_autoptr (GPtrArray) hints = tf_hints_find (f->frame, &params, &measure, NULL, &error);
  gint64 id = tf_ledger_add_frame (f->ledger, file, "aa", 2, 1, tf_frame_get_info (f->frame), 8.0, &error);
  g_assert_true (tf_ledger_add_hints (f->ledger, id, "rule/1", hints, "flux-centroid/1", &error));
  const TfHint *hint = g_ptr_array_index (hints, 0);
  const TfMarkDeed deed = { .frame = id, .person = f->person, .outline = hint->outline, .measure = &hint->measure, .method = "flux-centroid/1" };
  gint64 mark = tf_ledger_keep (f->ledger, &deed, &error);
  f->row = tf_ledger_row (f->ledger, mark, FALSE, &error);
  g_assert_no_error (error);
}

static void
set_up (Fixture *f, gconstpointer data)
{
  f->folder = g_dir_make_tmp ("tf-sheets-XXXXXX", NULL);
  g_autofree char *path = g_build_filename (f->folder, "test.ledger", NULL);
  g_autofree char *file = g_build_filename (data, "brindle-20131012-0600.fits", NULL);
  f->ledger = tf_ledger_create (path, 'T', NULL);
  f->person = tf_ledger_person (f->ledger, "north", NULL);
  fill (f, file);
  tf_ledger_set_class (f->ledger, f->row->region_key, f->row->frame, f->person, "βγδ", "magnetogram", NULL);
  tf_ledger_set_note (f->ledger, f->row->region_key, f->person, "growing quickly", NULL);
}

static void
tear_down (Fixture *f, gconstpointer data)
{
  tf_row_free (f->row);
  tf_frame_unref (f->frame);
  tf_ledger_close (f->ledger);
  const char *remove[] = { "rm", "-rf", f->folder, NULL };
  g_spawn_sync (NULL, (char **)remove, NULL, G_SPAWN_SEARCH_PATH, NULL, NULL, NULL, NULL, NULL, NULL);
  g_free (f->folder);
}

static char *
read_file (Fixture *f, const char *name, gsize *n)
{
  g_autofree char *path = g_build_filename (f->folder, name, NULL);
  char *text = NULL;
  g_assert_true (g_file_get_contents (path, &text, n, NULL));
  return text;
}

static void
test_shift_json (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_build_filename (f->folder, "shift.json", NULL);
  g_autoptr (TfShift) shift = tf_shift_read (f->ledger, 0, &error);
  g_assert_true (tf_shift_write (path, shift, "north desk", &error));
  g_assert_no_error (error);
  g_autofree char *text = read_file (f, "shift.json", NULL);
  g_autoptr (JsonNode) root = json_from_string (text, &error);
  g_assert_no_error (error);
  JsonObject *sheet = json_node_get_object (root);
  JsonArray *regions = json_object_get_array_member (sheet, "regions");
  JsonObject *first = json_array_get_object_element (regions, 0);
  g_assert_cmpstr (json_object_get_string_member (sheet, "desk"), ==, "north desk");
  g_assert_cmpstr (json_object_get_string_member (first, "class"), ==, "βγδ");
  g_assert_cmpstr (json_object_get_string_member (first, "region"), ==, "T2013-0001");
  g_assert_cmpstr (json_object_get_string_member (first, "group"), ==, "class");
  g_assert_true (json_object_get_null_member (json_object_get_object_member (first, "r_schrijver_mx"), "now"));
  JsonObject *note = json_array_get_object_element (json_object_get_array_member (first, "notes"), 0);
  g_assert_cmpstr (json_object_get_string_member (note, "text"), ==, "growing quickly");
  g_assert_cmpstr (json_object_get_string_member (note, "state"), ==, "new");
  g_assert_nonnull (strstr (text, "not a flare forecast"));
  g_assert_nonnull (strstr (text, "national space-weather service"));
}

static gboolean
holds (const char *bytes, gsize n, const char *words)
{
  gsize m = strlen (words);
  for (gsize k = 0; k + m <= n; k++)
    if (memcmp (bytes + k, words, m) == 0)
      return TRUE;
  return FALSE;
}

static void
test_pages (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfShift) shift = tf_shift_read (f->ledger, 0, &error);
  TfRegionPage page = { .frame = f->frame, .row = f->row, .shift = g_ptr_array_index (shift->rows, 0), .since = TF_TIME_UNKNOWN, .study = study };
  tf_measure_params_init (&page.measure);
  const char *const names[] = { "shift.pdf", "region.pdf" };
  for (guint k = 0; k < 2; k++)
    {
      gsize n = 0;
      g_autofree char *path = g_build_filename (f->folder, names[k], NULL);
      g_assert_true (k == 0 ? tf_shift_write (path, shift, NULL, &error) : tf_region_page_write (path, &page, &error));
      g_assert_no_error (error);
      g_autofree char *text = read_file (f, names[k], &n);
      g_assert_true (g_str_has_prefix (text, "%PDF-"));
      g_assert_true (holds (text, n, "/Count 1\n")); /* one page */
      g_assert_true (holds (text + n - 8, 8, "%%EOF"));
    }
  g_autofree char *bad = g_build_filename (f->folder, "shift.doc", NULL);
  g_assert_false (tf_shift_write (bad, shift, NULL, &error));
  g_assert_error (error, TF_CHART_ERROR, TF_CHART_ERROR_ENDING);
}

void
add_sheet_tests (const char *demo_folder)
{
  g_test_add ("/exchange/sheets/the-shift-as-json-has-class-notes-and-cautions", Fixture, demo_folder, set_up, test_shift_json, tear_down);
  g_test_add ("/exchange/sheets/both-sheets-are-files-of-one-page", Fixture, demo_folder, set_up, test_pages, tear_down);
}
