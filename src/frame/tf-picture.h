/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Pictures of a frame at the size of a view: the field sampled from the pyramid (bilinear;
 * nearest above 2:1) and turned into 32-bit pixels (native-endian 0xAARRGGBB, as cairo's
 * ARGB32). No widget, no cairo.
 */

#include <glib.h>

#include "tf-frame.h"

G_BEGIN_DECLS

typedef enum
{
  TF_PALETTE_GREY,         /* white positive: the trade's custom */
  TF_PALETTE_AMBER_INDIGO, /* positive amber, negative indigo, zero by the ground */
} TfPalette;

typedef enum
{
  TF_LOOK_DISK,     /* as observed, or solar north up */
  TF_LOOK_UNROLLED, /* Carrington longitude (west right) x sine latitude */
  TF_LOOK_CLOSE,    /* one region, un-projected, local north up */
} TfLook;

/** TfView: how view pixels map to the Sun. View pixels: 0-based, y down, centres at .5.
 * DISK: frame pixel = centre + R(turn) * (view - middle) / zoom, image y up; zoom in view
 * pixels a frame pixel.
 * UNROLLED: longitude = centre_lon + (vx - middle) / zoom; sin lat = centre_sin - (vy - middle)
 * / (zoom * 180 / pi); zoom in view pixels a degree.
 * CLOSE: azimuthal equal-area about (centre_lon, centre_lat), zoom in view pixels a degree of
 * arc. */
typedef struct
{
  TfLook look;
  double width, height; /* of the view, pixels */
  double zoom;
  double centre_x, centre_y;             /* DISK: FITS pixel in the middle */
  double centre_lon_deg, centre_lat_deg; /* UNROLLED, CLOSE: Carrington */
  double turn_deg; /* DISK: turned clockwise by this, north up; 0: as stored */
} TfView;

/** tf_view_fit: shows the whole disk (or map) with a margin. @north_up: DISK. */
void tf_view_fit (TfView *view, const TfGeometry *geometry, gboolean north_up);
/** tf_view_zoom: by @factor, keeping the Sun under view point (vx, vy) fixed. */
void tf_view_zoom (TfView *view, const TfGeometry *geometry, double factor, double vx, double vy);
void tf_view_pan (TfView *view, const TfGeometry *geometry, double dx, double dy);
/** tf_view_to_pixel: view point -> FITS pixel (also outside the frame); FALSE where there is
 * none. */
gboolean tf_view_to_pixel (const TfView *view, const TfGeometry *geometry, double vx, double vy,
                           double *x, double *y);
gboolean tf_view_from_pixel (const TfView *view, const TfGeometry *geometry, double x, double y,
                             double *vx, double *vy);
/** tf_view_to_sun: view point -> place; FALSE off the Sun. */
gboolean tf_view_to_sun (const TfView *view, const TfGeometry *geometry, double vx, double vy,
                         TfPlace *place);
/** tf_view_from_sun: Carrington place -> view point; FALSE when behind the limb. */
gboolean tf_view_from_sun (const TfView *view, const TfGeometry *geometry, double lon_deg,
                           double lat_deg, double *vx, double *vy);

typedef struct
{
  double range_gauss; /* +- G at the palette's ends */
  TfPalette palette;
  guint32 ground; /* colour where there is no value, ARGB */
  gboolean dark;  /* amber-indigo: zero is dark or light */
} TfPaint;

/** tf_paint_colour: of a field of @share (-1 to 1) of the range, ARGB. */
guint32 tf_paint_colour (const TfPaint *paint, double share);
/** tf_picture_render: @out: @stride pixels a row, at least view->width; rounded view size.
 * Threads by @work. */
gboolean tf_picture_render (const TfFrame *frame, const TfView *view, const TfPaint *paint,
                            guint32 *out, guint stride, const TfWork *work);

G_END_DECLS
