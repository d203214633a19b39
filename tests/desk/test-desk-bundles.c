/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What goes out of the Laws bench as a file: study bundles, and each chart as a picture. */

#include "test-desk-laws.h"

#include <string.h>
#include <adwaita.h>

#include "tf-laws-bench.h"
#include "tf-save-as.h"
#include "tf-session-bundles.h"
#include "tf-session-studies.h"
#include "tf-study-task.h"
#include "tf-window-private.h"
#include "test-desk.h"

static gboolean
is_settled (gpointer session)
{
  TfLawsAnswer *answer = tf_session_get_laws (session);
  return tf_session_get_pending (session) == 0 && answer != NULL && answer->complete
         && !tf_session_awaits_laws (session) && !tf_session_makes_edition (session)
         && tf_session_get_studies (session) != NULL && !tf_save_as_is_busy (session);
}

/* -- bundles -------------------------------------------------------------------------------------- */

typedef struct
{
  gboolean there;
  guint n_differences, n_rows, n_picks;
  TfStudy *study;
  char *trouble;
} Told;

static void
told_clear (Told *told)
{
  g_clear_pointer (&told->study, tf_study_free);
  g_clear_pointer (&told->trouble, g_free);
  *told = (Told){ 0 };
}

static void
take (const TfBundleLook *look, const char *trouble, gpointer session)
{
  Told *told = g_object_get_data (session, "told");
  told->there = TRUE;
  told->trouble = g_strdup (trouble);
  if (look == NULL)
    return;
  told->n_differences = look->differences->len;
  told->n_rows = look->n_rows;
  told->n_picks = look->n_picks;
  told->study = tf_study_copy (look->study);
}

static gboolean
is_told (gpointer told)
{
  return ((const Told *)told)->there;
}

static void
look (TfSession *session, const char *path, Told *told)
{
  told_clear (told);
  g_object_set_data (G_OBJECT (session), "told", told);
  tf_session_look_at_bundle (session, path, take, G_OBJECT (session));
  test_desk_wait ("the bundle to be told", is_told, told);
}

static void
forge (const char *path)
{
  g_autofree char *text = NULL;
  gsize n;
  g_assert_true (g_file_get_contents (path, &text, &n, NULL));
  text[n / 2] ^= 1;
  g_assert_true (g_file_set_contents (path, text, (gssize)n, NULL));
}

/* The study of the window, with its moved divide and a change that is not kept, is worked out again to
 * the same; a damaged one is told in words; its study can be kept. */
static void
a_bundle_is_saved_and_read_back (void)
{
  g_autofree char *ledger = test_desk_laws_ledger ("bundle.ledger"), *zip = test_desk_path ("bundle.zip");
  g_autoptr (TfSession) session = test_desk_laws_session (ledger);
  Told told = { 0 };
  test_desk_wait ("the studies", is_settled, session);
  tf_session_choose_divide (session, 24, 1, TF_WINGS_WHOLE);
  tf_session_move_divide (session, 16);
  g_assert_true (tf_session_keep_divide (session));
  g_autoptr (TfStudy) study = tf_study_copy (tf_session_get_study (session));
  study->sieve.cmd_max_deg = 50;
  tf_session_set_study (session, study);
  test_desk_wait ("the deed", is_settled, session);
  tf_session_pick (session, 2012, 2014); /* it is of the whole study all the same */
  tf_session_save_bundle (session, zip);
  test_desk_wait ("the file", is_settled, session);
  look (session, zip, &told);
  g_assert_null (told.trouble);
  g_assert_cmpuint (told.n_differences, ==, 0);
  g_assert_cmpuint (told.n_rows, ==, 14);
  g_assert_cmpuint (told.n_picks, ==, 14);
  g_assert_cmpfloat (told.study->sieve.cmd_max_deg, ==, 50);
  g_assert_true (tf_divides_is_moved (told.study->divides, 24, 1));
  g_free (told.study->name);
  told.study->name = g_strdup ("from a paper");
  tf_session_take_study_of (session, told.study);
  test_desk_wait ("the study in the ledger", is_settled, session);
  g_assert_cmpstr (tf_session_get_study (session)->name, ==, "from a paper");
  g_assert_cmpuint (tf_session_get_kept_version (session), ==, 1);
  forge (zip);
  look (session, zip, &told);
  g_assert_nonnull (told.trouble);
  look (session, ledger, &told); /* no zip */
  g_assert_nonnull (told.trouble);
  told_clear (&told);
}

static gboolean
has_edition (gpointer session)
{
  const GPtrArray *editions = tf_session_get_editions (session);
  return is_settled (session) && editions != NULL && editions->len > 0;
}

static void
never (const GPtrArray *differences, const char *trouble, gpointer data)
{
  g_assert_not_reached ();
}

