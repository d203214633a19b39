/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* What lies over the picture and can be switched: which of it is on, the lines found in the pixels,
 * and the ghosts, which are the outlines of the frame before carried to the time of this one. */

#include "tf-session-private.h"

#include <math.h>
#include <string.h>

/* Common practice, no source: inversion lines are told apart from limb effects up to here. */
static const double trace_mu = 0.7;
/* In five days most of what stands on the disk has changed its shape or gone over the limb. */
static const double ghost_days = 5;

static const char *const names[TF_N_OVERLAYS]
    = { "graticule", "outlines", "axes", "inversion-lines", "spots", "ghosts" };

const char *
tf_overlay_name (TfOverlayPart part)
{
  g_return_val_if_fail (part < TF_N_OVERLAYS, NULL);
  return names[part];
}

gboolean
tf_session_get_overlay (TfSession *self, TfOverlayPart part)
{
  return (self->overlays & (1u << part)) != 0;
}

void
tf_session_set_overlay (TfSession *self, TfOverlayPart part, gboolean on)
{
  g_return_if_fail (TF_IS_SESSION (self) && part < TF_N_OVERLAYS);
  guint now = on ? self->overlays | 1u << part : self->overlays & ~(1u << part);
  if (now == self->overlays)
    return;
  self->overlays = now;
  tf_session_update_overlays (self);
  tf_session_emit (self, TF_SIGNAL_OVERLAYS);
}

/* -- the companion --------------------------------------------------------------------------- */

static gboolean
is_nearer (const TfFrameRow *row, const TfFrameRow *best, TfTime time)
{
  return best == NULL || fabs (row->info->time.s - time.s) < fabs (best->info->time.s - time.s);
}

const TfFrameRow *
tf_session_find_companion (TfSession *self)
{
  if (self->frame == NULL)
    return NULL;
  const TfFrameInfo *info = tf_frame_get_info (self->frame);
  const TfFrameRow *best = NULL;
  TfCompanionParams params;
  tf_companion_params_init (&params);
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      const TfFrameRow *row = tf_frame_item_get_row (item);
      if (row->info->role == TF_ROLE_INTENSITY && is_nearer (row, best, info->time)
          && tf_companion_matches (info, row->info, NULL, &params, NULL))
        best = row;
    }
  return best;
}

/* -- lines found in the pixels --------------------------------------------------------------- */

static void
ask (TfSession *self, TfOutline *outline, double mu, gboolean chosen)
{
  if (outline == NULL || !(chosen || mu >= trace_mu))
    return;
  if (tf_session_get_overlay (self, TF_OVERLAY_INVERSION))
    tf_tracer_ask (self->tracer, TF_TRACE_INVERSION, outline, &self->params, chosen);
  if (chosen || tf_session_get_overlay (self, TF_OVERLAY_SPOTS)) /* the slip tells the chosen one's */
    tf_tracer_ask (self->tracer, TF_TRACE_SPOTS, outline, &self->params, chosen);
}

static void
ask_all (TfSession *self)
{
  GListModel *list = G_LIST_MODEL (self->regions);
  guint n = g_list_model_get_n_items (list);
  if (self->region != NULL) /* first */
    ask (self, tf_region_item_get_row (self->region)->outline, NAN, TRUE);
  if (self->draft != NULL && self->at_rest)
    ask (self, self->draft, NAN, TRUE);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      const TfRow *row = tf_region_item_get_row (item);
      ask (self, row->outline, row->measure.mu, FALSE);
    }
}

static void
collect (TfSession *self, GArray *lines, TfOutline *outline)
{
  static const TfOverlayPart parts[] = { TF_OVERLAY_INVERSION, TF_OVERLAY_SPOTS };
  for (guint what = 0; what < TF_N_TRACES && outline != NULL; what++)
    {
      guint n = 0;
      const TfOverlayLine *some
          = tf_session_get_overlay (self, parts[what])
                ? tf_tracer_get (self->tracer, (TfTrace)what, outline, &n, NULL)
                : NULL;
      g_array_append_vals (lines, some, n);
    }
}

GArray *
tf_session_dup_lines (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  GArray *lines = g_array_new (FALSE, FALSE, sizeof (TfOverlayLine));
  GListModel *list = G_LIST_MODEL (self->regions);
  guint n = g_list_model_get_n_items (list);
  collect (self, lines, self->draft);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, k);
      collect (self, lines, tf_region_item_get_row (item)->outline);
    }
  return lines;
}

const TfSpots *
tf_session_get_spots (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  TfOutline *outline = self->draft != NULL    ? self->draft
                       : self->region != NULL ? tf_region_item_get_row (self->region)->outline
                                              : NULL;
  return outline != NULL ? tf_tracer_get_spots (self->tracer, outline) : NULL;
}

gboolean
tf_session_is_tracing (TfSession *self)
{
  return tf_tracer_is_busy (self->tracer);
}

static void
traced (gpointer data)
{
  tf_session_emit (data, TF_SIGNAL_OVERLAYS);
}

/* -- ghosts ---------------------------------------------------------------------------------- */

typedef struct
{
  gint64 frame; /* whose outlines they are */
  TfTime time;  /* to which they are carried */
  guint law;
} GhostQuestion;

static void
ghost_free (gpointer data)
{
  TfGhost *ghost = data;
  tf_outline_unref (ghost->outline);
  g_free (ghost->label);
  g_free (ghost);
}

