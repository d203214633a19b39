/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The forecaster's order, what is new, what changed since the day before, what comes back. */

#include "test-study.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-observer.h"
#include "tf-rotation.h"
#include "tf-shift.h"

/* -- the order ---------------------------------------------------------------------------------- */

static void
classes_are_ranked (void)
{
  /* Hale et al. 1919; Kuenzel 1960 for delta: the more mixed, the earlier (the order is common practice, no source) */
  const char *const order[] = { "βγδ", "γδ", "βδ", "γ", "βγ", "β", "α", "" };
  for (guint k = 0; k < G_N_ELEMENTS (order); k++)
    g_assert_cmpuint (tf_shift_class_rank (order[k]), ==, k);
  g_assert_cmpuint (tf_shift_class_rank (NULL), ==, 7);
  g_assert_cmpuint (tf_shift_class_rank ("beta"), ==, 7);
}

static TfShiftRow
made (const char *mw_class, double r, gboolean is_new, double flux, const char *number)
{
  TfShiftRow row = { .seen = TF_SEEN_MARK,
                     .class_now = (char *)mw_class,
                     .number = (char *)number,
                     .is_new = is_new };
  row.r_mx.now = r;
  row.flux_mx.now = flux;
  row.crosses = TF_TIME_UNKNOWN;
  row.group = tf_shift_group (&row);
  return row;
}

static void
rows_are_ordered (void)
{
  TfShiftRow rows[] = {
    made ("βγδ", NAN, FALSE, 1e21, "a"), made ("βδ", 5e20, FALSE, 1e21, "b"),
    made ("β", 4e21, FALSE, 1e21, "c"),  made ("β", 3e21, FALSE, 9e22, "d"),
    made ("β", 0, FALSE, 1e21, "e"),     made ("β", NAN, FALSE, 9e22, "f"),
    made ("α", 0, FALSE, 1e21, "g"),     made ("", 8e21, FALSE, 1e21, "h"),
    made ("", 7e21, FALSE, 1e22, "i"),   made ("", NAN, TRUE, 1e21, "j"),
    made ("", NAN, FALSE, 5e22, "k"),    made ("", NAN, FALSE, NAN, "l"),
    made ("", 0, FALSE, 9e22, "m"),      made ("", 0, FALSE, 1e21, "n"),
  };
  const TfShiftGroup groups[] = { TF_SHIFT_CLASSED, TF_SHIFT_TANGLED, TF_SHIFT_UNMEASURED, TF_SHIFT_QUIET };
  g_autoptr (GPtrArray) list = g_ptr_array_new ();
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    g_ptr_array_insert (list, (gint)((k * 5) % (list->len + 1)), &rows[k]);
  g_ptr_array_sort (list, tf_shift_compare);
  for (guint k = 0; k < list->len; k++)
    g_assert_cmpstr (((TfShiftRow *)g_ptr_array_index (list, k))->number, ==, rows[k].number);
  /* not measured is not taken for quiet */
  g_assert_cmpint (rows[9].group, ==, groups[2]);
  g_assert_cmpint (rows[12].group, ==, groups[3]);
  rows[0].seen = TF_SEEN_DUE;
  g_assert_cmpint (tf_shift_group (&rows[0]), ==, TF_SHIFT_DUE);
}

static void
ages_are_said (void)
{
  const struct
  {
    double s;
    const char *words;
  } cases[] = { { 2.1 * 86400, "2.1 d ago" }, { 0, "now" },      { 3 * 3600, "3 h ago" },
                { -5 * 3600, "in 5 h" },      { NAN, "—" },      { 1800, "30 min ago" },
                { -1.25 * 86400, "in 1.2 d" } };
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autofree char *words = tf_shift_dup_age (cases[k].s);
      g_assert_cmpstr (words, ==, cases[k].words);
    }
}

static void
shares_need_both (void)
{
  const TfShiftValue grew = { .now = 3, .before = 2 }, none = { .now = 3, .before = NAN }, zero = { .now = 3, .before = 0 };
  tf_check_near ("grew", tf_shift_share (&grew), 0.5, 1e-12);
  tf_check_nan ("none", tf_shift_share (&none));
  tf_check_nan ("zero", tf_shift_share (&zero));
}

/* -- the east limb ------------------------------------------------------------------------------ */

static void
limb_follows_b0 (void)
{
  tf_check_near ("equator", tf_shift_limb_cmd (0, 7), 90, 1e-9);
  tf_check_near ("no tilt", tf_shift_limb_cmd (30, 0), 90, 1e-9);
  /* the pole that leans to us: its latitudes come early */
  g_assert_cmpfloat (tf_shift_limb_cmd (30, 7), >, 90);
  tf_check_near ("mirrored", tf_shift_limb_cmd (30, 7) + tf_shift_limb_cmd (-30, 7), 180, 1e-9);
}

