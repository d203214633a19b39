/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-ledger-brief.h"
#include "tf-study-private.h"

/* The study's one even floor, and the rows measured with it. */

/* 3 sigma on the field used: a radial product and a map need no 1/mu. A model map has no noise of an instrument, and a frame
 * whose header gives no unit is not known to be in gauss: they have no say. */
static double
frame_floor (const TfFrameNoise *frame)
{
  if (frame->model_map || !frame->known_unit)
    return NAN;
  return 3.0 * frame->noise_gauss / (frame->as_is ? 1.0 : 0.5);
}

double
tf_study_floor_of_noises (const GArray *noises)
{
  g_autoptr (GHashTable) by_instrument
      = g_hash_table_new_full (g_str_hash, g_str_equal, NULL, (GDestroyNotify)g_array_unref);
  for (guint k = 0; k < noises->len; k++)
    {
      const TfFrameNoise *frame = &g_array_index (noises, TfFrameNoise, k);
      double floor = frame_floor (frame);
      if (!(floor > 0))
        continue;
      GArray *floors = g_hash_table_lookup (by_instrument, (gpointer)frame->instrument);
      if (floors == NULL)
        {
          floors = g_array_new (FALSE, FALSE, sizeof (double));
          g_hash_table_insert (by_instrument, (gpointer)frame->instrument, floors);
        }
      g_array_append_val (floors, floor);
    }
  GHashTableIter iter;
  gpointer floors;
  double greatest = NAN;
  g_hash_table_iter_init (&iter, by_instrument);
  while (g_hash_table_iter_next (&iter, NULL, &floors))
    greatest = fmax (greatest,
                     tf_median ((const double *)((GArray *)floors)->data, ((GArray *)floors)->len));
  return greatest < 1 ? 1 : round (greatest);
}

double
tf_study_even_floor (TfLedger *ledger, GError **error)
{
  g_autoptr (GArray) noises = tf_ledger_noises (ledger, error);
  return noises != NULL ? tf_study_floor_of_noises (noises) : NAN;
}

double
tf_study_floor (const TfStudy *study, TfLedger *ledger)
{
  gboolean own = study != NULL && study->even_floor_gauss > 0;
  return own ? study->even_floor_gauss : tf_study_even_floor (ledger, NULL);
}

GPtrArray *
tf_study_rows (TfLedger *ledger, const TfRowQuery *query, double floor_gauss, GError **error)
{
  GPtrArray *rows = tf_ledger_rows (ledger, query, error);
  for (guint k = 0; rows != NULL && floor_gauss > 0 && k < rows->len; k++)
    {
      TfRow *row = g_ptr_array_index (rows, k);
      if (row->outside != NULL)
        continue;
      TfMeasureParams params;
      TfMeasure even = { 0 };
      g_autofree char *method = tf_measure_dup_even_method (row->method, floor_gauss, &params);
      if (method == NULL
          || !tf_ledger_even_measure (ledger, row->mark, row->is_hint, method, &even))
        continue;
      tf_measure_clear (&row->measure);
      row->measure = even;
      g_free (row->method);
      row->method = g_steal_pointer (&method);
    }
  return rows;
}
