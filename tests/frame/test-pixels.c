/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-correction.h"
#include "tf-frame-write.h"

enum
{
  SIDE = 512
};

/* Noise of 12 (1 + (1 - mu)) G; with @active, fields of 20 to 1500 G over a third of the
 * activity belts. */
static float *
noisy_disk (const TfGeometry *g, guint32 seed, gboolean active)
{
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  float *pixels = g_new (float, (gsize)g->width * g->height);
  for (guint k = 0; k < g->width * g->height; k++)
    {
      TfPlace p;
      gboolean on = tf_geometry_pixel_to_sun (g, k % g->width + 1.0, k / g->width + 1.0, &p);
      double field = 0;
      if (active && on && fabs (fabs (p.lat_deg) - 20) < 14
          && sin (p.cmd_deg * 8 * TF_DEG) + 0.4 * sin (p.lat_deg * 0.9) > 0.6)
        field = (g_rand_boolean (chance) ? 1 : -1) * 20 * exp (4.3 * g_rand_double (chance));
      pixels[k] = on ? (float)(field + 12 * (2 - p.mu) * normal (chance)) : NAN;
    }
  return pixels;
}

/* @step: the values are stored in whole steps of this; 0: as they are. */
static void
check_noise (gboolean active, guint32 seed, float step)
{
  TfFrameInfo *info = disk_info (SIDE, 240, 20);
  g_autofree float *pixels = noisy_disk (&info->geometry, seed, active);
  for (guint k = 0; k < SIDE * SIDE && step > 0; k++)
    pixels[k] = step * roundf (pixels[k] / step);
  g_autoptr (TfFrame) frame = tf_frame_new (info, pixels, NULL);
  guint n = 0;
  const TfNoiseRing *rings = tf_frame_get_noise (frame, &n);
  g_assert_cmpuint (n, >=, 8);
  for (guint k = 1; k < n; k++)
    g_assert_cmpfloat (rings[k].mu, >, rings[k - 1].mu);
  for (double mu = 0.2; mu < 0.96; mu += 0.15)
    tf_check_near ("sigma within 5 %",
                   tf_frame_noise_at (frame, mu) / hypot (12 * (2 - mu), step / sqrt (12)), 1,
                   0.05);
  tf_check_near ("held at the end", tf_frame_noise_at (frame, 1.0), rings[n - 1].gauss, 1e-9);
  tf_check_nan ("no mu, no sigma", tf_frame_noise_at (frame, NAN));
  tf_check_near ("independent pixels", tf_frame_noise_correlation (frame), 1, 0.1);
}

static void
test_noise (void)
{
  for (guint32 seed = 1; seed < 4; seed++)
    {
      check_noise (FALSE, seed, 0);
      check_noise (TRUE, seed, 0);
    }
}

/* A median of whole numbers is a whole number: the runs of equal values must be looked into. */
static void
test_stepped_noise (void)
{
  for (guint32 seed = 1; seed < 4; seed++)
    {
      check_noise (FALSE, seed, 1);
      check_noise (TRUE, seed, 5);
      check_noise (FALSE, seed, 10);
    }
}

/* White noise smoothed by a Gaussian of 0.7 pixels: the variance of a large sum is that of the
 * unsmoothed pixels, so the factor is 1 / sum of the squared kernel. */
static void
test_correlation (void)
{
  double kernel[7], total = 0, squares = 0;
  for (int k = 0; k < 7; k++)
    {
      kernel[k] = exp (-0.5 * (k - 3) * (k - 3) / (0.7 * 0.7));
      total += kernel[k];
    }
  for (int k = 0; k < 7; k++)
    {
      kernel[k] /= total;
      squares += kernel[k] * kernel[k];
    }
  TfFrameInfo *info = disk_info (SIDE, 240, 0);
  g_autoptr (GRand) chance = g_rand_new_with_seed (9);
  g_autofree float *raw = g_new (float, SIDE *SIDE), *rows = g_new0 (float, SIDE *SIDE),
                   *out = g_new0 (float, SIDE *SIDE);
  for (guint k = 0; k < SIDE * SIDE; k++)
    raw[k] = (float)(20 * normal (chance));
  for (guint k = 3; k < SIDE * SIDE - 3; k++)
    for (int j = -3; j <= 3; j++)
      rows[k] += (float)kernel[j + 3] * raw[(int)k + j];
  for (guint k = 3 * SIDE; k < SIDE * (SIDE - 3); k++)
    for (int j = -3; j <= 3; j++)
      out[k] += (float)kernel[j + 3] * rows[(int)k + j * SIDE];
  g_autoptr (TfFrame) frame = tf_frame_new (info, out, NULL);
  double expected = 1 / (squares * squares);
  tf_check_near ("smoothed pixels", tf_frame_noise_correlation (frame) / expected, 1, 0.1);
}

