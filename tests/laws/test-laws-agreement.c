/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <stdlib.h>
#include <string.h>

#include "tf-agreement.h"
#include "tf-check.h"

/* Cohen 1960 and 1968: 200 cases, kappa .492, weighted .348; deviations by Cohen 1960 and by Fleiss,
 * Cohen & Everitt 1969. */
static void
test_cohens_table (void)
{
  static const double counts[] = { 88, 14, 18, 10, 40, 10, 2, 6, 12 };
  static const double weights[] = { 0, 1, 3, 1, 0, 6, 3, 6, 0 };
  TfCohen plain = tf_cohen_table (counts, 3, NULL), weighed = tf_cohen_table (counts, 3, weights);
  g_assert_cmpuint (plain.n, ==, 200);
  tf_check_near ("raw", plain.raw, 0.70, 1e-12);
  tf_check_near ("by chance", plain.expected, 0.41, 1e-12);
  tf_check_near ("kappa", plain.kappa, 0.4915, 5.1e-5);
  tf_check_near ("deviation of 1960", plain.sd_simple, 0.0549, 5.1e-5);
  tf_check_near ("deviation of 1969", plain.sd, 0.0510, 5.1e-5);
  tf_check_near ("weighted", weighed.kappa, 0.3478, 5.1e-5);
  tf_check_near ("adjusted", plain.adjusted, (3 * 0.7 - 1) / 2, 1e-12);
  tf_check_near ("prevalence", plain.prevalence, 0.5 * (0.6 + 0.5), 1e-12);
  tf_check_near ("bias", plain.bias, 0.5 * (0.1 + 0.0 + 0.1), 1e-12);
}

/* 95 % of one kind: 93 % agree, and kappa says little: the reason why prevalence stands beside it. */
static void
test_prevalence (void)
{
  static const double counts[] = { 92, 4, 3, 1 }, one_kind[] = { 50, 0, 0, 0 };
  TfCohen c = tf_cohen_table (counts, 2, NULL);
  tf_check_near ("raw", c.raw, 0.93, 1e-12);
  tf_check_near ("by chance", c.expected, 0.96 * 0.95 + 0.04 * 0.05, 1e-12);
  tf_check_between ("kappa", c.kappa, 0.1, 0.3);
  tf_check_near ("adjusted", c.adjusted, 0.86, 1e-12);
  TfCohen all = tf_cohen_table (one_kind, 2, NULL);
  tf_check_near ("raw of one kind", all.raw, 1.0, 0.0);
  tf_check_nan ("no kappa of one kind", all.kappa);
  tf_check_nan ("of nothing", tf_cohen_table ((const double[4]){ 0 }, 2, NULL).raw);
}

/* Cases that one did not judge do not count; the interval holds the figure. */
static void
test_cases (void)
{
  int first[90], second[90];
  for (guint k = 0; k < 90; k++)
    {
      first[k] = k % 3 == 0;
      second[k] = k % 7 == 0 ? 1 - first[k] : first[k];
    }
  TfCohen all = tf_cohen (first, second, 90, 2);
  g_assert_cmpuint (all.n, ==, 90);
  first[3] = second[5] = TF_NO_OPINION;
  g_assert_cmpuint (tf_cohen (first, second, 90, 2).n, ==, 88);
  TfInterval interval = tf_cohen_interval (first, second, 90, 2, 400, 1, 0.95);
  tf_check_between ("kappa in its interval", all.kappa, interval.low, interval.high);
  tf_check_between ("its width", interval.high - interval.low, 0.1, 0.5);
}

static void
read_rows (const char *text, guint *counts, guint kinds)
{
  guint at = 0;
  for (; *text != '\0'; text++)
    if (*text >= '0' && *text <= '9')
      counts[at++] = (guint)(*text - '0');
  g_assert_cmpuint (at % kinds, ==, 0);
}

static void
read_digits (guint *counts, const char *text)
{
  g_auto (GStrv) words = g_strsplit (text, " ", -1);
  for (char **word = words; *word != NULL; word++)
    if (**word != '\0')
      *counts++ = (guint)atoi (*word);
}

