/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPlateOverlay: all that lies over the picture at one moment, holding what it names, so that it
 * can be drawn in another thread or later. */

#include "tf-overlay.h"
#include "tf-session.h"

G_BEGIN_DECLS

typedef struct
{
  TfView view;
  TfGeometry geometry;
  double shift;   /* of the area against the view */
  GArray *items;  /* TfOverlayItem, outlines and labels owned */
  GArray *lines;  /* TfOverlayLine, points owned */
  TfOverlay overlay;
} TfPlateOverlay;

/** tf_plate_overlay_init: nothing but the projection. It must not be moved in memory after this. */
void tf_plate_overlay_init (TfPlateOverlay *over, const TfView *view, const TfGeometry *geometry,
                            double shift);
/** tf_plate_overlay_collect: the regions in the order of the session's list, then the draft, then
 * ghosts; lines; as switched on. A frame must be open. */
void tf_plate_overlay_collect (TfPlateOverlay *over, TfSession *session, const TfView *view,
                               double shift);
/** tf_plate_overlay_collect_still: the same but for the draft while a stroke changes it with every move, which
 * tf_plate_overlay_collect_stroke has alone. */
void tf_plate_overlay_collect_still (TfPlateOverlay *over, TfSession *session, const TfView *view, double shift);
void tf_plate_overlay_collect_stroke (TfPlateOverlay *over, TfSession *session);
void tf_plate_overlay_set_poles (TfOverlayItem *item, const TfMeasure *measure);
void tf_plate_overlay_clear (TfPlateOverlay *over);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfPlateOverlay, tf_plate_overlay_clear)

G_END_DECLS
