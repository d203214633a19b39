/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* A frame's geometry corrected by hand: tried, kept, undone; what becomes of hints and marks. */

#include "test-desk.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"

static TfCorrection
shown (TfSession *session)
{
  return tf_correction_of (tf_frame_get_geometry (tf_session_get_frame (session)));
}

static const TfRow *
row_of (TfSession *session, guint k)
{
  g_autoptr (TfRegionItem) item = g_list_model_get_item (tf_session_get_regions (session), k);
  return item != NULL ? tf_region_item_get_row (item) : NULL; /* the list holds it */
}

static const TfRow *
find_mark (TfSession *session)
{
  guint n = g_list_model_get_n_items (tf_session_get_regions (session));
  for (guint k = 0; k < n; k++)
    if (!row_of (session, k)->is_hint)
      return row_of (session, k);
  return NULL;
}

static gboolean
has_mark (gpointer session)
{
  return find_mark (session) != NULL && tf_session_get_pending (session) == 0;
}

static gboolean
is_corrected (gpointer session)
{
  TfCorrection c = tf_session_get_correction (session);
  return tf_correction_is_set (&c) && !tf_session_is_loading (session)
         && tf_session_count_elsewhere (session) == 1;
}

static gboolean
is_measured_again (gpointer session)
{
  return tf_session_count_elsewhere (session) == 0 && tf_session_get_pending (session) == 0
         && find_mark (session) != NULL;
}

static gboolean
is_as_header (gpointer session)
{
  TfCorrection c = tf_session_get_correction (session);
  return !tf_correction_is_set (&c) && !tf_session_is_loading (session)
         && tf_session_get_pending (session) == 0;
}

/* Where the row's outline lies in the pixels. */
static void
middle_pixel (TfSession *session, const TfRow *row, double at[2])
{
  double lon, lat, radius;
  tf_outline_get_cap (row->outline, &lon, &lat, &radius);
  g_assert_true (tf_geometry_sun_to_pixel (tf_frame_get_geometry (tf_session_get_frame (session)),
                                           lon, lat, &at[0], &at[1], NULL));
}

static TfSession *
session_with_mark (const char *path)
{
  TfSession *session = test_desk_session (path);
  tf_session_step_hint (session, 1);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", has_mark, session);
  return session;
}

static void
correct (TfSession *session, double dx)
{
  TfCorrection c = shown (session);
  c.centre_x += dx;
  c.north_angle_deg += 2;
  tf_session_set_preview (session, &c);
  g_assert_true (tf_session_keep_geometry (session));
  test_desk_wait ("the corrected frame", is_corrected, session);
}

static void
corrected_and_undone (void)
{
  g_autofree char *path = test_desk_path ("geometry.ledger");
  g_autoptr (TfSession) session = session_with_mark (path);
  TfCorrection header = shown (session);
  double before[2], after[2];
  middle_pixel (session, find_mark (session), before);
  correct (session, 5);
  TfCorrection now = shown (session);
  tf_check_near ("centre", now.centre_x, header.centre_x + 5, 1e-6);
  tf_check_near ("north", now.north_angle_deg, header.north_angle_deg + 2, 1e-6);
  middle_pixel (session, find_mark (session), after);
  tf_check_near ("the mark's column", after[0], before[0], 0.5); /* round the same pixels */
  tf_check_near ("the mark's row", after[1], before[1], 0.5);
  g_assert_nonnull (tf_notes_find (find_mark (session)->measure.cautions, "measured-elsewhere"));
  g_assert_null (strstr (find_mark (session)->method, "geometry="));
  g_assert_true (tf_session_measure_again (session));
  test_desk_wait ("the marks measured again", is_measured_again, session);
  const TfRow *mark = find_mark (session);
  g_assert_nonnull (strstr (mark->method, "geometry="));
  g_assert_nonnull (tf_notes_find (mark->measure.cautions, "geometry-by-hand"));
  g_assert_cmpstr (mark->origin, ==, "changed");
  tf_session_undo (session); /* the mark measured again */
  test_desk_wait ("the first mark", is_corrected, session);
  tf_session_undo (session); /* the geometry */
  test_desk_wait ("the header's geometry", is_as_header, session);
  now = shown (session);
  tf_check_near ("centre", now.centre_x, header.centre_x, 1e-6);
  g_assert_null (tf_notes_find (find_mark (session)->measure.cautions, "measured-elsewhere"));
  tf_session_close (session);
}

