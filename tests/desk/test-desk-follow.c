/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-desk.h"

#include <math.h>
#include <string.h>

#include "tf-actions-follow.h"
#include "tf-check.h"
#include "tf-follow-facts.h"
#include "tf-follow-film.h"
#include "tf-intake.h"
#include "tf-save-as.h"

/* A ledger of the demo's October 2013: a region that crosses the disk. */

typedef struct
{
  TfSession *session;
  TfFollowed *followed;
  char *path;
  guint n_left; /* after a cut */
} Bench;

static gboolean
has_content (gpointer data)
{
  Bench *bench = data;
  const TfPassageContent *content = tf_followed_get_content (bench->followed);
  return content != NULL && content->rows->len == 4 && !tf_followed_is_busy (bench->followed);
}

static gboolean
is_open (gpointer session)
{
  return tf_session_has_ledger (session) && tf_session_get_n_frames (session) == 4
         && tf_session_get_progress (session, NULL) == NULL;
}

static Bench
bench_new (const char *name)
{
  Bench bench = { .path = test_desk_path (name) };
  static const char *const days[] = { "20131008", "20131009", "20131010", "20131011" };
  g_autoptr (GPtrArray) files = g_ptr_array_new_with_free_func (g_free);
  g_autoptr (GDir) dir = g_dir_open (TF_DEMO_FRAMES, 0, NULL);
  const char *file;
  while ((file = g_dir_read_name (dir)) != NULL)
    for (guint k = 0; k < G_N_ELEMENTS (days); k++)
      if (strstr (file, days[k]) != NULL && g_str_has_suffix (file, ".fits"))
        g_ptr_array_add (files, g_build_filename (TF_DEMO_FRAMES, file, NULL));
  g_assert_cmpuint (files->len, >=, 4);
  g_ptr_array_add (files, NULL);
  bench.session = tf_session_new ();
  tf_session_set_person (bench.session, "north desk");
  tf_session_open_ledger (bench.session, bench.path, 'T');
  tf_session_add_frames (bench.session, (char *const *)files->pdata);
  test_desk_wait ("frames are in", is_open, bench.session);
  bench.followed = tf_followed_new (bench.session);
  tf_followed_set_active (bench.followed, TRUE);
  test_desk_wait ("a passage of four", has_content, &bench);
  return bench;
}

static void
bench_clear (Bench *bench)
{
  tf_followed_close (bench->followed);
  g_clear_object (&bench->followed);
  tf_session_close (bench->session);
  g_clear_object (&bench->session);
  g_free (bench->path);
}

static gboolean
is_settled (gpointer data)
{
  Bench *bench = data;
  const TfPassageContent *content = tf_followed_get_content (bench->followed);
  return has_content (data) && tf_session_get_progress (bench->session, NULL) == NULL
         && tf_session_get_pending (bench->session) == 0 && content->series->n_other_floor == 0;
}

static const TfLookSpec *
spec_of (Bench *bench, guint look)
{
  g_autoptr (TfLookItem) item
      = g_list_model_get_item (tf_followed_get_looks (bench->followed), look);
  return item != NULL ? tf_look_item_get_spec (item) : NULL;
}

static void
passage_is_there (void)
{
  Bench bench = bench_new ("follow-there.ledger");
  test_desk_wait ("every frame in and measured with one floor", is_settled, &bench);
  const TfPassageContent *content = tf_followed_get_content (bench.followed);
  double day = 86400;
  g_assert_cmpuint (content->points->len, ==, content->rows->len);
  for (guint k = 1; k < content->points->len; k++)
    {
      const TfSeriesMoment *p = &g_array_index (content->points, TfSeriesMoment, k);
      tf_check_near ("step", p->time.s - (p - 1)->time.s, day, 60); /* the scenario's cadence */
      g_assert_cmpfloat (p->positive_mx, >, 0);
      g_assert_cmpfloat (p->separation_mm, >, 0);
    }
  /* co-rotating: the poles hardly move on the looks while the region crosses 40 deg of the disk */
  const TfLookSpec *first = NULL;
  for (guint k = 0; spec_of (&bench, k) != NULL; k++)
    {
      const TfLookSpec *spec = spec_of (&bench, k);
      if (spec->kind != TF_LOOK_SIGHTING || !spec->poles)
        continue;
      if (first == NULL)
        first = spec;
      tf_check_near ("x of the positive pole", spec->positive[0], first->positive[0], 0.12);
      tf_check_near ("y of the positive pole", spec->positive[1], first->positive[1], 0.12);
    }
  g_assert_nonnull (first);
  bench_clear (&bench);
}

