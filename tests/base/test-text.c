/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-base.h"

#include <gio/gio.h>
#include <glib/gstdio.h>
#include <locale.h>
#include <string.h>

#include "tf-check.h"
#include "tf-json.h"
#include "tf-number.h"

/* -- numbers --------------------------------------------------------------------------------- */

static void
check_number (double value, const char *expected)
{
  double back;
  g_autofree char *text = tf_number_dup (value);
  g_assert_cmpstr (text, ==, expected);
  g_assert_true (tf_number_read (text, &back));
  tf_check_near (expected, back, value, 0.0);
}

static void
test_numbers (void)
{
  check_number (0.0, "0");
  check_number (0.1, "0.1");
  check_number (-1.5, "-1.5");
  check_number (1e22, "1e+22");
  check_number (1.0 / 3.0, "0.3333333333333333");
  check_number (0.1 + 0.2, "0.30000000000000004");
  check_number (5e-324, "4.94065645841247e-324");
  check_number (1.7976931348623157e308, "1.7976931348623157e+308");
  g_autofree char *nan = tf_number_dup (NAN), *inf = tf_number_dup (-INFINITY);
  g_assert_cmpstr (nan, ==, "nan");
  g_assert_cmpstr (inf, ==, "-inf");
}

static void
test_read (void)
{
  double value = 7.0;
  gint64 whole = 7;
  const char *const bad[] = { "",     " ",     "nan", "inf", "-inf", "1,5", "1.5x",
                              "0x10", "1e999", "1 2", "+-1", ".",    "e5",  "1e" };
  for (guint k = 0; k < G_N_ELEMENTS (bad); k++)
    if (tf_number_read (bad[k], &value))
      {
        g_printerr ("# \"%s\" was read as a number\n", bad[k]);
        g_test_fail ();
      }
  g_assert_false (tf_number_read (NULL, &value));
  tf_check_near ("untouched", value, 7.0, 0.0);
  g_assert_true (tf_number_read (" +1.5e3\n", &value));
  tf_check_near ("blanks and plus", value, 1500.0, 0.0);
  g_assert_true (tf_number_read_int (" -42 ", &whole));
  g_assert_cmpint (whole, ==, -42);
  g_assert_true (tf_number_read_int ("+8", &whole));
  g_assert_cmpint (whole, ==, 8);
  g_assert_false (tf_number_read_int ("8.0", &whole));
  g_assert_false (tf_number_read_int ("", &whole));
  g_assert_false (tf_number_read_int ("99999999999999999999", &whole));
}

static void
check_form (double value, const char *form, const char *expected)
{
  g_autofree char *text = tf_number_dup_form (value, form, FALSE);
  g_assert_cmpstr (text, ==, expected);
}

static void
test_forms (void)
{
  check_form (3.14159, ".2f", "3.14");
  check_form (3.14159, "+.1f", "+3.1");
  check_form (314159.0, ".3g", "3.14e+05");
  check_form (3.5, "", "3.5");
  check_form (3.5, "s", "3.5"); /* a form that is none is not handed to printf */
  check_form (3.5, "n", "3.5");
  check_form (3.5, "*.2f", "3.5");
}

/* Sets LC_NUMERIC to a locale with a decimal comma, made with localedef where none is installed. */
static gboolean
use_decimal_comma (const char *folder)
{
  const char *const names[] = { "de_DE.UTF-8", "de_DE.utf8", "fr_FR.UTF-8" };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    if (setlocale (LC_NUMERIC, names[k]) != NULL)
      return TRUE;
  g_autofree char *out = g_build_filename (folder, "de_DE.UTF-8", NULL);
  const char *argv[] = { "localedef", "-i", "de_DE", "-f", "UTF-8", out, NULL };
  if (!g_spawn_sync (NULL, (char **)argv, NULL,
                     G_SPAWN_SEARCH_PATH | G_SPAWN_STDERR_TO_DEV_NULL | G_SPAWN_STDOUT_TO_DEV_NULL,
                     NULL, NULL, NULL, NULL, NULL, NULL))
    return FALSE;
  g_setenv ("LOCPATH", folder, TRUE);
  return setlocale (LC_NUMERIC, "de_DE.UTF-8") != NULL;
}

static void
remove_folder (const char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  const char *name;
  while (dir != NULL && (name = g_dir_read_name (dir)) != NULL)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_DIR))
        remove_folder (path);
      else
        g_unlink (path);
    }
  g_rmdir (folder);
}

static void
check_under_comma (void)
{
  char plain[16];
  double value;
  g_snprintf (plain, sizeof plain, "%.1f", 0.5);
  g_assert_cmpstr (plain, ==, "0,5"); /* the locale is really in force */
  g_autofree char *file = tf_number_dup (0.5), *form = tf_number_dup_form (0.5, ".2f", FALSE);
  g_autofree char *local = tf_number_dup_form (1234.5, ".2f", TRUE),
                  *whole = tf_number_dup_form (7.0, ".0f", TRUE);
  g_assert_cmpstr (file, ==, "0.5");
  g_assert_cmpstr (form, ==, "0.50");
  g_assert_cmpstr (local, ==, "1234,50");
  g_assert_cmpstr (whole, ==, "7");
  g_assert_true (tf_number_read ("2.25", &value));
  tf_check_near ("read", value, 2.25, 0.0);
  g_assert_false (tf_number_read ("2,25", &value));
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_number (builder, "x", 1.25);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_assert_cmpstr (text, ==, "{\"x\":1.25}");
  g_autoptr (JsonNode) node = json_from_string (text, NULL);
  tf_check_near ("JSON", tf_json_member_number (json_node_get_object (node), "x"), 1.25, 0.0);
}