/* It is the person's own: another sees the header's; a new window opens with it. */
static void
it_is_the_persons (void)
{
  g_autofree char *path = test_desk_path ("own-geometry.ledger");
  g_autoptr (TfSession) session = session_with_mark (path);
  TfCorrection header = shown (session);
  correct (session, -3);
  tf_session_set_person (session, "south desk");
  test_desk_wait ("the header's geometry", is_as_header, session);
  tf_check_near ("centre", shown (session).centre_x, header.centre_x, 1e-6);
  tf_session_set_person (session, "north desk");
  test_desk_wait ("the corrected frame", is_corrected, session);
  tf_check_near ("centre", shown (session).centre_x, header.centre_x - 3, 1e-6);
  tf_session_close (session);
}

/* A hint was measured by the header: keeping it makes a draft of it, measured as the frame is. */
static void
a_hint_becomes_a_draft (void)
{
  g_autofree char *path = test_desk_path ("hint-geometry.ledger");
  g_autoptr (TfSession) session = session_with_mark (path);
  correct (session, 4);
  while (!tf_region_item_get_row (tf_session_get_region (session))->is_hint)
    g_assert_true (tf_session_step_hint (session, 1));
  TfRegionItem *hint = tf_session_get_region (session);
  g_assert_true (tf_session_keep (session));
  g_assert_nonnull (tf_session_get_draft (session));
  g_assert_true (tf_session_get_replaced (session) == hint);
  g_assert_nonnull (strstr (tf_session_get_method (session), "geometry="));
  tf_session_close (session);
}

static gboolean
has_fit (gpointer session)
{
  TfCorrection c = tf_session_get_preview (session);
  return tf_correction_is_set (&c);
}

static void
limb_is_found (void)
{
  g_autofree char *path = test_desk_path ("limb.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  TfCorrection header = shown (session);
  tf_session_fit_limb (session);
  test_desk_wait ("the limb", has_fit, session);
  TfCorrection fit = tf_session_get_preview (session);
  tf_check_near ("centre x", fit.centre_x, header.centre_x, 0.5);
  tf_check_near ("centre y", fit.centre_y, header.centre_y, 0.5);
  tf_check_near ("radius", fit.radius_px, header.radius_px, 0.5);
  tf_check_near ("north stays", fit.north_angle_deg, header.north_angle_deg, 0);
  tf_session_close (session);
}

static gboolean
has_two (gpointer session)
{
  return tf_session_get_n_frames (session) == 2 && tf_session_get_progress (session, NULL) == NULL;
}

static gboolean
has_witness (gpointer session)
{
  return tf_session_get_witness (session) != NULL;
}

static void
witness_is_heard (void)
{
  g_autofree char *path = test_desk_path ("witness.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  const char *frames[] = { TF_DEMO_FRAMES "/brindle-20131012-1800.fits", NULL };
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("two frames", has_two, session);
  tf_session_step_frame (session, 1);
  test_desk_wait ("the witness", has_witness, session);
  g_assert_cmpstr (tf_note_get_code (tf_session_get_witness (session)), ==, "orientation-agrees");
  tf_session_close (session);
}

void
test_desk_add_geometry (void)
{
  g_test_add_func ("/desk/geometry/the-orientation-witness-is-heard", witness_is_heard);
  g_test_add_func ("/desk/geometry/is-corrected-measured-again-and-undone", corrected_and_undone);
  g_test_add_func ("/desk/geometry/is-the-persons-own", it_is_the_persons);
  g_test_add_func ("/desk/geometry/a-hint-becomes-a-draft", a_hint_becomes_a_draft);
  g_test_add_func ("/desk/geometry/a-limb-fit-is-tried-first", limb_is_found);
}
