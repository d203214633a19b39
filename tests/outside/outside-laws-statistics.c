/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "outside-laws.h"

#include <glib.h>
#include <math.h>
#include <stdio.h>

#include "tf-agreement.h"
#include "tf-circular.h"
#include "tf-line.h"
#include "tf-proportion.h"

enum
{
  CASES = 60,
  MOST = 40
};

void
print_fisher (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (3);
  double p[200], holm[200];
  guint t[200][4];
  for (guint k = 0; k < 200; k++)
    {
      gint32 most = k % 4 == 0 ? 4 : k % 4 == 1 ? 40 : k % 4 == 2 ? 400 : 20000;
      for (guint j = 0; j < 4; j++)
        t[k][j] = (guint)(g_rand_int_range (rand, 0, most) * (j % 2 == 0 ? 0.06 : 1.0));
      p[k] = tf_fisher_exact (t[k][0], t[k][1], t[k][2], t[k][3]);
    }
  tf_holm (p, 200, holm);
  puts ("a,b,c,d,p,holm");
  for (guint k = 0; k < 200; k++)
    printf ("%u,%u,%u,%u,%.17g,%.17g\n", t[k][0], t[k][1], t[k][2], t[k][3], p[k], holm[k]);
}

static void
print_pairs_case (guint c, guint n, const double *x, const double *y, const double *wx,
                  const double *wy)
{
  double p, tau = tf_kendall (x, y, n, &p);
  TfInterval sen = tf_sen_interval (x, y, n, 0.9);
  TfLine york = tf_line_york (x, y, wx, wy, n);
  for (guint k = 0; k < n; k++)
    {
      printf ("%u,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g", c, x[k], y[k], wx[k], wy[k],
              tau, p, sen.low, sen.high);
      for (const TfLineMethod *m = tf_line_methods; m->name != NULL; m++)
        printf (",%.17g,%.17g", m->fit (x, y, n).slope, m->fit (x, y, n).intercept);
      printf (",%.17g,%.17g,%.17g,%.17g,%.17g\n", york.slope, york.intercept, york.slope_sd,
              york.intercept_sd, york.chi2);
    }
}

void
print_pairs (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (4);
  printf ("case,x,y,wx,wy,tau,p,sen_low,sen_high");
  for (const TfLineMethod *m = tf_line_methods; m->name != NULL; m++)
    printf (",%s,%s_intercept", m->name, m->name);
  puts (",york,york_intercept,york_sd,york_intercept_sd,york_chi2");
  for (guint c = 0; c < CASES; c++)
    {
      guint n = (guint)g_rand_int_range (rand, 8, MOST);
      double x[MOST], y[MOST], wx[MOST], wy[MOST], slope = g_rand_double_range (rand, -3, 3);
      for (guint k = 0; k < n; k++)
        {
          x[k] = c % 3 == 0 ? g_rand_int_range (rand, 0, 12) : g_rand_double_range (rand, 0, 40);
          y[k] = slope * x[k] + g_rand_double_range (rand, -20, 20);
          if (c % 3 == 0)
            y[k] = round (y[k]);
          wx[k] = g_rand_double_range (rand, 0.5, 4);
          wy[k] = g_rand_double_range (rand, 0.05, 1);
        }
      print_pairs_case (c, n, x, y, wx, wy);
    }
}

void
print_angles (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (5);
  puts ("case,axes,first,second,mean,resultant,sd,concentration,rayleigh,correlation");
  for (guint c = 0; c < CASES; c++)
    {
      guint n = (guint)g_rand_int_range (rand, 6, MOST);
      gboolean axes = c % 2 == 0;
      double first[MOST], second[MOST], spread = g_rand_double_range (rand, 5, 90);
      for (guint k = 0; k < n; k++)
        {
          first[k]
              = remainder (150 + g_rand_double_range (rand, -spread, spread), axes ? 180 : 360);
          second[k] = remainder (first[k] + g_rand_double_range (rand, -60, 60), axes ? 180 : 360);
        }
      TfCircular f = tf_circular (first, n, axes);
      double r = tf_circular_correlation (first, second, n, axes);
      for (guint k = 0; k < n; k++)
        printf ("%u,%d,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", c, axes, first[k],
                second[k], f.mean_deg, f.resultant, f.sd_deg, f.concentration, f.rayleigh_p, r);
    }
}

/* Four people, 3 categories, one a half as common as the others; the fourth is often absent. */
void
print_opinions (void)
{
  g_autoptr (GRand) rand = g_rand_new_with_seed (6);
  puts ("case,a,b,c,d,cohen,sd,fleiss,z,nominal,ordinal,interval,ratio");
  for (guint c = 0; c < CASES; c++)
    {
      guint n = (guint)g_rand_int_range (rand, 12, MOST), counts[MOST][3] = { { 0 } };
      int who[4][MOST];
      double values[4 * MOST];
      for (guint k = 0; k < n; k++)
        {
          int truth = g_rand_int_range (rand, 0, 5) / 2;
          for (guint p = 0; p < 4; p++)
            {
              who[p][k] = g_rand_double (rand) < 0.7 ? truth : g_rand_int_range (rand, 0, 3);
              counts[k][who[p][k]] += p < 3;
              gboolean absent = p == 3 && g_rand_double (rand) < 0.4;
              values[p * n + k] = absent ? NAN : who[p][k] + 1;
            }
        }
      TfCohen cohen = tf_cohen (who[0], who[1], n, 3);
      TfFleiss fleiss = tf_fleiss (counts[0], n, 3);
      for (guint k = 0; k < n; k++)
        {
          printf ("%u,%d,%d,%d,%.17g,%.17g,%.17g,%.17g,%.17g", c, who[0][k], who[1][k], who[2][k],
                  values[3 * n + k], cohen.kappa, cohen.sd, fleiss.kappa, fleiss.z);
          for (int scale = 0; scale < 4; scale++)
            printf (",%.17g", tf_krippendorff (values, 4, n, (TfAgreementScale)scale));
          puts ("");
        }
    }
}
