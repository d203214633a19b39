/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* In which order a forecaster reads the disk. */

#include "tf-shift.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

/* A class may stand in Greek letters or be written out; the parts count, not their spelling. */
guint
tf_shift_class_rank (const char *mw_class)
{
  static const char *const order[] = { "βγδ", "γδ", "βδ", "γ", "βγ", "β", "α" };
  for (guint k = 0; mw_class != NULL && k < G_N_ELEMENTS (order); k++)
    if (strcmp (mw_class, order[k]) == 0)
      return k;
  return G_N_ELEMENTS (order);
}

static gboolean
has_class (const TfShiftRow *row)
{
  return row->class_now != NULL && *row->class_now != '\0';
}

TfShiftGroup
tf_shift_group (const TfShiftRow *row)
{
  if (row->seen == TF_SEEN_DUE)
    return TF_SHIFT_DUE;
  if (has_class (row))
    return TF_SHIFT_CLASSED;
  if (!isfinite (row->r_mx.now))
    return TF_SHIFT_UNMEASURED;
  return row->r_mx.now > 0.0 ? TF_SHIFT_TANGLED : TF_SHIFT_QUIET;
}

/* Larger first; what is not known last among its like. */
static int
by_size (double a, double b)
{
  if (isnan (a) || isnan (b))
    return isnan (a) - isnan (b);
  return (a < b) - (a > b);
}

static int
by_group (const TfShiftRow *a, const TfShiftRow *b)
{
  if (a->group != b->group)
    return (int)a->group - (int)b->group;
  if (a->group == TF_SHIFT_DUE)
    return (a->crosses.s > b->crosses.s) - (a->crosses.s < b->crosses.s);
  int rank = (int)tf_shift_class_rank (a->class_now) - (int)tf_shift_class_rank (b->class_now);
  if (a->group == TF_SHIFT_CLASSED && rank != 0)
    return rank;
  return a->is_new != b->is_new && a->group == TF_SHIFT_UNMEASURED ? b->is_new - a->is_new : 0;
}

int
tf_shift_compare (gconstpointer p, gconstpointer q)
{
  const TfShiftRow *a = *(const TfShiftRow *const *)p, *b = *(const TfShiftRow *const *)q;
  int order = by_group (a, b);
  if (order == 0)
    order = by_size (a->r_mx.now, b->r_mx.now);
  if (order == 0)
    order = by_size (a->flux_mx.now, b->flux_mx.now);
  if (order == 0)
    order = g_strcmp0 (a->number, b->number);
  return order != 0 ? order : (a->mark > b->mark) - (a->mark < b->mark);
}

double
tf_shift_share (const TfShiftValue *value)
{
  if (!isfinite (value->now) || !(fabs (value->before) > 0.0))
    return NAN;
  return value->now / value->before - 1.0;
}

char *
tf_shift_dup_age (double seconds)
{
  double hours = fabs (seconds) / 3600.0;
  gboolean ago = seconds > 0.0;
  if (!isfinite (hours))
    return g_strdup ("—");
  if (hours < 0.05)
    return g_strdup (_ ("now"));
  if (hours < 1.5)
    return g_strdup_printf (ago ? _ ("%.0f min ago") : _ ("in %.0f min"), 60.0 * hours);
  if (hours < 23.95)
    return g_strdup_printf (ago ? _ ("%.0f h ago") : _ ("in %.0f h"), hours);
  return g_strdup_printf (ago ? _ ("%.1f d ago") : _ ("in %.1f d"), hours / 24.0);
}

const char *
tf_shift_group_name (TfShiftGroup group)
{
  static const char *const names[] = { "class", "r", "not measured", "quiet", "due back" };
  g_return_val_if_fail (group < G_N_ELEMENTS (names), NULL);
  return names[group];
}

const char *
tf_shift_group_title (TfShiftGroup group)
{
  static const char *const titles[]
      = { N_ ("By class"), N_ ("By Schrijver's R"), N_ ("New or not measured"),
          N_ ("Measured, R is 0"), N_ ("Due back at the east limb") };
  g_return_val_if_fail (group < G_N_ELEMENTS (titles), NULL);
  return _ (titles[group]);
}

TfNoteState
tf_shift_note_state (const TfRegionNote *note, TfTime since)
{
  if (note->resolved)
    return TF_NOTE_STATE_SETTLED;
  return isnan (since.s) || !(note->written.s <= since.s) ? TF_NOTE_STATE_NEW : TF_NOTE_STATE_CARRIED;
}
