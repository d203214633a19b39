/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-band-hand.h"
#include "tf-session-laws.h"
#include "tf-wings-view.h"
#include "tf-wings.h"

G_BEGIN_DECLS

struct _TfWingsView
{
  GtkWidget parent;
  TfSession *session;
  TfWings wings;
  TfDivides *divides; /* those of wings: kept alive, the session may change its own at any time */
  gboolean fitted, widened; /* to all dots; or was, before a minimum beyond them was taken in hand */
  cairo_surface_t *surface; /* the ground as it was drawn last */
  gboolean stale;
  double pointer_x;
  const char *cursor; /* static: of the pointer now; NULL: the usual one */
  double drag_from, drag_lat; /* where a drag began: year, latitude; NaN: none in hand */
  gboolean moves_divide;      /* the drag has a divide; drag_lat and drag_from are where it was seen last */
  enum
  {
    WAY_OPEN,
    IN_TIME,
    IN_LATITUDE
  } way;              /* of that drag: one at a time */
  TfBandHand band; /* chosen by keys */
  double divide_side; /* 1: a drag upwards moves it away from the equator, or widens its band */
};

TfArea tf_wings_view_area (TfWingsView *self);
TfChartStyle tf_wings_view_style (TfWingsView *self);
/** tf_wings_view_redraw: all of it. tf_wings_view_redraw_over: what lies over the dots. */
void tf_wings_view_redraw (TfWingsView *self);
void tf_wings_view_redraw_over (TfWingsView *self);
/** tf_wings_view_show_stretch: what is picked of time and latitude. */
void tf_wings_view_show_stretch (TfWingsView *self);
/** tf_wings_view_add_hand: pointer, wheel and keys (tf-wings-hand.c). */
void tf_wings_view_add_hand (TfWingsView *self);

G_END_DECLS