static gboolean
has_pictures (gpointer data)
{
  Bench *bench = data;
  guint n = g_list_model_get_n_items (tf_followed_get_looks (bench->followed));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item
          = g_list_model_get_item (tf_followed_get_looks (bench->followed), k);
      if (tf_look_item_is_waiting (item))
        return FALSE;
    }
  return n > 0;
}

static void
looks_fill_in_and_step (void)
{
  Bench bench = bench_new ("follow-looks.ledger");
  test_desk_wait ("every frame in", is_settled, &bench);
  test_desk_wait ("all pictures", has_pictures, &bench);
  guint n = g_list_model_get_n_items (tf_followed_get_looks (bench.followed));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item
          = g_list_model_get_item (tf_followed_get_looks (bench.followed), k);
      const TfStripLook *look = tf_look_item_get_look (item);
      if (tf_look_item_get_spec (item)->kind != TF_LOOK_GAP)
        g_assert_nonnull (look->picture);
    }
  tf_followed_set_now (bench.followed, 0);
  tf_followed_step (bench.followed, -1, FALSE);
  g_assert_cmpint (tf_followed_get_now (bench.followed), ==, 0);
  tf_followed_step (bench.followed, -1, TRUE); /* round to the end */
  g_assert_cmpint (tf_followed_get_now (bench.followed), ==, (int)n - 1);
  const TfLookSpec *first = spec_of (&bench, 0), *second = spec_of (&bench, 1);
  tf_followed_brush (bench.followed, second->time, first->time); /* either way round */
  tf_followed_set_now (bench.followed, 1);
  tf_followed_step (bench.followed, 1, TRUE); /* within the stretch */
  g_assert_cmpint (tf_followed_get_now (bench.followed), ==, 0);
  bench_clear (&bench);
}

static gboolean
has_left (gpointer data)
{
  Bench *bench = data;
  const TfPassageContent *content = tf_followed_get_content (bench->followed);
  return content != NULL && content->series->n_other_floor == 0 && !tf_followed_is_busy (bench->followed) && content->rows->len == bench->n_left;
}

/* A cut is a deed: the passage ends there, the journal has the reason, undo brings it back. */
static void
cut_and_undo (void)
{
  Bench bench = bench_new ("follow-cut.ledger");
  test_desk_wait ("every frame in", is_settled, &bench);
  guint whole = tf_followed_get_content (bench.followed)->rows->len;
  bench.n_left = whole - 1;
  tf_followed_set_now_point (bench.followed, 0);
  g_assert_false (tf_followed_can_cut (bench.followed)); /* nothing before the first */
  tf_followed_set_now_point (bench.followed, 1);
  g_assert_true (tf_followed_can_cut (bench.followed));
  g_assert_true (tf_followed_cut (bench.followed, "two regions by their age"));
  test_desk_wait ("the passage begins at the cut", has_left, &bench);
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench.path, NULL);
  g_autoptr (GPtrArray) journal = tf_ledger_journal (ledger, 1, NULL);
  const TfJournalEntry *entry = g_ptr_array_index (journal, 0);
  g_assert_cmpstr (entry->kind, ==, "cut");
  g_assert_cmpstr (entry->person, ==, "north desk");
  bench.n_left = whole;
  g_assert_true (tf_session_undo (bench.session));
  test_desk_wait ("the passage is whole again", has_left, &bench);
  bench_clear (&bench);
}

/* Said elsewhere: the reading sees it and nobody has told the bench. */
static void
view_stays_with_its_outline (void)
{
  Bench bench = bench_new ("follow-elsewhere.ledger");
  test_desk_wait ("every frame in", is_settled, &bench);
  const TfPassageContent *content = tf_followed_get_content (bench.followed);
  const TfRow *before = g_ptr_array_index (content->rows, 1), *after = g_ptr_array_index (content->rows, 2);
  TfSight last = { before->mark, before->is_hint }, first = { after->mark, after->is_hint };
  tf_followed_set_now_point (bench.followed, 2);
  g_autoptr (TfLedger) ledger = tf_ledger_open (bench.path, NULL);
  gint64 person = tf_ledger_person (ledger, "south desk", NULL);
  g_assert_true (tf_ledger_cut (ledger, last, first, person, "another one", NULL));
  bench.n_left = content->rows->len - 2;
  tf_followed_set_beside (bench.followed, content->passage->id);
  test_desk_wait ("the part that has the outline in view", has_left, &bench);
  g_assert_cmpint (tf_passage_content_find (tf_followed_get_content (bench.followed), first), ==, 0);
  g_autoptr (TfLookItem) look = g_list_model_get_item (tf_followed_get_looks (bench.followed),
                                                       (guint)tf_followed_get_now (bench.followed));
  g_assert_cmpint (tf_look_item_get_spec (look)->mark, ==, first.mark);
  bench_clear (&bench);
}

