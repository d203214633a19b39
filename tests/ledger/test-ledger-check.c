/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What somebody with a database shell changes, check finds. */

#include "test-ledger.h"

#include <string.h>

#include "tf-ledger-divides.h"
#include "tf-ledger-scales.h"

/* Two frames with hints, five marks, a drop, a class, a note, a number, two deeds as one, one undone deed. */
static void
set_up_full (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  fixture_set_up (f, data);
  gint64 person = tf_ledger_person (f->ledger, "north", &error),
         other = tf_ledger_person (f->ledger, "south", &error);
  for (int n = 1; n <= 2; n++)
    {
      g_autoptr (GPtrArray) hints = fixture_hints (n);
      gint64 frame = fixture_frame (f->ledger, n);
      g_assert_true (
          tf_ledger_add_hints (f->ledger, frame, "plain/1", hints, "flux-centroid/1", &error));
    }
  gint64 one = fixture_keep (f->ledger, 1, person, fixture_hint (f->ledger, 0), 0, 10);
  fixture_keep (f->ledger, 1, other, 0, 0, 11);
  fixture_keep (f->ledger, 1, person, 0, one, 12);
  g_assert_true (tf_ledger_drop_hint (f->ledger, fixture_hint (f->ledger, 1), person, &error));
  g_assert_true (tf_ledger_set_class (f->ledger, fixture_region (f->ledger, one), 1, person, "β",
                                      "magnetogram", &error));
  g_assert_true (
      tf_ledger_set_note (f->ledger, fixture_region (f->ledger, one), other, "look again", &error));
  const gboolean not_hint = FALSE;
  const TfComplexityRow figures = { .there = TRUE, .mu = 0.9, .r_mx = 2.5e21, .pieces = 3 };
  g_assert_true (tf_ledger_add_complexity (f->ledger, 1, &one, &not_hint, "inversion-lines/1",
                                           &figures, &error));
  g_assert_true (tf_ledger_resolve (f->ledger, fixture_region (f->ledger, one), other, person, TRUE,
                                    &error));
  g_assert_true (tf_ledger_hand_over (f->ledger, person, TF_TIME_UNKNOWN, &error));
  TfCorrection correction = { 511, 512, 480, 3 };
  g_assert_true (tf_ledger_set_geometry (f->ledger, 1, other, &correction, &error));
  TfTime times[] = { tf_time_read ("2007-06-01"), tf_time_read ("2009-03-01") };
  double lats[] = { 17, 14 };
  const TfMovedDivide divide = { 24, -1, 2, times, lats, TRUE };
  g_assert_true (tf_ledger_set_divide (f->ledger, "default", &divide, person, &error));
  const TfKeptScale scale = { (char *)"B", (char *)"A", 1.25, 0.5, (char *)"pair", NULL };
  g_assert_true (tf_ledger_set_scale (f->ledger, &scale, other, &error));
  g_assert_true (tf_ledger_set_external (f->ledger, fixture_region (f->ledger, one), other, "11861",
                                         &error));
  g_assert_true (tf_ledger_begin_bundle (f->ledger, "several", &error));
  fixture_keep (f->ledger, 2, person, 0, 0, 14);
  fixture_keep (f->ledger, 2, person, 0, 0, 15);
  g_assert_true (tf_ledger_end_bundle (f->ledger, TRUE, &error));
  fixture_keep (f->ledger, 2, other, 0, 0, 13);
  g_assert_true (tf_ledger_undo (f->ledger, other, NULL, &error));
  g_assert_no_error (error);
  fixture_check (f->ledger, "");
  g_clear_pointer (&f->ledger, tf_ledger_close);
}

typedef struct
{
  const char *name, *sql, *code;
} Tampering;

