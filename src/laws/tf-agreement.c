/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-agreement.h"

#include <math.h>
#include <stdlib.h>

/* -- two people --------------------------------------------------------------------------------- */

/* Shares of a table: of its cells, rows and columns. */
typedef struct
{
  guint kinds;
  double cell[TF_AGREEMENT_KINDS][TF_AGREEMENT_KINDS];
  double row[TF_AGREEMENT_KINDS], column[TF_AGREEMENT_KINDS];
} Shares;

static double
read_shares (const double *counts, guint kinds, Shares *shares)
{
  double n = 0.0;
  *shares = (Shares){ .kinds = kinds };
  for (guint k = 0; k < kinds * kinds; k++)
    n += counts[k];
  for (guint i = 0; i < kinds; i++)
    for (guint j = 0; j < kinds; j++)
      {
        double share = counts[i * kinds + j] / n;
        shares->cell[i][j] = share;
        shares->row[i] += share;
        shares->column[j] += share;
      }
  return n;
}

/* Fleiss, Cohen & Everitt 1969, eq. 13. */
static double
cohen_sd (const Shares *s, const TfCohen *c, double n)
{
  double sum = 0.0, rest = 1.0 - c->kappa;
  for (guint i = 0; i < s->kinds; i++)
    for (guint j = 0; j < s->kinds; j++)
      {
        double both
            = i == j ? 1.0 - (s->row[i] + s->column[i]) * rest : (s->row[j] + s->column[i]) * rest;
        sum += s->cell[i][j] * both * both;
      }
  double part = c->kappa - c->expected * rest;
  return sqrt (fmax (0.0, sum - part * part) / n) / (1.0 - c->expected);
}

static double
weighted_kappa (const Shares *s, const double *weights)
{
  double seen = 0.0, chance = 0.0;
  for (guint i = 0; i < s->kinds; i++)
    for (guint j = 0; j < s->kinds; j++)
      {
        seen += weights[i * s->kinds + j] * s->cell[i][j];
        chance += weights[i * s->kinds + j] * s->row[i] * s->column[j];
      }
  return chance > 0.0 ? 1.0 - seen / chance : NAN;
}

TfCohen
tf_cohen_table (const double *counts, guint kinds, const double *weights)
{
  const TfCohen none = { 0, NAN, NAN, NAN, NAN, NAN, NAN, NAN, NAN };
  Shares s;
  if (kinds < 2 || kinds > TF_AGREEMENT_KINDS)
    return none;
  double n = read_shares (counts, kinds, &s);
  if (!(n > 0.0))
    return none;
  TfCohen c = { .n = (guint)n };
  for (guint k = 0; k < kinds; k++)
    {
      c.raw += s.cell[k][k];
      c.expected += s.row[k] * s.column[k];
      c.prevalence = fmax (c.prevalence, 0.5 * (s.row[k] + s.column[k]));
      c.bias += 0.5 * fabs (s.row[k] - s.column[k]);
    }
  gboolean varied = c.expected < 1.0 - 1e-12;
  c.kappa = varied ? (c.raw - c.expected) / (1.0 - c.expected) : NAN;
  c.sd = varied ? cohen_sd (&s, &c, n) : NAN;
  c.sd_simple = varied ? sqrt (c.raw * (1.0 - c.raw) / n) / (1.0 - c.expected) : NAN;
  c.adjusted = (kinds * c.raw - 1.0) / (kinds - 1.0);
  if (weights != NULL)
    {
      c.kappa = weighted_kappa (&s, weights);
      c.sd = c.sd_simple = NAN;
    }
  return c;
}

typedef struct
{
  const int *first, *second;
  guint kinds;
} Pair;

/* @rows: NULL: 0 to n - 1 */
static TfCohen
cohen_of (const Pair *pair, const guint *rows, guint n)
{
  double counts[TF_AGREEMENT_KINDS * TF_AGREEMENT_KINDS] = { 0 };
  for (guint k = 0; k < n; k++)
    {
      guint row = rows != NULL ? rows[k] : k;
      int a = pair->first[row], b = pair->second[row];
      if (a >= 0 && b >= 0 && a < (int)pair->kinds && b < (int)pair->kinds)
        counts[(guint)a * pair->kinds + (guint)b] += 1.0;
    }
  return tf_cohen_table (counts, pair->kinds, NULL);
}

