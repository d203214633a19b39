/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>

#include "tf-check.h"
#include "tf-overlay.h"

#define SIDE 400

static const TfArea area = { 0, 0, SIDE, SIDE };

/* A disk seen from far away, orthographic: Carrington 100 at the central meridian. */
static gboolean
on_disk (double lon_deg, double lat_deg, double *x, double *y, gpointer data)
{
  double lon = (lon_deg - 100) * G_PI / 180, lat = lat_deg * G_PI / 180;
  *x = SIDE / 2 + 180 * cos (lat) * sin (lon);
  *y = SIDE / 2 - 180 * sin (lat);
  return cos (lat) * cos (lon) >= 0;
}

/* A map whose seam is at longitude 0. */
static gboolean
on_map (double lon_deg, double lat_deg, double *x, double *y, gpointer data)
{
  *x = fmod (lon_deg + 720, 360) / 360 * SIDE;
  *y = SIDE / 2 * (1 - sin (lat_deg * G_PI / 180));
  return TRUE;
}

static TfOverlay
overlay_of (TfProjectFunc project, const TfOverlayItem *items, guint n)
{
  return (TfOverlay){ .project = project,
                      .central_carrington_deg = project == on_disk ? 100 : NAN,
                      .step_deg = 10,
                      .outlines = TRUE,
                      .axes = TRUE,
                      .labels = TRUE,
                      .items = items,
                      .n_items = n,
                      .limb_x = SIDE / 2,
                      .limb_y = SIDE / 2,
                      .limb_rx = NAN,
                      .limb_ry = NAN };
}

static TfOverlayItem
item_of (const TfOutline *outline)
{
  return (TfOverlayItem){ .outline = outline,
                          .stroke = TF_STROKE_MARK,
                          .positive = { NAN, NAN },
                          .negative = { NAN, NAN },
                          .verdict = -1 };
}

static TfOutline *
cap (double lon, double lat, double radius)
{
  return tf_outline_new_cap (TF_TIME_UNKNOWN, lon, lat, radius, 0);
}

static const TfColour paper = { 1, 1, 1, 1 };

static guint
inked_in (const Picture *picture, int x0, int y0, int x1, int y1)
{
  guint all = (guint)((MIN (x1, SIDE) - MAX (x0, 0)) * (MIN (y1, SIDE) - MAX (y0, 0)));
  return all - picture_count_in (picture, paper, 0.12, x0, y0, x1, y1);
}

static Picture
drawn (const TfOverlay *overlay)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  Picture picture = picture_new (SIDE, SIDE, paper);
  tf_overlay_draw (picture.cr, overlay, &style, area);
  return picture;
}

static void
an_outline_is_where_the_projection_puts_it (void)
{
  g_autoptr (TfOutline) outline = cap (100, 0, 20);
  TfOverlayItem item = item_of (outline);
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  double radius = 180 * sin (20 * G_PI / 180);
  for (int k = 0; k < 24; k++)
    {
      int x = (int)(200 + radius * cos (k * 15 * G_PI / 180)),
          y = (int)(200 + radius * sin (k * 15 * G_PI / 180));
      g_assert_cmpuint (inked_in (&picture, x - 2, y - 2, x + 3, y + 3), >=, 3);
    }
  g_assert_cmpuint (inked_in (&picture, 160, 160, 240, 240), ==, 0);
  g_assert_cmpuint (inked_in (&picture, 0, 0, 120, 400), ==, 0);
}

static guint
stroke_pixels (TfStroke stroke, gboolean chosen)
{
  g_autoptr (TfOutline) outline = cap (100, 0, 40);
  TfOverlayItem item = item_of (outline);
  item.stroke = stroke;
  item.chosen = chosen;
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  return inked_in (&picture, 0, 0, SIDE, SIDE);
}

static void
hints_are_dashed_and_the_chosen_is_thick (void)
{
  double mark = stroke_pixels (TF_STROKE_MARK, FALSE);
  tf_check_between ("dashes of a hint", stroke_pixels (TF_STROKE_HINT, FALSE) / mark, 0.45, 0.85);
  tf_check_between ("dots of a ghost", stroke_pixels (TF_STROKE_GHOST, FALSE) / mark, 0.1, 0.7);
  tf_check_between ("the chosen", stroke_pixels (TF_STROKE_MARK, TRUE) / mark, 1.3, 3);
}

