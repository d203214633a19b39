/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-pair.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-pair-private.h"
#include "tf-rotation.h"

#define O(member) offsetof (TfPairParams, member)
const TfOption tf_pair_options[] = {
  { "within", TF_OPTION_NUMBER, "h", 3, 0, 24, NULL, N_ ("most time between two frames"),
    O (within_hours) },
  { "cell", TF_OPTION_NUMBER, "deg", 2, 0.5, 15, NULL, N_ ("size of a cell on the Sun"),
    O (cell_deg) },
  { "pair-mu", TF_OPTION_NUMBER, "", 0.4, 0.1, 0.95, NULL, N_ ("least mu on both frames"),
    O (mu_min) },
  { "change", TF_OPTION_NUMBER, "", 0.15, 0, 1, NULL,
    N_ ("share of a cell's field by which it may differ though the scale is right"),
    O (change_share) },
  { "pair-law", TF_OPTION_CHOICE, "", 0, 0, 100, tf_rotation_names, N_ ("rotation law"), O (law) },
  { "most-pairs", TF_OPTION_INT, "", 40, 1, 100000, NULL,
    N_ ("most frame pairs of two instruments, spread over their time"), O (most) },
  { "pair-level", TF_OPTION_NUMBER, "", 0.95, 0.5, 0.999, NULL, N_ ("confidence level"),
    O (level) },
  { "pair-draws", TF_OPTION_INT, "", 200, 0, 100000, NULL, N_ ("bootstrap draws; 0: none"),
    O (draws) },
  { "pair-seed", TF_OPTION_INT, "", 1, 0, G_MAXINT32, NULL, N_ ("seed of those draws"), O (seed) },
  { NULL },
};
#undef O

enum
{
  MIN_COMMON = 20
};

void
tf_pair_scale_free (TfPairScale *scale)
{
  if (scale == NULL)
    return;
  g_free (scale->instrument);
  g_free (scale->reference);
  g_free (scale);
}

TfPairScale *
tf_pair_frames (const TfFrame *instrument, const TfFrame *reference, const TfPairParams *params)
{
  g_autoptr (GArray) cells = g_array_new (FALSE, FALSE, sizeof (TfPairCell));
  const TfFrameInfo *a = tf_frame_get_info (instrument), *b = tf_frame_get_info (reference);
  tf_pair_cells (cells, instrument, reference, 0, params);
  if (cells->len < MIN_COMMON)
    return NULL;
  TfPairScale *scale = g_new0 (TfPairScale, 1);
  scale->instrument = g_strdup (a->instrument);
  scale->reference = g_strdup (b->instrument);
  scale->frame_pairs = 1;
  scale->hours = fabs (a->time.s - b->time.s) / 3600.0;
  tf_pair_fit (scale, cells, params);
  return scale;
}

/* -- the frames of a ledger --------------------------------------------------------------------- */

/* Usable frames of one instrument in order of time; rows are borrowed. */
typedef struct
{
  const char *name;
  GPtrArray *frames; /* TfFrameRow */
} Instrument;

static void
instrument_clear (gpointer data)
{
  g_ptr_array_unref (((Instrument *)data)->frames);
}

static gboolean
is_usable (const TfFrameRow *row)
{
  return row->refusal == NULL && row->info->role == TF_ROLE_FIELD
         && row->info->kind != TF_KIND_MODEL_MAP && !tf_geometry_is_map (&row->info->geometry)
         && tf_time_is_known (row->info->time);
}

static int
compare_instruments (gconstpointer a, gconstpointer b)
{
  const Instrument *left = a, *right = b;
  if (left->frames->len != right->frames->len)
    return left->frames->len > right->frames->len ? -1 : 1;
  return strcmp (left->name, right->name);
}

/* The instruments, the one with most frames first. */
static GArray *
list_instruments (const GPtrArray *frames)
{
  GArray *list = g_array_new (FALSE, FALSE, sizeof (Instrument));
  g_array_set_clear_func (list, instrument_clear);
  for (guint k = 0; k < frames->len; k++)
    {
      TfFrameRow *row = g_ptr_array_index (frames, k);
      guint at = 0;
      if (!is_usable (row))
        continue;
      while (at < list->len
             && strcmp (g_array_index (list, Instrument, at).name, row->info->instrument) != 0)
        at++;
      if (at == list->len)
        {
          Instrument fresh = { row->info->instrument, g_ptr_array_new () };
          g_array_append_val (list, fresh);
        }
      g_ptr_array_add (g_array_index (list, Instrument, at).frames, row);
    }
  g_array_sort (list, compare_instruments);
  return list;
}

