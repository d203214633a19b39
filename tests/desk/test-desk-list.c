/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* A forecaster's shift: the list in order, class, note, hand-over, what others list, the sheets. */

#include "test-desk.h"

#include <math.h>
#include <string.h>

#include "tf-list.h"
#include "tf-window.h"

static gboolean
has_shift (gpointer session)
{
  return tf_session_get_shift (session) != NULL && tf_session_get_pending (session) == 0;
}

static gboolean
is_marked (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return item != NULL && !tf_region_item_get_row (item)->is_hint && row != NULL && row->region != 0;
}

static gboolean
is_classed (gpointer session)
{
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return row != NULL && strcmp (row->class_now, "βδ") == 0;
}

static const TfShiftRow *
shift_row (TfSession *session, guint k)
{
  return g_ptr_array_index (tf_session_get_shift (session)->rows, k);
}

/* A session whose list is in sight and whose last listed hint is kept. */
static TfSession *
session_with_mark (const char *name)
{
  g_autofree char *path = test_desk_path (name);
  TfSession *session = test_desk_session (path);
  tf_session_set_list_shown (session, TRUE);
  test_desk_wait ("the list", has_shift, session);
  g_assert_cmpuint (tf_session_get_shift (session)->rows->len, >, 3);
  const TfShiftRow *last = shift_row (session, tf_session_get_shift (session)->rows->len - 1);
  g_assert_true (tf_session_choose_mark (session, last->mark, last->is_hint));
  g_assert_true (tf_session_get_shift_row (session) == last);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark in the list", is_marked, session);
  return session;
}

static void
the_classed_come_first (void)
{
  g_autoptr (TfSession) session = session_with_mark ("list.ledger");
  tf_session_set_class (session, "β");
  tf_session_set_class (session, "δ");
  test_desk_wait ("the class in the list", is_classed, session);
  g_assert_true (tf_session_get_shift_row (session) == shift_row (session, 0));
  g_assert_cmpint (shift_row (session, 0)->group, ==, TF_SHIFT_CLASSED);
  /* down the list and up again */
  g_assert_true (tf_session_step_listed (session, 1));
  g_assert_true (tf_session_get_shift_row (session) == shift_row (session, 1));
  g_assert_true (tf_session_step_listed (session, -1));
  g_assert_false (tf_session_step_listed (session, -1));
  tf_session_close (session);
}

static gboolean
has_note (gpointer session)
{
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return row != NULL && row->notes->len == 1;
}

static gboolean
is_settled (gpointer session)
{
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return row != NULL && (row->notes->len == 0 || ((TfRegionNote *)g_ptr_array_index (row->notes, 0))->resolved);
}

static gboolean
is_handed_over (gpointer session)
{
  const TfShift *shift = tf_session_get_shift (session);
  return shift != NULL && tf_time_is_known (shift->since);
}

static void
notes_and_hand_over (void)
{
  g_autoptr (TfSession) session = session_with_mark ("shift.ledger");
  g_assert_false (tf_session_can_settle (session));
  g_assert_true (tf_session_set_note (session, "growing"));
  test_desk_wait ("the note", has_note, session);
  g_assert_true (tf_session_hand_over (session));
  test_desk_wait ("the hand-over", is_handed_over, session);
  const TfShiftRow *row = tf_session_get_shift_row (session);
  g_assert_cmpint (tf_shift_note_state (g_ptr_array_index (row->notes, 0), tf_session_get_shift (session)->since), ==,
                   TF_NOTE_STATE_CARRIED);
  g_assert_true (tf_session_can_settle (session));
  g_assert_true (tf_session_settle (session));
  test_desk_wait ("the note settled", is_settled, session);
  tf_session_close (session);
}

/* -- what others list --------------------------------------------------------------------------- */

static gboolean
is_proposed (gpointer session)
{
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return row != NULL && row->proposed->len == 1;
}

static gboolean
is_confirmed (gpointer session)
{
  const TfShiftRow *row = tf_session_get_shift_row (session);
  return row != NULL && row->others != NULL;
}

