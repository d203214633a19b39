/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Companion intensity frames: pairs made here from known spots, one real pair of headers, one real
 * intensity frame. */

#include <string.h>

#include "inversion-builder.h"
#include "tf-companion.h"
#include "tf-constants.h"
#include "tf-json.h"
#include "tf-limb-shape-private.h"

enum
{
  MOST_SPOTS = 6
};

/* A round spot: umbra to one radius, penumbra to another, with sharp edges. */
typedef struct
{
  double lon, lat; /* from central meridian */
  double umbra_deg, penumbra_deg;
  double field; /* G in the umbra; half of it in the penumbra; upright */
} Spot;

typedef struct
{
  guint n;
  Spot spots[MOST_SPOTS];
  double limb[3]; /* quiet Sun: limb[0] + limb[1] mu + limb[2] mu^2 */
} Scene;

/* 0 quiet, 1 penumbra, 2 umbra. */
static int
kind_at (const Scene *scene, const double unit[3], const Spot **spot)
{
  int kind = 0;
  for (guint k = 0; k < scene->n; k++)
    {
      const Spot *s = &scene->spots[k];
      double centre[3], dot = 0.0;
      tf_sphere_unit (BUILDER_L0 + s->lon, s->lat, centre);
      for (guint i = 0; i < 3; i++)
        dot += centre[i] * unit[i];
      double d = acos (MIN (dot, 1.0)) / TF_DEG;
      if (d < s->umbra_deg)
        {
          *spot = s;
          return 2;
        }
      if (d < s->penumbra_deg && kind == 0)
        {
          *spot = s;
          kind = 1;
        }
    }
  return kind;
}

static double
mu_of (const double unit[3], const double to_observer[3])
{
  return unit[0] * to_observer[0] + unit[1] * to_observer[1] + unit[2] * to_observer[2];
}

static double
brightness (const double unit[3], const double to_observer[3], gconstpointer data)
{
  static const double levels[] = { 1.0, 0.8, 0.3 };
  const Scene *scene = data;
  const Spot *spot = NULL;
  double mu = mu_of (unit, to_observer);
  return 5e4 * levels[kind_at (scene, unit, &spot)]
         * (scene->limb[0] + mu * (scene->limb[1] + mu * scene->limb[2]));
}

static double
magnetism (const double unit[3], const double to_observer[3], gconstpointer data)
{
  const Spot *spot = NULL;
  int kind = kind_at (data, unit, &spot);
  return kind == 0 ? 0.0 : 0.5 * kind * spot->field * mu_of (unit, to_observer);
}

static TfFrame *
as_intensity (const TfFrame *frame, double minutes)
{
  TfFrameInfo *info = tf_frame_info_copy (tf_frame_get_info (frame));
  info->role = TF_ROLE_INTENSITY;
  info->time = tf_time_add (info->time, 60.0 * minutes);
  return tf_frame_new (info, tf_frame_get_pixels (frame), NULL);
}

static void
make_pair (const Scene *scene, BuilderFrame *how, TfFrame **field, TfFrame **intensity)
{
  how->noise = 10.0;
  *field = builder_frame_func (how, magnetism, scene);
  how->noise = 400.0; /* just under 1 % */
  g_autoptr (TfFrame) bright = builder_frame_func (how, brightness, scene);
  *intensity = as_intensity (bright, 3.0);
}

static void
find (TfSpots *spots, const TfFrame *field, const TfFrame *intensity, const TfOutline *outline)
{
  TfMeasureParams measure;
  TfCompanionParams params;
  tf_measure_params_init (&measure);
  tf_companion_params_init (&params);
  tf_spots_find (spots, field, intensity, outline, &measure, &params);
}

/* -- limb darkening ---------------------------------------------------------------------------- */

