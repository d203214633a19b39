/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* From what was seen to the rows of a shift: each track of the last days becomes one row or none. */

#include "tf-shift-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"
#include "tf-rotation.h"

#define HOUR_S 3600.0
/* "A day before" is the sighting nearest to 24 h ago, of those in this stretch. */
#define BEFORE_LEAST_S (12.0 * HOUR_S)
#define BEFORE_MOST_S  (36.0 * HOUR_S)
/* What nobody has seen for longer than this is not looked for. */
#define MISSED_S (3.0 * TF_DAY_S)

/* -- rows -------------------------------------------------------------------------------------- */

TfShiftRow *
tf_shift_row_new (void)
{
  static const TfShiftValue none = { NAN, NAN, { NAN }, { NAN } };
  TfShiftRow *row = g_new0 (TfShiftRow, 1);
  row->r_mx = row->flux_mx = row->area_msh = none;
  row->lat_deg = row->carrington_lon_deg = row->cmd_deg = row->mu = row->flux_sigma_mx = NAN;
  row->first = row->crosses = row->class_time = TF_TIME_UNKNOWN;
  row->notes = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_region_note_free);
  row->proposed = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_others_free);
  char **texts[] = { &row->number,    &row->label,        &row->external,
                     &row->class_now, &row->class_before, &row->class_person };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    *texts[k] = g_strdup ("");
  return row;
}

void
tf_shift_row_free (TfShiftRow *row)
{
  char *texts[] = { row->number,    row->label,        row->external,
                    row->class_now, row->class_before, row->class_person };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    g_free (texts[k]);
  g_ptr_array_unref (row->notes);
  g_ptr_array_unref (row->proposed);
  tf_others_free (row->others);
  g_free (row);
}

static void
set_text (char **text, const char *value)
{
  g_free (*text);
  *text = g_strdup (value != NULL ? value : "");
}

/* -- one track --------------------------------------------------------------------------------- */

typedef struct
{
  const TfShiftSky *sky;
  GPtrArray *seen;    /* TfRow of one track, in time order, borrowed */
  const TfRow *last;  /* the newest; on the frame a mark before a hint, the last mark of several */
  const TfRow *named; /* the newest mark */
} Track;

static int
by_time (gconstpointer p, gconstpointer q)
{
  const TfRow *a = *(const TfRow *const *)p, *b = *(const TfRow *const *)q;
  double s = a->measure.time.s, t = b->measure.time.s;
  if (s < t || s > t)
    return s < t ? -1 : 1;
  if (a->is_hint != b->is_hint)
    return a->is_hint ? -1 : 1;
  return (a->mark > b->mark) - (a->mark < b->mark);
}

static Track
track_of (const TfShiftSky *sky, guint number)
{
  Track track = { .sky = sky, .seen = g_ptr_array_new () };
  for (guint k = 0; k < sky->rows->len; k++)
    if (sky->track[k] == number)
      g_ptr_array_add (track.seen, g_ptr_array_index (sky->rows, k));
  g_ptr_array_sort (track.seen, by_time);
  for (guint k = 0; k < track.seen->len; k++)
    {
      track.last = g_ptr_array_index (track.seen, k);
      if (!track.last->is_hint)
        track.named = track.last;
    }
  return track;
}

static double
ago (const Track *track, const TfRow *row)
{
  return track->sky->time.s - row->measure.time.s;
}

static const TfRow *
find_before (const Track *track)
{
  const TfRow *found = NULL;
  for (guint k = 0; k < track->seen->len; k++)
    {
      const TfRow *row = g_ptr_array_index (track->seen, k);
      double s = ago (track, row);
      if (s >= BEFORE_LEAST_S && s <= BEFORE_MOST_S
          && (found == NULL || fabs (s - TF_DAY_S) <= fabs (ago (track, found) - TF_DAY_S)))
        found = row;
    }
  return found;
}

/* The newest figures in time up to @until. */
static const TfRow *
find_figures (const Track *track, double until_s)
{
  const TfRow *found = NULL;
  for (guint k = 0; k < track->seen->len; k++)
    {
      const TfRow *row = g_ptr_array_index (track->seen, k);
      if (row->complexity.there && row->complexity.mu >= 0.7 && row->measure.time.s <= until_s)
        found = row;
    }
  return found;
}

static double
area_of (const TfMeasure *m)
{
  return m->positive.magnetic_area_msh + m->negative.magnetic_area_msh;
}