static void
edges_are_great_circles (void)
{
  /* an edge along 40 N over 80 deg of longitude: the great circle rises to atan (tan 40 / cos 40) =
   * 47.6 N */
  static const TfVertex ring[] = { { 60, 40 }, { 140, 40 }, { 100, 10 } };
  g_autoptr (TfOutline) outline = tf_outline_new (TF_TIME_UNKNOWN, ring, 3, NULL);
  TfOverlayItem item = item_of (outline);
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  double peak = atan (tan (40 * G_PI / 180) / cos (40 * G_PI / 180));
  int y = (int)(200 - 180 * sin (peak)), straight = (int)(200 - 180 * sin (40 * G_PI / 180));
  g_assert_cmpuint (inked_in (&picture, 199, y - 2, 202, y + 3), >=, 3);
  g_assert_cmpuint (inked_in (&picture, 199, straight - 2, 202, straight + 3), ==, 0);
}

/* Behind the limb nothing is drawn, and no chord joins the two places where the outline goes over
 * it. */
static void
an_outline_ends_at_the_limb (void)
{
  g_autoptr (TfOutline) outline = cap (190, 0, 30); /* its centre is on the west limb */
  TfOverlayItem item = item_of (outline);
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  int chord = (int)(200 + 180 * cos (30 * G_PI / 180)); /* x of the whole outline as seen edge on */
  g_assert_cmpuint (inked_in (&picture, 382, 0, SIDE, SIDE), ==, 0);
  g_assert_cmpuint (inked_in (&picture, chord + 4, 125, 379, 275), ==, 0);
  g_assert_cmpuint (inked_in (&picture, chord - 2, 199, chord + 3, 202), >=, 3);
  /* it reaches the limb: (cos 30, sin 30) of the radius */
  int x = 200 + (int)(180 * cos (30 * G_PI / 180)), y = 200 - (int)(180 * 0.5);
  g_assert_cmpuint (inked_in (&picture, x - 3, y - 3, x + 4, y + 4), >=, 3);
}

static void
what_is_behind_the_sun_is_not_drawn (void)
{
  g_autoptr (TfOutline) outline = cap (280, 0, 20);
  TfOverlayItem item = item_of (outline);
  item.label = "0409";
  item.positive[0] = 275, item.positive[1] = 0;
  item.negative[0] = 285, item.negative[1] = 0;
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  g_assert_cmpuint (inked_in (&picture, 0, 0, SIDE, SIDE), ==, 0);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, 200, 200), ==, -1);
}

static void
no_line_runs_across_the_map_at_its_seam (void)
{
  g_autoptr (TfOutline) outline = cap (2, 10, 12);
  TfOverlayItem item = item_of (outline);
  item.positive[0] = 356, item.positive[1] = 10;
  item.negative[0] = 6, item.negative[1] = 12;
  TfOverlay overlay = overlay_of (on_map, &item, 1);
  overlay.graticule = FALSE;
  g_auto (Picture) picture = drawn (&overlay);
  g_assert_cmpuint (inked_in (&picture, 30, 0, 370, SIDE), ==, 0);
  g_assert_cmpuint (inked_in (&picture, 0, 0, 30, SIDE), >, 40);
  g_assert_cmpuint (inked_in (&picture, 370, 0, SIDE, SIDE), >, 40);
  /* the pieces reach both edges */
  g_assert_cmpuint (inked_in (&picture, 0, 100, 1, 220), >=, 2);
  g_assert_cmpuint (inked_in (&picture, SIDE - 1, 100, SIDE, 220), >=, 2);
}

