/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLawsCharts: what the charts of one study show, and the charts themselves as a table. Made once
 * from a study's findings (slow at a million rows: off the main thread), then immutable; any thread
 * may draw it. It owns all it needs.
 *
 * A chart is draw (cr, charts, style, area), the same for the window, PNG, SVG and PDF; hit-testing
 * and the words for a screen reader stand beside it. Sizes follow style->text_pt. Every share, median
 * and slope has its interval. Nothing rests on colour alone: printed in grey the charts say the same.
 */

#include "tf-chart.h"
#include "tf-divide.h"
#include "tf-emergence.h"
#include "tf-hale.h"
#include "tf-joy.h"

G_BEGIN_DECLS

/** TfLawsFacts: what is known of a study; borrowed while the charts are made. */
typedef struct
{
  const TfSample *sample;
  const TfVerdict *verdicts; /* one a row */
  const GArray *hale;        /* TfHaleRow */
  const GArray *joy;         /* TfJoyFit; that of all cycles and both hemispheres is drawn */
  const TfEmergence *emergence; /* nullable */
  TfDivides *divides;           /* nullable */
  gboolean plain;               /* a divide is in hand: dots plain, verdicts hidden */
  TfHaleParams hale_params;
  TfJoyParams joy_params;
  gboolean all_relations;    /* every published relation; else the first magnetic and the first of
                                white light */
} TfLawsFacts;

typedef struct _TfLawsCharts TfLawsCharts; /* immutable, reference counted */

TfLawsCharts *tf_laws_charts_new (const TfLawsFacts *facts);
/** tf_laws_charts_moved: (transfer full): the same while divides move, at once however many rows there
 * are: shares, slope, divides and plain are taken of @facts; points, bins and tilts stay as in
 * @charts. */
TfLawsCharts *tf_laws_charts_moved (TfLawsCharts *charts, const TfLawsFacts *facts);
TfLawsCharts *tf_laws_charts_ref (TfLawsCharts *charts);
void tf_laws_charts_unref (TfLawsCharts *charts);

typedef struct
{
  const char *name;  /* of the file: "hale", "joy" ... */
  const char *title; /* msgid */
  /** draw: @charts may lack what the chart is about: then it says so. */
  void (*draw) (cairo_t *cr, const TfLawsCharts *charts, const TfChartStyle *style, TfArea area);
  /** hit: the row of the sample at a place, or -1. Where several stand behind one sign (a bar), the
   * next after @after, round the end; -1 begins. */
  int (*hit) (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, double x,
              double y, int after);
  /** dup_places: (transfer full): x, y in turn of every sign (a dot, a bar, a median); x NaN: it lies
   * outside the frame. dup_sign: (transfer full): what sign @k says, in words. */
  double *(*dup_places) (const TfLawsCharts *charts, const TfChartStyle *style, TfArea area, guint *n);
  char *(*dup_sign) (const TfLawsCharts *charts, guint k);
  /** dup_description: (transfer full): what it shows now, in words. */
  char *(*dup_description) (const TfLawsCharts *charts);
  /** height: units that suit a width. */
  double (*height) (const TfLawsCharts *charts, const TfChartStyle *style, double width);
  /** has: whether there is anything to show. */
  gboolean (*has) (const TfLawsCharts *charts);
  gboolean elastic; /* it can be lower than its height(), where there is less room */
} TfLawsChart;

typedef enum
{
  TF_STEP_LEFT,
  TF_STEP_RIGHT,
  TF_STEP_UP,
  TF_STEP_DOWN,
} TfStep;
/**
 * tf_laws_step: the next sign from a place, by keys: along one direction, so that every sign is met.
 * @xy, @n: as dup_places gives them
 * @x: a place; NaN: before all
 * @least: units at least; 0: the very next
 * Returns: the sign, or -1: there is none that way
 */
int tf_laws_step (const double *xy, guint n, TfStep step, double x, double y, double least);
/** tf_laws_charts_dup_row: (transfer full): a row of the sample in words. */
char *tf_laws_charts_dup_row (const TfLawsCharts *charts, guint row);

/** tf_laws_chart_table: ends with name NULL. */
extern const TfLawsChart tf_laws_chart_table[];
/** tf_laws_chart_find: by name; NULL. */
const TfLawsChart *tf_laws_chart_find (const char *name);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfLawsCharts, tf_laws_charts_unref)

G_END_DECLS
