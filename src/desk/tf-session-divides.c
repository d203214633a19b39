/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The divides on the wings: chosen, taken in hand, moved, kept. While one is in hand nothing is
 * written; the numbers follow it, the dots are plain. */

#include "tf-session-laws-private.h"

#include <math.h>

#include "tf-constants.h"

#define MONTH_S (365.25 * TF_DAY_S / 12)

static const double lat_max_deg = 60, wing_months = 12, mean_cycle_years = 11.0;
static const double band_max_deg = 20, provisional_min = 2026, provisional_max = 2100;
enum
{
  LEAST_REACH = 2, /* months; less could not be taken in hand again */
  MOST_BEFORE = 48,
  MOST_AFTER = 36
};

const TfDivideHold *
tf_session_get_divide (TfSession *self)
{
  return &self->laws->hold;
}

static TfDivides *
dup_divides (TfSession *self, const TfDivideParams *params)
{
  const TfStudy *study = self->laws->study;
  return study->divides != NULL ? tf_divides_with_params (study->divides, params)
                                : tf_divides_new (params);
}

static gboolean
is_same (double a, double b)
{
  return (isnan (a) && isnan (b)) || (a >= b && a <= b);
}

gboolean
tf_session_is_same_reach (const TfDivideParams *a, const TfDivideParams *b)
{
  return a->before_months == b->before_months && a->after_months == b->after_months
         && is_same (a->band_deg, b->band_deg) && is_same (a->provisional_year, b->provisional_year);
}

/* Whether what is the study's was moved. */
static gboolean
is_study_moved (TfSession *self)
{
  return self->laws->hold.in_hand
         && !tf_session_is_same_reach (&self->laws->study->divide, &self->laws->hold.params);
}

static void
place_handles (TfDivideHold *hold, const TfDivides *divides)
{
  const double months[TF_DIVIDE_HANDLES]
      = { -hold->params.before_months, 0, hold->params.after_months };
  TfTime minimum = tf_divides_get_minimum (divides, hold->cycle);
  for (int k = 0; k < TF_DIVIDE_HANDLES; k++)
    {
      /* the ends themselves may lie a breath outside */
      hold->times[k] = tf_time_add (minimum, 0.9999 * months[k] * MONTH_S);
      if (!hold->drawn)
        hold->lats[k] = tf_divides_latitude (divides, hold->cycle, hold->hemisphere, hold->times[k]);
    }
}

/* The three handles of a divide as it stands in the study. */
static void
read_handles (TfSession *self, TfDivideHold *hold)
{
  g_autoptr (TfDivides) divides = dup_divides (self, &self->laws->study->divide);
  hold->params = self->laws->study->divide;
  hold->drawn = FALSE;
  if (hold->cycle > tf_divides_get_last (divides))
    *hold = (TfDivideHold){ 0 };
  else
    place_handles (hold, divides);
}

/* All divides with the one in hand. */
static void
make_moved (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  TfDivideHold *hold = &laws->hold;
  g_clear_pointer (&laws->moved, tf_divides_unref);
  laws->moved = dup_divides (self, &hold->params);
  place_handles (hold, laws->moved);
  if (!hold->drawn)
    return;
  TfDivides *drawn = tf_divides_with (laws->moved, hold->cycle, hold->hemisphere, hold->times,
                                      hold->lats, TF_DIVIDE_HANDLES);
  tf_divides_unref (laws->moved);
  laws->moved = drawn;
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

/* The judge and the dots as the divides stand now; only the dots in reach of the hold's divide change,
 * of both hemispheres when what is the study's was moved. */
static void
judge_by (TfSession *self, const TfDivideHold *hold)
{
  g_autoptr (TfStudy) study = tf_study_copy (self->laws->study);
  if (self->laws->moved != NULL)
    {
      g_clear_pointer (&study->divides, tf_divides_unref);
      study->divides = tf_divides_ref (self->laws->moved);
      study->divide = hold->params;
    }
  tf_judge_unref (self->judge);
  self->judge = tf_judge_new_for (study);
  double minimum = tf_time_year (hold->times[TF_WINGS_MINIMUM]);
  const TfDivideParams *was = &self->laws->study->divide, *now = &hold->params;
  double from = minimum - (MAX (was->before_months, now->before_months) + wing_months) / 12,
         to = minimum + (MAX (was->after_months, now->after_months) + wing_months) / 12;
  gboolean both = is_study_moved (self);
  for (int side = 1; side >= -1; side -= 2)
    if (both || side == hold->hemisphere)
      {
        rejudge_dots (self, self->all_dots, from, to, side);
        rejudge_dots (self, self->mark_dots, from, to, side);
      }
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
                               .handle = CLAMP (handle, TF_WINGS_WHOLE, TF_WINGS_BAND) };
  if (cycle != 0)
    read_handles (self, &laws->hold);
  if (laws->hold.cycle != 0 && !isfinite (laws->hold.lats[1]))
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
  g_autoptr (TfDivides) divides = dup_divides (self, &self->laws->study->divide);
  for (int number = 2; number <= tf_divides_get_last (divides); number++)
    {
      double year = tf_time_year (tf_divides_get_minimum (divides, number));
      if (fabs (year - middle) < best)
        {
          best = fabs (year - middle);
          nearest = number;
        }
      if (year < from_year - 2 || year > to_year + 2)
        continue;
      first = first == 0 ? number : first;
      last = number;
    }
  if (first == 0)
    first = last = nearest;
  int low = rank_of (first, 1), high = rank_of (last, -1);
  int at = hold->cycle == 0 ? (step > 0 ? low : high) : rank_of (hold->cycle, hold->hemisphere) + step;
  at = at > high || at < low ? (step > 0 ? low : high) : at;
  tf_session_choose_divide (self, at / 2, at % 2 ? -1 : 1,
                            hold->cycle == 0 ? TF_WINGS_WHOLE : hold->handle);
}

