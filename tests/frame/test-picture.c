/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-picture.h"

static const TfPaint paint
    = { .range_gauss = 100, .palette = TF_PALETTE_GREY, .ground = 0xff112233u };

/* A disk of 200 pixels a side whose field is a smooth function of the place, NaN off the disk. */
static TfFrame *
smooth_disk (double turn)
{
  TfFrameInfo *info = disk_info (200, 90, turn);
  g_autofree float *pixels = g_new (float, 200 * 200);
  for (guint k = 0; k < 200 * 200; k++)
    {
      TfPlace p;
      gboolean on = tf_geometry_pixel_to_sun (&info->geometry, k % 200 + 1.0, k / 200 + 1.0, &p);
      pixels[k]
          = on ? (float)(60 * sin (p.lat_deg * TF_DEG * 2) + 30 * sin (p.cmd_deg * TF_DEG)) : NAN;
    }
  return tf_frame_new (info, pixels, NULL);
}

static void
check_round_trip (TfView *view, const TfGeometry *g)
{
  for (double vy = 60; vy < view->height; vy += 37)
    for (double vx = 80; vx < view->width; vx += 41)
      {
        double x, y, bx, by;
        TfPlace place;
        if (tf_view_to_pixel (view, g, vx, vy, &x, &y)
            && tf_view_from_pixel (view, g, x, y, &bx, &by))
          {
            tf_check_near ("view x there and back", bx, vx, 1e-6);
            tf_check_near ("view y there and back", by, vy, 1e-6);
          }
        if (tf_view_to_sun (view, g, vx, vy, &place) && !isnan (place.mu) && place.mu > 0.02)
          {
            g_assert_true (
                tf_view_from_sun (view, g, place.carrington_lon_deg, place.lat_deg, &bx, &by));
            tf_check_near ("view x over the Sun", bx, vx, 1e-4);
            tf_check_near ("view y over the Sun", by, vy, 1e-4);
          }
      }
}

static void
test_views (void)
{
  for (int turn = -170; turn < 180; turn += 50)
    {
      g_autoptr (TfFrame) frame = smooth_disk (turn);
      const TfGeometry *g = tf_frame_get_geometry (frame);
      for (int look = 0; look < 3; look++)
        {
          TfView view = { .look = (TfLook)look,
                          .width = 640,
                          .height = 480,
                          .centre_lon_deg = 140,
                          .centre_lat_deg = 15 };
          double x, y;
          tf_view_fit (&view, g, TRUE);
          check_round_trip (&view, g);
          TfPlace before, after;
          double vx = look == TF_LOOK_UNROLLED ? 400 : 350, vy = 200;
          g_assert_true (tf_view_to_sun (&view, g, vx, vy, &before));
          tf_view_zoom (&view, g, 2.5, vx, vy);
          g_assert_true (tf_view_to_sun (&view, g, vx, vy, &after));
          tf_check_near ("longitude under the pointer", after.carrington_lon_deg,
                         before.carrington_lon_deg, 1e-6);
          tf_check_near ("latitude under the pointer", after.lat_deg, before.lat_deg, 1e-6);
          tf_view_pan (&view, g, 13, -7);
          g_assert_true (
              tf_view_from_sun (&view, g, after.carrington_lon_deg, after.lat_deg, &x, &y));
          tf_check_near ("dragged right", x, vx + 13, look == TF_LOOK_CLOSE ? 0.5 : 1e-6);
          tf_check_near ("dragged up", y, vy - 7, look == TF_LOOK_CLOSE ? 0.5 : 1e-6);
          check_round_trip (&view, g);
        }
    }
}

