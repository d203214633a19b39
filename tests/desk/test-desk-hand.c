/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The hand on an outline in the session: brush, split, join, left-out areas, corners, pins, carrying; each goes back and forth,
 * over frames too. */

#include "test-desk.h"

#include <math.h>

#include "tf-check.h"

static const double radius_mm = 696.0; /* areas are only compared with each other */

/* -- a ledger with two frames, made once -------------------------------------------------------- */

static gboolean
has_two (gpointer session)
{
  return tf_session_get_n_frames (session) == 2 && tf_session_get_progress (session, NULL) == NULL
         && tf_session_get_pending (session) == 0;
}

static gboolean
is_open (gpointer session)
{
  return tf_session_get_frame (session) != NULL && !tf_session_is_loading (session)
         && g_list_model_get_n_items (tf_session_get_regions (session)) > 0;
}

static const char *
two_frames (void)
{
  static char *made;
  if (made != NULL)
    return made;
  const char *more[] = { TF_DEMO_FRAMES "/brindle-20131013-0600.fits", NULL };
  made = test_desk_path ("two-frames.ledger");
  g_autoptr (TfSession) session = test_desk_session (made);
  tf_session_add_frames (session, (char *const *)more);
  test_desk_wait ("two frames", has_two, session);
  tf_session_close (session);
  return made;
}

static void
choose_frame (TfSession *session, guint at)
{
  g_autoptr (TfFrameItem) item = g_list_model_get_item (tf_session_get_frames (session), at);
  tf_session_choose_frame (session, item);
  test_desk_wait ("the frame with its regions", is_open, session);
}

static gboolean
lists_two (gpointer session)
{
  return tf_session_get_n_frames (session) == 2;
}

/* On the earlier frame, its strongest hint chosen. */
static TfSession *
session_at_first (const char *name)
{
  g_autofree char *path = test_desk_path (name);
  g_autoptr (GFile) from = g_file_new_for_path (two_frames ()), to = g_file_new_for_path (path);
  g_assert_true (g_file_copy (from, to, G_FILE_COPY_OVERWRITE, NULL, NULL, NULL, NULL));
  TfSession *session = tf_session_new ();
  tf_session_set_person (session, "north desk");
  tf_session_set_view_size (session, 800, 500);
  tf_session_open_ledger (session, path, 0);
  test_desk_wait ("the roll", lists_two, session);
  choose_frame (session, 0);
  g_assert_true (tf_session_step_hint (session, 1));
  return session;
}

/* -- what is looked at ---------------------------------------------------------------------------- */

static guint
count (TfSession *session, gboolean hints)
{
  GListModel *list = tf_session_get_regions (session);
  guint n = 0;
  for (guint k = 0; k < g_list_model_get_n_items (list); k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      n += tf_region_item_get_row (item)->is_hint == hints && !tf_region_item_is_carried (item) ? 1 : 0;
    }
  return n;
}

typedef struct
{
  TfSession *session;
  guint marks, hints;
} Counted;

static gboolean
is_counted (gpointer data)
{
  const Counted *c = data;
  return count (c->session, FALSE) == c->marks && count (c->session, TRUE) == c->hints
         && tf_session_get_pending (c->session) == 0;
}

static void
wait_count (TfSession *session, guint marks, guint hints)
{
  Counted counted = { session, marks, hints };
  g_autofree char *what = g_strdup_printf ("%u marks and %u hints", marks, hints);
  test_desk_wait (what, is_counted, &counted);
}

static double
area (TfSession *session)
{
  return tf_outline_area (tf_session_get_base (session), radius_mm);
}

static TfVertex
middle (TfSession *session)
{
  TfVertex at;
  double radius;
  tf_outline_get_cap (tf_session_get_base (session), &at.lon_deg, &at.lat_deg, &radius);
  return at;
}

static double
reach_deg (TfSession *session)
{
  double lon, lat, radius;
  tf_outline_get_cap (tf_session_get_base (session), &lon, &lat, &radius);
  return radius;
}

