/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Marks of one passage are one region; what is split is measured whole and may be proposed; units are
 * of the window alone. */

#include "test-desk.h"

#include <math.h>
#include <string.h>

#include "tf-slip-how.h"

static const char *const frames[] = { TF_DEMO_FRAMES "/brindle-20131010-0600.fits",
                                      TF_DEMO_FRAMES "/brindle-20131011-0600.fits", NULL };

/* -- waiting ---------------------------------------------------------------------------------- */

static gboolean
both_in (gpointer session)
{
  return tf_session_get_n_frames (session) == 2 && tf_session_get_progress (session, NULL) == NULL;
}

static gboolean
shown (gpointer session)
{
  return tf_session_get_frame (session) != NULL && !tf_session_is_loading (session)
         && g_list_model_get_n_items (tf_session_get_regions (session)) > 0;
}

static gboolean
no_pending (gpointer session)
{
  return tf_session_get_pending (session) == 0;
}

static gboolean
has_joins (gpointer session)
{
  return tf_session_get_joins (session) != NULL;
}

static gboolean
mark_chosen (gpointer session)
{
  TfRegionItem *item = tf_session_get_region (session);
  return item != NULL && !tf_region_item_get_row (item)->is_hint;
}

static gboolean
has_proposal (gpointer session)
{
  return tf_session_get_proposal (session) != NULL;
}

static gboolean
both_at_rest (gpointer session)
{
  const TfMeasure *other = tf_session_get_other_measure (session);
  return tf_session_is_at_rest (session) && other != NULL && isfinite (other->tilt_terms.outline);
}

static void
go_to (TfSession *session, guint k)
{
  g_autoptr (TfFrameItem) item = g_list_model_get_item (tf_session_get_frames (session), k);
  tf_session_choose_frame (session, item);
  test_desk_wait ("the frame", shown, session);
}

static TfSession *
session_of_two (const char *path)
{
  TfSession *session = tf_session_new ();
  tf_session_open_ledger (session, path, 'T');
  tf_session_set_person (session, "north desk");
  tf_session_set_view_size (session, 800, 500);
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("both frames", both_in, session);
  go_to (session, 0);
  return session;
}

static void
keep_first (TfSession *session)
{
  g_assert_true (tf_session_step_hint (session, 1));
  g_assert_null (tf_session_get_joins (session));
  g_assert_false (tf_session_can_keep_new (session));
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", mark_chosen, session);
}

/* The hint on the frame in sight that lies where the mark would be after a day. */
static gboolean
choose_at (TfSession *session, double lon, double lat)
{
  GListModel *list = tf_session_get_regions (session);
  for (guint k = 0; k < g_list_model_get_n_items (list); k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      const TfRow *row = tf_region_item_get_row (item);
      if (row->is_hint
          && tf_sphere_distance (row->measure.carrington_lon_deg, row->measure.lat_deg, lon, lat) < 3)
        {
          tf_session_choose_region (session, item);
          return TRUE;
        }
    }
  return FALSE;
}

static guint
count_regions (const char *path)
{
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &(TfRowQuery){ .marks = TRUE }, NULL);
  g_autoptr (GHashTable) regions = g_hash_table_new (g_int64_hash, g_int64_equal);
  for (guint k = 0; k < rows->len; k++)
    g_hash_table_add (regions, &((TfRow *)rows->pdata[k])->region_key);
  return g_hash_table_size (regions);
}

/* -- tests ------------------------------------------------------------------------------------ */

