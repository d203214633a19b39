/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The divides on the wings: chosen, taken in hand, moved, kept. While one is in hand nothing is
 * written; the numbers follow it, the dots are plain. */

#include "tf-session-laws-private.h"

#include <math.h>

#include "tf-constants.h"

#define MONTH_S (365.25 * TF_DAY_S / 12)

static const double lat_max_deg = 60, wing_months = 12;

const TfDivideHold *
tf_session_get_divide (TfSession *self)
{
  return &self->laws->hold;
}

static TfDivides *
dup_divides (TfSession *self)
{
  const TfStudy *study = self->laws->study;
  return study->divides != NULL ? tf_divides_with_params (study->divides, &study->divide)
                                : tf_divides_new (&study->divide);
}

/* The three handles of a divide as it stands. */
static void
read_handles (TfSession *self, TfDivideHold *hold)
{
  const TfDivideParams *params = &self->laws->study->divide;
  g_autoptr (TfDivides) divides = dup_divides (self);
  const double months[TF_DIVIDE_HANDLES] = { -params->before_months, 0, params->after_months };
  TfTime minimum = tf_cycle_minimum (hold->cycle);
  for (int k = 0; k < TF_DIVIDE_HANDLES; k++)
    {
      /* the ends themselves may lie a breath outside */
      hold->times[k] = tf_time_add (minimum, 0.9999 * months[k] * MONTH_S);
      hold->lats[k]
          = tf_divides_latitude (divides, hold->cycle, hold->hemisphere, hold->times[k]);
    }
}

/* -- judging the dots anew, where the divide reaches -------------------------------------------- */