/* Solar north is up and west right in a fitted view, however the frame is turned. */
static void
test_north_up (void)
{
  for (int turn = -180; turn < 180; turn += 45)
    {
      g_autoptr (TfFrame) frame = smooth_disk (turn);
      const TfGeometry *g = tf_frame_get_geometry (frame);
      TfView view = { .look = TF_LOOK_DISK, .width = 300, .height = 200 };
      double x0, y0, x1, y1;
      tf_view_fit (&view, g, TRUE);
      g_assert_true (tf_view_from_sun (&view, g, 120, 5, &x0, &y0));
      tf_check_near ("the centre of the disk", x0, 150, 1e-3);
      tf_check_near ("the centre of the disk", y0, 100, 1e-3);
      g_assert_true (tf_view_from_sun (&view, g, 120, 45, &x1, &y1));
      tf_check_near ("north is straight up", x1, 150, 1e-3);
      tf_check_between ("north is up", y1, 0, 60);
      g_assert_true (tf_view_from_sun (&view, g, 160, 5, &x1, &y1));
      tf_check_between ("west is right", x1, 200, 300);
    }
}

/* The colour of every view pixel against the field at its place: smooth, so that a seam or a
 * shift would show. */
static void
test_render (void)
{
  g_autoptr (TfFrame) frame = smooth_disk (30);
  const TfGeometry *g = tf_frame_get_geometry (frame);
  g_autofree guint32 *out = g_new (guint32, 400 * 300);
  for (int look = 0; look < 3; look++)
    for (double zoom = 0.5; zoom < 9; zoom *= 2)
      {
        TfView view = { .look = (TfLook)look,
                        .width = 400,
                        .height = 300,
                        .centre_lon_deg = 120,
                        .centre_lat_deg = 10 };
        tf_view_fit (&view, g, TRUE);
        view.zoom *= zoom;
        g_assert_true (tf_picture_render (frame, &view, &paint, out, 400, NULL));
        guint shown = 0;
        for (guint k = 0; k < 400 * 300; k += 7)
          {
            TfPlace p;
            double vx = k % 400 + 0.5, vy = k / 400 + 0.5;
            gboolean on = tf_view_to_sun (&view, g, vx, vy, &p) && !isnan (p.mu);
            if (!on && out[k] != paint.ground)
              {
                double x, y; /* at most a pixel beyond the limb */
                gboolean there = tf_view_to_pixel (&view, g, vx, vy, &x, &y);
                tf_check_between ("beyond the limb", there ? hypot (x - 100.5, y - 100.5) : 1e9, 0,
                                  92.5);
              }
            if (!on || p.mu < 0.35)
              continue;
            double value = 60 * sin (p.lat_deg * TF_DEG * 2) + 30 * sin (p.cmd_deg * TF_DEG);
            tf_check_near ("a grey", out[k] & 255, 127.5 * (value / 100 + 1),
                           look == TF_LOOK_DISK && zoom > 2 ? 4 : 3);
            shown++;
          }
        g_assert_cmpuint (shown, >, 1000);
      }
}

/* A map: columns meet their longitudes, and the seam is not smeared. */
static void
test_map_seam (void)
{
  const char *text = "CTYPE1  = 'CRLN-CEA'\nCTYPE2  = 'CRLT-CEA'\nCUNIT1  = 'deg'\nCUNIT2  = "
                     "'deg'\nCRPIX1  = 180.5\nCRPIX2  = 90.5\n"
                     "CRVAL1  = 200\nCRVAL2  = 0\nCDELT1  = 1\nCDELT2  = 0.63661977236758\nCAR_ROT "
                     "= 2100\nBUNIT   = 'G'\n";
  g_autoptr (TfHeader) header = tf_header_read (text, -1);
  TfFrameInfo *info = tf_frame_info_read (header, 360, 180);
  g_assert_cmpint (info->kind, ==, TF_KIND_MAP);
  g_autofree float *pixels = g_new (float, 360 * 180);
  for (guint k = 0; k < 360 * 180; k++)
    pixels[k] = k % 360 < 180 ? -80 : 80; /* the seam (20 deg) and the middle (200 deg) are steps */
  g_autoptr (TfFrame) frame = tf_frame_new (info, pixels, NULL);
  g_autofree guint32 *out = g_new (guint32, 720 * 100);
  TfView view
      = { .look = TF_LOOK_UNROLLED, .width = 720, .height = 100, .zoom = 2, .centre_lon_deg = 20 };
  g_assert_true (tf_picture_render (frame, &view, &paint, out, 720, NULL));
  for (guint row = 0; row < 100; row += 9)
    for (guint x = 4; x < 716; x++)
      if (x < 357 || x > 362)
        tf_check_near ("no smear", out[row * 720 + x] & 255, x < 360 ? 229.5 : 25.5, 2);
}

