/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfStudy: which rows are taken, by which conventions, and what the laws say of them.
 *
 * Mark conditions act first, then the sampling rule picks one mark a passage, then region
 * conditions act on the pick. While marks are not linked every mark is its own passage, and the
 * result says so.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-bin.h"
#include "tf-compare.h"
#include "tf-dipole-sum.h"
#include "tf-divide.h"
#include "tf-drift.h"
#include "tf-emergence.h"
#include "tf-hale-bin.h"
#include "tf-hale.h"
#include "tf-held.h"
#include "tf-joy.h"
#include "tf-ledger.h"
#include "tf-sample.h"
#include "tf-sampling.h"
#include "tf-verdict.h"

G_BEGIN_DECLS

#define TF_STUDY_ERROR (tf_study_error_quark ())
GQuark tf_study_error_quark (void);
typedef enum
{
  TF_STUDY_ERROR_READ,  /* no study, or a part of one that is not as it should be */
  TF_STUDY_ERROR_EMPTY, /* nothing to judge: says what there is and how to take hints in */
} TfStudyError;

typedef enum
{
  TF_EPHEMERAL_OUT,   /* "left-out" */
  TF_EPHEMERAL_IN,    /* "taken-in" */
  TF_EPHEMERAL_ALONE, /* "alone" */
} TfEphemeral;

typedef struct
{
  gboolean with_hints;       /* hints counted apart from marks */
  double cmd_max_deg;        /* 60; maps have no CMD and pass */
  double mu_min;             /* 0 */
  double flux_min_mx;        /* 0 */
  double separation_min_deg; /* 0 */
  int ephemeral;             /* TfEphemeral */
  gboolean with_models;      /* model maps */
  gboolean with_scales;      /* fluxes by the instruments' kept scales; else as measured */
} TfSieveParams;
extern const TfOption tf_sieve_options[];

typedef struct
{
  char *name;
  guint version; /* as it was kept; 0: not kept */
  TfSieveParams sieve;
  /* TfCondition (tf-sieve.h): beside what the sieve's options say, on marks and on picks. */
  GPtrArray *mark_conditions, *region_conditions;
  /* Kept with it: marks are read as measured with this floor, whatever frames come to the ledger later. NaN: the ledger's. */
  double even_floor_gauss;
  TfSamplingParams sampling;
  TfVerdictParams verdict;
  TfDivideParams divide;
  TfHaleParams hale;
  TfJoyParams joy;
  TfDriftParams drift;
  TfEmergenceParams emergence;
  TfDivides *divides;  /* the moved ones; their options are those of @divide. NULL: all computed */
  char *divides_shown; /* "24 N, 25 S": those moved with polarity in sight; NULL: none */
} TfStudy;
TfStudy *tf_study_new_default (void);
void tf_study_free (TfStudy *study);
/** tf_study_dup_text: study.json of 6-commands. tf_study_build_file: the builder's next value. */
char *tf_study_dup_text (const TfStudy *study);
void tf_study_build_file (const TfStudy *study, JsonBuilder *builder);
/** tf_study_read_text: the inverse; errors name @name, the member and what it should be. */
TfStudy *tf_study_read_text (const char *text, const char *name, GError **error);
/** tf_study_read_divides: takes the divides that people moved for the study of this name in the
 * ledger. */
gboolean tf_study_read_divides (TfStudy *study, TfLedger *ledger, GError **error);

/** TfWhatIf: share that breaks and Joy slope under one other choice, all else as chosen. */
typedef struct
{
  const char *name;  /* one of tf_what_if_names() */
  const char *title; /* msgid */
  guint n, regions;  /* with a verdict */
  guint breaks;
  guint n_tilts; /* of the slope */
  guint leaning; /* of n, on a provisional minimum */
  double share, slope;
  /* Why there is no row: "not-measured" (rows lack measures with that floor), "not-linked" (every mark
   * is its own passage), "no-hints", ...; NULL when there is one. */
  const char *missing;
  guint n_missing; /* rows that lack it */
} TfWhatIf;

/* Of the even floor, in the what-ifs about it. */
#define TF_WHAT_IF_LOWER  0.8
#define TF_WHAT_IF_HIGHER 1.2

/** tf_what_if_names: every choice in the order in which they are shown, NULL-ended (transfer
 * container). Names never change. A choice that is the study's own is left out of its rows, except
 * the first, "as-chosen". */
const char **tf_what_if_names (void);

/** tf_what_if_title: of that name, in the current language; the name itself when it is none of them, as a
 * newer program may have written. */
const char *tf_what_if_title (const char *name);

/** tf_what_if_apply: makes that choice the study's own. FALSE, and nothing done, when it is so already
 * or no option of a study says it (another floor, other minima). */
gboolean tf_what_if_apply (const char *name, TfStudy *study);

/** tf_what_if_missing: that reason in words. */
const char *tf_what_if_missing (const char *missing);