static void
taken_mark_follows_the_rule (void)
{
  Bench bench = bench_new ("follow-take.ledger");
  test_desk_wait ("every frame in", is_settled, &bench);
  const TfPassageContent *content = tf_followed_get_content (bench.followed);
  int flux = tf_followed_get_taken (bench.followed);
  g_assert_cmpint (flux, >=, 0);
  for (guint k = 0; k < content->rows->len; k++)
    {
      const TfMeasure *m = &((const TfRow *)g_ptr_array_index (content->rows, k))->measure,
                      *best = &((const TfRow *)g_ptr_array_index (content->rows, flux))->measure;
      if (m->mu >= 0.5)
        g_assert_cmpfloat (m->flux_unsigned_mx, <=, best->flux_unsigned_mx);
    }
  tf_followed_set_take (bench.followed, TF_TAKE_MERIDIAN);
  int near = tf_followed_get_taken (bench.followed);
  for (guint k = 0; k < content->rows->len; k++)
    g_assert_cmpfloat (
        fabs (((const TfRow *)g_ptr_array_index (content->rows, k))->measure.cmd_deg), >=,
        fabs (((const TfRow *)g_ptr_array_index (content->rows, near))->measure.cmd_deg) - 1e-9);
  tf_followed_set_take (bench.followed, TF_TAKE_MEAN);
  g_assert_cmpint (tf_followed_get_taken (bench.followed), ==, -1);
  bench_clear (&bench);
}

/* -- files ----------------------------------------------------------------------------------- */

typedef struct
{
  char *said;
  gint64 last, longest; /* us between two turns of the main loop */
} Watch;

static void
keep_said (TfSession *session, const char *text, Watch *watch)
{
  g_free (watch->said);
  watch->said = g_strdup (text);
}

static gboolean
turned (gpointer data)
{
  Watch *watch = data;
  gint64 now = g_get_monotonic_time ();
  if (watch->last != 0)
    watch->longest = MAX (watch->longest, now - watch->last);
  watch->last = now;
  return G_SOURCE_CONTINUE;
}

enum
{
  MOST_SECONDS = 60
};

static double
save (Bench *bench, Watch *watch, const char *what, const char *path)
{
  gint64 begun = g_get_monotonic_time ();
  *watch = (Watch){ 0 };
  gulong id = g_signal_connect (bench->session, "message", G_CALLBACK (keep_said), watch);
  guint timer = g_timeout_add (1, turned, watch);
  tf_follow_save (bench->followed, what, path);
  while (tf_save_as_is_busy (bench->session)
         && g_get_monotonic_time () - begun < MOST_SECONDS * G_USEC_PER_SEC)
    g_main_context_iteration (NULL, TRUE);
  g_assert_false (tf_save_as_is_busy (bench->session));
  g_source_remove (timer);
  g_signal_handler_disconnect (bench->session, id);
  return (double)(g_get_monotonic_time () - begun) / 1e6;
}

/* 600 dots an inch take seconds of a processor; the window turns meanwhile. */
static void
saving_leaves_the_window_live (void)
{
  Bench bench = bench_new ("follow-save.ledger");
  test_desk_wait ("every frame in", is_settled, &bench);
  test_desk_wait ("all pictures", has_pictures, &bench);
  static const char *const files[][3]
      = { { "figure", "strip.png", "\211PNG" }, { "figure", "strip.pdf", "%PDF" },
          { "figure", "strip.svg", "<?xml" },    { "series", "series.csv", "# " },
          { "series", "series.vot", "<?xml" } };
  for (guint k = 0; k < G_N_ELEMENTS (files); k++)
    {
      Watch watch;
      g_autofree char *path = test_desk_path (files[k][1]), *bytes = NULL;
      double taken = save (&bench, &watch, files[k][0], path);
      g_test_message ("%s: %.2f s, the main loop's longest turn %.3f s", files[k][1], taken,
                      (double)watch.longest / 1e6);
      g_assert_true (g_file_get_contents (path, &bytes, NULL, NULL));
      g_assert_true (g_str_has_prefix (bytes, files[k][2]));
      g_assert_true (g_str_has_prefix (watch.said, "Saved: "));
      /* Made in the main thread it would be one turn; the machine may be busy with other things. */
      g_assert_cmpfloat ((double)watch.longest / 1e6, <, fmax (taken / 4, 0.25));
      g_free (watch.said);
    }
  g_autofree char *table = NULL, *csv = test_desk_path ("series.csv");
  g_assert_true (g_file_get_contents (csv, &table, NULL, NULL));
  g_assert_nonnull (strstr (table, "emergence rate")); /* what was derived stands before the rows */
  bench_clear (&bench);
}

