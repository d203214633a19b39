/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-desk.h"

#include <math.h>
#include <glib/gstdio.h>

#include "tf-writer.h"

/* -- the writer ------------------------------------------------------------------------------ */

typedef struct
{
  guint saved, refused;
  gboolean was_there; /* what a second connection saw when "saved" was said */
  const char *path;
} Said;

static void
saved (TfWriter *writer, TfDeed *deed, Said *said)
{
  g_autoptr (TfLedger) other = tf_ledger_open (said->path, NULL);
  g_auto (GStrv) persons = tf_ledger_dup_persons (other);
  said->was_there = persons != NULL && g_strv_contains ((const char *const *)persons, deed->person);
  said->saved++;
}

static void
refused (TfWriter *writer, TfDeed *deed, const char *message, Said *said)
{
  said->refused++;
}

static TfWriter *
writer_new (const char *path, char letter, Said *said)
{
  TfWriter *writer = tf_writer_new (path, letter);
  said->path = path;
  g_signal_connect (writer, "saved", G_CALLBACK (saved), said);
  g_signal_connect (writer, "refused", G_CALLBACK (refused), said);
  return writer;
}

static gboolean
is_empty (gpointer writer)
{
  return tf_writer_get_pending (writer) == 0;
}

static gboolean
is_stuck (gpointer writer)
{
  return tf_writer_get_problem (writer) != NULL;
}

static TfDeed *
draft_deed (gint64 frame)
{
  TfDeed *deed = tf_deed_new (TF_DEED_DRAFT, "north desk");
  deed->frame = frame;
  return deed; /* takes a draft away: fits any ledger */
}

static void
saved_after_commit (void)
{
  g_autofree char *path = test_desk_path ("writer.ledger");
  Said said = { 0 };
  g_autoptr (TfWriter) writer = writer_new (path, 'T', &said);
  tf_writer_push (writer, draft_deed (1));
  test_desk_wait ("the deed to be saved", is_empty, writer);
  g_assert_cmpuint (said.saved, ==, 1);
  g_assert_true (said.was_there);
}

static void
stays_and_is_tried_again (void)
{
  g_autofree char *path = test_desk_path ("not-there/late.ledger"),
                  *folder = g_path_get_dirname (path);
  Said said = { 0 };
  g_autoptr (TfWriter) writer = writer_new (path, 'T', &said);
  tf_writer_push (writer, draft_deed (1));
  tf_writer_push (writer, draft_deed (1));
  test_desk_wait ("the trouble to be said", is_stuck, writer);
  g_assert_cmpuint (tf_writer_get_pending (writer), ==, 2);
  g_assert_cmpuint (said.saved, ==, 0);
  g_mkdir_with_parents (folder, 0700);
  tf_writer_retry (writer);
  test_desk_wait ("both deeds to be saved", is_empty, writer);
  g_assert_cmpuint (said.saved, ==, 2);
  g_assert_null (tf_writer_get_problem (writer));
}

static void
given_up (void)
{
  g_autofree char *path = test_desk_path ("never-there/late.ledger");
  Said said = { 0 };
  g_autoptr (TfWriter) writer = writer_new (path, 'T', &said);
  tf_writer_push (writer, draft_deed (1));
  test_desk_wait ("the trouble to be said", is_stuck, writer);
  tf_writer_give_up (writer);
  g_assert_cmpuint (tf_writer_get_pending (writer), ==, 0);
  g_assert_null (tf_writer_get_problem (writer));
}

static void
nothing_to_undo (void)
{
  g_autofree char *path = test_desk_path ("undo.ledger");
  Said said = { 0 };
  g_autoptr (TfWriter) writer = writer_new (path, 'T', &said);
  tf_writer_push (writer, tf_deed_new (TF_DEED_UNDO, "north desk"));
  test_desk_wait ("the answer", is_empty, writer);
  g_assert_cmpuint (said.refused, ==, 1);
  g_assert_null (
      tf_writer_get_problem (writer)); /* trying again would not help: not in the way of the next */
}

/* -- the session ----------------------------------------------------------------------------- */

