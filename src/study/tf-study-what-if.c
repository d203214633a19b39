/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bands.h"
#include "tf-constants.h"
#include "tf-joy-slope.h"
#include "tf-study-private.h"

/* What the results would be under another choice: each alone, all else as chosen. A choice changes a
 * copy of the study and says from where on the work must be done again. */

#define HALF_A_YEAR_S (0.5 * 365.25 * TF_DAY_S)

typedef enum
{
  FROM_FIT,      /* the verdicts stay */
  FROM_VERDICTS, /* the picks stay */
  FROM_PICKS,    /* the marks stay */
  FROM_MARKS,    /* the rows stay */
  FROM_ROWS,     /* other rows of the ledger */
} From;

/* A study with what its options cannot say. */
typedef struct
{
  TfStudy study;
  double later_s;       /* every minimum comes that much later */
  gboolean bracketed;   /* picks with their greatest flux between other marks alone */
  gboolean marks_alone; /* no hints */
  double floor_factor;  /* of the even floor; 0: each row's own floor */
  gboolean turn_scales; /* scales of instruments on where they are off, off where on */
  gboolean with_hints;  /* rows with the hints */
} Variant;

typedef struct
{
  const char *name, *title;
  From from;
  /* Changes the study; FALSE: it is so already. */
  gboolean (*change) (Variant *variant);
} Choice;

static gboolean
as_chosen (Variant *v)
{
  return TRUE;
}

/* -- the cycle ---------------------------------------------------------------------------------- */

static gboolean
by_date_only (Variant *v)
{
  gboolean other = !v->study.divide.by_date_only;
  v->study.divide.by_date_only = TRUE;
  return other;
}

static gboolean
by_latitude (Variant *v)
{
  TfDivideParams *p = &v->study.divide;
  p->by_date_only = FALSE;
  p->band_deg = p->near_lat_deg = 0.0;
  p->far_lat_deg = p->late_lat_deg = 90.0;
  return TRUE;
}

/* What the study would be by the default: what is unsure left out. */
static gboolean
unsure_left_out (Variant *v)
{
  gboolean other = v->study.divide.by_date_only || !(v->study.divide.band_deg > 0.0);
  TfDivideParams defaults;
  tf_options_reset (tf_divide_options, &defaults);
  v->study.divide.by_date_only = FALSE;
  if (!(v->study.divide.band_deg > 0.0))
    v->study.divide.band_deg = defaults.band_deg;
  return other;
}

static gboolean
minima_earlier (Variant *v)
{
  v->later_s = -HALF_A_YEAR_S;
  return TRUE;
}

static gboolean
minima_later (Variant *v)
{
  v->later_s = HALF_A_YEAR_S;
  return TRUE;
}

static gboolean
without_provisional (Variant *v)
{
  gboolean other = !isnan (v->study.divide.provisional_year);
  v->study.divide.provisional_year = NAN;
  return other;
}

/* -- the equator -------------------------------------------------------------------------------- */

static gboolean
set_zone (Variant *v, double deg)
{
  gboolean other = fabs (v->study.verdict.equator_deg - deg) > 1e-9;
  v->study.verdict.equator_deg = deg;
  return other;
}

static gboolean
zone_0 (Variant *v)
{
  return set_zone (v, 0.0);
}

static gboolean
zone_3 (Variant *v)
{
  return set_zone (v, 3.0);
}

static gboolean
zone_5 (Variant *v)
{
  return set_zone (v, 5.0);
}

static gboolean
zone_8 (Variant *v)
{
  return set_zone (v, 8.0);
}

/* -- the floor ---------------------------------------------------------------------------------- */

static gboolean
floor_lower (Variant *v)
{
  v->floor_factor = TF_WHAT_IF_LOWER;
  return TRUE;
}

static gboolean
floor_higher (Variant *v)
{
  v->floor_factor = TF_WHAT_IF_HIGHER;
  return TRUE;
}

