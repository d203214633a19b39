/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-choice-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"

/* The other choices of the what-ifs, each alone. */

#define HALF_A_YEAR_S (0.5 * 365.25 * TF_DAY_S)

static gboolean
as_chosen (TfVariant *v)
{
  return TRUE;
}

/* -- the cycle ---------------------------------------------------------------------------------- */

static gboolean
by_date_only (TfVariant *v)
{
  gboolean other = !v->study.divide.by_date_only;
  v->study.divide.by_date_only = TRUE;
  return other;
}

static gboolean
by_latitude (TfVariant *v)
{
  TfDivideParams *p = &v->study.divide;
  p->by_date_only = FALSE;
  p->band_deg = p->near_lat_deg = 0.0;
  p->far_lat_deg = p->late_lat_deg = 90.0;
  return TRUE;
}

/* What the study would be by the default: what is unsure left out. */
static gboolean
unsure_left_out (TfVariant *v)
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
minima_earlier (TfVariant *v)
{
  v->later_s = -HALF_A_YEAR_S;
  return TRUE;
}

static gboolean
minima_later (TfVariant *v)
{
  v->later_s = HALF_A_YEAR_S;
  return TRUE;
}

static gboolean
without_provisional (TfVariant *v)
{
  gboolean other = !isnan (v->study.divide.provisional_year);
  v->study.divide.provisional_year = NAN;
  return other;
}

/* -- the equator -------------------------------------------------------------------------------- */

static gboolean
set_zone (TfVariant *v, double deg)
{
  gboolean other = fabs (v->study.verdict.equator_deg - deg) > 1e-9;
  v->study.verdict.equator_deg = deg;
  return other;
}

static gboolean
zone_0 (TfVariant *v)
{
  return set_zone (v, 0.0);
}

static gboolean
zone_3 (TfVariant *v)
{
  return set_zone (v, 3.0);
}

static gboolean
zone_5 (TfVariant *v)
{
  return set_zone (v, 5.0);
}

static gboolean
zone_8 (TfVariant *v)
{
  return set_zone (v, 8.0);
}

/* -- the floor ---------------------------------------------------------------------------------- */

static gboolean
floor_lower (TfVariant *v)
{
  v->floor_factor = TF_WHAT_IF_LOWER;
  return TRUE;
}

static gboolean
floor_higher (TfVariant *v)
{
  v->floor_factor = TF_WHAT_IF_HIGHER;
  return TRUE;
}

static gboolean
floor_own (TfVariant *v)
{
  v->floor_factor = 0.0;
  return TRUE;
}

/* -- the fit ------------------------------------------------------------------------------------ */

static gboolean
set_estimator (TfVariant *v, TfJoyEstimator estimator)
{
  gboolean other = v->study.joy.estimator != (int)estimator;
  v->study.joy.estimator = estimator;
  return other;
}

static gboolean
least_squares (TfVariant *v)
{
  return set_estimator (v, TF_JOY_LEAST_SQUARES);
}

static gboolean
flux_weighted (TfVariant *v)
{
  return set_estimator (v, TF_JOY_FLUX_WEIGHTED);
}

static gboolean
robust (TfVariant *v)
{
  return set_estimator (v, TF_JOY_ROBUST);
}

static gboolean
bin_medians (TfVariant *v)
{
  return set_estimator (v, TF_JOY_BIN_MEDIANS);
}

static gboolean
steep_out (TfVariant *v)
{
  gboolean other = v->study.joy.steep_max_deg > 75.0 || v->study.verdict.steep_deg > 75.0;
  v->study.joy.steep_max_deg = v->study.verdict.steep_deg = 75.0;
  return other;
}

static gboolean
steep_in (TfVariant *v)
{
  gboolean other = v->study.joy.steep_max_deg < 90.0 || v->study.verdict.steep_deg < 90.0;
  v->study.joy.steep_max_deg = v->study.verdict.steep_deg = 90.0;
  return other;
}

static gboolean
separation (TfVariant *v)
{
  gboolean other = v->study.sieve.separation_min_deg < 2.5;
  v->study.sieve.separation_min_deg = fmax (2.5, v->study.sieve.separation_min_deg);
  return other;
}

