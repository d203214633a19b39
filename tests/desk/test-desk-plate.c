/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What the plate shows: looks, overlays, pictures of it, positions. */

#include "test-desk.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-overlay.h"
#include "tf-slip-spots.h"
#include "tf-plate-shot.h"
#include "tf-preferences-dialog.h"
#include "tf-preferences.h"
#include "tf-save-as.h"

static gboolean
is_open (gpointer session)
{
  return tf_session_get_frame (session) != NULL && !tf_session_is_loading (session);
}

/* A session without a ledger that looks at one frame. */
static TfSession *
looking_at (const char *path)
{
  const char *frames[] = { path, NULL };
  TfSession *session = tf_session_new ();
  tf_session_set_view_size (session, 900, 600);
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("the frame", is_open, session);
  return session;
}

/* From each look to each other, fitted or enlarged: the same point of the Sun stays under the
 * pointer. */
static void
looks_hold_the_point (gconstpointer path)
{
  g_autoptr (TfSession) session = looking_at (path);
  const TfGeometry *g = tf_frame_get_geometry (tf_session_get_frame (session));
  for (int from = 0; from < 3; from++)
    for (int to = 0; to < 3; to++)
      for (int enlarged = 0; enlarged < 2 && from != to; enlarged++)
        {
          TfPlace before, after;
          tf_session_set_pointer (session, FALSE, 0, 0);
          tf_session_set_look (session, (TfLook)from);
          tf_session_fit (session);
          if (enlarged)
            tf_session_zoom (session, 2.5, 520, 240);
          tf_session_set_pointer (session, TRUE, 505, 255);
          g_assert_true (tf_view_to_sun (tf_session_get_view (session), g, 505, 255, &before));
          tf_session_set_look (session, (TfLook)to);
          g_assert_true (tf_view_to_sun (tf_session_get_view (session), g, 505, 255, &after));
          tf_check_angle ("longitude", after.carrington_lon_deg, before.carrington_lon_deg, 1e-4);
          tf_check_near ("latitude", after.lat_deg, before.lat_deg, 1e-4);
        }
  tf_session_close (session);
}

/* -- what lies over the picture -------------------------------------------------------------- */

static guint
count_lines (TfSession *session, TfLineKind kind)
{
  g_autoptr (GArray) lines = tf_session_dup_lines (session);
  guint n = 0;
  for (guint k = 0; k < lines->len; k++)
    n += g_array_index (lines, TfOverlayLine, k).kind == kind ? 1 : 0;
  return n;
}

static gboolean
has_traced (gpointer session)
{
  return !tf_session_is_tracing (session);
}

static gboolean
has_companion (gpointer session)
{
  return tf_session_find_companion (session) != NULL;
}

static gboolean
has_said (gpointer session)
{
  return tf_session_get_spots (session) != NULL;
}

/* Of the chosen hint, with the overlay off: the demo's strongest hint with two spots. */
static void
spots_are_told (TfSession *session)
{
  g_autoptr (TfRegionItem) hint = g_list_model_get_item (tf_session_get_regions (session), 1);
  tf_session_set_overlay (session, TF_OVERLAY_SPOTS, FALSE);
  g_assert_null (tf_session_get_spots (session));
  tf_session_choose_region (session, hint);
  test_desk_wait ("what the spots tell", has_said, session);
  const TfSpots *spots = tf_session_get_spots (session);
  g_autofree char *value = tf_spots_dup_value (spots), *under = tf_spots_dup_under (spots),
                  *how = tf_spots_dup_how (spots, tf_session_find_companion (session));
  g_assert_true (spots->matched);
  g_assert_nonnull (strstr (value, "tilt +"));
  g_assert_nonnull (strstr (value, "− leads"));
  g_assert_nonnull (strstr (under, "2 spots, "));
  g_assert_nonnull (strstr (under, "too coarse"));
  g_assert_nonnull (strstr (how, "0 min apart"));
  g_assert_nonnull (strstr (how, "continuum.fits"));
  tf_session_choose_region (session, NULL);
  g_assert_null (tf_session_get_spots (session));
}

