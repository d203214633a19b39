/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plate-overlay.h"

#include <math.h>
#include <glib/gi18n-lib.h>

static gboolean
project (double lon_deg, double lat_deg, double *x, double *y, gpointer data)
{
  const TfPlateOverlay *over = data;
  if (!tf_view_from_sun (&over->view, &over->geometry, lon_deg, lat_deg, x, y))
    return FALSE;
  *x += over->shift;
  *y += over->shift;
  return TRUE;
}

/* -- items ----------------------------------------------------------------------------------- */

void
tf_plate_overlay_set_poles (TfOverlayItem *item, const TfMeasure *m)
{
  gboolean two = m != NULL && m->leading_polarity != 0;
  item->positive[0] = two ? m->positive.carrington_lon_deg : NAN;
  item->positive[1] = two ? m->positive.lat_deg : NAN;
  item->negative[0] = two ? m->negative.carrington_lon_deg : NAN;
  item->negative[1] = two ? m->negative.lat_deg : NAN;
}

static void
item_clear (gpointer data)
{
  TfOverlayItem *item = data;
  tf_outline_unref ((TfOutline *)item->outline);
  g_free ((gpointer)item->label);
}

static void
line_clear (gpointer data)
{
  g_free ((gpointer)((TfOverlayLine *)data)->points);
}

static void
add_item (TfPlateOverlay *over, TfOverlayItem item, TfOutline *outline, const char *label,
          const TfMeasure *measure)
{
  item.outline = tf_outline_ref (outline);
  item.label = g_strdup (label);
  tf_plate_overlay_set_poles (&item, measure);
  g_array_append_val (over->items, item);
}

static void
add_regions (TfPlateOverlay *over, TfSession *session)
{
  GListModel *list = tf_session_get_regions (session);
  TfOutline *draft = tf_session_get_draft (session);
  guint n = g_list_model_get_n_items (list);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) region = g_list_model_get_item (list, k);
      const TfRow *row = tf_region_item_get_row (region);
      TfOverlayItem item = { .stroke = tf_region_item_is_carried (region) ? TF_STROKE_GHOST
                                       : row->is_hint                     ? TF_STROKE_HINT
                                                                          : TF_STROKE_MARK,
                             .chosen = tf_session_is_chosen (session, region) && draft == NULL,
                             .verdict = (int)tf_region_item_get_verdict (region).kind };
      add_item (over, item, row->outline, tf_region_item_get_label (region),
                tf_session_is_elsewhere (row) ? NULL : &row->measure);
    }
}

static void
add_drafts (TfPlateOverlay *over, TfSession *session)
{
  TfOutline *draft = tf_session_get_draft (session);
  TfOverlayItem item = { .stroke = TF_STROKE_DRAFT,
                         .chosen = TRUE,
                         .verdict = (int)tf_session_get_verdict (session).kind };
  if (draft != NULL)
    add_item (over, item, draft, _ ("draft"), tf_session_get_measure (session));
  item.verdict = -1;
  if (tf_session_get_other_half (session) != NULL)
    add_item (over, item, tf_session_get_other_half (session), _ ("other half"),
              tf_session_get_other_measure (session));
}

static void
add_ghosts (TfPlateOverlay *over, TfSession *session)
{
  const GPtrArray *ghosts = tf_session_get_ghosts (session);
  for (guint k = 0; ghosts != NULL && k < ghosts->len; k++)
    {
      const TfGhost *ghost = g_ptr_array_index (ghosts, k);
      TfOverlayItem item = { .stroke = TF_STROKE_GHOST, .verdict = -1 };
      add_item (over, item, ghost->outline, ghost->label, NULL);
    }
}

static void
add_lines (TfPlateOverlay *over, TfSession *session)
{
  g_autoptr (GArray) found = tf_session_dup_lines (session);
  for (guint k = 0; k < found->len; k++)
    {
      TfOverlayLine line = g_array_index (found, TfOverlayLine, k);
      line.points = g_memdup2 (line.points, line.n * sizeof *line.points);
      g_array_append_val (over->lines, line);
    }
}

