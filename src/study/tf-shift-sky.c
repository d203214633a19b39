/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What was seen in the days before a frame, and which of it is one region: marks and hints are
 * carried and linked as in follow, so that the newest frame needs no run of it first. */

#include "tf-shift-private.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"

/* Frames without marks nearer to each other than this tell nothing more. */
#define STEP_S (2.0 * 3600.0)

void
tf_shift_sky_clear (TfShiftSky *sky)
{
  g_clear_pointer (&sky->moments, g_array_unref);
  g_clear_pointer (&sky->rows, g_ptr_array_unref);
  g_clear_pointer (&sky->classes, g_ptr_array_unref);
  g_clear_pointer (&sky->track, g_free);
}

/* @from's rows are taken over. */
static void
take_rows (GPtrArray *into, GPtrArray *from)
{
  g_ptr_array_set_free_func (from, NULL);
  for (guint k = 0; k < from->len; k++)
    g_ptr_array_add (into, g_ptr_array_index (from, k));
  g_ptr_array_unref (from);
}

/* Backwards from the frame: what is old enough to have gone over the limb is of use only where
 * somebody marked it. */
static gboolean
wanted (const TfShiftSky *sky, const TfMoment *moment, double last_s)
{
  if (moment->marked || moment->frame == sky->frame)
    return TRUE;
  return moment->time.s >= sky->time.s - TF_SHIFT_DISK_DAYS * TF_DAY_S
         && moment->time.s <= last_s - STEP_S;
}

static gboolean
read_rows (TfShiftSky *sky, TfLedger *ledger, GError **error)
{
  double last_s = INFINITY;
  sky->rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  for (guint k = sky->moments->len; k > 0; k--)
    {
      const TfMoment *moment = &g_array_index (sky->moments, TfMoment, k - 1);
      if (!wanted (sky, moment, last_s))
        continue;
      TfRowQuery query = { .marks = TRUE, .frame = moment->frame, .complexity = TRUE };
      query.hints = moment->time.s >= sky->time.s - TF_SHIFT_DISK_DAYS * TF_DAY_S;
      GPtrArray *rows = tf_ledger_rows (ledger, &query, error);
      if (rows == NULL)
        return FALSE;
      last_s = moment->time.s;
      take_rows (sky->rows, rows);
    }
  return TRUE;
}

static guint32
author_of (GPtrArray *persons, const TfRow *row)
{
  if (row->is_hint)
    return 0;
  for (guint k = 0; k < persons->len; k++)
    if (strcmp (g_ptr_array_index (persons, k), row->person) == 0)
      return k + 1;
  g_ptr_array_add (persons, row->person);
  return persons->len;
}

/* One vantage: what light travels is the same for all. */
static TfSighting
sighting_of (const TfRow *row, GPtrArray *persons)
{
  TfSighting s = { .id = row->mark_id,
                   .time = row->measure.time,
                   .frame = (guint32)row->frame,
                   .frame_id = row->frame_checksum,
                   .outline = row->outline,
                   .observer_lon_deg = 0.0,
                   .cmd_deg = row->measure.cmd_deg,
                   .author = author_of (persons, row),
                   .region = (guint32)row->region_key };
  double radius;
  tf_outline_get_cap (row->outline, &s.lon_deg, &s.lat_deg, &radius);
  return s;
}

static void
link_rows (TfShiftSky *sky)
{
  guint n = sky->rows->len;
  TfFollowParams params;
  tf_follow_params_init (&params);
  sky->law = (guint)params.law;
  g_autoptr (GPtrArray) persons = g_ptr_array_new ();
  g_autofree TfSighting *sightings = g_new0 (TfSighting, MAX (n, 1));
  for (guint k = 0; k < n; k++)
    sightings[k] = sighting_of (g_ptr_array_index (sky->rows, k), persons);
  g_autoptr (GArray) links = tf_follow_links (sightings, n, NULL, 0, &params);
  g_autoptr (TfPassages) passages
      = tf_follow_passages (sightings, n, (const TfLink *)(const void *)links->data, links->len,
                            NULL, 0, NULL, 0, &params);
  sky->track = g_new0 (guint, MAX (n, 1));
  for (guint k = 0; k < n; k++)
    {
      const TfPassage *passage
          = &g_array_index (passages->passages, TfPassage, passages->passage[k]);
      sky->track[k] = passage->region;
      sky->n_tracks = MAX (sky->n_tracks, passage->region + 1);
    }
}

gboolean
tf_shift_sky_read (TfShiftSky *sky, TfLedger *ledger, gint64 frame, GError **error)
{
  sky->frame = frame != 0 ? frame : tf_ledger_newest (ledger);
  g_autoptr (TfFrameRow) its = tf_ledger_frame (ledger, sky->frame, error);
  if (its == NULL)
    return FALSE;
  g_autofree char *vantage = tf_observer_dup_vantage (&its->info->geometry.observer);
  sky->time = its->info->time;
  sky->observer = its->info->geometry.observer;
  sky->moments = tf_ledger_moments (
      ledger, vantage, tf_time_add (sky->time, -TF_SHIFT_ROUND_DAYS * TF_DAY_S), sky->time, error);
  if (sky->moments == NULL || !read_rows (sky, ledger, error))
    return FALSE;
  sky->classes = tf_ledger_classes (ledger, error);
  if (sky->classes == NULL)
    return FALSE;
  link_rows (sky);
  return TRUE;
}

const TfRegionClass *
tf_shift_class_at (const TfShiftSky *sky, gint64 region, TfTime time)
{
  const TfRegionClass *found = NULL;
  for (guint k = 0; region != 0 && k < sky->classes->len; k++)
    {
      const TfRegionClass *entry = g_ptr_array_index (sky->classes, k);
      if (entry->region == region && entry->time.s <= time.s)
        found = entry;
    }
  return found;
}