/* -- the sampling ------------------------------------------------------------------------------- */

static gboolean
set_rule (TfVariant *v, TfSamplingRule rule)
{
  gboolean other = v->study.sampling.rule != (int)rule;
  v->study.sampling.rule = rule;
  return other;
}

static gboolean
rule_flux (TfVariant *v)
{
  return set_rule (v, TF_SAMPLING_FLUX);
}

static gboolean
rule_meridian (TfVariant *v)
{
  return set_rule (v, TF_SAMPLING_MERIDIAN);
}

static gboolean
rule_mean (TfVariant *v)
{
  return set_rule (v, TF_SAMPLING_MEAN);
}

static gboolean
rule_every (TfVariant *v)
{
  return set_rule (v, TF_SAMPLING_EVERY);
}

static gboolean
bracketed (TfVariant *v)
{
  v->bracketed = TRUE;
  return v->study.sampling.rule == TF_SAMPLING_FLUX;
}

static gboolean
set_limb (TfVariant *v, double cmd_deg)
{
  gboolean other = v->study.sieve.cmd_max_deg > cmd_deg;
  v->study.sieve.cmd_max_deg = fmin (cmd_deg, v->study.sieve.cmd_max_deg);
  return other;
}

static gboolean
limb_45 (TfVariant *v)
{
  return set_limb (v, 45.0);
}

static gboolean
limb_30 (TfVariant *v)
{
  return set_limb (v, 30.0);
}

static gboolean
limb_none (TfVariant *v)
{
  gboolean other = v->study.sieve.cmd_max_deg < 90.0 || v->study.sieve.mu_min > 0.0;
  v->study.sieve.cmd_max_deg = 90.0;
  v->study.sieve.mu_min = 0.0;
  return other;
}

/* -- the rows ----------------------------------------------------------------------------------- */

static gboolean
scales_on (TfVariant *v)
{
  v->turn_scales = !v->study.sieve.with_scales;
  v->study.sieve.with_scales = TRUE;
  return v->turn_scales;
}

static gboolean
scales_off (TfVariant *v)
{
  v->turn_scales = v->study.sieve.with_scales;
  v->study.sieve.with_scales = FALSE;
  return v->turn_scales;
}

static gboolean
hints_out (TfVariant *v)
{
  v->marks_alone = TRUE;
  return v->study.sieve.with_hints;
}

static gboolean
hints_in (TfVariant *v)
{
  gboolean other = !v->study.sieve.with_hints;
  v->study.sieve.with_hints = v->with_hints = TRUE;
  return other;
}

static gboolean
ephemeral_alone (TfVariant *v)
{
  gboolean other = v->study.sieve.ephemeral != TF_EPHEMERAL_ALONE;
  v->study.sieve.ephemeral = TF_EPHEMERAL_ALONE;
  return other;
}