static const Scene disk_scene = { 4,
                                  { { 20.0, 10.0, 0.8, 1.8, 2000.0 },
                                    { 14.0, 12.0, 0.7, 1.5, -2000.0 },
                                    { -60.0, -12.0, 1.0, 2.5, 2000.0 },
                                    { -35.0, 25.0, 0.8, 2.0, 2000.0 } },
                                  { 0.38, 0.82, -0.20 } };

static void
test_own_profile (void)
{
  BuilderFrame how;
  TfLimbShape shape;
  builder_init (&how, 0.0, 0.0, 4.0);
  how.half_deg = 62.0;
  how.fine = 1;
  how.noise = 400.0;
  g_autoptr (TfFrame) bright = builder_frame_func (&how, brightness, &disk_scene);
  g_autoptr (TfFrame) intensity = as_intensity (bright, 0.0);
  g_assert_true (tf_limb_shape_fit (&shape, intensity, TF_LIMB_OWN));
  g_assert_cmpint (shape.method, ==, TF_LIMB_OWN);
  for (double mu = 0.2; mu <= 1.0; mu += 0.1)
    tf_check_near ("profile over the truth",
                   tf_limb_shape_at (&shape, mu) / (5e4 * (0.38 + mu * (0.82 - 0.20 * mu))), 1.0,
                   0.003);
  tf_check_between ("scatter about it", shape.scatter, 0.005, 0.02);
  tf_check_near ("no slope along x", shape.slope[0], 0.0, 0.001);
  tf_check_near ("no slope along y", shape.slope[1], 0.0, 0.001);
}

/* A flat field that is 6 % brighter in the west and 3 % in the south. */
static void
test_slope (void)
{
  BuilderFrame how;
  TfLimbShape shape;
  double cx, cy;
  builder_init (&how, 0.0, 0.0, 4.0);
  how.half_deg = 62.0;
  how.fine = 1;
  g_autoptr (TfFrame) bright = builder_frame_func (&how, brightness, &disk_scene);
  const TfGeometry *g = tf_frame_get_geometry (bright);
  guint w = tf_frame_get_width (bright), h = tf_frame_get_height (bright);
  g_autofree float *pixels
      = g_memdup2 (tf_frame_get_pixels (bright), (gsize)w * h * sizeof (float));
  g_assert_true (tf_geometry_disk_centre (g, &cx, &cy));
  for (guint y = 0; y < h; y++)
    for (guint x = 0; x < w; x++)
      pixels[(gsize)y * w + x] *= (float)(1.0
                                          + (0.06 * (x + 1.0 - cx) - 0.03 * (y + 1.0 - cy))
                                                / tf_geometry_disk_radius (g));
  g_autoptr (TfFrame) aslant = builder_frame_of (g, &how, pixels);
  g_autoptr (TfFrame) intensity = as_intensity (aslant, 0.0);
  g_assert_true (tf_limb_shape_fit (&shape, intensity, TF_LIMB_OWN));
  tf_check_near ("slope along x", shape.slope[0], 0.06, 0.001);
  tf_check_near ("slope along y", shape.slope[1], -0.03, 0.001);
  tf_check_near ("profile at mu 0.5 over the truth",
                 tf_limb_shape_at (&shape, 0.5) / (5e4 * (0.38 + 0.41 - 0.05)), 1.0, 0.003);
}

static void
test_published_law (void)
{
  /* Cox 2000 prints I(0.5) / I(1) and the like for 550 nm; from memory: 0.71 at mu = 0.5, 0.30 at 0
   * */
  tf_check_near ("at the centre", tf_limb_published (1.0), 1.0, 1e-12);
  tf_check_near ("at mu 0.5", tf_limb_published (0.5), 0.7075, 1e-9);
  tf_check_near ("at the limb", tf_limb_published (0.0), 0.30, 1e-9);
}

