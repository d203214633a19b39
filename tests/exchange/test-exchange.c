/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gstdio.h>
#include <locale.h>
#include <math.h>
#include <string.h>

#include "made-rows.h"
#include "tf-check.h"
#include "tf-json.h"
#include "tf-mount-wilson.h"
#include "test-rows.h"
#include "test-sheets.h"

/* The names that other people's scripts rely on, in their order. */
static const char *const names
    = "region passage mark origin label frame frame_checksum method program_version field_used "
      "size time time_source kind "
      "instrument scale person vantage leading_lat_deg leading_carrington_lon_deg "
      "following_lat_deg "
      "following_carrington_lon_deg lat_deg cmd_deg stonyhurst_lon_deg carrington_lon_deg mu "
      "axis_bearing_deg axis_tilt_deg "
      "polarity_tilt_deg tilt_sigma_deg separation_deg separation_sigma_deg separation_mm "
      "compactness pieces "
      "leading_polarity leading_sure flux_unsigned_mx flux_positive_mx flux_negative_mx imbalance "
      "magnetic_area_msh cycle "
      "cycle_sure hale hale_reason class axial_dipole_gauss floor_gauss floor_kind cautions";

static char *
write_out (const char *ending, gsize *n)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = made_rows_new (&keep);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GError) error = NULL;
  g_autofree char *folder = g_dir_make_tmp ("tf-exchange-XXXXXX", NULL);
  g_autofree char *path = g_build_filename (folder, "out", NULL),
                  *whole = g_strconcat (path, ending, NULL);
  char *text = NULL;
  g_assert_true (tf_export_write (whole, rows, study, "tests/exchange", &error));
  g_assert_no_error (error);
  g_assert_true (g_file_get_contents (whole, &text, n, NULL));
  g_unlink (whole);
  g_assert_cmpint (g_rmdir (folder), ==, 0); /* nothing else was left there */
  return text;
}

static void
test_names (void)
{
  g_auto (GStrv) want = g_strsplit (names, " ", -1);
  for (guint k = 0; want[k] != NULL; k++)
    g_assert_cmpstr (tf_columns[k].name, ==, want[k]);
  g_autoptr (GHashTable) seen = g_hash_table_new (g_str_hash, g_str_equal);
  for (const TfColumn *c = tf_columns; c->name != NULL; c++)
    {
      g_assert_true (g_hash_table_add (seen, (gpointer)c->name));
      g_assert_cmpuint (strlen (c->description), >, 5);
      g_assert_cmpuint (strlen (c->description), <=, 67); /* one card of a FITS header */
      g_assert_true ((c->type == TF_COLUMN_TEXT) == (c->text != NULL));
      g_assert_true ((c->type == TF_COLUMN_TEXT) == (c->number == NULL));
      g_assert_cmpint (g_str_has_suffix (c->name, "_deg"), ==, strcmp (c->vo_unit, "deg") == 0);
      g_assert_cmpint (g_str_has_suffix (c->name, "_mx"), ==, strcmp (c->vo_unit, "1e-8Wb") == 0);
      g_assert_cmpint (g_str_has_suffix (c->name, "_gauss"), ==, strcmp (c->vo_unit, "1e-4T") == 0);
    }
}

/* A reader of RFC 4180 text, written here: cells of the lines after the '#' lines. */
static GPtrArray *
read_csv (const char *text)
{
  GPtrArray *lines = g_ptr_array_new_with_free_func ((GDestroyNotify)g_ptr_array_unref);
  while (*text == '#')
    text = strstr (text, "\r\n") + 2;
  while (*text != '\0')
    {
      GPtrArray *line = g_ptr_array_new_with_free_func (g_free);
      gboolean more = TRUE;
      while (more)
        {
          GString *cell = g_string_new (NULL);
          gboolean quoted = *text == '"';
          text += quoted;
          while (quoted ? (*text != '"' || text[1] == '"') : (*text != ',' && *text != '\r'))
            {
              text += quoted && *text == '"';
              g_string_append_c (cell, *text++);
            }
          text += quoted;
          more = *text == ',';
          text += more ? 1 : 2;
          g_ptr_array_add (line, g_string_free (cell, FALSE));
        }
      g_ptr_array_add (lines, line);
    }
  return lines;
}