const TfChoice tf_choices[] = {
  { "as-chosen", N_ ("as chosen"), TF_FROM_FIT, as_chosen },
  { "cycle-by-date-only", N_ ("cycle by the date alone"), TF_FROM_VERDICTS, by_date_only },
  { "cycle-by-latitude-alone", N_ ("cycle by latitude, unsure ones read as the likelier"),
    TF_FROM_VERDICTS, by_latitude },
  { "cycle-unsure-left-out", N_ ("cycle by latitude, unsure ones left out"), TF_FROM_VERDICTS,
    unsure_left_out },
  { "minima-half-a-year-earlier", N_ ("minima half a year earlier"), TF_FROM_VERDICTS,
    minima_earlier },
  { "minima-half-a-year-later", N_ ("minima half a year later"), TF_FROM_VERDICTS, minima_later },
  { "provisional-minimum-left-out", N_ ("without the provisional minimum"), TF_FROM_VERDICTS,
    without_provisional },
  { "equator-zone-0", N_ ("no zone left out at the equator"), TF_FROM_VERDICTS, zone_0 },
  { "equator-zone-3", N_ ("3° left out at the equator"), TF_FROM_VERDICTS, zone_3 },
  { "equator-zone-5", N_ ("5° left out at the equator"), TF_FROM_VERDICTS, zone_5 },
  { "equator-zone-8", N_ ("8° left out at the equator"), TF_FROM_VERDICTS, zone_8 },
  { "floor-a-fifth-lower", N_ ("even floor a fifth lower"), TF_FROM_ROWS, floor_lower },
  { "floor-a-fifth-higher", N_ ("even floor a fifth higher"), TF_FROM_ROWS, floor_higher },
  { "floor-of-each-mark", N_ ("each mark's own floor (local by default)"), TF_FROM_ROWS, floor_own },
  { "least-squares", N_ ("least squares"), TF_FROM_FIT, least_squares },
  { "flux-weighted", N_ ("least squares weighted by flux"), TF_FROM_FIT, flux_weighted },
  { "robust", N_ ("robust line"), TF_FROM_FIT, robust },
  { "bin-medians", N_ ("medians of 5° bins"), TF_FROM_FIT, bin_medians },
  { "steep-left-out", N_ ("tilts above 75° left out"), TF_FROM_VERDICTS, steep_out },
  { "steep-taken-in", N_ ("tilts above 75° taken in"), TF_FROM_VERDICTS, steep_in },
  { "separation-above-2.5", N_ ("separation above 2.5°"), TF_FROM_PICKS, separation },
  { "sampling-greatest-flux", N_ ("one mark a passage: greatest flux"), TF_FROM_PICKS, rule_flux },
  { "sampling-central-meridian", N_ ("one mark a passage: nearest the central meridian"),
    TF_FROM_PICKS, rule_meridian },
  { "sampling-mean", N_ ("mean over |CMD| ≤ 45°"), TF_FROM_PICKS, rule_mean },
  { "sampling-every-mark", N_ ("every mark"), TF_FROM_PICKS, rule_every },
  { "peak-bracketed", N_ ("greatest flux between other marks"), TF_FROM_PICKS, bracketed },
  { "cmd-within-30", N_ ("|CMD| ≤ 30°"), TF_FROM_MARKS, limb_30 },
  { "cmd-within-45", N_ ("|CMD| ≤ 45°"), TF_FROM_MARKS, limb_45 },
  { "limb-taken-in", N_ ("to the limb"), TF_FROM_MARKS, limb_none },
  { "instruments-scaled", N_ ("fluxes by the instruments' scales"), TF_FROM_MARKS, scales_on },
  { "instruments-not-scaled", N_ ("fluxes as measured"), TF_FROM_MARKS, scales_off },
  { "hints-left-out", N_ ("hints left out"), TF_FROM_MARKS, hints_out },
  { "hints-taken-in", N_ ("hints taken in"), TF_FROM_ROWS, hints_in },
  { "ephemeral-alone", N_ ("ephemeral regions alone"), TF_FROM_PICKS, ephemeral_alone },
  { NULL },
};

guint
tf_choices_get_n (void)
{
  guint n = 0;
  while (tf_choices[n].name != NULL)
    n++;
  return n;
}

const char **
tf_what_if_names (void)
{
  const char **names = g_new0 (const char *, tf_choices_get_n () + 1);
  for (guint k = 0; k < tf_choices_get_n (); k++)
    names[k] = tf_choices[k].name;
  return names;
}

const char *
tf_what_if_title (const char *name)
{
  g_return_val_if_fail (name != NULL, "");
  for (const TfChoice *choice = tf_choices; choice->name != NULL; choice++)
    if (strcmp (choice->name, name) == 0)
      return _ (choice->title);
  return name;
}

gboolean
tf_what_if_apply (const char *name, TfStudy *study)
{
  g_return_val_if_fail (name != NULL && study != NULL, FALSE);
  for (const TfChoice *choice = tf_choices; choice->name != NULL; choice++)
    {
      if (strcmp (choice->name, name) != 0)
        continue;
      TfVariant v = { .study = *study, .floor_factor = NAN };
      gboolean other = choice->change (&v);
      gboolean by_options = fabs (v.later_s) < 1 && !v.bracketed && isnan (v.floor_factor);
      if (!other || !by_options || choice->change == as_chosen)
        return FALSE;
      if (choice->change == hints_out)
        v.study.sieve.with_hints = FALSE;
      *study = v.study;
      return TRUE;
    }
  return FALSE;
}