static void
a_hit_is_what_the_outline_encloses (void)
{
  g_autoptr (TfOutline) large = cap (100, 0, 30), small = cap (110, 5, 8), seam = cap (0, 10, 12);
  TfOverlayItem items[] = { item_of (large), item_of (small) };
  TfOverlay overlay = overlay_of (on_disk, items, 2);
  double x, y;
  on_disk (110, 5, &x, &y, NULL);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, x, y), ==, 1); /* the smaller of two */
  on_disk (85, -10, &x, &y, NULL);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, x, y), ==, 0);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, 20, 20), ==, -1);
  GRand *random = g_rand_new_with_seed (7);
  for (int k = 0; k < 400;
       k++) /* the pixel test agrees with the sphere, away from the line itself */
    {
      double lon = g_rand_double_range (random, 60, 140),
             lat = g_rand_double_range (random, -40, 40);
      double far = acos (cos (lat * G_PI / 180) * cos ((lon - 100) * G_PI / 180)) * 180 / G_PI;
      TfOverlay one = overlay_of (on_disk, items, 1);
      on_disk (lon, lat, &x, &y, NULL);
      if (fabs (far - 30) > 0.5)
        g_assert_cmpint (tf_overlay_hit (&one, area, x, y), ==, far < 30 ? 0 : -1);
    }
  g_rand_free (random);
  TfOverlayItem across = item_of (seam);
  TfOverlay map = overlay_of (on_map, &across, 1);
  g_assert_cmpint (tf_overlay_hit (&map, area, 5, 165), ==, 0);
  g_assert_cmpint (tf_overlay_hit (&map, area, 395, 165), ==, 0);
  g_assert_cmpint (tf_overlay_hit (&map, area, 200, 165), ==, -1);
}

static void
holes_and_left_out_areas_are_not_hit (void)
{
  static const TfVertex hole[] = { { 95, -5 }, { 105, -5 }, { 105, 5 }, { 95, 5 } };
  static const TfVertex out[] = { { 110, -5 }, { 120, -5 }, { 120, 5 }, { 110, 5 } };
  g_autoptr (TfOutline) whole = cap (100, 0, 30);
  g_autoptr (TfOutline) holed = tf_outline_with_ring (whole, hole, 4, FALSE, NULL);
  g_autoptr (TfOutline) outline = tf_outline_with_ring (holed, out, 4, TRUE, NULL);
  TfOverlayItem item = item_of (outline);
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  double x, y;
  on_disk (100, 0, &x, &y, NULL);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, x, y), ==, -1);
  on_disk (115, 0, &x, &y, NULL);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, x, y), ==, -1);
  on_disk (85, 0, &x, &y, NULL);
  g_assert_cmpint (tf_overlay_hit (&overlay, area, x, y), ==, 0);
}

static void
poles_are_a_disc_and_a_ring (void)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfOverlayItem item = item_of (NULL);
  item.positive[0] = 120, item.positive[1] = 0;
  item.negative[0] = 80, item.negative[1] = 0;
  TfOverlay overlay = overlay_of (on_disk, &item, 1);
  g_auto (Picture) picture = drawn (&overlay);
  double x, y;
  on_disk (120, 0, &x, &y, NULL);
  tf_check_near ("disc", colour_distance (picture_at (&picture, (int)x, (int)y), style.positive), 0,
                 0.05);
  on_disk (80, 0, &x, &y, NULL);
  g_assert_cmpuint (
      picture_count_in (&picture, style.negative, 0.1, (int)x - 6, 194, (int)x + 7, 207), >=, 8);
  g_assert_cmpuint (inked_in (&picture, 195, 198, 205, 203), >=, 10); /* the axis between them */
}

static void
a_label_stands_clear_of_the_outlines (void)
{
  g_autoptr (TfOutline) one = cap (100, 10, 10), two = cap (100, 35, 10);
  TfOverlayItem items[] = { item_of (one), item_of (two) };
  TfOverlay bare = overlay_of (on_disk, items, 2);
  bare.labels = FALSE;
  g_auto (Picture) before = drawn (&bare);
  items[0].label = "0412";
  TfOverlay overlay = overlay_of (on_disk, items, 2);
  g_auto (Picture) after = drawn (&overlay);
  guint label = 0;
  for (int y = 0; y < SIDE; y++)
    for (int x = 0; x < SIDE; x++)
      {
        TfColour a = picture_at (&before, x, y), b = picture_at (&after, x, y);
        if (colour_distance (a, b) > 0.1)
          {
            label++;
            tf_check_near ("the label lies on paper", colour_distance (a, paper), 0, 0.12);
          }
      }
  g_assert_cmpuint (label, >, 40);
  items[1].label = "0413";
  items[0].label = NULL;
  items[1].verdict = 2; /* breaks */
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  g_auto (Picture) broken = drawn (&overlay);
  g_assert_cmpuint (picture_count (&broken, style.breaks, 0.1), >=, 8);
}

