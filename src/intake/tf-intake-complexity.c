/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Complexity of what a ledger holds without: hints of an older version, marks whose figures were
 * not yet worked out when the program was stopped. Frames are opened once each. */

#include "tf-intake-private.h"

#include <math.h>

typedef struct
{
  GArray *keys, *hints, *rows; /* gint64, gboolean, TfComplexityRow */
} Batch;

static void
batch_clear (Batch *batch)
{
  g_array_unref (batch->keys);
  g_array_unref (batch->hints);
  g_array_unref (batch->rows);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Batch, batch_clear)

/* Maps have no mu: nothing is worked out on them. */
static gboolean
lacks (const TfRow *row, TfMeasureParams *params)
{
  return row->complexity_method == NULL && isfinite (row->measure.mu)
         && tf_options_read_canonical (tf_measure_options, params, TF_MEASURE_METHOD, row->method);
}

/* The rows of one frame, from @first on; returns how many there are. */
static guint
work_out_frame (TfLedger *ledger, const GPtrArray *rows, guint first,
                const TfComplexityParams *params, const TfWork *work, Batch *batch)
{
  gint64 id = ((TfRow *)g_ptr_array_index (rows, first))->frame;
  g_autoptr (TfFrame) frame = NULL;
  gboolean tried = FALSE;
  guint k = first;
  for (; k < rows->len && ((TfRow *)g_ptr_array_index (rows, k))->frame == id; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      TfMeasureParams measure;
      if (!lacks (row, &measure))
        continue;
      if (!tried)
        frame = tf_intake_open_frame (ledger, id, work);
      tried = TRUE;
      if (frame == NULL)
        continue;
      g_auto (TfComplexity) c = { 0 };
      tf_complexity_region (&c, frame, row->outline, &measure, params);
      TfComplexityRow found = tf_complexity_row (&c);
      g_array_append_val (batch->keys, row->mark);
      g_array_append_val (batch->hints, row->is_hint);
      g_array_append_val (batch->rows, found);
    }
  return k - first;
}

static int
compare_frames (gconstpointer a, gconstpointer b)
{
  const TfRow *p = *(TfRow *const *)a, *q = *(TfRow *const *)b;
  return (p->frame > q->frame) - (p->frame < q->frame);
}

gboolean
tf_intake_complexity (TfLedger *ledger, const TfRowQuery *query, const TfComplexityParams *params,
                      const TfWork *work, guint *n, GError **error)
{
  g_return_val_if_fail (ledger != NULL && query != NULL && params != NULL, FALSE);
  if (n != NULL)
    *n = 0;
  if (tf_ledger_get_read_only (ledger) != NULL)
    return TRUE;
  TfRowQuery with = *query;
  with.complexity = TRUE;
  g_autofree char *method
      = tf_options_dup_canonical (tf_complexity_options, params, TF_COMPLEXITY_METHOD);
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &with, error);
  if (rows == NULL)
    return FALSE;
  g_ptr_array_sort (rows, compare_frames);
  for (guint k = 0; k < rows->len && !(work != NULL && tf_cancel_is_raised (work->cancel));)
    {
      g_auto (Batch) batch = { g_array_new (FALSE, FALSE, sizeof (gint64)),
                               g_array_new (FALSE, FALSE, sizeof (gboolean)),
                               g_array_new (FALSE, FALSE, sizeof (TfComplexityRow)) };
      k += work_out_frame (ledger, rows, k, params, work, &batch);
      if (!tf_ledger_add_complexity (ledger, batch.keys->len,
                                     (const gint64 *)(void *)batch.keys->data,
                                     (const gboolean *)(void *)batch.hints->data, method,
                                     (const TfComplexityRow *)(void *)batch.rows->data, error))
        return FALSE;
      if (n != NULL)
        *n += batch.keys->len;
    }
  return TRUE;
}
