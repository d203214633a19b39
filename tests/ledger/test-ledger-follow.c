/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Passages in a ledger: they follow what changes and come out as if made at once; people's links and
 * cuts stand, are undone, and are found when tampered with. */

#include "test-ledger.h"

#include "tf-ledger-brief.h"
#include "tf-ledger-follow.h"
#include "tf-rotation.h"

#define EPOCH  "2013-10-12T06:00:00Z"
#define STEP_S 21600.0

/* Region @r of the sun: where it is on frame @n. Three in the north and south, 20 degrees apart. */
static void
place (int r, int n, double *lon, double *lat)
{
  *lat = 17.5 - 12.0 * r;
  *lon = 180.0 + 20.0 * r + tf_rotation_carry (0, *lat, n * STEP_S);
}

static TfOutline *
outline_of (int r, int n)
{
  double lon, lat;
  place (r, n, &lon, &lat);
  return tf_outline_new_cap (tf_time_add (tf_time_read (EPOCH), n * STEP_S), lon + 0.3 * (n % 3),
                             lat, 4.0, 24);
}

/* The observer goes round as the Earth does. */
static gint64
add_frame (TfLedger *ledger, int n)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrameInfo) info = fixture_info (n);
  info->geometry.observer.carrington_lon_deg = tf_wrap_360 (211.25 - 13.2 * n * STEP_S / 86400.0);
  g_assert_true (tf_geometry_make (&info->geometry));
  g_autofree char *checksum = g_strdup_printf ("%064d", n),
                  *path = g_strdup_printf ("/frames/%d.fits", n);
  gint64 id = tf_ledger_add_frame (ledger, path, checksum, 1, 1, info, 9.5, &error);
  g_assert_no_error (error);
  return id;
}

static void
measure_of (TfMeasure *measure, int r, int n)
{
  fixture_measure (measure, n);
  place (r, n, &measure->carrington_lon_deg, &measure->lat_deg);
  measure->cmd_deg
      = tf_wrap_180 (measure->carrington_lon_deg - (211.25 - 13.2 * n * STEP_S / 86400.0));
}

static void
hint_free (gpointer data)
{
  TfHint *hint = data;
  tf_outline_unref (hint->outline);
  tf_measure_clear (&hint->measure);
  g_ptr_array_unref (hint->cautions);
  g_free (hint);
}

/* One frame with a hint for each of three regions. */
static void
fill_frame (TfLedger *ledger, int n)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func (hint_free);
  for (int r = 0; r < 3; r++)
    {
      TfHint *hint = g_new0 (TfHint, 1);
      hint->outline = outline_of (r, n);
      measure_of (&hint->measure, r, n);
      hint->cautions = tf_notes_new ();
      g_ptr_array_add (hints, hint);
    }
  g_assert_true (tf_ledger_add_hints (ledger, add_frame (ledger, n), "plain/1", hints,
                                      "flux-centroid/1", &error));
  g_assert_no_error (error);
}

static void
follow (TfLedger *ledger, TfFollowSum *sum)
{
  g_autoptr (GError) error = NULL;
  TfFollowParams params;
  tf_follow_params_init (&params);
  g_assert_true (tf_ledger_follow (ledger, &params, NULL, sum, &error));
  g_assert_no_error (error);
  g_assert_false (tf_ledger_follow_is_due (ledger));
}

/* Every sighting's id with its passage's, sorted: what must be the same in two ledgers. */
static char *
describe (const char *path)
{
  return fixture_sql_text (
      path, "SELECT group_concat (line, '\n') FROM (SELECT lower (hex (coalesce ((SELECT cid FROM "
            "hint WHERE b.hint = 1 AND id = b.mark), "
            "(SELECT uid FROM mark WHERE b.hint = 0 AND id = b.mark)))) || ' ' || lower (hex "
            "(q.cid)) || ' ' || q.born || q.ended || "
            "q.n_frames AS line FROM member b JOIN passage q ON q.id = b.passage ORDER BY line)");
}

