/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-study-private.h"

/* What must be said beside the numbers of a study. */

static int
compare_text (gconstpointer a, gconstpointer b)
{
  return g_strcmp0 (*(char *const *)a, *(char *const *)b);
}

static void
note_instruments (TfNotes *cautions, const GPtrArray *rows)
{
  g_autoptr (GPtrArray) instruments = g_ptr_array_new ();
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      if (!g_ptr_array_find_with_equal_func (instruments, row->instrument, g_str_equal, NULL))
        g_ptr_array_add (instruments, row->instrument);
    }
  if (instruments->len < 2)
    return;
  g_ptr_array_sort (instruments, compare_text);
  g_ptr_array_add (instruments, NULL);
  g_autofree char *names = g_strjoinv (", ", (char **)instruments->pdata);
  tf_notes_add (cautions, "instruments-unscaled-pooled", "s", names);
}

/* "24 N, 25 S": the divides that a person moved. */
static void
note_divides (TfNotes *cautions, const TfStudy *study)
{
  g_autoptr (GString) names = g_string_new (NULL);
  for (const TfCycle *c = tf_cycles; study->divides != NULL && c->number != 0; c++)
    for (int side = 1; side >= -1; side -= 2)
      if (tf_divides_is_moved (study->divides, c->number, side))
        g_string_append_printf (names, "%s%d %s", names->len > 0 ? ", " : "", c->number,
                                side > 0 ? "N" : "S");
  if (names->len > 0)
    tf_notes_add (cautions, "divides-moved", "s", names->str);
  if (study->divides_shown != NULL)
    tf_notes_add (cautions, "divides-shown", "s", study->divides_shown);
  if (!isnan (study->divide.provisional_year))
    tf_notes_add (cautions, "minimum-provisional", "d", study->divide.provisional_year);
}

void
tf_study_add_cautions (TfFindings *findings, const TfStudy *study, const GPtrArray *rows)
{
  TfNotes *cautions = findings->cautions;
  tf_notes_add (cautions, "every-mark-is-its-own-passage", "");
  if (findings->n_hints > 0)
    tf_notes_add (cautions, "hints-counted", "ii", (int)findings->n_hints, (int)findings->n_marks);
  note_instruments (cautions, rows);
  note_divides (cautions, study);
  if (findings->n_other_floor > 0)
    tf_notes_add (cautions, "rows-with-other-floor", "id", (int)findings->n_other_floor,
                  findings->even_floor_gauss);
  if (findings->simulated > 0)
    tf_notes_add (cautions, "rows-simulated", "i", (int)findings->simulated);
}