static const Tampering tamperings[] = {
  { "a-byte-in-a-body",
    "UPDATE act SET body = CAST (replace (CAST (body AS TEXT), 'look again', 'look agaim') AS "
    "BLOB)",
    "check-act-hash" },
  { "a-byte-behind-a-zero-in-a-body",
    "UPDATE act SET body = CAST (body || x'00' || 'x' AS BLOB) WHERE seq = 4", "check-act-hash" },
  { "a-kind",
    "UPDATE act SET kind = 'withdraw' WHERE kind = 'keep' AND seq = (SELECT min (seq) FROM act "
    "WHERE kind = 'keep')",
    "check-act-hash" },
  { "a-time", "UPDATE act SET wall = wall + 1 WHERE seq = 3", "check-act-hash" },
  { "an-act-taken-out", "DELETE FROM after; DELETE FROM act WHERE seq = 5", "check-act-gap" },
  { "the-last-act-taken-out",
    "DELETE FROM after WHERE seq = (SELECT max (seq) FROM act); DELETE FROM act WHERE seq = "
    "(SELECT max (seq) FROM act)",
    "check-act-gap" },
  { "two-acts-exchanged",
    "UPDATE act SET seq = 99 WHERE seq = 4; UPDATE act SET seq = 4 WHERE seq = 5; UPDATE act SET "
    "seq = 5 "
    "WHERE seq = 99",
    "check-act-chain" },
  { "what-an-act-replaces", "DELETE FROM after WHERE seq = (SELECT max (seq) FROM after)",
    "check-act-hash" },
  { "a-mark-alive", "UPDATE mark SET live = 1 WHERE live = 0", "check-projection" },
  { "a-mark-of-another-person", "UPDATE mark SET person = 3 - person WHERE id = 1",
    "check-projection" },
  { "a-mark-gone", "PRAGMA foreign_keys = OFF; DELETE FROM mark WHERE id = 3", "check-projection" },
  { "a-label", "UPDATE mark SET label = 'two' WHERE id = 2", "check-projection" },
  { "an-outline", "UPDATE mark SET outline = replace (outline, '21', '22')", "check-projection" },
  { "a-class", "UPDATE class SET class = 'α'", "check-projection" },
  { "an-external-number", "UPDATE fact SET text = '11862'", "check-projection" },
  { "deeds-done-as-one-parted", "UPDATE deed SET bundle = seq", "check-projection" },
  { "a-note-gone", "DELETE FROM note", "check-projection" },
  { "a-note-settled-by-another", "UPDATE resolved SET person = 2", "check-projection" },
  { "a-shift-gone", "DELETE FROM shift", "check-projection" },
  { "a-geometry", "UPDATE geometry SET text = replace (text, '480', '481')", "check-projection" },
  { "a-geometry-more", "INSERT INTO geometry VALUES (2, 1, '1,2,30,4', 9)", "check-projection" },
  { "a-divide", "UPDATE divide SET points = replace (points, '17', '27')", "check-projection" },
  { "a-scale", "UPDATE scale SET factor = 1.5", "check-projection" },
  { "a-divide-never-seen", "UPDATE divide SET shown = 0", "check-projection" },
  { "a-drop-more", "INSERT INTO dropped VALUES (4, 1)", "check-projection" },
  { "an-undone-deed", "UPDATE deed SET undone = 0", "check-projection" },
  { "a-region-number", "UPDATE region SET number = 'T2013-0007' WHERE id = 1", "check-projection" },
  { "a-name", "UPDATE person SET name = 'west' WHERE id = 1", "check-projection" },
  { "a-point", "UPDATE point SET flux_mx = flux_mx * 2 WHERE mark = 2", "check-points" },
  { "a-packed-point", "UPDATE pack SET data = CAST (substr (data, 1, 40) || x'01' || substr (data, 42) AS BLOB)", "check-points" },
  { "a-brief", "UPDATE brief SET data = CAST (substr (data, 1, 60) || x'01' || substr (data, 62) AS BLOB)", "check-points" },
  { "a-brief-gone", "DELETE FROM brief", "check-points" },
  { "a-pack-gone", "DELETE FROM pack", "check-points" },
  { "a-point-gone", "DELETE FROM point WHERE hint = 1 AND mark = 5", "check-points" },
  { "a-point-more",
    "INSERT INTO point SELECT hint, 999, frame, region, time, year, lat_deg, flux_mx, tilt_deg, "
    "mu, cmd_deg,"
    " separation_deg, imbalance, leading, leading_sure, unipolar, straddles, witnesses_differ FROM "
    "point LIMIT 1",
    "check-points" },
  { "a-measure", "UPDATE measure SET axis_tilt_deg = -axis_tilt_deg WHERE id = 2",
    "check-machine-row" },
  { "a-complexity", "UPDATE complexity SET r_mx = 10 * r_mx", "check-machine-row" },
  { "a-hint's-outline", "UPDATE hint SET outline = replace (outline, '2', '3') WHERE id = 1",
    "check-machine-row" },
  { "a-frame's-time", "UPDATE frame SET time_text = '2001-01-01T00:00:00Z' WHERE id = 1",
    "check-machine-row" },
  { "a-frame-gone", "PRAGMA foreign_keys = OFF; DELETE FROM frame WHERE id = 2",
    "check-reference" },
  { "an-index-gone", "DROP INDEX act_subject", "check-schema" },
  { "a-view-changed", "DROP VIEW regions; CREATE VIEW regions AS SELECT 1 AS region",
    "check-schema" },
};

