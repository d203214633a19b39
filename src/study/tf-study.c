/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-distinct.h"
#include "tf-many.h"
#include "tf-sieve.h"
#include "tf-study-private.h"

G_DEFINE_QUARK (tf - study - error - quark, tf_study_error)

#define SIEVE(member) offsetof (TfSieveParams, member)

static const char *const ephemeral_names[] = { "left-out", "taken-in", "alone", NULL };

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
  { "ephemeral", TF_OPTION_CHOICE, "", TF_EPHEMERAL_OUT, 0, 2, ephemeral_names,
    N_ ("what to do with ephemeral regions"), SIEVE (ephemeral) },
  { "with-scales", TF_OPTION_BOOL, "", 0, 0, 1, NULL,
    N_ ("multiply fluxes by the scales of instruments that people kept"), SIEVE (with_scales) },
  { "with-models", TF_OPTION_BOOL, "", 0, 0, 1, NULL, N_ ("take model maps in"),
    SIEVE (with_models) },
  { NULL },
};

TfStudy *
tf_study_new_default (void)
{
  TfStudy *study = g_new0 (TfStudy, 1);
  study->name = g_strdup ("default");
  study->mark_conditions = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_condition_free);
  study->region_conditions = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_condition_free);
  study->even_floor_gauss = NAN;
  tf_options_reset (tf_sieve_options, &study->sieve);
  tf_options_reset (tf_sampling_options, &study->sampling);
  tf_options_reset (tf_verdict_options, &study->verdict);
  tf_options_reset (tf_divide_options, &study->divide);
  tf_options_reset (tf_hale_options, &study->hale);
  tf_options_reset (tf_joy_options, &study->joy);
  tf_options_reset (tf_drift_options, &study->drift);
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
  g_ptr_array_unref (study->mark_conditions);
  g_ptr_array_unref (study->region_conditions);
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
  g_clear_pointer (&findings->every, tf_sample_free);
  tf_study_taken_unref (findings->taken);
  g_free (findings->verdicts);
  g_free (findings->held);
  g_clear_pointer (&findings->changing, g_hash_table_unref);
  g_free (findings->marks);
  g_clear_pointer (&findings->left_out, g_hash_table_unref);
  g_clear_pointer (&findings->passed_without, g_hash_table_unref);
  g_clear_pointer (&findings->cannot_say, g_hash_table_unref);
  g_clear_pointer (&findings->hale, g_array_unref);
  g_clear_pointer (&findings->joy, g_array_unref);
  g_clear_pointer (&findings->what_if, g_array_unref);
  g_clear_pointer (&findings->comparisons, tf_comparisons_free);
  g_clear_pointer (&findings->hale_bins, g_ptr_array_unref);
  g_clear_pointer (&findings->joy_bins, g_array_unref);
  g_clear_pointer (&findings->scatter_bins, g_array_unref);
  g_clear_pointer (&findings->drifts, g_array_unref);
  g_clear_pointer (&findings->dipoles, g_array_unref);
  g_clear_pointer (&findings->emergence, tf_emergence_free);
  g_clear_pointer (&findings->cautions, g_ptr_array_unref);
  g_free (findings);
}

/* -- the laws ------------------------------------------------------------------------------ */

typedef struct
{
  const TfSample *sample;
  const TfDivides *divides;
  const TfVerdictParams *params;
  double later_s;
  TfVerdict *verdicts;
} Judging;

static void
judge_rows (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Judging *judging = data;
  for (guint k = first; k < first + n; k++)
    {
      const TfSampleRow *row = tf_sample_get (judging->sample, k);
      TfSampleRow earlier;
      if (fabs (judging->later_s) > 0.0)
        {
          earlier = *row;
          earlier.time = tf_time_add (row->time, -judging->later_s);
          row = &earlier;
        }
      judging->verdicts[k] = tf_verdict_judge (row, judging->divides, judging->params);
    }
}

