/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-chart.h"

#include <math.h>

#include "tf-sheet.h"

static const char *const cautions[] = { "Not a forecast.", NULL };

/* A page of @n rows; returns what had no room. */
static guint
draw_rows (Picture *picture, guint n, const char *note)
{
  g_autofree TfSheetLine *lines = g_new0 (TfSheetLine, n + 1);
  for (guint k = 0; k < n; k++)
    lines[k] = (TfSheetLine){ .cells = { "1", "T2013-0001", "N17 W23", "βγδ (yesterday β)" } };
  const char *const notes[] = { note, NULL };
  const TfShiftSheet sheet = { .title = "Shift sheet",
                               .subtitle = "north desk",
                               .columns = { "", "Region", "Place", "Class" },
                               .widths = { 1, 4, 3, 5 },
                               .lines = lines,
                               .n_lines = n,
                               .notes_title = "Notes",
                               .notes = note != NULL ? notes : NULL,
                               .cautions = cautions };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 9);
  return tf_shift_sheet_draw (picture->cr, &sheet, &style,
                              (TfArea){ 0, 0, picture->width, picture->height });
}

static void
everything_stands_on_one_page (void)
{
  TfColour white = { 1, 1, 1, 1 };
  const guint fits[] = { 0, 3, 20, 40 };
  for (guint k = 0; k < G_N_ELEMENTS (fits); k++)
    {
      g_auto (Picture) picture = picture_new (842, 595, white); /* A4, points */
      g_assert_cmpuint (draw_rows (&picture, fits[k], "look again"), ==, 0);
      /* the margins are kept */
      TfChartStyle style = tf_chart_style (FALSE, FALSE, 9);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.6, 0, 0, 842, 28), ==, 0);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.6, 0, 568, 842, 595), ==, 0);
      g_assert_cmpuint (picture_count_in (&picture, style.ink, 0.6, 30, 540, 842, 566), >, 20); /* the caution */
    }
}

static void
what_has_no_room_is_counted (void)
{
  TfColour white = { 1, 1, 1, 1 };
  g_auto (Picture) picture = picture_new (842, 595, white);
  guint left = draw_rows (&picture, 500, NULL);
  g_assert_cmpuint (left, >, 300);
  g_assert_cmpuint (left, <, 480);
  /* a note longer than the page */
  g_autoptr (GString) text = g_string_new (NULL);
  for (guint k = 0; k < 4000; k++)
    g_string_append (text, "a long story ");
  g_auto (Picture) other = picture_new (842, 595, white);
  g_assert_cmpuint (draw_rows (&other, 3, text->str), ==, 1);
}

typedef struct
{
  guint n;
  TfArea area;
} Asked;

static void
note_area (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  Asked *asked = data;
  asked->n++;
  asked->area = area;
}

static void
a_region_has_its_picture_and_dial (void)
{
  TfColour white = { 1, 1, 1, 1 };
  Asked asked = { 0 };
  const TfDial dial = { .bearing_deg = 10, .sigma_deg = 3, .lat_deg = 12, .joy_deg = 5, .joy_scatter_deg = 12,
                        .joy_name = "S & K 2012", .leading_polarity = 1, .expected = 1, .witnesses = { 1, 1, -1 } };
  const TfSheetFigure figures[] = { { "Flux", "1.7·10²² Mx ± 2·10²⁰ Mx", "even floor 49 G" }, { "Axis tilt", "4.2° ± 1.1°", "planar" } };
  const TfRegionSheet sheet = { .title = "T2013-0412  N17 W23", .subtitle = "2013-10-14 06:00 UTC", .picture = note_area,
                                .picture_data = &asked, .picture_words = "± 500 G", .dial = &dial, .figures = figures,
                                .n_figures = G_N_ELEMENTS (figures), .cautions = cautions };
  g_auto (Picture) picture = picture_new (595, 842, white);
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 9);
  g_assert_cmpuint (tf_region_sheet_draw (picture.cr, &sheet, &style, (TfArea){ 0, 0, 595, 842 }), ==, 0);
  g_assert_cmpuint (asked.n, ==, 1); /* measured without it */
  g_assert_cmpfloat (fabs (asked.area.width - asked.area.height), <, 1e-9);
  g_assert_cmpfloat (asked.area.width, >, 300);
  /* the dial stands right of the picture: its disc is amber */
  g_assert_cmpuint (picture_count_in (&picture, style.positive, 0.1, (int)(asked.area.x + asked.area.width), 30, 595, 400), >, 10);
}

void
add_sheet_tests (void)
{
  g_test_add_func ("/chart/sheet/everything-stands-on-one-page", everything_stands_on_one_page);
  g_test_add_func ("/chart/sheet/what-has-no-room-is-counted", what_has_no_room_is_counted);
  g_test_add_func ("/chart/sheet/a-region-has-its-picture-and-dial", a_region_has_its_picture_and_dial);
}
