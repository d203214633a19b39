/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sample.h"

#include <math.h>

#include "tf-distinct.h"

struct _TfSample
{
  GArray *rows;          /* TfSampleRow; of a part: guint, places in the whole */
  const TfSample *whole; /* NULL: it is no part */
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
  sample->rows = g_array_sized_new (FALSE, FALSE, sizeof (TfSampleRow), n);
  return sample;
}

void
tf_sample_free (TfSample *sample)
{
  if (sample == NULL)
    return;
  g_array_unref (sample->rows);
  tf_sample_free (sample->taken);
  g_free (sample);
}

TfSample *
tf_sample_new_part (const TfSample *whole)
{
  g_return_val_if_fail (whole != NULL, NULL);
  TfSample *part = g_new0 (TfSample, 1);
  part->rows = g_array_sized_new (FALSE, FALSE, sizeof (guint), whole->rows->len);
  part->whole = whole;
  return part;
}

void
tf_sample_take_whole (TfSample *part, TfSample *whole)
{
  g_return_if_fail (part->whole == whole && part->taken == NULL);
  part->taken = whole;
}

void
tf_sample_add_place (TfSample *part, guint place)
{
  g_return_if_fail (part->whole != NULL && place < part->whole->rows->len);
  g_array_append_val (part->rows, place);
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
    .bracketed = -1,
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
    return tf_sample_get (sample->whole, g_array_index (sample->rows, guint, k));
  return &g_array_index (sample->rows, TfSampleRow, k);
}

guint
tf_count_distinct (const guint32 *ids, guint n)
{
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
  g_autofree guint32 *ids = g_new (guint32, n);
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
