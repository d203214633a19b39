/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-ledger-divides.h"
#include "tf-study-private.h"

/* The divides of a study as people moved them in a ledger. */

static void
note_shown (GString *shown, const TfMovedDivide *divide)
{
  if (divide->shown)
    g_string_append_printf (shown, "%s%d %s", shown->len > 0 ? ", " : "", divide->cycle,
                            divide->hemisphere > 0 ? "N" : "S");
}

gboolean
tf_study_read_divides (TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, FALSE);
  g_autoptr (GPtrArray) moved = tf_ledger_divides (ledger, study->name, error);
  if (moved == NULL)
    return FALSE;
  g_autoptr (GString) shown = g_string_new (NULL);
  g_autoptr (TfDivides) divides = tf_divides_new (&study->divide);
  for (guint k = 0; k < moved->len; k++)
    {
      const TfMovedDivide *m = g_ptr_array_index (moved, k);
      TfDivides *next = tf_divides_with (divides, m->cycle, m->hemisphere, m->times, m->lats, m->n);
      tf_divides_unref (divides);
      divides = next;
      note_shown (shown, m);
    }
  g_clear_pointer (&study->divides, tf_divides_unref);
  if (moved->len > 0)
    study->divides = g_steal_pointer (&divides);
  g_free (study->divides_shown);
  study->divides_shown = shown->len > 0 ? g_strdup (shown->str) : NULL;
  return TRUE;
}