static void
test_real_profile (void)
{
  const char *path = builder_real ("../broken/mdi.fd_Ic.20101015_230100_TAI.data.fits");
  TfLimbShape shape;
  g_autoptr (GError) error = NULL;
  if (path == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  g_autoptr (TfFrame) intensity = tf_frame_open_companion (path, NULL, NULL, &error);
  g_assert_no_error (error);
  g_assert_true (tf_limb_shape_fit (&shape, intensity, TF_LIMB_OWN));
  g_assert_cmpint (shape.method, ==, TF_LIMB_OWN);
  double ratio = tf_limb_shape_at (&shape, 0.5) / tf_limb_shape_at (&shape, 1.0);
  g_test_message (
      "real intensity: I (0.5) / I (1) %.3f, I (0.3) / I (1) %.3f, scatter of the quiet Sun %.4f",
      ratio, tf_limb_shape_at (&shape, 0.3) / tf_limb_shape_at (&shape, 1.0), shape.scatter);
  /* between the published values at 550 and 850 nm; near 677 nm: about 0.76 (Neckel & Labs 1994,
   * from memory) */
  tf_check_between ("half way to the limb over the centre", ratio, 0.71, 0.82);
  /* the frame's flat field leaves patches of +- 5 %, which tf_spots_find levels out about each
   * outline */
  tf_check_between ("scatter of the quiet Sun", shape.scatter, 0.0, 0.04);
}

/* -- matching ---------------------------------------------------------------------------------- */

static void
check_match (const TfFrameInfo *field, const TfFrameInfo *intensity, const TfOutline *outline,
             const char *code)
{
  TfCompanionParams params;
  g_autoptr (TfNote) reason = NULL;
  tf_companion_params_init (&params);
  gboolean matches = tf_companion_matches (field, intensity, outline, &params, &reason);
  g_assert_cmpstr (reason != NULL ? tf_note_get_code (reason) : NULL, ==, code);
  g_assert_true (matches == (code == NULL));
}

static void
test_matching (void)
{
  BuilderFrame how;
  Scene scene = disk_scene;
  TfFrame *field, *intensity;
  builder_init (&how, 18.0, 11.0, 2.0);
  how.half_deg = 10.0;
  make_pair (&scene, &how, &field, &intensity);
  const TfFrameInfo *f = tf_frame_get_info (field), *i = tf_frame_get_info (intensity);
  g_autoptr (TfOutline) outline = builder_cap (18.0, 11.0, 6.0);
  g_autoptr (TfOutline) elsewhere = builder_cap (-30.0, 11.0, 6.0);
  check_match (f, i, outline, NULL);
  check_match (f, i, NULL, NULL);
  check_match (f, f, outline, "companion-no-intensity");
  check_match (f, i, elsewhere, "companion-view");
  g_autoptr (TfFrameInfo) other = tf_frame_info_copy (i);
  other->time = tf_time_add (f->time, 40.0 * 60.0);
  check_match (f, other, outline, "companion-apart");
  other->time = TF_TIME_UNKNOWN;
  check_match (f, other, outline, "companion-no-time");
  other->time = f->time;
  other->geometry.observer.stonyhurst_lon_deg += 5.0;
  other->geometry.observer.carrington_lon_deg += 5.0;
  check_match (f, other, outline, "companion-vantage");
  tf_frame_unref (field);
  tf_frame_unref (intensity);
}

/* A real intensity header and a real magnetogram of the same instrument and day: hours apart they
 * do not match; with the intensity's time set to the magnetogram's they do. */
static void
test_real_headers (void)
{
  const char *field = builder_real ("mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits");
  const char *header = builder_real ("../headers/sunpy_mdi.fd_Ic.20101015_230100_TAI.data.header");
  g_autoptr (GError) error = NULL;
  g_autofree char *text = NULL;
  if (field == NULL || header == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  g_autoptr (TfFrameInfo) f = tf_frame_look (field, NULL, NULL, &error);
  g_assert_no_error (error);
  g_assert_true (g_file_get_contents (header, &text, NULL, &error));
  g_autoptr (TfHeader) cards = tf_header_read (text, (gssize)strlen (text));
  g_autoptr (TfFrameInfo) i = tf_frame_info_read (cards, 128, 128);
  g_assert_cmpint (i->role, ==, TF_ROLE_INTENSITY);
  check_match (f, i, NULL, "companion-apart");
  TfCompanionParams params;
  g_autoptr (TfNote) reason = NULL;
  tf_companion_params_init (&params);
  tf_companion_matches (f, i, NULL, &params, &reason);
  tf_check_near ("minutes apart", tf_note_get_number (reason, 0), 1381.0, 5.0);
  tf_header_set (cards, "T_OBS", "2010.10.15_00:04:00.000_TAI");
  tf_header_set (cards, "DATE-OBS", "2010-10-15T00:03:11.000");
  tf_header_set_number (cards, "CRLN_OBS", f->geometry.observer.carrington_lon_deg);
  g_autoptr (TfFrameInfo) moved = tf_frame_info_read (cards, 128, 128);
  check_match (f, moved, NULL, NULL);
}

/* -- spots ------------------------------------------------------------------------------------- */

/* Millionths of the hemisphere of a cap whose edge was seen through the Gaussian of 2 Mm: a level
 * that is not half way between the two sides of the edge lies outside it by that many sigmas of
 * 0.849 Mm. */
static double
cap_msh (double radius_deg, double sigmas)
{
  return 1e6 * (1.0 - cos (radius_deg * TF_DEG + sigmas * 0.849 / TF_RADIUS_MM));
}

/* Normal quantiles of (0.945 - 0.8) / 0.2 and (0.655 - 0.3) / 0.5. */
static const double PENUMBRA_SIGMAS = 0.598, UMBRA_SIGMAS = 0.553;

static void
check_two_spots (double lon, double lat, double scale_arcsec, double half_deg)
{
  /* not the published limb darkening, so that a cut-out needs its quiet Sun levelled */
  const Scene scene = { 2,
                        { { lon + 2.6, lat - 0.7, 0.75, 1.6, 2200.0 },
                          { lon - 2.6, lat + 0.7, 0.5, 1.1, -1800.0 } },
                        { 0.38, 0.82, -0.20 } };
  BuilderFrame how;
  TfFrame *field, *intensity;
  g_auto (TfSpots) spots = { 0 };
  double bearing, tilt;
  builder_init (&how, lon, lat, scale_arcsec);
  how.half_deg = half_deg;
  how.fine = 3;
  make_pair (&scene, &how, &field, &intensity);
  g_autoptr (TfOutline) outline = builder_cap (lon, lat, 5.5);
  find (&spots, field, intensity, outline);
  g_assert_true (spots.matched);
  g_assert_cmpuint (spots.n, ==, 2);
  tf_tilt (scene.spots[0].lon, scene.spots[0].lat, scene.spots[1].lon, scene.spots[1].lat, FALSE,
           &bearing, &tilt);
  g_test_message ("%.1f arcsec at (%.0f, %.0f): areas %.0f and %.0f of %.0f and %.0f msh, umbrae "
                  "%.0f and %.0f of %.0f and %.0f, bearing %.2f of "
                  "%.2f, separation %.3f",
                  scale_arcsec, lon, lat, spots.spots[0].area_msh, spots.spots[1].area_msh,
                  cap_msh (1.6, PENUMBRA_SIGMAS), cap_msh (1.1, PENUMBRA_SIGMAS),
                  spots.spots[0].umbra_msh, spots.spots[1].umbra_msh, cap_msh (0.75, UMBRA_SIGMAS),
                  cap_msh (0.5, UMBRA_SIGMAS), spots.axis_bearing_deg, bearing,
                  spots.separation_deg);
  for (guint k = 0; k < 2; k++)
    {
      const TfSpot *spot = &spots.spots[k];
      const Spot *truth = &scene.spots[k];
      tf_check_near (
          "spot's place, deg",
          tf_sphere_distance (spot->lon_deg, spot->lat_deg, BUILDER_L0 + truth->lon, truth->lat),
          0.0, 0.05);
      tf_check_near ("spot's area", spot->area_msh / cap_msh (truth->penumbra_deg, PENUMBRA_SIGMAS),
                     1.0, 0.04);
      tf_check_near ("umbra's area", spot->umbra_msh / cap_msh (truth->umbra_deg, UMBRA_SIGMAS),
                     1.0, 0.06);
      g_assert_cmpint (spot->polarity, ==, k == 0 ? 1 : -1);
      g_assert_cmpuint (spot->umbrae, ==, 1);
      g_assert_false (spot->delta);
    }
  g_assert_cmpint (spots.leading_polarity, ==, 1);
  tf_check_near ("bearing of the spots", spots.axis_bearing_deg, bearing, 0.5);
  tf_check_near ("tilt of the spots", spots.axis_tilt_deg, tilt, 0.5);
  guint umbrae = 0;
  for (guint k = 0; k < spots.n_contours; k++)
    {
      const TfSpotContour *c = &spots.contours[k];
      umbrae += c->umbra;
      g_assert_cmpuint (c->n, >, 8);
      tf_check_near ("a contour closes, deg",
                     tf_sphere_distance (c->points[0].lon_deg, c->points[0].lat_deg,
                                         c->points[c->n - 1].lon_deg, c->points[c->n - 1].lat_deg),
                     0.0, 1e-9);
    }
  g_assert_cmpuint (umbrae, ==, 2);
  g_assert_cmpuint (spots.n_contours, ==, 4);
  tf_frame_unref (field);
  tf_frame_unref (intensity);
}

static void
test_two_spots (void)
{
  check_two_spots (5.0, 10.0, 1.0, 9.0);
  check_two_spots (-35.0, -14.0, 1.0, 9.0);
  check_two_spots (45.0, 8.0, 2.0, 9.0);
}

/* -- delta ------------------------------------------------------------------------------------- */

static void
check_delta (double apart, double penumbra, double sign, guint n, gboolean expected)
{
  const Scene scene = { 2,
                        { { 5.0 + 0.5 * apart, 5.0, 0.45, penumbra, 2200.0 },
                          { 5.0 - 0.5 * apart, 5.0, 0.4, penumbra, sign * 2000.0 } },
                        { 0.30, 0.93, -0.23 } };
  BuilderFrame how;
  TfFrame *field, *intensity;
  g_auto (TfSpots) spots = { 0 };
  builder_init (&how, 5.0, 5.0, 1.0);
  how.fine = 2;
  make_pair (&scene, &how, &field, &intensity);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 5.5);
  find (&spots, field, intensity, outline);
  g_assert_cmpuint (spots.n, ==, n);
  g_assert_true (spots.delta == expected);
  tf_frame_unref (field);
  tf_frame_unref (intensity);
}

static void
test_delta (void)
{
  check_delta (1.4, 1.3, -1.0, 1, TRUE);  /* both signs in one penumbra */
  check_delta (1.4, 1.3, 1.0, 1, FALSE);  /* one sign */
  check_delta (4.0, 1.3, -1.0, 2, FALSE); /* two penumbrae */
}

/* -- the leading spot -------------------------------------------------------------------------- */

/* A lone leading spot, the following polarity without one. */
static void
test_lone_spot (void)
{
  const Scene seen = { 1, { { 8.0, -12.0, 0.7, 1.5, -2000.0 } }, { 0.30, 0.93, -0.23 } };
  const Scene whole = { 2,
                        { { 8.0, -12.0, 0.7, 1.5, -2000.0 }, { 3.0, -13.0, 0.01, 2.0, 800.0 } },
                        { 0.30, 0.93, -0.23 } };
  BuilderFrame how;
  g_auto (TfSpots) spots = { 0 };
  builder_init (&how, 5.5, -12.5, 1.0);
  how.fine = 2;
  how.noise = 10.0;
  g_autoptr (TfFrame) field = builder_frame_func (&how, magnetism, &whole);
  g_autoptr (TfFrame) bright = builder_frame_func (&how, brightness, &seen);
  g_autoptr (TfFrame) intensity = as_intensity (bright, 0.0);
  g_autoptr (TfOutline) outline = builder_cap (5.5, -12.5, 6.0);
  find (&spots, field, intensity, outline);
  g_assert_cmpuint (spots.n, ==, 1);
  g_assert_cmpint (spots.leading_polarity, ==, -1);
  tf_check_nan ("bearing of one spot", spots.axis_bearing_deg);
}

static void
test_third_witness (void)
{
  BuilderFrame how;
  BuilderPole poles[2];
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  g_auto (TfMeasure) plain = { 0 };
  g_auto (TfMeasure) with = { 0 };
  g_auto (TfMeasure) without = { 0 };
  TfSpots told = { .matched = TRUE, .leading_polarity = -1 },
          none = { .matched = TRUE, .leading_polarity = TF_WITNESS_ABSENT };
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  builder_init (&how, 5.0, 5.0, 2.0);
  builder_bipole (poles, 5.0, 5.0, 4.0, 5.0, 1e22, 1);
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 6.0);
  g_assert_true (tf_measure_region (&plain, frame, outline, &params, &error));
  g_assert_cmpint (plain.witnesses[2], ==, 1);
  g_assert_true (plain.leading_sure);
  g_assert_true (tf_measure_region_with (&with, frame, outline, &params, &told, &error));
  g_assert_cmpint (with.witnesses[2], ==, -1);
  g_assert_false (with.leading_sure);
  g_assert_true (tf_measure_region_with (&without, frame, outline, &params, &none, &error));
  g_assert_cmpint (without.witnesses[2], ==, 1);
  g_assert_true (without.leading_sure);
}