/* A line between the polarities of every chosen hint; spots only with the intensity frame. */
static void
lines_are_found (void)
{
  g_autofree char *path = test_desk_path ("lines.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_assert_cmpuint (count_lines (session, TF_LINE_INVERSION), ==, 0);
  tf_session_set_overlay (session, TF_OVERLAY_INVERSION, TRUE);
  tf_session_set_overlay (session, TF_OVERLAY_SPOTS, TRUE);
  test_desk_wait ("the lines", has_traced, session);
  g_assert_cmpuint (count_lines (session, TF_LINE_INVERSION), >, 0);
  g_assert_cmpuint (count_lines (session, TF_LINE_PENUMBRA), ==, 0);
  g_assert_null (tf_session_find_companion (session));
  const char *frames[] = { TF_DEMO_FRAMES "/brindle-20131012-0600-continuum.fits", NULL };
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("the companion", has_companion, session);
  test_desk_wait ("the spots", has_traced, session);
  g_assert_cmpuint (count_lines (session, TF_LINE_PENUMBRA), >, 0);
  g_assert_cmpuint (count_lines (session, TF_LINE_UMBRA), >, 0);
  g_assert_cmpuint (count_lines (session, TF_LINE_INVERSION), >, 0);
  tf_session_set_overlay (session, TF_OVERLAY_INVERSION, FALSE);
  g_assert_cmpuint (count_lines (session, TF_LINE_INVERSION), ==, 0);
  spots_are_told (session);
  tf_session_close (session);
}

static gboolean
has_ghosts (gpointer session)
{
  const GPtrArray *ghosts = tf_session_get_ghosts (session);
  return ghosts != NULL && ghosts->len > 0;
}

static gboolean
has_two_frames (gpointer session)
{
  return tf_session_get_n_frames (session) == 2;
}

static gboolean
is_on_later (gpointer session)
{
  return tf_session_get_n_frames (session) == 2 && tf_session_get_progress (session, NULL) == NULL
         && g_list_model_get_n_items (tf_session_get_regions (session)) > 0;
}

/* Outlines of six hours before stand where the Sun has turned them: a synodic 3.3 deg west of where
 * they were on the disk, the same Carrington place but for the law's own drift. */
static void
ghosts_are_carried (void)
{
  g_autofree char *path = test_desk_path ("ghosts.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  const char *frames[] = { TF_DEMO_FRAMES "/brindle-20131012-1200.fits", NULL };
  g_autoptr (TfRegionItem) first = g_list_model_get_item (tf_session_get_regions (session), 0);
  g_autoptr (TfOutline) before = tf_outline_ref (tf_region_item_get_row (first)->outline);
  tf_session_add_frames (session, (char *const *)frames);
  test_desk_wait ("two frames", has_two_frames, session);
  tf_session_step_frame (session, 1);
  test_desk_wait ("the later frame", is_on_later, session);
  g_assert_null (tf_session_get_ghosts (session));
  tf_session_set_overlay (session, TF_OVERLAY_GHOSTS, TRUE);
  test_desk_wait ("the ghosts", has_ghosts, session);
  TfTime now = tf_frame_get_info (tf_session_get_frame (session))->time;
  gboolean found = FALSE;
  const GPtrArray *ghosts = tf_session_get_ghosts (session);
  double lon, lat, r, lon1, lat1, r1;
  tf_outline_get_cap (before, &lon, &lat, &r);
  for (guint k = 0; k < ghosts->len; k++)
    {
      const TfGhost *ghost = g_ptr_array_index (ghosts, k);
      tf_check_near ("time", tf_outline_get_time (ghost->outline).s, now.s, 1e-3);
      tf_outline_get_cap (ghost->outline, &lon1, &lat1, &r1);
      found = found || (fabs (lat1 - lat) < 0.05 && fabs (remainder (lon1 - lon, 360)) < 0.5);
    }
  g_assert_true (found);
  tf_session_close (session);
}

/* -- a position and the picture -------------------------------------------------------------- */

/* The middle of the disk is the sub-observer point: B0 and L0. */
static void
position_as_text (void)
{
  g_autoptr (TfSession) session = looking_at (TF_DEMO_FRAMES "/brindle-20131012-0600.fits");
  const TfGeometry *g = tf_frame_get_geometry (tf_session_get_frame (session));
  double cx, cy, x, y;
  g_assert_true (tf_geometry_disk_centre (g, &cx, &cy));
  tf_view_from_pixel (tf_session_get_view (session), g, cx, cy, &x, &y);
  g_autofree char *text = tf_plate_dup_position (session, x, y);
  g_autofree char *head = g_strdup_printf ("2013-10-12T06:00:00Z  N%.2f  CMD ", g->observer.b0_deg);
  g_autofree char *carrington
      = g_strdup_printf ("  Carrington %.2f  mu 1.000  ", g->observer.carrington_lon_deg);
  g_assert_true (g_str_has_prefix (text, head));
  g_assert_nonnull (strstr (text, carrington));
  g_assert_nonnull (strstr (text, " G  pixel "));
  g_assert_true (g_str_has_suffix (text, "  brindle-20131012-0600.fits"));
  g_assert_null (tf_plate_dup_position (session, 1, 1));
  tf_session_close (session);
}

static gboolean
is_saved (gpointer session)
{
  return !tf_save_as_is_busy (session);
}

static void
keep_said (TfSession *session, const char *text, char **said)
{
  g_free (*said);
  *said = g_strdup (text);
}

static void
picture_as_file (void)
{
  static const struct
  {
    const char *ending, *head;
  } forms[] = { { "png", "\211PNG" }, { "svg", "<?xml" }, { "pdf", "%PDF" } };
  g_autofree char *ledger = test_desk_path ("shot.ledger");
  g_autoptr (TfSession) session = test_desk_session (ledger);
  for (guint k = 0; k < G_N_ELEMENTS (forms); k++)
    {
      g_autofree char *name = g_strconcat ("shot.", forms[k].ending, NULL),
                      *path = test_desk_path (name), *bytes = NULL;
      tf_session_set_look (session, (TfLook)k);
      tf_plate_shot_save (session, path);
      test_desk_wait ("the picture", is_saved, session);
      g_assert_true (g_file_get_contents (path, &bytes, NULL, NULL));
      g_assert_true (g_str_has_prefix (bytes, forms[k].head));
    }
  g_autofree char *said = NULL;
  g_signal_connect (session, "message", G_CALLBACK (keep_said), &said);
  tf_plate_shot_save (session, "/no/such/folder/shot.png");
  test_desk_wait ("the refusal", is_saved, session);
  g_assert_nonnull (strstr (said, "/no/such/folder/shot.png"));
  tf_session_close (session);
}

/* -- preferences ----------------------------------------------------------------------------- */

static const TfRow *
find_mark (TfSession *session)
{
  guint n = g_list_model_get_n_items (tf_session_get_regions (session));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (tf_session_get_regions (session), k);
      if (!tf_region_item_get_row (item)->is_hint)
        return tf_region_item_get_row (item); /* the list holds it */
    }
  return NULL;
}

static gboolean
has_mark (gpointer session)
{
  return find_mark (session) != NULL && tf_session_get_pending (session) == 0;
}

/* What was chosen is kept between windows, measures the next draft, and stands with its mark. */
static void
measured_as_preferred (void)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *path = test_desk_path ("preferred.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  g_assert_false (tf_preferences_set_measure (session, "floor-sigma", "900", &error));
  g_assert_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE);
  static const char *const wanted[][2] = { { "floor-sigma", "4.5" },
                                           { "field", "as observed" },
                                           { "tilt-form", "great-circle" } };
  for (guint k = 0; k < G_N_ELEMENTS (wanted); k++)
    g_assert_true (tf_preferences_set_measure (session, wanted[k][0], wanted[k][1], NULL));
  g_autoptr (TfSession) later = tf_session_new ();
  tf_preferences_restore_measure (later);
  tf_check_near ("floor", tf_session_get_params (later)->floor_sigma, 4.5, 0);
  g_autoptr (TfRegionItem) first = g_list_model_get_item (tf_session_get_regions (session), 0);
  tf_session_set_draft (session, tf_region_item_get_row (first)->outline);
  g_assert_true (tf_session_keep (session));
  test_desk_wait ("the mark", has_mark, session);
  const TfRow *mark = find_mark (session);
  TfMeasureParams params;
  TfCorrection correction;
  g_assert_true (tf_measure_read_method (mark->method, &params, &correction));
  tf_check_near ("the mark's floor", params.floor_sigma, 4.5, 0);
  g_assert_cmpint (params.tilt_form, ==, 1);
  g_assert_cmpint (params.field_used, ==, TF_FIELD_USED_OBSERVED);
  g_assert_cmpint ((int)mark->measure.field_used, ==, TF_FIELD_USED_OBSERVED);
  tf_preferences_set ("measure", NULL);
  tf_session_close (session);
}

void
test_desk_add_plate (void)
{
  g_test_add_func ("/desk/preferences/marks-are-measured-as-preferred-and-say-so",
                   measured_as_preferred);
  g_test_add_func ("/desk/plate/a-position-is-a-line-of-text", position_as_text);
  g_test_add_func ("/desk/plate/the-picture-is-saved-in-three-forms", picture_as_file);
  g_test_add_func ("/desk/plate/inversion-lines-and-spots-are-found", lines_are_found);
  g_test_add_func ("/desk/plate/ghosts-are-carried-to-the-frame", ghosts_are_carried);
  g_test_add_data_func ("/desk/plate/a-look-at-a-disk-holds-the-point-under-the-pointer",
                        TF_DEMO_FRAMES "/brindle-20131012-0600.fits", looks_hold_the_point);
  g_test_add_data_func ("/desk/plate/a-look-at-a-map-holds-the-point-under-the-pointer",
                        TF_DEMO_FRAMES "/brindle-map-2142.fits", looks_hold_the_point);
}
