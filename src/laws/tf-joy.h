/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfJoy: tilt against latitude. Forms x estimators as a const table; this header has the default
 * (linear through the origin, robust) and whatever rows are filled; a row not filled is not
 * offered. */

#include <glib.h>

#include "tf-bands.h"
#include "tf-group.h"
#include "tf-proportion.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

typedef enum
{
  TF_JOY_LINEAR,      /* tilt = m |lat| */
  TF_JOY_LINEAR_FREE, /* tilt = m |lat| + c */
  TF_JOY_SINE,        /* tilt = b sin |lat| */
  TF_JOY_SINE_OF_TILT /* sin tilt = b sin |lat| */
} TfJoyForm;
typedef enum
{
  TF_JOY_LEAST_SQUARES,
  TF_JOY_FLUX_WEIGHTED,
  TF_JOY_ROBUST,
  TF_JOY_BIN_MEDIANS,
} TfJoyEstimator;

typedef struct
{
  int form, estimator;
  gboolean with_breaks;      /* FALSE: verdict not "breaks" */
  double compactness_min;    /* 0.5; rows without compactness pass */
  double separation_min_deg; /* 0 */
  double steep_max_deg;      /* 90: |tilt| above is left out */
  double level;
  int draws, seed;
  const TfCancel *cancel; /* no option: raised, no more is drawn, and there is no interval; NULL */
} TfJoyParams;
extern const TfOption tf_joy_options[];
extern const char *const tf_joy_form_names[]; /* "linear" "linear-free" "sine" "sine-of-tilt" */
/* "least-squares" "flux-weighted" "robust" "bin-medians"  */
extern const char *const tf_joy_estimator_names[];

typedef struct
{
  int cycle, hemisphere; /* 0: all / both */
  guint n, regions, no_polarity;
  guint leaning;                     /* rows whose cycle leans on a provisional minimum */
  double slope;                      /* in tf_joy_unit() */
  double intercept;                  /* deg; NaN where the form has none */
  TfInterval slope_ci, intercept_ci; /* bootstrap clustered by region */
  double scatter_deg;                /* 1.4826 MAD of the residuals */
  double mean_tilt_deg, median_tilt_deg;
  double axial_mean_deg;  /* half the direction of the mean of doubled angles, (-90, 90] */
  double axial_resultant; /* its length, 0 to 1 */
  double axial_sd_deg;    /* circular standard deviation of the axes */
  double rayleigh_p;      /* chance of so long a resultant without any preferred axis */
} TfJoyFit;

/** tf_joy_fit: one cycle (of which each row must surely be) and hemisphere (0: all / both). Slope
 * NaN when fewer than 3 rows, or when the form has no such estimator (tf_joy_offers()). */
TfJoyFit tf_joy_fit (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
                     const TfJoyParams *params);
/** tf_joy_fit_group: likewise of a group; its cycle and hemisphere stand in the result. @draws: (out)
 * (nullable): params->draws slopes, one a bootstrap draw; NaN where it had none. */
TfJoyFit tf_joy_fit_group (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
                           const TfJoyParams *params, double *draws);
/** tf_joy_tilt: the tilt that a fit of that form expects at |lat|, deg; NaN without a slope. */
double tf_joy_tilt (const TfJoyFit *fit, TfJoyForm form, double abs_lat_deg);
/** tf_joy_offers: whether that form can be fitted in that way (all can). */
gboolean tf_joy_offers (TfJoyForm form, TfJoyEstimator estimator);
/** tf_joy_uses: whether a row enters the Joy sample of @params: it has a latitude and a tilt that
 * is not too steep, does not break Hale's law, and is neither too compact nor too narrow where that
 * is known; flux-weighted: it has a flux. */
gboolean tf_joy_uses (const TfSampleRow *row, const TfVerdict *verdict, const TfJoyParams *params);
const char *tf_joy_unit (TfJoyForm form);

/** TfJoyRelation: a published relation. */
typedef struct
{
  const char *name, *source;
  gboolean magnetic; /* else white light */
  double (*tilt) (double abs_lat_deg);
} TfJoyRelation;
/** tf_joy_relations: ends with name NULL; index 0: Stenflo & Kosovichev 2012. */
extern const TfJoyRelation tf_joy_relations[];

/** tf_joy_expected: where Joy's law would put a tilt: centre (tf_joy_relations[0]) and scatter,
 * deg, at latitude and separation; NaN for the one or the other when its argument is. */
void tf_joy_expected (double lat_deg, double separation_deg, double *tilt_deg, double *scatter_deg);

G_END_DECLS
