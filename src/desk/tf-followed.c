/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-followed-private.h"

#include <math.h>

G_DEFINE_FINAL_TYPE (TfFollowed, tf_followed, G_TYPE_OBJECT)

static const char *const signal_names[TF_N_FOLLOWED_SIGNALS]
    = { "passages-changed", "passage-changed", "moment-changed", "busy-changed" };
static guint signal_ids[TF_N_FOLLOWED_SIGNALS];
static const double fastest = 30, slowest = 0.5;

void
tf_followed_emit (TfFollowed *self, TfFollowedSignal signal)
{
  g_signal_emit (self, signal_ids[signal], 0);
}

GListModel *
tf_followed_get_passages (TfFollowed *self)
{
  return G_LIST_MODEL (self->passages);
}

GListModel *
tf_followed_get_looks (TfFollowed *self)
{
  return G_LIST_MODEL (self->looks);
}

GListModel *
tf_followed_get_beside_looks (TfFollowed *self)
{
  return G_LIST_MODEL (self->beside_looks);
}

const TfPassageContent *
tf_followed_get_content (TfFollowed *self)
{
  return self->content;
}

const TfPassageContent *
tf_followed_get_beside (TfFollowed *self)
{
  return self->beside;
}

gint64
tf_followed_get_chosen (TfFollowed *self)
{
  return self->content != NULL ? self->content->passage->id : 0;
}

const char *
tf_followed_get_problem (TfFollowed *self)
{
  return self->problem;
}

gboolean
tf_followed_is_busy (TfFollowed *self)
{
  return self->reading > 0;
}

/* -- the moment ------------------------------------------------------------------------------ */

static const TfLookSpec *
spec_at (TfFollowed *self, int look)
{
  if (look < 0 || look >= (int)g_list_model_get_n_items (G_LIST_MODEL (self->looks)))
    return NULL;
  g_autoptr (TfLookItem) item = g_list_model_get_item (G_LIST_MODEL (self->looks), (guint)look);
  return tf_look_item_get_spec (item); /* the list keeps it */
}

int
tf_followed_get_now (TfFollowed *self)
{
  return self->now;
}

void
tf_followed_set_now (TfFollowed *self, int look)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  if (spec_at (self, look) == NULL || look == self->now)
    return;
  self->now = look;
  self->want_sight = (TfSight){ 0 }; /* a step is newer than what the last reading was asked to find */
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
}

static gboolean
can_show (TfFollowed *self, int look)
{
  const TfLookSpec *spec = spec_at (self, look);
  if (spec == NULL || spec->kind == TF_LOOK_GAP)
    return FALSE;
  return !tf_time_is_known (self->from)
         || (spec->time.s >= self->from.s && spec->time.s <= self->to.s);
}

void
tf_followed_step (TfFollowed *self, int step, gboolean loop)
{
  g_return_if_fail (TF_IS_FOLLOWED (self) && (step == 1 || step == -1));
  int n = (int)g_list_model_get_n_items (G_LIST_MODEL (self->looks));
  for (int k = 1; k <= n; k++)
    {
      int look = self->now + step * k;
      if (look < 0 || look >= n)
        {
          if (!loop)
            return;
          look = (look % n + n) % n;
        }
      if (can_show (self, look))
        {
          tf_followed_set_now (self, look);
          return;
        }
    }
}

void
tf_followed_set_now_point (TfFollowed *self, int point)
{
  int n = (int)g_list_model_get_n_items (G_LIST_MODEL (self->looks));
  for (int look = 0; look < n; look++)
    if (spec_at (self, look)->point == point && point >= 0)
      tf_followed_set_now (self, look);
}

static gboolean
play_on (gpointer data)
{
  tf_followed_step (data, 1, TRUE);
  return G_SOURCE_CONTINUE;
}

static gboolean
blink_on (gpointer data)
{
  TfFollowed *self = data;
  self->blink_other = !self->blink_other;
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
  return G_SOURCE_CONTINUE;
}

static void
run_timer (TfFollowed *self)
{
  guint step = (guint)lround (1000 / self->speed);
  g_clear_handle_id (&self->timer, g_source_remove);
  if (self->playing)
    self->timer = g_timeout_add (step, play_on, self);
  else if (self->blink)
    self->timer = g_timeout_add (step, blink_on, self);
  if (!self->blink)
    self->blink_other = FALSE;
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
}