/* The draft as it stands goes with one step back and comes again with one forward. */
static void
expect_one_step (TfSession *session)
{
  g_autoptr (TfOutline) draft = tf_outline_ref (tf_session_get_draft (session));
  g_assert_true (tf_session_undo (session));
  g_assert_true (tf_session_get_draft (session) == NULL
                 || !tf_outline_equal (tf_session_get_draft (session), draft));
  g_assert_true (tf_session_can_redo (session));
  g_assert_true (tf_session_redo (session));
  g_assert_nonnull (tf_session_get_draft (session));
  g_assert_true (tf_outline_equal (tf_session_get_draft (session), draft));
  g_assert_nonnull (tf_session_get_measure (session));
}

/* -- the brush ------------------------------------------------------------------------------------ */

/* From the middle over the western edge. */
static void
stroke (TfSession *session, TfTool tool)
{
  TfVertex at = middle (session);
  double far = reach_deg (session) + 1;
  tf_session_set_tool (session, tool);
  tf_session_brush_begin (session, at.lon_deg, at.lat_deg);
  for (double west = 0.3; west < far; west += 0.3)
    tf_session_brush_to (session, at.lon_deg + west, at.lat_deg);
  g_assert_false (tf_session_can_keep (session)); /* the hand is still on it */
  tf_session_brush_end (session);
}

static void
brushed (void)
{
  g_autoptr (TfSession) session = session_at_first ("brushed.ledger");
  double before = area (session);
  guint hints = count (session, TRUE);
  stroke (session, TF_TOOL_BRUSH_IN);
  double wider = area (session);
  g_assert_cmpfloat (wider, >, before);
  expect_one_step (session);
  stroke (session, TF_TOOL_BRUSH_OUT);
  g_assert_cmpfloat (area (session), <, wider);
  expect_one_step (session);
  g_assert_true (tf_session_undo (session));
  tf_check_near ("area after one step back", area (session), wider, 1e-9);
  g_assert_true (tf_session_undo (session));
  g_assert_null (tf_session_get_draft (session));
  tf_check_near ("area of the hint again", area (session), before, 1e-9);
  g_assert_true (tf_session_redo (session));
  tf_session_set_tool (session, TF_TOOL_NONE);
  g_assert_true (tf_session_keep (session));
  wait_count (session, 1, hints - 1);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->origin, ==, "changed");
  g_assert_true (tf_session_undo (session)); /* the deed: strokes are settled with it */
  wait_count (session, 0, hints);
  tf_session_close (session);
}

static void
brush_keeps_its_bounds (void)
{
  g_autoptr (TfSession) session = session_at_first ("bounds.ledger");
  for (guint k = 0; k < 60; k++)
    tf_session_set_brush (session, tf_session_get_brush (session) / 1.25);
  g_assert_cmpfloat (tf_session_get_brush (session), >, 0.1);
  for (guint k = 0; k < 60; k++)
    tf_session_set_brush (session, tf_session_get_brush (session) * 1.25);
  g_assert_cmpfloat (tf_session_get_brush (session), <, 20);
  tf_session_choose_region (session, NULL);
  tf_session_set_tool (session, TF_TOOL_BRUSH_OUT);
  tf_session_brush_begin (session, 0, 0); /* over nothing */
  tf_session_brush_to (session, 5, 0);
  tf_session_brush_end (session);
  g_assert_null (tf_session_get_draft (session));
  tf_session_close (session);
}

/* All of it brushed away is refused, not a draft of nothing. */
static void
brushed_away (void)
{
  g_autoptr (TfSession) session = session_at_first ("away.ledger");
  TfVertex at = middle (session);
  double whole = area (session), far = reach_deg (session) + 1;
  tf_session_set_brush (session, 10);
  tf_session_set_tool (session, TF_TOOL_BRUSH_OUT);
  tf_session_brush_begin (session, at.lon_deg - far, at.lat_deg);
  for (double west = -far; west < far; west += 1.3)
    tf_session_brush_to (session, at.lon_deg + west, at.lat_deg);
  tf_session_brush_end (session);
  if (tf_session_get_draft (session) != NULL)
    {
      g_assert_cmpfloat (area (session), >, 0);
      g_assert_cmpfloat (area (session), <=, whole);
    }
  while (tf_session_get_draft (session) != NULL)
    g_assert_true (tf_session_undo (session));
  tf_check_near ("area", area (session), whole, 1e-9);
  tf_session_close (session);
}