/* A spot on the central meridian comes over the east limb three quarters of a synodic rotation later: 27.27 d at the latitude of
 * Carrington's rate (reference: Meeus, Astronomical Algorithms, ch. 29). */
static void
crossing_is_three_quarters_of_a_turn (void)
{
  guint rigid = 0;
  while (strcmp (tf_rotation_names[rigid], "rigid-carrington") != 0)
    rigid++;
  TfTime seen = tf_time_read ("2013-06-05T00:00:00Z"); /* B0 near 0 there and a quarter before */
  double l0 = tf_earth_l0 (seen, TF_L0_IMAGE);
  TfTime at = tf_shift_crossing (l0, 0, seen, seen, 0, rigid);
  tf_check_near ("days", (at.s - seen.s) / 86400, 0.75 * 27.2753, 0.15);
  TfObserver earth = tf_observer_earth (at);
  tf_check_angle ("on the east limb", l0 - earth.carrington_lon_deg, -90, 0.02);
  /* the time asked from makes no other crossing of it */
  TfTime later = tf_shift_crossing (l0, 0, seen, tf_time_add (seen, 10 * 86400), 0, rigid);
  tf_check_near ("asked later", later.s, at.s, 120);
  /* slower at high latitude */
  TfTime high = tf_shift_crossing (l0, 35, seen, seen, 0, 0), low = tf_shift_crossing (l0, 5, seen, seen, 0, 0);
  g_assert_cmpfloat (high.s, >, low.s + 86400);
  tf_check_nan ("unknown", tf_shift_crossing (NAN, 5, seen, seen, 0, 0).s);
}

/* -- a ledger ----------------------------------------------------------------------------------- */

/* A region as the frame at @time shows it when it stood at @cmd on the first frame. */
static TfMeasure
seen_at (const char *time, const char *first, double lat, double cmd, double flux)
{
  TfTime now = tf_time_read (time), then = tf_time_read (first);
  TfMeasure m = test_study_measure (lat, 1);
  double lon = tf_earth_l0 (then, TF_L0_IMAGE) + cmd + tf_rotation_carry (0, lat, now.s - then.s);
  m.time = now;
  m.carrington_lon_deg = tf_wrap_360 (lon);
  m.cmd_deg = tf_wrap_180 (lon - tf_earth_l0 (now, TF_L0_IMAGE));
  m.mu = cos (lat * G_PI / 180) * cos (m.cmd_deg * G_PI / 180);
  m.flux_unsigned_mx = flux;
  m.positive.magnetic_area_msh = m.negative.magnetic_area_msh = flux / 1e20;
  return m;
}

#define DAY_1 "2013-06-03T06:00:00"
#define DAY_2 "2013-06-04T06:00:00"
#define DAY_3 "2013-06-05T06:00:00"

static TfShiftRow *
row_of (const TfShift *shift, const char *number)
{
  for (guint k = 0; k < shift->rows->len; k++)
    {
      TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      if (strcmp (row->number, number) == 0)
        return row;
    }
  return NULL;
}

static gint64
region_of (TestLedger *t, gint64 mark)
{
  g_autoptr (TfRow) row = tf_ledger_row (t->ledger, mark, FALSE, NULL);
  return row->region_key;
}

static void
give_r (TestLedger *t, gint64 mark, double r, double mu)
{
  const gboolean hint = FALSE;
  const TfComplexityRow figures = { .there = TRUE, .mu = mu, .r_mx = r };
  g_assert_true (tf_ledger_add_complexity (t->ledger, 1, &mark, &hint, "inversion-lines/1", &figures, NULL));
}

