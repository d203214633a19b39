/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-writer.h"

#include <glib/gi18n-lib.h>

#include "tf-lane.h"

struct _TfWriter
{
  GObject parent;
  TfLane *lane;
  GQueue deeds; /* TfDeed, the head is in hand or stuck */
  gboolean in_hand;
  char *problem;
};

G_DEFINE_FINAL_TYPE (TfWriter, tf_writer, G_TYPE_OBJECT)

enum
{
  PROP_PROBLEM = 1,
  PROP_PENDING,
  N_PROPS
};
static const char *const prop_names[N_PROPS] = { NULL, "problem", "pending" };

static void try_next (TfWriter *self);

static void
notify (TfWriter *self, guint prop)
{
  g_object_notify (G_OBJECT (self), prop_names[prop]);
}

static void
set_problem (TfWriter *self, char *taken)
{
  g_free (self->problem);
  self->problem = taken;
  notify (self, PROP_PROBLEM);
}

static gpointer
run_deed (TfLedger *ledger, gpointer data, GError **error)
{
  const TfDeed *deed = data;
  g_autoptr (TfDeed) copy = tf_deed_copy (deed);
  if (!tf_deed_run (copy, ledger, error))
    return NULL;
  return g_steal_pointer (&copy);
}

static void
take_head (TfWriter *self)
{
  tf_deed_free (g_queue_pop_head (&self->deeds));
  notify (self, PROP_PENDING);
}

static void
say_refused (TfWriter *self, const GError *error)
{
  TfDeed *deed = g_queue_peek_head (&self->deeds);
  g_signal_emit_by_name (self, "refused", deed, error->message);
  take_head (self);
}

static void
deed_done (GObject *source, GAsyncResult *result, gpointer data)
{
  TfWriter *self = TF_WRITER (source);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfDeed) done = tf_lane_finish (result, &error);
  self->in_hand = FALSE;
  if (done != NULL)
    {
      take_head (self);
      g_signal_emit_by_name (self, "saved", done);
    }
  else if (g_error_matches (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE))
    say_refused (self, error);
  else
    {
      TfDeed *deed = g_queue_peek_head (&self->deeds);
      set_problem (
          self, g_strdup_printf (_ ("Not saved yet: %s. %s"), tf_deed_name (deed), error->message));
      return;
    }
  try_next (self);
}

static void
try_next (TfWriter *self)
{
  if (self->in_hand || self->problem != NULL || self->lane == NULL
      || g_queue_is_empty (&self->deeds))
    return;
  self->in_hand = TRUE;
  const TfDeed *deed = g_queue_peek_head (&self->deeds);
  tf_lane_push (self->lane, self, NULL, run_deed, tf_deed_copy (deed), (GDestroyNotify)tf_deed_free,
                (GDestroyNotify)tf_deed_free, deed_done, NULL);
}

void
tf_writer_push (TfWriter *self, TfDeed *deed)
{
  g_return_if_fail (TF_IS_WRITER (self) && deed != NULL);
  g_queue_push_tail (&self->deeds, deed);
  notify (self, PROP_PENDING);
  try_next (self);
}

void
tf_writer_retry (TfWriter *self)
{
  g_return_if_fail (TF_IS_WRITER (self));
  if (self->problem == NULL)
    return;
  tf_lane_reopen (self->lane);
  set_problem (self, NULL);
  try_next (self);
}

void
tf_writer_give_up (TfWriter *self)
{
  g_return_if_fail (TF_IS_WRITER (self));
  if (self->problem == NULL)
    return;
  take_head (self);
  set_problem (self, NULL);
  try_next (self);
}

const char *
tf_writer_get_problem (TfWriter *self)
{
  return self->problem;
}

guint
tf_writer_get_pending (TfWriter *self)
{
  return self->deeds.length;
}

void
tf_writer_close (TfWriter *self)
{
  g_return_if_fail (TF_IS_WRITER (self));
  g_clear_pointer (&self->lane, tf_lane_close);
}

static void
get_property (GObject *object, guint prop, GValue *value, GParamSpec *spec)
{
  TfWriter *self = TF_WRITER (object);
  if (prop == PROP_PROBLEM)
    g_value_set_string (value, self->problem);
  else if (prop == PROP_PENDING)
    g_value_set_uint (value, self->deeds.length);
  else
    G_OBJECT_WARN_INVALID_PROPERTY_ID (object, prop, spec);
}

static void
finalize (GObject *object)
{
  TfWriter *self = TF_WRITER (object);
  tf_writer_close (self);
  g_queue_clear_full (&self->deeds, (GDestroyNotify)tf_deed_free);
  g_free (self->problem);
  G_OBJECT_CLASS (tf_writer_parent_class)->finalize (object);
}

static void
tf_writer_class_init (TfWriterClass *klass)
{
  GObjectClass *object = G_OBJECT_CLASS (klass);
  object->get_property = get_property;
  object->finalize = finalize;
  g_object_class_install_property (
      object, PROP_PROBLEM,
      g_param_spec_string ("problem", NULL, NULL, NULL, G_PARAM_READABLE | G_PARAM_STATIC_STRINGS));
  g_object_class_install_property (object, PROP_PENDING,
                                   g_param_spec_uint ("pending", NULL, NULL, 0, G_MAXUINT, 0,
                                                      G_PARAM_READABLE | G_PARAM_STATIC_STRINGS));
  g_signal_new ("saved", TF_TYPE_WRITER, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 1,
                G_TYPE_POINTER);
  g_signal_new ("refused", TF_TYPE_WRITER, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE, 2,
                G_TYPE_POINTER, G_TYPE_STRING);
}

static void
tf_writer_init (TfWriter *self)
{
  g_queue_init (&self->deeds);
}

TfWriter *
tf_writer_new (const char *path, char letter)
{
  TfWriter *self = g_object_new (TF_TYPE_WRITER, NULL);
  self->lane = tf_lane_new (path, letter);
  return self;
}
