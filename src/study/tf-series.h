/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSeries: what one passage shows, mark by mark, and what follows from it.
 *
 * All marks are measured with one even floor, so that a constant region keeps its flux from limb to
 * limb; a mark that is not yet is flagged. Nothing is left out for being near the limb: it is
 * flagged, and has no part in what is derived. Where one frame holds several outlines of the region
 * (two people, a hint beside a mark) all are there, and one of them, a person's before a hint,
 * stands for the frame. Every derived figure has the window it was taken from.
 *
 * Flux in Mx, times as of the frames, angles deg; NaN is "no value".
 */

#include <glib.h>

#include "tf-option.h"
#include "tf-study.h"

G_BEGIN_DECLS

typedef enum
{
  TF_POINT_LIMB = 1,        /* mu below mu_min: no part in what is derived */
  TF_POINT_NEAR_LIMB = 2,   /* mu < 0.34: do not lean on it */
  TF_POINT_OTHER_FLOOR = 4, /* not measured with the series' floor */
  TF_POINT_HINT = 8,
  TF_POINT_SECOND = 16, /* another outline stands for its frame */
} TfPointFlags;

typedef struct
{
  const TfRow *row; /* borrowed from the series */
  TfTime time;
  double days; /* since the first point */
  double cmd_deg, mu;
  double flux_positive_mx, flux_positive_sigma_mx;
  double flux_negative_mx, flux_negative_sigma_mx; /* sizes */
  double flux_mx, flux_sigma_mx;                   /* unsigned */
  double separation_deg, separation_sigma_deg, separation_mm;
  double axis_tilt_deg, polarity_tilt_deg, tilt_sigma_deg; /* the sigma is of both tilts */
  TfComplexityRow complexity; /* there: FALSE when nobody worked it out */
  TfVerdict verdict;
  guint flags;
} TfSeriesPoint;

typedef struct
{
  double mu_min;       /* 0.5 */
  double mean_cmd_deg; /* 45: marks of the mean tilt */
  double low, high;    /* 0.1, 0.9 of the greatest flux: rise and decay are taken between them */
  double
      change; /* 0.2: least change of flux, as a share of the greatest, that is a rise or decay */
  double meridian_deg; /* 15: a mark farther from the central meridian does not stand for it */
} TfSeriesParams;
extern const TfOption tf_series_options[];
void tf_series_params_init (TfSeriesParams *params);

/** TfFigure: a derived number with the window it was taken from. */
typedef struct
{
  double value, sigma; /* NaN: none */
  TfTime from, to;
  guint n;            /* marks in the window */
  const char *reason; /* note code: why there is no value; NULL */
} TfFigure;

typedef struct
{
  TfFigure greatest_flux; /* Mx */
  gboolean bracketed;     /* neither the first nor the last of the marks it was looked for among */
  TfFigure emergence,
      decay; /* Mx/h: least squares on the flux; positive rising, negative falling */
  TfFigure tilt_at_greatest; /* deg, axis tilt */
  TfFigure tilt_at_meridian;
  double meridian_cmd_deg; /* of that mark */
  /* Axial mean; sigma: scatter / sqrt (n_effective), see tf-series-mean.c. */
  TfFigure tilt_mean;
  double tilt_scatter_deg, n_effective, persistence_days;
  double tilt_floor_deg; /* median floor term: common to all marks, not in sigma */
  guint held, of;        /* marks that agree with the verdict at greatest flux; that say anything */
  TfVerdict verdict;     /* at greatest flux, "hale-changes" where too few agree */
} TfDerived;

typedef struct
{
  GPtrArray *rows; /* TfRow */
  GArray *points;  /* TfSeriesPoint, in order of time */
  double floor_gauss;
  guint n_other_floor;
  TfSeriesParams params;
  TfDerived derived;
} TfSeries;

/** tf_series_new: from rows of one passage in order of time, which it takes. */
TfSeries *tf_series_new (GPtrArray *rows, const TfStudy *study, double floor_gauss,
                         const TfSeriesParams *params);
void tf_series_free (TfSeries *series);
/** tf_series_floor: the even floor of a passage: the greatest, over the instruments of its frames, of the median of 3 sigma (mu 0.5)/0.5, rounded to
 * a whole gauss; G, NaN without frames. Measure with it (intake) before tf_series_read() for a series without flags. */
double tf_series_floor (TfLedger *ledger, gint64 passage, GError **error);
/** tf_series_read: the passage as the ledger has it now; measures with that floor where they are there. */
TfSeries *tf_series_read (TfLedger *ledger, gint64 passage, double floor_gauss,
                          const TfStudy *study, const TfSeriesParams *params, GError **error);

/** tf_series_mean: axial mean of @n tilts at @days, with its error.
 * @n_effective, @persistence_days: (out): see tf-series-mean.c; @scatter_deg: (out) */
double tf_series_mean (const double *tilts_deg, const double *days, guint n, double *sigma_deg,
                       double *scatter_deg, double *n_effective, double *persistence_days);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfSeries, tf_series_free)

G_END_DECLS
