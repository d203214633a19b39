/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-distinct.h"
#include "tf-ledger-brief.h"
#include "tf-ledger-outside.h"
#include "tf-many.h"
#include "tf-sort.h"
#include "tf-study-private.h"

/* What a study takes of a ledger. As a rule that is the briefs of marks and hints (tf-ledger-brief.h)
 * and the rows of outside tables; where conditions ask for any column, or an older ledger has no
 * briefs, whole rows. Both give the same sample. */

/* -- what is known of a row beside its sample row ------------------------------------------------ */

TfStudyFact
tf_study_fact_of_row (const TfRow *row)
{
  return (TfStudyFact){ .mark = row->outside != NULL ? 0 : row->is_hint ? -row->mark : row->mark,
                        .instrument = row->instrument,
                        .source = row->outside != NULL ? row->outside->source : NULL,
                        .licence = row->outside != NULL ? row->outside->licence : NULL,
                        .floor_gauss = row->measure.floor_gauss,
                        .even = row->measure.floor_kind == TF_FLOOR_EVEN,
                        .is_hint = row->is_hint != FALSE,
                        .unipolar = row->unipolar != FALSE,
                        .model_map = g_strcmp0 (row->kind, "model map") == 0,
                        .simulated = row->simulated != FALSE,
                        .outside = row->outside != NULL,
                        .outside_hint = row->outside != NULL && row->outside->hinted };
}

TfStudyFact
tf_study_fact (const TfStudyRows *rows, guint number)
{
  if (rows->facts != NULL)
    return g_array_index (rows->facts, TfStudyFact, number);
  if (rows->rows != NULL)
    return tf_study_fact_of_row (g_ptr_array_index (rows->rows, number));
  return (TfStudyFact){ .outside = TRUE };
}

gboolean
tf_study_fact_has_floor (const TfStudyFact *fact, double gauss)
{
  if (fact->outside)
    return TRUE; /* its floor is the source's affair */
  return fact->even && fabs (fact->floor_gauss - gauss) <= 0.005 * gauss;
}

/* -- their order ------------------------------------------------------------------------------- */

/* Those of one moment by their latitude, so that no sum hangs on the order of the rows in a ledger or a
 * file. */
static void
order_ties (guint *order, const double *times, const double *lats, guint n)
{
  g_autofree double *keys = tf_new_many (double, n + 1);
  for (guint from = 0, to; from < n; from = to)
    {
      for (to = from; to < n && times[order[to]] == times[order[from]]; to++)
        keys[to - from] = lats[order[to]];
      if (to - from < 2)
        {
          to = MAX (to, from + 1); /* NaN equals nothing */
          continue;
        }
      g_autofree guint *places = tf_sort_order (keys, to - from);
      g_autofree guint *before = g_memdup2 (order + from, (to - from) * sizeof *order);
      for (guint k = from; k < to; k++)
        order[k] = before[places[k - from]];
    }
}

/* By time, then latitude. */
static guint *
order_places (const double *times, const double *lats, guint n)
{
  guint *order = tf_sort_order (times, n);
  order_ties (order, times, lats, n);
  return order;
}

static guint *
order_rows (const GPtrArray *rows)
{
  g_autofree double *times = tf_new_many (double, rows->len + 1);
  g_autofree double *lats = tf_new_many (double, rows->len + 1);
  for (guint k = 0; k < rows->len; k++)
    {
      const TfMeasure *m = &((const TfRow *)g_ptr_array_index (rows, k))->measure;
      times[k] = m->time.s;
      lats[k] = m->lat_deg;
    }
  return order_places (times, lats, rows->len);
}

static void
put_in_order (GPtrArray *rows, const guint *order)
{
  g_autofree gpointer *before = g_memdup2 (rows->pdata, rows->len * sizeof *before);
  for (guint k = 0; k < rows->len; k++)
    rows->pdata[k] = before[order[k]];
}

/* -- briefs ---------------------------------------------------------------------------------- */

/* All that is read: marks, outside rows, hints. */
typedef struct
{
  const TfBrief *briefs;
  const GPtrArray *outside; /* TfRow */
  const GArray *frames;     /* TfBriefFrame */
  guint n_marks, n_briefs;
} Sources;

static const TfBriefFrame *
find_frame (const GArray *frames, gint64 key)
{
  const TfBriefFrame *list = (const TfBriefFrame *)(gconstpointer)frames->data;
  guint low = 0, high = frames->len;
  if (key >= 1 && key <= (gint64)high && list[key - 1].frame == key)
    return &list[key - 1];
  while (low < high)
    {
      guint middle = low + (high - low) / 2;
      if (list[middle].frame < key)
        low = middle + 1;
      else
        high = middle;
    }
  return low < frames->len && list[low].frame == key ? &list[low] : NULL;
}

