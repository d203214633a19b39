/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sample.h"

#include <math.h>

#include "tf-distinct.h"
#include "tf-many.h"

struct _TfSample
{
  GArray *rows;          /* TfSampleRow; of a part: guint, places in the whole */
  GArray *bracketed;     /* gint8: of the first rows; NULL: of none */
  const TfSample *whole; /* no part itself; NULL: this is none */
  const TfSample *from;  /* whose places are given: the whole, or a part of it */
  TfSample *taken;       /* the whole, when it goes with this */
};

TfSample *
tf_sample_new (void)
{
  return tf_sample_new_sized (0);
}

TfSample *
tf_sample_new_sized (guint n)
{
  TfSample *sample = g_new0 (TfSample, 1);
  sample->rows = tf_array_of_many (sizeof (TfSampleRow), n);
  return sample;
}

void
tf_sample_free (TfSample *sample)
{
  if (sample == NULL)
    return;
  g_array_unref (sample->rows);
  g_clear_pointer (&sample->bracketed, g_array_unref);
  tf_sample_free (sample->taken);
  g_free (sample);
}

TfSample *
tf_sample_new_part (const TfSample *whole)
{
  g_return_val_if_fail (whole != NULL, NULL);
  TfSample *part = g_new0 (TfSample, 1);
  part->rows = tf_array_of_many (sizeof (guint), whole->rows->len);
  part->whole = whole->whole != NULL ? whole->whole : whole;
  part->from = whole;
  return part;
}

void
tf_sample_take_whole (TfSample *part, TfSample *whole)
{
  g_return_if_fail (part->from == whole && part->taken == NULL);
  part->from = NULL;
  if (whole->whole == NULL)
    {
      part->taken = whole;
      return;
    }
  part->taken = g_steal_pointer (&whole->taken);
  tf_sample_free (whole);
}

void
tf_sample_add_place (TfSample *part, guint place)
{
  g_return_if_fail (part->from != NULL && place < part->from->rows->len);
  guint at = part->from->whole != NULL ? g_array_index (part->from->rows, guint, place) : place;
  g_array_append_val (part->rows, at);
  int bracketed = tf_sample_get_bracketed (part->from, place);
  if (bracketed >= 0)
    tf_sample_set_bracketed (part, bracketed);
}

const TfSample *
tf_sample_get_root (const TfSample *sample)
{
  return sample->whole;
}

const guint *
tf_sample_get_places (const TfSample *part)
{
  g_return_val_if_fail (part->whole != NULL, NULL);
  return (const guint *)(gconstpointer)part->rows->data;
}

TfSample *
tf_sample_copy (const TfSample *sample)
{
  TfSample *copy = tf_sample_new_sized (sample->rows->len);
  for (guint k = 0; k < sample->rows->len; k++)
    tf_sample_add (copy, tf_sample_get (sample, k));
  copy->bracketed = sample->bracketed != NULL ? g_array_copy (sample->bracketed) : NULL;
  return copy;
}

void
tf_sample_set_bracketed (TfSample *sample, gboolean bracketed)
{
  const gint8 value = bracketed != FALSE, unasked = -1;
  g_return_if_fail (sample->rows->len > 0);
  if (sample->bracketed == NULL)
    sample->bracketed = g_array_sized_new (FALSE, FALSE, sizeof (gint8), sample->rows->len);
  while (sample->bracketed->len + 1 < sample->rows->len)
    g_array_append_val (sample->bracketed, unasked);
  g_array_set_size (sample->bracketed, sample->rows->len - 1);
  g_array_append_val (sample->bracketed, value);
}

int
tf_sample_get_bracketed (const TfSample *sample, guint k)
{
  return sample->bracketed != NULL && k < sample->bracketed->len
             ? g_array_index (sample->bracketed, gint8, k)
             : -1;
}

void
tf_sample_row_init (TfSampleRow *row)
{
  *row = (TfSampleRow){
    .time = TF_TIME_UNKNOWN,
    .lat_deg = NAN,
    .leading_lat_deg = NAN,
    .following_lat_deg = NAN,
    .cmd_deg = NAN,
    .mu = NAN,
    .axis_tilt_deg = NAN,
    .axis_bearing_deg = NAN,
    .tilt_sigma_deg = NAN,
    .separation_deg = NAN,
    .separation_sigma_deg = NAN,
    .flux_mx = NAN,
    .imbalance = NAN,
    .compactness = NAN,
    .axial_dipole_gauss = NAN,
    .axial_dipole_sigma_gauss = NAN,
    .leading_polarity = 0,
    .leading_sure = -1,
    .witnesses_differ = -1,
    .straddles = -1,
    .size = -1,
    .born = -1,
    .origin = TF_ORIGIN_OUTSIDE,
  };
}

void
tf_sample_add (TfSample *sample, const TfSampleRow *row)
{
  g_return_if_fail (sample->whole == NULL);
  g_array_append_vals (sample->rows, row, 1);
}

void
tf_sample_scale_flux (TfSample *sample, guint k, double factor)
{
  g_return_if_fail (k < sample->rows->len && sample->whole == NULL);
  g_array_index (sample->rows, TfSampleRow, k).flux_mx *= factor;
}

guint
tf_sample_get_n (const TfSample *sample)
{
  return sample->rows->len;
}

const TfSampleRow *
tf_sample_get (const TfSample *sample, guint k)
{
  g_return_val_if_fail (k < sample->rows->len, NULL);
  if (sample->whole != NULL)
    return &g_array_index (sample->whole->rows, TfSampleRow, g_array_index (sample->rows, guint, k));
  return &g_array_index (sample->rows, TfSampleRow, k);
}

/* Numbers without many gaps: a bit each. */
static guint
count_small (const guint32 *ids, guint n, guint32 greatest)
{
  g_autofree guint32 *seen = g_new0 (guint32, greatest / 32 + 1);
  guint found = 0;
  for (guint k = 0; k < n; k++)
    {
      guint32 bit = 1u << (ids[k] % 32);
      found += (seen[ids[k] / 32] & bit) == 0;
      seen[ids[k] / 32] |= bit;
    }
  return found;
}

guint
tf_count_distinct (const guint32 *ids, guint n)
{
  guint32 greatest = 0;
  for (guint k = 0; k < n; k++)
    greatest = MAX (greatest, ids[k]);
  if (greatest / 64 <= n)
    return count_small (ids, n, greatest);
  g_autoptr (TfDistinct) distinct = tf_distinct_new (n);
  for (guint k = 0; k < n; k++)
    tf_distinct_add (distinct, ids[k]);
  return tf_distinct_get_n (distinct);
}

/* How many different numbers stand at @offset of the rows. */
static guint
count_column (const TfSample *sample, gsize offset)
{
  guint n = sample->rows->len;
  g_autofree guint32 *ids = tf_new_many (guint32, n);
  for (guint k = 0; k < n; k++)
    ids[k] = *(const guint32 *)((const char *)tf_sample_get (sample, k) + offset);
  return tf_count_distinct (ids, n);
}

guint
tf_sample_count_regions (const TfSample *sample)
{
  return count_column (sample, offsetof (TfSampleRow, region));
}

guint
tf_sample_count_passages (const TfSample *sample)
{
  return count_column (sample, offsetof (TfSampleRow, passage));
}
