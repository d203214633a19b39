/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sample.h"

#include <math.h>

struct _TfSample
{
  GArray *rows;
};

TfSample *
tf_sample_new (void)
{
  TfSample *sample = g_new0 (TfSample, 1);
  sample->rows = g_array_new (FALSE, FALSE, sizeof (TfSampleRow));
  return sample;
}

void
tf_sample_free (TfSample *sample)
{
  if (sample == NULL)
    return;
  g_array_unref (sample->rows);
  g_free (sample);
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
  g_array_append_vals (sample->rows, row, 1);
}

void
tf_sample_scale_flux (TfSample *sample, guint k, double factor)
{
  g_return_if_fail (k < sample->rows->len);
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
  return &g_array_index (sample->rows, TfSampleRow, k);
}

/* Sorts by one byte of each number, the least first: @to has room for @n. */
static void
sort_by_byte (const guint32 *from, guint32 *to, guint n, guint shift)
{
  guint start[257] = { 0 };
  for (guint k = 0; k < n; k++)
    start[((from[k] >> shift) & 255u) + 1]++;
  for (guint byte = 0; byte < 256; byte++)
    start[byte + 1] += start[byte];
  for (guint k = 0; k < n; k++)
    to[start[(from[k] >> shift) & 255u]++] = from[k];
}

guint
tf_count_distinct (const guint32 *ids, guint n)
{
  guint count = 0;
  g_autofree guint32 *sorted = g_new (guint32, n + 1), *other = g_new (guint32, n + 1);
  for (guint k = 0; k < n; k++)
    sorted[k] = ids[k];
  for (guint shift = 0; n > 0 && shift < 32; shift += 16)
    {
      sort_by_byte (sorted, other, n, shift);
      sort_by_byte (other, sorted, n, shift + 8);
    }
  for (guint k = 0; k < n; k++)
    count += k == 0 || sorted[k] != sorted[k - 1];
  return count;
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