static void
take_brief (const Sources *sources, const TfBrief *b, TfMeasure *m, TfSampleRow *row, TfStudyFact *fact)
{
  const TfBriefFrame *frame = find_frame (sources->frames, b->frame);
  m->time.s = b->time_s;
  m->lat_deg = b->lat_deg;
  m->positive.lat_deg = b->positive_lat_deg;
  m->negative.lat_deg = b->negative_lat_deg;
  m->cmd_deg = b->cmd_deg;
  m->mu = b->mu;
  m->axis_tilt_deg = b->axis_tilt_deg;
  m->axis_bearing_deg = b->axis_bearing_deg;
  m->tilt_terms.total = b->tilt_sigma_deg;
  m->separation_deg = b->separation_deg;
  m->separation_sigma_deg = b->separation_sigma_deg;
  m->flux_unsigned_mx = b->flux_unsigned_mx;
  m->imbalance = b->imbalance;
  m->compactness = b->compactness;
  m->axial_dipole_gauss = b->axial_dipole_gauss;
  m->axial_dipole_sigma_gauss = b->axial_dipole_sigma_gauss;
  m->leading_polarity = b->leading;
  m->leading_sure = b->leading_sure;
  m->ephemeral = b->ephemeral;
  for (int k = 0; k < 3; k++)
    m->witnesses[k] = b->witnesses[k] == G_MININT8 ? TF_WITNESS_ABSENT : b->witnesses[k];
  tf_study_measure_row (m, row);
  static const TfOrigin origins[] = { TF_ORIGIN_KEPT, TF_ORIGIN_CHANGED, TF_ORIGIN_DRAWN };
  row->origin = b->origin >= 0 && b->origin < 3 ? origins[b->origin] : TF_ORIGIN_HINT;
  tf_study_place_row (row, &(TfStudyPlace){ b->hint, b->mark, b->region, b->passage, b->same, b->born });
  *fact = (TfStudyFact){ .mark = b->hint ? -b->mark : b->mark,
                         .instrument = frame != NULL ? frame->instrument : NULL,
                         .floor_gauss = b->floor_gauss,
                         .even = b->even,
                         .is_hint = b->hint,
                         .unipolar = b->unipolar,
                         .model_map = frame != NULL && frame->model_map,
                         .simulated = frame != NULL && frame->simulated };
}

static guint *
order_sources (const Sources *s, guint n)
{
  g_autofree double *times = tf_new_many (double, n + 1);
  g_autofree double *lats = tf_new_many (double, n + 1);
  guint at = 0;
  for (guint k = 0; k < s->n_briefs; k++)
    {
      if (k == s->n_marks)
        at += s->outside->len;
      times[at] = s->briefs[k].time_s;
      lats[at++] = s->briefs[k].lat_deg;
    }
  for (guint k = 0; k < s->outside->len; k++)
    {
      const TfMeasure *m = &((const TfRow *)g_ptr_array_index (s->outside, k))->measure;
      times[s->n_marks + k] = m->time.s;
      lats[s->n_marks + k] = m->lat_deg;
    }
  return order_places (times, lats, n);
}

static void
take_sources (TfStudyTaken *taken, const Sources *s)
{
  guint n = s->n_briefs + s->outside->len;
  g_autofree guint *order = order_sources (s, n);
  g_autoptr (TfDistinct) regions = tf_distinct_new (n);
  g_autoptr (TfDistinct) passages = tf_distinct_new (n);
  TfMeasure measure = { 0 };
  taken->all = tf_sample_new_sized (n);
  taken->facts = tf_array_of_many (sizeof (TfStudyFact), n);
  for (guint k = 0; k < n; k++)
    {
      TfSampleRow row;
      TfStudyFact fact;
      guint at = order[k];
      if (at >= s->n_marks && at < s->n_marks + s->outside->len)
        {
          const TfRow *outside = g_ptr_array_index (s->outside, at - s->n_marks);
          tf_study_row (outside, &row);
          fact = tf_study_fact_of_row (outside);
          fact.instrument = g_intern_string (fact.instrument); /* the row goes */
          fact.source = g_intern_string (fact.source);
          fact.licence = g_intern_string (fact.licence);
        }
      else
        take_brief (s, &s->briefs[at < s->n_marks ? at : at - s->outside->len], &measure, &row, &fact);
      row.row = k;
      row.region = tf_distinct_add (regions, row.region) + 1;
      row.passage = tf_distinct_add (passages, row.passage) + 1;
      tf_sample_add (taken->all, &row);
      g_array_append_val (taken->facts, fact);
    }
}