/** TfFindings: a sample with its verdicts and laws. */
typedef struct
{
  TfSample *sample;    /* the picks */
  guint regions;       /* of them, each once */
  TfVerdict *verdicts; /* one a sample row */
  TfHeld *held;        /* likewise: how far the pick's passage holds to its verdict; NULL when every mark is a pick */
  GHashTable *changing; /* passages in which too few marks agree */
  TfSample *every;     /* every mark that passes the mark conditions, picked or not */
  struct _TfStudyTaken *taken; /* what @every is a part of; NULL: it is of its own */
  TfSamplingTally sampling;
  gint64 *marks;          /* local key of each pick's mark; hints negative, outside rows 0 */
  guint n_marks, n_hints, n_outside; /* of the passages that were picked */
  GHashTable *left_out;   /* why the sieve left a row out -> GUINT_TO_POINTER (count) */
  /* condition -> count of rows taken though they lack what it asks about */
  GHashTable *passed_without;
  GHashTable *cannot_say;  /* reason code of a verdict -> count */
  double even_floor_gauss; /* the study's floor; NaN when it could not be worked out */
  guint n_other_floor;     /* rows measured with another floor than the study's */
  GArray *hale;            /* TfHaleRow */
  GArray *joy;             /* TfJoyFit: each cycle and hemisphere, then all */
  GArray *what_if;         /* TfWhatIf */
  /* The cycle by date alone; by latitude, every unsure one read as the likelier; unsure left out:
   * always shown together. */
  TfWhatIf cycle_choice[3];
  TfComparisons *comparisons;
  GPtrArray *hale_bins; /* of GArray of TfHaleBin: one a row of tf_hale_quantities */
  GArray *joy_bins;     /* TfBin: tilt by |lat|, of the picks that Joy's sample uses */
  /* TfBin: what is left of the tilt above the fit, by separation (Fisher, Fan & Howard 1995) */
  GArray *scatter_bins;
  GArray *drifts;         /* TfDrift */
  GArray *dipoles;        /* TfDipoleSum */
  TfEmergence *emergence; /* of every mark that passes the mark conditions */
  guint simulated;        /* rows from invented frames */
  double mean_tilt_deg, median_tilt_deg;
  TfNotes *cautions; /* "every-mark-is-its-own-passage", "instruments-unscaled-pooled", ... */
} TfFindings;
/** tf_study_even_floor: the greatest, over instruments, of the median over that instrument's frames
 * of 3 sigma (mu 0.5)/0.5, rounded to a whole gauss so that one more frame seldom moves it; G, NaN without frames. */
double tf_study_even_floor (TfLedger *ledger, GError **error);
/** tf_study_floor: the even floor of a study on a ledger: its own, else the ledger's. @study: (nullable) */
double tf_study_floor (const TfStudy *study, TfLedger *ledger);
/** tf_study_rows: ledger rows with the measures made with that even floor where they are there (intake makes
 * them), else with their own. */
GPtrArray *
tf_study_rows (TfLedger *ledger, const TfRowQuery *query, double floor_gauss, GError **error);
TfFindings *tf_study_run (const TfStudy *study, TfLedger *ledger, GError **error);
/** tf_study_run_sample: the same on rows that stand in no ledger (invented, or read elsewhere); row k's
 * number must be k. */
TfFindings *tf_study_run_sample (const TfStudy *study, const TfSample *all);
void tf_findings_free (TfFindings *findings);

/** tf_study_row: a ledger row as a sample row. */
void tf_study_row (const TfRow *row, TfSampleRow *out);
/** tf_study_measure_row: one measure as a sample row, region and origin absent. */
void tf_study_measure_row (const TfMeasure *measure, TfSampleRow *out);
/** tf_study_point: a point of the wings as a sample row (as far as it goes). */
void tf_study_point (const TfPoint *point, TfSampleRow *out);
/** tf_study_judge_measure: verdict of one measure under the study's divides: what the slip and
 * `measure` show. */
TfVerdict tf_study_judge_measure (const TfStudy *study, const TfMeasure *measure);

/** tf_findings_build_json: the `laws` document of 6-commands. */
void
tf_findings_build_json (const TfFindings *findings, const TfStudy *study, JsonBuilder *builder);
/** tf_findings_dup_words: the numbers as they would stand in a paper, in the current language: a sentence
 * a line. */
char *tf_findings_dup_words (const TfFindings *findings, const TfStudy *study);
/** tf_verdict_build_members: adds "polarity_tilt_deg", "cycle":{number, sure, reason} and
 * "hale":{verdict, reason, expected, readings} to the open object; readings: [{cycle, verdict}...]
 * when the cycle alone is unsure, else null. */
void
tf_verdict_build_members (const TfVerdict *verdict, const TfSampleRow *row, JsonBuilder *builder);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfStudy, tf_study_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFindings, tf_findings_free)

G_END_DECLS
