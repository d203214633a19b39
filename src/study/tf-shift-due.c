/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* When a place comes over the east limb. Refraction, the photosphere's height and the observer's
 * finite distance (a quarter of a degree at 1 au, half an hour) are left aside. */

#include "tf-shift-private.h"

#include <math.h>

#include "tf-constants.h"
#include "tf-observer.h"
#include "tf-rotation.h"

/* mu = sin B0 sin lat + cos B0 cos lat cos CMD = 0. */
double
tf_shift_limb_cmd (double lat_deg, double b0_deg)
{
  double c = -tan (b0_deg * TF_DEG) * tan (lat_deg * TF_DEG);
  return fabs (c) < 1.0 ? acos (c) / TF_DEG : 90.0;
}

/* How far the place has turned past the east limb at @time, deg in [0, 360). */
static double
past_limb (double lon_deg, double lat_deg, TfTime seen, TfTime time, double stonyhurst_lon_deg,
           guint law)
{
  TfObserver earth = tf_observer_earth (time);
  double lon = lon_deg + tf_rotation_carry (law, lat_deg, time.s - seen.s);
  double cmd = lon - (earth.carrington_lon_deg + stonyhurst_lon_deg);
  return tf_wrap_360 (cmd + tf_shift_limb_cmd (lat_deg, earth.b0_deg));
}

TfTime
tf_shift_crossing (double carrington_lon_deg, double lat_deg, TfTime seen, TfTime from,
                   double stonyhurst_lon_deg, guint law)
{
  if (!isfinite (carrington_lon_deg + lat_deg + seen.s + from.s + stonyhurst_lon_deg))
    return TF_TIME_UNKNOWN;
  /* The Earth's own motion: about 0.9856 deg a day. */
  double rate = (tf_rotation_rate (law, lat_deg) - 0.9856) / TF_DAY_S;
  TfTime at = from;
  double left = 360.0 - past_limb (carrington_lon_deg, lat_deg, seen, from, stonyhurst_lon_deg, law);
  for (int turn = 0; turn < 8 && fabs (left / rate) > 20.0; turn++)
    {
      at = tf_time_add (at, left / rate);
      left = -tf_wrap_180 (
          past_limb (carrington_lon_deg, lat_deg, seen, at, stonyhurst_lon_deg, law));
    }
  return at;
}

/* -- ghosts of last rotation's regions ---------------------------------------------------------- */

#define DUE_BEFORE_S (1.0 * TF_DAY_S)
#define DUE_AFTER_S  (3.0 * TF_DAY_S)
/* Seen more lately than this, it cannot have gone round behind the limb. */
#define ROUND_LEAST_S (10.0 * TF_DAY_S)

static gboolean
is_listed (const GPtrArray *rows, gint64 region)
{
  for (guint k = 0; k < rows->len; k++)
    if (((TfShiftRow *)g_ptr_array_index (rows, k))->region == region)
      return TRUE;
  return FALSE;
}

/* The newest mark of each region, by its key. */
static GHashTable *
newest_marks (const TfShiftSky *sky)
{
  GHashTable *newest = g_hash_table_new (g_int64_hash, g_int64_equal);
  for (guint k = 0; k < sky->rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (sky->rows, k);
      if (row->is_hint)
        continue;
      const TfRow *other = g_hash_table_lookup (newest, &row->region_key);
      if (other == NULL || other->measure.time.s < row->measure.time.s)
        g_hash_table_replace (newest, (gpointer)&row->region_key, (gpointer)row);
    }
  return newest;
}

static void
add_one (const TfShiftSky *sky, const TfRow *last, GPtrArray *rows)
{
  const TfMeasure *m = &last->measure;
  if (sky->time.s - m->time.s < ROUND_LEAST_S || is_listed (rows, last->region_key))
    return;
  TfTime crosses = tf_shift_crossing (m->carrington_lon_deg, m->lat_deg, m->time,
                                      tf_time_add (sky->time, -DUE_BEFORE_S),
                                      sky->observer.stonyhurst_lon_deg, sky->law);
  if (!(crosses.s <= sky->time.s + DUE_AFTER_S))
    return;
  const TfRegionClass *mw = tf_shift_class_at (sky, last->region_key, sky->time);
  TfShiftRow *row = tf_shift_row_new ();
  row->seen = TF_SEEN_DUE;
  row->group = TF_SHIFT_DUE;
  row->region = last->region_key;
  row->first = m->time;
  row->crosses = crosses;
  row->lat_deg = m->lat_deg;
  row->carrington_lon_deg
      = tf_wrap_360 (m->carrington_lon_deg
                     + tf_rotation_carry (sky->law, m->lat_deg, sky->time.s - m->time.s));
  row->cmd_deg = tf_wrap_180 (row->carrington_lon_deg - sky->observer.carrington_lon_deg);
  row->flux_mx.before = m->flux_unsigned_mx;
  row->flux_mx.before_time = m->time;
  g_free (row->number);
  row->number = g_strdup (last->region);
  g_free (row->class_before);
  row->class_before = g_strdup (mw != NULL ? mw->mw_class : "");
  g_ptr_array_add (rows, row);
}

void
tf_shift_add_due (const TfShiftSky *sky, GPtrArray *rows)
{
  g_autoptr (GHashTable) newest = newest_marks (sky);
  GHashTableIter iter;
  gpointer last;
  g_hash_table_iter_init (&iter, newest);
  while (g_hash_table_iter_next (&iter, NULL, &last))
    add_one (sky, last, rows);
}
