/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-tracer.h"

#include <gio/gio.h>

/* What is known of one outline: first asked for, then found. */
typedef struct
{
  TfTrace what;
  TfOutline *outline;
  gboolean anyway, asked, done;
  TfMeasureParams measure;
  GArray *lines; /* of TfOverlayLine, each with points of its own */
  char *why;
  TfSpots *spots; /* of TF_TRACE_SPOTS, with their refusal; NULL without the intensity frame */
} Trace;

struct _TfTracer
{
  int refs; /* the owner and the work under way; main thread */
  gboolean gone, busy;
  TfWorkers *workers;
  TfPool *pool;
  void (*changed) (gpointer data);
  gpointer data;
  guint64 serial; /* of the frame and companion */
  TfFrame *frame;
  char *companion_path;
  TfFrameSpec companion_spec;
  TfFrame *companion; /* once opened */
  GPtrArray *traces;
};

typedef struct
{
  TfTracer *tracer;
  guint64 serial;
  TfFrame *frame, *companion;
  char *companion_path;
  TfFrameSpec companion_spec;
  TfWork work;
  Trace *trace; /* a copy */
} Order;

static void
line_clear (gpointer data)
{
  g_free ((gpointer)((TfOverlayLine *)data)->points);
}

static Trace *
trace_new (TfTrace what, TfOutline *outline, const TfMeasureParams *measure, gboolean anyway)
{
  Trace *trace = g_new0 (Trace, 1);
  trace->what = what;
  trace->outline = tf_outline_ref (outline);
  trace->measure = *measure;
  trace->anyway = anyway;
  trace->lines = g_array_new (FALSE, FALSE, sizeof (TfOverlayLine));
  g_array_set_clear_func (trace->lines, line_clear);
  return trace;
}

static void
spots_free (TfSpots *spots)
{
  if (spots != NULL)
    tf_spots_clear (spots);
  g_free (spots);
}

static void
trace_free (gpointer data)
{
  Trace *trace = data;
  tf_outline_unref (trace->outline);
  g_array_unref (trace->lines);
  g_free (trace->why);
  spots_free (trace->spots);
  g_free (trace);
}

static void
tracer_unref (TfTracer *tracer)
{
  if (--tracer->refs == 0)
    g_free (tracer);
}

static void
order_free (gpointer data)
{
  Order *order = data;
  g_clear_pointer (&order->frame, tf_frame_unref);
  g_clear_pointer (&order->companion, tf_frame_unref);
  g_free (order->companion_path);
  g_clear_pointer (&order->work.pool, tf_pool_unref);
  g_clear_pointer (&order->work.workers, tf_workers_unref);
  trace_free (order->trace);
  g_free (order);
}

/* -- in the thread --------------------------------------------------------------------------- */

static void
add_inversion (Trace *trace, const TfInversion *inversion)
{
  for (guint k = 0; k < inversion->n; k++)
    {
      const TfInversionLine *from = &inversion->lines[k];
      TfVertex *points = g_new (TfVertex, MAX (from->n, 1));
      for (guint j = 0; j < from->n; j++)
        points[j] = (TfVertex){ from->points[j].lon_deg, from->points[j].lat_deg };
      TfOverlayLine line = { TF_LINE_INVERSION, points, from->n };
      g_array_append_val (trace->lines, line);
    }
}

static void
find_inversion (const Order *order)
{
  Trace *trace = order->trace;
  TfComplexityParams params;
  g_auto (TfComplexity) complexity = { 0 };
  tf_complexity_params_init (&params);
  params.anyway = trace->anyway;
  tf_complexity_region (&complexity, order->frame, trace->outline, &trace->measure, &params);
  if (complexity.given)
    add_inversion (trace, &complexity.inversion);
  else if (complexity.refusal != NULL)
    trace->why = tf_note_dup_text (complexity.refusal, FALSE);
}

static void
add_spots (Trace *trace, const TfSpots *spots)
{
  for (guint k = 0; k < spots->n_contours; k++)
    {
      const TfSpotContour *from = &spots->contours[k];
      TfOverlayLine line = { from->umbra ? TF_LINE_UMBRA : TF_LINE_PENUMBRA,
                             g_memdup2 (from->points, from->n * sizeof *from->points), from->n };
      g_array_append_val (trace->lines, line);
    }
}

static void
find_spots (Order *order)
{
  Trace *trace = order->trace;
  g_autoptr (GError) error = NULL;
  if (order->companion == NULL)
    order->companion = tf_frame_open_companion (order->companion_path, &order->companion_spec,
                                                &order->work, &error);
  if (order->companion == NULL)
    {
      trace->why = g_strdup (error->message);
      return;
    }
  TfCompanionParams params;
  TfSpots *spots = trace->spots = g_new0 (TfSpots, 1);
  tf_companion_params_init (&params);
  tf_spots_find (spots, order->frame, order->companion, trace->outline, &trace->measure, &params);
  if (spots->matched)
    add_spots (trace, spots);
  else if (spots->refusal != NULL)
    trace->why = tf_note_dup_text (spots->refusal, FALSE);
}

static void
find_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Order *order = data;
  if (order->trace->what == TF_TRACE_INVERSION)
    find_inversion (order);
  else
    find_spots (order);
  g_task_return_boolean (task, TRUE);
}

/* -- one after the other --------------------------------------------------------------------- */

static Trace *
find (TfTracer *tracer, TfTrace what, TfOutline *outline)
{
  for (guint k = 0; k < tracer->traces->len; k++)
    {
      Trace *trace = g_ptr_array_index (tracer->traces, k);
      if (trace->what == what
          && (trace->outline == outline || tf_outline_equal (trace->outline, outline)))
        return trace; /* the same outline comes anew each time the ledger is read */
    }
  return NULL;
}