static const char *
cell (const GPtrArray *lines, guint row, const char *name)
{
  const GPtrArray *head = g_ptr_array_index (lines, 0), *line = g_ptr_array_index (lines, row + 1);
  g_assert_cmpuint (line->len, ==, head->len);
  for (guint k = 0; k < head->len; k++)
    if (strcmp (g_ptr_array_index (head, k), name) == 0)
      return g_ptr_array_index (line, k);
  g_assert_not_reached ();
}

static void
check_csv (const char *text)
{
  g_autoptr (GPtrArray) lines = read_csv (text);
  g_assert_cmpuint (lines->len, ==, 5);
  g_assert_cmpstr (cell (lines, 0, "region"), ==, "T2013-0412");
  g_assert_cmpstr (cell (lines, 0, "frame"), ==, "brindle-20131012-0600.fits");
  g_assert_cmpstr (cell (lines, 0, "time"), ==, "2013-10-12T06:00:00.000Z");
  g_assert_cmpstr (cell (lines, 0, "axis_tilt_deg"), ==, "4.8");
  g_assert_cmpstr (cell (lines, 0, "polarity_tilt_deg"), ==, "4.8");
  g_assert_cmpstr (cell (lines, 0, "leading_lat_deg"), ==, "12.6");
  g_assert_cmpstr (cell (lines, 0, "following_carrington_lon_deg"), ==, "171.2");
  g_assert_cmpstr (cell (lines, 0, "leading_polarity"), ==, "-1");
  g_assert_cmpstr (cell (lines, 0, "leading_sure"), ==, "true");
  g_assert_cmpstr (cell (lines, 0, "cycle"), ==, "24");
  g_assert_cmpstr (cell (lines, 0, "hale"), ==, "keeps");
  g_assert_cmpstr (cell (lines, 0, "hale_reason"), ==, "");
  g_assert_cmpstr (cell (lines, 0, "class_base"), ==, "beta-gamma");
  g_assert_cmpstr (cell (lines, 0, "class_delta"), ==, "false");
  g_assert_cmpstr (cell (lines, 0, "floor_kind"), ==, "even");
  g_assert_cmpstr (cell (lines, 0, "size"), ==, "region");
  tf_check_near ("flux", g_ascii_strtod (cell (lines, 0, "flux_unsigned_mx"), NULL), 1.79e22, 1e7);
  tf_check_near ("area", g_ascii_strtod (cell (lines, 0, "magnetic_area_msh"), NULL), 1790.0, 1e-9);
  g_assert_cmpstr (cell (lines, 1, "leading_sure"), ==, "");
  g_assert_cmpstr (cell (lines, 1, "unipolar"), ==, "true");
  g_assert_cmpstr (cell (lines, 1, "hale"), ==, "cannot say");
  g_assert_cmpstr (cell (lines, 1, "hale_reason"), ==, "hale-no-polarity");
  g_assert_cmpstr (cell (lines, 2, "region"), ==, "#1, \"so called\"");
  g_assert_cmpstr (cell (lines, 2, "label"), ==, "two\r\nlines, <and> & more");
  g_assert_cmpstr (cell (lines, 2, "class_delta"), ==, "true");
  g_assert_cmpstr (cell (lines, 2, "instrument"), ==, " blanks about ");
  static const char *const missing[] = {
    "region",         "scale",         "leading_lat_deg", "axis_tilt_deg", "polarity_tilt_deg",
    "tilt_sigma_deg", "separation_mm", "cycle",           "cycle_sure",    "class_delta"
  };
  for (guint k = 0; k < G_N_ELEMENTS (missing); k++)
    g_assert_cmpstr (cell (lines, 1, missing[k]), ==, "");
  g_assert_cmpstr (cell (lines, 3, "time"), ==, "");
  g_assert_cmpstr (cell (lines, 3, "mu"), ==, "");
  g_assert_cmpstr (cell (lines, 3, "size"), ==, "ephemeral");
}