static void
joins (void)
{
  g_autofree char *path = test_desk_path ("joins.ledger");
  g_autoptr (TfSession) session = session_of_two (path);
  keep_first (session);
  const TfRow *first = tf_region_item_get_row (tf_session_get_region (session));
  g_autofree char *number = g_strdup (first->region);
  double lon = first->measure.carrington_lon_deg, lat = first->measure.lat_deg;
  go_to (session, 1);
  g_assert_true (choose_at (session, lon, lat));
  test_desk_wait ("the passage's region", has_joins, session);
  g_assert_cmpstr (tf_session_get_joins (session), ==, number);
  g_assert_true (tf_session_keep (session)); /* without carrying */
  test_desk_wait ("the mark", mark_chosen, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->region, ==, number);
  g_assert_cmpuint (count_regions (path), ==, 1);
  g_assert_true (tf_session_undo (session)); /* mark and region as one deed */
  test_desk_wait ("the hint to come back", has_joins, session);
  test_desk_wait ("the undo", no_pending, session);
  g_assert_true (tf_session_can_keep_new (session));
  g_assert_true (tf_session_keep_new (session));
  test_desk_wait ("the mark", mark_chosen, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->region, !=, number);
  g_assert_cmpuint (count_regions (path), ==, 2);
  tf_session_close (session);
}

/* A drawn outline is recognised by its place. */
static void
drawn_joins (void)
{
  g_autofree char *path = test_desk_path ("drawn-joins.ledger");
  g_autoptr (TfSession) session = session_of_two (path);
  keep_first (session);
  const TfRow *first = tf_region_item_get_row (tf_session_get_region (session));
  g_autofree char *number = g_strdup (first->region);
  double lon = first->measure.carrington_lon_deg, lat = first->measure.lat_deg;
  go_to (session, 1);
  g_assert_true (choose_at (session, lon, lat));
  test_desk_wait ("passages", has_joins, session);
  g_autoptr (TfOutline) outline
      = tf_outline_ref (tf_region_item_get_row (tf_session_get_region (session))->outline);
  tf_session_choose_region (session, NULL);
  tf_session_set_draft (session, outline);
  tf_session_set_replaces (session, FALSE);
  test_desk_wait ("the draft's region", has_joins, session);
  g_assert_cmpstr (tf_session_get_joins (session), ==, number);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", mark_chosen, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->region, ==, number);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->origin, ==, "drawn new");
  tf_session_close (session);
}

/* The strongest hint of the demo frame is a pole between two others. */
static void
choose_doubtful (TfSession *session)
{
  g_assert_true (tf_session_step_hint (session, 1));
  g_assert_cmpuint (tf_session_get_measure (session)->pieces, >, 2);
}

static void
proposed (void)
{
  g_autofree char *path = test_desk_path ("proposed.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  choose_doubtful (session);
  test_desk_wait ("the proposal", has_proposal, session);
  const TfProposal *p = tf_session_get_proposal (session);
  g_assert_cmpfloat (p->half[0].flux_unsigned_mx, >=, p->half[1].flux_unsigned_mx);
  g_autofree char *words = tf_words_dup_half (&p->half[0], (TfUnits){ { 0 } }),
                  *how = tf_how_dup_proposal (p, (TfUnits){ { 0 } });
  g_assert_nonnull (strstr (words, "Mx"));
  g_assert_nonnull (strstr (how, words));
  g_assert_true (tf_session_leave_proposal (session));
  g_assert_null (tf_session_get_proposal (session));
  g_assert_nonnull (tf_session_get_region (session)); /* it stays as it is */
  g_assert_null (tf_session_get_draft (session));
  g_assert_false (tf_session_leave_proposal (session));
  tf_session_choose_region (session, NULL);
  choose_doubtful (session); /* put away for that outline */
  g_assert_false (tf_session_split_proposed (session));
  g_assert_true (tf_session_step_hint (session, 1));
  g_assert_null (tf_session_get_proposal (session));
  tf_session_close (session);
}

static void
split_is_whole (void)
{
  g_autofree char *path = test_desk_path ("halves.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  choose_doubtful (session);
  test_desk_wait ("the proposal", has_proposal, session);
  g_assert_true (tf_session_split_proposed (session));
  g_assert_nonnull (tf_session_get_other_half (session));
  g_assert_null (tf_session_get_proposal (session));
  test_desk_wait ("the outline terms of both", both_at_rest, session);
  tf_session_undo (session);
  g_assert_true (tf_session_redo (session)); /* measured anew, and kept before the terms are there */
  g_assert_false (both_at_rest (session));
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the deed", no_pending, session);
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, NULL);
  g_autoptr (GPtrArray) rows = tf_ledger_rows (ledger, &(TfRowQuery){ .marks = TRUE }, NULL);
  g_assert_cmpuint (rows->len, ==, 2);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfMeasure *m = &((TfRow *)rows->pdata[k])->measure;
      g_assert_true (m->leading_polarity == 0 || isfinite (m->tilt_terms.outline));
    }
  tf_session_close (session);
}

