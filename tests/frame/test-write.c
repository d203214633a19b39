/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>

#include "tf-check.h"
#include "tf-frame-write.h"

enum
{
  W = 70,
  H = 50
};

static TfHeader *
a_header (void)
{
  return tf_header_read (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\n"
      "CRPIX1  = 30\nCRPIX2  = 20\nCRVAL1  = 100\nCRVAL2  = -50\nCDELT1  = 2\nCDELT2  = 2\nCROTA2  "
      "= 10\n"
      "DATE-AVG= '2013-10-12T06:00:00'\nDSUN_OBS= 149597870700.0\nHGLN_OBS= 0.0\nHGLT_OBS= 5.0\n"
      "CRLN_OBS= 120.0\nBUNIT   = 'G'\nCONTENT = 'MAGNETOGRAM'\nTELESCOP= 'TEST'\nSIMULATD= T\n"
      "NOTE    = 'A text that is so long that it must go on over a second card of the header, and "
      "on'\n",
      -1);
}

static void
fill (float *pixels)
{
  g_autoptr (GRand) chance = g_rand_new_with_seed (11);
  for (guint k = 0; k < W * H; k++)
    pixels[k] = k % 37 == 5 ? NAN : (float)(50 * normal (chance));
}

static void
round_trip (const TfFrameWrite *how, double tolerance)
{
  float pixels[W * H];
  g_autoptr (GError) error = NULL;
  g_autoptr (TfHeader) header = a_header ();
  g_autofree char *path
      = scratch_file ("a [frame](1)+2.fits"); /* CFITSIO would read the brackets as a wish */
  fill (pixels);
  tf_frame_write (path, header, pixels, W, H, how, &error);
  g_assert_no_error (error);
  g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (tf_frame_get_width (frame), ==, W);
  g_assert_cmpuint (tf_frame_get_height (frame), ==, H);
  g_assert_cmpint (tf_frame_get_hdu (frame), ==, how->compress ? 2 : 1);
  g_assert_true (tf_frame_get_info (frame)->simulated);
  tf_check_near ("the turn", tf_geometry_north_angle (tf_frame_get_geometry (frame)), -10,
                 1e-4); /* CRVAL is off the centre */
  const float *got = tf_frame_get_pixels (frame);
  for (guint k = 0; k < W * H; k++)
    if (isnan (pixels[k]))
      tf_check_nan ("a missing pixel", (double)got[k]);
    else
      tf_check_near ("a pixel", (double)got[k], (double)pixels[k], tolerance);
  tf_check_near ("one value", tf_frame_value (frame, 3.2, 2.4), (double)got[W + 2], 0);
  tf_check_nan ("outside", tf_frame_value (frame, 0.4, 1));
}

static void
test_round_trips (void)
{
  round_trip (&(TfFrameWrite){ .bitpix = -32 }, 0);
  round_trip (&(TfFrameWrite){ .bitpix = 16, .bscale = 0.1, .blank = -32768, .has_blank = TRUE },
              0.0501);
  round_trip (
      &(TfFrameWrite){ .bitpix = 32, .bscale = 0.01, .blank = G_MININT32, .has_blank = TRUE },
      0.00501);
  round_trip (&(TfFrameWrite){ .bitpix = 32,
                               .bscale = 0.01,
                               .bzero = 3,
                               .blank = G_MININT32,
                               .has_blank = TRUE,
                               .compress = TRUE },
              0.00501);
  round_trip (
      &(TfFrameWrite){
          .bitpix = 16, .bscale = 0.1, .blank = -32768, .has_blank = TRUE, .compress = TRUE },
      0.0501);
}

static void
test_same_bytes (void)
{
  float pixels[W * H];
  g_autoptr (TfHeader) header = a_header ();
  fill (pixels);
  for (int compress = 0; compress < 2; compress++)
    {
      TfFrameWrite how = { .bitpix = 16,
                           .bscale = 0.1,
                           .blank = -32768,
                           .has_blank = TRUE,
                           .no_date = TRUE,
                           .compress = compress };
      g_autofree char *one = scratch_file ("one.fits"), *two = scratch_file ("two.fits");
      g_assert_true (tf_frame_write (one, header, pixels, W, H, &how, NULL));
      g_usleep (1100000 * (compress == 0)); /* over a second: no clock may get in */
      g_assert_true (tf_frame_write (two, header, pixels, W, H, &how, NULL));
      g_autofree char *a = tf_frame_file_checksum (one, NULL, NULL),
                      *b = tf_frame_file_checksum (two, NULL, NULL);
      g_assert_nonnull (a);
      g_assert_cmpstr (a, ==, b);
    }
}

static void
test_errors (void)
{
  float pixel = 1;
  g_autoptr (GError) error = NULL;
  TfFrameWrite how = { .bitpix = -32 };
  g_assert_false (tf_frame_write ("/nowhere/at/all.fits", NULL, &pixel, 1, 1, &how, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_WRITE);
  g_clear_error (&error);
  how.bitpix = 64;
  g_autofree char *path = scratch_file ("no.fits");
  g_assert_false (tf_frame_write (path, NULL, &pixel, 1, 1, &how, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_WRITE);
  g_clear_error (&error);
  g_assert_null (tf_frame_open (path, NULL, NULL, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ);
}

void
add_write_tests (void)
{
  g_test_add_func ("/frame/write/what-is-written-reads-back", test_round_trips);
  g_test_add_func ("/frame/write/equal-input-gives-equal-bytes", test_same_bytes);
  g_test_add_func ("/frame/write/errors-are-told", test_errors);
}
