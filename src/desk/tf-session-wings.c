/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The dots of the wings, and the stretch of time picked on them. A dot's id is its place in the
 * list of points, from 1. */

#include "tf-session-laws-private.h"

#include <math.h>
#include <string.h>

static GArray *
dots_or_none (GArray *dots)
{
  return dots != NULL ? dots : g_array_new (FALSE, FALSE, sizeof (TfWingsDot));
}

void
tf_session_replace_points (TfSession *self, GArray *points, GArray *dots, GArray *mark_dots)
{
  g_clear_pointer (&self->points, g_array_unref);
  g_clear_pointer (&self->all_dots, g_array_unref);
  g_clear_pointer (&self->mark_dots, g_array_unref);
  self->points = points != NULL ? points : g_array_new (FALSE, FALSE, sizeof (TfPoint));
  self->all_dots = dots_or_none (dots);
  self->mark_dots = dots_or_none (mark_dots);
  tf_session_emit (self, TF_SIGNAL_POINTS);
}

GArray *
tf_session_get_dots (TfSession *self, guint *n_hidden)
{
  if (n_hidden != NULL)
    *n_hidden = self->show_hints ? 0 : self->all_dots->len - self->mark_dots->len;
  return self->show_hints ? self->all_dots : self->mark_dots;
}

guint
tf_session_get_n_marks (TfSession *self)
{
  return self->mark_dots->len;
}

gboolean
tf_session_get_show_hints (TfSession *self)
{
  return self->show_hints;
}

void
tf_session_set_show_hints (TfSession *self, gboolean show)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->show_hints = show;
  tf_session_emit (self, TF_SIGNAL_POINTS);
}

/* The frame of a mark or hint, by the dots; 0. */
static gint64
frame_of (TfSession *self, TfSight sight)
{
  for (guint k = 0; k < self->points->len; k++)
    {
      const TfPoint *point = &g_array_index (self->points, TfPoint, k);
      if (!point->outside && point->mark == sight.mark && (point->hint != 0) == sight.is_hint)
        return point->frame;
    }
  return 0;
}

void
tf_session_choose_sighting (TfSession *self, gint64 frame, TfSight sight)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfFrameItem *item = tf_session_find_frame (self, frame != 0 ? frame : frame_of (self, sight));
  if (item == NULL)
    return;
  tf_session_choose_frame (self, item);
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) region = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (tf_region_item_is (region, sight.mark, sight.is_hint))
        {
          tf_session_choose_region (self, region);
          return;
        }
    }
  self->want_mark = sight.mark;
  self->want_hint = sight.is_hint;
}

void
tf_session_choose_dot (TfSession *self, gint64 id)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (id < 1 || id > self->points->len)
    return;
  const TfPoint *point = &g_array_index (self->points, TfPoint, (guint)id - 1);
  tf_session_choose_sighting (self, point->frame, (TfSight){ point->mark, point->hint });
}

gint64
tf_session_get_chosen_dot (TfSession *self)
{
  if (self->region == NULL)
    return 0;
  const TfRow *row = tf_region_item_get_row (self->region);
  for (guint k = 0; k < self->points->len; k++)
    {
      const TfPoint *point = &g_array_index (self->points, TfPoint, k);
      if (point->mark == row->mark && point->hint == (gint8)row->is_hint && !point->outside)
        return (gint64)k + 1;
    }
  return 0;
}

/* -- the stretch picked ------------------------------------------------------------------------ */

gboolean
tf_session_in_band (TfSession *self, double lat_deg)
{
  return !(lat_deg < self->pick_low) && !(lat_deg > self->pick_high);
}

/* The frames of the stretch that hold a region in the band. */
static void
find_frames (TfSession *self)
{
  g_clear_pointer (&self->pick_frames, g_hash_table_unref);
  if (isnan (self->pick_low) && isnan (self->pick_high))
    return;
  self->pick_frames = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, NULL);
  for (guint k = 0; k < self->points->len; k++)
    {
      const TfPoint *point = &g_array_index (self->points, TfPoint, k);
      if (!(point->year < self->pick_from) && !(point->year > self->pick_to)
          && tf_session_in_band (self, (double)point->lat_deg)
          && !g_hash_table_contains (self->pick_frames, &point->frame))
        g_hash_table_add (self->pick_frames, g_memdup2 (&point->frame, sizeof point->frame));
    }
}

static void
order (double *low, double *high)
{
  double least = fmin (*low, *high), most = fmax (*low, *high);
  gboolean all = isnan (*low) || isnan (*high);
  *low = all ? NAN : least;
  *high = all ? NAN : most;
}