/* -- split, join, leave out, pin ------------------------------------------------------------------ */

static void
split (void)
{
  g_autoptr (TfSession) session = session_at_first ("split.ledger");
  TfVertex at = middle (session);
  double far = reach_deg (session) + 2, whole = area (session);
  guint hints = count (session, TRUE);
  TfVertex off = { at.lon_deg + 3 * far, at.lat_deg - far }, off_too = { at.lon_deg + 3 * far, at.lat_deg + far };
  g_assert_false (tf_session_split (session, off, off_too)); /* does not cross */
  g_assert_null (tf_session_get_draft (session));
  g_assert_true (tf_session_split (session, (TfVertex){ at.lon_deg, at.lat_deg - far },
                                   (TfVertex){ at.lon_deg, at.lat_deg + far }));
  g_assert_nonnull (tf_session_get_other_half (session));
  g_assert_nonnull (tf_session_get_other_measure (session));
  double other = tf_outline_area (tf_session_get_other_half (session), radius_mm);
  tf_check_near ("both halves", area (session) + other, whole, 0.005 * whole);
  expect_one_step (session);
  g_assert_nonnull (tf_session_get_other_measure (session));
  g_assert_true (tf_session_keep (session));
  wait_count (session, 2, hints - 1);
  g_assert_true (tf_session_undo (session)); /* both as one */
  wait_count (session, 0, hints);
  g_assert_true (tf_session_redo (session));
  wait_count (session, 2, hints - 1);
  tf_session_close (session);
}

static void
joined (void)
{
  g_autoptr (TfSession) session = session_at_first ("joined.ledger");
  guint hints = count (session, TRUE);
  double first = area (session);
  g_assert_false (tf_session_join (session)); /* with nothing */
  g_assert_true (tf_session_extend_hint (session, 1));
  g_assert_cmpuint (tf_session_get_n_chosen (session), ==, 2);
  g_assert_true (tf_session_join (session));
  g_assert_cmpfloat (area (session), >, first);
  expect_one_step (session);
  g_assert_true (tf_session_keep (session));
  wait_count (session, 1, hints - 2);
  g_assert_true (tf_session_undo (session));
  wait_count (session, 0, hints);
  g_assert_true (tf_session_redo (session));
  wait_count (session, 1, hints - 2);
  tf_session_close (session);
}

static void
left_out_and_pinned (void)
{
  g_autoptr (TfSession) session = session_at_first ("left-out.ledger");
  TfVertex at = middle (session);
  double r = reach_deg (session) / 3;
  TfVertex ring[] = { { at.lon_deg - r, at.lat_deg - r }, { at.lon_deg + r, at.lat_deg - r },
                      { at.lon_deg + r, at.lat_deg + r }, { at.lon_deg - r, at.lat_deg + r } };
  double flux = tf_session_get_measure (session)->flux_unsigned_mx;
  g_assert_false (tf_session_leave_out (session, ring, 2)); /* no area */
  g_assert_null (tf_session_get_draft (session));
  g_assert_true (tf_session_leave_out (session, ring, G_N_ELEMENTS (ring)));
  g_assert_cmpuint (tf_outline_get_n_left_out (tf_session_get_draft (session)), ==, 1);
  g_assert_cmpfloat (tf_session_get_measure (session)->flux_unsigned_mx, <, flux);
  expect_one_step (session);

  g_assert_false (tf_session_pin_pole (session, 1, at.lon_deg, at.lat_deg, "")); /* no reason */
  g_assert_true (tf_session_pin_pole (session, 1, at.lon_deg + r, at.lat_deg, "a spot hides it"));
  expect_one_step (session);
  const TfPinnedPole *pin = tf_outline_get_pin (tf_session_get_draft (session), 0);
  g_assert_cmpstr (pin->reason, ==, "a spot hides it");
  g_assert_cmpstr (pin->person, ==, "north desk");
  g_assert_true (tf_session_pin_pole (session, 0, 0, 0, NULL));
  g_assert_cmpuint (tf_outline_get_n_pins (tf_session_get_draft (session)), ==, 0);
  g_assert_true (tf_session_undo (session));
  g_assert_cmpuint (tf_outline_get_n_pins (tf_session_get_draft (session)), ==, 1);
  g_assert_cmpuint (tf_outline_get_n_left_out (tf_session_get_draft (session)), ==, 1);
  tf_session_close (session);
}