/* Marks speak before hints: where a person has marked, the hints of that frame are left out. */
static gpointer
read_ghosts (TfLedger *ledger, gpointer data, GError **error)
{
  const GhostQuestion *asked = data;
  GPtrArray *ghosts = g_ptr_array_new_with_free_func (ghost_free);
  g_autoptr (GPtrArray) rows = tf_ledger_rows (
      ledger, &(TfRowQuery){ .marks = TRUE, .hints = TRUE, .frame = asked->frame }, error);
  if (rows == NULL)
    {
      g_ptr_array_unref (ghosts);
      return NULL;
    }
  for (guint k = 0; k < rows->len; k++)
    {
      const TfRow *row = g_ptr_array_index (rows, k);
      TfOutline *carried = tf_outline_carry (row->outline, asked->time, asked->law);
      if (carried == NULL)
        continue;
      TfGhost *ghost = g_new0 (TfGhost, 1);
      ghost->outline = carried;
      ghost->label = g_strdup (row->is_hint ? "" : row->region);
      g_ptr_array_add (ghosts, ghost);
    }
  return ghosts;
}

static void
ghosts_read (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  GPtrArray *ghosts = tf_lane_finish (result, NULL); /* none is shown when they cannot be read */
  if (GPOINTER_TO_UINT (data) != self->ghost_serial || ghosts == NULL)
    {
      g_clear_pointer (&ghosts, g_ptr_array_unref);
      return;
    }
  g_clear_pointer (&self->ghosts, g_ptr_array_unref);
  self->ghosts = ghosts;
  tf_session_emit (self, TF_SIGNAL_OVERLAYS);
}

static gboolean
same_vantage (const TfFrameInfo *a, const TfFrameInfo *b)
{
  g_autofree char *one = tf_observer_dup_vantage (&a->geometry.observer),
                  *other = tf_observer_dup_vantage (&b->geometry.observer);
  return g_strcmp0 (one, other) == 0;
}

/* The frame before: the latest earlier one from the same place. */
static gint64
frame_before (TfSession *self, const TfFrameInfo *info)
{
  gint64 best = 0;
  guint n = tf_session_get_n_frames (self);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfFrameItem) item = g_list_model_get_item (G_LIST_MODEL (self->frames), k);
      const TfFrameRow *row = tf_frame_item_get_row (item);
      double apart = info->time.s - row->info->time.s;
      if (row->refusal == NULL && row->id > 0 && apart > 0 && apart <= ghost_days * 86400
          && !tf_geometry_is_map (&row->info->geometry) && same_vantage (info, row->info))
        best = row->id; /* they stand in time order */
    }
  return best;
}

static void
ask_ghosts (TfSession *self)
{
  const TfFrameInfo *info = self->frame != NULL ? tf_frame_get_info (self->frame) : NULL;
  gboolean wanted = tf_session_get_overlay (self, TF_OVERLAY_GHOSTS) && self->reader != NULL
                    && info != NULL && tf_time_is_known (info->time)
                    && !tf_geometry_is_map (&info->geometry);
  gint64 before = wanted ? frame_before (self, info) : 0;
  self->ghost_serial++;
  if (before == 0)
    {
      g_clear_pointer (&self->ghosts, g_ptr_array_unref);
      return;
    }
  GhostQuestion *asked = g_new (GhostQuestion, 1);
  *asked = (GhostQuestion){ before, info->time, (guint)self->params.law };
  tf_lane_push (self->reader, self, self->reading, read_ghosts, asked, g_free,
                (GDestroyNotify)g_ptr_array_unref, ghosts_read,
                GUINT_TO_POINTER (self->ghost_serial));
}

const GPtrArray *
tf_session_get_ghosts (TfSession *self)
{
  return tf_session_get_overlay (self, TF_OVERLAY_GHOSTS) ? self->ghosts : NULL;
}

/* -- following ------------------------------------------------------------------------------- */

void
tf_session_update_overlays (TfSession *self)
{
  const TfFrameRow *companion = tf_session_find_companion (self);
  TfFrameSpec spec = companion != NULL ? (TfFrameSpec){ companion->hdu, companion->plane }
                                       : (TfFrameSpec){ 0 };
  tf_tracer_set_frame (self->tracer, self->frame, companion != NULL ? companion->path : NULL,
                       &spec);
  ask_all (self);
  ask_ghosts (self);
}

void
tf_session_init_overlays (TfSession *self)
{
  self->overlays = 1u << TF_OVERLAY_GRATICULE | 1u << TF_OVERLAY_OUTLINES | 1u << TF_OVERLAY_AXES;
  self->tracer = tf_tracer_new (self->workers, self->pool, traced, self);
  g_signal_connect (self, "frame-changed", G_CALLBACK (tf_session_update_overlays), NULL);
  g_signal_connect (self, "regions-changed", G_CALLBACK (tf_session_update_overlays), NULL);
  g_signal_connect (self, "frames-changed", G_CALLBACK (tf_session_update_overlays), NULL); /* a companion came */
  g_signal_connect (self, "choice-changed", G_CALLBACK (ask_all), NULL);
}

void
tf_session_clear_overlays (TfSession *self)
{
  g_clear_pointer (&self->tracer, tf_tracer_free);
  g_clear_pointer (&self->ghosts, g_ptr_array_unref);
}
