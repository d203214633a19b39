/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Saving and making thumbnails leave the main thread alone: no turn of the main loop takes long. Processor time of the thread
 * is taken, which a busy machine does not stretch much; the bound is generous (the budget is 8 ms), a picture of 600 dots an inch
 * made in the main thread would take ten times as much. */

#include "test-desk.h"

#include <glib/gstdio.h>
#include <time.h>

#include "tf-plate-shot.h"
#include "tf-save-as.h"
#include "tf-thumbs.h"

static const double most_ms = 30;

static double
thread_ms (void)
{
  struct timespec t;
  clock_gettime (CLOCK_THREAD_CPUTIME_ID, &t);
  return (double)t.tv_sec * 1e3 + (double)t.tv_nsec / 1e6;
}

/* Turns the main loop until it is so; what the longest turn took. */
static double
longest_turn (const char *what, TestUntil test, gpointer data)
{
  double longest = 0;
  gint64 end = g_get_monotonic_time () + 20 * G_USEC_PER_SEC;
  while (!test (data))
    {
      double start = thread_ms ();
      g_main_context_iteration (NULL, FALSE);
      double took = thread_ms () - start;
      longest = MAX (longest, took);
      if (took < 0.05)
        g_usleep (1000);
      if (g_get_monotonic_time () > end)
        g_error ("waited too long for: %s", what);
    }
  return longest;
}

static void
expect_short (const char *what, double begin_ms, double longest)
{
  g_test_message ("%s: %.1f ms to begin, longest turn %.1f ms", what, begin_ms, longest);
  if (begin_ms > most_ms || longest > most_ms)
    g_error ("%s holds the main thread: %.1f ms to begin, longest turn %.1f ms", what, begin_ms, longest);
}

typedef struct
{
  TfSession *session;
  const char *path;
} Saved;

static gboolean
is_written (gpointer data)
{
  const Saved *saved = data;
  GStatBuf now;
  return g_stat (saved->path, &now) == 0 && now.st_size > 1000 && !tf_save_as_is_busy (saved->session);
}

static gboolean
is_marked (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  return item != NULL && !tf_region_item_get_row (item)->is_hint && tf_session_get_pending (session) == 0;
}

typedef gboolean (*Write) (TfSession *session, const char *path);

static gboolean
write_picture (TfSession *session, const char *path)
{
  tf_plate_shot_save (session, path);
  return TRUE;
}

static void
saves (void)
{
  static const struct
  {
    const char *name;
    Write write;
  } cases[] = { { "picture.png", write_picture },
                { "picture.pdf", write_picture },
                { "region.png", tf_session_write_region },
                { "region.pdf", tf_session_write_region },
                { "shift.png", tf_session_write_shift } };
  g_autofree char *ledger = test_desk_path ("gaps.ledger");
  g_autoptr (TfSession) session = test_desk_session (ledger);
  tf_session_step_hint (session, 1);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", is_marked, session);
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autofree char *path = test_desk_path (cases[k].name);
      double start = thread_ms ();
      g_assert_true (cases[k].write (session, path));
      double begin = thread_ms () - start;
      Saved saved = { session, path };
      expect_short (cases[k].name, begin, longest_turn (cases[k].name, is_written, &saved));
    }
  tf_session_close (session);
}

static gboolean
has_thumbnail (gpointer item)
{
  return tf_frame_item_get_thumbnail (item) != NULL;
}

static void
thumbnails (void)
{
  g_autofree char *ledger = test_desk_path ("thumbs.ledger");
  g_autoptr (TfSession) session = test_desk_session (ledger);
  TfThumbs *thumbs = tf_thumbs_new ();
  double start = thread_ms ();
  tf_thumbs_ask (thumbs, tf_session_get_frame_item (session));
  double begin = thread_ms () - start;
  expect_short ("a thumbnail", begin, longest_turn ("a thumbnail", has_thumbnail, tf_session_get_frame_item (session)));
  tf_thumbs_free (thumbs);
  tf_session_close (session);
}

void
test_desk_add_gaps (void)
{
  g_test_add_func ("/desk/gaps/saving-leaves-the-main-thread-alone", saves);
  g_test_add_func ("/desk/gaps/thumbnails-leave-the-main-thread-alone", thumbnails);
}