void
tf_session_turn_divide (TfSession *self, int handle)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->laws->hold.handle = CLAMP (handle, TF_WINGS_WHOLE, TF_WINGS_BAND);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

/* -- moving ---------------------------------------------------------------------------------- */

gboolean
tf_session_can_move_divide (TfSession *self)
{
  return self->laws->hold.cycle != 0 && self->laws->shown && tf_session_is_writable (self);
}

static void
begin_hold (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  if (!laws->hold.in_hand)
    laws->was_shown = FALSE;
  laws->hold.in_hand = TRUE;
  laws->was_shown |= laws->show_polarity;
}

static void
follow_hold (TfSession *self)
{
  make_moved (self);
  if (self->laws->show_polarity)
    judge_by (self, &self->laws->hold);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

void
tf_session_move_divide (TfSession *self, double degrees)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfDivideHold *hold = &self->laws->hold;
  if (!tf_session_can_move_divide (self) || !isfinite (degrees))
    return;
  begin_hold (self);
  if (hold->handle == TF_WINGS_BAND)
    hold->params.band_deg = CLAMP (hold->params.band_deg + degrees, 0, band_max_deg);
  else
    hold->drawn = TRUE;
  for (int k = 0; k < TF_DIVIDE_HANDLES; k++)
    if (hold->handle == TF_WINGS_WHOLE || hold->handle == k)
      hold->lats[k] = CLAMP (hold->lats[k] + degrees, 0, lat_max_deg);
  follow_hold (self);
}

static gboolean
is_provisional (const TfDivideHold *hold)
{
  return hold->cycle != 0 && tf_cycle_find (hold->cycle) == NULL;
}

gboolean
tf_session_can_shift_divide (TfSession *self)
{
  const TfDivideHold *hold = &self->laws->hold;
  gboolean middle = hold->handle == TF_WINGS_MINIMUM || hold->handle == TF_WINGS_WHOLE;
  return tf_session_can_move_divide (self) && hold->handle != TF_WINGS_BAND
         && (!middle || is_provisional (hold));
}

void
tf_session_shift_divide (TfSession *self, int months)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfDivideParams *params = &self->laws->hold.params;
  if (!tf_session_can_shift_divide (self) || months == 0)
    return;
  begin_hold (self);
  if (self->laws->hold.handle == TF_WINGS_BEGIN)
    params->before_months = CLAMP (params->before_months - months, LEAST_REACH, MOST_BEFORE);
  else if (self->laws->hold.handle == TF_WINGS_END)
    params->after_months = CLAMP (params->after_months + months, LEAST_REACH, MOST_AFTER);
  else
    params->provisional_year
        = CLAMP (params->provisional_year + months / 12.0, provisional_min, provisional_max);
  follow_hold (self);
}

gboolean
tf_session_take_provisional (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  int last = 0;
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    last = c->number;
  if (!laws->shown || !tf_session_is_writable (self))
    return FALSE;
  tf_session_choose_divide (self, last + 1, 1, TF_WINGS_MINIMUM);
  if (laws->hold.cycle != 0)
    return TRUE;
  laws->hold = (TfDivideHold){ .cycle = last + 1,
                               .hemisphere = 1,
                               .handle = TF_WINGS_MINIMUM,
                               .params = laws->study->divide };
  laws->hold.params.provisional_year
      = round ((tf_time_year (tf_cycle_minimum (last)) + mean_cycle_years) * 12) / 12;
  begin_hold (self);
  follow_hold (self);
  return TRUE;
}

