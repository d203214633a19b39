/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The hand on an outline: brush, split, left-out areas, pins; and the way back through all that was
 * done to a draft, kept for each frame. What the hand changes is always a draft: of the chosen hint
 * or mark, whose place it then takes, or of a draft already there. */

#include "tf-session-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

static const double brush_least = 0.2, brush_most = 10, brush_usual = 1.5;
static const double step_share = 0.12;     /* of the brush's radius: shorter moves wait */
static const double thin_share = 0.02;     /* of the radius: how a stroke's corners are thinned */

/* -- the way back ---------------------------------------------------------------------------- */

typedef struct
{
  TfOutline *draft, *other; /* NULL: none */
  TfRegionItem *replaced;
  gboolean replaces;
  GPtrArray *joined;
} State;

typedef struct
{
  GPtrArray *past, *future; /* State, the last is the nearest */
} History;

static void
state_free (gpointer data)
{
  State *state = data;
  g_clear_pointer (&state->draft, tf_outline_unref);
  g_clear_pointer (&state->other, tf_outline_unref);
  g_clear_object (&state->replaced);
  g_ptr_array_unref (state->joined);
  g_free (state);
}

static void
history_free (gpointer data)
{
  History *history = data;
  g_ptr_array_unref (history->past);
  g_ptr_array_unref (history->future);
  g_free (history);
}

static TfOutline *
ref_or_null (TfOutline *outline)
{
  return outline != NULL ? tf_outline_ref (outline) : NULL;
}

static gpointer
ref_item (gconstpointer item, gpointer data)
{
  return g_object_ref ((gpointer)item);
}

static State *
state_now (TfSession *self)
{
  State *state = g_new0 (State, 1);
  state->draft = ref_or_null (self->draft);
  state->other = ref_or_null (self->other);
  g_set_object (&state->replaced, self->replaced);
  state->replaces = self->replaces;
  state->joined = g_ptr_array_copy (self->joined, ref_item, NULL);
  return state;
}

static gint64
frame_key (TfSession *self)
{
  return self->frame_item != NULL ? tf_frame_item_get_row (self->frame_item)->id : 0;
}

static History *
history_here (TfSession *self)
{
  gint64 key = frame_key (self);
  return g_hash_table_lookup (self->histories, &key);
}

void
tf_session_remember (TfSession *self)
{
  History *history = history_here (self);
  if (history == NULL)
    {
      gint64 key = frame_key (self);
      history = g_new0 (History, 1);
      history->past = g_ptr_array_new_with_free_func (state_free);
      history->future = g_ptr_array_new_with_free_func (state_free);
      g_hash_table_insert (self->histories, g_memdup2 (&key, sizeof key), history);
    }
  g_ptr_array_set_size (history->future, 0);
  g_ptr_array_add (history->past, state_now (self));
}

/* A deed was done: from now on the ledger has the way back. */
void
tf_session_forget_history (TfSession *self)
{
  gint64 key = frame_key (self);
  g_hash_table_remove (self->histories, &key);
}

gboolean
tf_session_can_step_back (TfSession *self, gboolean forward)
{
  const History *history = history_here (self);
  return history != NULL && self->frame != NULL && !self->keeping
         && (forward ? history->future : history->past)->len > 0;
}

static void
take_state (TfSession *self, State *state)
{
  tf_session_drop_draft (self);
  self->draft = g_steal_pointer (&state->draft);
  self->other = g_steal_pointer (&state->other);
  g_set_object (&self->replaced, state->replaced);
  self->replaces = state->replaces;
  for (guint k = 0; k < state->joined->len; k++)
    g_ptr_array_add (self->joined, g_object_ref (state->joined->pdata[k]));
  self->draft_looked = TRUE;
  state_free (state);
}