/* The hint of a region on a frame, by the order of local keys. */
static TfSight
hint_at (TfLedger *ledger, int r, gint64 frame)
{
  g_autoptr (GPtrArray) rows = tf_ledger_rows (
      ledger, &(TfRowQuery){ .hints = TRUE, .frame = frame, .judged_hints = TRUE }, NULL);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      if (fabs (row->measure.lat_deg - (17.5 - 12.0 * r)) < 0.1)
        return (TfSight){ row->mark, TRUE };
    }
  g_assert_not_reached ();
}

static gint64
keep_hint (TfLedger *ledger, TfSight hint, gint64 person, gint64 region)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (GPtrArray) unused = NULL;
  TfRow *row = tf_ledger_row (ledger, hint.mark, TRUE, &error);
  TfMarkDeed deed = { .frame = row->frame,
                      .person = person,
                      .hint = hint.mark,
                      .region = region,
                      .origin = TF_MARK_KEPT,
                      .outline = row->outline,
                      .measure = &row->measure,
                      .method = row->method };
  gint64 mark = tf_ledger_keep (ledger, &deed, &error);
  g_assert_no_error (error);
  tf_row_free (row);
  return mark;
}

static void
fill_all (Fixture *f)
{
  for (int n = 0; n < 8; n++)
    fill_frame (f->ledger, n);
}

static void
test_three_passages (Fixture *f, gconstpointer data)
{
  TfFollowSum sum;
  fill_all (f);
  g_assert_true (tf_ledger_follow_is_due (f->ledger));
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.sightings, ==, 24);
  g_assert_cmpuint (sum.fresh, ==, 24);
  g_assert_cmpuint (sum.passages, ==, 3);
  g_assert_cmpuint (sum.hint_passages, ==, 3);
  g_assert_true (sum.changed);
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.fresh, ==, 0);
  g_assert_false (sum.changed);
  g_autoptr (GPtrArray) rows = tf_ledger_passages (f->ledger, NULL);
  g_assert_cmpuint (rows->len, ==, 3);
  const TfPassageRow *row = g_ptr_array_index (rows, 0);
  g_assert_cmpuint (row->n_frames, ==, 8);
  g_assert_cmpuint (row->n_hints, ==, 8);
  g_assert_cmpstr (row->vantage, ==, "earth");
  g_assert_cmpint (row->region, ==, 0);
  g_assert_cmpint (row->born, ==, TF_END_UNKNOWN);
  tf_check_near ("first time", row->first_time.s, tf_time_read (EPOCH).s, 1e-3);
  fixture_check (f->ledger, "");
}

/* Frames that come one by one and in any order, followed each time, as those filled in at once. */
static void
test_any_order (Fixture *f, gconstpointer data)
{
  static const int order[] = { 5, 0, 7, 3, 1, 6, 2, 4 };
  g_autoptr (GError) error = NULL;
  g_autofree char *other_path = g_build_filename (f->folder, "other.ledger", NULL);
  g_autoptr (TfLedger) other = fixture_open (f, other_path, &error);
  g_assert_no_error (error);
  fill_all (f);
  follow (f->ledger, NULL);
  for (guint k = 0; k < G_N_ELEMENTS (order); k++)
    {
      fill_frame (other, order[k]);
      follow (other, NULL);
    }
  g_autofree char *one = describe (f->path), *two = describe (other_path);
  g_assert_cmpstr (one, ==, two);
  fixture_check (other, "");
}

/* A mark stands where its hint stood, before follow has run again and after; the passage's region is
 * the mark's, and is offered to the next. */
