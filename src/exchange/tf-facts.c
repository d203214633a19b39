/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-export-private.h"
#include "tf-number.h"

/* What a table says of itself. English in every locale, so that a file does not depend on who
 * wrote it, and without the time of writing, so that equal rows make equal files.
 */

enum
{
  LISTED = 8 /* different values named, before "and N more" */
};

static void
clear_fact (gpointer data)
{
  g_free (((TfFact *)data)->text);
}

void
tf_facts_add (GArray *facts, const char *key, char *take)
{
  TfFact fact = { key, take };
  /* One fact is one line, whatever a source or a name holds. */
  g_strdelimit (fact.text, "\r\n", ' ');
  g_array_append_val (facts, fact);
}

/* A table's rows may be longer than a TfExportRow, which they begin with. */
static const TfExportRow *
row_at (const GArray *rows, guint k)
{
  return (const TfExportRow *)(gconstpointer)(rows->data
                                              + (gsize)k * g_array_get_element_size ((GArray *)rows));
}

/* The different texts that @get gives over the rows, with how often, in order of appearance. */
static char *
list_values (const GArray *rows, char *(*get) (const TfExportRow *row))
{
  g_autoptr (GHashTable) counts = g_hash_table_new (g_str_hash, g_str_equal);
  g_autoptr (GPtrArray) order = g_ptr_array_new_with_free_func (g_free);
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < rows->len; k++)
    {
      char *value = get (row_at (rows, k));
      guint n = GPOINTER_TO_UINT (g_hash_table_lookup (counts, value)) + 1;
      if (n == 1)
        g_ptr_array_add (order, g_strdup (value));
      g_hash_table_insert (counts, n == 1 ? g_ptr_array_index (order, order->len - 1) : value,
                           GUINT_TO_POINTER (n));
      g_free (value);
    }
  for (guint k = 0; k < MIN (order->len, LISTED); k++)
    {
      const char *value = g_ptr_array_index (order, k);
      guint n = GPOINTER_TO_UINT (g_hash_table_lookup (counts, value));
      g_string_append_printf (text, "%s%s (%u row%s)", k > 0 ? "; " : "",
                              *value != '\0' ? value : "not told", n, n == 1 ? "" : "s");
    }
  if (order->len > LISTED)
    g_string_append_printf (text, "; and %u more", order->len - LISTED);
  if (order->len == 0)
    g_string_append (text, "no rows");
  return g_string_free (text, FALSE);
}

static char *
method_of (const TfExportRow *row)
{
  return g_strdup (row->row->method != NULL ? row->row->method : "");
}

static char *
floor_of (const TfExportRow *row)
{
  const TfMeasure *m = &row->row->measure;
  if (m->floor_kind != TF_FLOOR_EVEN)
    return g_strdup (
        "local, 3 sigma as observed unless the method says otherwise: column floor_gauss");
  g_autofree char *value = tf_number_dup_form (m->floor_gauss, ".1f", FALSE);
  return g_strdup_printf ("even, %s G", value);
}

static void
add_study (GArray *facts, const TfStudy *study)
{
  if (study == NULL)
    return;
  g_autofree char *hale = tf_options_dup_canonical (tf_verdict_options, &study->verdict, "hale");
  g_autofree char *divide = tf_options_dup_canonical (tf_divide_options, &study->divide, "cycle");
  tf_facts_add (facts, "study", g_strdup (study->name != NULL ? study->name : "default"));
  tf_facts_add (facts, "judging",
       g_strdup_printf ("%s; %s; divides %s", hale, divide,
                        study->divides != NULL ? "as a person set them" : "computed"));
}

static GArray *
begin_facts (void)
{
  GArray *facts = g_array_new (FALSE, TRUE, sizeof (TfFact));
  g_array_set_clear_func (facts, clear_fact);
  tf_facts_add (facts, "program", g_strdup ("Tiltfield " TF_VERSION));
  return facts;
}

static void
end_facts (GArray *facts, const char *source, char *rows)
{
  tf_facts_add (facts, "source", g_strdup (source != NULL && *source != '\0' ? source : "not told"));
  tf_facts_add (facts, "rows", rows);
}

GArray *
tf_facts_new_plain (const char *source, guint n_rows)
{
  GArray *facts = begin_facts ();
  end_facts (facts, source, g_strdup_printf ("%u", n_rows));
  return facts;
}

GArray *
tf_facts_new (const GArray *rows, const TfStudy *study, const char *source)
{
  GArray *facts = begin_facts ();
  guint hints = 0;
  for (guint k = 0; k < rows->len; k++)
    hints += row_at (rows, k)->row->is_hint != 0;
  tf_facts_add (facts, "method", list_values (rows, method_of));
  tf_facts_add (facts, "floor", list_values (rows, floor_of));
  tf_facts_add (facts, "convention",
       g_strdup ("longitudes west positive; leading is the western pole; axis_tilt_deg positive "
                 "when the leader is "
                 "equatorward, in both hemispheres; latitude and hemisphere are those of the "
                 "poles' midpoint; flux in Mx, "
                 "field in G, area in millionths of the hemisphere"));
  add_study (facts, study);
  end_facts (facts, source, g_strdup_printf ("%u, of which hints %u", rows->len, hints));
  return facts;
}
