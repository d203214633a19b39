/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-session.h"

#include <math.h>

#include "tf-save-as.h"
#include "tf-session-laws-private.h"

G_DEFINE_FINAL_TYPE (TfSession, tf_session, G_TYPE_OBJECT)

static const char *const signal_names[] = {
  [TF_SIGNAL_LEDGER] = "ledger-changed",       [TF_SIGNAL_FRAMES] = "frames-changed",
  [TF_SIGNAL_FRAME] = "frame-changed",         [TF_SIGNAL_VIEW] = "view-changed",
  [TF_SIGNAL_OVERLAYS] = "overlays-changed",
  [TF_SIGNAL_REGIONS] = "regions-changed",     [TF_SIGNAL_CHOICE] = "choice-changed",
  [TF_SIGNAL_SHIFT] = "shift-changed",
  [TF_SIGNAL_POINTS] = "points-changed",       [TF_SIGNAL_STATUS] = "status-changed",
  [TF_SIGNAL_PERSON_NEEDED] = "person-needed", [TF_SIGNAL_LAWS] = "laws-changed",
};

enum
{
  DEFAULT_RANGE_GAUSS = 200
};

void
tf_session_emit (TfSession *self, TfSessionSignal signal)
{
  g_signal_emit_by_name (self, signal_names[signal]);
}

void
tf_session_say (TfSession *self, const char *text)
{
  g_signal_emit_by_name (self, "message", text);
}

static void
dispose (GObject *object)
{
  TfSession *self = TF_SESSION (object);
  tf_save_as_close (self);
  tf_session_close (self);
  tf_session_clear_witness (self);
  tf_session_clear_roll (self);
  tf_session_clear_overlays (self);
  tf_session_clear_proposal (self);
  g_clear_pointer (&self->loader, tf_loader_free);
  g_clear_pointer (&self->frame, tf_frame_unref);
  g_clear_object (&self->frame_item);
  g_clear_object (&self->region);
  g_clear_object (&self->replaced);
  g_clear_object (&self->shown);
  g_clear_object (&self->frames);
  g_clear_object (&self->regions);
  g_clear_object (&self->filter);
  G_OBJECT_CLASS (tf_session_parent_class)->dispose (object);
}

static void
finalize (GObject *object)
{
  TfSession *self = TF_SESSION (object);
  tf_session_laws_finalize (self);
  g_clear_pointer (&self->pick_frames, g_hash_table_unref);
  g_clear_pointer (&self->draft, tf_outline_unref);
  tf_session_clear_hand (self);
  tf_measure_clear (&self->measure);
  g_array_unref (self->line);
  g_array_unref (self->points);
  g_array_unref (self->all_dots);
  g_array_unref (self->mark_dots);
  g_free (self->measure_problem);
  g_free (self->frame_problem);
  g_free (self->saved);
  g_free (self->class_hoped);
  g_free (self->want_region);
  g_free (self->person);
  g_free (self->method);
  g_free (self->progress);
  g_free (self->feed_trouble);
  g_free (self->draft_text);
  g_clear_pointer (&self->seen, g_ptr_array_unref);
  g_clear_pointer (&self->shift, tf_shift_free);
  tf_judge_unref (self->judge);
  tf_workers_unref (self->workers);
  tf_pool_unref (self->pool);
  G_OBJECT_CLASS (tf_session_parent_class)->finalize (object);
}

static void
tf_session_class_init (TfSessionClass *klass)
{
  GObjectClass *object = G_OBJECT_CLASS (klass);
  object->dispose = dispose;
  object->finalize = finalize;
  for (guint k = 0; k < G_N_ELEMENTS (signal_names); k++)
    g_signal_new (signal_names[k], TF_TYPE_SESSION, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL,
                  G_TYPE_NONE, 0);
  g_signal_new ("message", TF_TYPE_SESSION, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 1,
                G_TYPE_STRING);
}

static void
init_lists (TfSession *self)
{
  self->frames = g_list_store_new (TF_TYPE_FRAME_ITEM);
  self->regions = g_list_store_new (TF_TYPE_REGION_ITEM);
  self->line = g_array_new (FALSE, FALSE, sizeof (TfVertex));
}

static void
tf_session_init (TfSession *self)
{
  self->judge = tf_judge_new ();
  self->pool = tf_pool_new ();
  self->workers = tf_workers_new (0);
  tf_measure_params_init (&self->params);
  self->correction = self->preview = tf_correction_none ();
  tf_session_update_method (self);
  init_lists (self);
  tf_session_laws_init (self);
  tf_session_replace_points (self, NULL, NULL, NULL);
  self->loader = tf_loader_new (self->pool);
  self->north_up = TRUE;
  self->range = DEFAULT_RANGE_GAUSS;
  self->pick_from = self->pick_to = self->pick_low = self->pick_high = NAN;
  self->view.width = self->view.height = 1;
  self->view.zoom = 1;
  tf_session_update_pick (self);
  tf_session_init_hand (self);
  tf_session_init_overlays (self);
  tf_session_init_witness (self);
  tf_session_init_proposal (self);
}