static void
test_refused_and_empty (void)
{
  const Scene quiet = { 0, { { 0.0 } }, { 0.30, 0.93, -0.23 } };
  BuilderFrame how;
  TfCompanionParams params;
  TfFrame *field, *intensity;
  g_auto (TfSpots) none = { 0 };
  g_auto (TfSpots) refused = { 0 };
  tf_companion_params_init (&params);
  builder_init (&how, 5.0, 5.0, 2.0);
  how.fine = 2;
  make_pair (&quiet, &how, &field, &intensity);
  g_autoptr (TfOutline) outline = builder_cap (5.0, 5.0, 5.0);
  g_autoptr (TfFrame) late = as_intensity (intensity, 300.0);
  find (&none, field, intensity, outline);
  g_assert_true (none.matched);
  g_assert_cmpuint (none.n, ==, 0);
  g_assert_cmpint (none.leading_polarity, ==, TF_WITNESS_ABSENT);
  g_assert_nonnull (tf_notes_find (none.notes, "companion-no-spots"));
  g_assert_nonnull (tf_notes_find (none.notes, "companion-limb-published"));
  find (&refused, field, late, outline);
  g_assert_false (refused.matched);
  g_assert_cmpstr (tf_note_get_code (refused.refusal), ==, "companion-apart");
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_spots_build_json (&refused, &params, builder);
  g_autofree char *json = tf_json_dup_text (builder, FALSE), *text = tf_spots_dup_text (&refused, &params);
  g_assert_nonnull (strstr (json, "\"matched\":false"));
  g_assert_nonnull (strstr (text, "minutes from the magnetogram"));
  tf_frame_unref (field);
  tf_frame_unref (intensity);
}