/* The day's list with one region where ours is (carried to 24:00 UT: 18 h on, about 10 degrees). */
static char *
write_summary (const TfShiftRow *row)
{
  char *path = test_desk_path ("1013regions.txt");
  int lat = (int)lround (row->lat_deg), cmd = (int)lround (row->cmd_deg + 9.9), lon = (int)lround (row->carrington_lon_deg) % 360;
  g_autofree char *text = g_strdup_printf (
      ":Issued: 2013 Oct 13 0030 UTC\nSolar Region Summary\nReport compiled from data received on 12 Oct\n"
      "I. Regions with Sunspots. Locations Valid at 12/2400Z\nNmbr Location Lo Area Z LL NN Mag Type\n"
      "1864 %c%02d%c%02d %03d 0120 Dai 08 11 Beta-Gamma\nII. Regions Due to Return\nNONE\n",
      lat < 0 ? 'S' : 'N', ABS (lat), cmd < 0 ? 'E' : 'W', ABS (cmd), lon);
  g_assert_true (g_file_set_contents (path, text, -1, NULL));
  return path;
}

static void
what_others_list_is_confirmed (void)
{
  g_autoptr (TfSession) session = session_with_mark ("others.ledger");
  g_assert_false (tf_session_can_confirm (session));
  g_autofree char *path = write_summary (tf_session_get_shift_row (session));
  g_assert_true (tf_session_bring (session, path));
  test_desk_wait ("the proposal", is_proposed, session);
  const TfOthers *proposed = g_ptr_array_index (tf_session_get_shift_row (session)->proposed, 0);
  g_assert_cmpstr (proposed->number, ==, "11864");
  g_assert_cmpfloat (proposed->apart_deg, <, 1.5);
  g_assert_true (tf_session_confirm (session));
  test_desk_wait ("the match", is_confirmed, session);
  const TfShiftRow *row = tf_session_get_shift_row (session);
  g_assert_cmpstr (row->external, ==, "11864");
  g_assert_cmpstr (row->others->mw_class, ==, "βγ");
  g_assert_cmpstr (row->class_now, ==, ""); /* theirs stands beside ours, never over it */
  g_assert_cmpfloat (row->others->area_msh, >, 119);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the match taken back", is_proposed, session);
  tf_session_close (session);
}

/* -- figures of a drawn mark, and sheets --------------------------------------------------------- */

static gboolean
has_figures (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  if (item == NULL || tf_session_get_pending (session) > 0)
    return FALSE;
  g_autoptr (TfLedger) ledger = tf_ledger_open (tf_session_get_ledger_path (session), NULL);
  g_autoptr (TfRow) row = tf_ledger_row (ledger, tf_region_item_get_row (item)->mark, FALSE, NULL);
  return row != NULL && row->complexity_method != NULL;
}

static void
drawn_marks_get_their_figures (void)
{
  g_autoptr (TfSession) session = session_with_mark ("figures.ledger");
  const TfRow *row = tf_region_item_get_row (tf_session_get_region (session));
  tf_session_set_draft (session, tf_outline_deform (row->outline, 0.2, 0, 1.1, (double[3]){ 0 }, (double[3]){ 0 }));
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("its figures", has_figures, session);
  tf_session_close (session);
}

static gboolean
is_there (gpointer path)
{
  return g_file_test (path, G_FILE_TEST_EXISTS);
}

static void
sheets_are_written (void)
{
  g_autoptr (TfSession) session = session_with_mark ("sheets.ledger");
  g_autofree char *shift = test_desk_path ("shift.json"), *region = test_desk_path ("region.pdf");
  g_assert_true (tf_session_write_shift (session, shift));
  test_desk_wait ("the shift sheet", is_there, shift);
  g_assert_true (tf_session_can_write_region (session));
  g_assert_true (tf_session_write_region (session, region));
  test_desk_wait ("the region sheet", is_there, region);
  g_autofree char *text = NULL;
  g_assert_true (g_file_get_contents (shift, &text, NULL, NULL));
  g_assert_nonnull (strstr (text, "\"desk\": \"north desk\""));
  tf_session_close (session);
}

void
test_desk_add_list (void)
{
  g_test_add_func ("/desk/list/the-classed-come-first", the_classed_come_first);
  g_test_add_func ("/desk/list/open-notes-carry-over-until-settled", notes_and_hand_over);
  g_test_add_func ("/desk/list/what-others-list-is-proposed-and-confirmed", what_others_list_is_confirmed);
  g_test_add_func ("/desk/list/drawn-marks-get-their-figures", drawn_marks_get_their_figures);
  g_test_add_func ("/desk/list/sheets-are-written", sheets_are_written);
}
