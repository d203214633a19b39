/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Measures what a ledger holds with one even floor, so that a constant region keeps its flux from limb to limb and a study's rows are
 * alike. The measures are machine rows beside those that people saw; nothing is replaced. Frames are opened once each. */

#include "tf-intake-private.h"

#include <string.h>

#include "tf-ledger-brief.h"

typedef struct
{
  GArray *frames, *measures;     /* of gint64, TfMeasure */
  GPtrArray *outlines, *methods; /* borrowed outlines, owned texts */
} Batch;

static void
measure_clear (gpointer measure)
{
  tf_measure_clear (measure);
}

static void
batch_clear (Batch *batch)
{
  g_array_unref (batch->frames);
  g_array_unref (batch->measures);
  g_ptr_array_unref (batch->outlines);
  g_ptr_array_unref (batch->methods);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Batch, batch_clear)

static Batch
batch_new (void)
{
  Batch batch = { g_array_new (FALSE, FALSE, sizeof (gint64)), g_array_new (FALSE, TRUE, sizeof (TfMeasure)),
                  g_ptr_array_new (), g_ptr_array_new_with_free_func (g_free) };
  g_array_set_clear_func (batch.measures, measure_clear);
  return batch;
}

TfFrame *
tf_intake_open_frame (TfLedger *ledger, gint64 id, const TfWork *work)
{
  g_autoptr (TfFrameRow) its = tf_ledger_frame (ledger, id, NULL);
  g_autofree char *checksum = its != NULL ? tf_frame_file_checksum (its->path, work != NULL ? work->cancel : NULL, NULL) : NULL;
  if (checksum == NULL || strcmp (checksum, its->checksum) != 0)
    return NULL;
  TfFrameSpec spec = { its->hdu, its->plane };
  return tf_frame_open (its->path, &spec, work, NULL);
}

/* As the person who marked it corrected it. */
static TfFrame *
as_marked (TfFrame *frame, const char *method, const TfWork *work)
{
  TfMeasureParams params;
  TfCorrection correction;
  return tf_measure_read_method (method, &params, &correction) ? tf_frame_corrected (frame, &correction, work) : NULL;
}

/* The rows of one frame, from @first on; returns how many there are. */
static guint
measure_frame (TfLedger *ledger, const GPtrArray *rows, guint first, double floor_gauss, const TfWork *work, Batch *batch)
{
  gint64 id = ((TfRow *)g_ptr_array_index (rows, first))->frame;
  g_autoptr (TfFrame) frame = NULL;
  gboolean tried = FALSE;
  guint k = first;
  for (; k < rows->len && ((TfRow *)g_ptr_array_index (rows, k))->frame == id; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      TfMeasureParams params;
      g_autofree char *method = tf_measure_dup_even_method (row->method, floor_gauss, &params);
      if (method == NULL || tf_ledger_has_measure (ledger, id, row->outline, method, NULL))
        continue;
      if (!tried)
        frame = tf_intake_open_frame (ledger, id, work);
      tried = TRUE;
      TfMeasure measure = { 0 };
      g_autoptr (TfFrame) seen = frame != NULL ? as_marked (frame, method, work) : NULL;
      if (seen == NULL || !tf_measure_region (&measure, seen, row->outline, &params, NULL))
        continue;
      g_array_append_val (batch->frames, id);
      g_array_append_val (batch->measures, measure);
      g_ptr_array_add (batch->outlines, row->outline);
      g_ptr_array_add (batch->methods, g_steal_pointer (&method));
    }
  return k - first;
}

static int
compare_frames (gconstpointer a, gconstpointer b)
{
  const TfRow *p = *(TfRow *const *)a, *q = *(TfRow *const *)b;
  return (p->frame > q->frame) - (p->frame < q->frame);
}

/* Whether every mark (and open hint) of the ledger has that floor: told without reading the outlines. */
static gboolean
is_measured (TfLedger *ledger, double floor_gauss, const TfRowQuery *query)
{
  if (query->frame != 0 || query->passage != 0 || query->judged_hints || !query->marks
      || !tf_ledger_has_briefs (ledger))
    return FALSE;
  const TfBriefQuery asked = { .hints = query->hints, .asked_gauss = { floor_gauss, 0.0 } };
  g_autoptr (TfBriefs) briefs = tf_ledger_briefs (ledger, &asked, NULL);
  return briefs != NULL && briefs->n_lacking[0] == 0;
}

gboolean
tf_intake_measure_even (TfLedger *ledger, double floor_gauss, const TfRowQuery *query, const TfWork *work, GError **error)
{
  g_return_val_if_fail (ledger != NULL && query != NULL, FALSE);
  if (!(floor_gauss > 0) || tf_ledger_get_read_only (ledger) != NULL
      || is_measured (ledger, floor_gauss, query))
    return TRUE;
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, query, error);
  if (rows == NULL)
    return FALSE;
  g_ptr_array_sort (rows, compare_frames);
  for (guint k = 0; k < rows->len && !(work != NULL && tf_cancel_is_raised (work->cancel));)
    {
      g_auto (Batch) batch = batch_new ();
      k += measure_frame (ledger, rows, k, floor_gauss, work, &batch);
      if (!tf_ledger_add_measures (ledger, batch.frames->len, (const gint64 *)(void *)batch.frames->data,
                                   (TfOutline *const *)batch.outlines->pdata, (char *const *)batch.methods->pdata,
                                   (const TfMeasure *)(void *)batch.measures->data, error))
        return FALSE;
    }
  return TRUE;
}