/* The pair of two spots, the companion changed by @change. */
static void
find_changed (TfSpots *spots, void (*change) (float *pixels, TfFrameInfo *info))
{
  const Scene scene = { 2,
                        { { 9.0, 10.0, 0.7, 1.5, 2000.0 }, { 3.0, 10.5, 0.5, 1.1, -1800.0 } },
                        { 0.30, 0.93, -0.23 } };
  BuilderFrame how;
  TfFrame *field, *intensity;
  builder_init (&how, 6.0, 10.0, 1.0);
  make_pair (&scene, &how, &field, &intensity);
  const TfGeometry *g = tf_frame_get_geometry (intensity);
  gsize n = (gsize)g->width * g->height;
  g_autofree float *pixels = g_memdup2 (tf_frame_get_pixels (intensity), n * sizeof (float));
  TfFrameInfo *info = tf_frame_info_copy (tf_frame_get_info (intensity));
  change (pixels, info);
  g_autoptr (TfFrame) changed = tf_frame_new (info, pixels, NULL);
  g_autoptr (TfOutline) outline = builder_cap (6.0, 10.0, 6.0);
  find (spots, field, changed, outline);
  tf_frame_unref (field);
  tf_frame_unref (intensity);
}

static void
change_nothing (float *pixels, TfFrameInfo *info)
{
}

