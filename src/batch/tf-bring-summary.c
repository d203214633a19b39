/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-daily-summary.h"
#include "tf-json.h"

/* bring, of a daily region summary: its columns are known, so that nothing is to be mapped. */

static void
print_json (const TfDailySummary *summary, const char *file)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_autofree char *time = tf_time_dup_iso (summary->time, 0);
  json_builder_begin_object (builder);
  tf_json_string (builder, "name", file);
  tf_json_string (builder, "format", TF_DAILY_SUMMARY_FORMAT);
  tf_json_string (builder, "time", time);
  tf_json_int (builder, "taken", summary->regions->len);
  json_builder_set_member_name (builder, "bad_rows");
  json_builder_begin_array (builder);
  for (guint k = 0; k < summary->faults->len; k++)
    {
      const TfListedFault *fault = &g_array_index (summary->faults, TfListedFault, k);
      json_builder_begin_object (builder);
      tf_json_int (builder, "place", fault->place);
      tf_json_string (builder, "value", fault->line);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  tf_batch_print_json (builder);
}

static void
say (const TfDailySummary *summary, const char *file, gboolean look)
{
  g_autofree char *time = tf_time_dup_iso (summary->time, 0);
  for (guint k = 0; k < summary->faults->len; k++)
    {
      const TfListedFault *fault = &g_array_index (summary->faults, TfListedFault, k);
      g_autofree char *line = g_strdup_printf (_ ("  line %u cannot be read: %s"), fault->place, fault->line);
      tf_batch_say (line);
    }
  g_autofree char *sum = g_strdup_printf (
      look ? _ ("%s: daily region summary for %s: %u regions would be taken; nothing was written.")
           : _ ("%s: daily region summary for %s: %u regions taken. The window and export --what shift propose matches; a person confirms them."),
      file, time, summary->regions->len);
  tf_batch_say (sum);
}

int
tf_batch_bring_summary (const char *path, const char *file, const char *source, gboolean look, gboolean json)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *bytes = NULL, *name = g_path_get_basename (file);
  gsize n = 0;
  if (!g_file_get_contents (file, &bytes, &n, NULL) || !tf_daily_summary_is (bytes, n))
    return -1;
  g_autofree char *checksum = g_compute_checksum_for_data (G_CHECKSUM_SHA256, (const guchar *)bytes, n);
  g_autoptr (TfDailySummary) summary = tf_daily_summary_read (bytes, n, name, &error);
  g_autoptr (TfLedger) ledger
      = summary != NULL && !look ? tf_ledger_open_or_create (path, 'T', &error) : NULL;
  if (summary == NULL
      || (!look && (ledger == NULL || tf_daily_summary_bring (summary, ledger, name, checksum, source, &error) == 0)))
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  if (json)
    print_json (summary, name);
  else
    say (summary, name, look);
  return summary->faults->len > 0 ? TF_EXIT_PART : TF_EXIT_DONE;
}