/* Two marked regions; the next day one comes again as a hint that has grown, the other is not there, and one is new. */
static void
newest_frame_is_recognised (void)
{
  g_auto (TestLedger) t;
  test_study_ledger_open (&t);
  gint64 one = test_study_frame (&t, DAY_1, "BRINDLE", 10), two = test_study_frame (&t, DAY_2, "BRINDLE", 10);
  gint64 a = test_study_mark (&t, one, 0, seen_at (DAY_1, DAY_1, 15, -20, 1e22));
  gint64 b = test_study_mark (&t, one, 0, seen_at (DAY_1, DAY_1, -20, 30, 2e22));
  give_r (&t, a, 2e21, 0.9);
  give_r (&t, a, 9e21, 0.5); /* of the same method: the first one stands */
  give_r (&t, b, 4e21, 0.6); /* too near the limb */
  g_assert_true (tf_ledger_set_class (t.ledger, region_of (&t, b), one, t.person, "βγ", "magnetogram", NULL));
  test_study_hint (&t, two, FALSE, seen_at (DAY_2, DAY_1, 15, -20, 1.5e22));
  g_autoptr (TfShift) first = tf_shift_read (t.ledger, one, NULL);
  g_assert_cmpuint (first->rows->len, ==, 2);
  g_assert_false (first->compared);
  g_autoptr (TfShift) shift = tf_shift_read (t.ledger, 0, NULL);
  g_assert_cmpint (shift->frame, ==, two);
  g_assert_true (shift->compared);
  g_assert_cmpuint (shift->rows->len, ==, 2);
  const TfShiftRow *again = row_of (shift, "T2013-0001"), *gone = row_of (shift, "T2013-0002");
  g_assert_cmpint (again->seen, ==, TF_SEEN_HINT);
  g_assert_false (again->is_new);
  tf_check_near ("its growth", tf_shift_share (&again->flux_mx), 0.5, 1e-9);
  tf_check_near ("its area", tf_shift_share (&again->area_msh), 0.5, 1e-9);
  tf_check_near ("R of the day before", again->r_mx.now, 2e21, 0);
  tf_check_near ("its age", shift->time.s - again->r_mx.now_time.s, 86400, 1);
  g_assert_cmpint (gone->seen, ==, TF_SEEN_NOT);
  tf_check_near ("carried", gone->cmd_deg, 30 + 13.0, 0.6);
  tf_check_nan ("no R near the limb", gone->r_mx.now);
  g_assert_cmpstr (gone->class_now, ==, "βγ");
  g_assert_cmpstr (gone->class_before, ==, "βγ");
  g_assert_cmpstr (gone->class_person, ==, "Ada");
  /* the class goes before R */
  g_assert_true (g_ptr_array_index (shift->rows, 0) == gone);
}

static void
new_is_what_nothing_explains (void)
{
  g_auto (TestLedger) t;
  test_study_ledger_open (&t);
  gint64 one = test_study_frame (&t, DAY_1, "BRINDLE", 10), two = test_study_frame (&t, DAY_2, "BRINDLE", 10);
  gint64 three = test_study_frame (&t, DAY_3, "BRINDLE", 10);
  test_study_hint (&t, one, FALSE, seen_at (DAY_1, DAY_1, 15, -20, 1e22));
  test_study_hint (&t, two, FALSE, seen_at (DAY_2, DAY_1, 15, -20, 1e22));
  test_study_hint (&t, three, FALSE, seen_at (DAY_3, DAY_1, -25, 10, 1e22));
  g_autoptr (TfShift) first = tf_shift_read (t.ledger, one, NULL), second = tf_shift_read (t.ledger, two, NULL),
                      third = tf_shift_read (t.ledger, three, NULL);
  g_assert_cmpuint (first->n_new, ==, 0); /* there is nothing to compare with */
  g_assert_cmpuint (second->n_new, ==, 0);
  g_assert_cmpuint (third->n_new, ==, 1);
  g_assert_cmpuint (third->rows->len, ==, 1);
  const TfShiftRow *row = g_ptr_array_index (third->rows, 0);
  g_assert_cmpint (row->group, ==, TF_SHIFT_UNMEASURED);
  g_assert_cmpint (row->region, ==, 0);
  const TfShiftRow *old = g_ptr_array_index (second->rows, 0);
  tf_check_near ("first seen the day before", second->time.s - old->first.s, 86400, 1);
}

/* Another floor: two days' fluxes are not compared. */
static void
floors_must_agree (void)
{
  g_auto (TestLedger) t;
  test_study_ledger_open (&t);
  gint64 one = test_study_frame (&t, DAY_1, "BRINDLE", 10), two = test_study_frame (&t, DAY_2, "BRINDLE", 10);
  gint64 mark = test_study_mark (&t, one, 0, seen_at (DAY_1, DAY_1, 15, -20, 1e22));
  TfMeasure m = seen_at (DAY_2, DAY_1, 15, -20, 2e22);
  m.floor_kind = TF_FLOOR_EVEN;
  test_study_mark (&t, two, region_of (&t, mark), m);
  g_autoptr (TfShift) shift = tf_shift_read (t.ledger, two, NULL);
  g_assert_cmpuint (shift->rows->len, ==, 1);
  const TfShiftRow *row = g_ptr_array_index (shift->rows, 0);
  g_assert_true (row->floors_differ);
  tf_check_nan ("no change", tf_shift_share (&row->flux_mx));
}