TfCohen
tf_cohen (const int *first, const int *second, guint n, guint kinds)
{
  const Pair pair = { first, second, MIN (kinds, TF_AGREEMENT_KINDS) };
  return cohen_of (&pair, NULL, n);
}

static double
draw_kappa (const guint *rows, guint n, gpointer data)
{
  return cohen_of (data, rows, n).kappa;
}

/* Every case a cluster of its own. */
static guint32 *
number_cases (guint n)
{
  guint32 *cases = g_new (guint32, n + 1);
  for (guint k = 0; k < n; k++)
    cases[k] = k;
  return cases;
}

TfInterval
tf_cohen_interval (const int *first, const int *second, guint n, guint kinds, guint draws,
                   guint64 seed, double level)
{
  Pair pair = { first, second, MIN (kinds, TF_AGREEMENT_KINDS) };
  g_autofree guint32 *cases = number_cases (n);
  return tf_bootstrap_clusters (cases, n, draws, seed, level, NULL, draw_kappa, &pair);
}

/* -- the same number of people on every case ---------------------------------------------------- */

static guint
row_sum (const guint *row, guint kinds)
{
  guint sum = 0;
  for (guint k = 0; k < kinds; k++)
    sum += row[k];
  return sum;
}

/* Fleiss, Nee & Landis 1979, eq. 12: the deviation of kappa when all answer by chance. */
static double
fleiss_deviation (const double *share, guint kinds, double n, double people)
{
  double spread = 0.0, skew = 0.0;
  for (guint k = 0; k < kinds; k++)
    {
      double pq = share[k] * (1.0 - share[k]);
      spread += pq;
      skew += pq * (1.0 - 2.0 * share[k]);
    }
  return sqrt (2.0 * (spread * spread - skew) / (n * people * (people - 1.0))) / spread;
}

TfFleiss
tf_fleiss (const guint *counts, guint n, guint kinds)
{
  TfFleiss f = { n, 0, NAN, NAN, NAN, NAN, NAN };
  guint people = n > 0 ? row_sum (counts, kinds) : 0;
  double share[TF_AGREEMENT_KINDS] = { 0 }, raw = 0.0, expected = 0.0, commonest = 0.0;
  if (people < 2 || kinds < 2 || kinds > TF_AGREEMENT_KINDS)
    return f;
  for (guint i = 0; i < n; i++)
    {
      if (row_sum (counts + i * kinds, kinds) != people)
        return f;
      for (guint k = 0; k < kinds; k++)
        {
          double chose = counts[i * kinds + k];
          share[k] += chose / ((double)n * people);
          raw += chose * (chose - 1.0) / ((double)n * people * (people - 1.0));
        }
    }
  for (guint k = 0; k < kinds; k++)
    {
      expected += share[k] * share[k];
      commonest = fmax (commonest, share[k]);
    }
  f = (TfFleiss){ n, people, raw, expected, NAN, NAN, commonest };
  if (expected < 1.0 - 1e-12)
    {
      f.kappa = (raw - expected) / (1.0 - expected);
      f.z = f.kappa / fleiss_deviation (share, kinds, n, people);
    }
  return f;
}

/* -- any number of people, some missing --------------------------------------------------------- */

typedef struct
{
  const double *values; /* [person][case] */
  guint people, n;
  TfAgreementScale scale;
  guint n_kinds;
  double *kinds; /* the different values, in order */
} Ratings;

static int
compare_numbers (gconstpointer a, gconstpointer b)
{
  double left = *(const double *)a, right = *(const double *)b;
  return (left > right) - (left < right);
}

static void
list_kinds (Ratings *ratings)
{
  guint m = 0, all = ratings->people * ratings->n;
  ratings->kinds = g_new (double, all + 1);
  for (guint k = 0; k < all; k++)
    if (!isnan (ratings->values[k]))
      ratings->kinds[m++] = ratings->values[k];
  qsort (ratings->kinds, m, sizeof *ratings->kinds, compare_numbers);
  for (guint k = 0; k < m; k++)
    if (k == 0 || ratings->kinds[k] > ratings->kinds[ratings->n_kinds - 1])
      ratings->kinds[ratings->n_kinds++] = ratings->kinds[k];
}