static gboolean
floor_own (Variant *v)
{
  v->floor_factor = 0.0;
  return TRUE;
}

/* -- the fit ------------------------------------------------------------------------------------ */

static gboolean
set_estimator (Variant *v, TfJoyEstimator estimator)
{
  gboolean other = v->study.joy.estimator != (int)estimator;
  v->study.joy.estimator = estimator;
  return other;
}

static gboolean
least_squares (Variant *v)
{
  return set_estimator (v, TF_JOY_LEAST_SQUARES);
}

static gboolean
flux_weighted (Variant *v)
{
  return set_estimator (v, TF_JOY_FLUX_WEIGHTED);
}

static gboolean
robust (Variant *v)
{
  return set_estimator (v, TF_JOY_ROBUST);
}

static gboolean
bin_medians (Variant *v)
{
  return set_estimator (v, TF_JOY_BIN_MEDIANS);
}

static gboolean
steep_out (Variant *v)
{
  gboolean other = v->study.joy.steep_max_deg > 75.0 || v->study.verdict.steep_deg > 75.0;
  v->study.joy.steep_max_deg = v->study.verdict.steep_deg = 75.0;
  return other;
}

static gboolean
steep_in (Variant *v)
{
  gboolean other = v->study.joy.steep_max_deg < 90.0 || v->study.verdict.steep_deg < 90.0;
  v->study.joy.steep_max_deg = v->study.verdict.steep_deg = 90.0;
  return other;
}

static gboolean
separation (Variant *v)
{
  gboolean other = v->study.sieve.separation_min_deg < 2.5;
  v->study.sieve.separation_min_deg = fmax (2.5, v->study.sieve.separation_min_deg);
  return other;
}

/* -- the sampling ------------------------------------------------------------------------------- */

static gboolean
set_rule (Variant *v, TfSamplingRule rule)
{
  gboolean other = v->study.sampling.rule != (int)rule;
  v->study.sampling.rule = rule;
  return other;
}

static gboolean
rule_flux (Variant *v)
{
  return set_rule (v, TF_SAMPLING_FLUX);
}

static gboolean
rule_meridian (Variant *v)
{
  return set_rule (v, TF_SAMPLING_MERIDIAN);
}

static gboolean
rule_mean (Variant *v)
{
  return set_rule (v, TF_SAMPLING_MEAN);
}

static gboolean
rule_every (Variant *v)
{
  return set_rule (v, TF_SAMPLING_EVERY);
}

static gboolean
bracketed (Variant *v)
{
  v->bracketed = TRUE;
  return v->study.sampling.rule == TF_SAMPLING_FLUX;
}

static gboolean
set_limb (Variant *v, double cmd_deg)
{
  gboolean other = v->study.sieve.cmd_max_deg > cmd_deg;
  v->study.sieve.cmd_max_deg = fmin (cmd_deg, v->study.sieve.cmd_max_deg);
  return other;
}

static gboolean
limb_45 (Variant *v)
{
  return set_limb (v, 45.0);
}

static gboolean
limb_30 (Variant *v)
{
  return set_limb (v, 30.0);
}

static gboolean
limb_none (Variant *v)
{
  gboolean other = v->study.sieve.cmd_max_deg < 90.0 || v->study.sieve.mu_min > 0.0;
  v->study.sieve.cmd_max_deg = 90.0;
  v->study.sieve.mu_min = 0.0;
  return other;
}

/* -- the rows ----------------------------------------------------------------------------------- */

static gboolean
scales_on (Variant *v)
{
  v->turn_scales = !v->study.sieve.with_scales;
  v->study.sieve.with_scales = TRUE;
  return v->turn_scales;
}

static gboolean
scales_off (Variant *v)
{
  v->turn_scales = v->study.sieve.with_scales;
  v->study.sieve.with_scales = FALSE;
  return v->turn_scales;
}

static gboolean
hints_out (Variant *v)
{
  v->marks_alone = TRUE;
  return v->study.sieve.with_hints;
}