static void
last_rotation_comes_back (void)
{
  g_auto (TestLedger) t;
  test_study_ledger_open (&t);
  gint64 old = test_study_frame (&t, "2013-05-10T06:00:00", "BRINDLE", 10);
  /* Over the west limb on May 16 or so: back on May 29 or 30. */
  gint64 mark = test_study_mark (&t, old, 0, seen_at ("2013-05-10T06:00:00", "2013-05-10T06:00:00", 10, 10, 1e22));
  gint64 early = test_study_frame (&t, "2013-05-26T06:00:00", "BRINDLE", 10);
  gint64 due = test_study_frame (&t, "2013-05-28T06:00:00", "BRINDLE", 10);
  g_assert_true (tf_ledger_set_class (t.ledger, region_of (&t, mark), old, t.person, "βδ", "magnetogram", NULL));
  g_autoptr (TfShift) none = tf_shift_read (t.ledger, early, NULL), shift = tf_shift_read (t.ledger, due, NULL);
  g_assert_cmpuint (none->rows->len, ==, 0);
  g_assert_cmpuint (shift->count[TF_SHIFT_DUE], ==, 1);
  const TfShiftRow *row = g_ptr_array_index (shift->rows, 0);
  g_assert_cmpint (row->seen, ==, TF_SEEN_DUE);
  g_assert_cmpstr (row->class_before, ==, "βδ");
  double hours = (row->crosses.s - shift->time.s) / 3600;
  g_assert_cmpfloat (hours, >, 0);
  g_assert_cmpfloat (hours, <, 72);
  /* at that moment its carried place is on the limb */
  double lon = row->carrington_lon_deg + tf_rotation_carry (0, 10, row->crosses.s - shift->time.s);
  TfObserver earth = tf_observer_earth (row->crosses);
  tf_check_angle ("limb", lon - earth.carrington_lon_deg, -tf_shift_limb_cmd (10, earth.b0_deg), 0.05);
}

static TfListing *
listing (const char *number, TfTime time, double lat, double carrington, double cmd)
{
  TfListing *l = g_new0 (TfListing, 1);
  *l = (TfListing){ .number = g_strdup (number), .mw_class = g_strdup ("β"), .source = g_strdup ("a list"), .time = time,
                    .lat_deg = lat, .carrington_lon_deg = carrington, .cmd_deg = cmd, .spot_area_msh = 100 };
  return l;
}

static void
others_free (gpointer data)
{
  TfOthers *others = data;
  g_free (others->number);
  g_free (others->mw_class);
  g_free (others->source);
  g_free (others);
}

static void
placed_free (gpointer data)
{
  TfShiftRow *row = data;
  g_ptr_array_unref (row->proposed);
  g_clear_pointer (&row->others, others_free);
  g_free (row);
}

static TfShiftRow *
placed (GPtrArray *rows, const char *external, double lat, double lon)
{
  TfShiftRow *row = g_new0 (TfShiftRow, 1);
  *row = (TfShiftRow){ .seen = TF_SEEN_MARK, .external = (char *)external, .lat_deg = lat, .carrington_lon_deg = lon };
  row->proposed = g_ptr_array_new_with_free_func (others_free);
  g_ptr_array_add (rows, row);
  return row;
}

static void
matches_are_proposed_by_place (void)
{
  TfTime now = tf_time_read ("2013-06-05T06:00:00Z"), then = tf_time_read ("2013-06-06T00:00:00Z");
  g_autoptr (GPtrArray) rows = g_ptr_array_new_with_free_func (placed_free),
                        unmatched = g_ptr_array_new_with_free_func (others_free),
                        listings = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_listing_free);
  TfShiftRow *a = placed (rows, "", 15, 100), *b = placed (rows, "", 15, 108), *c = placed (rows, "11777", -20, 200);
  double l0 = tf_earth_l0 (then, TF_L0_IMAGE);
  g_ptr_array_add (listings, listing ("11771", then, 15, 103.5, NAN));           /* nearer to the first */
  g_ptr_array_add (listings, listing ("11772", then, 14, NAN, 99 - l0));         /* by its longitude from the meridian */
  g_ptr_array_add (listings, listing ("11777", then, -24, 230, NAN));            /* the number decides, wherever it stands */
  g_ptr_array_add (listings, listing ("11778", then, -20, 207, NAN));            /* nothing within 5 degrees */
  g_ptr_array_add (listings, listing ("11779", then, 15, 108, NAN));
  ((TfListing *)g_ptr_array_index (listings, 4))->due = TRUE; /* not seen yet */
  tf_shift_match (rows, now, listings, 0, unmatched);
  g_assert_cmpuint (a->proposed->len, ==, 2); /* many to one is shown */
  g_assert_cmpuint (((TfOthers *)g_ptr_array_index (a->proposed, 0))->sharing, ==, 2);
  g_assert_cmpuint (b->proposed->len, ==, 0);
  g_assert_nonnull (c->others);
  g_assert_cmpuint (unmatched->len, ==, 1);
  g_assert_cmpstr (((TfOthers *)g_ptr_array_index (unmatched, 0))->number, ==, "11778");
  /* carried: at 60 deg the field lags by 2.6 deg a day, at 15 deg by 0.1 */
  tf_check_near ("distance", ((TfOthers *)g_ptr_array_index (a->proposed, 0))->apart_deg,
                 cos (15 * G_PI / 180) * (3.5 - tf_rotation_carry (0, 15, 64800)), 0.02);
}