static void
test_tampering (Fixture *f, gconstpointer data)
{
  const Tampering *t = data;
  fixture_sql (f->path, t->sql);
  fixture_reopen (f);
  if (!fixture_finds (f->ledger, t->code))
    {
      g_test_message ("%s was not found as %s", t->name, t->code);
      g_test_fail ();
    }
}

/* Bytes of the file itself: the pages of a table's tree are overwritten. */
static void
test_damaged_file (Fixture *f, gconstpointer data)
{
  g_autofree char *bytes = NULL;
  gsize n;
  fixture_sql (f->path, "PRAGMA journal_mode = DELETE");
  g_assert_true (g_file_get_contents (f->path, &bytes, &n, NULL));
  for (gsize k = 3 * 4096; k < n; k += 8192)
    memset (bytes + k, 0x5a, 64);
  g_assert_true (g_file_set_contents (f->path, bytes, (gssize)n, NULL));
  g_autoptr (GError) error = NULL;
  g_autoptr (TfNotes) findings = tf_notes_new ();
  f->ledger = fixture_open (f, f->path, &error);
  if (f->ledger != NULL && tf_ledger_check (f->ledger, findings, &error))
    g_assert_cmpuint (findings->len, >, 0);
  else
    g_assert_nonnull (error);
}

static void
test_check_changes_nothing (Fixture *f, gconstpointer data)
{
  g_autofree char *before = NULL, *after = NULL;
  gsize n, m;
  fixture_reopen (f);
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_file_get_contents (f->path, &before, &n, NULL);
  fixture_reopen (f);
  fixture_check (f->ledger, "");
  g_clear_pointer (&f->ledger, tf_ledger_close);
  g_file_get_contents (f->path, &after, &m, NULL);
  g_assert_cmpmem (before, n, after, m);
}

void
add_check_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (tamperings); k++)
    {
      g_autofree char *path = g_strdup_printf ("/ledger/check/finds/%s", tamperings[k].name);
      g_test_add (path, Fixture, &tamperings[k], set_up_full, test_tampering, fixture_tear_down);
    }
  g_test_add ("/ledger/check/finds/overwritten-pages", Fixture, NULL, set_up_full,
              test_damaged_file, fixture_tear_down);
  g_test_add ("/ledger/check/changes-nothing", Fixture, NULL, set_up_full,
              test_check_changes_nothing, fixture_tear_down);
}