gboolean
tf_followed_get_playing (TfFollowed *self)
{
  return self->playing;
}

void
tf_followed_set_playing (TfFollowed *self, gboolean playing)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  self->playing = playing && self->content != NULL;
  self->blink = self->blink && !self->playing;
  run_timer (self);
}

double
tf_followed_get_speed (TfFollowed *self)
{
  return self->speed;
}

void
tf_followed_set_speed (TfFollowed *self, double speed)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  self->speed = CLAMP (isfinite (speed) ? speed : 4, slowest, fastest);
  run_timer (self);
}

gboolean
tf_followed_get_blink (TfFollowed *self)
{
  return self->blink;
}

void
tf_followed_set_blink (TfFollowed *self, gboolean blink)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  self->blink = blink && self->content != NULL;
  self->playing = self->playing && !self->blink;
  run_timer (self);
}

int
tf_followed_get_shown (TfFollowed *self)
{
  if (!self->blink_other)
    return self->now;
  for (int look = self->now - 1; look >= 0; look--)
    if (spec_at (self, look)->kind != TF_LOOK_GAP)
      return look;
  return self->now;
}

/* -- the stretch and what the rule takes of it ------------------------------------------------ */

void
tf_followed_brush (TfFollowed *self, TfTime from, TfTime to)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  gboolean all = !tf_time_is_known (from) || !tf_time_is_known (to);
  self->from = all ? TF_TIME_UNKNOWN : (TfTime){ fmin (from.s, to.s) };
  self->to = all ? TF_TIME_UNKNOWN : (TfTime){ fmax (from.s, to.s) };
  tf_followed_derive (self);
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
}

void
tf_followed_get_brush (TfFollowed *self, TfTime *from, TfTime *to)
{
  *from = self->from;
  *to = self->to;
}

TfTake
tf_followed_get_take (TfFollowed *self)
{
  return self->take;
}

void
tf_followed_set_take (TfFollowed *self, TfTake take)
{
  g_return_if_fail (TF_IS_FOLLOWED (self));
  self->take = take;
  tf_followed_emit (self, TF_FOLLOWED_MOMENT);
}

gboolean
tf_followed_in_brush (TfFollowed *self, TfTime time)
{
  return !tf_time_is_known (self->from) || (time.s >= self->from.s && time.s <= self->to.s);
}

/* The rows stay the content's. */
void
tf_followed_derive (TfFollowed *self)
{
  const TfPassageContent *c = self->content;
  g_clear_pointer (&self->stretch, tf_series_free);
  if (c == NULL || !tf_time_is_known (self->from))
    return;
  GPtrArray *rows = g_ptr_array_new ();
  for (guint k = 0; k < c->rows->len; k++)
    if (tf_followed_in_brush (self, ((const TfRow *)g_ptr_array_index (c->rows, k))->measure.time))
      g_ptr_array_add (rows, g_ptr_array_index (c->rows, k));
  self->stretch = tf_series_new (rows, c->study, c->series->floor_gauss, &c->series->params);
}

const TfDerived *
tf_followed_get_derived (TfFollowed *self)
{
  const TfSeries *series = self->stretch != NULL    ? self->stretch
                           : self->content != NULL ? self->content->series
                                                   : NULL;
  return series != NULL ? &series->derived : NULL;
}

/* The sampling rule's mark among those that stand for their frames. */
int
tf_followed_get_taken (TfFollowed *self)
{
  int best = -1;
  double most = NAN;
  if (self->content == NULL || self->take == TF_TAKE_MEAN)
    return -1;
  const GArray *points = self->content->series->points;
  for (guint k = 0; k < points->len; k++)
    {
      const TfSeriesPoint *p = &g_array_index (points, TfSeriesPoint, k);
      double value = self->take == TF_TAKE_FLUX ? p->flux_mx : -fabs (p->cmd_deg);
      guint barred = TF_POINT_SECOND | (self->take == TF_TAKE_FLUX ? TF_POINT_LIMB : 0);
      if ((p->flags & barred) != 0 || !tf_followed_in_brush (self, p->time) || !isfinite (value)
          || (best >= 0 && value <= most))
        continue;
      best = (int)k;
      most = value;
    }
  return best;
}

/* -- what people say ------------------------------------------------------------------------- */