static void
test_csv (void)
{
  g_autofree char *text = write_out (".csv", NULL);
  static const char *const facts[] = {
    "# program: Tiltfield ",    "# method: ", "# floor: even, 48.2 G (3 rows)", "# convention: ",
    "# source: tests/exchange", "# study: ",  "# rows: 4, of which hints 1"
  };
  for (guint k = 0; k < G_N_ELEMENTS (facts); k++)
    if (strstr (text, facts[k]) == NULL)
      g_error ("no line \"%s\"", facts[k]);
  check_csv (text);
}

/* A locale with a decimal comma, made with localedef in a folder of its own. FALSE where that
 * cannot be. */
static gboolean
use_comma_locale (const char *folder)
{
  g_autofree char *made = g_build_filename (folder, "de_DE.UTF-8", NULL);
  const char *words[] = { "localedef", "-i", "de_DE", "-f", "UTF-8", made, NULL };
  if (!g_spawn_sync (NULL, (char **)words, NULL, G_SPAWN_SEARCH_PATH | G_SPAWN_STDERR_TO_DEV_NULL,
                     NULL, NULL, NULL, NULL, NULL, NULL))
    return FALSE;
  g_setenv ("LOCPATH", folder, TRUE);
  return setlocale (LC_ALL, "de_DE.UTF-8") != NULL
         && strcmp (localeconv ()->decimal_point, ",") == 0;
}

static void
remove_tree (const char *folder)
{
  const char *name;
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  while (dir != NULL && (name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR))
        remove_tree (path);
      else
        g_unlink (path);
    }
  g_rmdir (folder);
}

static void
test_same_in_any_locale (void)
{
  static const char *const endings[] = { ".csv", ".vot", ".json", ".fits" };
  g_autofree char *old = g_strdup (setlocale (LC_ALL, NULL)),
                  *folder = g_dir_make_tmp ("tf-locale-XXXXXX", NULL);
  char *plain[4], *comma[4];
  gsize n_plain[4], n_comma[4];
  for (guint k = 0; k < 4; k++)
    plain[k] = write_out (endings[k], &n_plain[k]);
  gboolean there = use_comma_locale (folder);
  for (guint k = 0; k < 4; k++)
    comma[k] = write_out (endings[k], &n_comma[k]);
  setlocale (LC_ALL, old);
  g_unsetenv ("LOCPATH");
  remove_tree (folder);
  for (guint k = 0; k < 4; k++)
    {
      g_assert_cmpmem (plain[k], n_plain[k], comma[k], n_comma[k]);
      g_free (plain[k]);
      g_free (comma[k]);
    }
  if (!there)
    g_test_skip ("no locale with a decimal comma can be made here");
}

static void
test_json (void)
{
  g_autofree char *text = write_out (".json", NULL);
  g_autoptr (GError) error = NULL;
  g_autoptr (JsonNode) root = json_from_string (text, &error);
  g_assert_no_error (error);
  JsonArray *rows = tf_json_member_array (json_node_get_object (root), "rows");
  g_assert_cmpuint (json_array_get_length (rows), ==, 4);
  JsonObject *full = json_array_get_object_element (rows, 0),
             *hint = json_array_get_object_element (rows, 1);
  for (const TfColumn *c = tf_columns; c->name != NULL; c++)
    {
      g_assert_true (json_object_has_member (full, c->name));
      g_assert_true (json_object_has_member (hint, c->name));
    }
  tf_check_near ("tilt", tf_json_member_number (full, "axis_tilt_deg"), 4.8, 0.0);
  g_assert_true (tf_json_member_bool (full, "leading_sure", FALSE));
  g_assert_true (json_object_get_null_member (hint, "axis_tilt_deg"));
  g_assert_true (json_object_get_null_member (hint, "region"));
  g_assert_true (json_object_get_null_member (hint, "cycle"));
}

