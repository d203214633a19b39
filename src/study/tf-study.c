/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-study-private.h"

G_DEFINE_QUARK (tf - study - error - quark, tf_study_error)

#define SIEVE(member) offsetof (TfSieveParams, member)

const TfOption tf_sieve_options[] = {
  { "with-hints", TF_OPTION_BOOL, "", 0, 0, 1, NULL, N_ ("take hints in, counted apart"),
    SIEVE (with_hints) },
  { "cmd-max", TF_OPTION_NUMBER, "deg", 60, 0, 90, NULL, N_ ("farthest from the central meridian"),
    SIEVE (cmd_max_deg) },
  { "mu-min", TF_OPTION_NUMBER, "", 0, 0, 1, NULL, N_ ("least mu"), SIEVE (mu_min) },
  { "flux-min", TF_OPTION_NUMBER, "Mx", 0, 0, 1e25, NULL, N_ ("least unsigned flux"),
    SIEVE (flux_min_mx) },
  { "separation-min", TF_OPTION_NUMBER, "deg", 0, 0, 90, NULL, N_ ("least separation of the poles"),
    SIEVE (separation_min_deg) },
  { "with-ephemeral", TF_OPTION_BOOL, "", 0, 0, 1, NULL, N_ ("take ephemeral regions in"),
    SIEVE (with_ephemeral) },
  { "with-models", TF_OPTION_BOOL, "", 0, 0, 1, NULL, N_ ("take model maps in"),
    SIEVE (with_models) },
  { NULL },
};

TfStudy *
tf_study_new_default (void)
{
  TfStudy *study = g_new0 (TfStudy, 1);
  study->name = g_strdup ("default");
  tf_options_reset (tf_sieve_options, &study->sieve);
  tf_options_reset (tf_verdict_options, &study->verdict);
  tf_options_reset (tf_divide_options, &study->divide);
  tf_options_reset (tf_hale_options, &study->hale);
  tf_options_reset (tf_joy_options, &study->joy);
  tf_options_reset (tf_emergence_options, &study->emergence);
  return study;
}

void
tf_study_free (TfStudy *study)
{
  if (study == NULL)
    return;
  if (study->divides != NULL)
    tf_divides_unref (study->divides);
  g_free (study->divides_shown);
  g_free (study->name);
  g_free (study);
}

TfDivides *
tf_study_dup_divides (const TfStudy *study)
{
  return study->divides != NULL ? tf_divides_with_params (study->divides, &study->divide)
                                : tf_divides_new (&study->divide);
}

void
tf_findings_free (TfFindings *findings)
{
  if (findings == NULL)
    return;
  g_clear_pointer (&findings->sample, tf_sample_free);
  g_free (findings->verdicts);
  g_free (findings->marks);
  g_clear_pointer (&findings->left_out, g_hash_table_unref);
  g_clear_pointer (&findings->passed_without, g_hash_table_unref);
  g_clear_pointer (&findings->cannot_say, g_hash_table_unref);
  g_clear_pointer (&findings->hale, g_array_unref);
  g_clear_pointer (&findings->joy, g_array_unref);
  g_clear_pointer (&findings->what_if, g_array_unref);
  g_clear_pointer (&findings->dipoles, g_array_unref);
  g_clear_pointer (&findings->emergence, tf_emergence_free);
  g_clear_pointer (&findings->cautions, g_ptr_array_unref);
  g_free (findings);
}

/* -- the laws ------------------------------------------------------------------------------ */

TfVerdict *
tf_study_judge (const TfStudy *study, const TfSample *sample, double later_s)
{
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  guint n = tf_sample_get_n (sample);
  TfVerdict *verdicts = g_new0 (TfVerdict, n + 1);
  for (guint k = 0; k < n; k++)
    {
      TfSampleRow row = *tf_sample_get (sample, k);
      row.time = tf_time_add (row.time, -later_s);
      verdicts[k] = tf_verdict_judge (&row, divides, &study->verdict);
    }
  return verdicts;
}

/* Joy fits beside the Hale rows: every cycle and hemisphere that is there, then all. */
static GArray *
fit_joy (const TfFindings *findings, const TfStudy *study)
{
  GArray *fits = g_array_new (FALSE, FALSE, sizeof (TfJoyFit));
  for (guint k = 0; k < findings->hale->len; k++)
    {
      const TfHaleRow *row = &g_array_index (findings->hale, TfHaleRow, k);
      TfJoyFit fit = tf_joy_fit (findings->sample, findings->verdicts, row->cycle, row->hemisphere,
                                 &study->joy);
      g_array_append_val (fits, fit);
    }
  return fits;
}

/* Mean and median of all axis tilts of the sample, whatever the verdict. */
static void
average_tilts (TfFindings *findings)
{
  guint n = 0;
  double sum = 0.0;
  g_autofree double *tilts = g_new (double, tf_sample_get_n (findings->sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      double tilt = tf_sample_get (findings->sample, k)->axis_tilt_deg;
      if (isnan (tilt))
        continue;
      tilts[n++] = tilt;
      sum += tilt;
    }
  findings->mean_tilt_deg = n > 0 ? sum / n : NAN;
  findings->median_tilt_deg = tf_median (tilts, n);
}

static gboolean
complain_empty (const TfStudy *study, const GPtrArray *rows, TfLedger *ledger, GError **error)
{
  if (rows->len > 0)
    return FALSE;
  g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_EMPTY,
               study->sieve.with_hints
                   ? _ ("%s holds no mark and no hint to test a law on; fill it with frames first.")
                   : _ ("Nobody has marked a region in %s yet; mark some, or take the hints in "
                        "(--with-hints)."),
               tf_ledger_get_path (ledger));
  return TRUE;
}

TfFindings *
tf_study_run (const TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, NULL);
  const TfRowQuery query = { .marks = TRUE, .hints = study->sieve.with_hints };
  double floor = tf_study_even_floor (ledger, NULL);
  g_autoptr (GPtrArray) rows = tf_study_rows (ledger, &query, floor, error);
  if (rows == NULL || complain_empty (study, rows, ledger, error))
    return NULL;

  g_autoptr (TfFindings) findings = g_new0 (TfFindings, 1);
  findings->sample = tf_sample_new ();
  findings->left_out = g_hash_table_new (g_str_hash, g_str_equal);
  findings->passed_without = g_hash_table_new (g_str_hash, g_str_equal);
  findings->cannot_say = g_hash_table_new (g_str_hash, g_str_equal);
  findings->cautions = tf_notes_new ();
  findings->even_floor_gauss = floor;
  tf_study_take_rows (findings, study, rows);
  findings->verdicts = tf_study_judge (study, findings->sample, 0.0);
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    if (findings->verdicts[k].reason != NULL)
      tf_study_count (findings->cannot_say, findings->verdicts[k].reason);
  findings->hale = tf_hale_table (findings->sample, findings->verdicts, &study->hale);
  findings->joy = fit_joy (findings, study);
  findings->what_if = tf_study_what_if (study, findings->sample);
  findings->dipoles = tf_dipole_sums (findings->sample, findings->verdicts);
  findings->emergence = tf_emergence_new (findings->sample, &study->emergence);
  average_tilts (findings);
  tf_study_add_cautions (findings, study, rows);
  return g_steal_pointer (&findings);
}