static void
make_hole (float *pixels, TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  for (guint y = 0; y < g->height; y++)
    for (guint x = g->width / 2; x < g->width; x++)
      pixels[(gsize)y * g->width + x] = NAN;
}

static void
shift (float *pixels, TfFrameInfo *info)
{
  info->geometry.crpix[1] += 45.0; /* arcsec */
  tf_geometry_make (&info->geometry);
}

static void
tell_lie (float *pixels, TfFrameInfo *info)
{
  tf_notes_add (info->cautions, "header-lies", "dddddd", 1.0, 1.0, 1.0, 2.0, 2.0, 2.0);
}

static void
test_doubts (void)
{
  g_auto (TfSpots) good = { 0 };
  g_auto (TfSpots) hole = { 0 };
  g_auto (TfSpots) off = { 0 };
  g_auto (TfSpots) lies = { 0 };
  find_changed (&good, change_nothing);
  g_assert_cmpuint (good.n, ==, 2);
  g_assert_null (tf_notes_find (good.notes, "companion-missing-data"));
  g_assert_null (tf_notes_find (good.notes, "companion-weak-field"));
  g_assert_null (tf_notes_find (good.notes, "companion-coarse"));
  find_changed (&hole, make_hole);
  g_assert_true (hole.matched);
  g_assert_nonnull (tf_notes_find (hole.notes, "companion-missing-data"));
  find_changed (&off, shift);
  g_assert_nonnull (tf_notes_find (off.notes, "companion-weak-field"));
  find_changed (&lies, tell_lie);
  g_assert_false (lies.matched);
  g_assert_cmpstr (tf_note_get_code (lies.refusal), ==, "companion-lies");
}