gboolean
tf_session_step_back (TfSession *self, gboolean forward)
{
  if (!tf_session_can_step_back (self, forward))
    return FALSE;
  History *history = history_here (self);
  TfTool tool = self->tool;
  GPtrArray *from = forward ? history->future : history->past;
  g_ptr_array_add (forward ? history->past : history->future, state_now (self));
  take_state (self, g_ptr_array_steal_index (from, from->len - 1));
  self->tool = tool;
  if (self->draft != NULL)
    tf_session_measure_draft (self);
  tf_session_store_draft (self);
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  return TRUE;
}

/* -- the draft that the hand makes ------------------------------------------------------------ */

TfOutline *
tf_session_get_base (TfSession *self)
{
  if (self->draft != NULL)
    return self->draft;
  return self->region != NULL ? tf_region_item_get_row (self->region)->outline : NULL;
}

/* The chosen one becomes the draft that takes its place. */
static void
take_up (TfSession *self)
{
  if (self->draft != NULL)
    return;
  g_set_object (&self->replaced, self->region);
  self->replaces = TRUE;
}

static void
put_draft (TfSession *self, TfOutline *taken)
{
  g_clear_pointer (&self->draft, tf_outline_unref);
  g_clear_pointer (&self->other, tf_outline_unref);
  self->other_measured = FALSE;
  self->draft = taken;
  self->draft_looked = TRUE;
}

void
tf_session_change_draft (TfSession *self, TfOutline *outline, TfOutline *other)
{
  tf_session_remember (self);
  take_up (self);
  put_draft (self, outline);
  self->other = other;
  tf_session_measure_draft (self);
  tf_session_store_draft (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

/* -- the brush ------------------------------------------------------------------------------- */

double
tf_session_get_brush (TfSession *self)
{
  return self->brush_deg;
}

void
tf_session_set_brush (TfSession *self, double radius_deg)
{
  g_return_if_fail (TF_IS_SESSION (self) && isfinite (radius_deg));
  self->brush_deg = CLAMP (radius_deg, brush_least, brush_most);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

static gboolean
stamp (TfSession *self, TfVertex to)
{
  g_autoptr (GError) error = NULL;
  TfOutline *base = tf_session_get_base (self);
  g_autoptr (TfOutline) brushed
      = tf_outline_brush (base, self->stroke_last, to, self->brush_deg,
                          self->tool == TF_TOOL_BRUSH_IN, &error);
  if (brushed == NULL)
    {
      tf_session_say (self, error->message);
      return FALSE;
    }
  take_up (self);
  put_draft (self, tf_outline_simplify_new (brushed, self->stroke_before,
                                            thin_share * self->brush_deg));
  self->stroke_last = to;
  return TRUE;
}

void
tf_session_brush_begin (TfSession *self, double lon_deg, double lat_deg)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfOutline *base = tf_session_get_base (self);
  if (base == NULL || self->frame == NULL)
    {
      tf_session_say (self, _ ("Choose a hint or mark first: the brush works on its outline."));
      return;
    }
  tf_session_remember (self);
  g_clear_pointer (&self->stroke_before, tf_outline_unref);
  self->stroke_before = tf_outline_ref (base);
  self->stroke_last = (TfVertex){ lon_deg, lat_deg };
  self->brushing = TRUE;
  self->slow = FALSE;
  stamp (self, self->stroke_last);
}

void
tf_session_brush_to (TfSession *self, double lon_deg, double lat_deg)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (!self->brushing
      || tf_sphere_distance (self->stroke_last.lon_deg, self->stroke_last.lat_deg, lon_deg, lat_deg)
             < step_share * self->brush_deg)
    return;
  stamp (self, (TfVertex){ lon_deg, lat_deg });
}

void
tf_session_brush_end (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (!self->brushing)
    return;
  self->brushing = FALSE;
  g_clear_pointer (&self->stroke_before, tf_outline_unref);
  if (self->draft != NULL)
    {
      tf_session_measure_draft (self);
      tf_session_store_draft (self);
    }
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

gboolean
tf_session_has_stroke (TfSession *self)
{
  return self->brushing && self->draft != NULL;
}

/* -- split, leave out, pin --------------------------------------------------------------------- */

TfOutline *
tf_session_get_other_half (TfSession *self)
{
  return self->other;
}

const TfMeasure *
tf_session_get_other_measure (TfSession *self)
{
  return self->other_measured ? &self->other_measure : NULL;
}

static double
flux_in (TfSession *self, const TfOutline *outline)
{
  g_auto (TfMeasure) measure = { 0 };
  TfMeasureParams params = self->params;
  params.outline_term = FALSE;
  return tf_measure_region (&measure, self->frame, outline, &params, NULL)
             ? measure.flux_unsigned_mx
             : 0;
}

/* The half with more flux stands first: it keeps the region's number. */
gboolean
tf_session_split (TfSession *self, TfVertex a, TfVertex b)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (GError) error = NULL;
  TfOutline *base = tf_session_get_base (self), *one = NULL, *other = NULL;
  if (base == NULL || self->frame == NULL)
    return FALSE;
  if (!tf_outline_split (base, a, b, &one, &other, &error))
    {
      tf_session_say (self, error->message);
      return FALSE;
    }
  self->tool = TF_TOOL_NONE;
  gboolean first = flux_in (self, one) >= flux_in (self, other);
  tf_session_change_draft (self, first ? one : other, first ? other : one);
  return TRUE;
}

gboolean
tf_session_leave_out (TfSession *self, const TfVertex *ring, guint n)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autoptr (GError) error = NULL;
  TfOutline *base = tf_session_get_base (self);
  TfOutline *without
      = base != NULL ? tf_outline_with_ring (base, ring, n, TRUE, &error) : NULL;
  if (without == NULL)
    {
      tf_session_say (self, error != NULL ? error->message : _ ("Choose a hint or mark first."));
      return FALSE;
    }
  self->tool = TF_TOOL_NONE;
  tf_session_change_draft (self, without, NULL);
  return TRUE;
}