static guint
count (TfSession *session, gboolean hints)
{
  GListModel *list = tf_session_get_regions (session);
  guint n = 0;
  for (guint k = 0; k < g_list_model_get_n_items (list); k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      n += tf_region_item_get_row (item)->is_hint == hints ? 1 : 0;
    }
  return n;
}

static gboolean
one_mark (gpointer session)
{
  return count (session, FALSE) == 1;
}

static gboolean
no_mark (gpointer session)
{
  return count (session, FALSE) == 0 && tf_session_can_redo (session);
}

static guint
marks_in_file (const char *path)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  TfRowQuery query = { .marks = TRUE };
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &query, NULL);
  return rows != NULL ? rows->len : G_MAXUINT;
}

static void
keep_and_undo (void)
{
  g_autofree char *path = test_desk_path ("keep.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  guint hints = count (session, TRUE);
  g_assert_false (tf_session_can_keep (session)); /* nothing is chosen */
  g_assert_true (tf_session_step_hint (session, 1));
  g_assert_true (tf_session_can_keep (session));
  g_assert_true (tf_session_keep (session));
  g_assert_false (tf_session_can_keep (session)); /* on its way: not kept twice */
  g_assert_false (tf_session_can_drop (session));
  test_desk_wait ("the mark", one_mark, session);
  g_assert_cmpuint (count (session, TRUE), ==, hints - 1);
  g_assert_cmpuint (marks_in_file (path), ==, 1);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->origin, ==,
                   "kept as hinted");
  g_assert_true (tf_session_can_undo (session));
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the mark to go", no_mark, session);
  g_assert_cmpuint (marks_in_file (path), ==, 0);
  g_assert_true (tf_region_item_get_row (tf_session_get_region (session))->is_hint);
  g_assert_true (tf_session_redo (session));
  test_desk_wait ("the mark to come back", one_mark, session);
  g_assert_false (tf_region_item_get_row (tf_session_get_region (session))->is_hint);
  tf_session_close (session);
}

static gboolean
fewer_hints (gpointer data)
{
  return count (data, TRUE) < GPOINTER_TO_UINT (g_object_get_data (data, "hints"));
}

static gboolean
all_hints (gpointer data)
{
  return !fewer_hints (data);
}

