/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <stdio.h>

#include "tf-tables.h"

/* What `laws` tells a person: tables first, then what would have been otherwise, then the sentences
 * and cautions. A star marks what leans on a provisional minimum. */

static const char *
side_name (int hemisphere)
{
  return hemisphere > 0 ? "N" : hemisphere < 0 ? "S" : _ ("both");
}

static char *
dup_cycle (int cycle, guint leaning)
{
  return cycle == 0 ? g_strdup_printf ("%s%s", _ ("all"), leaning > 0 ? "*" : "")
                    : g_strdup_printf ("%d%s", cycle, leaning > 0 ? "*" : "");
}

/* A number with that many digits, or a dash where there is none. */
static char *
dup_number (double value, int digits, gboolean with_sign)
{
  if (!isfinite (value))
    return g_strdup ("–");
  return with_sign ? g_strdup_printf ("%+.*f", digits, value)
                   : g_strdup_printf ("%.*f", digits, value);
}

static char *
dup_range (TfInterval range, double factor, int digits, gboolean with_sign)
{
  g_autofree char *low = dup_number (factor * range.low, digits, with_sign),
                  *high = dup_number (factor * range.high, digits, with_sign);
  if (!isfinite (range.low) || !isfinite (range.high))
    return g_strdup ("–");
  return g_strdup_printf (with_sign ? _ ("%s to %s") : "%s–%s", low, high);
}

static char *
dup_chance (double p)
{
  return isnan (p)    ? g_strdup ("–")
         : p < 0.0005 ? g_strdup ("< 0.001")
                      : g_strdup_printf ("%.3f", p);
}

static void
print_table (TfTable *table)
{
  g_autofree char *text = tf_table_dup_text (table);
  fputs (text, stdout);
}

/* Draws from regions that all do the same are all the same: no interval. */
static gboolean
says_something (const TfHaleRow *row)
{
  return row->breaks > 0 && row->keeps > 0;
}

static void
print_hale (const TfFindings *findings, const TfStudy *study)
{
  const char *const heads[] = { _ ("cycle"),   _ ("side"),      _ ("n"),
                                _ ("regions"), _ ("breaks"),    _ ("share %"),
                                _ ("exact"),   _ ("by region"), _ ("at least"),
                                _ ("at most"), _ ("by error"),  _ ("cannot say"),
                                NULL };
  const TfInterval none = { NAN, NAN };
  g_autoptr (TfTable) table = tf_table_new (2, heads);
  for (guint k = 0; k < findings->hale->len; k++)
    {
      const TfHaleRow *r = &g_array_index (findings->hale, TfHaleRow, k);
      g_autofree char *cycle = dup_cycle (r->cycle, r->leaning),
                      *share = dup_number (100 * r->share, 1, FALSE),
                      *exact = dup_range (r->clopper_pearson, 100, 1, FALSE),
                      *cluster = dup_range (says_something (r) ? r->cluster : none, 100, 1, FALSE),
                      *low = dup_number (100 * r->bounds.low, 1, FALSE),
                      *high = dup_number (100 * r->bounds.high, 1, FALSE),
                      *error = dup_number (100 * r->expected_false, 2, FALSE);
      tf_table_add (table, "%s\t%s\t%u\t%u\t%u\t%s\t%s\t%s\t%s\t%s\t%s\t%u", cycle,
                    side_name (r->hemisphere), r->n, r->regions, r->breaks, share, exact, cluster,
                    low, high, error, r->cannot_say);
    }
  printf (_ ("\nHale's law: the share that breaks it, in %%, with %.0f %% intervals\n"),
          100 * study->hale.level);
  print_table (table);
}

static void
print_joy (const TfFindings *findings, const TfStudy *study)
{
  const char *const heads[] = {
    _ ("cycle"),    _ ("side"),         _ ("n"),         _ ("regions"), _ ("slope"), _ ("interval"),
    _ ("median °"), _ ("axial mean °"), _ ("scatter °"), NULL
  };
  g_autoptr (TfTable) table = tf_table_new (2, heads);
  for (guint k = 0; k < findings->joy->len; k++)
    {
      const TfJoyFit *f = &g_array_index (findings->joy, TfJoyFit, k);
      g_autofree char *cycle = dup_cycle (f->cycle, f->leaning),
                      *slope = dup_number (f->slope, 3, TRUE),
                      *ci = dup_range (f->slope_ci, 1, 3, TRUE),
                      *median = dup_number (f->median_tilt_deg, 1, TRUE),
                      *axial = dup_number (f->axial_mean_deg, 1, TRUE),
                      *scatter = dup_number (f->scatter_deg, 1, FALSE);
      tf_table_add (table, "%s\t%s\t%u\t%u\t%s\t%s\t%s\t%s\t%s", cycle, side_name (f->hemisphere),
                    f->n, f->regions, slope, ci, median, axial, scatter);
    }
  printf (_ ("\nJoy's law: %s, %s; slope in %s, its interval by region\n"),
          tf_joy_form_names[study->joy.form], tf_joy_estimator_names[study->joy.estimator],
          tf_joy_unit ((TfJoyForm)study->joy.form));
  print_table (table);
}