static void
test_threads (void)
{
  g_autoptr (TfFrame) frame = smooth_disk (12);
  g_autoptr (TfWorkers) workers = tf_workers_new (3);
  TfWork work = { .workers = workers };
  g_autofree guint32 *a = g_new0 (guint32, 310 * 333), *b = g_new0 (guint32, 310 * 333);
  for (int look = 0; look < 3; look++)
    {
      TfView view = { .look = (TfLook)look, .width = 307, .height = 333, .centre_lon_deg = 130 };
      tf_view_fit (&view, tf_frame_get_geometry (frame), FALSE);
      TfPaint amber = paint;
      amber.palette = TF_PALETTE_AMBER_INDIGO;
      g_assert_true (tf_picture_render (frame, &view, &amber, a, 310, NULL));
      g_assert_true (tf_picture_render (frame, &view, &amber, b, 310, &work));
      g_assert_cmpmem (a, 310 * 333 * 4, b, 310 * 333 * 4);
      g_assert_cmpuint (a[309], ==, 0); /* beyond the view: left alone */
    }
  TfView none = { .look = TF_LOOK_DISK, .width = 10, .height = 10 };
  g_assert_false (tf_picture_render (frame, &none, &paint, a, 310, NULL));
}

/* Palettes: their ends and their middle. */
static void
test_palettes (void)
{
  TfFrameInfo *info = disk_info (64, 28, 0);
  g_autofree float *pixels = g_new (float, 64 * 64);
  for (guint k = 0; k < 64 * 64; k++)
    pixels[k] = k % 64 < 20 ? -1000 : k % 64 < 40 ? 0 : 1000;
  g_autoptr (TfFrame) frame = tf_frame_new (info, pixels, NULL);
  TfView view = {
    .look = TF_LOOK_DISK, .width = 64, .height = 64, .zoom = 1, .centre_x = 32.5, .centre_y = 32.5
  };
  guint32 out[64 * 64];
  TfPaint p = paint;
  g_assert_true (tf_picture_render (frame, &view, &p, out, 64, NULL));
  g_assert_cmphex (out[32 * 64 + 5], ==, 0xff000000u);
  g_assert_cmphex (out[32 * 64 + 60], ==, 0xffffffffu);
  p.palette = TF_PALETTE_AMBER_INDIGO;
  g_assert_true (tf_picture_render (frame, &view, &p, out, 64, NULL));
  g_assert_cmphex (out[32 * 64 + 5], ==, 0xff4b5fd6u);
  g_assert_cmphex (out[32 * 64 + 60], ==, 0xffd98a00u);
  tf_check_between ("light middle", out[32 * 64 + 30] & 255, 240, 255);
  p.dark = TRUE;
  g_assert_true (tf_picture_render (frame, &view, &p, out, 64, NULL));
  tf_check_between ("dark middle", out[32 * 64 + 30] & 255, 0, 40);
}

void
add_picture_tests (void)
{
  g_test_add_func ("/frame/view/there-and-back-zoom-and-pan", test_views);
  g_test_add_func ("/frame/view/north-is-up-west-is-right", test_north_up);
  g_test_add_func ("/frame/picture/shows-the-field-of-its-place", test_render);
  g_test_add_func ("/frame/picture/a-map's-seam-is-not-smeared", test_map_seam);
  g_test_add_func ("/frame/picture/threads-draw-the-same", test_threads);
  g_test_add_func ("/frame/picture/palettes", test_palettes);
}