static void
test_no_noise (void)
{
  TfFrameInfo *info = disk_info (100, 45, 0);
  g_autofree float *pixels = g_new0 (float, 100 * 100);
  pixels[5050] = 100;
  g_autoptr (TfFrame) frame = tf_frame_new (info, pixels, NULL);
  tf_check_near ("a frame without noise", tf_frame_noise_at (frame, 0.5), 0, 0);
  TfFrameInfo *empty = disk_info (100, 45, 0);
  for (guint k = 0; k < 100 * 100; k++)
    pixels[k] = NAN;
  g_autoptr (TfFrame) nothing = tf_frame_new (empty, pixels, NULL);
  tf_check_nan ("a frame without values", tf_frame_noise_at (nothing, 0.5));
  tf_check_near ("its correlation", tf_frame_noise_correlation (nothing), 1, 0);
}

/* Every level's pixel is the mean of the finite frame pixels under it, also where the sides are
 * odd. */
static void
test_pyramid (void)
{
  enum
  {
    W = 301,
    H = 203
  };
  const char *text = "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = "
                     "'arcsec'\nCRPIX1  = 100\nCRPIX2  = 90\n"
                     "CRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 2\nCDELT2  = 2\nDATE-AVG= "
                     "'2013-10-12T06:00:00'\nBUNIT   = 'G'\n";
  g_autoptr (TfHeader) header = tf_header_read (text, -1);
  g_autoptr (GRand) chance = g_rand_new_with_seed (2);
  g_autofree float *pixels = g_new (float, W *H);
  for (guint k = 0; k < W * H; k++)
    pixels[k] = g_rand_int_range (chance, 0, 3) == 0 || (k % W < 40 && k / W < 40)
                    ? NAN
                    : (float)g_rand_double_range (chance, -100, 100);
  g_autoptr (TfFrame) frame = tf_frame_new (tf_frame_info_read (header, W, H), pixels, NULL);
  guint level = 0, w, h;
  for (const float *data; (data = tf_frame_get_level (frame, level, &w, &h)) != NULL; level++)
    {
      guint size = 1u << level;
      g_assert_cmpuint (w, ==, (W + size - 1) / size);
      g_assert_cmpuint (h, ==, (H + size - 1) / size);
      for (guint k = 0; k < w * h; k++)
        {
          double sum = 0, n = 0;
          for (guint y = k / w * size; y < MIN ((k / w + 1) * size, H); y++)
            for (guint x = k % w * size; x < MIN ((k % w + 1) * size, W); x++)
              if (!isnan (pixels[y * W + x]))
                {
                  sum += (double)pixels[y * W + x];
                  n++;
                }
          if (n > 0)
            tf_check_near ("a box mean", (double)data[k], sum / n, 1e-4);
          else
            tf_check_nan ("an empty box", (double)data[k]);
        }
    }
  g_assert_cmpuint (level, ==, 4);
}