/* "24 N", "odd", "up to 3.1e+21 Mx" */
static char *
dup_group (const TfGroup *group)
{
  if (group->parity != TF_PARITY_ANY)
    return g_strdup (group->parity == TF_PARITY_ODD ? _ ("odd") : _ ("even"));
  if (group->size >= 0)
    return g_strdup (group->size == 0 ? _ ("regions") : _ ("ephemeral"));
  if (group->flux_from_mx > 0.0)
    return g_strdup_printf (_ ("above %.1e Mx"), group->flux_from_mx);
  if (group->flux_to_mx > 0.0)
    return g_strdup_printf (_ ("up to %.1e Mx"), group->flux_to_mx);
  g_autofree char *cycle = dup_cycle (group->cycle, 0);
  return group->hemisphere == 0 ? g_steal_pointer (&cycle)
                                : g_strdup_printf ("%s %s", cycle, side_name (group->hemisphere));
}

static void
print_comparisons (const TfFindings *findings)
{
  const TfComparisons *found = findings->comparisons;
  const char *const heads[] = { _ ("first"),  _ ("second"), _ ("regions"), _ ("breaks"), _ ("p"),
                                _ ("p Holm"), _ ("slopes"), _ ("p"),       _ ("p Holm"), NULL };
  g_autoptr (TfTable) table = tf_table_new (2, heads);
  for (guint k = 0; k < found->rows->len; k++)
    {
      const TfComparison *c = &g_array_index (found->rows, TfComparison, k);
      g_autofree char *first = dup_group (&c->groups[0]), *second = dup_group (&c->groups[1]),
                      *p = dup_chance (c->share_p), *holm = dup_chance (c->share_p_holm),
                      *a = dup_number (c->slope[0], 3, TRUE),
                      *b = dup_number (c->slope[1], 3, TRUE), *slope_p = dup_chance (c->slope_p),
                      *slope_holm = dup_chance (c->slope_p_holm);
      tf_table_add (table, "%s\t%s\t%u, %u\t%u, %u\t%s\t%s\t%s, %s\t%s\t%s", first, second,
                    c->regions[0], c->regions[1], c->breaks[0], c->breaks[1], p, holm, a, b,
                    slope_p, slope_holm);
    }
  if (found->rows->len == 0)
    return;
  printf (_ ("\nSide by side: shares by Fisher's exact test on regions, slopes by their bootstrap; "
             "chances as they are\nand by Holm for %u comparisons of shares and %u of slopes\n"),
          found->n_shares, found->n_slopes);
  print_table (table);
}

static void
add_what_if (TfTable *table, const TfWhatIf *row)
{
  g_autofree char *share = dup_number (100 * row->share, 2, FALSE),
                  *slope = dup_number (row->slope, 3, TRUE);
  const char *star = row->leaning > 0 ? "*" : "";
  if (row->missing == NULL)
    tf_table_add (table, "%s%s\t%u\t%u\t%s\t%u\t%s", _ (row->title), star, row->n, row->breaks,
                  share, row->n_tilts, slope);
  else
    tf_table_add (table, "%s\t–\t–\t–\t–\t%s", _ (row->title), tf_what_if_missing (row->missing));
}

static void
print_what_if (const TfFindings *findings)
{
  const char *const heads[]
      = { _ ("choice"), _ ("n"), _ ("breaks"), _ ("share %"), _ ("tilts"), _ ("slope"), NULL };
  g_autoptr (TfTable) cycles = tf_table_new (1, heads), others = tf_table_new (1, heads);
  for (guint k = 0; k < G_N_ELEMENTS (findings->cycle_choice); k++)
    {
      TfWhatIf row = findings->cycle_choice[k];
      static const char *const titles[]
          = { N_ ("by the date alone"), N_ ("by latitude, unsure ones as the likelier"),
              N_ ("by latitude, unsure ones left out") };
      row.title = titles[k];
      add_what_if (cycles, &row);
    }
  for (guint k = 0; k < findings->what_if->len; k++)
    {
      const TfWhatIf *row = &g_array_index (findings->what_if, TfWhatIf, k);
      if (!g_str_has_prefix (row->name, "cycle-"))
        add_what_if (others, row);
    }
  printf (_ ("\nThe cycle told in three ways\n"));
  print_table (cycles);
  printf (_ ("\nWhat if: each choice alone, all else as chosen\n"));
  print_table (others);
}

