/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfTraced: the field of a region on a patch at the reference resolution, with all that its lines
 * and figures need. */

#include <glib.h>

#include "tf-complexity.h"
#include "tf-fill-private.h"
#include "tf-inversion.h"
#include "tf-patch-private.h"

G_BEGIN_DECLS

typedef struct
{
  TfPatch *patch;
  TfFill *fill;     /* of the outline at the frame's time */
  guint8 *inside;   /* 1: in the outline, seen, mu above the measurement's least */
  double *field;    /* G, the field used; 0 where not seen */
  double *dx, *dy;  /* its derivatives, G/Mm */
  gboolean divides; /* the patch's values are divided by mu ... */
  double scale;     /* ... and multiplied by this */
  double *more_dx,
      *more_dy; /* what the potential field used adds to their derivatives; NULL for the others */
  double *transverse; /* G, size of the potential field along the surface; NULL unless asked for */
} TfTraced;

/**
 * tf_traced_new: (transfer full):
 * @outline: at the frame's time
 * @shift_x, @shift_y: of the nodes, in steps
 * @full: with transverse field; else, unless a potential field is used, nodes outside the outline
 *   are not looked at
 */
TfTraced *
tf_traced_new (const TfFrame *frame, const TfOutline *outline, const TfMeasureParams *measure,
               const TfComplexityParams *params, double shift_x, double shift_y, gboolean full);
void tf_traced_free (TfTraced *traced);
/** tf_traced_spec: the patch that tf_traced_new makes, for another frame on the same nodes. */
void tf_traced_spec (TfPatchSpec *spec, const TfFrame *frame, const TfOutline *outline,
                     const TfComplexityParams *params, double shift_x, double shift_y);

/** tf_traced_gradient: derivatives of the field used at a plane place between the nodes; FALSE
 * where there are none. */
gboolean tf_traced_gradient (const TfTraced *traced, double x, double y, double *dx, double *dy);

/** tf_inversion_trace: lines of zero field inside the outline that part fields of at least
 * params->strong_gauss, both reached within params->side_mm straight across the line. */
void tf_inversion_trace (TfInversion *inversion, const TfTraced *traced,
                         const TfComplexityParams *params);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfTraced, tf_traced_free)

G_END_DECLS
