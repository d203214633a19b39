/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-sieve.h"
#include "tf-study-private.h"

/* What must be said beside the numbers of a study. */

static int
compare_text (gconstpointer a, gconstpointer b)
{
  return g_strcmp0 (*(char *const *)a, *(char *const *)b);
}

static void
note_instruments (TfFindings *findings, const TfStudy *study, const TfStudyRows *rows)
{
  g_autoptr (GPtrArray) instruments = g_ptr_array_new ();
  const char *last = NULL;
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      const char *name = tf_study_fact (rows, tf_sample_get (findings->sample, k)->row).instrument;
      if (name == NULL || name == last)
        continue;
      last = name;
      if (!g_ptr_array_find_with_equal_func (instruments, name, g_str_equal, NULL))
        g_ptr_array_add (instruments, (gpointer)name);
    }
  if (instruments->len < 2 || !tf_study_unscaled (findings, study, rows))
    return;
  g_ptr_array_sort (instruments, compare_text);
  g_ptr_array_add (instruments, NULL);
  g_autofree char *names = g_strjoinv (", ", (char **)instruments->pdata);
  tf_notes_add (findings->cautions, "instruments-unscaled-pooled", "s", names);
}

/* "B × 1.310 (A)": what was applied, and like whose field that is. */
static void
note_scales (TfFindings *findings, const TfStudy *study, const TfStudyRows *rows)
{
  g_autoptr (GString) names = g_string_new (NULL);
  for (guint k = 0; study->sieve.with_scales && rows->scales != NULL && k < rows->scales->len; k++)
    {
      const TfKeptScale *scale = g_ptr_array_index (rows->scales, k);
      g_string_append_printf (names, "%s%s × %.3f (%s)", names->len > 0 ? ", " : "",
                              scale->instrument, scale->factor, scale->reference);
    }
  if (names->len > 0)
    tf_notes_add (findings->cautions, "instruments-scaled", "s", names->str);
}

/* Where the rows of tables among the picks are from, and their licences. */
static void
note_outside (TfFindings *findings, const TfStudyRows *rows)
{
  g_autoptr (GPtrArray) sources = g_ptr_array_new_with_free_func (g_free);
  const char *last[2] = { NULL, NULL };
  guint n = 0;
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      TfStudyFact fact = tf_study_fact (rows, tf_sample_get (findings->sample, k)->row);
      if (!fact.outside || fact.source == NULL)
        continue;
      n++;
      if (g_strcmp0 (fact.source, last[0]) == 0 && g_strcmp0 (fact.licence, last[1]) == 0)
        continue;
      last[0] = fact.source;
      last[1] = fact.licence;
      gboolean bare = fact.licence == NULL || *fact.licence == '\0';
      g_autofree char *source = bare ? g_strdup (fact.source) : g_strdup_printf ("%s (%s)", fact.source, fact.licence);
      if (!g_ptr_array_find_with_equal_func (sources, source, g_str_equal, NULL))
        g_ptr_array_add (sources, g_steal_pointer (&source));
    }
  if (n == 0)
    return;
  g_ptr_array_add (sources, NULL);
  g_autofree char *names = g_strjoinv ("; ", (char **)sources->pdata);
  tf_notes_add (findings->cautions, "outside-rows", "is", (int)n, names);
}

/* While nothing is linked, or as far as picks lie at an end of what was seen of them. */
static void
note_sampling (TfFindings *findings, const TfStudy *study)
{
  guint n = tf_sample_get_n (findings->every), picks = tf_sample_get_n (findings->sample);
  gboolean linked = findings->sampling.passages < n;
  if (!linked)
    tf_notes_add (findings->cautions, "every-mark-is-its-own-passage", "");
  else if (findings->sampling.not_bracketed > 0)
    tf_notes_add (findings->cautions, "peak-not-bracketed", "ii",
                  (int)findings->sampling.not_bracketed, (int)picks);
  if (linked && study->sampling.rule == TF_SAMPLING_EVERY)
    tf_notes_add (findings->cautions, "every-mark-is-a-pick", "ii", (int)picks,
                  (int)tf_sample_count_regions (findings->sample));
}