TfSession *
tf_session_new (void)
{
  return g_object_new (TF_TYPE_SESSION, NULL);
}

TfPool *
tf_session_get_pool (TfSession *self)
{
  return self->pool;
}

TfWorkers *
tf_session_get_workers (TfSession *self)
{
  return self->workers;
}

const char *
tf_session_get_method (TfSession *self)
{
  return self->method;
}

const TfMeasureParams *
tf_session_get_params (TfSession *self)
{
  return &self->params;
}

void
tf_session_set_params (TfSession *self, const TfMeasureParams *params)
{
  g_return_if_fail (TF_IS_SESSION (self) && params != NULL);
  self->params = *params;
  tf_session_update_method (self);
  if (self->draft != NULL && self->frame != NULL)
    tf_session_measure_draft (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

TfUnits
tf_session_get_units (TfSession *self)
{
  return self->units;
}

void
tf_session_set_unit (TfSession *self, TfUnitKind kind, guint choice)
{
  static const TfSessionSignal shown_by[]
      = { TF_SIGNAL_FRAME, TF_SIGNAL_VIEW, TF_SIGNAL_CHOICE, TF_SIGNAL_SHIFT };
  g_return_if_fail (TF_IS_SESSION (self) && kind < TF_N_UNITS && choice < 2);
  if (self->units.choice[kind] == choice)
    return;
  self->units.choice[kind] = choice;
  for (guint k = 0; k < G_N_ELEMENTS (shown_by); k++)
    tf_session_emit (self, shown_by[k]);
}

TfJudge *
tf_session_get_judge (TfSession *self)
{
  return self->judge;
}

const TfDivides *
tf_session_get_divides (TfSession *self)
{
  return self->laws->moved != NULL ? self->laws->moved : tf_judge_get_divides (self->judge);
}

/* -- regions and the choice ------------------------------------------------------------------ */

GListModel *
tf_session_get_regions (TfSession *self)
{
  return G_LIST_MODEL (self->regions);
}

TfRegionItem *
tf_session_get_region (TfSession *self)
{
  return self->region;
}

void
tf_session_choose_region (TfSession *self, TfRegionItem *item)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->want_mark = 0;
  g_clear_pointer (&self->want_region, g_free);
  if (self->tool == TF_TOOL_JOIN && item != NULL && item != self->region)
    {
      tf_session_toggle_region (self, item);
      tf_session_join (self);
      return;
    }
  gboolean several = self->also->len > 0;
  g_ptr_array_set_size (self->also, 0);
  if (!g_set_object (&self->region, item) && !several)
    return;
  if (several)
    tf_session_emit (self, TF_SIGNAL_REGIONS); /* drawn thick no more */
  g_clear_pointer (&self->saved, g_free);
  tf_session_judge_choice (self);
  if (item != NULL && self->view.look == TF_LOOK_CLOSE && self->draft == NULL)
    tf_session_fit (self); /* the close look goes with the choice */
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

static int
by_flux (gconstpointer a, gconstpointer b)
{
  const TfRow *ra = *(TfRow *const *)a, *rb = *(TfRow *const *)b;
  double difference = rb->measure.flux_unsigned_mx - ra->measure.flux_unsigned_mx;
  return (difference > 0) - (difference < 0);
}

/* Which item is chosen when the list came new: the one wanted, else the one chosen before. */
static TfRegionItem *
find_choice (TfSession *self, gint64 mark, gboolean is_hint)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      if (tf_region_item_is (item, mark, is_hint))
        return item; /* the list holds it */
    }
  return NULL;
}

void
tf_session_note_seen (TfSession *self)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  g_clear_pointer (&self->seen, g_ptr_array_unref);
  self->seen = g_ptr_array_new_with_free_func (g_object_unref);
  for (guint k = 0; k < n; k++)
    g_ptr_array_add (self->seen, g_list_model_get_item (G_LIST_MODEL (self->regions), k));
}

static gboolean
was_seen (TfSession *self, const TfRow *row)
{
  for (guint k = 0; self->seen != NULL && k < self->seen->len; k++)
    if (tf_region_item_is (self->seen->pdata[k], row->mark, row->is_hint))
      return TRUE;
  return FALSE;
}

/* The first of @items that was not there before undoing: the list itself may have been read anew
 * meanwhile. */