static gboolean
hints_in (Variant *v)
{
  gboolean other = !v->study.sieve.with_hints;
  v->study.sieve.with_hints = v->with_hints = TRUE;
  return other;
}

static gboolean
ephemeral_alone (Variant *v)
{
  gboolean other = v->study.sieve.ephemeral != TF_EPHEMERAL_ALONE;
  v->study.sieve.ephemeral = TF_EPHEMERAL_ALONE;
  return other;
}

/* The names stand in files: never renamed; new ones at a fit place. */
static const Choice choices[] = {
  { "as-chosen", N_ ("as chosen"), FROM_FIT, as_chosen },
  { "cycle-by-date-only", N_ ("cycle by the date alone"), FROM_VERDICTS, by_date_only },
  { "cycle-by-latitude-alone", N_ ("cycle by latitude, unsure ones read as the likelier"),
    FROM_VERDICTS, by_latitude },
  { "cycle-unsure-left-out", N_ ("cycle by latitude, unsure ones left out"), FROM_VERDICTS,
    unsure_left_out },
  { "minima-half-a-year-earlier", N_ ("minima half a year earlier"), FROM_VERDICTS,
    minima_earlier },
  { "minima-half-a-year-later", N_ ("minima half a year later"), FROM_VERDICTS, minima_later },
  { "provisional-minimum-left-out", N_ ("without the provisional minimum"), FROM_VERDICTS,
    without_provisional },
  { "equator-zone-0", N_ ("no zone left out at the equator"), FROM_VERDICTS, zone_0 },
  { "equator-zone-3", N_ ("3° left out at the equator"), FROM_VERDICTS, zone_3 },
  { "equator-zone-5", N_ ("5° left out at the equator"), FROM_VERDICTS, zone_5 },
  { "equator-zone-8", N_ ("8° left out at the equator"), FROM_VERDICTS, zone_8 },
  { "floor-a-fifth-lower", N_ ("even floor a fifth lower"), FROM_ROWS, floor_lower },
  { "floor-a-fifth-higher", N_ ("even floor a fifth higher"), FROM_ROWS, floor_higher },
  { "floor-of-each-mark", N_ ("each mark's own floor (local by default)"), FROM_ROWS, floor_own },
  { "least-squares", N_ ("least squares"), FROM_FIT, least_squares },
  { "flux-weighted", N_ ("least squares weighted by flux"), FROM_FIT, flux_weighted },
  { "robust", N_ ("robust line"), FROM_FIT, robust },
  { "bin-medians", N_ ("medians of 5° bins"), FROM_FIT, bin_medians },
  { "steep-left-out", N_ ("tilts above 75° left out"), FROM_VERDICTS, steep_out },
  { "steep-taken-in", N_ ("tilts above 75° taken in"), FROM_VERDICTS, steep_in },
  { "separation-above-2.5", N_ ("separation above 2.5°"), FROM_PICKS, separation },
  { "sampling-greatest-flux", N_ ("one mark a passage: greatest flux"), FROM_PICKS, rule_flux },
  { "sampling-central-meridian", N_ ("one mark a passage: nearest the central meridian"),
    FROM_PICKS, rule_meridian },
  { "sampling-mean", N_ ("mean over |CMD| ≤ 45°"), FROM_PICKS, rule_mean },
  { "sampling-every-mark", N_ ("every mark"), FROM_PICKS, rule_every },
  { "peak-bracketed", N_ ("greatest flux between other marks"), FROM_PICKS, bracketed },
  { "cmd-within-30", N_ ("|CMD| ≤ 30°"), FROM_MARKS, limb_30 },
  { "cmd-within-45", N_ ("|CMD| ≤ 45°"), FROM_MARKS, limb_45 },
  { "limb-taken-in", N_ ("to the limb"), FROM_MARKS, limb_none },
  { "instruments-scaled", N_ ("fluxes by the instruments' scales"), FROM_MARKS, scales_on },
  { "instruments-not-scaled", N_ ("fluxes as measured"), FROM_MARKS, scales_off },
  { "hints-left-out", N_ ("hints left out"), FROM_MARKS, hints_out },
  { "hints-taken-in", N_ ("hints taken in"), FROM_ROWS, hints_in },
  { "ephemeral-alone", N_ ("ephemeral regions alone"), FROM_PICKS, ephemeral_alone },
};