static void
test_kept_in_its_passage (Fixture *f, gconstpointer data)
{
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  follow (f->ledger, NULL);
  TfSight hint = hint_at (f->ledger, 1, 2), next = hint_at (f->ledger, 1, 5);
  gint64 passage = tf_ledger_passage_of (f->ledger, hint);
  g_autofree char *before = describe (f->path);
  g_assert_cmpint (passage, !=, 0);
  g_assert_cmpint (tf_ledger_region_of_passage (f->ledger, passage), ==, 0);
  gint64 mark = keep_hint (f->ledger, hint, person, 0);
  g_assert_cmpint (tf_ledger_passage_of (f->ledger, (TfSight){ mark, FALSE }), ==, passage);
  gint64 region = tf_ledger_region_of_passage (f->ledger, passage);
  g_assert_cmpint (region, ==, fixture_region (f->ledger, mark));
  g_assert_cmpint (tf_ledger_passage_of (f->ledger, next), ==, passage);
  gint64 second = keep_hint (f->ledger, next, person, region);
  g_assert_cmpint (fixture_region (f->ledger, second), ==, region);
  for (int again = 0; again < 2; again++)
    {
      g_autoptr (TfPassageRow) row = tf_ledger_passage (f->ledger, passage, NULL);
      g_assert_cmpuint (row->n_marks, ==, 2);
      g_assert_cmpuint (row->n_hints, ==, 6);
      g_assert_cmpuint (row->n_regions, ==, 1);
      g_assert_cmpint (row->region, ==, region);
      g_autoptr (GPtrArray) rows = tf_ledger_passage_rows (f->ledger, passage, FALSE, TRUE, NULL);
      g_assert_cmpuint (rows->len, ==, 8);
      const TfRow *third = g_ptr_array_index (rows, 1);
      g_assert_cmpint (third->passage_key, ==, passage);
      g_assert_cmpstr (third->passage, ==, row->content_id);
      g_assert_cmpint (third->mark, ==, mark);
      fixture_check (f->ledger, "");
      follow (f->ledger, NULL);
    }
  g_autofree char *view = fixture_sql_text (
      f->path, "SELECT count (DISTINCT passage) || ' ' || count (*) FROM marks");
  g_assert_cmpstr (view, ==, "1 2");
}

static gint64
to_join (TfLedger *ledger, TfSight hint, gint64 person, const TfOutline *outline)
{
  TfRow *row = tf_ledger_row (ledger, hint.mark, TRUE, NULL);
  g_autofree char *number = NULL;
  gint64 region
      = tf_ledger_region_to_join (ledger, row->frame, person, outline == NULL ? hint.mark : 0,
                                  outline != NULL ? outline : row->outline, &number);
  g_assert_true ((region != 0) == (number != NULL));
  tf_row_free (row);
  return region;
}

/* Marks of one passage are one region, whether the hint is kept or the outline drawn; nothing is
 * assumed without passages, in a passage of two regions, or where that person marked it already. */
static void
test_joins_its_region (Fixture *f, gconstpointer data)
{
  gint64 north = tf_ledger_person (f->ledger, "north", NULL),
         south = tf_ledger_person (f->ledger, "south", NULL);
  fill_all (f);
  TfSight second = hint_at (f->ledger, 1, 2), sixth = hint_at (f->ledger, 1, 6);
  g_assert_cmpint (to_join (f->ledger, second, north, NULL), ==, 0); /* not followed yet */
  follow (f->ledger, NULL);
  g_assert_cmpint (to_join (f->ledger, second, north, NULL), ==, 0); /* hints only */
  gint64 region = fixture_region (f->ledger, keep_hint (f->ledger, hint_at (f->ledger, 1, 4), north, 0));
  g_assert_cmpint (to_join (f->ledger, second, north, NULL), ==, region);
  g_assert_cmpint (to_join (f->ledger, hint_at (f->ledger, 0, 2), north, NULL), ==, 0);
  g_autoptr (TfOutline) drawn = outline_of (1, 6), elsewhere = outline_of (2, 6);
  g_assert_cmpint (to_join (f->ledger, sixth, north, drawn), ==, region);
  g_assert_cmpint (to_join (f->ledger, sixth, north, elsewhere), ==, 0);
  g_assert_cmpint (to_join (f->ledger, hint_at (f->ledger, 1, 4), north, NULL), ==, 0); /* marked */
  g_assert_cmpint (to_join (f->ledger, hint_at (f->ledger, 1, 4), south, NULL), ==, region);
  keep_hint (f->ledger, hint_at (f->ledger, 1, 0), north, 0); /* a second region in the passage */
  g_assert_cmpint (to_join (f->ledger, second, north, NULL), ==, 0);
  g_assert_cmpint (to_join (f->ledger, sixth, north, drawn), ==, 0);
}

