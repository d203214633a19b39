/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Measures anew what the ledger holds, from the frames, and says what differs. Rows are taken
 * evenly over time. */

#include "tf-intake.h"

#include <math.h>
#include <string.h>

/* Relative difference that another compiler or machine may make in sums over a region; common
 * practice, no source. */
#define SAME 1e-6

static gboolean
same (double a, double b)
{
  if (isnan (a) || isnan (b))
    return isnan (a) && isnan (b);
  return fabs (a - b) <= SAME * MAX (fabs (a), fabs (b)) + 1e-9;
}

static const char *
differing (const TfMeasure *a, const TfMeasure *b)
{
  if (!same (a->flux_unsigned_mx, b->flux_unsigned_mx))
    return "flux_unsigned_mx";
  if (!same (a->imbalance, b->imbalance))
    return "imbalance";
  if (!same (a->lat_deg, b->lat_deg) || !same (a->carrington_lon_deg, b->carrington_lon_deg))
    return "lat_deg";
  if (!same (a->axis_bearing_deg, b->axis_bearing_deg)
      || !same (a->axis_tilt_deg, b->axis_tilt_deg))
    return "axis_tilt_deg";
  if (!same (a->separation_deg, b->separation_deg))
    return "separation_deg";
  if (a->leading_polarity != b->leading_polarity)
    return "leading_polarity";
  return NULL;
}

/* The frame of a row, opened once for as many rows as follow each other on it. */
typedef struct
{
  gint64 id;
  TfFrame *frame;
} Open;

static TfFrame *
frame_of (TfLedger *ledger, const TfRow *row, Open *open, TfNotes *findings)
{
  if (open->id == row->frame)
    return open->frame;
  g_clear_pointer (&open->frame, tf_frame_unref);
  open->id = row->frame;
  g_autoptr (TfFrameRow) its = tf_ledger_frame (ledger, row->frame, NULL);
  g_autofree char *checksum = its != NULL ? tf_frame_file_checksum (its->path, NULL, NULL) : NULL;
  if (checksum != NULL && strcmp (checksum, its->checksum) == 0)
    {
      TfFrameSpec spec = { its->hdu, its->plane };
      open->frame = tf_frame_open (its->path, &spec, NULL, NULL);
    }
  if (open->frame == NULL)
    tf_notes_add (findings, "frame-missing", "ss", tf_ledger_get_path (ledger), row->frame_path);
  return open->frame;
}

/* Figures of another version or that were not given are not this one's to judge. */
static const char *
differing_complexity (const TfFrame *frame, const TfRow *row, const TfMeasureParams *measure)
{
  TfComplexityParams params;
  if (!row->complexity.there
      || !tf_options_read_canonical (tf_complexity_options, &params, TF_COMPLEXITY_METHOD,
                                     row->complexity_method))
    return NULL;
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_region (&c, frame, row->outline, measure, &params);
  TfComplexityRow now = tf_complexity_row (&c);
  return same (now.r_mx, row->complexity.r_mx)
                 && same (now.strong_gradient_length_mm, row->complexity.strong_gradient_length_mm)
             ? NULL
             : "r_schrijver_mx";
}

static void
remeasure (TfLedger *ledger, const TfRow *row, Open *open, TfNotes *findings)
{
  TfMeasureParams params;
  TfCorrection correction;
  if (!tf_measure_read_method (row->method, &params, &correction))
    return; /* a method of another version: its rows are not this one's to judge */
  TfFrame *header = frame_of (ledger, row, open, findings);
  if (header == NULL)
    return;
  g_auto (TfMeasure) measure = { 0 };
  g_autoptr (TfFrame) frame = tf_frame_corrected (header, &correction, NULL);
  const char *what = frame != NULL
                             && tf_measure_region (&measure, frame, row->outline, &params, NULL)
                         ? differing (&measure, &row->measure)
                         : "pixels";
  if (what == NULL)
    what = differing_complexity (frame, row, &params);
  const char *name = row->is_hint ? row->mark_id : row->region;
  if (what != NULL)
    tf_notes_add (findings, "measure-differs", "ssss", tf_ledger_get_path (ledger), name,
                  row->frame_path, what);
}

gboolean
tf_intake_remeasure (TfLedger *ledger, guint limit, TfNotes *findings, GError **error)
{
  g_return_val_if_fail (ledger != NULL && findings != NULL, FALSE);
  g_autoptr (GPtrArray) rows
      = tf_ledger_rows (ledger, &(TfRowQuery){ .marks = TRUE, .hints = TRUE, .complexity = TRUE }, error);
  if (rows == NULL)
    return FALSE;
  Open open = { 0 };
  guint n = MIN (limit, rows->len);
  for (guint k = 0; k < n; k++)
    remeasure (ledger, g_ptr_array_index (rows, (guint)((guint64)k * rows->len / n)), &open,
               findings);
  g_clear_pointer (&open.frame, tf_frame_unref);
  return TRUE;
}