const char **
tf_what_if_names (void)
{
  const char **names = g_new0 (const char *, G_N_ELEMENTS (choices) + 1);
  for (guint k = 0; k < G_N_ELEMENTS (choices); k++)
    names[k] = choices[k].name;
  return names;
}

gboolean
tf_what_if_apply (const char *name, TfStudy *study)
{
  g_return_val_if_fail (name != NULL && study != NULL, FALSE);
  for (guint k = 0; k < G_N_ELEMENTS (choices); k++)
    {
      if (strcmp (choices[k].name, name) != 0)
        continue;
      Variant v = { .study = *study, .floor_factor = NAN };
      gboolean other = choices[k].change (&v);
      gboolean by_options = fabs (v.later_s) < 1 && !v.bracketed && isnan (v.floor_factor);
      if (!other || !by_options || choices[k].change == as_chosen)
        return FALSE;
      if (choices[k].change == hints_out)
        v.study.sieve.with_hints = FALSE;
      *study = v.study;
      return TRUE;
    }
  return FALSE;
}

const char *
tf_what_if_missing (const char *missing)
{
  if (g_strcmp0 (missing, "not-measured") == 0)
    return _ ("not measured");
  if (g_strcmp0 (missing, "not-linked") == 0)
    return _ ("marks are not linked");
  if (g_strcmp0 (missing, "no-scale") == 0)
    return _ ("no scale was kept");
  return g_strcmp0 (missing, "no-hints") == 0 ? _ ("no hints") : "";
}

/* -- one row ------------------------------------------------------------------------------------ */

/* Everything a choice may start from; shared by the threads, so nothing here changes. */
typedef struct
{
  const TfStudy *study;
  const TfStudyRows *rows;
  const TfFindings *findings;
  TfLedger *ledger; /* of the calling thread alone */
  GArray *out;      /* TfWhatIf; name NULL: not to be shown */
} Context;

static void
count_verdicts (TfWhatIf *row, const TfSample *sample, const TfVerdict *verdicts)
{
  guint n = tf_sample_get_n (sample);
  g_autofree guint32 *regions = g_new (guint32, n + 1);
  for (guint k = 0; k < n; k++)
    {
      if (verdicts[k].kind == TF_VERDICT_CANNOT_SAY)
        continue;
      regions[row->n++] = tf_sample_get (sample, k)->region;
      row->breaks += verdicts[k].kind == TF_VERDICT_BREAKS;
      row->leaning += g_strcmp0 (verdicts[k].cycle.reason, "cycle-provisional") == 0;
    }
  row->regions = tf_count_distinct (regions, row->n);
  row->share = row->n > 0 ? (double)row->breaks / row->n : NAN;
}

static void
fill_row (TfWhatIf *row, const Variant *v, const TfSample *sample, const TfVerdict *verdicts)
{
  const TfGroup all = tf_group_of (0, 0);
  TfJoyFit fit = tf_joy_slope (sample, verdicts, &all, &v->study.joy);
  row->slope = fit.slope;
  row->n_tilts = fit.n;
  count_verdicts (row, sample, verdicts);
}

static gboolean
is_kept (const Variant *v, const TfSampleRow *row)
{
  return !(v->bracketed && row->bracketed == 0) && !(v->marks_alone && row->origin == TF_ORIGIN_HINT);
}

/* The rows of @sample that the variant keeps, where its options cannot say so. */
static TfSample *
keep (const Variant *v, const TfSample *sample)
{
  TfSample *part = tf_sample_new_part (sample);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    if (is_kept (v, tf_sample_get (sample, k)))
      tf_sample_add_place (part, k);
  return part;
}