static guint
kind_of (const Ratings *ratings, double value)
{
  guint low = 0, high = ratings->n_kinds - 1;
  while (low < high)
    {
      guint middle = (low + high) / 2;
      if (ratings->kinds[middle] < value)
        low = middle + 1;
      else
        high = middle;
    }
  return low;
}

/* How far apart two kinds are, squared; @totals: how often each value is used. */
static double
difference (const Ratings *r, const double *totals, guint a, guint b)
{
  double between = 0.0, low = r->kinds[MIN (a, b)], high = r->kinds[MAX (a, b)];
  if (a == b)
    return 0.0;
  switch (r->scale)
    {
    case TF_SCALE_ORDINAL:
      for (guint k = MIN (a, b); k <= MAX (a, b); k++)
        between += totals[k];
      between -= 0.5 * (totals[a] + totals[b]);
      return between * between;
    case TF_SCALE_INTERVAL:
      return (high - low) * (high - low);
    case TF_SCALE_RATIO:
      return (high - low) * (high - low) / ((high + low) * (high + low));
    case TF_SCALE_NOMINAL:
    default:
      return 1.0;
    }
}

/* The coincidences of one case: every pair of answers, each answer counted once in all. */
static void
add_case (const Ratings *r, guint at, double *coincidences)
{
  guint kinds[256], m = 0;
  for (guint p = 0; p < r->people && m < G_N_ELEMENTS (kinds); p++)
    {
      double value = r->values[p * r->n + at];
      if (!isnan (value))
        kinds[m++] = kind_of (r, value);
    }
  for (guint i = 0; i < m; i++)
    for (guint j = 0; j < m; j++)
      if (i != j)
        coincidences[kinds[i] * r->n_kinds + kinds[j]] += 1.0 / (m - 1.0);
}

/* @rows: NULL: 0 to n - 1 */
static double
alpha_of (const Ratings *r, const guint *rows, guint n)
{
  g_autofree double *coincidences = g_new0 (double, (gsize)r->n_kinds * r->n_kinds + 1);
  g_autofree double *totals = g_new0 (double, r->n_kinds + 1);
  double all = 0.0, seen = 0.0, chance = 0.0;
  for (guint k = 0; k < n; k++)
    add_case (r, rows != NULL ? rows[k] : k, coincidences);
  for (guint a = 0; a < r->n_kinds; a++)
    for (guint b = 0; b < r->n_kinds; b++)
      totals[a] += coincidences[a * r->n_kinds + b];
  for (guint a = 0; a < r->n_kinds; a++)
    all += totals[a];
  for (guint a = 0; a < r->n_kinds; a++)
    for (guint b = 0; b < r->n_kinds; b++)
      {
        double apart = difference (r, totals, a, b);
        seen += coincidences[a * r->n_kinds + b] * apart;
        chance += totals[a] * totals[b] * apart;
      }
  return chance > 0.0 ? 1.0 - (all - 1.0) * seen / chance : NAN;
}

double
tf_krippendorff (const double *values, guint people, guint n, TfAgreementScale scale)
{
  Ratings ratings = { values, people, n, scale, 0, NULL };
  list_kinds (&ratings);
  double alpha = alpha_of (&ratings, NULL, n);
  g_free (ratings.kinds);
  return alpha;
}

static double
draw_alpha (const guint *rows, guint n, gpointer data)
{
  return alpha_of (data, rows, n);
}

TfInterval
tf_krippendorff_interval (const double *values, guint people, guint n, TfAgreementScale scale,
                          guint draws, guint64 seed, double level)
{
  Ratings ratings = { values, people, n, scale, 0, NULL };
  list_kinds (&ratings);
  g_autofree guint32 *cases = number_cases (n);
  TfInterval interval = tf_bootstrap_clusters (cases, n, draws, seed, level, NULL, draw_alpha, &ratings);
  g_free (ratings.kinds);
  return interval;
}
