/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Which frames the roll shows, frames that arrive, frames whose file has moved. */

#include "test-desk.h"

#include <string.h>
#include <glib/gstdio.h>

#include "tf-roll-row.h"

static gboolean
has_two (gpointer session)
{
  return tf_session_get_n_frames (session) == 2 && tf_session_get_progress (session, NULL) == NULL;
}

static guint
n_shown (TfSession *session)
{
  return g_list_model_get_n_items (tf_session_get_frames (session));
}

static void
copy_to (const char *from, const char *to)
{
  g_autofree char *bytes = NULL;
  gsize n = 0;
  g_assert_true (g_file_get_contents (from, &bytes, &n, NULL));
  g_assert_true (g_file_set_contents (to, bytes, (gssize)n, NULL));
}

static void
filter (void)
{
  g_autofree char *path = test_desk_path ("filter.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  const char *frames[] = { TF_DEMO_FRAMES "/brindle-20131012-0600-continuum.fits", NULL };
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("two frames", has_two, session);
  static const guint expected[TF_N_ROLL_FILTERS] = { [TF_ROLL_ALL] = 2,
                                                     [TF_ROLL_UNTOUCHED] = 0,
                                                     [TF_ROLL_WAITING] = 1,
                                                     [TF_ROLL_DONE] = 0,
                                                     [TF_ROLL_REFUSED] = 1 };
  for (guint k = 0; k < TF_N_ROLL_FILTERS; k++)
    {
      tf_session_set_roll_filter (session, (TfRollFilter)k);
      g_assert_cmpuint (n_shown (session), ==, expected[k]);
    }
  tf_session_set_roll_filter (session, TF_ROLL_REFUSED);
  g_autoptr (TfFrameItem) item = g_list_model_get_item (tf_session_get_frames (session), 0);
  g_autofree char *words = tf_roll_row_dup_name (item);
  g_assert_nonnull (strstr (words, "refused")); /* for a reader, without the stripe */
  tf_session_set_roll_filter (session, TF_ROLL_ALL);
  g_auto (GStrv) instruments = tf_session_dup_instruments (session);
  guint sum = 0;
  for (guint k = 0; instruments[k] != NULL; k++)
    {
      tf_session_set_roll_instrument (session, instruments[k]);
      g_assert_cmpuint (n_shown (session), >, 0);
      sum += n_shown (session);
    }
  g_assert_cmpuint (sum, ==, 2);
  tf_session_set_roll_instrument (session, "no such instrument");
  g_assert_cmpuint (n_shown (session), ==, 0);
  tf_session_close (session);
}

static void
watched (void)
{
  g_autofree char *path = test_desk_path ("watched.ledger"), *folder = test_desk_path ("arrivals"),
                  *to = g_build_filename (folder, "new.fits", NULL);
  g_autoptr (TfSession) session = test_desk_session (path);
  g_mkdir (folder, 0700);
  g_assert_false (tf_session_set_watched (session, "/no/such/folder"));
  g_assert_null (tf_session_get_watched (session));
  g_assert_true (tf_session_set_watched (session, folder));
  g_assert_cmpstr (tf_session_get_watched (session), ==, folder);
  copy_to (TF_DEMO_FRAMES "/brindle-20131012-1200.fits", to);
  test_desk_wait ("the frame that arrived", has_two, session);
  g_assert_true (tf_session_set_watched (session, NULL));
  tf_session_close (session);
}

static gboolean
is_missing (gpointer session)
{
  return tf_session_is_file_missing (session);
}

static gboolean
is_open (gpointer session)
{
  return tf_session_get_frame (session) != NULL;
}

static void
moved (void)
{
  g_autofree char *path = test_desk_path ("moved.ledger"), *folder = test_desk_path ("elsewhere"),
                  *from = test_desk_path ("here.fits"),
                  *to = g_build_filename (folder, "there.fits", NULL);
  g_autoptr (TfSession) first = test_desk_session (path);
  const char *frames[] = { from, NULL };
  copy_to (TF_DEMO_FRAMES "/brindle-20131012-1200.fits", from);
  tf_session_add_frames (first, (char *const *)frames);
  test_desk_wait ("two frames", has_two, first);
  tf_session_close (first);
  g_mkdir (folder, 0700);
  g_assert_cmpint (g_rename (from, to), ==, 0);
  g_autoptr (TfSession) session = tf_session_new ();
  tf_session_set_view_size (session, 800, 500);
  tf_session_open_ledger (session, path, 0);
  test_desk_wait ("two frames", has_two, session);
  tf_session_step_frame (session, 1);
  test_desk_wait ("the missing file", is_missing, session);
  tf_session_find_moved (session, folder);
  test_desk_wait ("the frame at its new place", is_open, session);
  g_assert_cmpstr (tf_frame_get_path (tf_session_get_frame (session)), ==, to);
  tf_session_close (session);
}

void
test_desk_add_roll (void)
{
  g_test_add_func ("/desk/roll/shows-frames-by-state-and-instrument", filter);
  g_test_add_func ("/desk/roll/takes-in-what-arrives-in-a-folder", watched);
  g_test_add_func ("/desk/roll/finds-a-file-that-has-moved", moved);
}