static gboolean
stop_at_once (gpointer session)
{
  tf_save_as_stop (session);
  return G_SOURCE_REMOVE;
}

static guint
count_files (const char *folder)
{
  guint n = 0;
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  while (dir != NULL && g_dir_read_name (dir) != NULL)
    n++;
  return n;
}

static void
film_is_numbered_encoded_or_refused (void)
{
  Bench bench = bench_new ("follow-film.ledger");
  Watch watch;
  test_desk_wait ("every frame in", is_settled, &bench);
  test_desk_wait ("all pictures", has_pictures, &bench);
  guint n = g_list_model_get_n_items (tf_followed_get_looks (bench.followed));
  g_autofree char *folder = test_desk_path ("film"), *first = g_strconcat (folder, "/0001.png", NULL),
                  *gif = test_desk_path ("film.gif"), *webm = test_desk_path ("film.webm"),
                  *stopped = test_desk_path ("stopped");
  save (&bench, &watch, "film", folder);
  g_free (watch.said);
  g_assert_cmpuint (count_files (folder), ==, n);
  g_assert_true (g_file_test (first, G_FILE_TEST_EXISTS));
  static const char *const heads[] = { "GIF8", "\032\105\337\243" }; /* EBML */
  for (guint k = 0; k < 2; k++)
    {
      const char *path = k == 0 ? gif : webm;
      g_autofree char *bytes = NULL;
      gboolean can = tf_follow_film_has_encoder (k == 0 ? ".gif" : ".webm");
      save (&bench, &watch, "film", path);
      g_test_message ("%s", watch.said);
      g_assert_true (g_file_get_contents (path, &bytes, NULL, NULL) == can);
      if (can)
        g_assert_true (g_str_has_prefix (bytes, heads[k]));
      else
        g_assert_nonnull (strstr (watch.said, "No encoder is installed"));
      g_free (watch.said);
    }
  g_idle_add_full (G_PRIORITY_HIGH, stop_at_once, bench.session, NULL);
  save (&bench, &watch, "film", stopped);
  g_assert_nonnull (strstr (watch.said, "cancelled"));
  g_assert_false (g_file_test (stopped, G_FILE_TEST_EXISTS)); /* nothing half made */
  g_free (watch.said);
  bench_clear (&bench);
}

static const char *
fact (GPtrArray *facts, const char *name)
{
  for (guint k = 0; k < facts->len; k++)
    if (strcmp (((const TfFact *)g_ptr_array_index (facts, k))->name, name) == 0)
      return ((const TfFact *)g_ptr_array_index (facts, k))->value;
  return NULL;
}

static void
count_moment (TfFollowed *followed, guint *n)
{
  ++*n;
}

static void
figures_are_in_the_chosen_units (void)
{
  Bench bench = bench_new ("follow-units.ledger");
  guint told = 0;
  g_autoptr (GPtrArray) usual = tf_follow_facts (bench.followed);
  g_assert_true (g_str_has_suffix (fact (usual, "flux then"), " Mx"));
  g_signal_connect (bench.followed, "moment-changed", G_CALLBACK (count_moment), &told);
  tf_session_set_unit (bench.session, TF_UNIT_FLUX, 1);
  tf_session_set_unit (bench.session, TF_UNIT_FIELD, 1);
  g_assert_cmpuint (told, >=, 2);
  g_autoptr (GPtrArray) si = tf_follow_facts (bench.followed);
  g_assert_true (g_str_has_suffix (fact (si, "flux then"), " Wb"));
  g_assert_nonnull (strstr (fact (si, "even floor"), " mT"));
  bench_clear (&bench);
}

void
test_desk_add_follow (void)
{
  g_test_add_func ("/desk/follow/saving-leaves-the-window-live", saving_leaves_the_window_live);
  g_test_add_func ("/desk/follow/a-film-is-numbered-encoded-or-refused",
                   film_is_numbered_encoded_or_refused);
  g_test_add_func ("/desk/follow/a-passage-is-read-with-one-floor-and-co-rotates", passage_is_there);
  g_test_add_func ("/desk/follow/looks-fill-in-and-step-within-the-stretch", looks_fill_in_and_step);
  g_test_add_func ("/desk/follow/a-cut-is-a-deed-that-undo-takes-back", cut_and_undo);
  g_test_add_func ("/desk/follow/the-view-stays-with-its-outline", view_stays_with_its_outline);
  g_test_add_func ("/desk/follow/figures-are-in-the-chosen-units", figures_are_in_the_chosen_units);
  g_test_add_func ("/desk/follow/the-taken-mark-follows-the-rule", taken_mark_follows_the_rule);
}