static void
test_cut_and_undone (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  TfFollowSum sum;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  follow (f->ledger, NULL);
  g_autofree char *before = describe (f->path);
  TfSight a = hint_at (f->ledger, 0, 4), b = hint_at (f->ledger, 0, 5);
  g_assert_true (tf_ledger_cut (f->ledger, a, b, person, "another region came up", &error));
  g_assert_true (tf_ledger_follow_is_due (f->ledger));
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 4);
  g_assert_cmpint (tf_ledger_passage_of (f->ledger, a), !=, tf_ledger_passage_of (f->ledger, b));
  /* Filling on and following again never undoes it. */
  fill_frame (f->ledger, 8);
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 4);
  fixture_check (f->ledger, "");
  g_auto (TfUndone) undone = { 0 };
  g_assert_true (tf_ledger_undo (f->ledger, person, &undone, &error));
  g_assert_cmpstr (undone.what, ==, "cut");
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 3);
  g_assert_true (tf_ledger_redo (f->ledger, person, NULL, &error));
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 4);
  fixture_check (f->ledger, "");
}

/* The cut still stands when one of its hints is kept and when that mark is drawn better. */
static void
test_cut_outlives_its_hint (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  TfFollowSum sum;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  TfSight a = hint_at (f->ledger, 0, 4), b = hint_at (f->ledger, 0, 5);
  g_assert_true (tf_ledger_cut (f->ledger, a, b, person, "", &error));
  gint64 mark = keep_hint (f->ledger, a, person, 0);
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 4);
  g_autoptr (TfOutline) outline = outline_of (0, 3);
  g_auto (TfMeasure) measure = { 0 };
  measure_of (&measure, 0, 3);
  TfMarkDeed deed = { .frame = 4,
                      .person = person,
                      .follows = mark,
                      .origin = TF_MARK_CHANGED,
                      .outline = outline,
                      .measure = &measure,
                      .method = "flux-centroid/1" };
  g_assert_cmpint (tf_ledger_keep (f->ledger, &deed, &error), !=, 0);
  g_assert_no_error (error);
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 4);
  g_assert_cmpuint (sum.ties_lost, ==, 0);
  fixture_check (f->ledger, "");
}

/* Relinked by hand: two regions a person says are one. */
static void
test_link (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  TfFollowSum sum;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  follow (f->ledger, NULL);
  TfSight a = hint_at (f->ledger, 0, 4), b = hint_at (f->ledger, 1, 5);
  g_assert_true (tf_ledger_link (f->ledger, a, b, person, "one region, drawn as two", &error));
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 2);
  gint64 passage = tf_ledger_passage_of (f->ledger, a);
  g_assert_cmpint (passage, ==, tf_ledger_passage_of (f->ledger, b));
  g_autoptr (GArray) links = tf_ledger_passage_links (f->ledger, passage, &error);
  guint by_hand = 0;
  for (guint k = 0; k < links->len; k++)
    {
      const TfPassageLink *link = &g_array_index (links, TfPassageLink, k);
      by_hand += link->kind == TF_LINK_HAND;
      if (link->kind == TF_LINK_HAND)
        g_assert_cmpstr (link->reason, ==, "one region, drawn as two");
    }
  g_assert_cmpuint (by_hand, ==, 1);
  g_assert_cmpuint (links->len, ==, 7 + 7 + 1);
  g_assert_true (tf_ledger_cut (f->ledger, a, b, person, "no", &error)); /* the last word stands */
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 3);
  g_assert_false (tf_ledger_link (f->ledger, a, a, person, "", &error));
  g_assert_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE);
  fixture_check (f->ledger, "");
}