void
tf_session_pick_band (TfSession *self, double from, double to, double low, double high)
{
  g_return_if_fail (TF_IS_SESSION (self));
  order (&from, &to);
  order (&low, &high);
  gboolean band = !isnan (low) || !isnan (self->pick_low);
  self->pick_from = from;
  self->pick_to = to;
  self->pick_low = low;
  self->pick_high = high;
  find_frames (self);
  tf_session_update_pick (self);
  tf_session_emit (self, TF_SIGNAL_POINTS);
  tf_session_emit (self, TF_SIGNAL_FRAMES);
  tf_session_ask_laws (self);
  if (band)
    tf_session_refresh (self, FALSE); /* the regions on the plate */
}

void
tf_session_pick (TfSession *self, double from, double to)
{
  tf_session_pick_band (self, from, to, NAN, NAN);
}

TfStretch
tf_session_get_stretch (TfSession *self)
{
  return (TfStretch){ self->pick_from, self->pick_to, self->pick_low, self->pick_high };
}

void
tf_session_get_pick (TfSession *self, double *from, double *to)
{
  *from = self->pick_from;
  *to = self->pick_to;
}

/* -- stretches that have names ----------------------------------------------------------------- */

#define ROTATION_D 27.2752316 /* mean synodic rotation (Meeus 1998, chapter 29) */
#define TURN_DEG_D 13.2    /* of regions as the Earth sees them */

static const double days_a_year = 365.25, day_edge = 1e-6;

static TfTime
frame_time (TfSession *self)
{
  return self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->info->time
                                  : TF_TIME_UNKNOWN;
}

static double
start_of_day (TfTime time)
{
  int year, month, day;
  if (!tf_time_calendar (time, &year, &month, &day, NULL, NULL, NULL))
    return NAN;
  return tf_time_year (tf_time_from_calendar (year, month, day, 0, 0, 0, TF_SCALE_UTC));
}

/* The passage of the chosen region, else that of the centre of the disk: quarter of a turn before
 * and after it is on the central meridian. */
static void
pick_passage (TfSession *self, double year)
{
  double cmd = 0;
  if (self->region != NULL && isfinite (tf_region_item_get_row (self->region)->measure.cmd_deg))
    cmd = tf_region_item_get_row (self->region)->measure.cmd_deg;
  double middle = year - cmd / TURN_DEG_D / days_a_year, half = 90 / TURN_DEG_D / days_a_year;
  tf_session_pick (self, middle - half, middle + half);
}

static gboolean
pick_rotation (TfSession *self, TfTime time)
{
  /* the mean beginning of rotation C is JDE 2398140.2270 + 27.2752316 C (Meeus 1998, chapter 29) */
  double jd = 2451545.0 + time.s / 86400;
  double number = floor ((jd - 2398140.2270) / ROTATION_D);
  double from = 2398140.2270 + ROTATION_D * number;
  TfTime a = { (from - 2451545.0) * 86400 }, b = { (from + ROTATION_D - 2451545.0) * 86400 };
  tf_session_pick (self, tf_time_year (a), tf_time_year (b));
  return TRUE;
}

static gboolean
pick_cycle (TfSession *self, TfTime time)
{
  int cycle = tf_cycle_by_date (time);
  if (cycle == 0)
    return FALSE;
  double from = tf_time_year (tf_cycle_minimum (cycle)),
         to = tf_time_year (tf_cycle_minimum (cycle + 1));
  tf_session_pick (self, from, isfinite (to) ? to : from + 11);
  return TRUE;
}

gboolean
tf_session_pick_named (TfSession *self, const char *name)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && name != NULL, FALSE);
  double cadence, day = 1 / days_a_year;
  TfTime newest = tf_session_get_newest (self, &cadence), time = frame_time (self);
  double today = start_of_day (newest), here = tf_time_year (time);
  if (strcmp (name, "all") == 0)
    tf_session_pick (self, NAN, NAN);
  else if (strcmp (name, "today") == 0 && isfinite (today))
    tf_session_pick (self, today - day_edge, today + day);
  else if (!isfinite (here))
    return FALSE;
  else if (strcmp (name, "days") == 0)
    tf_session_pick (self, here - 3 * day, here + day_edge);
  else if (strcmp (name, "passage") == 0)
    pick_passage (self, here);
  else if (strcmp (name, "rotation") == 0)
    return pick_rotation (self, time);
  else if (strcmp (name, "cycle") == 0)
    return pick_cycle (self, time);
  else
    return FALSE;
  return TRUE;
}