static void
fill_from (TfWhatIf *row, const Variant *v, From from, const TfStudyRows *rows,
           const TfFindings *findings)
{
  if (from == FROM_FIT)
    {
      fill_row (row, v, findings->sample, findings->verdicts);
      return;
    }
  g_autoptr (TfSample) marks = from >= FROM_MARKS ? tf_study_marks (&v->study, rows, NULL) : NULL;
  g_autoptr (TfSample) some = marks != NULL && v->marks_alone ? keep (v, marks) : NULL;
  const TfSample *every = some != NULL ? some : marks != NULL ? marks : findings->every;
  g_autoptr (TfSample) picks
      = from >= FROM_PICKS ? tf_study_picks (&v->study, rows, every, NULL) : NULL;
  g_autoptr (TfSample) part = v->bracketed ? keep (v, picks) : NULL;
  const TfSample *sample = part != NULL ? part : picks != NULL ? picks : findings->sample;
  g_autofree TfVerdict *verdicts = tf_study_judge (&v->study, sample, v->later_s);
  if (v->study.sampling.rule != TF_SAMPLING_EVERY)
    tf_study_hold (findings, sample, verdicts);
  fill_row (row, v, sample, verdicts);
}

/* How many of the rows lack a measure with that floor. */
static guint
count_unmeasured (const TfStudyRows *rows, double floor)
{
  guint n = 0;
  for (guint k = 0; k < tf_sample_get_n (rows->all); k++)
    {
      const TfStudyFact fact = tf_study_fact (rows, tf_sample_get (rows->all, k)->row);
      n += !tf_study_fact_has_floor (&fact, floor);
    }
  return n;
}

/* Whether what was counted when the rows were taken says all: then nothing is read. */
static gboolean
fill_from_counts (TfWhatIf *row, const Variant *v, const Context *context)
{
  const TfStudyTaken *taken = context->rows->taken;
  if (taken == NULL || taken->rows != NULL)
    return FALSE;
  gboolean lower = v->floor_factor < 1.0;
  if (v->with_hints && taken->n_hints == 0)
    row->missing = "no-hints";
  else if (v->floor_factor > 0.0 && !v->with_hints && taken->floor > 0.0 && taken->n_lacking[lower ? 0 : 1] > 0)
    {
      row->missing = "not-measured";
      row->n_missing = taken->n_lacking[lower ? 0 : 1];
    }
  else if (v->floor_factor <= 0.0 && taken->n_even == 0)
    fill_from (row, v, FROM_MARKS, context->rows, context->findings);
  else
    return FALSE;
  return TRUE;
}

/* Rows of the ledger with another floor, or with the hints. */
static void
fill_from_ledger (TfWhatIf *row, const Variant *v, const Context *context)
{
  if (fill_from_counts (row, v, context))
    return;
  double floor = context->findings->even_floor_gauss * v->floor_factor;
  g_autoptr (TfStudyTaken) taken = tf_study_take_with (&v->study, context->ledger, floor, NULL);
  const TfStudyRows rows = taken != NULL ? tf_study_taken_rows (taken) : (TfStudyRows){ 0 };
  if (taken != NULL && floor > 0.0 && !v->with_hints)
    row->n_missing = count_unmeasured (&rows, floor);
  if (taken == NULL || row->n_missing > 0)
    row->missing = "not-measured";
  else if (v->with_hints && tf_sample_get_n (rows.all) == tf_sample_get_n (context->rows->all))
    row->missing = "no-hints";
  else
    fill_from (row, v, FROM_MARKS, &rows, context->findings);
}

