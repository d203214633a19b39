/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-export-series.h"
#include "tf-intake.h"
#include "tf-ledger-follow.h"

/* export --what series: one region through all its passages, measured with one even floor each. */

static gboolean
is_asked_for (const TfPassageRow *row, const char *region)
{
  return strcmp (row->number, region) == 0
         || (strlen (region) >= 6 && g_str_has_prefix (row->content_id, region));
}

/* Passages of the region, and those that are one region with them. */
static GPtrArray *
list_passages (const GPtrArray *all, const char *region)
{
  g_autoptr (GHashTable) same = g_hash_table_new (g_direct_hash, g_direct_equal);
  GPtrArray *asked = g_ptr_array_new ();
  for (guint k = 0; k < all->len; k++)
    if (is_asked_for (g_ptr_array_index (all, k), region))
      g_hash_table_add (same,
                        GSIZE_TO_POINTER (((TfPassageRow *)g_ptr_array_index (all, k))->same));
  for (guint k = 0; k < all->len; k++)
    if (g_hash_table_contains (
            same, GSIZE_TO_POINTER (((TfPassageRow *)g_ptr_array_index (all, k))->same)))
      g_ptr_array_add (asked, g_ptr_array_index (all, k));
  return asked;
}

static TfSeries *
read_series (TfLedger *ledger, gint64 passage, const TfStudy *study, const TfWork *work,
             GError **error)
{
  TfSeriesParams params;
  tf_series_params_init (&params);
  double floor = tf_series_floor (ledger, passage, error);
  const TfRowQuery query = { .marks = TRUE, .hints = TRUE, .passage = passage };
  if (!tf_intake_measure_even (ledger, floor, &query, work, error))
    return NULL;
  return tf_series_read (ledger, passage, floor, study, &params, error);
}

static gboolean
write_series (const char *path, const char *out, const char *region, const char *source,
              GError **error)
{
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, error);
  g_autoptr (GPtrArray) all = ledger != NULL ? tf_ledger_passages (ledger, error) : NULL;
  g_autoptr (GPtrArray) series = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_series_free);
  if (all == NULL)
    return FALSE;
  g_autoptr (GPtrArray) asked = list_passages (all, region);
  if (asked->len == 0)
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                   _ ("%s has no passage of a region %s; run follow first, which lists them"), path,
                   region);
      return FALSE;
    }
  guint rows = 0, other_floor = 0;
  for (guint k = 0; k < asked->len; k++)
    {
      TfSeries *one = read_series (ledger, ((TfPassageRow *)g_ptr_array_index (asked, k))->id,
                                   study, work, error);
      if (one == NULL)
        return FALSE;
      g_ptr_array_add (series, one);
      rows += one->rows->len;
      other_floor += one->n_other_floor;
    }
  if (!tf_export_series (out, series, study, source != NULL ? source : path, error))
    return FALSE;
  g_autofree char *line
      = g_strdup_printf (_ ("%s: %u rows in %u passages"), out, rows, series->len);
  g_autofree char *gone
      = other_floor > 0 ? g_strdup_printf (
            _ ("%u rows have another floor, since their frames are not where they were"),
            other_floor)
                        : NULL;
  if (gone != NULL)
    tf_batch_say (gone);
  tf_batch_say (line);
  return TRUE;
}

int
tf_batch_export_series (const char *path, const char *out, const char *region, const char *source)
{
  g_autoptr (GError) error = NULL;
  if (write_series (path, out, region, source, &error))
    return TF_EXIT_DONE;
  tf_batch_say_error (error);
  return g_error_matches (error, TF_EXCHANGE_ERROR, TF_EXCHANGE_ERROR_FORMAT) ? TF_EXIT_CALL
                                                                              : TF_EXIT_NOTHING;
}