static gboolean
take_briefs (TfStudyTaken *taken, TfLedger *ledger, GError **error)
{
  const TfBriefQuery query
      = { .hints = taken->with_hints,
          .floor_gauss = taken->floor > 0 ? taken->floor : 0.0,
          .asked_gauss = { TF_WHAT_IF_LOWER * taken->floor, TF_WHAT_IF_HIGHER * taken->floor } };
  const TfRowQuery tables = { .outside = TRUE, .no_outlines = TRUE };
  g_autoptr (TfBriefs) briefs = tf_ledger_briefs (ledger, &query, error);
  g_autoptr (GPtrArray) outside = briefs != NULL ? tf_ledger_rows (ledger, &tables, error) : NULL;
  g_autoptr (GArray) frames = outside != NULL ? tf_ledger_brief_frames (ledger, error) : NULL;
  if (frames == NULL)
    return FALSE;
  Sources sources = { (const TfBrief *)(gconstpointer)briefs->rows->data, outside, frames, 0,
                      briefs->rows->len };
  while (sources.n_marks < sources.n_briefs && !sources.briefs[sources.n_marks].hint)
    sources.n_marks++;
  take_sources (taken, &sources);
  taken->n_even = briefs->n_even;
  taken->n_hints = briefs->n_hints;
  taken->n_lacking[0] = briefs->n_lacking[0];
  taken->n_lacking[1] = briefs->n_lacking[1];
  return TRUE;
}

/* -- taking ---------------------------------------------------------------------------------- */

gboolean
tf_study_needs_whole_rows (const TfStudy *study)
{
  return study->mark_conditions->len > 0 || study->region_conditions->len > 0;
}

static gboolean
take_whole_rows (TfStudyTaken *taken, TfLedger *ledger, GError **error)
{
  const TfRowQuery query = { .marks = TRUE,
                             .hints = taken->with_hints,
                             .outside = TRUE,
                             .no_outlines = TRUE };
  taken->rows = tf_study_rows (ledger, &query, taken->floor, error);
  if (taken->rows == NULL)
    return FALSE;
  g_autofree guint *order = order_rows (taken->rows);
  put_in_order (taken->rows, order);
  taken->all = tf_study_sample_rows (taken->rows);
  return TRUE;
}

/* With what the scales of instruments say, or without. */
static TfStudyTaken *
take (const TfStudy *study, TfLedger *ledger, double floor, gboolean whole, GError **error)
{
  g_autoptr (TfStudyTaken) taken = g_atomic_rc_box_new0 (TfStudyTaken);
  taken->floor = floor;
  taken->own_floor = study->even_floor_gauss > 0;
  taken->with_hints = study->sieve.with_hints;
  taken->scales = tf_ledger_scales (ledger, error);
  whole = whole || tf_study_needs_whole_rows (study) || !tf_ledger_has_briefs (ledger);
  if (taken->scales == NULL
      || !(whole ? take_whole_rows (taken, ledger, error) : take_briefs (taken, ledger, error)))
    return NULL;
  return g_steal_pointer (&taken);
}

static void
scale (TfStudyTaken *taken, gboolean on)
{
  const TfStudyRows rows = tf_study_taken_rows (taken);
  if (!on == !taken->with_scales)
    return;
  tf_study_scale (taken->all, &rows, on);
  taken->with_scales = on;
}

TfStudyTaken *
tf_study_take_with (const TfStudy *study, TfLedger *ledger, double floor, GError **error)
{
  TfStudyTaken *taken = take (study, ledger, floor, FALSE, error);
  if (taken != NULL)
    scale (taken, study->sieve.with_scales);
  return taken;
}

TfStudyTaken *
tf_study_take (const TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, NULL);
  g_autoptr (TfStudyTaken) taken
      = tf_study_take_with (study, ledger, tf_study_floor (study, ledger), error);
  if (taken == NULL || tf_study_complain_empty (study, tf_sample_get_n (taken->all), ledger, error))
    return NULL;
  return g_steal_pointer (&taken);
}

TfStudyTaken *
tf_study_take_whole (const TfStudy *study, TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (study != NULL && ledger != NULL, NULL);
  g_autoptr (TfStudyTaken) taken
      = take (study, ledger, tf_study_floor (study, ledger), TRUE, error);
  if (taken == NULL || tf_study_complain_empty (study, tf_sample_get_n (taken->all), ledger, error))
    return NULL;
  return g_steal_pointer (&taken);
}

