/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-base.h"

#include <stdint.h>
#include <string.h>

#include "tf-bands.h"
#include "tf-check.h"

/* -- pool ------------------------------------------------------------------------------------ */

static void
test_recycling (void)
{
  g_autoptr (TfPool) pool = tf_pool_new ();
  TfPixels *first = tf_pixels_new (pool, 3 << 20);
  float *memory = tf_pixels_get (first);
  g_assert_cmpuint (tf_pixels_get_n (first), ==, 3 << 20);
  memset (memory, 0, (3 << 20) * sizeof (float));
  tf_pixels_unref (first);
  TfPixels *second = tf_pixels_new (pool, (3 << 20) - 5000);
  g_assert_true (tf_pixels_get (second) == memory);
  g_assert_cmpuint (tf_pixels_get_n (second), ==, (3 << 20) - 5000);
  TfPixels *third = tf_pixels_new (pool, 3 << 20);
  g_assert_true (tf_pixels_get (third) != memory);
  tf_pixels_unref (second);
  tf_pixels_unref (third);
  /* A much smaller one does not take a large buffer. */
  g_autoptr (TfPixels) small = tf_pixels_new (pool, 100);
  g_assert_true (tf_pixels_get (small) != memory);
}

static void
test_alignment (void)
{
  g_autoptr (TfPool) pool = tf_pool_new ();
  g_autoptr (TfPixels) large = tf_pixels_new (pool, 1 << 20);
  g_autoptr (TfPixels) small = tf_pixels_new (NULL, 7);
  g_assert_cmpuint ((uintptr_t)tf_pixels_get (large) % (2 << 20), ==, 0);
  g_assert_cmpuint ((uintptr_t)tf_pixels_get (small) % 64, ==, 0);
}

static void
test_outlives_pool (void)
{
  TfPool *pool = tf_pool_new ();
  TfPixels *pixels = tf_pixels_new (pool, 1000);
  TfPixels *again = tf_pixels_ref (pixels);
  tf_pool_unref (pool);
  tf_pixels_unref (pixels);
  tf_pixels_get (again)[999] = 1.0f;
  tf_pixels_unref (again);
  tf_pixels_unref (NULL);
  tf_pool_unref (NULL);
}

static gpointer
take_and_give (gpointer data)
{
  for (guint k = 1; k < 400; k++)
    {
      g_autoptr (TfPixels) pixels = tf_pixels_new (data, 1000 * (k % 7 + 1));
      float *p = tf_pixels_get (pixels);
      gsize n = tf_pixels_get_n (pixels);
      p[0] = (float)k;
      p[n - 1] = (float)k;
      g_thread_yield ();
      g_assert_cmpfloat (p[0], ==, (float)k);
      g_assert_cmpfloat (p[n - 1], ==, (float)k);
    }
  return NULL;
}

static void
test_threads_share_a_pool (void)
{
  g_autoptr (TfPool) pool = tf_pool_new ();
  GThread *threads[4];
  for (guint k = 0; k < 4; k++)
    threads[k] = g_thread_new ("pool", take_and_give, pool);
  for (guint k = 0; k < 4; k++)
    g_thread_join (threads[k]);
}

/* -- bands ----------------------------------------------------------------------------------- */

typedef struct
{
  guint n_rows, n_workers;
  int calls[64];   /* atomic, by band */
  double sums[64]; /* by band */
  TfCancel *cancel;
  guint cancel_at;
} Job;

static void
band (guint number, guint first, guint n, guint worker, gpointer data)
{
  Job *job = data;
  g_atomic_int_inc (&job->calls[number]);
  g_assert_cmpuint (first, ==, number * TF_BAND_ROWS);
  g_assert_cmpuint (worker, <, job->n_workers);
  g_assert_cmpuint (first + n, <=, job->n_rows);
  for (guint row = first; row < first + n; row++)
    job->sums[number] += 1.0 / (1.0 + row) + sin (row);
  if (job->cancel != NULL && number == job->cancel_at)
    tf_cancel_raise (job->cancel);
}

