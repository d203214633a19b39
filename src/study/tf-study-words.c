/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-study-private.h"

/* The numbers as they would stand in a paper: short whole sentences, a line each, so that a translator
 * can turn them. */

static const TfHaleRow *
all_cycles (const TfFindings *findings)
{
  for (guint k = 0; k < findings->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (findings->hale, TfHaleRow, k);
      if (row->cycle == 0 && row->hemisphere == 0)
        return row;
    }
  return NULL;
}

static const TfJoyFit *
all_tilts (const TfFindings *findings)
{
  for (guint k = 0; k < findings->joy->len; k++)
    {
      const TfJoyFit *fit = &g_array_index (findings->joy, TfJoyFit, k);
      if (fit->cycle == 0 && fit->hemisphere == 0)
        return fit;
    }
  return NULL;
}

/* What a row was left out by, or lacks. Conditions that a person built are their own words. */
static const char *
sieve_words (const char *key)
{
  static const char *const words[][2] = {
    { "beyond-the-sampling-rule", N_ ("the sampling rule") },
    { "cmd-beyond", N_ ("distance from the central meridian") },
    { "ephemeral", N_ ("being ephemeral") },
    { "flux-below", N_ ("unsigned flux") },
    { "model-map", N_ ("being on a model map") },
    { "mu-below", N_ ("μ") },
    { "not-ephemeral", N_ ("not being ephemeral") },
    { "outside-hint", N_ ("being a hint of an outside table") },
    { "separation-below", N_ ("separation of the poles") },
    { "unipolar-hint", N_ ("being a hint of one polarity") },
  };
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    if (strcmp (key, words[k][0]) == 0)
      return _ (words[k][1]);
  return key;
}

/* "distance from the central meridian (12); μ (3)"; NULL for nothing. */
static char *
dup_counts (GHashTable *counts)
{
  g_autoptr (GList) keys = g_list_sort (g_hash_table_get_keys (counts), (GCompareFunc)g_strcmp0);
  g_autoptr (GString) text = g_string_new (NULL);
  for (GList *l = keys; l != NULL; l = l->next)
    g_string_append_printf (text, "%s%s (%u)", text->len > 0 ? "; " : "", sieve_words (l->data),
                            GPOINTER_TO_UINT (g_hash_table_lookup (counts, l->data)));
  return text->len > 0 ? g_string_free (g_steal_pointer (&text), FALSE) : NULL;
}

/* What was left out, and what was not because its source does not say, by condition. */
static void
add_sieve (GString *out, const TfFindings *findings)
{
  g_autofree char *left_out = dup_counts (findings->left_out),
                  *passed = dup_counts (findings->passed_without);
  if (left_out != NULL)
    g_string_append_printf (out, _ ("Left out by %s.\n"), left_out);
  if (passed != NULL)
    g_string_append_printf (out, _ ("Taken although the source lacks what a condition asks about: %s.\n"),
                            passed);
}

static void
add_hale (GString *out, const TfFindings *findings, const TfStudy *study)
{
  const TfHaleRow *r = all_cycles (findings);
  if (r == NULL || r->n == 0)
    {
      g_string_append (out, _ ("No region of the sample has a verdict under Hale's law.\n"));
      return;
    }
  g_string_append_printf (
      out,
      _ ("Of %u picks (%u regions) with a verdict, %u (%.1f %%, %.0f %%: %.1f–%.1f %%) break "
         "Hale's law.\n"),
      r->n, r->regions, r->breaks, 100 * r->share, 100 * study->hale.level,
      100 * r->clopper_pearson.low, 100 * r->clopper_pearson.high);
  g_string_append_printf (
      out, _ ("%u more cannot be said: the share is at least %.1f, at most %.1f %%.\n"),
      r->cannot_say, 100 * r->bounds.low, 100 * r->bounds.high);
  if (isfinite (r->expected_false))
    g_string_append_printf (out, _ ("Errors of place alone would make %.2f %% seem to break it.\n"),
                            100 * r->expected_false);
}