/* Marks of one region five days apart, with nothing between them, are one passage: a person says so. */
static void
test_marks_of_one_region (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL), region = 0;
  static const int days[] = { 0, 20 };
  for (guint k = 0; k < 2; k++)
    {
      gint64 frame = add_frame (f->ledger, days[k]);
      g_autoptr (TfOutline) outline = outline_of (0, days[k]);
      g_auto (TfMeasure) measure = { 0 };
      measure_of (&measure, 0, days[k]);
      measure.cmd_deg = k == 0 ? -40 : 26;
      TfMarkDeed deed = { .frame = frame,
                          .person = person,
                          .region = region,
                          .origin = TF_MARK_DRAWN,
                          .outline = outline,
                          .measure = &measure,
                          .method = "flux-centroid/1" };
      gint64 mark = tf_ledger_keep (f->ledger, &deed, &error);
      g_assert_no_error (error);
      region = fixture_region (f->ledger, mark);
    }
  TfFollowSum sum;
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.passages, ==, 1);
}

/* An earlier frame filled in gives a passage another id; what people said of it stands where it stood:
 * the cut, the join, the return that was confirmed, the class and the note of its region. */
static void
test_earlier_frame (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  TfFollowSum sum;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  for (int n = 2; n < 10; n++)
    fill_frame (f->ledger, n);
  for (int n = 108; n < 112; n++) /* 27 days later */
    fill_frame (f->ledger, n);
  follow (f->ledger, &sum);
  guint regions = sum.regions;
  TfSight first = hint_at (f->ledger, 2, 1);
  gint64 passage = tf_ledger_passage_of (f->ledger, first);
  g_autoptr (TfPassageRow) before = tf_ledger_passage (f->ledger, passage, &error);
  g_assert_true (tf_ledger_cut (f->ledger, hint_at (f->ledger, 0, 4), hint_at (f->ledger, 0, 5),
                                person, "cut", &error));
  g_assert_true (tf_ledger_link (f->ledger, hint_at (f->ledger, 0, 6), hint_at (f->ledger, 1, 6),
                                 person, "join", &error));
  g_assert_true (tf_ledger_link (f->ledger, hint_at (f->ledger, 2, 8), hint_at (f->ledger, 2, 9),
                                 person, "come round", &error));
  gint64 mark = keep_hint (f->ledger, first, person, 0), region = fixture_region (f->ledger, mark);
  g_assert_true (tf_ledger_set_note (f->ledger, region, person, "watch it", &error));
  follow (f->ledger, &sum);
  TfFollowSum then = sum;
  g_assert_cmpuint (sum.regions, ==, regions - 1); /* cut +1, join -1, return -1 */
  for (int n = 1; n >= 0; n--) /* frames 13 and 14 of the ledger, the earliest */
    fill_frame (f->ledger, n);
  follow (f->ledger, &sum);
  g_assert_cmpuint (sum.ties_lost, ==, 0);
  g_assert_cmpuint (sum.ties, ==, 3);
  g_assert_cmpuint (sum.passages, ==, then.passages);
  g_assert_cmpuint (sum.regions, ==, then.regions);
  gint64 now = tf_ledger_passage_of (f->ledger, (TfSight){ mark, FALSE });
  g_autoptr (TfPassageRow) after = tf_ledger_passage (f->ledger, now, &error);
  g_assert_cmpstr (after->content_id, !=, before->content_id); /* it was renamed indeed */
  g_assert_cmpuint (after->n_frames, ==, before->n_frames + 2);
  g_assert_cmpint (after->region, ==, region);
  g_assert_cmpint (tf_ledger_passage_of (f->ledger, hint_at (f->ledger, 0, 4)), !=,
                   tf_ledger_passage_of (f->ledger, hint_at (f->ledger, 0, 5)));
  g_assert_cmpint (tf_ledger_passage_of (f->ledger, hint_at (f->ledger, 0, 6)), ==,
                   tf_ledger_passage_of (f->ledger, hint_at (f->ledger, 1, 6)));
  g_autoptr (TfPassageRow) later = tf_ledger_passage (
      f->ledger, tf_ledger_passage_of (f->ledger, hint_at (f->ledger, 2, 9)), &error);
  g_assert_cmpint (later->same, ==, after->same);
  g_autofree char *note = fixture_sql_text (f->path, "SELECT text FROM note");
  g_assert_cmpstr (note, ==, "watch it");
  fixture_check (f->ledger, "");
}

