/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-joy.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-circular.h"
#include "tf-constants.h"
#include "tf-joy-line-private.h"
#include "tf-joy-slope.h"
#include "tf-many.h"

const char *const tf_joy_form_names[] = { "linear", "linear-free", "sine", "sine-of-tilt", NULL };
const char *const tf_joy_estimator_names[]
    = { "least-squares", "flux-weighted", "robust", "bin-medians", NULL };

#define O(member) offsetof (TfJoyParams, member)
const TfOption tf_joy_options[] = {
  { "joy-form", TF_OPTION_CHOICE, "", TF_JOY_LINEAR, 0, 3, tf_joy_form_names,
    N_ ("form of Joy's law"), O (form) },
  { "joy-estimator", TF_OPTION_CHOICE, "", TF_JOY_ROBUST, 0, 3, tf_joy_estimator_names,
    N_ ("how the form is fitted"), O (estimator) },
  { "joy-with-breaks", TF_OPTION_BOOL, "", 0, 0, 1, NULL,
    N_ ("with the regions that break Hale's law"), O (with_breaks) },
  { "joy-compactness", TF_OPTION_NUMBER, "", 0.5, 0, 10, NULL,
    N_ ("smallest compactness, where it is known"), O (compactness_min) },
  { "joy-separation", TF_OPTION_NUMBER, "deg", 0, 0, 30, NULL,
    N_ ("smallest separation of the poles, where it is known"), O (separation_min_deg) },
  { "joy-steep", TF_OPTION_NUMBER, "deg", 90, 0, 90, NULL, N_ ("largest size of the tilt"),
    O (steep_max_deg) },
  { "joy-level", TF_OPTION_NUMBER, "", 0.95, 0.5, 0.999, NULL,
    N_ ("confidence level of the intervals of a fit"), O (level) },
  { "joy-draws", TF_OPTION_INT, "", 1000, 0, 100000, NULL, N_ ("bootstrap draws of a fit; 0: none"),
    O (draws) },
  { "joy-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of those draws"), O (seed) },
  { NULL },
};
#undef O

enum
{
  MIN_ROWS = 3
};

/* A form: what stands for latitude and tilt in its straight line, and the way back to a tilt. */
typedef struct
{
  const char *unit; /* of the slope */
  double (*x) (double abs_lat_deg);
  double (*y) (double tilt_deg);
  double (*tilt) (double y);
} Form;

static double
same (double value)
{
  return value;
}

static double
sine (double degrees)
{
  return sin (degrees * TF_DEG);
}

static double
arc_sine (double value)
{
  return asin (CLAMP (value, -1.0, 1.0)) / TF_DEG;
}

static const Form forms[] = {
  [TF_JOY_LINEAR] = { "deg/deg", same, same, same },
  [TF_JOY_LINEAR_FREE] = { "deg/deg", same, same, same },
  [TF_JOY_SINE] = { "deg", sine, same, same },
  [TF_JOY_SINE_OF_TILT] = { "1", sine, sine, arc_sine },
};

/* What is offered. A NULL would be a fit that this version does not make. */
static const TfJoyLineFunc fits[4][4] = {
  [TF_JOY_LINEAR] = { tf_joy_line_least_squares, tf_joy_line_flux_weighted, tf_joy_line_robust,
                      tf_joy_line_bin_medians },
  [TF_JOY_LINEAR_FREE] = { tf_joy_line_free_least_squares, tf_joy_line_free_flux_weighted,
                           tf_joy_line_free_robust, tf_joy_line_free_bin_medians },
  [TF_JOY_SINE] = { tf_joy_line_least_squares, tf_joy_line_flux_weighted, tf_joy_line_robust,
                    tf_joy_line_bin_medians },
  [TF_JOY_SINE_OF_TILT] = { tf_joy_line_least_squares, tf_joy_line_flux_weighted,
                            tf_joy_line_robust, tf_joy_line_bin_medians },
};

gboolean
tf_joy_offers (TfJoyForm form, TfJoyEstimator estimator)
{
  return (guint)form < 4 && (guint)estimator < 4 && fits[form][estimator] != NULL;
}

const char *
tf_joy_unit (TfJoyForm form)
{
  return forms[form].unit;
}

double
tf_joy_x (int form, double abs_lat_deg)
{
  return forms[form].x (abs_lat_deg);
}

double
tf_joy_y (int form, double tilt_deg)
{
  return forms[form].y (tilt_deg);
}

double
tf_joy_tilt (const TfJoyFit *fit, TfJoyForm form, double abs_lat_deg)
{
  double intercept = isnan (fit->intercept) ? 0.0 : fit->intercept;
  return forms[form].tilt (fit->slope * forms[form].x (abs_lat_deg) + intercept);
}