/* A local floor loses flux towards the limb, and a higher one everywhere: a tenth is let pass. */
static gboolean
comparable (const TfMeasure *a, const TfMeasure *b)
{
  return a->floor_kind == b->floor_kind && a->field_used == b->field_used
         && (a->floor_kind == TF_FLOOR_LOCAL
             || fabs (a->floor_gauss - b->floor_gauss) <= 0.1 * b->floor_gauss);
}

static void
set_sizes (TfShiftRow *row, const Track *track)
{
  const TfMeasure *m = &track->last->measure;
  const TfRow *before = find_before (track);
  row->flux_mx.now = m->flux_unsigned_mx;
  row->area_msh.now = area_of (m);
  row->flux_sigma_mx = hypot (m->positive.flux_sigma_mx, m->negative.flux_sigma_mx);
  row->flux_mx.now_time = row->area_msh.now_time = m->time;
  if (before == NULL || before == track->last)
    return;
  row->flux_mx.before_time = row->area_msh.before_time = before->measure.time;
  row->floors_differ = !comparable (m, &before->measure);
  if (row->floors_differ)
    return;
  row->flux_mx.before = before->measure.flux_unsigned_mx;
  row->area_msh.before = area_of (&before->measure);
}

static void
set_figures (TfShiftRow *row, const Track *track)
{
  const TfRow *now = find_figures (track, track->sky->time.s);
  const TfRow *before
      = now != NULL ? find_figures (track, now->measure.time.s - BEFORE_LEAST_S) : NULL;
  if (now == NULL)
    return;
  row->r_mx.now = now->complexity.r_mx;
  row->r_mx.now_time = now->measure.time;
  row->delta_candidate = now->complexity.delta_candidate;
  if (before == NULL || now->measure.time.s - before->measure.time.s > BEFORE_MOST_S)
    return;
  row->r_mx.before = before->complexity.r_mx;
  row->r_mx.before_time = before->measure.time;
}

static void
set_class (TfShiftRow *row, const Track *track)
{
  const TfShiftSky *sky = track->sky;
  const TfRegionClass *now = tf_shift_class_at (sky, row->region, sky->time);
  const TfRegionClass *before
      = tf_shift_class_at (sky, row->region, tf_time_add (sky->time, -BEFORE_LEAST_S));
  if (now != NULL)
    {
      set_text (&row->class_now, now->mw_class);
      set_text (&row->class_person, now->person);
      row->class_time = now->time;
    }
  if (before != NULL)
    set_text (&row->class_before, before->mw_class);
}

/* Where the region is on the frame: as it was measured there, else carried. */
static void
set_place (TfShiftRow *row, const Track *track)
{
  const TfShiftSky *sky = track->sky;
  const TfMeasure *m = &track->last->measure;
  row->lat_deg = m->lat_deg;
  row->carrington_lon_deg = m->carrington_lon_deg;
  row->cmd_deg = m->cmd_deg;
  row->mu = m->mu;
  if (track->last->frame == sky->frame)
    return;
  row->carrington_lon_deg = tf_wrap_360 (
      m->carrington_lon_deg
      + tf_rotation_carry (sky->law, m->lat_deg, sky->time.s - m->time.s));
  row->cmd_deg = tf_wrap_180 (row->carrington_lon_deg - sky->observer.carrington_lon_deg);
  double b0 = sky->observer.b0_deg * TF_DEG, lat = m->lat_deg * TF_DEG;
  row->mu = sin (b0) * sin (lat) + cos (b0) * cos (lat) * cos (row->cmd_deg * TF_DEG);
}

static gboolean
compared (const TfShiftSky *sky)
{
  for (guint k = 0; k < sky->moments->len; k++)
    {
      double before = sky->time.s - g_array_index (sky->moments, TfMoment, k).time.s;
      if (before > 0.0 && before <= MISSED_S)
        return TRUE;
    }
  return FALSE;
}

static TfShiftRow *
row_of (const Track *track)
{
  const TfShiftSky *sky = track->sky;
  const TfRow *first = g_ptr_array_index (track->seen, 0);
  TfShiftRow *row = tf_shift_row_new ();
  gboolean here = track->last->frame == sky->frame;
  row->seen = !here ? TF_SEEN_NOT : track->last->is_hint ? TF_SEEN_HINT : TF_SEEN_MARK;
  row->mark = here ? track->last->mark : 0;
  row->is_hint = here && track->last->is_hint;
  row->first = first->measure.time;
  row->is_new = row->is_hint && first->frame == sky->frame && compared (sky);
  if (track->named != NULL)
    {
      row->region = track->named->region_key;
      set_text (&row->number, track->named->region);
      set_text (&row->label, track->named->label);
      set_text (&row->external, track->named->external);
    }
  set_place (row, track);
  set_sizes (row, track);
  set_figures (row, track);
  set_class (row, track);
  row->group = tf_shift_group (row);
  return row;
}