/* The outline and the letters stay readable on a picture of any grey. */
static void
lines_show_on_every_grey (void)
{
  for (int dark = 0; dark < 2; dark++)
    for (int grey = 0; grey <= 10; grey++)
      {
        TfColour under = { grey / 10.0, grey / 10.0, grey / 10.0, 1 };
        TfChartStyle style = tf_chart_style (dark, FALSE, 11);
        g_auto (Picture) picture = picture_new (SIDE, SIDE, under);
        g_autoptr (TfOutline) outline = cap (100, 0, 20);
        TfOverlayItem item = item_of (outline);
        TfOverlay overlay = overlay_of (on_disk, &item, 1);
        overlay.on_dark = dark;
        tf_overlay_draw (picture.cr, &overlay, &style, area);
        double most = 0;
        for (int x = 255; x < 268; x++)
          most = MAX (most, colour_distance (picture_at (&picture, x, 200), under));
        tf_check_between ("outline against the picture", most, 0.25, 1);
      }
}

/* As inked_in, for thin and quiet lines. */
static guint
lined_in (const Picture *picture, int x0, int y0, int x1, int y1)
{
  return (guint)((x1 - x0) * (y1 - y0)) - picture_count_in (picture, paper, 0.03, x0, y0, x1, y1);
}

static void
the_graticule_has_its_lines (void)
{
  TfOverlay overlay = overlay_of (on_disk, NULL, 0);
  overlay.graticule = TRUE;
  g_auto (Picture) picture = drawn (&overlay);
  for (int lat = -80; lat <= 80; lat += 10)
    {
      int y = (int)(200 - 180 * sin (lat * G_PI / 180));
      g_assert_cmpuint (lined_in (&picture, 203, y - 1, 204, y + 2), >=,
                        1); /* just beside the meridian */
    }
  for (int cmd = -80; cmd <= 80; cmd += 10)
    {
      int x = (int)(200 + 180 * sin (cmd * G_PI / 180));
      g_assert_cmpuint (lined_in (&picture, x - 1, 190, x + 2, 191), >=, 1);
    }
  g_assert_cmpuint (lined_in (&picture, 0, 0, 15, SIDE), ==, 0);
  TfColour meridian = picture_at (&picture, 200, 190), other = picture_at (&picture, 231, 190);
  tf_check_between ("the central meridian is the strongest", colour_distance (meridian, paper),
                    colour_distance (other, paper) * 1.2, 1);
}

static void
empty_and_broken_input_does_no_harm (void)
{
  static const double draft[][2] = { { 10, 10 }, { 40, 10 }, { 40, 40 } };
  TfOverlayItem items[] = { item_of (NULL), item_of (NULL) };
  items[0].label = "0409";
  items[1].positive[0] = 100, items[1].positive[1] = 0; /* one pole only */
  TfOverlay overlay = overlay_of (on_disk, items, 2);
  overlay.draft = draft;
  overlay.n_draft = 3;
  overlay.limb_rx = overlay.limb_ry = 180;
  overlay.limb_turn = NAN;
  g_auto (Picture) picture = drawn (&overlay);
  g_assert_cmpint (cairo_status (picture.cr), ==, CAIRO_STATUS_SUCCESS);
  g_assert_cmpuint (inked_in (&picture, 20, 8, 30, 13), >=, 10);     /* the draft */
  g_assert_cmpuint (inked_in (&picture, 378, 199, 383, 200), >=, 1); /* the limb */
  TfOverlay none = overlay_of (on_disk, NULL, 0);
  g_auto (Picture) empty = drawn (&none);
  g_assert_cmpuint (inked_in (&empty, 0, 0, SIDE, SIDE), ==, 0);
  g_assert_cmpint (tf_overlay_hit (&none, area, 200, 200), ==, -1);
}