/* One, two and three threads, with and without a pool whose memory is dirty: the same bits. */
static void
test_same_bits (void)
{
  TfFrameInfo *info = disk_info (SIDE, 240, 0);
  g_autofree float *pixels = noisy_disk (&info->geometry, 5, TRUE);
  tf_frame_info_free (info);
  g_autoptr (TfHeader) header = tf_header_read (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\n"
      "CRPIX1  = 256.5\nCRPIX2  = 256.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 4\nCDELT2  = 4\n"
      "DATE-AVG= '2013-10-12T06:00:00'\nBUNIT   = 'mT'\nCONTENT = 'MAGNETOGRAM'\n",
      -1);
  g_autofree char *path = scratch_file ("threads.fits");
  TfFrameWrite how
      = { .bitpix = 32, .bscale = 0.01, .blank = G_MININT32, .has_blank = TRUE, .compress = TRUE };
  g_assert_true (tf_frame_write (path, header, pixels, SIDE, SIDE, &how, NULL));
  g_autoptr (TfFrame) one = tf_frame_open (path, NULL, NULL, NULL);
  g_assert_nonnull (one);
  tf_check_near ("mT became G",
                 tf_frame_value (one, 250, 250) / (10 * (double)pixels[249 * SIDE + 249]), 1, 1e-2);
  g_autoptr (TfPool) pool = tf_pool_new ();
  for (guint turn = 0; turn < 6; turn++)
    {
      g_autoptr (TfWorkers) workers = tf_workers_new (1 + turn % 3);
      TfWork work = { .pool = pool, .workers = workers };
      g_autoptr (TfFrame) other = tf_frame_open (path, NULL, &work, NULL);
      g_assert_nonnull (other);
      guint n, m, w, h;
      for (guint level = 0; tf_frame_get_level (one, level, &w, &h) != NULL; level++)
        g_assert_cmpmem (tf_frame_get_level (one, level, NULL, NULL), (gsize)w * h * 4,
                         tf_frame_get_level (other, level, NULL, NULL), (gsize)w * h * 4);
      const TfNoiseRing *a = tf_frame_get_noise (one, &n), *b = tf_frame_get_noise (other, &m);
      g_assert_cmpuint (n, ==, m);
      g_assert_cmpmem (a, n * sizeof *a, b, m * sizeof *b);
    }
}

/* No BLANK, but one value all over the sky: left out there, and on the disk too when no field
 * can be that strong. */
static void
test_fill_off_disk (void)
{
  g_autoptr (TfHeader) header = tf_header_read (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\n"
      "CRPIX1  = 64.5\nCRPIX2  = 64.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 20\nCDELT2  = 20\n"
      "DATE-AVG= '2013-10-12T06:00:00'\nBUNIT   = 'G'\nCONTENT = 'MAGNETOGRAM'\n",
      -1);
  static const float fills[] = { -32768, 0, -99 };
  g_autofree float *pixels = g_new (float, 128 * 128);
  for (guint f = 0; f < G_N_ELEMENTS (fills); f++)
    {
      g_autoptr (GRand) chance = g_rand_new_with_seed (3);
      for (int k = 0; k < 128 * 128; k++)
        pixels[k] = hypot (k % 128 - 63.5, k / 128 - 63.5) < 47.5 ? (float)(10 * normal (chance))
                                                                  : fills[f];
      pixels[64 * 128 + 60] = fills[f];
      g_autofree char *path = scratch_file ("fill.fits");
      TfFrameWrite how = { .bitpix = -32 };
      g_assert_true (tf_frame_write (path, header, pixels, 128, 128, &how, NULL));
      g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, NULL);
      g_assert_nonnull (frame);
      const TfNote *note = tf_notes_find (tf_frame_get_info (frame)->repairs, "fill-off-disk");
      g_assert_nonnull (note);
      tf_check_near ("the fill", tf_note_get_number (note, 0), (double)fills[f], 0);
      tf_check_nan ("the sky", tf_frame_value (frame, 3, 3));
      if (f == 0)
        tf_check_nan ("no field is so strong", tf_frame_value (frame, 61, 65));
      else
        tf_check_near ("a field may be that", tf_frame_value (frame, 61, 65), (double)fills[f], 0);
      tf_check_near ("the disk", tf_frame_value (frame, 80, 80), (double)pixels[79 * 128 + 79], 0);
    }
}