static void
drop_goes_on (void)
{
  g_autofree char *path = test_desk_path ("drop.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_object_set_data (G_OBJECT (session), "hints", GUINT_TO_POINTER (count (session, TRUE)));
  tf_session_step_hint (session, 1);
  gint64 first = tf_region_item_get_row (tf_session_get_region (session))->mark;
  g_assert_true (tf_session_drop (session));
  test_desk_wait ("the hint to go", fewer_hints, session);
  g_assert_nonnull (tf_session_get_region (session)); /* the next one */
  g_assert_cmpint (tf_region_item_get_row (tf_session_get_region (session))->mark, !=, first);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the hint to come back", all_hints, session);
  g_assert_true (tf_region_item_is (tf_session_get_region (session), first, TRUE));
  tf_session_close (session);
}

static TfOutline *
cap_about_first (TfSession *session, double radius)
{
  g_autoptr (TfRegionItem) item = g_list_model_get_item (tf_session_get_regions (session), 0);
  const TfMeasure *m = &tf_region_item_get_row (item)->measure;
  return tf_outline_new_cap (tf_frame_get_info (tf_session_get_frame (session))->time,
                             m->carrington_lon_deg, m->lat_deg, radius, 0);
}

static gboolean
at_rest (gpointer session)
{
  return tf_session_is_at_rest (session) && tf_session_get_measure (session) != NULL;
}

static void
draft_is_measured (void)
{
  g_autofree char *path = test_desk_path ("draft.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_autoptr (TfOutline) cap = cap_about_first (session, 6);
  tf_session_set_draft (session, cap);
  g_assert_nonnull (tf_session_get_measure (session)); /* at once, without the outline term */
  g_assert_false (tf_session_is_at_rest (session));
  test_desk_wait ("the outline term", at_rest, session);
  g_assert_true (isfinite (tf_session_get_measure (session)->tilt_terms.outline));
  g_assert_nonnull (tf_session_get_replaced (session)); /* the hint inside it is offered */
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", one_mark, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->origin, ==, "changed");
  g_assert_null (tf_session_get_draft (session));
  tf_session_close (session);
}

static gboolean
draft_is_there (gpointer session)
{
  return tf_session_get_draft (session) != NULL;
}

static gboolean
nothing_pending (gpointer session)
{
  return tf_session_get_pending (session) == 0;
}

static void
draft_outlives_the_window (void)
{
  g_autofree char *path = test_desk_path ("outlive.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_autoptr (TfOutline) cap = cap_about_first (session, 5);
  tf_session_set_draft (session, cap);
  test_desk_wait ("the draft to be stored", nothing_pending, session);
  tf_session_close (session);
  g_autoptr (TfSession) again = tf_session_new ();
  tf_session_set_person (again, "north desk");
  tf_session_open_ledger (again, path, 0);
  test_desk_wait ("the draft", draft_is_there, again);
  g_assert_true (tf_outline_equal (tf_session_get_draft (again), cap));
  tf_session_close (again);
}

static gboolean
frame_is_open (gpointer session)
{
  return tf_session_get_frame (session) != NULL && !tf_session_is_loading (session);
}

static gboolean
two_frames (gpointer session)
{
  return tf_session_get_n_frames (session) == 2;
}

static void
newest_wins (void)
{
  const char *paths[] = { TF_DEMO_FRAMES "/brindle-20131010-0600.fits",
                          TF_DEMO_FRAMES "/brindle-20131011-0600.fits", NULL };
  g_autoptr (TfSession) session = tf_session_new (); /* no ledger: only looked at */
  tf_session_add_frames (session, (char *const *)paths);
  test_desk_wait ("both frames", two_frames, session);
  g_autoptr (TfFrameItem) first = g_list_model_get_item (tf_session_get_frames (session), 0);
  g_autoptr (TfFrameItem) second = g_list_model_get_item (tf_session_get_frames (session), 1);
  tf_session_choose_frame (session, first);
  tf_session_choose_frame (session, second);
  tf_session_choose_frame (session, first);
  tf_session_choose_frame (session, second);
  test_desk_wait ("a frame", frame_is_open, session);
  g_assert_cmpstr (tf_frame_get_path (tf_session_get_frame (session)), ==,
                   tf_frame_item_get_row (second)->path);
  g_assert_false (tf_session_can_keep (session));
  tf_session_close (session);
}

static void
drawing_a_polygon (void)
{
  g_autofree char *path = test_desk_path ("polygon.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_autoptr (TfOutline) cap = cap_about_first (session, 6);
  guint n;
  const TfVertex *ring = tf_outline_get_ring (cap, 0, FALSE, &n), *line;
  tf_session_set_tool (session, TF_TOOL_POLYGON);
  for (guint k = 0; k < n; k += 8)
    tf_session_draw_to (session, ring[k].lon_deg, ring[k].lat_deg);
  tf_session_get_line (session, &line, &n);
  g_assert_true (tf_session_undo (session)); /* takes the last corner back, not a deed */
  guint before = n;
  tf_session_get_line (session, &line, &n);
  g_assert_cmpuint (n, ==, before - 1);
  tf_session_measure_line (session);
  g_assert_nonnull (tf_session_get_measure (session));
  g_assert_true (tf_session_finish_line (session));
  g_assert_nonnull (tf_session_get_draft (session));
  g_assert_cmpint (tf_session_get_tool (session), ==, TF_TOOL_NONE);
  tf_session_close (session);
}

static void
two_corners_are_no_outline (void)
{
  g_autofree char *path = test_desk_path ("corners.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  tf_session_set_tool (session, TF_TOOL_POLYGON);
  tf_session_draw_to (session, 10, 10);
  tf_session_draw_to (session, 12, 10);
  g_assert_false (tf_session_finish_line (session));
  g_assert_null (tf_session_get_draft (session));
  tf_session_close (session);
}

static gboolean
has_class (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  return item != NULL && tf_region_item_get_row (item)->mw_class[0] != '\0';
}

static gboolean
has_alpha (gpointer session)
{
  return has_class (session)
         && g_str_equal (tf_region_item_get_row (tf_session_get_region (session))->mw_class, "α");
}

static void
classes (void)
{
  g_autofree char *path = test_desk_path ("class.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  tf_session_step_hint (session, 1);
  g_assert_false (tf_session_set_class (session, "β")); /* a hint has no class */
  tf_session_keep (session);
  test_desk_wait ("the mark", one_mark, session);
  g_assert_false (tf_session_set_class (session, "δ")); /* of nothing */
  g_assert_true (tf_session_set_class (session, "α"));
  test_desk_wait ("the class", has_alpha, session);
  g_assert_false (tf_session_set_class (session, "δ")); /* refused with alpha */
  tf_session_close (session);
}

static gboolean
has_trouble (gpointer session)
{
  return tf_session_get_ledger_problem (session) != NULL;
}

static void
no_ledger_there (void)
{
  g_autofree char *path = test_desk_path ("absent.ledger");
  g_autoptr (TfSession) session = tf_session_new ();
  tf_session_open_ledger (session, path, 0);
  test_desk_wait ("the trouble", has_trouble, session);
  g_assert_false (tf_session_has_ledger (session));
  g_assert_false (tf_session_is_writable (session));
  g_assert_false (g_file_test (path, G_FILE_TEST_EXISTS)); /* opening made nothing */
  tf_session_close (session);
}

static void
picking_a_stretch (void)
{
  g_autofree char *path = test_desk_path ("pick.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  guint hidden;
  g_assert_cmpuint (tf_session_get_dots (session, &hidden)->len, ==, 0);
  g_assert_cmpuint (hidden, ==, count (session, TRUE));
  tf_session_set_show_hints (session, TRUE);
  g_assert_cmpuint (tf_session_get_dots (session, &hidden)->len, ==, count (session, TRUE));
  tf_session_pick (session, 2000, 2001);
  g_assert_cmpuint (g_list_model_get_n_items (tf_session_get_frames (session)), ==, 0);
  tf_session_pick (session, 2014, 2013); /* from right to left */
  g_assert_cmpuint (g_list_model_get_n_items (tf_session_get_frames (session)), ==, 1);
  tf_session_pick (session, NAN, NAN);
  g_assert_cmpuint (tf_session_get_n_frames (session), ==, 1);
  tf_session_close (session);
}

void
test_desk_add_session (void)
{
  g_test_add_func ("/desk/writer/a-deed-is-said-to-be-saved-after-its-commit", saved_after_commit);
  g_test_add_func ("/desk/writer/a-deed-that-fails-stays-and-is-tried-again",
                   stays_and_is_tried_again);
  g_test_add_func ("/desk/writer/a-deed-can-be-given-up", given_up);
  g_test_add_func ("/desk/writer/a-deed-that-never-fits-is-not-in-the-way", nothing_to_undo);
  g_test_add_func ("/desk/session/keeping-undoing-and-redoing-a-hint", keep_and_undo);
  g_test_add_func ("/desk/session/dropping-a-hint-goes-on-to-the-next", drop_goes_on);
  g_test_add_func ("/desk/session/a-draft-is-measured-at-once-and-again-at-rest",
                   draft_is_measured);
  g_test_add_func ("/desk/session/a-draft-outlives-the-window", draft_outlives_the_window);
  g_test_add_func ("/desk/session/the-newest-request-for-a-frame-wins", newest_wins);
  g_test_add_func ("/desk/session/a-polygon-is-drawn-corner-by-corner", drawing_a_polygon);
  g_test_add_func ("/desk/session/two-corners-are-no-outline", two_corners_are_no_outline);
  g_test_add_func ("/desk/session/delta-is-refused-with-alpha", classes);
  g_test_add_func ("/desk/session/a-ledger-that-is-not-there-is-said-and-not-made",
                   no_ledger_there);
  g_test_add_func ("/desk/session/a-stretch-of-the-wings-chooses-the-frames", picking_a_stretch);
}