/* -- together -------------------------------------------------------------------------------- */

static void
set_limb (TfPlateOverlay *over)
{
  TfOverlay *overlay = &over->overlay;
  double x, y;
  overlay->limb_rx = NAN;
  if (over->view.look != TF_LOOK_DISK || tf_geometry_is_map (&over->geometry)
      || !tf_geometry_disk_centre (&over->geometry, &x, &y)
      || !tf_view_from_pixel (&over->view, &over->geometry, x, y, &overlay->limb_x,
                              &overlay->limb_y))
    return;
  overlay->limb_x += over->shift;
  overlay->limb_y += over->shift;
  overlay->limb_rx = overlay->limb_ry
      = tf_geometry_disk_radius (&over->geometry) * over->view.zoom;
}

void
tf_plate_overlay_init (TfPlateOverlay *over, const TfView *view, const TfGeometry *geometry,
                       double shift)
{
  g_return_if_fail (over != NULL && view != NULL && geometry != NULL);
  over->view = *view;
  over->geometry = *geometry;
  over->shift = shift;
  over->items = g_array_new (FALSE, TRUE, sizeof (TfOverlayItem));
  over->lines = g_array_new (FALSE, TRUE, sizeof (TfOverlayLine));
  g_array_set_clear_func (over->items, item_clear);
  g_array_set_clear_func (over->lines, line_clear);
  over->overlay = (TfOverlay){ .project = project,
                               .data = over,
                               .central_carrington_deg = NAN,
                               .step_deg = 10,
                               .limb_rx = NAN,
                               .on_dark = TRUE };
}

static void
name_items (TfPlateOverlay *over)
{
  over->overlay.labels = TRUE; /* of the outlines that are drawn */
  over->overlay.items = (const TfOverlayItem *)(gconstpointer)over->items->data;
  over->overlay.n_items = over->items->len;
}

static void
collect (TfPlateOverlay *over, TfSession *session, const TfView *view, double shift, gboolean without_drafts)
{
  TfFrame *frame = tf_session_get_frame (session);
  g_return_if_fail (over != NULL && frame != NULL);
  tf_plate_overlay_init (over, view, tf_frame_get_geometry (frame), shift);
  add_regions (over, session);
  if (!without_drafts)
    add_drafts (over, session);
  add_ghosts (over, session);
  add_lines (over, session);
  set_limb (over);
  TfOverlay *overlay = &over->overlay;
  overlay->central_carrington_deg = tf_geometry_central_carrington (&over->geometry);
  overlay->graticule = tf_session_get_overlay (session, TF_OVERLAY_GRATICULE);
  overlay->outlines = tf_session_get_overlay (session, TF_OVERLAY_OUTLINES);
  overlay->axes = tf_session_get_overlay (session, TF_OVERLAY_AXES);
  name_items (over);
  overlay->lines = (const TfOverlayLine *)(gconstpointer)over->lines->data;
  overlay->n_lines = over->lines->len;
}

void
tf_plate_overlay_collect (TfPlateOverlay *over, TfSession *session, const TfView *view, double shift)
{
  collect (over, session, view, shift, FALSE);
}

void
tf_plate_overlay_collect_still (TfPlateOverlay *over, TfSession *session, const TfView *view, double shift)
{
  collect (over, session, view, shift, tf_session_has_stroke (session));
}

void
tf_plate_overlay_collect_stroke (TfPlateOverlay *over, TfSession *session)
{
  TfFrame *frame = tf_session_get_frame (session);
  g_return_if_fail (over != NULL && frame != NULL);
  tf_plate_overlay_init (over, tf_session_get_view (session), tf_frame_get_geometry (frame), 0);
  add_drafts (over, session);
  over->overlay.outlines = tf_session_get_overlay (session, TF_OVERLAY_OUTLINES);
  over->overlay.axes = tf_session_get_overlay (session, TF_OVERLAY_AXES);
  name_items (over);
}

void
tf_plate_overlay_clear (TfPlateOverlay *over)
{
  g_clear_pointer (&over->items, g_array_unref);
  g_clear_pointer (&over->lines, g_array_unref);
}
