/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-held.h"

typedef struct
{
  guint keeps, breaks;
} Count;

/* A mark whose source gives no mu is asked. */
static GHashTable *
count_marks (const TfSample *marks, const TfVerdict *verdicts)
{
  GHashTable *counts = g_hash_table_new_full (g_direct_hash, g_direct_equal, NULL, g_free);
  for (guint k = 0; k < tf_sample_get_n (marks); k++)
    {
      const TfSampleRow *row = tf_sample_get (marks, k);
      Count *count = g_hash_table_lookup (counts, GUINT_TO_POINTER (row->passage));
      if (count == NULL)
        {
          count = g_new0 (Count, 1);
          g_hash_table_insert (counts, GUINT_TO_POINTER (row->passage), count);
        }
      if (row->mu < TF_HELD_MU)
        continue;
      count->keeps += verdicts[k].kind == TF_VERDICT_KEEPS;
      count->breaks += verdicts[k].kind == TF_VERDICT_BREAKS;
    }
  return counts;
}

TfHeld *
tf_held (const TfSample *marks, const TfVerdict *verdicts, const TfSample *picks,
         TfVerdict *pick_verdicts)
{
  g_return_val_if_fail (marks != NULL && picks != NULL, NULL);
  g_autoptr (GHashTable) counts = count_marks (marks, verdicts);
  TfHeld *held = g_new0 (TfHeld, tf_sample_get_n (picks) + 1);
  for (guint k = 0; k < tf_sample_get_n (picks); k++)
    {
      const Count *count = g_hash_table_lookup (
          counts, GUINT_TO_POINTER (tf_sample_get (picks, k)->passage));
      TfVerdict *verdict = &pick_verdicts[k];
      if (count == NULL)
        continue;
      held[k].of = count->keeps + count->breaks;
      if (verdict->kind == TF_VERDICT_CANNOT_SAY)
        continue;
      held[k].held = verdict->kind == TF_VERDICT_KEEPS ? count->keeps : count->breaks;
      if (held[k].held >= TF_HELD_SHARE * held[k].of)
        continue;
      verdict->kind = TF_VERDICT_CANNOT_SAY;
      verdict->reason = "hale-changes";
    }
  return held;
}