gboolean
tf_session_pin_pole (TfSession *self, int polarity, double lon_deg, double lat_deg,
                     const char *reason)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfOutline *base = tf_session_get_base (self);
  TfPinnedPole pin = { polarity, lon_deg, lat_deg, reason, self->person };
  if (base == NULL || self->frame == NULL || !isfinite (lon_deg) || !(fabs (lat_deg) <= 90))
    return FALSE;
  if (polarity != 0 && (reason == NULL || reason[0] == '\0'))
    return FALSE;
  TfOutline *pinned = tf_outline_with_pin (base, polarity != 0 ? &pin : NULL);
  if (pinned == NULL)
    return FALSE;
  self->tool = TF_TOOL_NONE;
  tf_session_change_draft (self, pinned, NULL);
  return TRUE;
}

/* -- beginning and end ------------------------------------------------------------------------ */

void
tf_session_init_hand (TfSession *self)
{
  self->joined = g_ptr_array_new_with_free_func (g_object_unref);
  self->also = g_ptr_array_new_with_free_func (g_object_unref);
  self->carried = g_ptr_array_new_with_free_func (g_object_unref);
  self->histories = g_hash_table_new_full (g_int64_hash, g_int64_equal, g_free, history_free);
  self->brush_deg = brush_usual;
}

void
tf_session_clear_hand (TfSession *self)
{
  g_clear_pointer (&self->histories, g_hash_table_unref);
  g_clear_pointer (&self->joined, g_ptr_array_unref);
  g_clear_pointer (&self->also, g_ptr_array_unref);
  g_clear_pointer (&self->carried, g_ptr_array_unref);
  g_clear_pointer (&self->other, tf_outline_unref);
  g_clear_pointer (&self->stroke_before, tf_outline_unref);
  tf_measure_clear (&self->other_measure);
}
