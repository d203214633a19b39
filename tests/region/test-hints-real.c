/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Hints on real frames: what must be one hint, and what must not change when the frame is turned, shifted, or its sign flipped.
 * Source of names, places and leaders: daily region summaries of others and fluxes summed by hand in fixed boxes, as listed beside
 * the data (INDEX.md), kept outside the project. */

#include <math.h>

#include "hints-compare.h"
#include "region-builder.h"
#include "test-hints.h"

#define FRAME_2011  "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits"
#define FRAME_2010  "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits"
#define FRAME_OTHER "mwo_m110331_1781_0na1.fits"
#define CUT_OUT     "sdo-hmi_2011-02-14_20-34-12.fits"

typedef struct
{
  const char *frame, *name;
  double lat, cmd; /* deg; west positive */
  int leader;
} Named;

static const Named named[] = {
  { FRAME_2011, "11183", 15, -15, -1 }, { FRAME_2011, "11180", 24, 12, -1 }, { FRAME_2011, "11178", -17, 21, 1 },
  { FRAME_2011, "11181", -27, 7, 1 },   { FRAME_2011, "11176", -16, 51, 1 }, { CUT_OUT, "11158", -21, 11, 1 },
  { FRAME_2010, "11112", -19, 3, 1 },   { FRAME_2010, "11114", -22, 41, 1 }, { FRAME_2010, "11113", 17, -62, -1 },
};

static TfFrame *
open_real (const char *name)
{
  const char *path = builder_real (name);
  g_autoptr (GError) error = NULL;
  if (path == NULL)
    {
      g_test_skip ("real data not there");
      return NULL;
    }
  TfFrame *frame = tf_frame_open (path, &(TfFrameSpec){ 0 }, NULL, &error);
  g_assert_no_error (error);
  return frame;
}

/* Every listed place lies in one bipole hint, another one for every region, with the western polarity of the list. */
static void
check_named (const char *name, const GPtrArray *hints, double l0)
{
  g_autoptr (GHashTable) taken = g_hash_table_new (NULL, NULL);
  for (guint k = 0; k < G_N_ELEMENTS (named); k++)
    {
      const TfHint *found = NULL;
      double unit[3];
      if (g_strcmp0 (named[k].frame, name) != 0)
        continue;
      tf_sphere_unit (l0 + named[k].cmd, named[k].lat, unit);
      for (guint j = 0; j < hints->len; j++)
        if (tf_outline_contains (((const TfHint *)g_ptr_array_index (hints, j))->outline, unit))
          {
            tf_check_near (named[k].name, found != NULL, 0, 0); /* outlines never overlap */
            found = g_ptr_array_index (hints, j);
          }
      g_test_message ("%s: %s", named[k].name, found == NULL ? "in no hint" : found->unipolar ? "unipolar" : "bipole");
      g_assert_nonnull (found);
      g_assert_false (found->unipolar);
      g_assert_cmpint (found->measure.leading_polarity, ==, named[k].leader);
      g_assert_true (g_hash_table_add (taken, (gpointer)found));
    }
}

/* 11176, 11178 and 11181 lie close together and are three; the quadrupole 11158 has its cut-out to itself and is one. */
static void
test_named (gconstpointer data)
{
  const char *name = data;
  g_autoptr (TfFrame) frame = open_real (name);
  if (frame == NULL)
    return;
  g_autoptr (GPtrArray) hints = hints_find (frame);
  hints_print (name, frame, hints);
  check_named (name, hints, tf_geometry_central_carrington (tf_frame_get_geometry (frame)));
  gboolean cut_out = g_str_equal (name, CUT_OUT);
  tf_check_between ("hints on a frame", hints->len, cut_out ? 1 : 3, cut_out ? 1 : 20);
}

/* Of the flux above @least G within @radius deg of a place, the share that lies in the hint with most of it. */
static double
share_in_one (const TfFrame *frame, const GPtrArray *hints, double lat, double cmd, double radius, double least)
{
  double l0 = tf_geometry_central_carrington (tf_frame_get_geometry (frame)), all = 0.0, most = 0.0;
  g_autofree double *in = g_new0 (double, hints->len + 1);
  g_autoptr (TfOutline) cap = tf_outline_new_cap (tf_frame_get_info (frame)->time, l0 + cmd, lat, radius, 0);
  g_autoptr (TfMask) mask = tf_mask_new (frame, cap, 0.2, 0);
  for (guint k = 0; k < tf_mask_get_n (mask); k++)
    {
      const TfMaskPixel *pixel = tf_mask_get (mask, k);
      double flux = fabs ((double)pixel->field) / pixel->mu * pixel->area_mm2;
      if (fabs ((double)pixel->field) < least)
        continue;
      all += flux;
      for (guint j = 0; j < hints->len; j++)
        if (tf_outline_contains (((const TfHint *)g_ptr_array_index (hints, j))->outline, pixel->unit))
          in[j] += flux;
    }
  for (guint j = 0; j < hints->len; j++)
    most = MAX (most, in[j]);
  return most / all;
}