static void
test_known_and_recognised (Fixture *f, gconstpointer data)
{
  g_autoptr (GError) error = NULL;
  fill_all (f);
  follow (f->ledger, NULL);
  gint64 frame = add_frame (f->ledger, 9);
  g_autoptr (GPtrArray) known = tf_ledger_known (f->ledger, frame, &error);
  g_assert_no_error (error);
  g_assert_cmpuint (known->len, ==, 3);
  for (int r = 0; r < 3; r++)
    {
      g_autoptr (TfOutline) outline = outline_of (r, 9);
      gint64 passage = tf_ledger_recognise (f->ledger, frame, outline);
      g_assert_cmpint (passage, ==, tf_ledger_passage_of (f->ledger, hint_at (f->ledger, r, 8)));
      gboolean there = FALSE;
      for (guint k = 0; k < known->len; k++)
        {
          const TfKnown *one = g_ptr_array_index (known, k);
          double lon, lat, radius, at, lat_at;
          if (one->passage != passage)
            continue;
          there = TRUE;
          place (r, 9, &at, &lat_at);
          tf_outline_get_cap (one->ghost, &lon, &lat, &radius);
          tf_check_angle ("ghost", lon, at, 0.7);
          g_assert_cmpint (one->here.mark, ==, 0);
        }
      g_assert_true (there);
    }
  fill_frame (f->ledger, 10);
  follow (f->ledger, NULL);
  g_ptr_array_unref (g_steal_pointer (&known));
  known = tf_ledger_known (f->ledger, 10, &error);
  g_assert_cmpuint (known->len, ==, 3);
  for (guint k = 0; k < known->len; k++)
    {
      const TfKnown *one = g_ptr_array_index (known, k);
      g_assert_true (one->here.is_hint);
      tf_check_between ("overlap of ghost and hint", one->overlap, 0.8, 1.0);
    }
  g_autoptr (TfOutline) elsewhere = tf_outline_new_cap (tf_time_read (EPOCH), 120, -40, 4, 24);
  g_assert_cmpint (tf_ledger_recognise (f->ledger, frame, elsewhere), ==, 0);
}

typedef struct
{
  const char *name, *sql, *code;
} Tampering;

static const Tampering tamperings[] = {
  { "a-cut-made-a-link", "UPDATE tie SET cut = 0", "check-projection" },
  { "a-reason", "UPDATE tie SET reason = 'because'", "check-projection" },
  { "a-tie-gone", "DELETE FROM tie", "check-projection" },
  { "a-member-moved", "UPDATE member SET passage = (SELECT max (id) FROM passage) WHERE mark = 1",
    "check-passages" },
  { "an-end", "UPDATE passage SET ended = 1 - ended WHERE id = 1", "check-passages" },
  { "a-region-joined", "UPDATE passage SET same = 1", "check-passages" },
};

static void
test_tampering (Fixture *f, gconstpointer data)
{
  const Tampering *t = data;
  g_autoptr (GError) error = NULL;
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  g_assert_true (tf_ledger_cut (f->ledger, hint_at (f->ledger, 0, 4), hint_at (f->ledger, 0, 5),
                                person, "two", &error));
  follow (f->ledger, NULL);
  fixture_check (f->ledger, "");
  g_clear_pointer (&f->ledger, tf_ledger_close);
  fixture_sql (f->path, t->sql);
  fixture_reopen (f);
  if (!fixture_finds (f->ledger, t->code))
    {
      g_test_message ("%s was not found as %s", t->name, t->code);
      g_test_fail ();
    }
}