/* -- what was taken ---------------------------------------------------------------------------- */

TfStudyTaken *
tf_study_taken_new (double floor_gauss, GPtrArray *scales)
{
  TfStudyTaken *taken = g_atomic_rc_box_new0 (TfStudyTaken);
  taken->rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  taken->all = tf_sample_new ();
  taken->scales = scales;
  taken->floor = floor_gauss;
  return taken;
}

void
tf_study_taken_add (TfStudyTaken *taken, TfRow *row, TfSampleRow sample)
{
  sample.row = taken->rows->len;
  g_ptr_array_add (taken->rows, row);
  tf_sample_add (taken->all, &sample);
}

void
tf_study_taken_close (TfStudyTaken *taken)
{
  g_autofree guint *order = order_rows (taken->rows);
  TfSample *given = g_steal_pointer (&taken->all);
  taken->all = tf_sample_new_sized (taken->rows->len);
  for (guint k = 0; k < taken->rows->len; k++)
    {
      TfSampleRow row = *tf_sample_get (given, order[k]);
      row.row = k;
      tf_sample_add (taken->all, &row);
    }
  put_in_order (taken->rows, order);
  tf_sample_free (given);
}

TfStudyRows
tf_study_taken_rows (const TfStudyTaken *taken)
{
  return (TfStudyRows){ .rows = taken->rows,
                        .all = taken->all,
                        .scales = taken->scales,
                        .facts = taken->facts,
                        .taken = taken };
}

TfStudyTaken *
tf_study_taken_ref (TfStudyTaken *taken)
{
  return g_atomic_rc_box_acquire (taken);
}

static void
taken_clear (gpointer data)
{
  TfStudyTaken *taken = data;
  g_clear_pointer (&taken->rows, g_ptr_array_unref);
  g_clear_pointer (&taken->facts, g_array_unref);
  g_clear_pointer (&taken->scales, g_ptr_array_unref);
  tf_sample_free (taken->all);
}

void
tf_study_taken_unref (TfStudyTaken *taken)
{
  if (taken != NULL)
    g_atomic_rc_box_release_full (taken, taken_clear);
}

gboolean
tf_study_taken_serves (const TfStudyTaken *taken, const TfStudy *study)
{
  gboolean floor = study->even_floor_gauss > 0
                       ? fabs (taken->floor - study->even_floor_gauss) < 1e-9 * taken->floor
                       : !taken->own_floor;
  return floor && !taken->with_hints == !study->sieve.with_hints
         && !taken->with_scales == !study->sieve.with_scales
         && (taken->rows != NULL || !tf_study_needs_whole_rows (study));
}

guint
tf_study_taken_get_n (const TfStudyTaken *taken)
{
  return tf_sample_get_n (taken->all);
}

const TfSample *
tf_study_taken_get_sample (const TfStudyTaken *taken)
{
  return taken->all;
}

const TfRow *
tf_study_taken_get_row (const TfStudyTaken *taken, guint k)
{
  return taken->rows != NULL ? g_ptr_array_index (taken->rows, k) : NULL;
}

const GPtrArray *
tf_study_taken_get_scales (const TfStudyTaken *taken)
{
  return taken->scales;
}

/* -- the laws of it ---------------------------------------------------------------------------- */

/* The same rows, scaled as the study asks. */
static TfStudyTaken *
taken_for (const TfStudy *study, const TfStudyTaken *taken)
{
  if (!taken->with_scales == !study->sieve.with_scales)
    return tf_study_taken_ref ((TfStudyTaken *)taken);
  TfStudyTaken *other = g_atomic_rc_box_new0 (TfStudyTaken);
  *other = *taken;
  other->rows = taken->rows != NULL ? g_ptr_array_ref (taken->rows) : NULL;
  other->facts = taken->facts != NULL ? g_array_ref (taken->facts) : NULL;
  other->scales = g_ptr_array_ref (taken->scales);
  other->all = tf_sample_new_sized (tf_sample_get_n (taken->all));
  for (guint k = 0; k < tf_sample_get_n (taken->all); k++)
    tf_sample_add (other->all, tf_sample_get (taken->all, k));
  scale (other, study->sieve.with_scales);
  return other;
}

TfFindings *
tf_study_run_taken (const TfStudy *study, const TfStudyTaken *taken, TfLedger *ledger)
{
  g_return_val_if_fail (study != NULL && taken != NULL, NULL);
  g_autoptr (TfStudyTaken) own = taken_for (study, taken);
  const TfStudyRows rows = tf_study_taken_rows (own);
  return tf_study_run_rows (study, &rows, ledger, own->floor, TRUE);
}