static void
test_decimal_comma (void)
{
  g_autofree char *before = g_strdup (setlocale (LC_NUMERIC, NULL));
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-XXXXXX", NULL);
  g_assert_nonnull (folder);
  if (use_decimal_comma (folder))
    check_under_comma ();
  else
    g_test_skip ("no locale with a decimal comma is installed, and localedef could make none");
  setlocale (LC_NUMERIC, before);
  g_unsetenv ("LOCPATH");
  remove_folder (folder);
}

/* -- JSON ------------------------------------------------------------------------------------ */

static JsonBuilder *
sample (void)
{
  JsonBuilder *builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_string (builder, "text", "a\"b\\c\n\t\001é/");
  tf_json_string (builder, "none", NULL);
  tf_json_number (builder, "nan", NAN);
  tf_json_number (builder, "inf", INFINITY);
  tf_json_number (builder, "tenth", 0.1);
  tf_json_int (builder, "int", G_MININT64);
  tf_json_bool (builder, "yes", TRUE);
  tf_json_null (builder, "null");
  tf_json_numbers (builder, "list", (const double[]){ 1.0, NAN, -2.5 }, 3);
  json_builder_end_object (builder);
  return builder;
}

static const char sample_text[]
    = "{\"text\":\"a\\\"b\\\\c\\n\\t\\u0001é/\",\"none\":null,\"nan\":null,\"inf\":null,"
      "\"tenth\":0.1,\"int\":-9223372036854775808,\"yes\":true,\"null\":null,"
      "\"list\":[1,null,-2.5]}";

static void
test_json_compact (void)
{
  g_autoptr (JsonBuilder) builder = sample ();
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_assert_cmpstr (text, ==, sample_text);
}

static void
test_json_pretty (void)
{
  g_autoptr (JsonBuilder) builder = sample ();
  g_autofree char *pretty = tf_json_dup_text (builder, TRUE);
  g_autoptr (JsonNode) node = json_from_string (pretty, NULL);
  g_autofree char *text = tf_json_node_dup_text (node, FALSE);
  g_assert_cmpstr (text, ==, sample_text);
  g_assert_nonnull (strstr (pretty, "\n  \"tenth\": 0.1,\n"));
}

static void
test_json_members (void)
{
  g_autoptr (JsonNode) node = json_from_string (sample_text, NULL);
  JsonObject *object = json_node_get_object (node);
  g_assert_cmpstr (tf_json_member_string (object, "text"), ==, "a\"b\\c\n\t\001é/");
  g_assert_null (tf_json_member_string (object, "none"));
  g_assert_null (tf_json_member_string (object, "tenth"));
  g_assert_null (tf_json_member_string (object, "absent"));
  g_assert_null (tf_json_member_string (NULL, "text"));
  tf_check_near ("a number", tf_json_member_number (object, "tenth"), 0.1, 0.0);
  tf_check_near ("an integer as a number", tf_json_member_number (object, "int"),
                 -9223372036854775808.0, 0.0);
  tf_check_nan ("null", tf_json_member_number (object, "nan"));
  tf_check_nan ("a text", tf_json_member_number (object, "text"));
  tf_check_nan ("absent", tf_json_member_number (object, "absent"));
  g_assert_cmpint (tf_json_member_int (object, "int", 3), ==, G_MININT64);
  g_assert_cmpint (tf_json_member_int (object, "text", 3), ==, 3);
  g_assert_true (tf_json_member_bool (object, "yes", FALSE));
  g_assert_true (tf_json_member_bool (object, "tenth", TRUE));
  g_assert_null (tf_json_member_object (object, "list"));
  JsonArray *list = tf_json_member_array (object, "list");
  g_assert_nonnull (list);
  tf_check_near ("element 0", tf_json_element_number (list, 0), 1.0, 0.0);
  tf_check_nan ("element 1", tf_json_element_number (list, 1));
  tf_check_nan ("element 3", tf_json_element_number (list, 3));
  g_assert_null (tf_json_element_string (list, 0));
}

void
add_text_tests (void)
{
  g_test_add_func ("/base/number/fewest-digits-that-read-back-the-same", test_numbers);
  g_test_add_func ("/base/number/reading-is-strict", test_read);
  g_test_add_func ("/base/number/only-number-forms-are-printed", test_forms);
  g_test_add_func ("/base/number/files-keep-the-point-under-a-decimal-comma", test_decimal_comma);
  g_test_add_func ("/base/json/what-is-no-number-is-null-and-text-is-escaped", test_json_compact);
  g_test_add_func ("/base/json/indented-text-says-the-same", test_json_pretty);
  g_test_add_func ("/base/json/members-of-the-wrong-kind-are-not-there", test_json_members);
}
