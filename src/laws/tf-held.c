/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-held.h"

#include "tf-distinct.h"

typedef struct
{
  guint keeps, breaks;
} Count;

/* By number of the passage. A mark whose source gives no mu is asked. */
static GArray *
count_marks (const TfSample *marks, const TfVerdict *verdicts, TfDistinct *passages)
{
  GArray *counts = g_array_new (FALSE, TRUE, sizeof (Count));
  for (guint k = 0; k < tf_sample_get_n (marks); k++)
    {
      const TfSampleRow *row = tf_sample_get (marks, k);
      guint number = tf_distinct_add (passages, row->passage);
      if (number == counts->len)
        g_array_set_size (counts, number + 1);
      if (row->mu < TF_HELD_MU)
        continue;
      Count *count = &g_array_index (counts, Count, number);
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
  g_autoptr (TfDistinct) passages = tf_distinct_new (tf_sample_get_n (marks));
  g_autoptr (GArray) counts = count_marks (marks, verdicts, passages);
  TfHeld *held = g_new0 (TfHeld, tf_sample_get_n (picks) + 1);
  for (guint k = 0; k < tf_sample_get_n (picks); k++)
    {
      guint number = tf_distinct_find (passages, tf_sample_get (picks, k)->passage);
      TfVerdict *verdict = &pick_verdicts[k];
      if (number == G_MAXUINT)
        continue;
      const Count *count = &g_array_index (counts, Count, number);
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
