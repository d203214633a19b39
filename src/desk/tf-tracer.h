/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfTracer: lines that are found in the pixels of the frame on the plate, one outline after the
 * other off the main thread: inversion lines, and spots where an intensity frame of the same time
 * is there. What was found is kept until the frame or its companion changes. Main thread only. */

#include "tf-companion.h"
#include "tf-complexity.h"
#include "tf-overlay.h"

G_BEGIN_DECLS

typedef enum
{
  TF_TRACE_INVERSION,
  TF_TRACE_SPOTS,
  TF_N_TRACES
} TfTrace;

typedef struct _TfTracer TfTracer;

/** tf_tracer_new: @changed: lines came, or that there are none became known. */
TfTracer *tf_tracer_new (TfWorkers *workers, TfPool *pool, void (*changed) (gpointer data),
                         gpointer data);
void tf_tracer_free (TfTracer *tracer);
/**
 * tf_tracer_set_frame: forgets what was found in another.
 * @frame: (nullable)
 * @companion_path: (nullable): the intensity frame; opened when spots are asked for
 */
void tf_tracer_set_frame (TfTracer *tracer, TfFrame *frame, const char *companion_path,
                          const TfFrameSpec *companion);
/** tf_tracer_ask: sees to it that the lines of @outline are found. @anyway: also nearer the limb
 * than complexity is given for. */
void tf_tracer_ask (TfTracer *tracer, TfTrace what, TfOutline *outline,
                    const TfMeasureParams *measure, gboolean anyway);
/** tf_tracer_get: lines of what was asked for and is found (borrowed); @why: (out) (nullable)
 * (transfer full): why there are none */
const TfOverlayLine *
tf_tracer_get (TfTracer *tracer, TfTrace what, TfOutline *outline, guint *n, char **why);
/** tf_tracer_get_spots: (nullable): what the spots of an outline tell, or why they tell nothing; NULL
 * until they were looked for, and when the intensity frame cannot be read. */
const TfSpots *tf_tracer_get_spots (TfTracer *tracer, TfOutline *outline);
gboolean tf_tracer_is_busy (const TfTracer *tracer);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfTracer, tf_tracer_free)

G_END_DECLS