gboolean
tf_joy_uses (const TfSampleRow *row, const TfVerdict *verdict, const TfJoyParams *params)
{
  if (!isfinite (row->axis_tilt_deg) || !isfinite (row->lat_deg))
    return FALSE;
  if (verdict->kind == TF_VERDICT_BREAKS && !params->with_breaks)
    return FALSE;
  if (row->compactness < params->compactness_min
      || row->separation_deg < params->separation_min_deg)
    return FALSE;
  if (params->estimator == TF_JOY_FLUX_WEIGHTED && !(row->flux_mx > 0.0 && isfinite (row->flux_mx)))
    return FALSE;
  return fabs (row->axis_tilt_deg) <= params->steep_max_deg;
}

/* The rows of one fit as plain columns. */
typedef struct
{
  guint n, no_polarity, leaning;
  double *lat, *tilt, *flux;
  guint32 *region;
} Columns;

static void
columns_clear (Columns *columns)
{
  g_free (columns->lat);
  g_free (columns->tilt);
  g_free (columns->flux);
  g_free (columns->region);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Columns, columns_clear)

static Columns
gather (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
        const TfJoyParams *params)
{
  guint all = tf_sample_get_n (sample);
  Columns c = { .lat = tf_new_many (double, all),
                .tilt = tf_new_many (double, all),
                .flux = tf_new_many (double, all),
                .region = tf_new_many (guint32, all) };
  for (guint k = 0; k < all; k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      if (!tf_group_holds (group, row, &verdicts[k], TRUE)
          || !tf_joy_uses (row, &verdicts[k], params))
        continue;
      c.lat[c.n] = fabs (row->lat_deg);
      c.tilt[c.n] = row->axis_tilt_deg;
      c.flux[c.n] = row->flux_mx;
      c.region[c.n] = row->region;
      c.no_polarity += row->leading_polarity == 0;
      c.leaning += g_strcmp0 (verdicts[k].cycle.reason, "cycle-provisional") == 0;
      c.n++;
    }
  return c;
}

/* 1.4826 times the median distance from the median. @values is overwritten. */
static double
robust_scatter (double *values, guint n)
{
  double centre = tf_median (values, n);
  for (guint k = 0; k < n; k++)
    values[k] = fabs (values[k] - centre);
  return 1.4826 * tf_median (values, n);
}

static void
describe_tilts (const Columns *c, TfJoyFit *fit)
{
  double sum = 0.0;
  for (guint k = 0; k < c->n; k++)
    sum += c->tilt[k];
  TfCircular axes = tf_circular (c->tilt, c->n, TRUE);
  fit->mean_tilt_deg = c->n == 0 ? NAN : sum / c->n;
  fit->median_tilt_deg = tf_median (c->tilt, c->n);
  fit->axial_mean_deg = axes.mean_deg;
  fit->axial_resultant = axes.resultant;
  fit->axial_sd_deg = axes.sd_deg;
  fit->rayleigh_p = axes.rayleigh_p;
}

/* Bootstrap draws: the line through the points with the multiplicity that was drawn. */
typedef struct
{
  TfJoyPoints *points;
  TfJoyLineFunc func;
  double *slopes, *intercepts; /* of the draws in order */
  guint at;
} Draws;

static double
draw_slope (const guint *rows, guint n, gpointer data)
{
  Draws *draws = data;
  tf_joy_points_count (draws->points, rows, n);
  TfJoyLine line = draws->func (draws->points);
  draws->slopes[draws->at] = line.slope;
  draws->intercepts[draws->at++] = line.intercept;
  return line.slope;
}

/* The same draws come again, by the same seed: their lines are known. */
static double
recall_intercept (const guint *rows, guint n, gpointer data)
{
  Draws *draws = data;
  return draws->intercepts[draws->at++];
}

static void
fit_intervals (const Columns *c, const TfJoyParams *params, TfJoyPoints *points, TfJoyFit *fit,
               double *slopes)
{
  guint n = (guint)MAX (params->draws, 0);
  g_autofree double *intercepts = g_new (double, n + 1), *own = g_new (double, n + 1);
  Draws draws = { points, fits[params->form][params->estimator], slopes != NULL ? slopes : own,
                  intercepts, 0 };
  if (isnan (fit->slope))
    return;
  fit->slope_ci = tf_bootstrap_clusters (c->region, c->n, n, (guint64)params->seed, params->level,
                                         params->cancel, draw_slope, &draws);
  draws.at = 0;
  if (!isnan (fit->intercept))
    fit->intercept_ci = tf_bootstrap_clusters (c->region, c->n, n, (guint64)params->seed,
                                               params->level, params->cancel, recall_intercept,
                                               &draws);
}