/* The three ways of telling a cycle always stand together. */
static void
add_cycle_choice (GString *out, const TfFindings *findings)
{
  const TfWhatIf *c = findings->cycle_choice;
  if (c[0].n + c[1].n + c[2].n > 0)
    g_string_append_printf (out,
                            _ ("Told by the date alone the share is %.1f %% (n %u), by latitude "
                               "%.1f %% (n %u), with unsure cycles left out %.1f %% (n %u).\n"),
                            c[0].n > 0 ? 100 * c[0].share : 0.0, c[0].n,
                            c[1].n > 0 ? 100 * c[1].share : 0.0, c[1].n,
                            c[2].n > 0 ? 100 * c[2].share : 0.0, c[2].n);
}

static void
add_joy (GString *out, const TfFindings *findings, const TfStudy *study)
{
  const TfJoyFit *f = all_tilts (findings);
  if (f == NULL || f->n < 3)
    {
      g_string_append (out, _ ("There are too few tilts for Joy's law.\n"));
      return;
    }
  const char *form = tf_joy_form_names[study->joy.form],
             *estimator = tf_joy_estimator_names[study->joy.estimator];
  double separation = fmax (study->joy.separation_min_deg, study->sieve.separation_min_deg);
  g_autofree char *cut = separation > 0 ? g_strdup_printf (_ ("separation from %.1f°"), separation)
                                        : g_strdup (_ ("all separations"));
  g_string_append_printf (
      out,
      _ ("Joy's law (%s, %s, %s, %u picks, %u without polarity): slope %+.3f %s"), form, estimator,
      cut, f->n, f->no_polarity, f->slope, tf_joy_unit ((TfJoyForm)study->joy.form));
  if (isfinite (f->slope_ci.low))
    g_string_append_printf (out, _ (" (%.0f %%: %+.3f to %+.3f, clustered by region)"),
                            100 * study->joy.level, f->slope_ci.low, f->slope_ci.high);
  g_string_append (out, ".\n");
  if (isfinite (f->scatter_deg))
    g_string_append_printf (out, _ ("Tilts scatter about it by %.1f°.\n"), f->scatter_deg);
}

/* What changes the meaning of the numbers stands among them. */
static void
add_conditions (GString *out, const TfFindings *findings)
{
  static const char *const codes[]
      = { "outside-rows",                "instruments-unscaled-pooled", "instruments-scaled", "divides-moved", "divides-shown",
          "minimum-provisional",         "rows-simulated" };
  for (guint k = 0; k < G_N_ELEMENTS (codes); k++)
    {
      const TfNote *note = tf_notes_find (findings->cautions, codes[k]);
      g_autofree char *text = note != NULL ? tf_note_dup_text (note, FALSE) : NULL;
      if (text != NULL)
        g_string_append_printf (out, "%s\n", text);
    }
}

char *
tf_findings_dup_words (const TfFindings *findings, const TfStudy *study)
{
  static const char *const rules[] = { N_ ("the mark of greatest flux of each passage"),
                                       N_ ("the mark of each passage nearest the central meridian"),
                                       N_ ("the mean of each passage's marks"), N_ ("every mark") };
  GString *out = g_string_new (NULL);
  guint picks = tf_sample_get_n (findings->sample);
  const char *rule = _ (rules[study->sampling.rule]);
  if (findings->n_outside > 0)
    g_string_append_printf (
        out, _ ("Sample: %u picks, %s, from %u marks, %u hints and %u outside rows of %u regions.\n"),
        picks, rule, findings->n_marks, findings->n_hints, findings->n_outside, findings->regions);
  else
    g_string_append_printf (out,
                            _ ("Sample: %u picks, %s, from %u marks and %u hints of %u regions.\n"),
                            picks, rule, findings->n_marks, findings->n_hints, findings->regions);
  if (isfinite (findings->even_floor_gauss))
    g_string_append_printf (out,
                            _ ("Marks within %.0f° of the central meridian, even floor %.1f G.\n"),
                            study->sieve.cmd_max_deg, findings->even_floor_gauss);
  else
    g_string_append_printf (out, _ ("Marks within %.0f° of the central meridian.\n"),
                            study->sieve.cmd_max_deg);
  add_sieve (out, findings);
  add_hale (out, findings, study);
  add_cycle_choice (out, findings);
  add_joy (out, findings, study);
  add_conditions (out, findings);
  g_string_truncate (out, out->len - 1);
  return g_string_free (out, FALSE);
}
