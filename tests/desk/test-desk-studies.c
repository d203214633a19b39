/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Named studies: conditions, keeping, copies, renaming, undo, editions, files. */

#include "test-desk-laws.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-condition-list.h"
#include "tf-condition-row.h"
#include "tf-power-run.h"
#include "tf-power-view.h"
#include "tf-session-studies.h"
#include "tf-sieve.h"
#include "test-desk.h"

static guint
picks (TfSession *session)
{
  return tf_sample_get_n (tf_session_get_laws (session)->findings->sample);
}

static gboolean
is_settled (gpointer session)
{
  TfLawsAnswer *answer = tf_session_get_laws (session);
  return tf_session_get_pending (session) == 0 && answer != NULL && answer->complete
         && !tf_session_awaits_laws (session) && !tf_session_makes_edition (session)
         && tf_session_get_studies (session) != NULL;
}

static gboolean
has_study (TfSession *session, const char *name)
{
  const GPtrArray *studies = tf_session_get_studies (session);
  for (guint k = 0; studies != NULL && k < studies->len; k++)
    if (strcmp (((TfNamed *)g_ptr_array_index (studies, k))->name, name) == 0)
      return TRUE;
  return FALSE;
}

static gboolean
has_low (gpointer session)
{
  return is_settled (session) && has_study (session, "low");
}

static gboolean
has_no_low (gpointer session)
{
  return is_settled (session) && !has_study (session, "low");
}

static gboolean
has_nearer (gpointer session)
{
  return is_settled (session) && has_study (session, "nearer") && !has_study (session, "low");
}

static void
add_condition (TfSession *session, const char *column, TfIs is, double number)
{
  g_autoptr (TfStudy) study = tf_study_copy (tf_session_get_study (session));
  g_ptr_array_add (study->region_conditions, tf_condition_new (column, is, number, NULL));
  tf_session_set_study (session, study);
}

static void
wait_settled (TfSession *session)
{
  test_desk_wait ("the session", is_settled, session);
}