static guint
first_dot (const GArray *dots, double year)
{
  guint low = 0, high = dots->len;
  while (low < high)
    {
      guint middle = low + (high - low) / 2;
      if (g_array_index (dots, TfWingsDot, middle).year < year)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

static void
rejudge_dots (TfSession *self, GArray *dots, double from, double to, int hemisphere)
{
  for (guint k = first_dot (dots, from); k < dots->len; k++)
    {
      TfWingsDot *dot = &g_array_index (dots, TfWingsDot, k);
      if (dot->year > to)
        return;
      if (hemisphere * dot->lat_deg < 0)
        continue;
      const TfPoint *point = &g_array_index (self->points, TfPoint, (guint)dot->id - 1);
      dot->verdict = (gint8)tf_judge_point (self->judge, point).kind;
    }
}

/* The judge and the dots under @divides; only the dots in reach of the hold's divide change. */
static void
judge_by (TfSession *self, const TfDivideHold *hold)
{
  g_autoptr (TfStudy) study = tf_study_copy (self->laws->study);
  if (self->laws->moved != NULL)
    {
      g_clear_pointer (&study->divides, tf_divides_unref);
      study->divides = tf_divides_ref (self->laws->moved);
    }
  tf_judge_unref (self->judge);
  self->judge = tf_judge_new_for (study);
  double minimum = tf_time_year (tf_cycle_minimum (hold->cycle));
  double from = minimum - (study->divide.before_months + wing_months) / 12,
         to = minimum + (study->divide.after_months + wing_months) / 12;
  rejudge_dots (self, self->all_dots, from, to, hold->hemisphere);
  rejudge_dots (self, self->mark_dots, from, to, hold->hemisphere);
}

void
tf_session_judge_divide (TfSession *self)
{
  const TfSessionLaws *laws = self->laws;
  if (laws->hold.cycle != 0 && (laws->keeping > 0 || laws->hold.in_hand))
    judge_by (self, &laws->hold);
}

/* -- choosing -------------------------------------------------------------------------------- */

void
tf_session_choose_divide (TfSession *self, int cycle, int hemisphere, int handle)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfSessionLaws *laws = self->laws;
  tf_session_put_back_divide (self);
  laws->hold = (TfDivideHold){ .cycle = cycle,
                               .hemisphere = hemisphere < 0 ? -1 : 1,
                               .handle = CLAMP (handle, TF_DIVIDE_WHOLE, TF_DIVIDE_HANDLES - 1) };
  if (cycle != 0)
    read_handles (self, &laws->hold);
  if (cycle != 0 && !isfinite (laws->hold.lats[1]))
    laws->hold = (TfDivideHold){ 0 };
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

/* All divides in order: 2 N, 2 S, 3 N ... */
static int
rank_of (int cycle, int hemisphere)
{
  return 2 * cycle + (hemisphere < 0);
}

void
tf_session_step_divide (TfSession *self, int step, double from_year, double to_year)
{
  g_return_if_fail (TF_IS_SESSION (self));
  const TfDivideHold *hold = &self->laws->hold;
  int first = 0, last = 0, nearest = 0;
  double best = INFINITY, middle = (from_year + to_year) / 2;
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    {
      double year = tf_time_year (tf_cycle_minimum (c->number));
      if (c->number < 2)
        continue;
      if (fabs (year - middle) < best)
        {
          best = fabs (year - middle);
          nearest = c->number;
        }
      if (year < from_year - 2 || year > to_year + 2)
        continue;
      first = first == 0 ? c->number : first;
      last = c->number;
    }
  if (first == 0)
    first = last = nearest;
  int low = rank_of (first, 1), high = rank_of (last, -1);
  int at = hold->cycle == 0 ? (step > 0 ? low : high) : rank_of (hold->cycle, hold->hemisphere) + step;
  at = at > high || at < low ? (step > 0 ? low : high) : at;
  tf_session_choose_divide (self, at / 2, at % 2 ? -1 : 1,
                            hold->cycle == 0 ? TF_DIVIDE_WHOLE : hold->handle);
}

void
tf_session_turn_divide (TfSession *self, int handle)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->laws->hold.handle = CLAMP (handle, TF_DIVIDE_WHOLE, TF_DIVIDE_HANDLES - 1);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

/* -- moving ---------------------------------------------------------------------------------- */

gboolean
tf_session_can_move_divide (TfSession *self)
{
  return self->laws->hold.cycle != 0 && self->laws->shown && tf_session_is_writable (self);
}

void
tf_session_move_divide (TfSession *self, double degrees)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfSessionLaws *laws = self->laws;
  TfDivideHold *hold = &laws->hold;
  if (!tf_session_can_move_divide (self) || !isfinite (degrees))
    return;
  if (!hold->in_hand)
    laws->was_shown = FALSE;
  hold->in_hand = TRUE;
  laws->was_shown |= laws->show_polarity;
  for (int k = 0; k < TF_DIVIDE_HANDLES; k++)
    if (hold->handle == TF_DIVIDE_WHOLE || hold->handle == k)
      hold->lats[k] = CLAMP (hold->lats[k] + degrees, 0, lat_max_deg);
  g_autoptr (TfDivides) before = dup_divides (self);
  g_clear_pointer (&laws->moved, tf_divides_unref);
  laws->moved = tf_divides_with (before, hold->cycle, hold->hemisphere, hold->times, hold->lats,
                                 TF_DIVIDE_HANDLES);
  if (laws->show_polarity)
    judge_by (self, hold);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

static void
push_deed (TfSession *self, guint n)
{
  TfSessionLaws *laws = self->laws;
  TfDeed *deed = tf_deed_new (TF_DEED_DIVIDE, self->person);
  deed->study = g_strdup (laws->study->name);
  deed->divide = g_new0 (TfMovedDivide, 1);
  deed->divide->cycle = laws->hold.cycle;
  deed->divide->hemisphere = laws->hold.hemisphere;
  deed->divide->n = n;
  deed->divide->times = g_memdup2 (laws->hold.times, sizeof laws->hold.times);
  deed->divide->lats = g_memdup2 (laws->hold.lats, sizeof laws->hold.lats);
  deed->divide->shown = laws->was_shown;
  laws->keeping++;
  tf_session_push_deed (self, deed);
}

/* What was moved is the study's from now on; the ledger follows. */
static void
settle (TfSession *self, TfDivides *divides)
{
  TfSessionLaws *laws = self->laws;
  g_clear_pointer (&laws->study->divides, tf_divides_unref);
  laws->study->divides = divides;
  g_clear_pointer (&laws->moved, tf_divides_unref);
  laws->hold.in_hand = FALSE;
  judge_by (self, &laws->hold);
  read_handles (self, &laws->hold);
  tf_session_judge_choice (self);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

gboolean
tf_session_keep_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  if (!laws->hold.in_hand || laws->moved == NULL)
    return FALSE;
  if (self->person == NULL)
    {
      tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
      return FALSE;
    }
  push_deed (self, TF_DIVIDE_HANDLES);
  settle (self, g_steal_pointer (&laws->moved));
  return TRUE;
}

gboolean
tf_session_put_back_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  if (!laws->hold.in_hand)
    return FALSE;
  laws->hold.in_hand = FALSE;
  g_clear_pointer (&laws->moved, tf_divides_unref);
  judge_by (self, &laws->hold);
  read_handles (self, &laws->hold);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_LAWS);
  return TRUE;
}

gboolean
tf_session_compute_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  const TfDivideHold *hold = &laws->hold;
  if (!tf_session_can_move_divide (self))
    return FALSE;
  tf_session_put_back_divide (self);
  g_autoptr (TfDivides) now = dup_divides (self);
  if (!tf_divides_is_moved (now, hold->cycle, hold->hemisphere))
    return FALSE;
  if (self->person == NULL)
    {
      tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
      return FALSE;
    }
  laws->was_shown = FALSE;
  push_deed (self, 0);
  settle (self, tf_divides_with (now, hold->cycle, hold->hemisphere, NULL, NULL, 0));
  return TRUE;
}

void
tf_session_divide_saved (TfSession *self)
{
  self->laws->keeping -= self->laws->keeping > 0;
}

gboolean
tf_session_get_show_polarity (TfSession *self)
{
  return self->laws->show_polarity;
}

void
tf_session_set_show_polarity (TfSession *self, gboolean show)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfSessionLaws *laws = self->laws;
  laws->show_polarity = show;
  if (laws->hold.in_hand && show)
    {
      laws->was_shown = TRUE;
      judge_by (self, &laws->hold);
    }
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

gboolean
tf_session_is_plain (TfSession *self)
{
  return self->laws->hold.in_hand && !self->laws->show_polarity;
}