typedef struct
{
  const TfFrameRow *a, *b;
  double hours;
} Couple;

static int
compare_couples (gconstpointer a, gconstpointer b)
{
  const Couple *left = a, *right = b;
  return (left->hours > right->hours) - (left->hours < right->hours);
}

static int
compare_times (gconstpointer a, gconstpointer b)
{
  const Couple *left = a, *right = b;
  double first = left->a->info->time.s, second = right->a->info->time.s;
  return (first > second) - (first < second);
}

/* Nearest in time first, each frame once (element-type Couple), in order of time. */
static GArray *
couple (const Instrument *one, const Instrument *other, const TfPairParams *params)
{
  g_autoptr (GArray) all = g_array_new (FALSE, FALSE, sizeof (Couple));
  g_autoptr (GHashTable) used = g_hash_table_new (NULL, NULL);
  GArray *taken = g_array_new (FALSE, FALSE, sizeof (Couple));
  for (guint i = 0; i < one->frames->len; i++)
    for (guint j = 0; j < other->frames->len; j++)
      {
        Couple c = { g_ptr_array_index (one->frames, i), g_ptr_array_index (other->frames, j), 0 };
        c.hours = fabs (c.a->info->time.s - c.b->info->time.s) / 3600.0;
        if (c.hours <= params->within_hours)
          g_array_append_val (all, c);
      }
  g_array_sort (all, compare_couples);
  for (guint k = 0; k < all->len; k++)
    {
      const Couple *c = &g_array_index (all, Couple, k);
      if (g_hash_table_contains (used, c->a) || g_hash_table_contains (used, c->b))
        continue;
      g_hash_table_add (used, (gpointer)c->a);
      g_hash_table_add (used, (gpointer)c->b);
      g_array_append_val (taken, *c);
    }
  g_array_sort (taken, compare_times);
  return taken;
}

/* The frame's file as it was recorded; NULL when it is gone or another. */
static TfFrame *
open_frame (const TfFrameRow *row, const TfWork *work)
{
  const TfCancel *cancel = work != NULL ? work->cancel : NULL;
  g_autofree char *checksum = tf_frame_file_checksum (row->path, cancel, NULL);
  if (checksum == NULL || strcmp (checksum, row->checksum) != 0)
    return NULL;
  const TfFrameSpec spec = { row->hdu, row->plane };
  return tf_frame_open (row->path, &spec, work, NULL);
}

/* NULL when too few cells are common. */
static TfPairScale *
compare_pair (const Instrument *instrument, const Instrument *reference, const TfPairParams *params,
              const TfWork *work)
{
  g_autoptr (GArray) couples = couple (instrument, reference, params);
  g_autoptr (GArray) cells = g_array_new (FALSE, FALSE, sizeof (TfPairCell));
  g_autofree double *hours = g_new (double, couples->len + 1);
  guint n = MIN (couples->len, (guint)params->most), opened = 0;
  for (guint k = 0; k < n && !(work != NULL && tf_cancel_is_raised (work->cancel)); k++)
    {
      const Couple *c = &g_array_index (couples, Couple, (guint)((guint64)k * couples->len / n));
      g_autoptr (TfFrame) a = open_frame (c->a, work), b = open_frame (c->b, work);
      if (a == NULL || b == NULL)
        continue;
      tf_pair_cells (cells, a, b, opened, params);
      hours[opened++] = c->hours;
    }
  if (cells->len < MIN_COMMON)
    return NULL;
  TfPairScale *scale = g_new0 (TfPairScale, 1);
  scale->instrument = g_strdup (instrument->name);
  scale->reference = g_strdup (reference->name);
  scale->frame_pairs = opened;
  scale->hours = tf_median (hours, opened);
  tf_pair_fit (scale, cells, params);
  return scale;
}

GPtrArray *
tf_pair_scales (TfLedger *ledger, const TfPairParams *params, const TfWork *work, GError **error)
{
  g_return_val_if_fail (ledger != NULL && params != NULL, NULL);
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, error);
  if (frames == NULL)
    return NULL;
  GPtrArray *scales = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_pair_scale_free);
  g_autoptr (GArray) list = list_instruments (frames);
  for (guint r = 0; r < list->len; r++)
    for (guint k = r + 1; k < list->len; k++)
      {
        TfPairScale *scale = compare_pair (&g_array_index (list, Instrument, k),
                                           &g_array_index (list, Instrument, r), params, work);
        if (scale != NULL)
          g_ptr_array_add (scales, scale);
      }
  return scales;
}
