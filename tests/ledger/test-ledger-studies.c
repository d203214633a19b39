/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Studies and editions: versions, undo, what is never changed, what check finds. */

#include "test-ledger.h"

#include "tf-ledger-studies.h"

static guint
keep (Fixture *f, const char *text)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  guint version = tf_ledger_keep_study (f->ledger, "narrow", text, person, &error);
  g_assert_no_error (error);
  return version;
}

static char *
standing (Fixture *f)
{
  g_autoptr (TfNamed) named = tf_ledger_study (f->ledger, "narrow", NULL);
  return named != NULL ? g_strdup_printf ("%u %s", named->version, named->text) : g_strdup ("none");
}

static void
assert_standing (Fixture *f, const char *expected)
{
  g_autofree char *text = standing (f);
  g_assert_cmpstr (text, ==, expected);
  fixture_check (f->ledger, "");
}

static void
test_versions (Fixture *f, gconstpointer data)
{
  assert_standing (f, "none");
  g_assert_cmpuint (keep (f, "{\"a\":1}"), ==, 1);
  g_assert_cmpuint (keep (f, "{\"a\":1}"), ==, 1);
  g_assert_cmpuint (keep (f, "{\"a\":2}"), ==, 2);
  assert_standing (f, "2 {\"a\":2}");
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  assert_standing (f, "1 {\"a\":1}");
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  assert_standing (f, "none");
  g_assert_true (tf_ledger_redo (f->ledger, person, NULL, NULL));
  assert_standing (f, "1 {\"a\":1}");
  g_assert_cmpuint (keep (f, "{\"a\":3}"), ==, 3); /* a number is never used twice */
  assert_standing (f, "3 {\"a\":3}");
}

/* Put away it is in no list; a version that is there already does not end what is done as one. */
static void
test_put_away (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  keep (f, "{\"a\":1}");
  keep (f, "");
  assert_standing (f, "none");
  g_autoptr (GPtrArray) studies = tf_ledger_studies (f->ledger, NULL);
  g_assert_cmpuint (studies->len, ==, 0);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  assert_standing (f, "1 {\"a\":1}");
  g_assert_true (tf_ledger_begin_bundle (f->ledger, "edition", &error));
  g_assert_cmpuint (keep (f, "{\"a\":1}"), ==, 1);
  g_assert_true (tf_ledger_keep_edition (f->ledger, "first", "narrow", 1, "{}", person, &error));
  g_assert_true (tf_ledger_end_bundle (f->ledger, TRUE, &error));
  g_autoptr (GPtrArray) editions = tf_ledger_edition_names (f->ledger, NULL);
  g_assert_cmpuint (editions->len, ==, 1);
  g_assert_cmpstr (((TfNamed *)g_ptr_array_index (editions, 0))->text, ==, "");
  fixture_check (f->ledger, "");
}

static void
test_editions (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  keep (f, "{}");
  g_assert_true (
      tf_ledger_keep_edition (f->ledger, "first", "narrow", 1, "{\"n\":5}", person, &error));
  g_assert_false (
      tf_ledger_keep_edition (f->ledger, "first", "narrow", 1, "{\"n\":6}", person, &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  g_autoptr (TfNamed) first = tf_ledger_edition (f->ledger, "first", NULL);
  g_assert_cmpstr (first->text, ==, "{\"n\":5}");
  g_assert_cmpstr (first->study, ==, "narrow");
  g_assert_cmpstr (first->person, ==, "north");
  tf_check_near ("when", first->wall.s, tf_time_from_jd (2440587.5, (double)f->now / 864e5,
                                                         TF_SCALE_UTC).s, 60);
  g_assert_null (tf_ledger_edition (f->ledger, "second", NULL));
  g_autoptr (GPtrArray) all = tf_ledger_editions (f->ledger, NULL);
  g_assert_cmpuint (all->len, ==, 1);
  g_assert_true (tf_ledger_undo (f->ledger, person, NULL, NULL));
  g_assert_null (tf_ledger_edition (f->ledger, "first", NULL));
  fixture_check (f->ledger, "");
}

static void
test_tampering (Fixture *f, gconstpointer data)
{
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  keep (f, "{\"a\":1}");
  g_assert_true (tf_ledger_keep_edition (f->ledger, "first", "narrow", 1, "{}", person, NULL));
  fixture_check (f->ledger, "");
  fixture_sql (f->path, "UPDATE study SET text = '{\"a\":2}'");
  g_assert_true (fixture_finds (f->ledger, "check-projection"));
  fixture_sql (f->path, "UPDATE study SET text = '{\"a\":1}'; UPDATE edition SET live = 0");
  g_assert_true (fixture_finds (f->ledger, "check-projection"));
}

void
add_studies_tests (void)
{
  FIXTURE_TEST ("/ledger/studies/every-keeping-is-a-version-that-undo-takes-back", test_versions);
  FIXTURE_TEST ("/ledger/studies/an-empty-text-puts-a-study-away", test_put_away);
  FIXTURE_TEST ("/ledger/studies/an-edition-is-never-changed", test_editions);
  FIXTURE_TEST ("/ledger/studies/what-is-changed-is-found", test_tampering);
}