/* -- lines of no outline --------------------------------------------------------------------- */

/* Lengths of ink and of gaps along a horizontal line, pixels, first run of ink first. */
static guint
runs_along (cairo_surface_t *surface, int y, int *runs, guint most)
{
  const guint32 *row = (const guint32 *)(gconstpointer)(cairo_image_surface_get_data (surface)
                                                        + y * cairo_image_surface_get_stride (surface));
  guint n = 0;
  int length = 0;
  gboolean ink = FALSE;
  for (int x = 0; x < SIDE && n < most; x++)
    {
      gboolean now = (row[x] >> 8 & 255) > 100;
      if (now != ink && (ink || length > 0 || now))
        {
          if (length > 0 && (n > 0 || ink))
            runs[n++] = length;
          length = 0;
        }
      ink = now;
      length++;
    }
  return n;
}

/* No two kinds of line have the same dashes, so that none rests on its colour. */
static void
test_line_dashes (void)
{
  int runs[TF_N_LINE_KINDS][6];
  for (int kind = 0; kind < TF_N_LINE_KINDS; kind++)
    {
      TfVertex points[] = { { 40, 0 }, { 160, 0 } };
      TfOverlayLine line = { (TfLineKind)kind, points, G_N_ELEMENTS (points) };
      TfOverlay overlay = overlay_of (on_map, NULL, 0);
      overlay.lines = &line;
      overlay.n_lines = 1;
      overlay.on_dark = TRUE;
      TfChartStyle style = tf_chart_style (TRUE, TRUE, 12);
      cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_ARGB32, SIDE, SIDE);
      cairo_t *cr = cairo_create (surface);
      tf_overlay_draw (cr, &overlay, &style, area);
      cairo_destroy (cr);
      cairo_surface_flush (surface);
      g_assert_cmpuint (runs_along (surface, SIDE / 2, runs[kind], 6), ==, 6);
      cairo_surface_destroy (surface);
    }
  for (int a = 0; a < TF_N_LINE_KINDS; a++)
    for (int b = a + 1; b < TF_N_LINE_KINDS; b++)
      g_assert_cmpint (abs (runs[a][0] - runs[b][0]) + abs (runs[a][2] - runs[b][2]), >, 0);
}

void
add_overlay_tests (void)
{
  g_test_add_func ("/chart/overlay/an-outline-is-where-the-projection-puts-it",
                   an_outline_is_where_the_projection_puts_it);
  g_test_add_func ("/chart/overlay/hints-are-dashed-and-the-chosen-is-thick",
                   hints_are_dashed_and_the_chosen_is_thick);
  g_test_add_func ("/chart/overlay/edges-are-great-circles", edges_are_great_circles);
  g_test_add_func ("/chart/overlay/an-outline-ends-at-the-limb", an_outline_ends_at_the_limb);
  g_test_add_func ("/chart/overlay/what-is-behind-the-sun-is-not-drawn",
                   what_is_behind_the_sun_is_not_drawn);
  g_test_add_func ("/chart/overlay/no-line-runs-across-the-map-at-its-seam",
                   no_line_runs_across_the_map_at_its_seam);
  g_test_add_func ("/chart/overlay/a-hit-is-what-the-outline-encloses",
                   a_hit_is_what_the_outline_encloses);
  g_test_add_func ("/chart/overlay/holes-and-left-out-areas-are-not-hit",
                   holes_and_left_out_areas_are_not_hit);
  g_test_add_func ("/chart/overlay/poles-are-a-disc-and-a-ring", poles_are_a_disc_and_a_ring);
  g_test_add_func ("/chart/overlay/a-label-stands-clear-of-the-outlines",
                   a_label_stands_clear_of_the_outlines);
  g_test_add_func ("/chart/overlay/lines-show-on-every-grey", lines_show_on_every_grey);
  g_test_add_func ("/chart/overlay/the-graticule-has-its-lines", the_graticule_has_its_lines);
  g_test_add_func ("/chart/overlay/empty-and-broken-input-does-no-harm",
                   empty_and_broken_input_does_no_harm);
  g_test_add_func ("/chart/overlay/kinds-of-line-differ-by-their-dashes", test_line_dashes);
}
