/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "bench-bare.h"

#include <fitsio.h>
#include <math.h>

#include "tf-pool.h"

struct _Bare
{
  guint threads;
  fitsfile **files;
  long width, height;
  TfPixels *pixels; /* huge pages for the yardstick as well */
};

typedef struct
{
  Bare *bare;
  guint k;
  int status;
} Share;

static gboolean
find_picture (fitsfile *file, long axes[2], int *status)
{
  int n = 0, type = 0;
  fits_get_img_dim (file, &n, status);
  if (*status == 0 && n < 2)
    fits_movabs_hdu (file, 2, &type, status);
  fits_get_img_dim (file, &n, status);
  if (*status == 0 && n == 2)
    fits_get_img_size (file, 2, axes, status);
  return *status == 0 && n == 2;
}

Bare *
bench_bare_new (const char *path, guint threads)
{
  Bare *bare = g_new0 (Bare, 1);
  long axes[2] = { 0, 0 };
  int status = 0;
  bare->threads = threads;
  bare->files = g_new0 (fitsfile *, threads);
  for (guint k = 0; k < threads; k++)
    if (fits_open_diskfile (&bare->files[k], path, READONLY, &status) != 0 || !find_picture (bare->files[k], axes, &status))
      {
        bench_bare_free (bare);
        return NULL;
      }
  bare->width = axes[0];
  bare->height = axes[1];
  bare->pixels = tf_pixels_new (NULL, (gsize)(axes[0] * axes[1]));
  return bare;
}

void
bench_bare_free (Bare *bare)
{
  int status = 0;
  for (guint k = 0; k < bare->threads; k++)
    if (bare->files[k] != NULL)
      fits_close_file (bare->files[k], &status);
  tf_pixels_unref (bare->pixels);
  g_free (bare->files);
  g_free (bare);
}

static gpointer
read_share (gpointer data)
{
  Share *share = data;
  Bare *bare = share->bare;
  long first = bare->height * (long)share->k / (long)bare->threads;
  long end = bare->height * (long)(share->k + 1) / (long)bare->threads, at[2] = { 1, first + 1 };
  float none = NAN;
  int any = 0;
  fits_read_pix (bare->files[share->k], TFLOAT, at, bare->width * (end - first), &none,
                 tf_pixels_get (bare->pixels) + first * bare->width, &any, &share->status);
  return NULL;
}

guint
bench_bare_read (Bare *bare)
{
  g_autofree Share *shares = g_new0 (Share, bare->threads);
  g_autofree GThread **threads = g_new0 (GThread *, bare->threads);
  int status = 0;
  for (guint k = 0; k < bare->threads; k++)
    shares[k] = (Share){ bare, k, 0 };
  for (guint k = 1; k < bare->threads; k++)
    threads[k] = g_thread_new ("bare", read_share, &shares[k]);
  read_share (&shares[0]);
  for (guint k = 1; k < bare->threads; k++)
    g_thread_join (threads[k]);
  for (guint k = 0; k < bare->threads; k++)
    status |= shares[k].status;
  return status == 0 ? (guint)(bare->width * bare->height) : 0;
}