static void
test_old_plage (void)
{
  g_autoptr (TfFrame) frame = open_real (FRAME_2010);
  if (frame == NULL)
    return;
  g_autoptr (GPtrArray) hints = hints_find (frame);
  double share = share_in_one (frame, hints, -21.0, 3.0, 12.0, 60.0);
  g_test_message ("11112 and the old plage about it: %.3f of the flux above 60 G in one hint", share);
  tf_check_between ("share in one hint", share, 0.9, 1.0);
}

/* -- two instruments --------------------------------------------------------------------------------------- */

/* Six hours apart; the other instrument has half the resolution and about half the field. */
static void
test_second_instrument (void)
{
  g_autoptr (TfFrame) frame = open_real (FRAME_2011);
  g_autoptr (TfFrame) other = frame != NULL ? open_real (FRAME_OTHER) : NULL;
  if (other == NULL)
    return;
  g_autoptr (GPtrArray) hints = hints_find (frame);
  g_autoptr (GPtrArray) others = hints_find (other);
  guint bipoles = 0, alike = 0;
  double l0 = tf_geometry_central_carrington (tf_frame_get_geometry (frame));
  hints_print (FRAME_OTHER, other, others);
  tf_check_between ("hints on a frame", others->len, 3, 20);
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      HintOverlap overlap;
      const TfHint *best = hints_best (frame, others, hint->outline, &overlap);
      if (hint->unipolar)
        continue;
      bipoles++;
      alike += overlap.flux >= 0.75;
      g_test_message ("N%+.1f W%+.1f: overlap by flux %.2f, by area %.2f", hint->measure.lat_deg, hint->measure.cmd_deg,
                      overlap.flux, overlap.area);
      for (guint r = 0; r < G_N_ELEMENTS (named); r++)
        {
          double unit[3];
          tf_sphere_unit (l0 + named[r].cmd, named[r].lat, unit);
          if (!g_str_equal (named[r].frame, FRAME_2011) || !tf_outline_contains (hint->outline, unit))
            continue;
          g_test_message ("  is %s, leader there %+d", named[r].name, best != NULL ? best->measure.leading_polarity : 0);
          g_assert_true (best != NULL && !best->unipolar);
          g_assert_cmpint (best->measure.leading_polarity, ==, named[r].leader);
        }
    }
  g_test_message ("%u of %u bipoles overlap by 0.75 or more", alike, bipoles);
  tf_check_between ("share of bipoles alike", (double)alike / bipoles, 0.6, 1.0);
}

/* -- what changes nothing on the Sun ----------------------------------------------------------------------- */

static const char *const disks[] = { FRAME_2011, FRAME_2010, FRAME_OTHER, CUT_OUT };

static void
test_sign (void)
{
  for (guint f = 0; f < G_N_ELEMENTS (disks); f++)
    {
      g_autoptr (TfFrame) frame = open_real (disks[f]);
      if (frame == NULL)
        return;
      gsize n = (gsize)tf_frame_get_width (frame) * tf_frame_get_height (frame);
      g_autofree float *pixels = g_memdup2 (tf_frame_get_pixels (frame), n * sizeof *pixels);
      for (gsize k = 0; k < n; k++)
        pixels[k] = -pixels[k];
      g_autoptr (TfFrame) other = hints_frame (frame, tf_frame_get_geometry (frame), pixels);
      g_autoptr (GPtrArray) hints = hints_find (frame);
      g_autoptr (GPtrArray) flipped = hints_find (other);
      g_assert_cmpuint (hints->len, ==, flipped->len);
      for (guint k = 0; k < hints->len; k++)
        {
          const TfHint *a = g_ptr_array_index (hints, k), *b = g_ptr_array_index (flipped, k);
          g_assert_true (tf_outline_equal (a->outline, b->outline));
          g_assert_cmpint (a->measure.leading_polarity, ==, -b->measure.leading_polarity);
          g_assert_cmpint (a->unipolar, ==, b->unipolar);
        }
    }
}

static double
least_overlap (const TfFrame *frame, const TfFrame *other, const char *what)
{
  g_autoptr (GPtrArray) hints = hints_find (frame);
  g_autoptr (GPtrArray) others = hints_find (other);
  double least = 1.0;
  hints_print (what, other, others);
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      HintOverlap overlap;
      hints_best (frame, others, hint->outline, &overlap);
      least = MIN (least, overlap.flux);
    }
  g_test_message ("%s: least overlap %.4f", what, least);
  return least;
}

/* The picture turned by half a circle, its geometry with it. */
static void
test_turned (void)
{
  for (guint f = 0; f < G_N_ELEMENTS (disks); f++)
    {
      g_autoptr (TfFrame) frame = open_real (disks[f]);
      if (frame == NULL)
        return;
      TfGeometry g = *tf_frame_get_geometry (frame);
      gsize n = (gsize)g.width * g.height;
      g_autofree float *pixels = g_new (float, n);
      for (gsize k = 0; k < n; k++)
        pixels[k] = tf_frame_get_pixels (frame)[n - 1 - k];
      for (guint k = 0; k < 2; k++)
        {
          g.crpix[k] = (k == 0 ? g.width : g.height) + 1.0 - g.crpix[k];
          g.cd[k][0] = -g.cd[k][0];
          g.cd[k][1] = -g.cd[k][1];
        }
      g_assert_true (tf_geometry_make (&g));
      g_autoptr (TfFrame) other = hints_frame (frame, &g, pixels);
      tf_check_between (disks[f], least_overlap (frame, other, disks[f]), 0.95, 1.0);
    }
}