static void
test_cancel (void)
{
  g_autofree char *path = scratch_file ("threads.fits");
  g_autoptr (TfCancel) cancel = tf_cancel_new ();
  g_autoptr (GError) error = NULL;
  TfWork work = { .cancel = cancel };
  tf_cancel_raise (cancel);
  g_assert_null (tf_frame_open (path, NULL, &work, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_CANCELLED);
}

/* Many threads at once, each with its own turn: wcslib's parser and CFITSIO's handles do not mix
 * them up. */
static gpointer
open_many (gpointer data)
{
  guint wrong = 0;
  for (int k = 0; k < 60; k++)
    {
      double turn = (GPOINTER_TO_INT (data) * 37 + k * 11) % 180 - 90;
      g_autoptr (TfFrameInfo) info = disk_info (100, 40, turn);
      wrong += !(fabs (tf_geometry_north_angle (&info->geometry) - turn) < 1e-5);
      g_autofree char *path = scratch_file ("threads.fits");
      g_autoptr (TfFrame) frame = k % 6 == 0 ? tf_frame_open (path, NULL, NULL, NULL) : NULL;
      wrong += k % 6 == 0 && (frame == NULL || isnan (tf_frame_value (frame, 250, 250)));
    }
  return GUINT_TO_POINTER (wrong);
}

static void
test_many_threads (void)
{
  GThread *threads[4];
  for (int k = 0; k < 4; k++)
    threads[k] = g_thread_new (NULL, open_many, GINT_TO_POINTER (k));
  for (int k = 0; k < 4; k++)
    g_assert_cmpuint (GPOINTER_TO_UINT (g_thread_join (threads[k])), ==, 0);
}

/* A corrected geometry: same pixels, noise by the new rings; the first frame is as it was. */
static void
test_correction (void)
{
  TfFrameInfo *info = disk_info (SIDE, 240, 0);
  g_autofree float *pixels = noisy_disk (&info->geometry, 6, FALSE);
  TfGeometry turned;
  g_assert_true (tf_geometry_make_disk (&turned, SIDE, SIDE, 250, 260,
                                        tf_geometry_scale_arcsec (&info->geometry), 90,
                                        &info->geometry.observer, TF_RADIUS_MM));
  g_autoptr (TfFrame) frame = tf_frame_new (info, pixels, NULL);
  g_autoptr (TfFrame) other = tf_frame_with_geometry (frame, &turned, NULL);
  g_assert_true (tf_frame_get_pixels (other) == tf_frame_get_pixels (frame));
  tf_check_near ("the new turn", tf_geometry_north_angle (tf_frame_get_geometry (other)), 90, 1e-9);
  tf_check_near ("the old turn", tf_geometry_north_angle (tf_frame_get_geometry (frame)), 0, 1e-9);
  g_assert_cmpfloat (tf_frame_noise_at (other, 0.5), >, 0);
}

static gboolean
has (const TfFrame *frame, const char *code)
{
  return tf_notes_find (tf_frame_get_cautions (frame), code) != NULL;
}

/* A header that puts the disk 6 pixels off lies; the person's numbers put it right, and the frame
 * says whose they are. */
static void
test_person_correction (void)
{
  TfFrameInfo *info = disk_info (SIDE, 240, 20);
  g_autofree float *pixels = noisy_disk (&info->geometry, 6, FALSE);
  TfCorrection truth = tf_correction_of (&info->geometry), off = truth;
  off.centre_x += 6;
  off.radius_px *= 1.01;
  off.north_angle_deg = -100;
  g_autoptr (TfFrame) good = tf_frame_new (info, pixels, NULL);
  g_autoptr (TfFrame) bad = tf_frame_corrected (good, &off, NULL);
  g_assert_true (has (bad, "header-lies") && has (bad, "geometry-by-hand"));
  g_autoptr (TfFrame) right = tf_frame_corrected (bad, &truth, NULL);
  g_assert_false (has (right, "header-lies") || has (right, "limb-off"));
  TfCorrection now = tf_correction_of (tf_frame_get_geometry (right));
  tf_check_near ("centre x", now.centre_x, truth.centre_x, 1e-9);
  tf_check_near ("centre y", now.centre_y, truth.centre_y, 1e-9);
  tf_check_near ("radius", now.radius_px, truth.radius_px, 1e-9);
  tf_check_near ("north", now.north_angle_deg, 20, 1e-9);
  TfPlace a, b;
  g_assert_true (tf_geometry_pixel_to_sun (tf_frame_get_geometry (good), 300, 200, &a));
  g_assert_true (tf_geometry_pixel_to_sun (tf_frame_get_geometry (right), 300, 200, &b));
  tf_check_near ("longitude", b.carrington_lon_deg, a.carrington_lon_deg, 1e-9);
  tf_check_near ("latitude", b.lat_deg, a.lat_deg, 1e-9);
  TfCorrection none = tf_correction_none ();
  g_autoptr (TfFrame) itself = tf_frame_corrected (good, &none, NULL);
  g_assert_true (itself == good);
}

static void
test_correction_text (void)
{
  TfCorrection c = { 2048.123456, -12.5, 1888.75, -179.9 }, back;
  g_autofree char *text = tf_correction_dup_text (&c);
  g_assert_true (tf_correction_from_text (&back, text));
  g_assert_true (tf_correction_equal (&c, &back));
  static const char *const bad[]
      = { "", "1,2,3", "1,2,300,4,5", "1,2,nan,4", "1,2,-300,4", "x,2,300,4", "1,2,300,1e9" };
  for (guint k = 0; k < G_N_ELEMENTS (bad); k++)
    {
      g_assert_false (tf_correction_from_text (&back, bad[k]));
      g_assert_false (tf_correction_is_set (&back));
    }
}

/* Round the same pixels under another geometry; over the limb there is none. */
static void
test_outline_between (void)
{
  g_autoptr (TfFrameInfo) info = disk_info (SIDE, 240, 0);
  TfCorrection c = tf_correction_of (&info->geometry);
  TfGeometry other;
  c.centre_x -= 3;
  c.north_angle_deg = 33;
  g_assert_true (tf_correction_apply (&c, &info->geometry, &other));
  double lon = tf_geometry_central_carrington (&info->geometry), x[2], y[2];
  g_autoptr (TfOutline) cap = tf_outline_new_cap (info->time, lon + 20, 15, 5, 12),
                        edge = tf_outline_new_cap (info->time, lon + 88, 0, 1, 12);
  g_autoptr (TfOutline) moved = tf_outline_between (cap, &info->geometry, &other);
  g_assert_nonnull (moved);
  guint n, m;
  const TfVertex *from = tf_outline_get_ring (cap, 0, FALSE, &n),
                 *to = tf_outline_get_ring (moved, 0, FALSE, &m);
  g_assert_cmpuint (n, ==, m);
  for (guint k = 0; k < n; k++)
    {
      tf_geometry_sun_to_pixel (&info->geometry, from[k].lon_deg, from[k].lat_deg, &x[0], &y[0],
                                NULL);
      tf_geometry_sun_to_pixel (&other, to[k].lon_deg, to[k].lat_deg, &x[1], &y[1], NULL);
      tf_check_near ("pixel x", x[1], x[0], 1e-6);
      tf_check_near ("pixel y", y[1], y[0], 1e-6);
    }
  g_autoptr (TfOutline) lost = tf_outline_between (edge, &info->geometry, &other);
  g_assert_null (lost);
}

void
add_pixel_tests (void)
{
  g_test_add_func ("/frame/noise/within-5-percent-also-on-an-active-disk", test_noise);
  g_test_add_func ("/frame/noise/within-5-percent-where-values-are-stored-in-steps",
                   test_stepped_noise);
  g_test_add_func ("/frame/noise/correlation-of-smoothed-noise", test_correlation);
  g_test_add_func ("/frame/noise/none-and-nothing", test_no_noise);
  g_test_add_func ("/frame/pyramid/box-means-know-nan-and-edges", test_pyramid);
  g_test_add_func ("/frame/open/threads-and-pool-give-the-same-bits", test_same_bits);
  g_test_add_func ("/frame/open/a-fill-off-the-disk-is-left-out", test_fill_off_disk);
  g_test_add_func ("/frame/open/many-threads-at-once", test_many_threads);
  g_test_add_func ("/frame/open/is-cancelled", test_cancel);
  g_test_add_func ("/frame/open/a-corrected-geometry", test_correction);
  g_test_add_func ("/frame/correction/puts-right-a-header-that-lies", test_person_correction);
  g_test_add_func ("/frame/correction/as-text-and-back", test_correction_text);
  g_test_add_func ("/frame/correction/outlines-go-with-the-pixels", test_outline_between);
}
