/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Sheets of one page for people at a desk: the shift sheet (a table of the disk's regions and what
 * was noted) and the sheet of one region. All words come from the caller, measures as plain text;
 * a text that has no room goes on in the next line, and the page's letters get smaller, down to
 * 5 points, until everything stands on it. What still does not is counted at its foot. */

#include "tf-dial.h"
#include "tf-figure.h"

G_BEGIN_DECLS

enum
{
  TF_SHEET_COLUMNS = 9
};

/** TfSheetLine: a row of the table, or with @heading a line that says what follows. */
typedef struct
{
  const char *heading;                 /* NULL: a row */
  const char *cells[TF_SHEET_COLUMNS]; /* NULL: empty */
} TfSheetLine;

typedef struct
{
  const char *title, *subtitle;
  const char *columns[TF_SHEET_COLUMNS];
  double widths[TF_SHEET_COLUMNS]; /* shares; 0: no such column */
  const TfSheetLine *lines;
  guint n_lines;
  const char *notes_title;
  const char *const *notes;    /* NULL-ended */
  const char *const *cautions; /* NULL-ended; at the foot */
} TfShiftSheet;

/** tf_shift_sheet_draw: returns how many lines and notes had no room (0 as a rule). */
guint tf_shift_sheet_draw (cairo_t *cr, const TfShiftSheet *sheet, const TfChartStyle *style, TfArea area);

/** TfSheetFigure: one value with how it was got. */
typedef struct
{
  const char *label, *value, *how;
} TfSheetFigure;

typedef struct
{
  const char *title, *subtitle;
  TfFigureFunc picture;     /* draws the close look into a square */
  gpointer picture_data;
  const char *picture_words; /* under it */
  const TfDial *dial;
  const TfSheetFigure *figures;
  guint n_figures;
  const char *const *notes;
  const char *const *cautions;
} TfRegionSheet;

guint tf_region_sheet_draw (cairo_t *cr, const TfRegionSheet *sheet, const TfChartStyle *style, TfArea area);

G_END_DECLS