void
add_companion_tests (void)
{
  g_test_add_func ("/region/companion/a-disk-has-its-own-limb-darkening", test_own_profile);
  g_test_add_func ("/region/companion/a-slope-across-the-disk-is-taken-out", test_slope);
  g_test_add_func ("/region/companion/the-published-law-is-as-printed", test_published_law);
  g_test_add_func ("/region/companion/a-real-disk-has-a-plausible-profile", test_real_profile);
  g_test_add_func ("/region/companion/frames-match-by-role-time-vantage-and-view", test_matching);
  g_test_add_func ("/region/companion/real-headers-hours-apart-do-not-match", test_real_headers);
  g_test_add_func ("/region/companion/two-spots-have-their-areas-places-and-tilt", test_two_spots);
  g_test_add_func ("/region/companion/umbrae-of-both-signs-in-one-penumbra-are-delta", test_delta);
  g_test_add_func ("/region/companion/a-lone-spot-leads-by-the-other-polaritys-flux",
                   test_lone_spot);
  g_test_add_func ("/region/companion/the-leading-spot-is-the-third-witness", test_third_witness);
  g_test_add_func ("/region/companion/no-spots-and-no-match-are-told", test_refused_and_empty);
  g_test_add_func ("/region/companion/what-makes-spots-doubtful-is-told", test_doubts);
}
