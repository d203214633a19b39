/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The Laws bench: what the study finds, divides in hand, stretches picked on the wings. */

#include "test-desk-laws.h"
#include "test-desk.h"

#include <math.h>
#include <string.h>
#include <adwaita.h>

#include "tf-check.h"
#include "tf-band-hand.h"
#include "tf-chart-view.h"
#include "tf-ledger-divides.h"
#include "tf-ledger-studies.h"
#include "tf-session-studies.h"
#include "tf-window.h"
#include "tf-wings.h"

/* -- a ledger: marks in 2008 and 2013 ---------------------------------------------------------- */

static gint64
add_frame (TfLedger *ledger, const char *time)
{
  g_autofree char *cards = g_strdup_printf (
      "SIMPLE  = T\nBITPIX  = -32\nNAXIS   = 2\nNAXIS1  = 512\nNAXIS2  = 512\nCTYPE1  = 'HPLN-TAN'\n"
      "CTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = 256.5\n"
      "CRPIX2  = 256.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 4\nCDELT2  = 4\nCROTA2  = 0\n"
      "DATE-OBS= '%s'\nTELESCOP= 'TEST-A'\nINSTRUME= 'TEST-A'\nBUNIT   = 'Gauss'\n"
      "CONTENT = 'MAGNETOGRAM'\n",
      time);
  g_autoptr (TfHeader) header = tf_header_read (cards, -1);
  g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 512, 512);
  g_autofree char *checksum = g_compute_checksum_for_string (G_CHECKSUM_SHA256, time, -1);
  g_autofree char *path = test_desk_path (checksum);
  gint64 id = tf_ledger_add_frame (ledger, path, checksum, 0, 0, info, 20, NULL);
  g_assert_cmpint (id, >, 0);
  return id;
}

static void
add_mark (TfLedger *ledger, gint64 frame, const char *time, double lat, int leading, double tilt)
{
  double h = lat < 0 ? -1 : 1;
  TfPole lead = { .flux_mx = 5.5e21, .lon_deg = 12, .carrington_lon_deg = 112, .lat_deg = lat - 0.3 * h };
  TfPole follow = { .flux_mx = 4.5e21, .lon_deg = 8, .carrington_lon_deg = 108, .lat_deg = lat + 0.3 * h };
  g_auto (TfMeasure) m = { .time = tf_time_read (time),
                           .floor_gauss = 40,
                           .noise_gauss = 10,
                           .scale = NAN,
                           .positive = leading > 0 ? lead : follow,
                           .negative = leading > 0 ? follow : lead,
                           .leading_polarity = leading,
                           .leading_sure = TRUE,
                           .witnesses = { leading, leading, TF_WITNESS_ABSENT },
                           .lat_deg = lat,
                           .carrington_lon_deg = 110,
                           .cmd_deg = 10,
                           .mu = 0.9,
                           .axis_bearing_deg = -tilt * h,
                           .axis_tilt_deg = tilt,
                           .tilt_terms = { 0.5, 0.5, 0.1, 0.71 },
                           .separation_deg = 4,
                           .separation_sigma_deg = 0.1,
                           .compactness = 1.5,
                           .pieces = 2,
                           .flux_unsigned_mx = 1e22,
                           .cautions = tf_notes_new () };
  g_autoptr (TfOutline) outline = tf_outline_new_cap (m.time, 110, lat, 6, 24);
  const TfMarkDeed deed = { .frame = frame,
                            .person = tf_ledger_person (ledger, "north desk", NULL),
                            .origin = TF_MARK_DRAWN,
                            .outline = outline,
                            .measure = &m,
                            .method = "flux-centroid/1 test" };
  g_autoptr (GError) error = NULL;
  g_assert_cmpint (tf_ledger_keep (ledger, &deed, &error), >, 0);
  g_assert_no_error (error);
}

/* In mid 2008, half a year before the minimum, the divide lies near 17 deg: four regions of 24 deg
 * with the leader of cycle 24 keep the law; if the divide lay above them they would break it. In
 * 2013 ten more, one the wrong way round. */
