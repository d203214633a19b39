/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The split that is proposed for what reads "not one bipole?": looked for by a worker whenever such a
 * hint, mark or draft is in hand at rest, with both halves measured. Nothing changes until it is
 * taken; put away it stays away for that outline. */

#include "tf-session-private.h"

enum
{
  PIECES = 2 /* of one bipole */
};

typedef struct
{
  TfFrame *frame;
  TfMeasureParams params;
  TfProposal *proposal; /* NULL when there is none, or it was taken out */
  TfOutline *base;
  guint serial;
} Order;

static void
proposal_free (TfProposal *proposal)
{
  for (guint k = 0; k < G_N_ELEMENTS (proposal->half); k++)
    {
      g_clear_pointer (&proposal->outline[k], tf_outline_unref);
      tf_measure_clear (&proposal->half[k]);
    }
  g_free (proposal);
}

static void
order_free (gpointer data)
{
  Order *order = data;
  tf_frame_unref (order->frame);
  tf_outline_unref (order->base);
  g_clear_pointer (&order->proposal, proposal_free);
  g_free (order);
}

/* The half with more flux first, as a split has them. */
static void
put_stronger_first (TfProposal *p)
{
  if (p->half[0].flux_unsigned_mx >= p->half[1].flux_unsigned_mx)
    return;
  TfMeasure measure = p->half[0];
  TfOutline *outline = p->outline[0];
  p->half[0] = p->half[1];
  p->outline[0] = p->outline[1];
  p->half[1] = measure;
  p->outline[1] = outline;
}

static void
propose_in_thread (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  Order *order = data;
  TfProposal *p = g_new0 (TfProposal, 1);
  order->params.outline_term = FALSE;
  gboolean found = tf_split_propose (&p->line, order->frame, order->base, &order->params)
                   && tf_outline_split (order->base, p->line.a, p->line.b, &p->outline[0],
                                        &p->outline[1], NULL);
  for (guint k = 0; found && k < G_N_ELEMENTS (p->half); k++)
    found = tf_measure_region (&p->half[k], order->frame, p->outline[k], &order->params, NULL);
  if (found)
    {
      put_stronger_first (p);
      order->proposal = p;
    }
  else
    proposal_free (p);
  g_task_return_boolean (task, found);
}

static void
proposed (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data; /* not the task's source: the worker may let go of that last */
  Order *order = g_task_get_task_data (G_TASK (result));
  if (order->serial != self->proposal_serial || order->proposal == NULL)
    return;
  self->proposal = g_steal_pointer (&order->proposal);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
}

static void
forget (TfSession *self)
{
  self->proposal_serial++;
  g_clear_pointer (&self->proposal, proposal_free);
  g_clear_pointer (&self->proposal_base, tf_outline_unref);
}

/* What a split may be proposed for now; NULL. */
static TfOutline *
doubtful (TfSession *self)
{
  const TfMeasure *measure = tf_session_get_measure (self);
  gboolean idle = self->frame != NULL && self->tool == TF_TOOL_NONE && self->line->len == 0
                  && !self->brushing && !self->keeping && self->other == NULL
                  && tf_session_is_at_rest (self) && self->also->len == 0;
  if (!idle || measure == NULL || measure->pieces <= PIECES
      || (self->draft == NULL && tf_session_is_elsewhere (tf_region_item_get_row (self->region))))
    return NULL;
  return tf_session_get_base (self);
}

static gboolean
same (TfOutline *a, TfOutline *b)
{
  return a == b || (a != NULL && b != NULL && tf_outline_equal (a, b));
}

static void
look (TfSession *self)
{
  TfOutline *base = doubtful (self);
  if (base != NULL && (same (base, self->proposal_base) || same (base, self->proposal_left)))
    return; /* proposed, being looked for, or put away */
  if (base == NULL && self->proposal_base == NULL)
    return;
  forget (self);
  if (base == NULL)
    return;
  self->proposal_base = tf_outline_ref (base);
  Order *order = g_new0 (Order, 1);
  order->frame = tf_frame_ref (self->frame);
  order->base = tf_outline_ref (base);
  order->params = self->params;
  order->serial = self->proposal_serial;
  g_autoptr (GTask) task = g_task_new (NULL, NULL, proposed, g_object_ref (self));
  g_task_set_task_data (task, order, order_free);
  g_task_run_in_thread (task, propose_in_thread);
}

const TfProposal *
tf_session_get_proposal (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), NULL);
  return same (doubtful (self), self->proposal_base) ? self->proposal : NULL;
}

gboolean
tf_session_split_proposed (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  const TfProposal *proposal = tf_session_get_proposal (self);
  return proposal != NULL && tf_session_split (self, proposal->line.a, proposal->line.b);
}

gboolean
tf_session_leave_proposal (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  if (tf_session_get_proposal (self) == NULL)
    return FALSE;
  g_clear_pointer (&self->proposal_left, tf_outline_unref);
  self->proposal_left = tf_outline_ref (self->proposal_base);
  forget (self);
  tf_session_emit (self, TF_SIGNAL_CHOICE);
  return TRUE;
}

void
tf_session_init_proposal (TfSession *self)
{
  g_signal_connect (self, "choice-changed", G_CALLBACK (look), NULL);
}

void
tf_session_clear_proposal (TfSession *self)
{
  forget (self);
  g_clear_pointer (&self->proposal_left, tf_outline_unref);
}