static void
notes_carry_over (void)
{
  g_auto (TestLedger) t;
  test_study_ledger_open (&t);
  gint64 one = test_study_frame (&t, DAY_1, "BRINDLE", 10);
  gint64 a = region_of (&t, test_study_mark (&t, one, 0, seen_at (DAY_1, DAY_1, 15, -20, 1e22)));
  gint64 b = region_of (&t, test_study_mark (&t, one, 0, seen_at (DAY_1, DAY_1, -20, 30, 2e22)));
  gint64 other = tf_ledger_person (t.ledger, "north", NULL);
  tf_ledger_set_note (t.ledger, a, t.person, "open", NULL);
  tf_ledger_set_note (t.ledger, b, t.person, "settled", NULL);
  g_assert_true (tf_ledger_resolve (t.ledger, b, t.person, other, TRUE, NULL));
  g_assert_true (tf_ledger_hand_over (t.ledger, other, TF_TIME_UNKNOWN, NULL));
  g_usleep (2000); /* the clock of the ledger counts in ms */
  tf_ledger_set_note (t.ledger, b, other, "new", NULL);
  g_autoptr (TfShift) shift = tf_shift_read (t.ledger, one, NULL);
  const TfShiftRow *row_a = row_of (shift, "T2013-0001"), *row_b = row_of (shift, "T2013-0002");
  g_assert_cmpuint (row_a->notes->len, ==, 1);
  g_assert_cmpint (tf_shift_note_state (g_ptr_array_index (row_a->notes, 0), shift->since), ==, TF_NOTE_STATE_CARRIED);
  g_assert_cmpuint (row_b->notes->len, ==, 1);
  const TfRegionNote *note = g_ptr_array_index (row_b->notes, 0);
  g_assert_cmpstr (note->text, ==, "new");
  g_assert_cmpint (tf_shift_note_state (note, shift->since), ==, TF_NOTE_STATE_NEW);
  g_assert_cmpstr (shift->since_person, ==, "north");
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_shift_build_json (shift, "south", builder);
  g_autoptr (JsonNode) root = json_builder_get_root (builder);
  JsonArray *regions = json_object_get_array_member (json_node_get_object (root), "regions");
  g_assert_cmpuint (json_array_get_length (regions), ==, 2);
}

void
test_study_add_shift (void)
{
  g_test_add_func ("/study/shift/classes-are-ranked-the-more-mixed-first", classes_are_ranked);
  g_test_add_func ("/study/shift/rows-come-by-class-then-R-and-unmeasured-is-not-quiet", rows_are_ordered);
  g_test_add_func ("/study/shift/ages-are-said-in-words", ages_are_said);
  g_test_add_func ("/study/shift/a-change-needs-both-days", shares_need_both);
  g_test_add_func ("/study/shift/the-limb-follows-the-observer's-latitude", limb_follows_b0);
  g_test_add_func ("/study/shift/back-at-the-east-limb-after-three-quarters-of-a-turn", crossing_is_three_quarters_of_a_turn);
  g_test_add_func ("/study/shift/known-regions-are-recognised-on-the-newest-frame", newest_frame_is_recognised);
  g_test_add_func ("/study/shift/new-is-what-no-carried-outline-explains", new_is_what_nothing_explains);
  g_test_add_func ("/study/shift/fluxes-above-different-floors-are-not-compared", floors_must_agree);
  g_test_add_func ("/study/shift/last-rotation's-regions-are-due-back", last_rotation_comes_back);
  g_test_add_func ("/study/shift/matches-are-proposed-by-the-carried-place", matches_are_proposed_by_place);
  g_test_add_func ("/study/shift/open-notes-carry-over-and-settled-ones-go", notes_carry_over);
}