/* -- corners -------------------------------------------------------------------------------------- */

static guint
ring_length (TfSession *session, TfCornerPlace place)
{
  guint n;
  tf_outline_get_ring (tf_session_get_base (session), place.ring, place.left_out, &n);
  return n;
}

static void
corners (void)
{
  static const double apart = 1.5;
  g_autoptr (TfSession) session = session_at_first ("corner.ledger");
  g_autoptr (GArray) list = tf_session_list_corners (session, apart);
  g_assert_cmpuint (list->len, >, 2);
  TfCornerPlace place = g_array_index (list, TfCornerPlace, 1);
  TfVertex from = tf_session_get_corner (session, place), at = middle (session);
  TfVertex to = { from.lon_deg + 0.5 * (from.lon_deg - at.lon_deg), from.lat_deg + 0.5 * (from.lat_deg - at.lat_deg) };
  guint n = ring_length (session, place);
  for (double share = 0.25; share <= 1; share += 0.25) /* one drag, in four moves */
    tf_session_move_corner (session, place,
                            (TfVertex){ from.lon_deg + share * (to.lon_deg - from.lon_deg),
                                        from.lat_deg + share * (to.lat_deg - from.lat_deg) },
                            apart, share == 1);
  tf_check_near ("the corner's latitude", tf_session_get_corner (session, place).lat_deg, to.lat_deg, 1e-6);
  expect_one_step (session);
  g_assert_cmpuint (ring_length (session, place), ==, n);

  TfCornerPlace put;
  TfVertex next = tf_session_get_corner (session, (TfCornerPlace){ place.ring, (place.corner + 1) % n, FALSE }),
           edge = { (to.lon_deg + next.lon_deg) / 2, (to.lat_deg + next.lat_deg) / 2 };
  g_assert_true (tf_session_insert_corner (session, edge, 1, &put));
  g_assert_cmpuint (ring_length (session, place), ==, n + 1);
  expect_one_step (session);
  g_assert_true (tf_session_remove_corner (session, put));
  g_assert_cmpuint (ring_length (session, place), ==, n);
  g_assert_false (tf_session_insert_corner (session, (TfVertex){ at.lon_deg + 60, 0 }, 1, &put));
  for (guint k = 0; k < 3; k++)
    g_assert_true (tf_session_undo (session));
  g_assert_null (tf_session_get_draft (session));
  tf_check_near ("the corner where it was", tf_session_get_corner (session, place).lat_deg, from.lat_deg, 1e-9);
  tf_session_close (session);
}

/* -- over frames ---------------------------------------------------------------------------------- */

static gboolean
has_draft (gpointer session)
{
  return tf_session_get_draft (session) != NULL;
}

/* A draft and the way back through it wait on their frame. */
static void
drafts_wait (void)
{
  g_autoptr (TfSession) session = session_at_first ("wait.ledger");
  double before = area (session);
  stroke (session, TF_TOOL_BRUSH_IN);
  stroke (session, TF_TOOL_BRUSH_IN);
  g_autoptr (TfOutline) draft = tf_outline_ref (tf_session_get_draft (session));
  choose_frame (session, 1);
  g_assert_null (tf_session_get_draft (session));
  g_assert_false (tf_session_can_undo (session)); /* nothing was done here, no deed anywhere */
  tf_session_step_hint (session, 1);
  stroke (session, TF_TOOL_BRUSH_OUT); /* a draft here, too */
  choose_frame (session, 0);
  test_desk_wait ("the first draft", has_draft, session);
  g_assert_true (tf_outline_equal (tf_session_get_draft (session), draft));
  g_assert_true (tf_session_undo (session));
  g_assert_true (tf_session_undo (session));
  g_assert_null (tf_session_get_draft (session));
  g_assert_true (tf_session_redo (session));
  g_assert_cmpfloat (area (session), >, before);
  choose_frame (session, 1);
  test_desk_wait ("the second draft", has_draft, session);
  g_assert_true (tf_session_undo (session));
  g_assert_null (tf_session_get_draft (session));
  tf_session_close (session);
}