TfVerdict *
tf_study_judge_with (const TfStudy *study, const TfSample *sample, double later_s, TfWorkers *workers)
{
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  guint n = tf_sample_get_n (sample);
  Judging judging = { sample, divides, &study->verdict, later_s, tf_new_many (TfVerdict, n + 1) };
  const TfWork work = { .workers = workers };
  tf_bands_run (&work, n, judge_rows, &judging);
  return judging.verdicts;
}

TfVerdict *
tf_study_judge (const TfStudy *study, const TfSample *sample, double later_s)
{
  return tf_study_judge_with (study, sample, later_s, NULL);
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
  g_autofree double *tilts = tf_new_many (double, tf_sample_get_n (findings->sample) + 1);
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

/* The marks behind the picks: those of every passage that was picked. */
static void
count_marks (TfFindings *findings, const TfStudyRows *rows)
{
  guint n = tf_sample_get_n (findings->sample);
  g_autoptr (TfDistinct) picked = tf_distinct_new (n);
  findings->marks = tf_new0_many (gint64, n + 1);
  for (guint k = 0; k < n; k++)
    {
      const TfSampleRow *pick = tf_sample_get (findings->sample, k);
      const TfStudyFact fact = tf_study_fact (rows, pick->row);
      tf_distinct_add (picked, pick->passage);
      findings->simulated += fact.simulated != 0;
      findings->marks[k] = fact.mark;
      findings->n_other_floor += !tf_study_fact_has_floor (&fact, findings->even_floor_gauss);
    }
  for (guint k = 0; k < tf_sample_get_n (findings->every); k++)
    {
      const TfSampleRow *mark = tf_sample_get (findings->every, k);
      if (tf_distinct_find (picked, mark->passage) == G_MAXUINT)
        continue;
      findings->n_outside += mark->origin == TF_ORIGIN_OUTSIDE;
      findings->n_marks += mark->origin != TF_ORIGIN_HINT && mark->origin != TF_ORIGIN_OUTSIDE;
      findings->n_hints += mark->origin == TF_ORIGIN_HINT;
    }
}

static TfFindings *
findings_new (double floor)
{
  TfFindings *findings = g_new0 (TfFindings, 1);
  findings->left_out = g_hash_table_new (g_str_hash, g_str_equal);
  findings->passed_without = g_hash_table_new (g_str_hash, g_str_equal);
  findings->cannot_say = g_hash_table_new (g_str_hash, g_str_equal);
  findings->changing = g_hash_table_new (g_direct_hash, g_direct_equal);
  findings->cautions = tf_notes_new ();
  findings->even_floor_gauss = floor;
  return findings;
}

void
tf_study_hold (const TfFindings *findings, const TfSample *sample, TfVerdict *verdicts)
{
  guint n = g_hash_table_size (findings->changing) == 0 ? 0 : tf_sample_get_n (sample);
  for (guint k = 0; k < n; k++)
    if (verdicts[k].kind != TF_VERDICT_CANNOT_SAY
        && g_hash_table_contains (findings->changing,
                                  GUINT_TO_POINTER (tf_sample_get (sample, k)->passage)))
      {
        verdicts[k].kind = TF_VERDICT_CANNOT_SAY;
        verdicts[k].reason = "hale-changes";
      }
}

/* As tf_held() where every mark is its own passage: it holds to itself. */
static TfHeld *
hold_alone (const TfFindings *findings)
{
  guint n = tf_sample_get_n (findings->sample);
  TfHeld *held = tf_new0_many (TfHeld, n + 1);
  for (guint k = 0; k < n; k++)
    if (findings->verdicts[k].kind != TF_VERDICT_CANNOT_SAY
        && !(tf_sample_get (findings->sample, k)->mu < TF_HELD_MU))
      held[k].held = held[k].of = 1;
  return held;
}

/* Under "every mark" each speaks for itself. */
static void
hold (TfFindings *findings, const TfStudy *study, TfWorkers *workers)
{
  if (study->sampling.rule == TF_SAMPLING_EVERY)
    return;
  if (study->sampling.rule != TF_SAMPLING_MEAN
      && findings->sampling.passages == tf_sample_get_n (findings->every))
    {
      findings->held = hold_alone (findings);
      return;
    }
  g_autofree TfVerdict *every = tf_study_judge_with (study, findings->every, 0.0, workers);
  findings->held = tf_held (findings->every, every, findings->sample, findings->verdicts);
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    if (g_strcmp0 (findings->verdicts[k].reason, "hale-changes") == 0)
      g_hash_table_add (findings->changing,
                        GUINT_TO_POINTER (tf_sample_get (findings->sample, k)->passage));
}

static void
judge (TfFindings *findings, const TfStudy *study, TfWorkers *workers)
{
  guint same = 0, n = tf_sample_get_n (findings->sample);
  findings->verdicts = tf_study_judge_with (study, findings->sample, 0.0, workers);
  hold (findings, study, workers);
  for (guint k = 0; k < n; k += same)
    { /* rows as they come in time often have the same reason */
      const char *reason = findings->verdicts[k].reason;
      for (same = 1; k + same < n && findings->verdicts[k + same].reason == reason;)
        same++;
      if (reason != NULL)
        tf_study_count_more (findings->cannot_say, reason, same);
    }
}

static void
bin_shares (TfFindings *findings, const TfStudy *study)
{
  findings->hale_bins = g_ptr_array_new_with_free_func ((GDestroyNotify)g_array_unref);
  for (const TfHaleQuantity *q = tf_hale_quantities; q->name != NULL; q++)
    g_ptr_array_add (findings->hale_bins,
                     tf_hale_bins (findings->sample, findings->verdicts, q, &study->hale, NULL));
}

/* Tilt by |lat|; what is left of it above the fit over all by separation. */
static void
bin_tilts (TfFindings *findings, const TfStudy *study)
{
  guint all = tf_sample_get_n (findings->sample), n = 0;
  const TfJoyFit *fit = &g_array_index (findings->joy, TfJoyFit, findings->joy->len - 1);
  g_autofree double *lat = g_new (double, all + 1), *tilt = g_new (double, all + 1),
                    *separation = g_new (double, all + 1), *rest = g_new (double, all + 1);
  for (guint k = 0; k < all; k++)
    {
      const TfSampleRow *row = tf_sample_get (findings->sample, k);
      if (!tf_joy_uses (row, &findings->verdicts[k], &study->joy))
        continue;
      lat[n] = fabs (row->lat_deg);
      tilt[n] = row->axis_tilt_deg;
      separation[n] = row->separation_deg;
      rest[n] = tilt[n] - tf_joy_tilt (fit, (TfJoyForm)study->joy.form, lat[n]);
      n++;
    }
  findings->joy_bins = tf_bins (lat, tilt, n, 0.0, 50.0, 5.0, study->joy.level);
  findings->scatter_bins = tf_bins (separation, rest, n, 0.0, 20.0, 1.0, study->joy.level);
}

/* What the findings are parts of lives as long as they; where nobody can keep it they have a copy. */
static void
keep_every (TfFindings *findings, const TfStudyRows *rows)
{
  if (rows->taken != NULL)
    {
      findings->taken = tf_study_taken_ref ((TfStudyTaken *)rows->taken);
      return;
    }
  TfSample *every = findings->every, *sample = findings->sample;
  findings->every = tf_sample_copy (every);
  findings->sample = tf_sample_copy (sample);
  tf_sample_free (every);
  tf_sample_free (sample);
}

static void
compare (TfFindings *findings, const TfStudy *study)
{
  findings->comparisons = tf_compare (findings->sample, findings->verdicts, &study->joy);
}

static void
fit (TfFindings *findings, const TfStudy *study)
{
  findings->joy = fit_joy (findings, study);
  bin_tilts (findings, study);
}

static void
follow_drifts (TfFindings *findings, const TfStudy *study)
{
  findings->drifts = tf_drifts (findings->sample, findings->verdicts, &study->drift);
}

static void
sum_dipoles (TfFindings *findings, const TfStudy *study)
{
  findings->dipoles = tf_dipole_sums (findings->sample, findings->verdicts);
}

static void
follow_ages (TfFindings *findings, const TfStudy *study)
{
  findings->emergence = tf_emergence_new (findings->every, &study->emergence);
  average_tilts (findings);
}

/* What hangs on the sample, its verdicts and the table of shares alone: each fills its own members, so any number of
 * threads gives the same. The longest first. */
static void (*const laws[]) (TfFindings *findings, const TfStudy *study)
    = { compare, fit, bin_shares, sum_dipoles, follow_drifts, follow_ages };

typedef struct
{
  TfFindings *findings;
  const TfStudy *study;
} Law;

static void
run_law (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Law *law = data;
  laws[band](law->findings, law->study);
}

TfFindings *
tf_study_run_rows (const TfStudy *study, const TfStudyRows *rows, TfLedger *ledger, double floor,
                   gboolean what_if)
{
  gboolean many = tf_sample_get_n (rows->all) > 20000;
  g_autoptr (TfWorkers) workers = many ? tf_workers_new (0) : NULL;
  const TfWork work = { .workers = workers };
  TfFindings *findings = findings_new (floor);
  Law law = { findings, study };
  findings->every = tf_study_marks (study, rows, findings);
  findings->sample = tf_study_picks (study, rows, findings->every, findings);
  findings->regions = tf_sample_count_regions (findings->sample);
  count_marks (findings, rows);
  judge (findings, study, workers);
  findings->hale = tf_hale_table (findings->sample, findings->verdicts, &study->hale);
  tf_bands_run (&work, G_N_ELEMENTS (laws) * TF_BAND_ROWS, run_law, &law);
  findings->what_if = what_if ? tf_study_what_if (study, rows, findings, ledger, workers)
                              : g_array_new (FALSE, FALSE, sizeof (TfWhatIf));
  keep_every (findings, rows);
  tf_study_add_cautions (findings, study, rows);
  return findings;
}

TfFindings *
tf_study_run_sample (const TfStudy *study, const TfSample *all)
{
  g_return_val_if_fail (study != NULL && all != NULL, NULL);
  const TfStudyRows rows = { .all = (TfSample *)all };
  return tf_study_run_rows (study, &rows, NULL, NAN, TRUE);
}

gboolean
tf_study_complain_empty (const TfStudy *study, guint n, TfLedger *ledger, GError **error)
{
  if (n > 0)
    return FALSE;
  g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_EMPTY,
               study->sieve.with_hints
                   ? _ ("%s holds no mark and no hint to test a law on; fill it with frames first.")
                   : _ ("Nobody has marked a region in %s yet; mark some, or take the hints in "
                        "(--with-hints)."),
               tf_ledger_get_path (ledger));
  return TRUE;
}

/* Regions and passages are numbered in the order in which they first come, from 1: the draws of a
 * bootstrap then do not hang on a ledger's local keys, and a bundle's rows give the same. */
TfSample *
tf_study_sample_rows (const GPtrArray *rows)
{
  TfSample *all = tf_sample_new_sized (rows->len);
  g_autoptr (TfDistinct) regions = tf_distinct_new (rows->len);
  g_autoptr (TfDistinct) passages = tf_distinct_new (rows->len);
  for (guint k = 0; k < rows->len; k++)
    {
      TfSampleRow row;
      tf_study_row (g_ptr_array_index (rows, k), &row);
      row.row = k;
      row.region = tf_distinct_add (regions, row.region) + 1;
      row.passage = tf_distinct_add (passages, row.passage) + 1;
      tf_sample_add (all, &row);
    }
  return all;
}

TfFindings *
tf_study_run (const TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, NULL);
  g_autoptr (TfStudyTaken) taken = tf_study_take (study, ledger, error);
  return taken != NULL ? tf_study_run_taken (study, taken, ledger) : NULL;
}
