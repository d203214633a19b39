/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The wings: the butterfly strip. Time along, latitude up, one mark a dot (size = flux, disc or
 * ring = leading polarity, struck diamond = breaks Hale's law; hints fainter). Cycles banded and
 * named, divides drawn, a line at the frame in view, the chosen stretch shaded. A density picture
 * when there are more dots than pixels can tell apart.
 */

#include "tf-chart.h"
#include "tf-divide.h"

G_BEGIN_DECLS

typedef struct
{
  double year;
  float lat_deg, flux_mx;
  gint8 leading; /* 1, -1, 0 */
  gint8 verdict; /* TfVerdictKind */
  gint8 hint;
  gint64 id; /* the caller's */
} TfWingsDot;

typedef struct
{
  const TfWingsDot *dots;
  guint n;                    /* sorted by year */
  double from_year, to_year;  /* view */
  double lat_max_deg;         /* 45 */
  double frame_year;          /* NaN none */
  gint64 chosen;              /* id of the chosen dot; 0 none */
  double pick_from, pick_to;  /* the chosen stretch of years; NaN none */
  double pick_low, pick_high; /* and band of latitude; NaN all */
  gboolean picking;           /* they are being chosen: what they hold stands beside them */
  const TfDivides *divides;   /* nullable */
  gboolean plain;             /* a divide is in hand: dots plain, verdicts hidden */
  gboolean movable;           /* divides have handles */
  int hold_cycle, hold_side;  /* the chosen divide: the cycle it begins, hemisphere; cycle 0 none */
  int hold_handle;            /* TfWingsHandle */
} TfWings;

/** TfWingsHandle: what of a divide is taken: all of its line, the line where it begins to act, at the
 * minimum, where it ceases; or the edge of the band in which the cycle is unsure. */
typedef enum
{
  TF_WINGS_WHOLE = -1,
  TF_WINGS_BEGIN,
  TF_WINGS_MINIMUM,
  TF_WINGS_END,
  TF_WINGS_BAND,
} TfWingsHandle;

/** tf_wings_draw: tf_wings_draw_ground: scale, cycles and dots, which cost most when there are many;
 * then tf_wings_draw_over: divides, the stretch, the choice, the frame. */
void tf_wings_draw (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea area);
void tf_wings_draw_ground (cairo_t *cr, const TfWings *wings, const TfChartStyle *style,
                           TfArea area);
void
tf_wings_draw_over (cairo_t *cr, const TfWings *wings, const TfChartStyle *style, TfArea area);
/** tf_wings_plot: where the dots are: @area less the labels, whose room depends on the text size of
 * @style. */
TfArea tf_wings_plot (const TfWings *wings, const TfChartStyle *style, TfArea area);
/** tf_wings_hit: index of the nearest dot within 8 units of the point, or -1. */
int tf_wings_hit (const TfWings *wings, const TfChartStyle *style, TfArea area, double x, double y);
/** tf_wings_year_at, tf_wings_lat_at: what stands at a point; goes on beyond the plot. */
double tf_wings_year_at (const TfWings *wings, const TfChartStyle *style, TfArea area, double x);
double tf_wings_lat_at (const TfWings *wings, const TfChartStyle *style, TfArea area, double y);
double tf_wings_x_of (const TfWings *wings, const TfChartStyle *style, TfArea area, double year);
double tf_wings_y_of (const TfWings *wings, const TfChartStyle *style, TfArea area, double lat_deg);
/** tf_wings_is_dense: whether the view is drawn as a density picture. */
gboolean tf_wings_is_dense (const TfWings *wings, const TfChartStyle *style, TfArea area);
/** tf_wings_sort: by year, as TfWings wants its dots; quick when they are nearly so. */
void tf_wings_sort (TfWingsDot *dots, guint n);
/** tf_wings_fit: sets from_year, to_year to all dots with a margin; at least a month; about @year
 * when there are none. */
void tf_wings_fit (TfWings *wings, double year);
/** tf_wings_hit_divide: the divide at a point: a handle within 9 units of it, else the line, or the
 * edge of the chosen one's band, within 6, whichever is nearer. FALSE: none, or not movable. */
gboolean tf_wings_hit_divide (const TfWings *wings, const TfChartStyle *style, TfArea area,
                              double x, double y, int *cycle, int *side, int *handle);
/** tf_wings_dup_pick: (nullable): the chosen stretch in words, with how many marks it holds. */
char *tf_wings_dup_pick (const TfWings *wings);
char *tf_wings_dup_description (const TfWings *wings);

G_END_DECLS
