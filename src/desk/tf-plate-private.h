/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-plate-overlay.h"
#include "tf-plate.h"

G_BEGIN_DECLS

struct _TfPlate
{
  GtkWidget parent;
  TfSession *session;

  cairo_surface_t *picture;
  gboolean picture_stale;
  cairo_surface_t *overlay; /* larger than the widget by TF_PLATE_MARGIN on every side */
  gboolean overlay_stale;
  TfView overlay_view;
  const void *overlay_of
      [3]; /* draft, region, measured draft that it was made for; compared, never followed */

  gboolean pointer_in;
  gboolean by_keys; /* the pointer's place was set by the arrow keys: a cross shows it */
  double pointer_x, pointer_y;
  double mouse_x, mouse_y; /* where the mouse was last */
  char *readout;
  gboolean moved; /* the drag in hand went further than a click */
  double last_x, last_y;
  gboolean has_corner; /* a corner is chosen with the corner tool */
  gboolean holds_corner; /* and the drag in hand moves it */
  TfCornerPlace corner;
  guint held_key; /* the key of the brush that is held down */
  gint64 held_since;
  gboolean held_used;  /* the brush was used while it was held */
  gboolean held_again; /* the brush was in hand already: a tap puts it away */
  guint tick;
  GtkWidget *menu;    /* made when it is first opened */
  gboolean menu_open; /* the pointer counts as where it was opened */
  guint settle; /* the overlay is only stretched while zooming; made anew when that rests */
};

enum
{
  TF_PLATE_MARGIN = 160
};

/** tf_plate_draw_picture, tf_plate_draw_overlay: see to it that the surfaces are what the session
 * shows. */
void tf_plate_draw_picture (TfPlate *plate, int width, int height);
void tf_plate_draw_overlay (TfPlate *plate, int width, int height);
void tf_plate_draw_line (TfPlate *plate, cairo_t *cr, int width, int height);
/** tf_plate_has_preview: a corrected disk is being tried and can be shown in this look. */
gboolean tf_plate_has_preview (TfPlate *plate);
/** tf_plate_place_overlay: where the overlay's top left stands now, and how much it is stretched. */
void tf_plate_place_overlay (TfPlate *plate, double *dx, double *dy, double *stretch);
/** tf_plate_item_at: (nullable) borrowed: the hint or mark under a point */
TfRegionItem *tf_plate_item_at (TfPlate *plate, double x, double y);
char *tf_plate_dup_description (TfPlate *plate);
void tf_plate_add_tools (TfPlate *plate);
void tf_plate_class_add_menu (GtkWidgetClass *klass);
void tf_plate_add_menu (TfPlate *plate);
void tf_plate_place_menu (TfPlate *plate);
/* tf-plate-hand.c */
void tf_plate_draw_hand (TfPlate *plate, cairo_t *cr);
gboolean tf_plate_to_sun (TfPlate *plate, double x, double y, TfVertex *vertex);
/** tf_plate_handles_apart: least distance of two handles; tf_plate_hit_degrees: how near a press takes hold; deg */
double tf_plate_handles_apart (TfPlate *plate);
double tf_plate_hit_degrees (TfPlate *plate);
gboolean tf_plate_corner_at (TfPlate *plate, double x, double y, TfCornerPlace *place);
void tf_plate_step_corner (TfPlate *plate, int step);
void tf_plate_update_readout (TfPlate *plate);

G_END_DECLS
