/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Prints what the laws folder works out, as CSV, for laws.py to compare with R, scipy, numpy and
 * published values. One argument: which of the tables below; "joy" reads its rows from standard
 * input.
 */

#include "outside-laws.h"

#include <glib.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "tf-cycle.h"
#include "tf-hale.h"
#include "tf-joy.h"
#include "tf-number.h"

enum
{
  SHARES = 300,
  MEDIANS = 150
};

static void
print_share (guint x, guint n, double level)
{
  TfInterval wilson = tf_wilson (x, n, level), exact = tf_clopper_pearson (x, n, level);
  printf ("%u,%u,%.17g,%.17g,%.17g,%.17g,%.17g\n", x, n, level, wilson.low, wilson.high, exact.low,
          exact.high);
}

static void
print_shares (void)
{
  static const double levels[] = { 0.9, 0.95, 0.99 };
  g_autoptr (GRand) rand = g_rand_new_with_seed (1);
  puts ("x,n,level,wilson_low,wilson_high,exact_low,exact_high");
  for (guint n = 1; n <= 12; n++)
    for (guint x = 0; x <= n; x++)
      print_share (x, n, 0.95);
  for (guint k = 0; k < SHARES; k++)
    {
      guint n = (guint)g_rand_int_range (rand, 1, k % 2 == 0 ? 300 : 20000);
      guint x = k % 3 == 0 ? (guint)(n * pow (g_rand_double (rand), 4.0))
                           : (guint)g_rand_int_range (rand, 0, (gint32)n + 1);
      print_share (x, n, levels[k % 3]);
    }
}

/* Values and weights of each case in long form, with what came out of them. */
static void
print_medians (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (2);
  puts ("case,value,weight,median,weighted,p,quantile");
  for (guint c = 0; c < MEDIANS; c++)
    {
      guint n = (guint)g_rand_int_range (rand, 1, 60);
      gboolean whole = c % 3 == 0; /* ties of values and of weights */
      double values[60], weights[60], sorted[60];
      for (guint k = 0; k < n; k++)
        {
          values[k]
              = whole ? g_rand_int_range (rand, -5, 6) : g_rand_double_range (rand, -90.0, 90.0);
          weights[k]
              = whole ? g_rand_int_range (rand, 1, 4) : g_rand_double_range (rand, 0.01, 40.0);
        }
      memcpy (sorted, values, n * sizeof *values);
      for (guint k = 1; k < n; k++)
        for (guint j = k; j > 0 && sorted[j] < sorted[j - 1]; j--)
          {
            double other = sorted[j];
            sorted[j] = sorted[j - 1];
            sorted[j - 1] = other;
          }
      double p = g_rand_double (rand);
      for (guint k = 0; k < n; k++)
        printf ("%u,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", c, values[k], weights[k],
                tf_median (values, n), tf_weighted_median (values, weights, n), p,
                tf_quantile (sorted, n, p));
    }
}

static void
print_cycles (void)
{
  puts ("number,min_year,min_month,max_year,max_month,max1_year,max1_month,north,south");
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    printf ("%d,%d,%d,%d,%d,%d,%d,%d,%d\n", c->number, c->min_year, c->min_month, c->max_year,
            c->max_month, c->max1_year, c->max1_month, tf_hale_expected (c->number, 1),
            tf_hale_expected (c->number, -1));
}

/* Rows "year,month,day,hour,lat,tilt,separation" on standard input; a field may be empty. */
static TfSample *
read_sample (void)
{
  TfSample *sample = tf_sample_new ();
  char line[512];
  while (fgets (line, sizeof line, stdin) != NULL)
    {
      g_auto (GStrv) fields = g_strsplit (g_strstrip (line), ",", -1);
      double numbers[7] = { NAN, NAN, NAN, NAN, NAN, NAN, NAN };
      for (guint k = 0; k < 7 && fields[k] != NULL; k++)
        tf_number_read (fields[k], &numbers[k]);
      TfSampleRow row;
      tf_sample_row_init (&row);
      row.region = row.passage = tf_sample_get_n (sample);
      row.time = tf_time_from_calendar ((int)numbers[0], (int)numbers[1], (int)numbers[2],
                                        (int)numbers[3], 0, 0.0, TF_SCALE_UTC);
      row.lat_deg = numbers[4];
      row.axis_tilt_deg = numbers[5];
      row.separation_deg = numbers[6];
      tf_sample_add (sample, &row);
    }
  return sample;
}

static TfVerdict *
judge (const TfSample *sample)
{
  TfDivideParams divide;
  TfVerdictParams params;
  tf_options_reset (tf_divide_options, &divide);
  tf_options_reset (tf_verdict_options, &params);
  g_autoptr (TfDivides) divides = tf_divides_new (&divide);
  TfVerdict *verdicts = g_new (TfVerdict, tf_sample_get_n (sample) + 1);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    verdicts[k] = tf_verdict_judge (tf_sample_get (sample, k), divides, &params);
  return verdicts;
}

static void
print_calls (void)
{
  g_autoptr (TfSample) sample = read_sample ();
  g_autofree TfVerdict *verdicts = judge (sample);
  puts ("number,other,sure,reason,verdict,why");
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    printf ("%d,%d,%d,%s,%s,%s\n", verdicts[k].cycle.number, verdicts[k].cycle.other,
            verdicts[k].cycle.sure, verdicts[k].cycle.reason, tf_verdict_name (verdicts[k].kind),
            verdicts[k].reason != NULL ? verdicts[k].reason : "");
}

static void
print_fits (void)
{
  static const double separations[] = { 0.0, 2.5 };
  g_autoptr (TfSample) sample = read_sample ();
  g_autofree TfVerdict *verdicts = judge (sample);
  puts ("form,estimator,separation,n,no_polarity,slope,low,high,intercept,scatter,mean,median");
  for (guint s = 0; s < G_N_ELEMENTS (separations); s++)
    for (int form = 0; form < 4; form++)
      for (int estimator = 0; estimator < 4; estimator++)
        {
          TfJoyParams params = { 0 };
          tf_options_reset (tf_joy_options, &params);
          params.form = form;
          params.estimator = estimator;
          params.separation_min_deg = separations[s];
          params.draws = form == TF_JOY_LINEAR_FREE && estimator == TF_JOY_ROBUST ? 0 : 200;
          if (estimator == TF_JOY_FLUX_WEIGHTED)
            continue;
          TfJoyFit fit = tf_joy_fit (sample, verdicts, 0, 0, &params);
          printf ("%s,%s,%g,%u,%u,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n",
                  tf_joy_form_names[form], tf_joy_estimator_names[estimator], separations[s], fit.n,
                  fit.no_polarity, fit.slope, fit.slope_ci.low, fit.slope_ci.high, fit.intercept,
                  fit.scatter_deg, fit.mean_tilt_deg, fit.median_tilt_deg);
        }
}

int
main (int argc, char **argv)
{
  static const struct
  {
    const char *name;
    void (*print) (void);
  } tables[] = { { "shares", print_shares },    { "medians", print_medians },
                 { "cycles", print_cycles },    { "calls", print_calls },
                 { "joy", print_fits },         { "fisher", print_fisher },
                 { "pairs", print_pairs },      { "angles", print_angles },
                 { "opinions", print_opinions } };
  for (guint k = 0; k < G_N_ELEMENTS (tables); k++)
    if (argc == 2 && strcmp (argv[1], tables[k].name) == 0)
      {
        tables[k].print ();
        return 0;
      }
  return 2;
}