/* On the frame; or a region that should be in sight there and is not. Near the limb (mu below 0.2)
 * nobody would have seen it. */
static gboolean
belongs (const Track *track, const TfShiftRow *row)
{
  if (track->last->frame == track->sky->frame)
    return TRUE;
  return track->named != NULL && ago (track, track->last) <= MISSED_S && row->mu >= 0.2;
}

static void
add_tracks (const TfShiftSky *sky, GPtrArray *rows)
{
  for (guint k = 0; k < sky->n_tracks; k++)
    {
      Track track = track_of (sky, k);
      if (track.seen->len > 0)
        {
          TfShiftRow *row = row_of (&track);
          if (belongs (&track, row))
            g_ptr_array_add (rows, row);
          else
            tf_shift_row_free (row);
        }
      g_ptr_array_unref (track.seen);
    }
}

/* -- notes ------------------------------------------------------------------------------------- */

static TfShiftRow *
find_row (const TfShift *shift, gint64 region)
{
  for (guint k = 0; k < shift->rows->len; k++)
    {
      TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      if (row->region == region)
        return row;
    }
  return NULL;
}

/* Settled ones stand until the next hand-over; open ones stay wherever their region is. */
static gboolean
note_stands (const TfShift *shift, const TfRegionNote *note)
{
  return tf_shift_note_state (note, shift->since) != TF_NOTE_STATE_SETTLED
         || isnan (shift->since.s) || note->written.s > shift->since.s;
}

static gboolean
take_notes (TfShift *shift, TfLedger *ledger, GError **error)
{
  GPtrArray *notes = tf_ledger_notes (ledger, error);
  if (notes == NULL)
    return FALSE;
  g_ptr_array_set_free_func (notes, NULL);
  for (guint k = 0; k < notes->len; k++)
    {
      TfRegionNote *note = g_ptr_array_index (notes, k);
      TfShiftRow *row = find_row (shift, note->region);
      if (!note_stands (shift, note))
        tf_region_note_free (note);
      else if (row != NULL)
        g_ptr_array_add (row->notes, note);
      else if (!note->resolved)
        g_ptr_array_add (shift->loose, note);
      else
        tf_region_note_free (note);
    }
  g_ptr_array_unref (notes);
  return TRUE;
}

/* -- the shift --------------------------------------------------------------------------------- */

void
tf_shift_free (TfShift *shift)
{
  if (shift == NULL)
    return;
  g_free (shift->frame_path);
  g_free (shift->since_person);
  g_clear_pointer (&shift->rows, g_ptr_array_unref);
  g_clear_pointer (&shift->loose, g_ptr_array_unref);
  g_clear_pointer (&shift->unmatched, g_ptr_array_unref);
  g_clear_pointer (&shift->cautions, g_ptr_array_unref);
  g_free (shift);
}

static TfShift *
shift_new (const TfShiftSky *sky)
{
  TfShift *shift = g_new0 (TfShift, 1);
  shift->frame = sky->frame;
  shift->time = sky->time;
  shift->compared = compared (sky);
  shift->rows = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_shift_row_free);
  shift->loose = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_region_note_free);
  shift->unmatched = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_others_free);
  shift->cautions = tf_notes_new ();
  tf_notes_add (shift->cautions, "complexity-describes", "");
  tf_notes_add (shift->cautions, "decisions-elsewhere", "");
  return shift;
}

static void
count (TfShift *shift)
{
  for (guint k = 0; k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      shift->count[row->group]++;
      shift->n_new += row->is_new;
    }
}

TfShift *
tf_shift_read (TfLedger *ledger, gint64 frame, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_auto (TfShiftSky) sky = { 0 };
  if (!tf_shift_sky_read (&sky, ledger, frame, error))
    return NULL;
  g_autoptr (TfShift) shift = shift_new (&sky);
  g_autoptr (TfFrameRow) its = tf_ledger_frame (ledger, sky.frame, error);
  shift->frame_path = its != NULL ? g_strdup (its->path) : NULL;
  shift->since = tf_ledger_last_shift (ledger, &shift->since_person);
  add_tracks (&sky, shift->rows);
  tf_shift_add_due (&sky, shift->rows);
  g_ptr_array_sort (shift->rows, tf_shift_compare);
  count (shift);
  if (!tf_shift_add_others (&sky, ledger, shift, error) || !take_notes (shift, ledger, error))
    return NULL;
  return g_steal_pointer (&shift);
}