/* Working one out is counted, and stopped at once; a second one waits for the first. */
static void
working_out_is_counted_and_stopped (void)
{
  g_autofree char *ledger = test_desk_laws_ledger ("stopped.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (ledger);
  test_desk_wait ("the studies", is_settled, session);
  tf_session_keep_edition (session, "first");
  g_autofree char *words = tf_session_dup_study_task (session);
  g_assert_nonnull (strstr (words, " of 4"));
  tf_session_compare_editions (session, "first", NULL, never, NULL); /* refused in words */
  tf_session_stop_study_task (session);
  g_assert_false (tf_session_makes_edition (session));
  test_desk_wait ("the rest", is_settled, session);
  g_assert_cmpuint (tf_session_get_editions (session)->len, ==, 0);
  tf_session_keep_edition (session, "second");
  test_desk_wait ("the edition", has_edition, session);
  g_assert_cmpuint (tf_session_get_editions (session)->len, ==, 1);
}

/* -- charts --------------------------------------------------------------------------------------- */

static gboolean
is_saved (gpointer session)
{
  return !tf_save_as_is_busy (session);
}

/* A file of its kind, with something in it. */
static void
check_picture (const char *path)
{
  g_autofree char *bytes = NULL;
  gsize n;
  g_autoptr (GError) error = NULL;
  g_file_get_contents (path, &bytes, &n, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (n, >, 2000);
  if (g_str_has_suffix (path, ".pdf"))
    g_assert_true (g_str_has_prefix (bytes, "%PDF-"));
  else if (g_str_has_suffix (path, ".svg"))
    g_assert_nonnull (g_strstr_len (bytes, (gssize)n, "<svg"));
  else
    g_assert_cmpmem (bytes, 4, "\x89PNG", 4);
}

static void
save (TfWindow *window, const char *name, gboolean power)
{
  static const char *const kinds[] = { "png", "svg", "pdf" };
  TfSession *session = tf_window_get_session (window);
  for (guint k = 0; k < G_N_ELEMENTS (kinds); k++)
    {
      g_autofree char *file = g_strconcat (name, ".", kinds[k], NULL), *path = test_desk_path (file);
      if (power)
        g_action_group_activate_action (G_ACTION_GROUP (window), "save-power", g_variant_new_string (path));
      else
        g_action_group_activate_action (G_ACTION_GROUP (window), "save-chart",
                                        g_variant_new ("(ss)", name, path));
      test_desk_wait ("the picture", is_saved, session);
      check_picture (path);
    }
}

static GtkWidget *
find_widget (GtkWidget *widget, GType type)
{
  if (G_TYPE_CHECK_INSTANCE_TYPE (widget, type))
    return widget;
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    {
      GtkWidget *found = find_widget (child, type);
      if (found != NULL)
        return found;
    }
  return NULL;
}

static gboolean
is_idle (gpointer view)
{
  return !tf_power_view_is_busy (view);
}

static void
every_chart_is_saved (void)
{
  if (!test_desk_has_display ())
    return;
  g_autofree char *path = test_desk_laws_ledger ("pictures.ledger");
  g_autoptr (AdwApplication) application
      = adw_application_new ("io.tiltfield.Test", G_APPLICATION_NON_UNIQUE);
  g_application_set_resource_base_path (G_APPLICATION (application), "/io/tiltfield/Tiltfield");
  g_application_register (G_APPLICATION (application), NULL, NULL);
  TfWindow *window = tf_window_new (GTK_APPLICATION (application));
  gtk_window_present (GTK_WINDOW (window));
  const char *paths[] = { path, NULL };
  tf_window_open (window, (char *const *)paths);
  g_action_group_activate_action (G_ACTION_GROUP (window), "bench", g_variant_new_string ("laws"));
  test_desk_wait ("the findings", is_settled, tf_window_get_session (window));
  guint n = 0;
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++, n++)
    save (window, chart->name, FALSE);
  g_assert_cmpuint (n, ==, 6);
  TfPowerView *view
      = tf_laws_bench_get_power (TF_LAWS_BENCH (find_widget (GTK_WIDGET (window), TF_TYPE_LAWS_BENCH)));
  g_assert_true (tf_power_view_set_option (view, "what", "share"));
  g_assert_true (tf_power_view_set_option (view, "runs", "20"));
  g_assert_true (tf_power_view_set_option (view, "most", "200"));
  tf_power_view_start (view);
  test_desk_wait ("the curve", is_idle, view);
  save (window, "power", TRUE);
  gtk_window_destroy (GTK_WINDOW (window));
}

void
test_desk_add_bundles (void)
{
  g_test_add_func ("/desk/bundles/a-bundle-is-saved-and-read-back", a_bundle_is_saved_and_read_back);
  g_test_add_func ("/desk/bundles/working-out-is-counted-and-stopped", working_out_is_counted_and_stopped);
  g_test_add_func ("/desk/bundles/every-chart-is-saved-as-every-kind-of-picture", every_chart_is_saved);
}