static void
test_no_rows (void)
{
  static const char *const endings[] = { "out.csv", "out.vot", "out.fits", "out.json" };
  g_autoptr (GArray) rows = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  g_autofree char *folder = g_dir_make_tmp ("tf-exchange-XXXXXX", NULL);
  for (guint k = 0; k < G_N_ELEMENTS (endings); k++)
    {
      g_autofree char *path = g_build_filename (folder, endings[k], NULL);
      g_autoptr (GError) error = NULL;
      g_assert_true (tf_export_write (path, rows, NULL, NULL, &error));
      g_assert_no_error (error);
      g_assert_cmpint (g_unlink (path), ==, 0);
    }
  g_rmdir (folder);
}

static void
test_errors (void)
{
  static const char *const endings[] = { ".csv", ".vot", ".fits", ".json" };
  g_autoptr (GArray) rows = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  g_autoptr (GError) format = NULL;
  g_assert_false (tf_export_write ("out.xyz", rows, NULL, NULL, &format));
  g_assert_error (format, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT);
  g_assert_nonnull (strstr (format->message, "out.xyz"));
  for (guint k = 0; k < G_N_ELEMENTS (endings); k++)
    {
      g_autoptr (GError) error = NULL;
      g_autofree char *path = g_strconcat ("/no/such/folder/out", endings[k], NULL);
      g_assert_false (tf_export_write (path, rows, NULL, NULL, &error));
      g_assert_error (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_WRITE);
      g_assert_nonnull (strstr (error->message, path));
    }
}

static void
test_mount_wilson (void)
{
  static const struct
  {
    const char *text, *ascii, *base;
    int delta;
  } rows[] = {
    { "\xce\xb1", "alpha", "alpha", 0 },
    { "\xce\xb2\xce\xb3\xce\xb4", "beta-gamma-delta", "beta-gamma", 1 },
    { "Beta-Gamma", "beta-gamma", "beta-gamma", 0 },
    { "BETA \xce\xb4", "beta-delta", "beta", 1 },
    { "\xce\x92-\xce\x94", "beta-delta", "beta", 1 }, /* capitals */
    { "gamma", "gamma", "gamma", 0 },
    { "betagammadelta", "beta-gamma-delta", "beta-gamma", 1 },
    { "unclear", "unclear", "", -1 },
    { "", "", "", -1 },
    { NULL, "", "", -1 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autofree char *ascii = tf_mount_wilson_dup_ascii (rows[k].text),
                      *base = tf_mount_wilson_dup_base (rows[k].text);
      g_assert_cmpstr (ascii, ==, rows[k].ascii);
      g_assert_cmpstr (base, ==, rows[k].base);
      g_assert_cmpint (tf_mount_wilson_delta (rows[k].text), ==, rows[k].delta);
    }
}

int
main (int argc, char **argv)
{
  /* Ledgers keep a state beside the user's files. (The isolated folders of GLib's own tests leak in 2.74.) */
  g_autofree char *state = g_dir_make_tmp ("tiltfield-state-XXXXXX", NULL);
  g_setenv ("XDG_STATE_HOME", state, TRUE);
  g_test_init (&argc, &argv, NULL);
  g_test_add_func ("/exchange/columns/every-name-stands-in-its-place-with-its-unit", test_names);
  g_test_add_func ("/exchange/csv/values-missing-ones-and-quotes-are-read-back", test_csv);
  g_test_add_func ("/exchange/json/every-column-is-there-and-missing-is-null", test_json);
  g_test_add_func ("/exchange/write/the-locale-changes-nothing", test_same_in_any_locale);
  g_test_add_func ("/exchange/write/a-table-without-rows-is-a-table", test_no_rows);
  g_test_add_func ("/exchange/write/errors-name-the-file-and-leave-nothing", test_errors);
  g_test_add_func ("/exchange/mount-wilson/greek-and-names-are-taken-apart", test_mount_wilson);
  add_daily_summary_tests ();
  add_bring_tests ();
  add_bundle_tests ();
  if (argc > 1)
    {
      add_row_tests (argv[1]);
      add_sheet_tests (argv[1]);
    }
  int result = g_test_run ();
  const char *remove[] = { "rm", "-rf", state, NULL };
  g_spawn_sync (NULL, (char **)remove, NULL, G_SPAWN_SEARCH_PATH, NULL, NULL, NULL, NULL, NULL, NULL);
  return result;
}