char *
test_desk_laws_ledger (const char *name)
{
  char *path = test_desk_path (name);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_create (path, 'T', &error);
  g_assert_no_error (error);
  gint64 early = add_frame (ledger, "2008-06-01T00:00:00Z"),
         late = add_frame (ledger, "2013-06-01T00:00:00Z");
  for (int k = 0; k < 4; k++)
    add_mark (ledger, early, "2008-06-01T00:00:00Z", 24 + 0.2 * k, -1, 9 + k);
  for (int k = 0; k < 10; k++)
    add_mark (ledger, late, "2013-06-01T00:00:00Z", k < 5 ? 10 + k : -8 - k,
              (k < 5 ? -1 : 1) * (k == 3 ? -1 : 1), 4 + k);
  return path;
}

static gboolean
has_points (gpointer session)
{
  return tf_session_get_n_marks (session) > 0;
}

static gboolean
is_complete (gpointer session)
{
  TfLawsAnswer *answer = tf_session_get_laws (session);
  return answer != NULL && answer->complete && !tf_session_awaits_laws (session);
}

TfSession *
test_desk_laws_session (const char *path)
{
  TfSession *session = tf_session_new ();
  tf_session_open_ledger (session, path, 0);
  tf_session_set_person (session, "north desk");
  test_desk_wait ("the marks", has_points, session);
  tf_session_show_laws (session, TRUE);
  test_desk_wait ("the findings", is_complete, session);
  return session;
}

static const TfHaleRow *
all_cycles (TfSession *session)
{
  const GArray *hale = tf_session_get_laws (session)->findings->hale;
  return &g_array_index (hale, TfHaleRow, hale->len - 1);
}

/* -- findings ---------------------------------------------------------------------------------- */

