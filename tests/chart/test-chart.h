/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A picture to draw on and to read pixels from. One user unit is one pixel. */

#include "tf-chart.h"

typedef struct
{
  cairo_surface_t *surface;
  cairo_t *cr;
  int width, height;
} Picture;

Picture picture_new (int width, int height, TfColour ground);
void picture_clear (Picture *picture);
/** picture_at: colour of a pixel; the ground must be opaque. */
TfColour picture_at (const Picture *picture, int x, int y);
/** colour_distance: greatest difference of a channel, 0 to 1. */
double colour_distance (TfColour a, TfColour b);
/** picture_count: pixels within @tolerance of @colour. */
guint picture_count (const Picture *picture, TfColour colour, double tolerance);
/** picture_count_in: the same within a box. */
guint picture_count_in (const Picture *picture, TfColour colour, double tolerance, int x0, int y0,
                        int x1, int y1);
/** picture_changed: pixels of the picture that are not @ground. */
guint picture_changed (const Picture *picture, TfColour ground);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Picture, picture_clear)

void add_symbol_tests (void);
void add_dial_tests (void);
void add_wings_tests (void);
void add_overlay_tests (void);
void add_plate_figure_tests (void);
void add_laws_chart_tests (void);
void add_power_plot_tests (void);
void add_sheet_tests (void);