/* 14 regions, four of them at 24 degrees and more. */
static void
a_condition_is_kept_and_found_again (void)
{
  g_autofree char *path = test_desk_laws_ledger ("studies.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  g_assert_cmpuint (picks (session), ==, 14);
  g_assert_false (tf_session_is_study_changed (session));
  add_condition (session, "lat_deg", TF_IS_WITHIN, 20);
  g_assert_true (tf_session_is_study_changed (session));
  wait_settled (session);
  g_assert_cmpuint (picks (session), ==, 10);
  g_assert_true (tf_session_keep_study (session, "low"));
  g_assert_false (tf_session_is_study_changed (session));
  test_desk_wait ("the study in the ledger", has_low, session);
  g_assert_cmpuint (tf_session_get_kept_version (session), ==, 1);
  tf_session_choose_study (session, "default");
  wait_settled (session);
  g_assert_cmpuint (picks (session), ==, 14);
  tf_session_choose_study (session, "low");
  wait_settled (session);
  g_assert_cmpuint (picks (session), ==, 10);
}

/* What is changed and not kept is there again; back to what is kept by a command. */
static void
a_change_is_set_aside (void)
{
  g_autofree char *path = test_desk_laws_ledger ("aside.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  g_assert_true (tf_session_keep_study (session, "low"));
  test_desk_wait ("the study in the ledger", has_low, session);
  add_condition (session, "lat_deg", TF_IS_WITHIN, 20);
  tf_session_choose_study (session, "default");
  g_assert_cmpuint (tf_session_get_study (session)->region_conditions->len, ==, 0);
  tf_session_choose_study (session, "low");
  g_assert_cmpuint (tf_session_get_study (session)->region_conditions->len, ==, 1);
  g_assert_true (tf_session_is_study_changed (session));
  tf_session_revert_study (session);
  g_assert_cmpuint (tf_session_get_study (session)->region_conditions->len, ==, 0);
  g_assert_false (tf_session_is_study_changed (session));
  wait_settled (session);
}

static guint
count_divides (const char *path, const char *study)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (GPtrArray) moved = tf_ledger_divides (ledger, study, NULL);
  return moved->len;
}

/* A copy has the divides with it; renaming and undo each are one deed. */
static void
copies_take_their_divides_along (void)
{
  g_autofree char *path = test_desk_laws_ledger ("copies.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  tf_session_choose_divide (session, 24, 1, TF_WINGS_WHOLE);
  tf_session_move_divide (session, 3);
  g_assert_false (tf_session_keep_study (session, "low")); /* a divide is in hand */
  g_assert_true (tf_session_keep_divide (session));
  g_assert_true (tf_session_keep_study (session, "low"));
  test_desk_wait ("the copy", has_low, session);
  g_assert_cmpuint (count_divides (path, "low"), ==, 1);
  g_assert_true (tf_divides_is_moved (tf_session_get_study (session)->divides, 24, 1));
  g_assert_false (tf_session_rename_study (session, "low"));
  g_assert_true (tf_session_rename_study (session, "nearer"));
  test_desk_wait ("the new name", has_nearer, session);
  g_assert_cmpuint (count_divides (path, "nearer"), ==, 1);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the old name", has_low, session);
  g_assert_false (has_study (session, "nearer"));
  tf_session_choose_study (session, "low");
  g_assert_true (tf_session_put_away_study (session));
  test_desk_wait ("it to be put away", has_no_low, session);
  g_assert_cmpstr (tf_session_get_study (session)->name, ==, "default");
}

static gboolean
has_edition (gpointer session)
{
  const GPtrArray *editions = tf_session_get_editions (session);
  return is_settled (session) && editions != NULL && editions->len > 0;
}

static void
take_differences (const GPtrArray *differences, const char *trouble, gpointer session)
{
  g_assert_null (trouble);
  g_object_set_data (G_OBJECT (session), "differences", GUINT_TO_POINTER (differences->len + 1));
}

static gboolean
has_differences (gpointer session)
{
  return g_object_get_data (session, "differences") != NULL;
}

static guint
compare_with_now (TfSession *session, const char *edition)
{
  g_object_set_data (G_OBJECT (session), "differences", NULL);
  tf_session_compare_editions (session, edition, NULL, take_differences, G_OBJECT (session));
  test_desk_wait ("the differences", has_differences, session);
  return GPOINTER_TO_UINT (g_object_get_data (G_OBJECT (session), "differences")) - 1;
}

static gboolean
has_two_editions (gpointer session)
{
  return has_edition (session) && tf_session_get_editions (session)->len == 2;
}

static gboolean
is_robust (gpointer session)
{
  return tf_session_get_study (session)->joy.estimator == TF_JOY_ROBUST;
}

/* A choice of "what if" is taken in as an edition, and taken back with it. */
static void
a_what_if_is_taken_in (void)
{
  g_autofree char *path = test_desk_laws_ledger ("what-if.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  g_assert_false (tf_session_apply_what_if (session, "floor-a-fifth-lower"));
  g_assert_false (tf_session_apply_what_if (session, "as-chosen"));
  tf_session_keep_edition (session, "first");
  g_assert_true (tf_session_makes_edition (session));
  test_desk_wait ("the edition", has_edition, session);
  g_assert_cmpuint (compare_with_now (session, "first"), ==, 0);
  g_assert_true (tf_session_apply_what_if (session, "least-squares"));
  g_assert_cmpint (tf_session_get_study (session)->joy.estimator, ==, TF_JOY_LEAST_SQUARES);
  test_desk_wait ("the second edition", has_two_editions, session);
  const GPtrArray *editions = tf_session_get_editions (session);
  g_assert_cmpstr (((TfNamed *)g_ptr_array_index (editions, 1))->name, ==, "default · least-squares");
  g_assert_cmpuint (compare_with_now (session, "first"), >, 0);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the study as it was", is_robust, session);
  wait_settled (session);
}

static gboolean
file_is_there (gpointer path)
{
  return g_file_test (path, G_FILE_TEST_EXISTS);
}

static void
a_study_goes_through_a_file (void)
{
  g_autofree char *path = test_desk_laws_ledger ("files.ledger");
  g_autofree char *json = test_desk_path ("low.json");
  g_autoptr (GFile) file = g_file_new_for_path (json);
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  add_condition (session, "lat_deg", TF_IS_WITHIN, 20);
  g_assert_true (tf_session_keep_study (session, "low"));
  tf_session_save_study (session, file);
  test_desk_wait ("the file", file_is_there, json);
  test_desk_wait ("the study in the ledger", has_low, session);
  g_assert_true (tf_session_put_away_study (session));
  test_desk_wait ("it to be put away", has_no_low, session);
  tf_session_open_study (session, file);
  test_desk_wait ("the study again", has_low, session);
  g_assert_cmpstr (tf_session_get_study (session)->name, ==, "low");
  wait_settled (session);
  g_assert_cmpuint (picks (session), ==, 10);
}

/* -- pickers ----------------------------------------------------------------------------------- */

static void
check_round (const char *column, TfIs is, double number, const char *text)
{
  g_autoptr (TfCondition) condition = tf_condition_new (column, is, number, text);
  GtkWidget *row = g_object_ref_sink (tf_condition_row_new (condition));
  g_autoptr (TfCondition) again = tf_condition_row_dup (TF_CONDITION_ROW (row));
  g_assert_nonnull (again);
  g_autofree char *a = tf_condition_dup_text (condition), *b = tf_condition_dup_text (again);
  g_assert_cmpstr (a, ==, b);
  g_object_unref (row);
}

static void
pickers_say_what_they_were_given (void)
{
  if (!test_desk_has_display ())
    return;
  check_round ("flux_unsigned_mx", TF_IS_AT_LEAST, 1.25e21, NULL);
  check_round ("lat_deg", TF_IS_BEYOND, 12.5, NULL);
  check_round ("instrument", TF_IS_NOT, NAN, "TEST-A");
  check_round ("leading_sure", TF_IS_EQUALS, 1, NULL);
  check_round ("time", TF_IS_AT_MOST, NAN, "2012-06-30");
  check_round ("pieces", TF_IS_ONE_OF, 2, NULL);
  GtkWidget *row = g_object_ref_sink (tf_condition_row_new (NULL));
  g_assert_null (tf_condition_row_dup (TF_CONDITION_ROW (row))); /* it has no value yet */
  g_object_unref (row);
}

/* -- power ------------------------------------------------------------------------------------- */

static gboolean
is_idle (gpointer view)
{
  return !tf_power_view_is_busy (view);
}

static guint
count_points (TfPowerView *view)
{
  double wanted;
  g_autoptr (TfPowerCurve) curve = tf_power_view_dup_curve (view, &wanted);
  return curve != NULL ? curve->points->len : 0;
}

/* Worked out one number after the other it is the curve that `power` gives. */
static void
power_is_worked_out_and_stopped (void)
{
  if (!test_desk_has_display ())
    return;
  TfPowerView *view = TF_POWER_VIEW (g_object_ref_sink (tf_power_view_new ()));
  g_assert_true (tf_power_view_set_option (view, "what", "share"));
  g_assert_true (tf_power_view_set_option (view, "runs", "20"));
  g_assert_true (tf_power_view_set_option (view, "most", "200"));
  g_assert_false (tf_power_view_set_option (view, "most", "few"));
  tf_power_view_start (view);
  g_assert_true (tf_power_view_is_busy (view));
  test_desk_wait ("the curve", is_idle, view);
  double wanted;
  g_autoptr (TfPowerCurve) curve = tf_power_view_dup_curve (view, &wanted);
  TfPowerParams params;
  tf_options_reset (tf_power_options, &params);
  params.what = TF_POWER_SHARE;
  params.runs = 20;
  params.most = 200;
  params.draws = 100;
  g_autoptr (TfPowerCurve) whole = tf_power_run (&params, NULL, NULL);
  g_assert_cmpuint (curve->points->len, ==, 3);
  for (guint k = 0; k < 3; k++)
    g_assert_cmpuint (g_array_index (curve->points, TfPowerPoint, k).found, ==,
                      g_array_index (whole->points, TfPowerPoint, k).found);
  g_assert_true (tf_power_view_set_option (view, "most", "1000000"));
  tf_power_view_start (view);
  tf_power_view_stop (view);
  g_assert_false (tf_power_view_is_busy (view));
  g_assert_cmpuint (count_points (view), <, 3);
  g_object_unref (view);
}

/* -- keys on a chart ----------------------------------------------------------------------------- */

/* Every dot of the Joy plot is met once from left to right, and opens its own region. */
static void
every_dot_is_met_by_keys (void)
{
  g_autofree char *path = test_desk_laws_ledger ("stepped.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  wait_settled (session);
  TfLawsCharts *charts = tf_session_get_laws (session)->charts;
  TfChartStyle style = tf_chart_style (FALSE, FALSE, 11);
  TfArea area = { 0, 0, 400, 400 };
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    {
      guint n, met = 0, there = 0;
      g_autofree double *xy = chart->dup_places (charts, &style, area, &n);
      double x = NAN, y = NAN;
      for (guint k = 0; k < n; k++)
        there += !isnan (xy[2 * k]);
      for (int at = tf_laws_step (xy, n, TF_STEP_RIGHT, x, y, 0); at >= 0;
           at = tf_laws_step (xy, n, TF_STEP_RIGHT, x, y, 0))
        {
          x = xy[2 * at];
          y = xy[2 * at + 1];
          met++;
          g_autofree char *words = chart->dup_sign (charts, (guint)at);
          g_assert_cmpuint (strlen (words), >, 8);
          if (strcmp (chart->name, "emergence") != 0)
            {
              g_test_message ("%s: %s at %.1f, %.1f", chart->name, words, x, y);
              g_assert_cmpint (chart->hit (charts, &style, area, x, y, -1), >=, 0);
            }
        }
      g_assert_cmpuint (met, ==, there);
      g_assert_true (met > 0 || strcmp (chart->name, "emergence") == 0);
    }
}

void
test_desk_add_studies (void)
{
  g_test_add_func ("/desk/studies/a-condition-is-kept-and-found-again",
                   a_condition_is_kept_and_found_again);
  g_test_add_func ("/desk/studies/a-change-is-set-aside", a_change_is_set_aside);
  g_test_add_func ("/desk/studies/copies-take-their-divides-along", copies_take_their_divides_along);
  g_test_add_func ("/desk/studies/a-what-if-is-taken-in", a_what_if_is_taken_in);
  g_test_add_func ("/desk/studies/a-study-goes-through-a-file", a_study_goes_through_a_file);
  g_test_add_func ("/desk/studies/pickers-say-what-they-were-given",
                   pickers_say_what_they_were_given);
  g_test_add_func ("/desk/studies/power-is-worked-out-and-stopped", power_is_worked_out_and_stopped);
  g_test_add_func ("/desk/studies/every-dot-is-met-by-keys", every_dot_is_met_by_keys);
}
