/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The study of the session and what it finds. Divides: tf-session-divides.c. */

#include "tf-session-laws-private.h"

#include <math.h>
#include <string.h>

void
tf_session_laws_init (TfSession *self)
{
  self->laws = g_new0 (TfSessionLaws, 1);
  self->laws->study = tf_study_new_default ();
}

void
tf_session_laws_finalize (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  tf_session_laws_close (self);
  g_clear_pointer (&laws->answer, tf_laws_answer_unref);
  tf_study_free (laws->study);
  g_clear_pointer (&self->laws, g_free);
}

void
tf_session_laws_close (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  g_clear_pointer (&laws->work, tf_laws_work_free);
  g_clear_pointer (&laws->answer, tf_laws_answer_unref);
  g_clear_pointer (&laws->moved, tf_divides_unref);
  laws->hold = (TfDivideHold){ 0 };
  laws->awaits = FALSE;
  laws->keeping = 0;
  tf_session_studies_close (self);
  g_clear_pointer (&laws->study->divides, tf_divides_unref);
  g_clear_pointer (&laws->study->divides_shown, g_free);
}

static void
answered (TfLawsAnswer *answer, gpointer data)
{
  TfSession *self = data;
  TfSessionLaws *laws = self->laws;
  g_clear_pointer (&laws->answer, tf_laws_answer_unref);
  laws->answer = tf_laws_answer_ref (answer);
  laws->awaits = !answer->complete;
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

/* The study with the divide that is in hand. */
static TfStudy *
dup_study_now (TfSession *self)
{
  TfStudy *study = tf_study_copy (self->laws->study);
  if (self->laws->moved != NULL)
    {
      g_clear_pointer (&study->divides, tf_divides_unref);
      study->divides = tf_divides_ref (self->laws->moved);
      study->divide = self->laws->hold.params;
    }
  return study;
}

void
tf_session_ask_laws (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  if (!laws->shown || !self->open || self->path == NULL)
    return;
  if (laws->work == NULL)
    laws->work = tf_laws_work_new (self->path, answered, self);
  g_autoptr (TfStudy) study = dup_study_now (self);
  const TfLawsAsk ask = { .stretch = tf_session_get_stretch (self),
                          .moving = laws->hold.in_hand,
                          .plain = tf_session_is_plain (self),
                          .all_relations = laws->all_relations };
  laws->awaits = TRUE;
  tf_laws_work_ask (laws->work, study, &ask);
}

void
tf_session_forget_laws (TfSession *self)
{
  if (self->laws->work != NULL)
    tf_laws_work_forget (self->laws->work);
  tf_session_read_studies (self);
  tf_session_ask_laws (self);
}

/* -- the study ------------------------------------------------------------------------------- */

const TfStudy *
tf_session_get_study (TfSession *self)
{
  return self->laws->study;
}

void
tf_session_set_study (TfSession *self, const TfStudy *study)
{
  g_return_if_fail (TF_IS_SESSION (self) && study != NULL);
  TfSessionLaws *laws = self->laws;
  TfStudy *copy = tf_study_copy (study);
  g_clear_pointer (&copy->divides, tf_divides_unref);
  g_free (copy->divides_shown);
  copy->divides_shown = g_steal_pointer (&laws->study->divides_shown);
  if (laws->study->divides != NULL)
    copy->divides = tf_divides_with_params (laws->study->divides, &copy->divide);
  tf_session_take_study (self, copy);
}

void
tf_session_take_study (TfSession *self, TfStudy *study)
{
  tf_study_free (self->laws->study);
  self->laws->study = study;
  const TfDivideHold hold = self->laws->hold;
  if (hold.cycle != 0)
    tf_session_choose_divide (self, hold.cycle, hold.hemisphere, hold.handle);
  tf_session_ask_laws (self);
  tf_session_refresh (self, FALSE); /* the wings are judged by this study, too */
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

void
tf_session_show_laws (TfSession *self, gboolean shown)
{
  g_return_if_fail (TF_IS_SESSION (self));
  if (self->laws->shown == shown)
    return;
  self->laws->shown = shown;
  if (!shown)
    tf_session_choose_divide (self, 0, 0, 0);
  tf_session_read_studies (self);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

gboolean
tf_session_shows_laws (TfSession *self)
{
  return self->laws->shown;
}

TfLawsAnswer *
tf_session_get_laws (TfSession *self)
{
  return self->laws->answer;
}

gboolean
tf_session_awaits_laws (TfSession *self)
{
  return self->laws->awaits;
}

gboolean
tf_session_get_all_relations (TfSession *self)
{
  return self->laws->all_relations;
}

void
tf_session_set_all_relations (TfSession *self, gboolean all)
{
  g_return_if_fail (TF_IS_SESSION (self));
  self->laws->all_relations = all;
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

/* A reading of the ledger brings the divides as they stand there, in the judge it was made with. */
void
tf_session_take_divides (TfSession *self, const TfStudy *read, TfJudge *judge)
{
  TfSessionLaws *laws = self->laws;
  /* what is in hand, or on its way, is newer; and another study may have been chosen meanwhile */
  if (laws->keeping > 0 || laws->hold.in_hand || strcmp (read->name, laws->study->name) != 0)
    return;
  tf_judge_unref (self->judge);
  self->judge = tf_judge_ref (judge);
  g_clear_pointer (&laws->study->divides, tf_divides_unref);
  if (read->divides != NULL)
    laws->study->divides = tf_divides_with_params (read->divides, &laws->study->divide);
  g_free (laws->study->divides_shown);
  laws->study->divides_shown = g_strdup (read->divides_shown);
  if (laws->hold.cycle != 0)
    tf_session_choose_divide (self, laws->hold.cycle, laws->hold.hemisphere, laws->hold.handle);
}
