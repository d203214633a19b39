/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFollowed: the passage in hand on the Follow bench. Main thread only; belongs to the session.
 *
 * Signals: "passages-changed" (the list), "passage-changed" (its rows, looks, links), "moment-changed"
 * (the look in view, the brushed stretch, playing), "busy-changed".
 * A look's picture coming is told by the look itself. */

#include <gtk/gtk.h>

#include "tf-passage-content.h"
#include "tf-passage-item.h"
#include "tf-session.h"

G_BEGIN_DECLS

typedef enum
{
  TF_TAKE_FLUX,     /* greatest flux among mu >= 0.5 */
  TF_TAKE_MERIDIAN, /* nearest the central meridian */
  TF_TAKE_MEAN,     /* mean over |CMD| <= 45 deg: no one mark */
} TfTake;

#define TF_TYPE_FOLLOWED (tf_followed_get_type ())
G_DECLARE_FINAL_TYPE (TfFollowed, tf_followed, TF, FOLLOWED, GObject)

TfFollowed *tf_followed_new (TfSession *session);
/** tf_followed_set_active: the bench is in view: passages are made anew when they are due. */
void tf_followed_set_active (TfFollowed *self, gboolean active);
/** tf_followed_close: before the session goes. */
void tf_followed_close (TfFollowed *self);

/** tf_followed_get_passages: of TfPassageItem, those with marks first, then in order of time */
GListModel *tf_followed_get_passages (TfFollowed *self);
/** tf_followed_get_content: (nullable): borrowed until "passage-changed" */
const TfPassageContent *tf_followed_get_content (TfFollowed *self);
/** tf_followed_get_looks: of TfLookItem, in order of time */
GListModel *tf_followed_get_looks (TfFollowed *self);
/** tf_followed_choose: a passage by its local key. tf_followed_choose_sight: that of a mark or hint. */
void tf_followed_choose (TfFollowed *self, gint64 passage);
void tf_followed_choose_sight (TfFollowed *self, TfSight sight);
gint64 tf_followed_get_chosen (TfFollowed *self);
/** tf_followed_get_problem: (nullable): why there is nothing to show */
const char *tf_followed_get_problem (TfFollowed *self);
gboolean tf_followed_is_busy (TfFollowed *self);

/** tf_followed_get_beside: (nullable): another passage (of the region, or one that is offered as its return), to be seen side by side */
const TfPassageContent *tf_followed_get_beside (TfFollowed *self);
GListModel *tf_followed_get_beside_looks (TfFollowed *self);
void tf_followed_set_beside (TfFollowed *self, gint64 passage);

/* -- the moment */
/** tf_followed_get_now: index of the look in view, -1 */
int tf_followed_get_now (TfFollowed *self);
void tf_followed_set_now (TfFollowed *self, int look);
/** tf_followed_step: over gaps and, when @loop, from the end to the beginning; within the brushed stretch. */
void tf_followed_step (TfFollowed *self, int step, gboolean loop);
/** tf_followed_set_now_point: the look of that point of the series */
void tf_followed_set_now_point (TfFollowed *self, int point);
gboolean tf_followed_get_playing (TfFollowed *self);
void tf_followed_set_playing (TfFollowed *self, gboolean playing);
/** tf_followed_get_speed: looks a second */
double tf_followed_get_speed (TfFollowed *self);
void tf_followed_set_speed (TfFollowed *self, double speed);
/** tf_followed_set_blink: between the look in view and the one before it in time */
gboolean tf_followed_get_blink (TfFollowed *self);
void tf_followed_set_blink (TfFollowed *self, gboolean blink);
/** tf_followed_brush: a stretch of time; unknown: all */
void tf_followed_brush (TfFollowed *self, TfTime from, TfTime to);
void tf_followed_get_brush (TfFollowed *self, TfTime *from, TfTime *to);
TfTake tf_followed_get_take (TfFollowed *self);
void tf_followed_set_take (TfFollowed *self, TfTake take);
/** tf_followed_get_taken: index of the point that the rule takes (of the brushed stretch), -1 */
int tf_followed_get_taken (TfFollowed *self);

/* -- what people say; FALSE: not possible now */
/** tf_followed_can_cut: between the sighting in view and the one before it */
gboolean tf_followed_can_cut (TfFollowed *self);
gboolean tf_followed_cut (TfFollowed *self, const char *reason);
/** tf_followed_join: the nearest sightings of this passage and that one are of one region */
gboolean tf_followed_can_join (TfFollowed *self);
gboolean tf_followed_join (TfFollowed *self, gint64 other, const char *reason);
/** tf_followed_answer: an offered return: the same region (@same), or not */
gboolean tf_followed_answer (TfFollowed *self, const TfReturnOffer *offer, gboolean same,
                             const char *reason);

G_END_DECLS