static double
run (guint n_rows, guint n_threads)
{
  g_autoptr (TfWorkers) workers = n_threads > 0 ? tf_workers_new (n_threads) : NULL;
  TfWork work = { .workers = workers };
  Job job = { .n_rows = n_rows, .n_workers = MAX (n_threads, 1) };
  double sum = 0.0;
  g_assert_true (tf_bands_run (n_threads > 0 ? &work : NULL, n_rows, band, &job));
  for (guint k = 0; k < tf_bands_count (n_rows); k++)
    {
      g_assert_cmpint (job.calls[k], ==, 1);
      sum += job.sums[k];
    }
  return sum;
}

static void
test_same_for_any_threads (void)
{
  const guint rows[] = { 1, 63, 64, 65, 1000, 4096 };
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      double alone = run (rows[k], 0);
      tf_check_between ("a sum", alone, 0.1, 20.0);
      for (guint threads = 1; threads <= 5; threads++)
        for (int again = 0; again < 5; again++)
          tf_check_near ("bit for bit", run (rows[k], threads), alone, 0.0);
    }
}

static void
test_band_counts (void)
{
  Job job = { 0 };
  g_assert_cmpuint (tf_bands_count (0), ==, 0);
  g_assert_cmpuint (tf_bands_count (1), ==, 1);
  g_assert_cmpuint (tf_bands_count (64), ==, 1);
  g_assert_cmpuint (tf_bands_count (65), ==, 2);
  g_assert_true (tf_bands_run (NULL, 0, band, &job));
  g_assert_cmpint (job.calls[0], ==, 0);
  g_assert_cmpuint (tf_workers_get_n (NULL), ==, 1);
  g_autoptr (TfWorkers) all = tf_workers_new (0);
  g_assert_cmpuint (tf_workers_get_n (all), ==, g_get_num_processors ());
}

static void
test_cancel (void)
{
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  TfWork work = { .cancel = cancel };
  Job job = { .n_rows = 4096, .n_workers = 1, .cancel = cancel, .cancel_at = 3 };
  g_assert_false (tf_cancel_is_raised (cancel));
  g_assert_false (tf_cancel_is_raised (NULL));
  g_assert_false (tf_bands_run (&work, 4096, band, &job));
  g_assert_true (tf_cancel_is_raised (cancel));
  for (guint k = 0; k < 64; k++)
    g_assert_cmpint (job.calls[k], ==, k <= 3);
}

static void
test_cancel_with_threads (void)
{
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  g_autoptr (TfWorkers) workers = tf_workers_new (3);
  TfWork work = { .cancel = cancel, .workers = workers };
  Job job = { .n_rows = 4096, .n_workers = 3, .cancel = cancel, .cancel_at = 0 };
  g_assert_false (tf_bands_run (&work, 4096, band, &job));
  for (guint k = 0; k < 64; k++)
    g_assert_cmpint (job.calls[k], <=, 1);
  /* The workers are good for the next job. */
  Job next = { .n_rows = 4096, .n_workers = 3 };
  TfWork plain = { .workers = workers };
  g_assert_true (tf_bands_run (&plain, 4096, band, &next));
}

void
add_bands_tests (void)
{
  g_test_add_func ("/base/pool/a-buffer-given-back-is-handed-out-again", test_recycling);
  g_test_add_func ("/base/pool/large-buffers-begin-on-a-huge-page", test_alignment);
  g_test_add_func ("/base/pool/a-buffer-outlives-its-pool", test_outlives_pool);
  g_test_add_func ("/base/pool/threads-never-share-a-buffer", test_threads_share_a_pool);
  g_test_add_func ("/base/bands/one-and-many-threads-agree-bit-for-bit", test_same_for_any_threads);
  g_test_add_func ("/base/bands/every-row-is-in-one-band", test_band_counts);
  g_test_add_func ("/base/bands/cancelling-stops-before-the-next-band", test_cancel);
  g_test_add_func ("/base/bands/workers-live-on-after-a-cancelled-job", test_cancel_with_threads);
}