/* -- keeping --------------------------------------------------------------------------------- */

static TfDeed *
divide_deed (TfSession *self, guint n)
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
  return deed;
}

/* @line: (transfer full) (nullable): the deed of the chosen divide's line. @study: whether the hold's
 * options become the study's. One deed together. */
static void
push_deeds (TfSession *self, TfDeed *line, gboolean study)
{
  TfDeed *options = study ? tf_session_divide_options_deed (self, &self->laws->hold.params) : NULL;
  TfDeed *all = options != NULL ? options : line;
  if (options != NULL && line != NULL)
    {
      all = tf_deed_new_together ("divide", self->person);
      tf_deed_add (all, options);
      tf_deed_add (all, line);
    }
  tf_session_push_study (self, all);
}

/* What was moved is the study's from now on; the ledger follows. */
static void
settle (TfSession *self, TfDivides *divides, gboolean study)
{
  TfSessionLaws *laws = self->laws;
  if (study)
    laws->study->divide = laws->hold.params;
  g_clear_pointer (&laws->study->divides, tf_divides_unref);
  laws->study->divides = divides;
  g_clear_pointer (&laws->moved, tf_divides_unref);
  laws->hold.in_hand = FALSE;
  judge_by (self, &laws->hold);
  read_handles (self, &laws->hold);
  tf_session_judge_choice (self);
  if (study)
    tf_session_refresh (self, FALSE); /* dots of all minima are judged anew */
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

static gboolean
has_person (TfSession *self)
{
  if (self->person == NULL)
    tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
  return self->person != NULL;
}

gboolean
tf_session_keep_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  if (!laws->hold.in_hand || laws->moved == NULL || !has_person (self))
    return FALSE;
  gboolean study = is_study_moved (self);
  if (!study && !laws->hold.drawn)
    return !tf_session_put_back_divide (self); /* moved there and back again */
  if (laws->was_shown && !laws->hold.drawn)
    {
      laws->hold.drawn = TRUE; /* the line is recorded too: it says that polarity was in sight */
      make_moved (self);
    }
  push_deeds (self, laws->hold.drawn ? divide_deed (self, TF_DIVIDE_HANDLES) : NULL, study);
  settle (self, g_steal_pointer (&laws->moved), study);
  return TRUE;
}

gboolean
tf_session_put_back_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  TfDivideHold held = laws->hold;
  if (!held.in_hand)
    return FALSE;
  g_clear_pointer (&laws->moved, tf_divides_unref);
  judge_by (self, &held);
  laws->hold.in_hand = FALSE;
  read_handles (self, &laws->hold);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_LAWS);
  return TRUE;
}

/* The options that the chosen handle stands for, as the program sets them. TRUE: some were other. */
static gboolean
reset_options (TfDivideHold *hold)
{
  TfDivideParams plain, before = hold->params;
  tf_options_reset (tf_divide_options, &plain);
  if (hold->handle == TF_WINGS_BEGIN)
    hold->params.before_months = plain.before_months;
  if (hold->handle == TF_WINGS_END)
    hold->params.after_months = plain.after_months;
  if (hold->handle == TF_WINGS_BAND)
    hold->params.band_deg = plain.band_deg;
  if (hold->handle == TF_WINGS_MINIMUM && is_provisional (hold))
    hold->params.provisional_year = NAN;
  return !tf_session_is_same_reach (&before, &hold->params);
}

gboolean
tf_session_compute_divide (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfSessionLaws *laws = self->laws;
  TfDivideHold *hold = &laws->hold;
  if (!tf_session_can_move_divide (self))
    return FALSE;
  tf_session_put_back_divide (self);
  if (hold->cycle == 0 || !has_person (self))
    return hold->cycle == 0; /* a minimum that was never kept is gone */
  gboolean study = reset_options (hold);
  g_autoptr (TfDivides) now = dup_divides (self, &hold->params);
  gboolean line = hold->handle != TF_WINGS_BAND
                  && tf_divides_is_moved (now, hold->cycle, hold->hemisphere);
  if (!line && !study)
    return FALSE;
  laws->was_shown = FALSE;
  push_deeds (self, line ? divide_deed (self, 0) : NULL, study);
  settle (self,
          line ? tf_divides_with (now, hold->cycle, hold->hemisphere, NULL, NULL, 0)
               : g_steal_pointer (&now),
          study);
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
