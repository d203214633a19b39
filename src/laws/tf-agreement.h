/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* How far people agree who judge the same cases apart from each other.
 *
 * Categories are 0, 1, ...; TF_NO_OPINION where a person did not judge. Chance-corrected figures
 * mislead when nearly all cases are of one kind (Feinstein & Cicchetti 1990, from memory): raw
 * agreement and prevalence always stand beside them. A figure that is not defined (all in one
 * category, too few cases) is NaN. Fewer than TF_AGREEMENT_CASES cases: say "n of m" instead.
 */

#include <glib.h>

#include "tf-proportion.h"

G_BEGIN_DECLS

enum
{
  TF_NO_OPINION = -1,
  TF_AGREEMENT_CASES = 20, /* below this no kappa is shown */
  TF_AGREEMENT_KINDS = 16, /* most categories */
};

/** TfCohen: two people. */
typedef struct
{
  guint n;
  double raw;      /* share of cases on which both say the same */
  double expected; /* the same by chance */
  double
      kappa; /* Cohen 1960, Educ. Psychol. Meas. 20, 37; weighted: Cohen 1968, Psychol. Bull. 70, 213 */
  double sd;        /* Fleiss, Cohen & Everitt 1969, Psychol. Bull. 72, 323; unweighted only */
  double sd_simple; /* Cohen 1960 */
  double
      adjusted; /* prevalence and bias adjusted: (k raw - 1) / (k - 1) (Byrt, Bishop & Carlin 1993, from memory) */
  double prevalence; /* share of the commonest category among both people's answers */
  double
      bias; /* half the sum of the differences between the two people's shares of the categories: 0 to 1 */
} TfCohen;

/** tf_cohen_table: @counts: @kinds rows (first person) of @kinds columns (second). @weights: (nullable):
 * the same shape, how bad each disagreement is, 0 on the diagonal; NULL: all alike. */
TfCohen tf_cohen_table (const double *counts, guint kinds, const double *weights);
/** tf_cohen: cases that one of the two did not judge are left out. */
TfCohen tf_cohen (const int *first, const int *second, guint n, guint kinds);
/** tf_cohen_interval: percentile interval of kappa over cases drawn with replacement. */
TfInterval tf_cohen_interval (const int *first, const int *second, guint n, guint kinds,
                              guint draws, guint64 seed, double level);

/** TfFleiss: more people than two, the same number @people on every case. */
typedef struct
{
  guint n, people;
  double raw, expected, kappa; /* Fleiss 1971, Psychol. Bull. 76, 378 */
  double
      z; /* kappa by its deviation when there is no agreement: Fleiss, Nee & Landis 1979, Psychol. Bull. 86, 974 */
  double prevalence;
} TfFleiss;

/** tf_fleiss: @counts: @n rows of @kinds columns: how many chose each category; every row must add to
 * the same number, two or more, else all NaN. */
TfFleiss tf_fleiss (const guint *counts, guint n, guint kinds);

typedef enum
{
  TF_SCALE_NOMINAL,
  TF_SCALE_ORDINAL,
  TF_SCALE_INTERVAL,
  TF_SCALE_RATIO,
} TfAgreementScale;
/** tf_krippendorff: alpha (Krippendorff 2004, Content Analysis, ch. 11; Hayes & Krippendorff 2007). Any
 * number of people, any of them missing. @values: @people rows of @n columns; NaN: not judged. Cases
 * judged by one person alone are left out. NaN when all values are alike. */
double tf_krippendorff (const double *values, guint people, guint n, TfAgreementScale scale);
/** tf_krippendorff_interval: by cases drawn with replacement. */
TfInterval
tf_krippendorff_interval (const double *values, guint people, guint n, TfAgreementScale scale,
                          guint draws, guint64 seed, double level);

G_END_DECLS