static void
units (void)
{
  const TfUnits cgs = { { 0 } }, si = { { 1, 1, 1 } };
  g_autofree char *mx = tf_units_dup_flux (cgs, 6.1e21), *wb = tf_units_dup_flux (si, 6.1e21);
  g_autofree char *g = tf_units_dup_field (cgs, 12.5, 1), *mt = tf_units_dup_signed_field (si, 12.5, 1);
  g_autofree char *deg = tf_units_dup_length (cgs, 5.12, 1, 62.2, 0),
                  *mm = tf_units_dup_length (si, 5.12, 1, 62.2, 0);
  g_autofree char *none = tf_units_dup_flux (si, NAN);
  g_assert_cmpstr (mx, ==, "6.1·10²¹ Mx");
  g_assert_cmpstr (wb, ==, "6.1·10¹³ Wb"); /* 1 Mx = 1e-8 Wb: SI Brochure (from memory) */
  g_assert_cmpstr (g, ==, "12.5 G");
  g_assert_cmpstr (mt, ==, "+1.25 mT"); /* 1 G = 1e-4 T: likewise */
  g_assert_cmpstr (deg, ==, "5.1° · 62 Mm");
  g_assert_cmpstr (mm, ==, "62 Mm · 5.1°");
  g_assert_cmpstr (none, ==, "—");
}

/* Every text says how, for a mark with all values and for one without poles. */
static void
provenance (void)
{
  g_autoptr (TfJudge) judge = tf_judge_new ();
  g_autoptr (TfSession) session = tf_session_new ();
  const TfMeasure cases[] = {
    { .lat_deg = 14.5, .cmd_deg = -12, .carrington_lon_deg = 200, .mu = 0.9, .leading_polarity = -1,
      .leading_sure = TRUE, .flux_unsigned_mx = 2e21, .positive = { .flux_mx = 1e21, .pixels = 9 },
      .negative = { .flux_mx = 1e21, .pixels = 9 }, .time = { 4e8 } },
    { .lat_deg = NAN, .cmd_deg = NAN, .carrington_lon_deg = NAN, .mu = NAN },
  };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      TfSampleRow row;
      TfVerdict verdict = tf_judge_measure (judge, &cases[k], &row);
      TfReading reading = { .measure = &cases[k], .verdict = &verdict, .row = &row, .method = "flux-centroid/1" };
      g_autofree char *place = tf_how_dup_place (&reading, session),
                      *why = tf_how_dup_verdict (&reading, judge),
                      *cautions = tf_how_dup_cautions (&reading);
      g_assert_nonnull (strstr (place, "flux-centroid/1"));
      g_assert_null (strstr (place, "nan"));
      g_assert_null (strstr (why, "nan"));
      g_assert_nonnull (strstr (why, "never by polarity"));
      g_assert_nonnull (strstr (cautions, "0.34"));
      g_assert_true ((strstr (place, "14.50") != NULL) == (k == 0));
    }
}

void
test_desk_add_mark (void)
{
  g_test_add_func ("/desk/mark/a-kept-hint-joins-the-region-of-its-passage", joins);
  g_test_add_func ("/desk/mark/a-drawn-mark-joins-the-region-of-its-passage", drawn_joins);
  g_test_add_func ("/desk/mark/a-split-is-proposed-and-left", proposed);
  g_test_add_func ("/desk/mark/both-halves-of-a-split-have-the-outline-term", split_is_whole);
  g_test_add_func ("/desk/mark/units-are-converted", units);
  g_test_add_func ("/desk/mark/place-and-verdict-say-how-they-were-got", provenance);
}