/* Briefs stand in the passages in which the whole rows stand, and were born where they were. */
static void
test_briefs (Fixture *f, gconstpointer data)
{
  gint64 person = tf_ledger_person (f->ledger, "north", NULL);
  fill_all (f);
  follow (f->ledger, NULL);
  gint64 mark = keep_hint (f->ledger, hint_at (f->ledger, 1, 2), person, 0);
  fixture_sql (f->path, "UPDATE passage SET born = 1 WHERE id = (SELECT passage FROM member ORDER BY passage LIMIT 1)");
  g_autoptr (TfBriefs) briefs = tf_ledger_briefs (f->ledger, &(TfBriefQuery){ .hints = TRUE }, NULL);
  g_autoptr (GPtrArray) rows
      = tf_ledger_rows (f->ledger, &(TfRowQuery){ .marks = TRUE, .hints = TRUE, .no_outlines = TRUE }, NULL);
  g_assert_cmpuint (briefs->rows->len, ==, 24);
  g_assert_cmpuint (rows->len, ==, 24);
  guint born = 0, found = 0;
  for (guint k = 0; k < 24; k++)
    for (guint j = 0; j < 24; j++)
      {
        const TfRow *row = g_ptr_array_index (rows, j);
        const TfBrief *brief = &g_array_index (briefs->rows, TfBrief, k);
        if (row->mark != brief->mark || row->is_hint != brief->hint)
          continue;
        g_assert_cmpint (brief->passage, ==, row->passage_key);
        g_assert_cmpint (brief->same, ==, row->same);
        g_assert_cmpint (brief->born, ==, row->born);
        g_assert_cmpuint (brief->region, ==, row->region_key);
        born += brief->born == TF_END_ON_DISK;
        found++;
      }
  g_assert_cmpuint (found, ==, 24);
  g_assert_cmpuint (born, ==, 8);
  const TfBrief *first = &g_array_index (briefs->rows, TfBrief, 0);
  g_assert_cmpint (first->mark, ==, mark);
  g_assert_cmpint (first->passage, !=, 0); /* its hint's: follow has not seen it */
  g_assert_cmpuint (briefs->n_hints, ==, 23);
}

void
add_follow_tests (void)
{
  FIXTURE_TEST ("/ledger/follow/briefs-are-in-the-same-passages", test_briefs);
  FIXTURE_TEST ("/ledger/follow/what-was-said-stands-when-an-earlier-frame-comes",
                test_earlier_frame);
  FIXTURE_TEST ("/ledger/follow/three-regions-are-three-passages", test_three_passages);
  FIXTURE_TEST ("/ledger/follow/frames-in-any-order-give-the-same", test_any_order);
  FIXTURE_TEST ("/ledger/follow/a-kept-hint-stays-in-its-passage", test_kept_in_its_passage);
  FIXTURE_TEST ("/ledger/follow/a-mark-joins-the-only-region-of-its-passage", test_joins_its_region);
  FIXTURE_TEST ("/ledger/follow/a-cut-stands-and-is-undone", test_cut_and_undone);
  FIXTURE_TEST ("/ledger/follow/a-cut-outlives-its-hint", test_cut_outlives_its_hint);
  FIXTURE_TEST ("/ledger/follow/a-link-joins-and-the-last-word-stands", test_link);
  FIXTURE_TEST ("/ledger/follow/marks-of-one-region-are-one-passage", test_marks_of_one_region);
  FIXTURE_TEST ("/ledger/follow/known-regions-are-recognised", test_known_and_recognised);
  for (guint k = 0; k < G_N_ELEMENTS (tamperings); k++)
    {
      g_autofree char *path = g_strdup_printf ("/ledger/follow/check-finds/%s", tamperings[k].name);
      g_test_add (path, Fixture, &tamperings[k], fixture_set_up, test_tampering, fixture_tear_down);
    }
}