static void
print_dipoles (const TfFindings *findings)
{
  const char *const heads[] = { _ ("cycle"), _ ("side"),  _ ("verdict"),   _ ("regions"),
                                _ ("sum G"), _ ("error"), _ ("costliest"), NULL };
  g_autoptr (TfTable) table = tf_table_new (3, heads);
  guint n = 0;
  for (guint k = 0; k < findings->dipoles->len; k++)
    {
      const TfDipoleSum *sum = &g_array_index (findings->dipoles, TfDipoleSum, k);
      if (sum->regions == 0)
        continue;
      g_autofree char *cycle = dup_cycle (sum->cycle, 0),
                      *gauss = dup_number (sum->sum_gauss, 4, TRUE),
                      *error = dup_number (sum->sigma_gauss, 4, FALSE),
                      *cost = dup_number (sum->costliest < 0 ? NAN : sum->costliest_gauss, 4, TRUE);
      tf_table_add (table, "%s\t%s\t%s\t%u\t%s\t%s\t%s", cycle, side_name (sum->hemisphere),
                    sum->verdict < 0 ? _ ("all") : tf_verdict_name ((TfVerdictKind)sum->verdict),
                    sum->regions, gauss, error, cost);
      n++;
    }
  if (n == 0)
    return;
  printf (
      _ ("\nAxial dipole that the regions add, and the one that works most against its cycle\n"));
  print_table (table);
}

static void
print_drift (const TfFindings *findings)
{
  const char *const heads[] = { _ ("cycle"),    _ ("side"),    _ ("n"),      _ ("° a year"),
                                _ ("interval"), _ ("start °"), _ ("months"), NULL };
  g_autoptr (TfTable) table = tf_table_new (2, heads);
  guint n = 0;
  for (guint k = 0; k < findings->drifts->len; k++)
    {
      const TfDrift *drift = &g_array_index (findings->drifts, TfDrift, k);
      if (isnan (drift->slope_deg_per_year))
        continue;
      g_autofree char *cycle = dup_cycle (drift->cycle, 0),
                      *slope = dup_number (drift->slope_deg_per_year, 2, TRUE),
                      *ci = dup_range (drift->slope_ci, 1, 2, TRUE),
                      *start = dup_number (drift->start_deg, 1, FALSE),
                      *tau = dup_number (drift->tau_months, 0, FALSE);
      tf_table_add (table, "%s\t%s\t%u\t%s\t%s\t%s\t%s", cycle, side_name (drift->hemisphere),
                    drift->n, slope, ci, start, tau);
      n++;
    }
  if (n == 0)
    return;
  printf (
      _ ("\nDrift of latitude (Spörer's law), and start · exp (−t / months); Hathaway 2011: 28.0°, "
         "90 months\n"));
  print_table (table);
}

/* Sentences and cautions, broken at 98 columns. */
static void
print_wrapped (const char *sentence, const char *first)
{
  const glong most = 98;
  glong at = g_utf8_strlen (first, -1);
  g_auto (GStrv) words = g_strsplit (sentence, " ", -1);
  printf ("%s", first);
  for (char **word = words; *word != NULL; word++)
    {
      glong length = g_utf8_strlen (*word, -1);
      gboolean new_line = at + 1 + length > most && word > words;
      const char *gap = word == words ? "" : new_line ? "\n    " : " ";
      at = new_line ? 4 + length : at + length + 1;
      printf ("%s%s", gap, *word);
    }
  printf ("\n");
}

void
tf_batch_print_findings (const TfFindings *findings, const TfStudy *study)
{
  g_autofree char *words = tf_findings_dup_words (findings, study);
  g_auto (GStrv) sentences = g_strsplit (words, "\n", -1);
  for (char **sentence = sentences; *sentence != NULL; sentence++)
    print_wrapped (*sentence, "");
  print_hale (findings, study);
  print_joy (findings, study);
  print_comparisons (findings);
  print_what_if (findings);
  print_drift (findings);
  print_dipoles (findings);
  for (guint k = 0; k < tf_notes_get_n (findings->cautions); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (findings->cautions, k), FALSE);
      if (k == 0)
        printf ("\n");
      print_wrapped (text, "  ! ");
    }
}
