/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The members of TfFollowed, for the tf-followed-*.c files and the bench that draws it. */

#include "tf-followed.h"
#include "tf-lane.h"
#include "tf-pool.h"

G_BEGIN_DECLS

typedef enum
{
  TF_FOLLOWED_PASSAGES,
  TF_FOLLOWED_PASSAGE,
  TF_FOLLOWED_MOMENT,
  TF_FOLLOWED_BUSY,
  TF_N_FOLLOWED_SIGNALS
} TfFollowedSignal;

struct _TfFollowed
{
  GObject parent;
  TfSession *session; /* not owned */
  gboolean active;
  TfLane *lane;
  char *lane_path;
  GCancellable *cancellable;
  guint reading; /* jobs under way */
  guint serial;  /* of the newest question */
  gboolean taking; /* the lists are being filled: what is chosen in them is not a person's doing */
  gboolean stale; /* the ledger changed while out of view */

  gint64 want;       /* passage asked for; 0 */
  TfSight want_sight; /* or that of this; mark 0 */
  gint64 want_beside;

  GListStore *passages, *looks, *beside_looks;
  TfPassageContent *content, *beside;
  char *problem;
  char *evened; /* passage, floor and number of marks that were measured so, or cannot be */

  int now;
  gboolean playing, blink, blink_other;
  double speed;
  guint timer;
  TfTime from, to;
  TfSeries *stretch; /* of the rows between them; NULL: all of the passage's */
  TfTake take;

  GCancellable *drawing; /* pictures */
  gboolean rendering;
  TfPool *pool;
  double range;
  TfPalette palette;
  TfUnits units; /* that the figures were last told in */
};

void tf_followed_emit (TfFollowed *self, TfFollowedSignal signal);
void tf_followed_connect (TfFollowed *self);
/** tf_followed_get_shown: the look to be drawn large: that in view, or while blinking the one before */
int tf_followed_get_shown (TfFollowed *self);
gboolean tf_followed_in_brush (TfFollowed *self, TfTime time);
/** tf_followed_derive: the series of the brushed stretch. tf_followed_get_derived: (nullable): of it, else of the passage. */
void tf_followed_derive (TfFollowed *self);
const TfDerived *tf_followed_get_derived (TfFollowed *self);
/** tf_followed_render: pictures that are not there yet, one frame after the other, those near the
 * look in view first. tf_followed_forget_pictures: the range or palette is another. */
void tf_followed_render (TfFollowed *self);
void tf_followed_forget_pictures (TfFollowed *self);

G_END_DECLS
