/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* What others list, beside our own regions. A match is proposed by place alone, ours carried to the
 * moment their list holds for; it becomes one when a person gives the region that number. */

#include "tf-shift-private.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-rotation.h"

#define FARTHEST_DEG 5.0
/* A list holds for the end of its day: it may be later than the frame, and a day or so older. */
#define LIST_BEFORE_S (1.5 * TF_DAY_S)
#define LIST_AFTER_S  (1.0 * TF_DAY_S)

void
tf_others_free (TfOthers *others)
{
  if (others == NULL)
    return;
  g_free (others->number);
  g_free (others->mw_class);
  g_free (others->source);
  g_free (others);
}

static TfOthers *
others_of (const TfListing *listing)
{
  TfOthers *others = g_new0 (TfOthers, 1);
  others->number = g_strdup (listing->number);
  others->mw_class = g_strdup (listing->mw_class);
  others->source = g_strdup (listing->source);
  others->area_msh = listing->spot_area_msh;
  others->time = listing->time;
  others->apart_deg = NAN;
  others->sharing = 1;
  return others;
}

/* Degrees between a listed place and ours, carried there. */
static double
apart (const TfShiftRow *row, const TfListing *listing, TfTime now, guint law)
{
  double lon = listing->carrington_lon_deg;
  if (isnan (lon) && isfinite (listing->cmd_deg))
    lon = tf_earth_l0 (listing->time, TF_L0_IMAGE) + listing->cmd_deg;
  double ours = row->carrington_lon_deg
                + tf_rotation_carry (law, row->lat_deg, listing->time.s - now.s);
  return tf_sphere_distance (ours, row->lat_deg, lon, listing->lat_deg);
}

static TfShiftRow *
nearest (const GPtrArray *rows, const TfListing *listing, TfTime now, guint law, double *deg)
{
  TfShiftRow *best = NULL;
  *deg = FARTHEST_DEG;
  for (guint k = 0; k < rows->len; k++)
    {
      TfShiftRow *row = g_ptr_array_index (rows, k);
      double d = row->seen != TF_SEEN_DUE ? apart (row, listing, now, law) : NAN;
      if (!(d <= *deg))
        continue;
      *deg = d;
      best = row;
    }
  return best;
}

static gboolean
take_confirmed (const GPtrArray *rows, const TfListing *listing)
{
  for (guint k = 0; k < rows->len; k++)
    {
      TfShiftRow *row = g_ptr_array_index (rows, k);
      if (*row->external == '\0' || strcmp (row->external, listing->number) != 0)
        continue;
      g_clear_pointer (&row->others, tf_others_free);
      row->others = others_of (listing);
      return TRUE;
    }
  return FALSE;
}

void
tf_shift_match (GPtrArray *rows, TfTime now, const GPtrArray *listings, guint law, GPtrArray *unmatched)
{
  for (guint k = 0; k < listings->len; k++)
    {
      const TfListing *listing = g_ptr_array_index (listings, k);
      double deg;
      if (listing->due || take_confirmed (rows, listing))
        continue;
      TfShiftRow *row = nearest (rows, listing, now, law, &deg);
      TfOthers *others = others_of (listing);
      g_ptr_array_add (row != NULL ? row->proposed : unmatched, others);
      if (row != NULL)
        others->apart_deg = deg;
    }
  for (guint k = 0; k < rows->len; k++)
    {
      GPtrArray *proposed = ((TfShiftRow *)g_ptr_array_index (rows, k))->proposed;
      for (guint n = 0; n < proposed->len; n++)
        ((TfOthers *)g_ptr_array_index (proposed, n))->sharing = proposed->len;
    }
}

/* Of several lists the last one: entries of another time are dropped. */
static void
keep_newest (GPtrArray *listings)
{
  double newest = -INFINITY;
  for (guint k = 0; k < listings->len; k++)
    newest = fmax (newest, ((TfListing *)g_ptr_array_index (listings, k))->time.s);
  for (guint k = listings->len; k > 0; k--)
    if (((TfListing *)g_ptr_array_index (listings, k - 1))->time.s < newest)
      g_ptr_array_remove_index (listings, k - 1);
}

gboolean
tf_shift_add_others (const TfShiftSky *sky, TfLedger *ledger, TfShift *shift, GError **error)
{
  g_autoptr (GPtrArray) listings = tf_ledger_listings (
      ledger, tf_time_add (sky->time, -LIST_BEFORE_S), tf_time_add (sky->time, LIST_AFTER_S), error);
  if (listings == NULL)
    return FALSE;
  keep_newest (listings);
  tf_shift_match (shift->rows, sky->time, listings, sky->law, shift->unmatched);
  return TRUE;
}
