/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-base.h"

#include <string.h>

#include "tf-check.h"
#include "tf-json.h"
#include "tf-note.h"

static const TfNoteKind *const tables[]
    = { tf_note_kinds_frame, tf_note_kinds_region, tf_note_kinds_laws, tf_note_kinds_ledger };

/* -- the tables ------------------------------------------------------------------------------ */

static void
check_code (const char *code)
{
  for (const char *p = code; *p != '\0'; p++)
    if (!g_ascii_islower (*p) && !g_ascii_isdigit (*p) && *p != '-')
      {
        g_printerr ("# the note code \"%s\" is not lower case with hyphens\n", code);
        g_test_fail ();
        return;
      }
}

/* Every brace opens {k} or {k:form} with k below 6 and a form that numbers can be printed by. */
static void
check_text (const TfNoteKind *kind)
{
  gboolean good = strlen (kind->text) > 8;
  for (const char *p = kind->text; good && *p != '\0'; p++)
    {
      if (*p == '}')
        good = FALSE;
      if (*p != '{')
        continue;
      const char *end = strchr (p, '}');
      good = end != NULL && p[1] >= '0' && p[1] <= '5' && (p[2] == '}' || p[2] == ':');
      if (good && p[2] == ':')
        good = end - p >= 4 && strchr ("feg", end[-1]) != NULL
               && strspn (p + 3, "+ #0123456789.") == (gsize)(end - p - 4);
      if (end != NULL)
        p = end;
    }
  if (!good)
    {
      g_printerr ("# the text of the note \"%s\" cannot be printed: %s\n", kind->code, kind->text);
      g_test_fail ();
    }
}

static void
test_tables (void)
{
  g_autoptr (GHashTable) seen = g_hash_table_new (g_str_hash, g_str_equal);
  for (guint t = 0; t < G_N_ELEMENTS (tables); t++)
    for (const TfNoteKind *kind = tables[t]; kind->code != NULL; kind++)
      {
        check_code (kind->code);
        check_text (kind);
        if (!g_hash_table_add (seen, (gpointer)kind->code))
          {
            g_printerr ("# the note code \"%s\" stands in the tables twice\n", kind->code);
            g_test_fail ();
          }
        if (kind[1].code != NULL && strcmp (kind->code, kind[1].code) >= 0)
          {
            g_printerr ("# the note code \"%s\" stands before \"%s\"\n", kind->code, kind[1].code);
            g_test_fail ();
          }
      }
  g_assert_cmpuint (g_hash_table_size (seen), >, 0);
}

/* -- notes ----------------------------------------------------------------------------------- */

static void
test_text (void)
{
  g_autoptr (TfNote) note = tf_note_new ("rows-with-other-floor", "id", 12, 34.56);
  g_autofree char *text = tf_note_dup_text (note, TRUE);
  g_assert_true (g_str_has_prefix (text, "12 rows were measured"));
  g_assert_nonnull (strstr (text, "34.6 G"));
  g_assert_cmpint (tf_note_get_level (note), ==, TF_NOTE_CAUTION);
  tf_check_near ("argument 0", tf_note_get_number (note, 0), 12.0, 0.0);
  tf_check_near ("argument 1", tf_note_get_number (note, 1), 34.56, 0.0);
  tf_check_nan ("argument 2", tf_note_get_number (note, 2));
  g_autoptr (TfNote) copy = tf_note_copy (note);
  g_autofree char *again = tf_note_dup_text (copy, TRUE);
  g_assert_cmpstr (again, ==, text);
  g_autoptr (TfNote) gone = tf_note_new ("rows-with-other-floor", "id", 12, (double)NAN);
  g_autofree char *unknown = tf_note_dup_text (gone, TRUE);
  g_assert_nonnull (strstr (unknown, "floor of unknown G"));
  g_autoptr (TfNote) words = tf_note_new ("instruments-unscaled-pooled", "s", "A {0} and B");
  g_autofree char *literal = tf_note_dup_text (words, TRUE);
  g_assert_nonnull (strstr (literal, "A {0} and B"));
  tf_check_nan ("a text is no number", tf_note_get_number (words, 0));
}

static void
test_list (void)
{
  g_autoptr (TfNotes) notes = tf_notes_new ();
  tf_notes_add (notes, "hale-equator", "");
  tf_notes_add (notes, "hale-equator", "");
  tf_notes_add (notes, "hints-counted", "ii", 1, 2);
  tf_notes_add (notes, "hints-counted", "ii", 1, 3);
  tf_notes_add (notes, "hints-counted", "ii", 1, 3);
  tf_notes_add_copy (notes, tf_notes_get (notes, 1));
  g_assert_cmpuint (tf_notes_get_n (notes), ==, 3);
  g_autofree char *codes = tf_notes_dup_codes (notes);
  g_assert_cmpstr (codes, ==, "hale-equator hints-counted");
  tf_check_near ("the first of its code",
                 tf_note_get_number (tf_notes_find (notes, "hints-counted"), 1), 2.0, 0.0);
  g_assert_null (tf_notes_find (notes, "hale-steep"));
  g_autofree char *none = tf_notes_dup_codes (NULL);
  g_assert_cmpstr (none, ==, "");
  g_assert_cmpuint (tf_notes_get_n (NULL), ==, 0);
  g_assert_null (tf_notes_find (NULL, "hale-steep"));
}

