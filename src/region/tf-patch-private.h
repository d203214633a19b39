/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPatch: a frame laid on a flat, un-projected grid about one place of the Sun and brought to a
 * stated resolution.
 *
 * The plane is Lambert's azimuthal equal-area one (Snyder 1987, USGS Professional Paper 1395, p.
 * 185) about the patch's centre: x west, y north, Mm; nodes are a step apart, row-major from
 * south-east to north-west, the centre on the middle node. A node stands for step x step Mm2 of the
 * Sun, everywhere. Values are those of the frame (as observed) seen through a Gaussian of the given
 * FWHM on the Sun, the pixels' own width taken off it, so that coarse and fine frames agree. Where
 * the frame has no value the node's value is 0 and its "seen" is 0: the sums of a node without a
 * value are nothing, never NaN.
 */

#include <glib.h>

#include "tf-fill-private.h"
#include "tf-frame.h"

G_BEGIN_DECLS

typedef struct
{
  double centre[3], west[3], north[3]; /* Carrington frame */
  double radius_mm, step_mm;
  guint width, height;
  double x0, y0; /* plane place of node (0, 0), Mm */
  gsize n;
  double *value;     /* as observed */
  double *dx, *dy;   /* derivative of value along the plane's x and y, a Mm */
  double *mu;        /* 1 on maps; NaN behind the limb */
  double (*line)[3]; /* to the observer: west, north, up; (0, 0, 1) on maps */
  guint8 *seen;      /* 1: the frame has a value here */
  double
      coarse; /* share of the nodes seen where the pixels are too coarse for the resolution asked */
  /* how the frame is read between the nodes */
  TfFrame *frame;
  double sigma_mm;
  guint level;   /* of the frame's pyramid */
  double *u, *v; /* place of each node on that level, 0-based */
} TfPatch;

typedef struct
{
  double lon_deg, lat_deg;     /* centre, Carrington */
  double half_x_mm, half_y_mm; /* half the size asked */
  double step_mm;
  double fwhm_mm;
  double shift_x, shift_y; /* of all nodes, in steps: 0 to 1 */
  guint most_nodes;        /* a side */
  const TfFill *only;      /* nodes outside stay unseen; NULL: all are looked at */
} TfPatchSpec;

/** tf_patch_new: (transfer full). */
TfPatch *tf_patch_new (const TfFrame *frame, const TfPatchSpec *spec);
void tf_patch_free (TfPatch *patch);

/** tf_patch_unit: plane -> unit vector; tf_patch_plane: the other way, FALSE for the far half of
 * the Sun. */
void tf_patch_unit (const TfPatch *patch, double x, double y, double unit[3]);
gboolean tf_patch_plane (const TfPatch *patch, const double unit[3], double *x, double *y);
/** tf_patch_node: plane place of a node. */
void tf_patch_node (const TfPatch *patch, gsize k, double *x, double *y);
/** tf_patch_at: @values (one a node) at a plane place, bilinear; NaN outside the patch. */
double tf_patch_at (const TfPatch *patch, const double *values, double x, double y);
/** tf_patch_look: value and derivatives at any plane place, worked out from the pixels as at a
 * node. FALSE where there is none. */
gboolean
tf_patch_look (const TfPatch *patch, double x, double y, double *value, double *dx, double *dy);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPatch, tf_patch_free)

G_END_DECLS