static TfRegionItem *
find_new (TfSession *self, const GPtrArray *items)
{
  for (guint k = 0; k < items->len; k++)
    if (!was_seen (self, tf_region_item_get_row (items->pdata[k])))
      return items->pdata[k];
  return NULL;
}

static TfRegionItem *
find_mark_of (TfSession *self, const char *region)
{
  guint n = region != NULL && *region != '\0' ? g_list_model_get_n_items (G_LIST_MODEL (self->regions)) : 0;
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (G_LIST_MODEL (self->regions), k);
      const TfRow *row = tf_region_item_get_row (item);
      if (!row->is_hint && g_strcmp0 (row->region, region) == 0)
        return item; /* the list holds it */
    }
  return NULL;
}

static void
choose_again (TfSession *self, TfRegionItem *came_back)
{
  TfRegionItem *next = came_back != NULL ? came_back : find_mark_of (self, self->want_region);
  if (next != NULL)
    g_clear_pointer (&self->want_region, g_free);
  if (next == NULL && self->want_mark != 0)
    next = find_choice (self, self->want_mark, self->want_hint);
  if (next != NULL)
    self->want_mark = 0;
  else if (self->region != NULL)
    {
      const TfRow *row = tf_region_item_get_row (self->region);
      next = find_choice (self, row->mark, row->is_hint);
    }
  g_set_object (&self->region, next);
}

void
tf_session_replace_regions (TfSession *self, GPtrArray *rows)
{
  guint n = rows != NULL ? rows->len : 0;
  g_autoptr (GPtrArray) items = g_ptr_array_new_with_free_func (g_object_unref);
  if (rows != NULL)
    {
      g_ptr_array_sort (rows, by_flux);
      g_ptr_array_set_free_func (rows, NULL);
    }
  for (guint k = 0; k < n; k++)
    {
      TfRow *row = g_ptr_array_index (rows, k);
      if (!tf_session_in_band (self, row->measure.lat_deg) && row->mark != self->want_mark)
        {
          tf_row_free (row);
          continue;
        }
      tf_session_move_row (self, row);
      TfVerdict verdict = tf_judge_measure (self->judge, &row->measure, NULL);
      g_ptr_array_add (items, tf_region_item_new (row, verdict));
    }
  guint old = g_list_model_get_n_items (G_LIST_MODEL (self->regions));
  TfRegionItem *came_back = self->want_new ? find_new (self, items) : NULL;
  self->want_new = self->want_new && self->refresh_again;
  tf_session_add_carried (self, items);
  g_list_store_splice (self->regions, 0, old, items->pdata, items->len);
  choose_again (self, came_back);
  tf_session_choose_also_again (self);
  self->judging = 0;
  tf_session_judge_choice (self);
  tf_session_emit (self, TF_SIGNAL_REGIONS);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  if (self->want_next_hint)
    {
      self->want_next_hint = FALSE;
      tf_session_step_hint (self, 1);
    }
}

gboolean
tf_session_step_hint (TfSession *self, int step)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  GListModel *list = G_LIST_MODEL (self->regions);
  int n = (int)g_list_model_get_n_items (list);
  int at = step > 0 ? -1 : n;
  for (int k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, (guint)k);
      if (item == self->region)
        at = k;
    }
  for (int tried = 0; tried < n; tried++)
    {
      at = (at + step + n) % n;
      g_autoptr (TfRegionItem) item = g_list_model_get_item (list, (guint)at);
      if (tf_region_item_get_row (item)->is_hint)
        {
          tf_session_choose_region (self, item);
          return TRUE;
        }
    }
  return FALSE;
}

/* -- the measure shown ----------------------------------------------------------------------- */

static gboolean
shows_drawing (TfSession *self)
{
  return self->draft != NULL || self->line->len > 0;
}

void
tf_session_judge_choice (TfSession *self)
{
  const TfMeasure *measure = tf_session_get_measure (self);
  if (measure != NULL)
    self->verdict = tf_judge_measure (self->judge, measure, &self->sample);
  else
    {
      self->verdict = (TfVerdict){ 0 };
      tf_sample_row_init (&self->sample);
    }
}

const TfMeasure *
tf_session_get_measure (TfSession *self)
{
  if (shows_drawing (self))
    return self->measured ? &self->measure : NULL;
  return self->region != NULL ? &tf_region_item_get_row (self->region)->measure : NULL;
}

const TfSampleRow *
tf_session_get_sample (TfSession *self)
{
  return &self->sample;
}

TfVerdict
tf_session_get_verdict (TfSession *self)
{
  return self->verdict;
}

const char *
tf_session_get_measure_problem (TfSession *self)
{
  return shows_drawing (self) ? self->measure_problem : NULL;
}

gboolean
tf_session_is_at_rest (TfSession *self)
{
  return shows_drawing (self) ? self->at_rest : TRUE;
}