/* Fleiss 1971: 30 patients, 6 psychiatrists, 5 diagnoses: kappa .430. */
static void
test_fleiss_1971 (void)
{
  guint counts[150], row[5] = { 6, 0, 0, 0, 0 };
  read_rows ("00060 03003 01401 00006 03030 20400 00402 20310 20040 00006 10050 11040 03300 10050 "
             "02031 00501 30012 51000 02040 10203 00006 01050 02013 20040 10041 05010 40002 02040 "
             "10500 00006",
             counts, 5);
  TfFleiss f = tf_fleiss (counts, 30, 5);
  g_assert_cmpuint (f.people, ==, 6);
  tf_check_near ("raw", f.raw, 0.5556, 5.1e-5);
  tf_check_near ("by chance", f.expected, 0.2199, 5.1e-5);
  tf_check_near ("kappa", f.kappa, 0.4302, 5.1e-5);
  tf_check_near ("z by the variance of 1979", f.z, 17.65, 0.0051);
  tf_check_near ("prevalence", f.prevalence, 55.0 / 180.0, 1e-12);
  guint second[50];
  read_digits (second,
               "0 0 0 0 14  0 2 6 4 2  0 0 3 5 6  0 3 9 2 0  2 2 8 1 1  7 7 0 0 0  3 2 6 3 0  "
               "2 5 3 2 2  6 5 2 1 0  0 2 2 3 7");
  tf_check_near ("14 people, 10 cases", tf_fleiss (second, 10, 5).kappa, 0.2099, 5.1e-5);
  counts[0]++;
  tf_check_nan ("rows of unlike sums", tf_fleiss (counts, 30, 5).kappa);
  tf_check_nan ("all in one category", tf_fleiss (row, 1, 5).kappa);
}

/* Krippendorff's data "C": four people, twelve units, seven answers missing. */
static void
test_krippendorff (void)
{
  static const char *const units[] = { "11.1", "2232", "3333", "3333", "2222", "1234",
                                       "4444", "1121", "2222", ".555", "..11", "..3." };
  static const double expected[] = { 0.7434, 0.8154, 0.8491, 0.7974 };
  double values[48];
  for (guint u = 0; u < 12; u++)
    for (guint p = 0; p < 4; p++)
      values[p * 12 + u] = units[u][p] == '.' ? NAN : units[u][p] - '0';
  for (int scale = 0; scale < 4; scale++)
    tf_check_near ("alpha", tf_krippendorff (values, 4, 12, scale), expected[scale], 5.1e-5);
  TfInterval interval = tf_krippendorff_interval (values, 4, 12, TF_SCALE_NOMINAL, 300, 1, 0.95);
  tf_check_between ("alpha in its interval", expected[0], interval.low, interval.high);
  for (guint k = 0; k < 48; k++)
    values[k] = 2.0;
  tf_check_nan ("all alike", tf_krippendorff (values, 4, 12, TF_SCALE_NOMINAL));
}

static double
alpha_of_text (const char *const *rows, guint people, TfAgreementScale scale)
{
  double values[64];
  guint n = (guint)strlen (rows[0]);
  for (guint p = 0; p < people; p++)
    for (guint u = 0; u < n; u++)
      values[p * n + u] = rows[p][u] == '.' ? NAN : rows[p][u] - '0';
  return tf_krippendorff (values, people, n, scale);
}

/* His two smaller examples (tables from memory; the figures are the reference's). */
static void
test_krippendorffs_others (void)
{
  static const char *const three[] = { ".....34121133.3", "1.213343.......", "..21344.21133.4" };
  static const char *const two[] = { "0100000010", "1110010000" };
  tf_check_near ("nominal", alpha_of_text (three, 3, TF_SCALE_NOMINAL), 0.6914, 5.1e-5);
  tf_check_near ("ordinal", alpha_of_text (three, 3, TF_SCALE_ORDINAL), 0.8067, 5.1e-5);
  tf_check_near ("interval", alpha_of_text (three, 3, TF_SCALE_INTERVAL), 0.8108, 5.1e-5);
  tf_check_near ("binary", alpha_of_text (two, 2, TF_SCALE_NOMINAL), 0.0952, 5.1e-5);
}

void
test_laws_add_agreement (void)
{
  g_test_add_func ("/laws/agreement/cohens-table", test_cohens_table);
  g_test_add_func ("/laws/agreement/kappa-misleads-at-95-to-5", test_prevalence);
  g_test_add_func ("/laws/agreement/cases-not-judged-do-not-count", test_cases);
  g_test_add_func ("/laws/agreement/fleiss-1971", test_fleiss_1971);
  g_test_add_func ("/laws/agreement/krippendorffs-data", test_krippendorff);
  g_test_add_func ("/laws/agreement/krippendorffs-smaller-examples", test_krippendorffs_others);
}
