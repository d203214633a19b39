/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLookItem: one close look of a passage, or a gap in its frames. Its picture comes later
 * ("changed"); what is drawn over it is there from the beginning. */

#include <gtk/gtk.h>

#include "tf-frame.h"
#include "tf-picture.h"
#include "tf-strip.h"

G_BEGIN_DECLS

typedef enum
{
  TF_LOOK_SIGHTING, /* a mark or hint */
  TF_LOOK_GHOST,    /* a frame without one: its outline is carried from the nearest sighting */
  TF_LOOK_GAP,      /* no frame for longer than usual */
} TfLookKind;

/** TfLookSpec: what a look is of; owned by the item. */
typedef struct
{
  TfLookKind kind;
  int point;    /* index of the sighting among the passage's; -1 */
  gint64 frame; /* local key; 0 for a gap */
  gint64 mark;  /* of a sighting */
  gboolean is_hint;
  TfTime time; /* of a gap: its middle */
  double gap_s;
  char *path;
  TfFrameSpec which;
  TfView view;
  GArray *edge; /* double: x, y as shares of the picture; NaN between rings */
  gboolean poles;
  double positive[2], negative[2]; /* shares of the picture */
} TfLookSpec;
void tf_look_spec_free (TfLookSpec *spec);

#define TF_TYPE_LOOK_ITEM (tf_look_item_get_type ())
G_DECLARE_FINAL_TYPE (TfLookItem, tf_look_item, TF, LOOK_ITEM, GObject)

/** tf_look_item_new: (transfer full) @spec */
TfLookItem *tf_look_item_new (TfLookSpec *spec);
const TfLookSpec *tf_look_item_get_spec (TfLookItem *item);
/** tf_look_item_get_look: what is to be drawn; borrowed */
const TfStripLook *tf_look_item_get_look (TfLookItem *item);
/** tf_look_item_copy_look: one that belongs to nobody else: for another thread. Its pixels are those of the picture, which never
 * change. tf_look_copy_clear: done with it. */
void tf_look_item_copy_look (TfLookItem *item, TfStripLook *copy);
void tf_look_copy_clear (TfStripLook *copy);
/** tf_look_item_take_picture: (transfer full) (nullable) @picture; @why: (nullable): there is none */
void tf_look_item_take_picture (TfLookItem *item, cairo_surface_t *picture, const char *why);
/** tf_look_item_share_picture: takes over that of @other when it is of the same frame, place and scale. */
gboolean tf_look_item_share_picture (TfLookItem *item, TfLookItem *other);
/** tf_look_item_want_picture: another one is to come; the old one stands until then */
void tf_look_item_want_picture (TfLookItem *item);
gboolean tf_look_item_is_waiting (TfLookItem *item);
/** tf_look_item_dup_words: what it is, for a screen reader and the tooltip. */
char *tf_look_item_dup_words (TfLookItem *item);

G_END_DECLS