static TfRegionItem *
find_carried (TfSession *session)
{
  GListModel *list = tf_session_get_regions (session);
  for (guint k = 0; k < g_list_model_get_n_items (list); k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      if (tf_region_item_is_carried (item))
        return item; /* the list holds it */
    }
  return NULL;
}

static gboolean
is_carried_there (gpointer session)
{
  return find_carried (session) != NULL;
}

static gboolean
is_on_first (gpointer session)
{
  g_autoptr (TfFrameItem) first = g_list_model_get_item (tf_session_get_frames (session), 0);
  return tf_session_get_frame_item (session) == first && is_open (session) && count (session, FALSE) == 0;
}

static gboolean
is_on_second (gpointer session)
{
  g_autoptr (TfFrameItem) second = g_list_model_get_item (tf_session_get_frames (session), 1);
  return tf_session_get_frame_item (session) == second && is_open (session) && count (session, FALSE) == 1
         && tf_session_get_region (session) != NULL;
}

static gboolean
is_marked_there (gpointer session)
{
  return count (session, FALSE) == 1 && tf_session_get_pending (session) == 0;
}

/* Kept here, carried, kept there as the same region; back over both frames and forth again. */
static void
carried (void)
{
  g_autoptr (TfSession) session = session_at_first ("carried.ledger");
  guint hints = count (session, TRUE);
  g_assert_false (tf_session_can_carry (session)); /* nothing is before it */
  g_assert_true (tf_session_keep (session));
  wait_count (session, 1, hints - 1);
  g_autofree char *region = g_strdup (tf_region_item_get_row (tf_session_get_region (session))->region);
  g_assert_true (tf_session_carry_on (session));
  test_desk_wait ("the region on the next frame", is_carried_there, session);
  tf_session_choose_region (session, find_carried (session));
  const TfRow *row = tf_region_item_get_row (tf_session_get_region (session));
  g_assert_cmpstr (row->region, ==, region);
  tf_check_near ("its time", tf_outline_get_time (row->outline).s,
                 tf_frame_get_info (tf_session_get_frame (session))->time.s, 1);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark there", is_marked_there, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->region, ==, region);
  g_assert_true (tf_session_undo (session));
  test_desk_wait ("the mark there to go", is_carried_there, session);
  g_assert_true (tf_session_undo (session)); /* was done on the other frame */
  test_desk_wait ("the first frame without marks", is_on_first, session);
  g_assert_true (tf_session_redo (session));
  wait_count (session, 1, hints - 1);
  g_assert_true (tf_session_redo (session));
  test_desk_wait ("the second frame with its mark", is_on_second, session);
  g_assert_cmpstr (tf_region_item_get_row (tf_session_get_region (session))->region, ==, region);
  tf_session_close (session);
}

void
test_desk_add_hand (void)
{
  g_test_add_func ("/desk/hand/strokes-of-the-brush-go-back-one-by-one", brushed);
  g_test_add_func ("/desk/hand/the-brush-keeps-its-bounds-and-needs-an-outline", brush_keeps_its_bounds);
  g_test_add_func ("/desk/hand/what-is-brushed-away-can-be-had-back", brushed_away);
  g_test_add_func ("/desk/hand/a-split-is-two-regions-and-one-deed", split);
  g_test_add_func ("/desk/hand/a-join-is-one-region-and-one-deed", joined);
  g_test_add_func ("/desk/hand/left-out-areas-and-pins-go-back-and-forth", left_out_and_pinned);
  g_test_add_func ("/desk/hand/corners-are-moved-put-in-and-taken-away", corners);
  g_test_add_func ("/desk/hand/drafts-and-their-way-back-wait-on-their-frames", drafts_wait);
  g_test_add_func ("/desk/hand/what-is-carried-stays-the-same-region-back-and-forth", carried);
}
