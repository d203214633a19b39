/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-frame-item.h"

#include <string.h>
#include <glib/gi18n-lib.h>

struct _TfFrameItem
{
  GObject parent;
  TfFrameRow *row;
  char *day;
  GdkTexture *thumbnail;
};

G_DEFINE_FINAL_TYPE (TfFrameItem, tf_frame_item, G_TYPE_OBJECT)

static void
finalize (GObject *object)
{
  TfFrameItem *self = TF_FRAME_ITEM (object);
  tf_frame_row_free (self->row);
  g_free (self->day);
  g_clear_object (&self->thumbnail);
  G_OBJECT_CLASS (tf_frame_item_parent_class)->finalize (object);
}

static void
tf_frame_item_class_init (TfFrameItemClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = finalize;
  /* "changed": anything that a row of the roll shows */
  g_signal_new ("changed", TF_TYPE_FRAME_ITEM, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE,
                0);
}

static void
tf_frame_item_init (TfFrameItem *self)
{
}

TfFrameItem *
tf_frame_item_new (TfFrameRow *row)
{
  g_return_val_if_fail (row != NULL, NULL);
  TfFrameItem *self = g_object_new (TF_TYPE_FRAME_ITEM, NULL);
  self->row = row;
  return self;
}

void
tf_frame_item_set_row (TfFrameItem *self, TfFrameRow *row)
{
  g_return_if_fail (TF_IS_FRAME_ITEM (self) && row != NULL);
  gboolean same = row->n_hints == self->row->n_hints && row->n_marks == self->row->n_marks
                  && row->done == self->row->done && g_strcmp0 (row->path, self->row->path) == 0;
  tf_frame_row_free (self->row);
  self->row = row;
  if (!same)
    g_signal_emit_by_name (self, "changed");
}

const TfFrameRow *
tf_frame_item_get_row (TfFrameItem *self)
{
  return self->row;
}

TfFrameState
tf_frame_item_get_state (TfFrameItem *self)
{
  if (self->row->refusal != NULL)
    return TF_FRAME_REFUSED;
  if (self->row->n_hints > 0)
    return TF_FRAME_WAITING;
  return self->row->done || self->row->n_marks > 0 ? TF_FRAME_DONE : TF_FRAME_UNTOUCHED;
}

const char *
tf_frame_item_get_day (TfFrameItem *self)
{
  return self->day;
}

void
tf_frame_item_set_day (TfFrameItem *self, const char *day)
{
  if (g_strcmp0 (day, self->day) == 0)
    return;
  g_free (self->day);
  self->day = g_strdup (day);
  g_signal_emit_by_name (self, "changed");
}

GdkTexture *
tf_frame_item_get_thumbnail (TfFrameItem *self)
{
  return self->thumbnail;
}

void
tf_frame_item_set_thumbnail (TfFrameItem *self, GdkTexture *texture)
{
  if (g_set_object (&self->thumbnail, texture))
    g_signal_emit_by_name (self, "changed");
}

char *
tf_frame_item_dup_day (TfFrameItem *self)
{
  int year, month, day;
  if (!tf_time_calendar (self->row->info->time, &year, &month, &day, NULL, NULL, NULL))
    return g_strdup (_ ("time unknown"));
  g_autoptr (GDateTime) date = g_date_time_new_utc (year, month, day, 0, 0, 0);
  return date != NULL ? g_date_time_format (date, _ ("%-d %b %Y")) : g_strdup (_ ("time unknown"));
}

char *
tf_frame_item_dup_time (TfFrameItem *self)
{
  int hour, minute;
  if (!tf_time_calendar (self->row->info->time, NULL, NULL, NULL, &hour, &minute, NULL))
    return g_path_get_basename (self->row->path);
  return g_strdup_printf ("%02d:%02d", hour, minute);
}

/* Frames of one time from several places are told apart by it. */
static void
append_vantage (GString *text, const TfFrameInfo *info)
{
  if (tf_geometry_is_map (&info->geometry))
    return;
  g_autofree char *vantage = tf_observer_dup_vantage (&info->geometry.observer);
  if (strcmp (vantage, "earth") != 0 && strcmp (vantage, "unknown") != 0)
    g_string_append_printf (text, _ ("\nfrom %s"), vantage);
}

char *
tf_frame_item_dup_counts (TfFrameItem *self)
{
  const TfFrameRow *row = self->row;
  if (row->refusal != NULL)
    return g_strdup (_ ("refused"));
  GString *text = g_string_new (NULL);
  if (row->n_marks == 0 && row->n_hints == 0)
    g_string_append (text, row->done ? _ ("nothing found") : "—");
  if (row->n_marks > 0)
    g_string_append_printf (text, ngettext ("%u mark", "%u marks", row->n_marks), row->n_marks);
  if (row->n_marks > 0 && row->n_hints > 0)
    g_string_append (text, "\n");
  if (row->n_hints > 0)
    g_string_append_printf (text, ngettext ("%u hint", "%u hints", row->n_hints), row->n_hints);
  if (row->n_marks > 0 && row->n_hints == 0)
    g_string_append_printf (text, "\n%s", _ ("done"));
  append_vantage (text, row->info);
  return g_string_free (text, FALSE);
}

const char *
tf_frame_item_get_state_words (TfFrameItem *self)
{
  switch (tf_frame_item_get_state (self))
    {
    case TF_FRAME_WAITING:
      return _ ("hints waiting");
    case TF_FRAME_DONE:
      return _ ("done");
    case TF_FRAME_REFUSED:
      return _ ("refused");
    case TF_FRAME_UNTOUCHED:
    default:
      return _ ("untouched");
    }
}