/* The points, and the line through them. */
static TfJoyPoints *
draw_line (const Columns *c, const TfJoyParams *params, TfJoyFit *fit)
{
  const Form *form = &forms[params->form];
  g_autofree double *x = tf_new_many (double, c->n), *y = tf_new_many (double, c->n);
  for (guint k = 0; k < c->n; k++)
    {
      x[k] = form->x (c->lat[k]);
      y[k] = form->y (c->tilt[k]);
    }
  TfJoyPoints *points = tf_joy_points_new (c->n, x, y, c->flux, c->lat);
  TfJoyLine line = fits[params->form][params->estimator](points);
  fit->slope = line.slope;
  fit->intercept = line.intercept;
  return points;
}

static void
fit_line (const Columns *c, const TfJoyParams *params, TfJoyFit *fit, double *draws)
{
  TfJoyPoints *points = draw_line (c, params, fit);
  g_autofree double *y = tf_new_many (double, c->n);
  for (guint k = 0; k < c->n; k++)
    y[k] = c->tilt[k] - tf_joy_tilt (fit, (TfJoyForm)params->form, c->lat[k]);
  fit->scatter_deg = robust_scatter (y, c->n);
  fit_intervals (c, params, points, fit, draws);
  tf_joy_points_free (points);
}

/* The robust slope through the origin straight from the rows. NaN: it takes more. */
static double
find_slope (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
            const TfJoyParams *params, TfJoyFit *fit)
{
  const Form *form = &forms[params->form];
  guint n = 0;
  g_autofree TfJoyRatio *ratios = tf_new_many (TfJoyRatio, tf_sample_get_n (sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (sample, k);
      if (!tf_group_holds (group, row, &verdicts[k], TRUE)
          || !tf_joy_uses (row, &verdicts[k], params))
        continue;
      double x = form->x (fabs (row->lat_deg));
      fit->n++;
      fit->no_polarity += row->leading_polarity == 0;
      if (x > 0.0)
        ratios[n++] = (TfJoyRatio){ form->y (row->axis_tilt_deg) / x, x };
    }
  return tf_joy_ratio_median (ratios, n);
}

TfJoyFit
tf_joy_slope (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
              const TfJoyParams *params)
{
  if (params->estimator == TF_JOY_ROBUST && params->form != TF_JOY_LINEAR_FREE)
    {
      TfJoyFit quick = { .cycle = group->cycle, .hemisphere = group->hemisphere, .intercept = NAN };
      quick.slope = find_slope (sample, verdicts, group, params, &quick);
      if (quick.n >= MIN_ROWS && !isnan (quick.slope))
        return quick;
    }
  g_auto (Columns) c = gather (sample, verdicts, group, params);
  TfJoyFit fit = { .cycle = group->cycle, .hemisphere = group->hemisphere, .n = c.n,
                   .no_polarity = c.no_polarity, .slope = NAN, .intercept = NAN };
  if (c.n >= MIN_ROWS && tf_joy_offers (params->form, params->estimator))
    tf_joy_points_free (draw_line (&c, params, &fit));
  return fit;
}

TfJoyFit
tf_joy_fit (const TfSample *sample, const TfVerdict *verdicts, int cycle, int hemisphere,
            const TfJoyParams *params)
{
  TfGroup group = tf_group_of (cycle, hemisphere);
  return tf_joy_fit_group (sample, verdicts, &group, params, NULL);
}

TfJoyFit
tf_joy_fit_group (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
                  const TfJoyParams *params, double *draws)
{
  const TfInterval none = { NAN, NAN };
  g_auto (Columns) c = gather (sample, verdicts, group, params);
  for (int k = 0; draws != NULL && k < params->draws; k++)
    draws[k] = NAN;
  TfJoyFit fit = { .cycle = group->cycle,
                   .hemisphere = group->hemisphere,
                   .leaning = c.leaning,
                   .n = c.n,
                   .regions = tf_count_distinct (c.region, c.n),
                   .no_polarity = c.no_polarity,
                   .slope = NAN,
                   .intercept = NAN,
                   .slope_ci = none,
                   .intercept_ci = none,
                   .scatter_deg = NAN };
  describe_tilts (&c, &fit);
  if (c.n >= MIN_ROWS && tf_joy_offers (params->form, params->estimator))
    fit_line (&c, params, &fit, draws);
  return fit;
}