/* How many verdicts lean on a minimum that a person entered. */
static void
note_provisional (TfFindings *findings, const TfStudy *study)
{
  guint leaning = 0;
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    leaning += g_strcmp0 (findings->verdicts[k].cycle.reason, "cycle-provisional") == 0;
  if (!isnan (study->divide.provisional_year))
    tf_notes_add (findings->cautions, "minimum-provisional", "di", study->divide.provisional_year,
                  (int)leaning);
}

/* "24 N, 25 S": the divides that a person moved. */
static void
note_divides (TfNotes *cautions, const TfStudy *study)
{
  g_autoptr (GString) names = g_string_new (NULL);
  int last = study->divides != NULL ? tf_divides_get_last (study->divides) : 0;
  for (int cycle = 2; cycle <= last; cycle++)
    for (int side = 1; side >= -1; side -= 2)
      if (tf_divides_is_moved (study->divides, cycle, side))
        g_string_append_printf (names, "%s%d %s", names->len > 0 ? ", " : "", cycle,
                                side > 0 ? "N" : "S");
  if (names->len > 0)
    tf_notes_add (cautions, "divides-moved", "s", names->str);
  if (study->divides_shown != NULL)
    tf_notes_add (cautions, "divides-shown", "s", study->divides_shown);
}

void
tf_study_copy_cautions (const TfNotes *before, const TfStudy *study, TfNotes *out)
{
  for (guint k = 0; k < tf_notes_get_n (before); k++)
    if (!g_str_has_prefix (tf_note_get_code (tf_notes_get (before, k)), "divides-"))
      tf_notes_add_copy (out, tf_notes_get (before, k));
  note_divides (out, study);
}

/* -- conditions that name what is not there ---------------------------------------------------- */

static gboolean
names_one (const TfCondition *c)
{
  static const char *const columns[] = { "passage", "region", "mark", NULL };
  return g_strv_contains (columns, c->column->name)
         && (c->is == TF_IS_EQUALS || c->is == TF_IS_NOT || c->is == TF_IS_ONE_OF
             || c->is == TF_IS_NONE_OF);
}

static gboolean
is_there (const TfStudyRows *rows, const TfColumn *column, const char *name)
{
  for (guint k = 0; k < rows->rows->len; k++)
    {
      const TfExportRow row = { .row = g_ptr_array_index (rows->rows, k) };
      g_autofree char *text = tf_column_dup_text (column, &row);
      if (strcmp (text, name) == 0)
        return TRUE;
    }
  return FALSE;
}

/* A passage has another name when an earlier frame of it is filled in: a study that names the old one
 * says so, and does not only become smaller. */
static void
note_named (TfNotes *cautions, const GPtrArray *conditions, const TfStudyRows *rows)
{
  for (guint k = 0; rows->rows != NULL && k < conditions->len; k++)
    {
      const TfCondition *c = g_ptr_array_index (conditions, k);
      for (guint v = 0; names_one (c) && v < c->n; v++)
        if (c->texts[v] != NULL && !is_there (rows, c->column, c->texts[v]))
          tf_notes_add (cautions, "condition-names-nothing", "ss", c->column->name, c->texts[v]);
    }
}

void
tf_study_add_cautions (TfFindings *findings, const TfStudy *study, const TfStudyRows *rows)
{
  TfNotes *cautions = findings->cautions;
  note_sampling (findings, study);
  if (findings->n_hints > 0)
    tf_notes_add (cautions, "hints-counted", "ii", (int)findings->n_hints, (int)findings->n_marks);
  note_outside (findings, rows);
  note_named (cautions, study->mark_conditions, rows);
  note_named (cautions, study->region_conditions, rows);
  note_instruments (findings, study, rows);
  note_scales (findings, study, rows);
  note_divides (cautions, study);
  note_provisional (findings, study);
  if (findings->n_other_floor > 0)
    tf_notes_add (cautions, "rows-with-other-floor", "id", (int)findings->n_other_floor,
                  findings->even_floor_gauss);
  if (findings->simulated > 0)
    tf_notes_add (cautions, "rows-simulated", "i", (int)findings->simulated);
}