static void
test_store (void)
{
  gboolean ok = FALSE;
  g_autoptr (TfNotes) notes = tf_notes_new ();
  tf_notes_add (notes, "rows-with-other-floor", "id", 12, 0.1);
  tf_notes_add (notes, "instruments-unscaled-pooled", "s", "\"A\"\n\\ é\t");
  tf_notes_add (notes, "hale-equator", "");
  g_autofree char *text = tf_notes_dup_store (notes);
  g_autoptr (TfNotes) read = tf_notes_from_store (text, &ok);
  g_assert_true (ok);
  g_assert_cmpuint (tf_notes_get_n (read), ==, 3);
  g_autofree char *again = tf_notes_dup_store (read);
  g_assert_cmpstr (again, ==, text);
  for (guint k = 0; k < 3; k++)
    {
      g_autofree char *a = tf_note_dup_text (tf_notes_get (notes, k), TRUE);
      g_autofree char *b = tf_note_dup_text (tf_notes_get (read, k), TRUE);
      g_assert_cmpstr (a, ==, b);
    }
  /* A note that was read is the same as one newly made. */
  tf_notes_add (read, "rows-with-other-floor", "id", 12, 0.1);
  g_assert_cmpuint (tf_notes_get_n (read), ==, 3);
  /* An unknown number is not the same as a known one. */
  tf_notes_add (read, "rows-with-other-floor", "id", 12, (double)NAN);
  tf_notes_add (read, "rows-with-other-floor", "id", 12, (double)NAN);
  g_assert_cmpuint (tf_notes_get_n (read), ==, 4);
}

static void
test_newer_version (void)
{
  gboolean ok = FALSE;
  const char *text = "[[\"from-the-future\",1.5,\"x\"],[\"hale-equator\"]]";
  g_autoptr (TfNotes) notes = tf_notes_from_store (text, &ok);
  g_assert_true (ok);
  g_autofree char *shown = tf_note_dup_text (tf_notes_get (notes, 0), TRUE);
  g_assert_cmpstr (shown, ==, "from-the-future");
  g_autofree char *again = tf_notes_dup_store (notes);
  g_assert_cmpstr (again, ==, text);
}

static void
test_damage (void)
{
  const char *const texts[]
      = { "", "{", "{}", "7", "[7]", "[[]]", "[[7]]", "[[\"hale-equator\"],{}]", "null" };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    {
      gboolean ok = TRUE;
      g_autoptr (TfNotes) notes = tf_notes_from_store (texts[k], &ok);
      g_assert_nonnull (notes);
      g_assert_false (ok);
    }
  gboolean ok = TRUE;
  g_autoptr (TfNotes) none = tf_notes_from_store (NULL, &ok);
  g_assert_false (ok);
  g_assert_cmpuint (tf_notes_get_n (none), ==, 0);
}

static void
test_json (void)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_autoptr (TfNotes) notes = tf_notes_new ();
  tf_notes_add (notes, "hale-equator", "");
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "refusal");
  tf_note_build_json (NULL, builder);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (notes, builder);
  json_builder_set_member_name (builder, "repairs");
  tf_notes_build_json (NULL, builder);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_autofree char *sentence = tf_note_dup_text (tf_notes_get (notes, 0), TRUE);
  g_autofree char *expected = g_strdup_printf ("{\"refusal\":null,\"cautions\":[{\"code\":\"hale-"
                                               "equator\",\"text\":\"%s\"}],\"repairs\":[]}",
                                               sentence);
  g_assert_cmpstr (text, ==, expected);
}

void
add_notes_tests (void)
{
  g_test_add_func ("/base/notes/tables-are-in-order-unique-and-printable", test_tables);
  g_test_add_func ("/base/notes/arguments-stand-in-the-sentence", test_text);
  g_test_add_func ("/base/notes/the-same-note-is-not-doubled", test_list);
  g_test_add_func ("/base/notes/the-stored-form-comes-back-the-same", test_store);
  g_test_add_func ("/base/notes/a-code-of-a-newer-version-is-kept", test_newer_version);
  g_test_add_func ("/base/notes/a-damaged-store-is-told", test_damage);
  g_test_add_func ("/base/notes/json-has-code-and-english-text", test_json);
}