static void start_next (TfTracer *tracer);

static void
found (GObject *source, GAsyncResult *result, gpointer data)
{
  TfTracer *tracer = data;
  Order *order = g_task_get_task_data (G_TASK (result));
  tracer->busy = FALSE;
  Trace *trace = !tracer->gone && order->serial == tracer->serial
                     ? find (tracer, order->trace->what, order->trace->outline)
                     : NULL;
  if (trace != NULL)
    {
      GArray *lines = trace->lines;
      trace->lines = order->trace->lines;
      order->trace->lines = lines;
      trace->why = g_steal_pointer (&order->trace->why);
      trace->spots = g_steal_pointer (&order->trace->spots);
      trace->done = TRUE;
      if (tracer->companion == NULL && order->companion != NULL)
        tracer->companion = tf_frame_ref (order->companion);
    }
  if (!tracer->gone)
    start_next (tracer);
  if (trace != NULL)
    tracer->changed (tracer->data);
  tracer_unref (tracer);
}

static void
start (TfTracer *tracer, Trace *trace)
{
  Order *order = g_new0 (Order, 1);
  order->tracer = tracer;
  order->serial = tracer->serial;
  order->frame = tf_frame_ref (tracer->frame);
  order->companion = tracer->companion != NULL ? tf_frame_ref (tracer->companion) : NULL;
  order->companion_path = g_strdup (tracer->companion_path);
  order->companion_spec = tracer->companion_spec;
  order->work.pool = tf_pool_ref (tracer->pool);
  order->work.workers = tf_workers_ref (tracer->workers);
  order->trace = trace_new (trace->what, trace->outline, &trace->measure, trace->anyway);
  trace->asked = tracer->busy = TRUE;
  tracer->refs++;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, found, tracer);
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, find_in_thread);
}

static void
start_next (TfTracer *tracer)
{
  for (guint k = 0; k < tracer->traces->len && !tracer->busy; k++)
    {
      Trace *trace = g_ptr_array_index (tracer->traces, k);
      if (!trace->asked)
        start (tracer, trace);
    }
}

/* -- for the owner --------------------------------------------------------------------------- */

TfTracer *
tf_tracer_new (TfWorkers *workers, TfPool *pool, void (*changed) (gpointer data), gpointer data)
{
  g_return_val_if_fail (changed != NULL, NULL);
  TfTracer *tracer = g_new0 (TfTracer, 1);
  tracer->refs = 1;
  tracer->workers = tf_workers_ref (workers);
  tracer->pool = tf_pool_ref (pool);
  tracer->changed = changed;
  tracer->data = data;
  tracer->traces = g_ptr_array_new_with_free_func (trace_free);
  return tracer;
}

void
tf_tracer_free (TfTracer *tracer)
{
  if (tracer == NULL)
    return;
  tf_tracer_set_frame (tracer, NULL, NULL, NULL);
  tracer->gone = TRUE;
  g_clear_pointer (&tracer->traces, g_ptr_array_unref);
  g_clear_pointer (&tracer->workers, tf_workers_unref);
  g_clear_pointer (&tracer->pool, tf_pool_unref);
  tracer_unref (tracer);
}

void
tf_tracer_set_frame (TfTracer *tracer, TfFrame *frame, const char *companion_path,
                     const TfFrameSpec *companion)
{
  g_return_if_fail (tracer != NULL);
  if (frame == tracer->frame && g_strcmp0 (companion_path, tracer->companion_path) == 0)
    return;
  tracer->serial++;
  g_ptr_array_set_size (tracer->traces, 0);
  g_clear_pointer (&tracer->frame, tf_frame_unref);
  g_clear_pointer (&tracer->companion, tf_frame_unref);
  g_clear_pointer (&tracer->companion_path, g_free);
  tracer->companion_path = g_strdup (companion_path);
  tracer->companion_spec = companion != NULL ? *companion : (TfFrameSpec){ 0 };
  if (frame != NULL)
    tracer->frame = tf_frame_ref (frame);
}

void
tf_tracer_ask (TfTracer *tracer, TfTrace what, TfOutline *outline, const TfMeasureParams *measure,
               gboolean anyway)
{
  g_return_if_fail (tracer != NULL && outline != NULL && measure != NULL);
  if (tracer->frame == NULL || (what == TF_TRACE_SPOTS && tracer->companion_path == NULL)
      || find (tracer, what, outline) != NULL)
    return;
  g_ptr_array_add (tracer->traces, trace_new (what, outline, measure, anyway));
  start_next (tracer);
}

const TfOverlayLine *
tf_tracer_get (TfTracer *tracer, TfTrace what, TfOutline *outline, guint *n, char **why)
{
  g_return_val_if_fail (tracer != NULL && outline != NULL && n != NULL, NULL);
  const Trace *trace = find (tracer, what, outline);
  *n = 0;
  if (why != NULL)
    *why = trace != NULL ? g_strdup (trace->why) : NULL;
  if (trace == NULL || !trace->done)
    return NULL;
  *n = trace->lines->len;
  return (const TfOverlayLine *)(gconstpointer)trace->lines->data;
}

const TfSpots *
tf_tracer_get_spots (TfTracer *tracer, TfOutline *outline)
{
  g_return_val_if_fail (tracer != NULL && outline != NULL, NULL);
  const Trace *trace = find (tracer, TF_TRACE_SPOTS, outline);
  return trace != NULL && trace->done ? trace->spots : NULL;
}

gboolean
tf_tracer_is_busy (const TfTracer *tracer)
{
  return tracer->busy;
}