/* Between pixels by the cubic of Catmull and Rom (1974): nearly the same noise as before, as another exposure would have. */
static float
between (const float *at, double part)
{
  double t = part, t2 = t * t, t3 = t2 * t;
  return (float)(0.5 * ((-t3 + 2.0 * t2 - t) * at[-1] + (3.0 * t3 - 5.0 * t2 + 2.0) * at[0]
                        + (-3.0 * t3 + 4.0 * t2 + t) * at[1] + (t3 - t2) * at[2]));
}

/* The picture moved by an odd number of pixels and by a part of one, its geometry with it. */
static void
test_shifted (void)
{
  const double parts[] = { 0.0, 0.4 };
  for (guint f = 0; f < 2 * G_N_ELEMENTS (parts); f++)
    {
      g_autoptr (TfFrame) frame = open_real (disks[f / 2]);
      if (frame == NULL)
        return;
      TfGeometry g = *tf_frame_get_geometry (frame);
      const float *from = tf_frame_get_pixels (frame);
      g_autofree float *pixels = g_new (float, (gsize)g.width * g.height);
      const guint dx = 7;
      for (guint y = 0; y < g.height; y++)
        for (guint x = 0; x < g.width; x++)
          pixels[(gsize)y * g.width + x]
              = x + dx + 2 < g.width ? between (from + (gsize)y * g.width + x + dx, parts[f % 2]) : NAN;
      g.crpix[0] -= dx + parts[f % 2];
      g_assert_true (tf_geometry_make (&g));
      g_autoptr (TfFrame) other = hints_frame (frame, &g, pixels);
      tf_check_between (disks[f / 2], least_overlap (frame, other, disks[f / 2]), 0.95, 1.0);
    }
}

/* A block of missing data over a region: whatever hint is left beside it has a caution. */
static void
test_missing (void)
{
  for (guint size = 12; size <= 48; size *= 2)
    {
      g_autoptr (TfFrame) frame = open_real (FRAME_2011);
      if (frame == NULL)
        return;
      const TfGeometry *g = tf_frame_get_geometry (frame);
      gsize n = (gsize)g->width * g->height;
      g_autofree float *pixels = g_memdup2 (tf_frame_get_pixels (frame), n * sizeof *pixels);
      double x, y, mu;
      g_assert_true (tf_geometry_sun_to_pixel (g, tf_geometry_central_carrington (g) - 15.0, 15.0, &x, &y, &mu));
      for (guint j = 0; j < size; j++)
        for (guint i = 0; i < size; i++)
          pixels[(gsize)(y + j - size / 2) * g->width + (guint)x + i - size / 2] = NAN;
      g_autoptr (TfFrame) other = hints_frame (frame, g, pixels);
      g_autoptr (GPtrArray) before = hints_find (frame);
      g_autoptr (GPtrArray) hints = hints_find (other);
      guint touching = 0;
      for (guint k = 0; k < hints->len; k++)
        {
          const TfHint *hint = g_ptr_array_index (hints, k);
          g_autoptr (TfMask) mask = tf_mask_new (other, hint->outline, 0.2, 0);
          if (tf_mask_get_missing (mask) == 0)
            continue;
          touching++;
          g_assert_nonnull (tf_notes_find (hint->cautions, "hint-at-edge"));
        }
      g_test_message ("block of %u pixels: %u hints touch it", size, touching);
      g_assert_cmpuint (touching, >, 0);
      for (guint k = 0; k < before->len; k++)
        g_assert_null (tf_notes_find (((const TfHint *)g_ptr_array_index (before, k))->cautions, "hint-at-edge"));
    }
}

void
add_hint_real_tests (void)
{
  g_test_add_data_func ("/region/hint-real/2011-regions-are-hints-of-their-own", FRAME_2011, test_named);
  g_test_add_data_func ("/region/hint-real/2010-regions-are-hints-of-their-own", FRAME_2010, test_named);
  g_test_add_data_func ("/region/hint-real/a-quadrupole-is-one-hint", CUT_OUT, test_named);
  g_test_add_func ("/region/hint-real/old-plage-goes-with-its-region", test_old_plage);
  g_test_add_func ("/region/hint-real/a-second-instrument-has-the-same-hints", test_second_instrument);
  g_test_add_func ("/region/hint-real/a-flipped-sign-leaves-outlines-as-they-are", test_sign);
  g_test_add_func ("/region/hint-real/a-turned-frame-has-the-same-hints", test_turned);
  g_test_add_func ("/region/hint-real/a-shifted-frame-has-the-same-hints", test_shifted);
  g_test_add_func ("/region/hint-real/missing-data-is-told", test_missing);
}