/* The same rows with the scales on, or off. Of one instrument there is nothing to say. */
static void
fill_scaled (TfWhatIf *row, const Variant *v, const Context *context)
{
  const TfStudyRows *own = context->rows;
  gboolean any = own->scales != NULL && own->scales->len > 0;
  guint n = any ? tf_sample_get_n (own->all) : 0;
  g_autoptr (TfSample) all = tf_sample_new_sized (n);
  for (guint k = 0; k < n; k++)
    tf_sample_add (all, tf_sample_get (own->all, k));
  if (tf_study_scale (all, own, v->study.sieve.with_scales) > 0)
    {
      TfStudyRows rows = *own;
      rows.all = all;
      fill_from (row, v, FROM_MARKS, &rows, context->findings);
    }
  else if (tf_study_unscaled (context->findings, context->study, own))
    row->missing = "no-scale";
  else
    row->name = NULL;
}

/* Choices among the marks of a passage say nothing while each has one. */
static gboolean
needs_passages (const Choice *choice)
{
  return g_str_has_prefix (choice->name, "sampling-") || choice->change == bracketed;
}

static gboolean
is_linked (const TfFindings *findings)
{
  return findings->sampling.passages < tf_sample_get_n (findings->every);
}

static void
add_choice (const Choice *choice, const Context *context, TfWhatIf *row)
{
  Variant v = { .study = *context->study, .floor_factor = 1.0 };
  if (!choice->change (&v))
    return;
  *row = (TfWhatIf){ .name = choice->name, .title = choice->title, .share = NAN, .slope = NAN };
  if (v.turn_scales)
    fill_scaled (row, &v, context);
  else if (needs_passages (choice) && !is_linked (context->findings))
    row->missing = "not-linked";
  else if (choice->from == FROM_ROWS && context->ledger == NULL)
    row->missing = "not-measured";
  else if (choice->from == FROM_ROWS)
    fill_from_ledger (row, &v, context);
  else
    fill_from (row, &v, choice->from, context->rows, context->findings);
}

/* Each choice fills its own place: any number of threads gives the same. */
static void
run_choice (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Context *context = data;
  if (choices[band].from != FROM_ROWS)
    add_choice (&choices[band], context, &g_array_index (context->out, TfWhatIf, band));
}

static const TfWhatIf *
find_row (const GArray *rows, const char *name)
{
  for (guint k = 0; k < rows->len; k++)
    {
      const TfWhatIf *row = &g_array_index (rows, TfWhatIf, k);
      if (g_strcmp0 (row->name, name) == 0)
        return row;
    }
  return &g_array_index (rows, TfWhatIf, 0);
}

/* The three ways of telling a cycle; one that is the study's own is the first row. */
static void
note_cycle_choice (TfFindings *findings, const GArray *rows)
{
  static const char *const names[]
      = { "cycle-by-date-only", "cycle-by-latitude-alone", "cycle-unsure-left-out" };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    findings->cycle_choice[k] = *find_row (rows, names[k]);
}

GArray *
tf_study_what_if (const TfStudy *study, const TfStudyRows *rows, TfFindings *findings,
                  TfLedger *ledger)
{
  guint n = G_N_ELEMENTS (choices);
  g_autoptr (GArray) all = g_array_sized_new (FALSE, TRUE, sizeof (TfWhatIf), n);
  g_array_set_size (all, n);
  Context context = { study, rows, findings, ledger, all };
  gboolean many = tf_sample_get_n (findings->every) > 20000;
  g_autoptr (TfWorkers) workers = many ? tf_workers_new (0) : NULL;
  const TfWork work = { .workers = workers };
  tf_bands_run (&work, n * TF_BAND_ROWS, run_choice, &context);
  for (guint k = 0; k < n; k++)
    if (choices[k].from == FROM_ROWS)
      add_choice (&choices[k], &context, &g_array_index (all, TfWhatIf, k));
  note_cycle_choice (findings, all);
  GArray *shown = g_array_new (FALSE, FALSE, sizeof (TfWhatIf));
  for (guint k = 0; k < n; k++)
    if (g_array_index (all, TfWhatIf, k).name != NULL)
      g_array_append_val (shown, g_array_index (all, TfWhatIf, k));
  return shown;
}