static void
findings_come (void)
{
  g_autofree char *path = test_desk_laws_ledger ("laws.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  TfLawsAnswer *answer = tf_session_get_laws (session);
  g_assert_cmpint (answer->depth, ==, TF_FINDINGS_COMPLETE);
  g_assert_cmpuint (all_cycles (session)->n, ==, 14);
  g_assert_cmpuint (all_cycles (session)->breaks, ==, 1);
  g_assert_true (isfinite (all_cycles (session)->cluster.low)); /* the draws are in */
  g_assert_nonnull (strstr (answer->words, "Hale"));
  g_assert_cmpuint (answer->findings->what_if->len, >, 5);
  g_assert_nonnull (answer->charts);
}

static gboolean
has_six (gpointer session)
{
  return is_complete (session) && tf_sample_get_n (tf_session_get_laws (session)->findings->sample) == 5;
}

static gboolean
has_all (gpointer session)
{
  return is_complete (session) && tf_sample_get_n (tf_session_get_laws (session)->findings->sample) == 14;
}

/* A stretch of time and a band of latitude are what the roll and the study show. */
static void
stretches_are_followed (void)
{
  g_autofree char *path = test_desk_laws_ledger ("stretch.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  GListModel *frames = tf_session_get_frames (session);
  g_assert_cmpuint (g_list_model_get_n_items (frames), ==, 2);
  tf_session_pick_band (session, 2010, 2014, -30, 0);
  g_assert_cmpuint (g_list_model_get_n_items (frames), ==, 1);
  test_desk_wait ("the south of 2013", has_six, session);
  tf_session_pick_band (session, 2007, 2014, -5, 5); /* no region lies there */
  g_assert_cmpuint (g_list_model_get_n_items (frames), ==, 0);
  tf_session_pick (session, NAN, NAN);
  g_assert_cmpuint (g_list_model_get_n_items (frames), ==, 2);
  test_desk_wait ("all again", has_all, session);
  g_assert_true (tf_session_pick_named (session, "today"));
  TfStretch s = tf_session_get_stretch (session);
  tf_check_near ("day of the newest frame", s.from_year, tf_time_year (tf_time_read ("2013-06-01")),
                 1e-5);
  tf_check_near ("one day", (s.to_year - s.from_year) * 365.25, 1, 0.01);
  g_assert_true (tf_session_pick_named (session, "cycle"));
  s = tf_session_get_stretch (session);
  tf_check_between ("a cycle", s.to_year - s.from_year, 9, 13);
  g_assert_true (tf_session_pick_named (session, "rotation"));
  s = tf_session_get_stretch (session);
  tf_check_near ("a rotation, in a leap year", (s.to_year - s.from_year) * 366, 27.2753, 0.001);
  g_assert_false (tf_session_pick_named (session, "fortnight"));
}

/* -- divides ----------------------------------------------------------------------------------- */

static gboolean
has_five_breaking (gpointer session)
{
  TfLawsAnswer *answer = tf_session_get_laws (session);
  return answer != NULL && answer->findings != NULL && all_cycles (session)->breaks == 5;
}

static gboolean
has_one_breaking (gpointer session)
{
  return is_complete (session) && all_cycles (session)->breaks == 1;
}

static gboolean
is_quiet (gpointer session)
{
  return tf_session_get_pending (session) == 0 && is_complete (session);
}

static guint
count_moved (const char *path)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (GPtrArray) moved = tf_ledger_divides (ledger, "default", NULL);
  return moved->len;
}

static void
a_divide_in_hand_moves_the_numbers (void)
{
  g_autofree char *path = test_desk_laws_ledger ("divide.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  tf_session_step_divide (session, 1, 2006, 2010);
  const TfDivideHold *hold = tf_session_get_divide (session);
  g_assert_cmpint (hold->cycle, ==, 24);
  g_assert_cmpint (hold->hemisphere, ==, 1);
  tf_session_move_divide (session, 16);
  g_assert_true (hold->in_hand);
  g_assert_true (tf_session_is_plain (session));
  test_desk_wait ("the four of 2008 to break", has_five_breaking, session);
  g_assert_cmpuint (count_moved (path), ==, 0); /* nothing is written while it is in hand */
  tf_session_put_back_divide (session);
  g_assert_false (tf_session_is_plain (session));
  test_desk_wait ("one to break again", has_one_breaking, session);
  tf_session_move_divide (session, 16);
  g_assert_true (tf_session_keep_divide (session));
  g_assert_false (hold->in_hand);
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_cmpuint (all_cycles (session)->breaks, ==, 5);
  g_assert_true (isfinite (all_cycles (session)->cluster.low));
  g_assert_cmpuint (count_moved (path), ==, 1);
  g_assert_nonnull (strstr (tf_session_get_laws (session)->words, "24 N"));
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the undoing", has_one_breaking, session);
  g_assert_cmpuint (count_moved (path), ==, 0);
  g_assert_true (tf_session_redo (session));
  test_desk_wait ("the redoing", has_five_breaking, session);
  tf_session_choose_divide (session, 24, 1, TF_WINGS_WHOLE);
  g_assert_true (tf_session_compute_divide (session));
  test_desk_wait ("computed again", has_one_breaking, session);
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_cmpuint (count_moved (path), ==, 0);
  g_assert_false (tf_session_compute_divide (session)); /* it is computed */
}

static guint
count_verdicts (TfSession *session, int verdict)
{
  GArray *dots = tf_session_get_dots (session, NULL);
  guint n = 0;
  for (guint k = 0; k < dots->len; k++)
    n += g_array_index (dots, TfWingsDot, k).verdict == verdict;
  return n;
}

static gboolean
says_shown (gpointer session)
{
  return is_quiet (session)
         && strstr (tf_session_get_laws (session)->words, "Polarity was in sight") != NULL;
}

/* With polarity in sight the dots are judged as the divide moves, and that is told for ever. */
static void
polarity_in_sight_is_told (void)
{
  g_autofree char *path = test_desk_laws_ledger ("shown.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  g_assert_cmpuint (count_verdicts (session, TF_VERDICT_BREAKS), ==, 1);
  tf_session_set_show_polarity (session, TRUE);
  tf_session_choose_divide (session, 24, 1, TF_WINGS_WHOLE);
  tf_session_move_divide (session, 16);
  g_assert_false (tf_session_is_plain (session));
  g_assert_cmpuint (count_verdicts (session, TF_VERDICT_BREAKS), ==, 5);
  g_assert_true (tf_session_keep_divide (session));
  test_desk_wait ("the deed", is_quiet, session);
  test_desk_wait ("the sentence to say it", says_shown, session);
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (GPtrArray) moved = tf_ledger_divides (ledger, "default", NULL);
  g_assert_cmpuint (moved->len, ==, 1);
  g_assert_true (((TfMovedDivide *)moved->pdata[0])->shown);
}

/* -- what is the study's: reach, band, the provisional minimum ----------------------------------- */

static gboolean
has_wide_band (gpointer session)
{
  return is_quiet (session) && tf_session_get_study (session)->divide.band_deg > 19;
}

static gboolean
has_plain_reach (gpointer session)
{
  const TfDivideParams *now = &tf_session_get_study (session)->divide;
  return is_quiet (session) && now->band_deg < 5 && now->before_months == 24 && now->after_months == 18;
}

static TfStudy *
dup_kept (const char *path)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (TfNamed) kept = tf_ledger_study (ledger, "default", NULL);
  return kept != NULL ? tf_study_read_text (kept->text, "kept", NULL) : NULL;
}

/* 24 S begins to act eight months later: the four of 2008 in the north are as they were but for the
 * sentence; a band of 20 deg makes them unsure. Kept, undone, set back. */
static void
reach_and_band_are_taken_in_hand (void)
{
  g_autofree char *path = test_desk_laws_ledger ("reach.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  const TfDivideHold *hold = tf_session_get_divide (session);
  guint unsure = all_cycles (session)->cannot_say;
  tf_session_choose_divide (session, 24, -1, TF_WINGS_WHOLE);
  g_assert_false (tf_session_can_shift_divide (session)); /* a listed minimum stays where it is */
  tf_session_turn_divide (session, TF_WINGS_BEGIN);
  tf_session_shift_divide (session, 8);
  g_assert_true (tf_session_is_plain (session));
  g_assert_cmpint (hold->params.before_months, ==, 16);
  g_assert_cmpint (tf_session_get_study (session)->divide.before_months, ==, 24);
  tf_check_near ("its beginning", tf_time_year (hold->times[TF_WINGS_BEGIN]),
                 tf_time_year (tf_cycle_minimum (24)) - 16 / 12.0, 0.01);
  tf_session_turn_divide (session, TF_WINGS_BAND);
  tf_session_move_divide (session, 16);
  g_assert_false (hold->drawn);
  test_desk_wait ("the answer", is_quiet, session);
  g_assert_cmpuint (all_cycles (session)->cannot_say, ==, unsure + 4);
  g_assert_true (tf_session_keep_divide (session));
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_cmpuint (count_moved (path), ==, 0); /* no line was moved */
  g_autoptr (TfStudy) kept = dup_kept (path);
  g_assert_cmpint (kept->divide.before_months, ==, 16);
  tf_check_near ("the band", kept->divide.band_deg, 20, 1e-9);
  tf_session_turn_divide (session, TF_WINGS_BAND);
  g_assert_true (tf_session_compute_divide (session));
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_cmpuint (all_cycles (session)->cannot_say, ==, unsure);
  g_assert_cmpint (tf_session_get_study (session)->divide.before_months, ==, 16);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the band again", has_wide_band, session);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("neither", has_plain_reach, session);
}

/* What else is changed in the study is not kept with them; polarity in sight is told. */
static void
only_what_was_moved_is_kept (void)
{
  g_autofree char *path = test_desk_laws_ledger ("only.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  g_autoptr (TfStudy) study = tf_study_copy (tf_session_get_study (session));
  study->sieve.cmd_max_deg = 45;
  tf_session_set_study (session, study);
  tf_session_set_show_polarity (session, TRUE);
  tf_session_choose_divide (session, 24, 1, TF_WINGS_END);
  tf_session_shift_divide (session, -3);
  g_assert_true (tf_session_keep_divide (session));
  test_desk_wait ("the sentence to say it", says_shown, session);
  g_autoptr (TfStudy) kept = dup_kept (path);
  g_assert_cmpint (kept->divide.after_months, ==, 15);
  tf_check_near ("the limb cut as it was kept", kept->sieve.cmd_max_deg, 60, 1e-9);
  tf_check_near ("the limb cut in the window", tf_session_get_study (session)->sieve.cmd_max_deg, 45, 1e-9);
  g_assert_true (tf_session_is_study_changed (session));
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the reach to follow the undoing", has_plain_reach, session);
  tf_check_near ("the limb cut still", tf_session_get_study (session)->sieve.cmd_max_deg, 45, 1e-9);
}

static void
a_provisional_minimum_is_taken_in_hand (void)
{
  g_autofree char *path = test_desk_laws_ledger ("provisional.ledger");
  g_autoptr (TfSession) session = test_desk_laws_session (path);
  const TfDivideHold *hold = tf_session_get_divide (session);
  int last = 1;
  while (tf_cycle_find (last + 1) != NULL)
    last++;
  g_assert_true (tf_session_take_provisional (session));
  g_assert_cmpint (hold->cycle, ==, last + 1);
  g_assert_true (hold->in_hand);
  double first = hold->params.provisional_year;
  tf_check_between ("a cycle's length on", first, tf_time_year (tf_cycle_minimum (last)) + 10,
                    tf_time_year (tf_cycle_minimum (last)) + 12);
  tf_session_shift_divide (session, 18);
  tf_check_near ("a year and a half on", hold->params.provisional_year, first + 1.5, 1e-9);
  tf_session_put_back_divide (session);
  g_assert_cmpint (hold->cycle, ==, 0); /* it was never kept */
  g_assert_true (tf_session_take_provisional (session));
  g_assert_true (tf_session_keep_divide (session));
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_cmpint (hold->cycle, ==, last + 1);
  g_assert_nonnull (strstr (tf_session_get_laws (session)->words, "provisional"));
  tf_session_turn_divide (session, TF_WINGS_WHOLE);
  tf_session_move_divide (session, 3); /* its line, too */
  g_assert_true (tf_session_keep_divide (session));
  test_desk_wait ("the line", is_quiet, session);
  g_assert_cmpuint (count_moved (path), ==, 1);
  tf_session_turn_divide (session, TF_WINGS_MINIMUM);
  g_assert_true (tf_session_compute_divide (session)); /* taken away, its line with it */
  test_desk_wait ("the deed", is_quiet, session);
  g_assert_true (isnan (tf_session_get_study (session)->divide.provisional_year));
  g_assert_cmpuint (count_moved (path), ==, 0);
  g_assert_cmpint (hold->cycle, ==, 0);
}

/* -- a stretch and a band by keys ---------------------------------------------------------------- */

static void
a_band_is_chosen_by_keys (void)
{
  const TfWingsDot dots[] = { { .year = 2001, .lat_deg = 10 }, { .year = 2004, .lat_deg = -10 },
                              { .year = 2005, .lat_deg = 12 }, { .year = 2009, .lat_deg = 20 } };
  TfWings wings = { .dots = dots, .n = G_N_ELEMENTS (dots), .from_year = 2000, .to_year = 2012,
                    .lat_max_deg = 45, .frame_year = NAN, .pick_from = NAN, .pick_to = NAN,
                    .pick_low = NAN, .pick_high = NAN };
  TfBandHand hand = { 0 };
  g_assert_cmpint (tf_band_hand_key (&hand, &wings, GDK_KEY_Left, FALSE), ==, TF_BAND_NOT_HEARD);
  g_assert_cmpint (tf_band_hand_key (&hand, &wings, GDK_KEY_b, FALSE), ==, TF_BAND_MOVED);
  tf_check_near ("the middle third", hand.from, 2004, 1e-9);
  tf_check_near ("to its end", hand.to, 2008, 1e-9);
  tf_band_hand_key (&hand, &wings, GDK_KEY_Left, FALSE);
  tf_band_hand_key (&hand, &wings, GDK_KEY_Right, TRUE);
  tf_check_near ("moved and widened", hand.from, 2003.7, 1e-9);
  tf_check_near ("at its later edge", hand.to, 2008, 1e-9);
  tf_band_hand_key (&hand, &wings, GDK_KEY_Up, FALSE); /* the north */
  tf_check_near ("from the equator", hand.low, 0, 1e-9);
  tf_band_hand_key (&hand, &wings, GDK_KEY_Down, TRUE);
  tf_band_hand_key (&hand, &wings, GDK_KEY_Down, FALSE);
  tf_check_near ("down by a degree", hand.low, -1, 1e-9);
  tf_check_near ("and narrower", hand.high, 43, 1e-9);
  wings.pick_from = hand.from;
  wings.pick_to = hand.to;
  wings.pick_low = hand.low;
  wings.pick_high = hand.high;
  g_autofree char *words = tf_wings_dup_pick (&wings);
  g_assert_nonnull (strstr (words, "1 dot in it"));
  for (int k = 0; k < 100; k++)
    tf_band_hand_key (&hand, &wings, GDK_KEY_Left, TRUE);
  g_assert_cmpfloat (hand.to, >, hand.from);
  for (int k = 0; k < 100; k++)
    tf_band_hand_key (&hand, &wings, GDK_KEY_Up, FALSE);
  g_assert_cmpfloat (hand.high, >, hand.low);
  g_assert_cmpint (tf_band_hand_key (&hand, &wings, GDK_KEY_Return, FALSE), ==, TF_BAND_TAKEN);
  g_assert_cmpint (tf_band_hand_key (&hand, &wings, GDK_KEY_Return, FALSE), ==, TF_BAND_NOT_HEARD);
}

/* -- the bench --------------------------------------------------------------------------------- */

static gboolean
is_laid_out (gpointer widget)
{
  return gtk_widget_get_width (widget) > 100;
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

static void
the_bench_is_shown_and_left (void)
{
  if (!test_desk_has_display ())
    return;
  g_autofree char *path = test_desk_laws_ledger ("bench.ledger");
  g_autoptr (AdwApplication) application
      = adw_application_new ("io.tiltfield.Test", G_APPLICATION_NON_UNIQUE);
  g_application_set_resource_base_path (G_APPLICATION (application), "/io/tiltfield/Tiltfield");
  g_application_register (G_APPLICATION (application), NULL, NULL);
  TfWindow *window = tf_window_new (GTK_APPLICATION (application));
  TfSession *session = tf_window_get_session (window);
  gtk_window_present (GTK_WINDOW (window));
  const char *paths[] = { path, NULL };
  tf_window_open (window, (char *const *)paths);
  test_desk_wait ("the marks", has_points, session);
  GActionGroup *actions = G_ACTION_GROUP (window);
  g_action_group_activate_action (actions, "bench", g_variant_new_string ("laws"));
  g_assert_true (tf_session_shows_laws (session));
  test_desk_wait ("the findings", is_complete, session);
  GtkWidget *view = find_widget (GTK_WIDGET (window), TF_TYPE_CHART_VIEW);
  g_assert_nonnull (view);
  test_desk_wait ("the chart", is_laid_out, view);
  g_assert_true (gtk_test_accessible_has_property (GTK_ACCESSIBLE (view),
                                                   GTK_ACCESSIBLE_PROPERTY_DESCRIPTION));
  g_action_group_activate_action (actions, "enlarge", g_variant_new_string ("joy"));
  gint64 mark = tf_session_get_laws (session)->findings->marks[7];
  g_action_group_activate_action (actions, "open-mark", g_variant_new ("(xb)", mark, FALSE));
  g_autoptr (GVariant) bench = g_action_group_get_action_state (actions, "bench");
  g_assert_cmpstr (g_variant_get_string (bench, NULL), ==, "mark");
  g_assert_false (tf_session_shows_laws (session));
  gtk_window_destroy (GTK_WINDOW (window));
}

void
test_desk_add_laws (void)
{
  g_test_add_func ("/desk/laws/findings-come-quickly-then-with-their-draws", findings_come);
  g_test_add_func ("/desk/laws/roll-and-study-follow-the-stretch", stretches_are_followed);
  g_test_add_func ("/desk/laws/a-divide-in-hand-moves-the-numbers",
                   a_divide_in_hand_moves_the_numbers);
  g_test_add_func ("/desk/laws/polarity-in-sight-is-told", polarity_in_sight_is_told);
  g_test_add_func ("/desk/laws/reach-and-band-are-taken-in-hand", reach_and_band_are_taken_in_hand);
  g_test_add_func ("/desk/laws/only-what-was-moved-is-kept", only_what_was_moved_is_kept);
  g_test_add_func ("/desk/laws/a-provisional-minimum-is-taken-in-hand",
                   a_provisional_minimum_is_taken_in_hand);
  g_test_add_func ("/desk/laws/a-band-is-chosen-by-keys", a_band_is_chosen_by_keys);
  g_test_add_func ("/desk/laws/the-bench-is-shown-and-left", the_bench_is_shown_and_left);
}