static TfSight
sight_of (const TfPassageContent *content, int point)
{
  const TfRow *row = g_ptr_array_index (content->rows, point);
  return (TfSight){ row->mark, row->is_hint };
}

static int
point_now (TfFollowed *self)
{
  const TfLookSpec *spec = spec_at (self, self->now);
  return spec != NULL ? spec->point : -1;
}

gboolean
tf_followed_can_cut (TfFollowed *self)
{
  return tf_session_is_writable (self->session) && self->content != NULL && point_now (self) > 0;
}

gboolean
tf_followed_cut (TfFollowed *self, const char *reason)
{
  g_return_val_if_fail (TF_IS_FOLLOWED (self), FALSE);
  int point = point_now (self);
  return tf_followed_can_cut (self)
         && tf_session_tie (self->session, sight_of (self->content, point - 1),
                            sight_of (self->content, point), TRUE, reason);
}

gboolean
tf_followed_can_join (TfFollowed *self)
{
  return tf_session_is_writable (self->session) && self->content != NULL
         && g_list_model_get_n_items (G_LIST_MODEL (self->passages)) > 1;
}

static const TfPassageRow *
passage_row (TfFollowed *self, gint64 id)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->passages));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfPassageItem) item = g_list_model_get_item (G_LIST_MODEL (self->passages), k);
      if (tf_passage_item_get_row (item)->id == id)
        return tf_passage_item_get_row (item); /* the list keeps it */
    }
  return NULL;
}

/* The two sightings that are nearest in time, ends of both passages. */
gboolean
tf_followed_join (TfFollowed *self, gint64 other, const char *reason)
{
  g_return_val_if_fail (TF_IS_FOLLOWED (self), FALSE);
  const TfPassageRow *that = passage_row (self, other);
  if (!tf_followed_can_join (self) || that == NULL || other == self->content->passage->id)
    return FALSE;
  const TfPassageRow *this = self->content->passage;
  gboolean after = that->first_time.s >= this->first_time.s;
  TfSight a = after ? this->last : that->last, b = after ? that->first : this->first;
  return tf_session_tie (self->session, a, b, FALSE, reason);
}

gboolean
tf_followed_answer (TfFollowed *self, const TfReturnOffer *offer, gboolean same, const char *reason)
{
  g_return_val_if_fail (TF_IS_FOLLOWED (self) && offer != NULL, FALSE);
  return tf_session_is_writable (self->session)
         && tf_session_tie (self->session, offer->last, offer->first, !same, reason);
}

/* -- the object ------------------------------------------------------------------------------ */

TfFollowed *
tf_followed_new (TfSession *session)
{
  TfFollowed *self = g_object_new (TF_TYPE_FOLLOWED, NULL);
  self->session = session; /* outlives it: tf_followed_close */
  tf_followed_connect (self);
  return self;
}

static void
dispose (GObject *object)
{
  TfFollowed *self = TF_FOLLOWED (object);
  tf_followed_close (self);
  g_clear_object (&self->passages);
  g_clear_object (&self->looks);
  g_clear_object (&self->beside_looks);
  g_clear_pointer (&self->stretch, tf_series_free);
  g_clear_pointer (&self->content, tf_passage_content_unref);
  g_clear_pointer (&self->beside, tf_passage_content_unref);
  g_clear_pointer (&self->problem, g_free);
  g_clear_pointer (&self->evened, g_free);
  G_OBJECT_CLASS (tf_followed_parent_class)->dispose (object);
}

static void
tf_followed_class_init (TfFollowedClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  for (guint k = 0; k < TF_N_FOLLOWED_SIGNALS; k++)
    signal_ids[k] = g_signal_new (signal_names[k], TF_TYPE_FOLLOWED, G_SIGNAL_RUN_LAST, 0, NULL,
                                  NULL, NULL, G_TYPE_NONE, 0);
}

static void
tf_followed_init (TfFollowed *self)
{
  self->passages = g_list_store_new (TF_TYPE_PASSAGE_ITEM);
  self->looks = g_list_store_new (TF_TYPE_LOOK_ITEM);
  self->beside_looks = g_list_store_new (TF_TYPE_LOOK_ITEM);
  self->now = -1;
  self->speed = 4;
  self->from = self->to = TF_TIME_UNKNOWN;
}
