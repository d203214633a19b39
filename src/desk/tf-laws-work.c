/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-laws-work.h"

#include "tf-lane.h"
#include "tf-study-live.h"

enum
{
  MANY = 30000 /* rows from which on only what a divide changes is worked out while it is in hand */
};

/* Made of a full answer, moved from question to question; in the lane's thread alone. */
typedef struct
{
  TfLawsAnswer *before;
  TfStudyLive *live; /* NULL: the study's line cannot be kept */
} Live;

typedef struct
{
  guint serial, age;
  TfStudy *study;
  TfLawsAsk ask;
  TfStudyTaken *rows; /* NULL: to be read */
  TfLawsAnswer *quick; /* of this question; NULL: not answered yet */
  TfLawsAnswer *before; /* of a moving one: the last full answer, from which it moves; NULL */
  Live *live;           /* the work's own */
  TfCancel *stop;       /* of its draws: raised when a newer question comes; NULL */
} Question;

struct _TfLawsWork
{
  TfLane *lane;
  GCancellable *cancellable;
  TfLawsAnswered answered;
  gpointer data;
  Question *waiting; /* the newest that is not begun */
  gboolean reading, drawing;
  TfCancel *stop; /* of the draws in hand; NULL */
  guint serial; /* of the newest question */
  guint age;    /* rises when the ledger changes */
  TfStudyTaken *rows;
  Question *to_draw; /* the newest whose draws are not begun */
  TfLawsAnswer *full; /* the last that was worked out from all rows */
  Live live;
};

static void
question_free (gpointer data)
{
  Question *question = data;
  if (question == NULL)
    return;
  tf_study_free (question->study);
  tf_study_taken_unref (question->rows);
  tf_laws_answer_unref (question->quick);
  tf_laws_answer_unref (question->before);
  g_clear_pointer (&question->stop, tf_cancel_unref);
  g_free (question);
}

/* -- answers --------------------------------------------------------------------------------- */

static void
answer_clear (gpointer data)
{
  TfLawsAnswer *answer = data;
  tf_study_free (answer->study);
  if (answer->before == NULL)
    tf_findings_free (answer->findings);
  tf_laws_answer_unref (answer->before);
  tf_laws_charts_unref (answer->charts);
  g_free (answer->words);
  g_free (answer->trouble);
}

TfLawsAnswer *
tf_laws_answer_ref (TfLawsAnswer *answer)
{
  return g_atomic_rc_box_acquire (answer);
}

void
tf_laws_answer_unref (TfLawsAnswer *answer)
{
  if (answer != NULL)
    g_atomic_rc_box_release_full (answer, answer_clear);
}

static TfLawsAnswer *
answer_new (const Question *question, TfFindingsDepth depth)
{
  TfLawsAnswer *answer = g_atomic_rc_box_new0 (TfLawsAnswer);
  answer->study = tf_study_copy (question->study);
  answer->stretch = question->ask.stretch;
  answer->depth = depth;
  return answer;
}

static TfLawsAnswer *
work_out (const Question *question, TfFindingsDepth depth, TfLedger *ledger)
{
  TfLawsAnswer *answer = answer_new (question, depth);
  answer->findings
      = tf_study_again (question->rows, question->study, &question->ask.stretch, depth, ledger,
                        question->quick != NULL ? question->quick->findings : NULL, question->stop);
  if (answer->findings == NULL)
    {
      tf_laws_answer_unref (answer);
      return NULL;
    }
  g_autoptr (TfDivides) computed = tf_divides_new (&question->study->divide);
  TfLawsFacts facts = { .sample = answer->findings->sample,
                        .verdicts = answer->findings->verdicts,
                        .hale = answer->findings->hale,
                        .joy = answer->findings->joy,
                        .emergence = answer->findings->emergence,
                        .divides = answer->study->divides != NULL ? answer->study->divides : computed,
                        .plain = question->ask.plain,
                        .hale_params = question->study->hale,
                        .joy_params = question->study->joy,
                        .all_relations = question->ask.all_relations };
  answer->charts = tf_laws_charts_new (&facts);
  answer->words = tf_findings_dup_words (answer->findings, question->study);
  answer->complete = depth == TF_FINDINGS_COMPLETE || question->ask.moving;
  return answer;
}

/* -- while a divide moves ---------------------------------------------------------------------- */

static void
live_clear (Live *live)
{
  g_clear_pointer (&live->live, tf_study_live_free);
  g_clear_pointer (&live->before, tf_laws_answer_unref);
}

static void
make_live (Live *live, TfLawsAnswer *before)
{
  if (live->before == before)
    return;
  live_clear (live);
  live->before = tf_laws_answer_ref (before);
  live->live = tf_study_live_new (before->study, before->findings);
}

/* The numbers that a divide moves, all else as in the answer before it was taken in hand. NULL: they
 * cannot be kept. */
static TfLawsAnswer *
move (const Question *question)
{
  Live *live = question->live;
  make_live (live, question->before);
  if (live->live == NULL)
    return NULL;
  tf_study_live_move (live->live, question->study);
  TfLawsAnswer *answer = answer_new (question, TF_FINDINGS_QUICK);
  g_autoptr (TfDivides) computed = tf_divides_new (&question->study->divide);
  const TfLawsFacts facts = { .hale = tf_study_live_hale (live->live),
                              .joy = tf_study_live_joy (live->live),
                              .divides = answer->study->divides != NULL ? answer->study->divides
                                                                        : computed,
                              .plain = question->ask.plain };
  answer->before = tf_laws_answer_ref (question->before);
  answer->findings = question->before->findings;
  answer->charts = tf_laws_charts_moved (question->before->charts, &facts);
  answer->words = tf_study_live_dup_words (live->live, question->study);
  answer->complete = TRUE;
  return answer;
}

static gpointer
prepare (TfLedger *ledger, gpointer data, GError **error)
{
  const Question *question = data;
  make_live (question->live, question->before);
  return NULL;
}

static void
prepared (GObject *source, GAsyncResult *result, gpointer data)
{
  tf_lane_finish (result, NULL);
}

/* From what a divide may be moved. Of many rows that is made ready before one is taken in hand. */
static void
keep_full (TfLawsWork *work, const Question *question, TfLawsAnswer *answer)
{
  if (question->age != work->age || answer->findings == NULL || answer->before != NULL)
    return;
  tf_laws_answer_unref (work->full);
  work->full = tf_laws_answer_ref (answer);
  if (question->rows == NULL || tf_study_taken_get_n (question->rows) <= MANY)
    return;
  Question *ready = g_new0 (Question, 1);
  ready->before = tf_laws_answer_ref (answer);
  ready->live = &work->live;
  tf_lane_push (work->lane, NULL, work->cancellable, prepare, ready, question_free, NULL, prepared,
                NULL);
}

/* -- the draws: a thread of their own, so that the next question need not wait for them --------- */

static void draw_next (TfLawsWork *work);

static void
draw (GTask *task, gpointer source, gpointer data, GCancellable *cancellable)
{
  g_task_return_pointer (task, work_out (data, TF_FINDINGS_COMPLETE, NULL),
                         (GDestroyNotify)tf_laws_answer_unref);
}

static void
drawn (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfLawsAnswer) answer = g_task_propagate_pointer (G_TASK (result), NULL);
  if (g_cancellable_is_cancelled (g_task_get_cancellable (G_TASK (result))))
    return; /* the work is gone */
  TfLawsWork *work = data;
  const Question *question = g_task_get_task_data (G_TASK (result));
  work->drawing = FALSE;
  if (answer != NULL && question->serial == work->serial)
    {
      keep_full (work, question, answer);
      work->answered (answer, work->data);
    }
  draw_next (work);
}

static void
draw_next (TfLawsWork *work)
{
  if (work->drawing || work->to_draw == NULL)
    return;
  g_autoptr (GTask) task = g_task_new (NULL, work->cancellable, drawn, work);
  g_task_set_return_on_cancel (task, FALSE);
  g_task_set_task_data (task, g_steal_pointer (&work->to_draw), question_free);
  work->drawing = TRUE;
  Question *question = g_task_get_task_data (task);
  g_clear_pointer (&work->stop, tf_cancel_unref);
  work->stop = tf_cancel_new ();
  question->stop = tf_cancel_ref (work->stop);
  g_task_run_in_thread (task, draw);
}

/* -- the quick answer ------------------------------------------------------------------------ */

typedef struct
{
  TfLawsAnswer *answer;
  Question *question; /* its rows were read */
} Quick;

static void
quick_free (gpointer data)
{
  Quick *quick = data;
  tf_laws_answer_unref (quick->answer);
  question_free (quick->question);
  g_free (quick);
}

static Question *
question_copy (const Question *question)
{
  Question *copy = g_memdup2 (question, sizeof *question);
  copy->study = tf_study_copy (question->study);
  copy->rows = question->rows != NULL ? tf_study_taken_ref (question->rows) : NULL;
  copy->quick = NULL;
  copy->before = NULL;
  copy->stop = NULL;
  return copy;
}

static TfLawsAnswer *
read_rows (Question *question, TfLedger *ledger)
{
  g_autoptr (GError) error = NULL;
  question->rows = tf_study_take (question->study, ledger, &error);
  if (question->rows != NULL)
    return NULL;
  TfLawsAnswer *answer = answer_new (question, TF_FINDINGS_QUICK);
  answer->empty = g_error_matches (error, TF_STUDY_ERROR, TF_STUDY_ERROR_EMPTY);
  answer->trouble = g_strdup (error->message);
  answer->complete = TRUE;
  return answer;
}

static gpointer
quickly (TfLedger *ledger, gpointer data, GError **error)
{
  const Question *asked = data;
  Quick *quick = g_new0 (Quick, 1);
  quick->question = question_copy (asked);
  if (asked->before != NULL)
    quick->answer = move (asked);
  if (quick->answer != NULL)
    return quick;
  if (quick->question->rows == NULL)
    quick->answer = read_rows (quick->question, ledger);
  if (quick->answer != NULL)
    return quick;
  gboolean many = tf_study_taken_get_n (quick->question->rows) > MANY;
  quick->answer = work_out (quick->question, many && quick->question->ask.moving
                                                 ? TF_FINDINGS_QUICK
                                                 : TF_FINDINGS_WHAT_IF,
                            ledger);
  return quick;
}

static void begin_next (TfLawsWork *work);

static void
begun (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (GError) error = NULL;
  Quick *quick = tf_lane_finish (result, &error);
  if (g_cancellable_is_cancelled (g_task_get_cancellable (G_TASK (result))))
    {
      g_clear_pointer (&quick, quick_free);
      return;
    }
  TfLawsWork *work = data;
  work->reading = FALSE;
  if (quick != NULL)
    {
      if (quick->question->rows != NULL && quick->question->age == work->age)
        g_clear_pointer (&work->rows, tf_study_taken_unref);
      if (quick->question->rows != NULL && quick->question->age == work->age)
        work->rows = tf_study_taken_ref (quick->question->rows);
      /* while a divide moves each answer is shown, the newest as it comes; more is on its way */
      if (quick->question->serial != work->serial)
        quick->answer->complete = FALSE;
      keep_full (work, quick->question, quick->answer);
      if (quick->question->serial == work->serial || quick->question->ask.moving)
        work->answered (quick->answer, work->data);
      if (quick->question->serial == work->serial && !quick->answer->complete)
        {
          g_clear_pointer (&work->to_draw, question_free);
          work->to_draw = g_steal_pointer (&quick->question);
          work->to_draw->quick = tf_laws_answer_ref (quick->answer);
          draw_next (work);
        }
      quick_free (quick);
    }
  begin_next (work);
}

/* Whether the last full answer is to the same question but for where the divides stand. */
static gboolean
may_move (const TfLawsWork *work, const Question *question)
{
  if (work->full == NULL || question->rows == NULL
      || tf_study_taken_get_n (question->rows) <= MANY
      || !tf_stretch_is_same (&work->full->stretch, &question->ask.stretch))
    return FALSE;
  const TfStudy *full = work->full->study;
  g_autoptr (TfStudy) still = tf_study_copy (question->study);
  g_clear_pointer (&still->divides, tf_divides_unref);
  g_clear_pointer (&still->divides_shown, g_free);
  still->divides = full->divides != NULL ? tf_divides_ref (full->divides) : NULL;
  still->divides_shown = g_strdup (full->divides_shown);
  g_autofree char *before = tf_study_dup_text (full), *now = tf_study_dup_text (still);
  return g_str_equal (before, now);
}

static void
begin_next (TfLawsWork *work)
{
  if (work->reading || work->waiting == NULL)
    return;
  Question *question = g_steal_pointer (&work->waiting);
  if (work->rows != NULL && tf_study_taken_serves (work->rows, question->study))
    question->rows = tf_study_taken_ref (work->rows);
  if (question->ask.moving && may_move (work, question))
    question->before = tf_laws_answer_ref (work->full);
  question->live = &work->live;
  work->reading = TRUE;
  tf_lane_push (work->lane, NULL, work->cancellable, quickly, question, question_free, quick_free,
                begun, work);
}

/* What would be overtaken need not be drawn to its end. */
static void
stop_drawing (TfLawsWork *work)
{
  if (work->stop != NULL)
    tf_cancel_raise (work->stop);
  g_clear_pointer (&work->stop, tf_cancel_unref);
}

/* -- the work -------------------------------------------------------------------------------- */

TfLawsWork *
tf_laws_work_new (const char *path, TfLawsAnswered answered, gpointer data)
{
  g_return_val_if_fail (path != NULL && answered != NULL, NULL);
  TfLawsWork *work = g_new0 (TfLawsWork, 1);
  work->lane = tf_lane_new (path, 0);
  work->cancellable = g_cancellable_new ();
  work->answered = answered;
  work->data = data;
  return work;
}

void
tf_laws_work_free (TfLawsWork *work)
{
  if (work == NULL)
    return;
  g_cancellable_cancel (work->cancellable);
  stop_drawing (work);
  tf_lane_close (work->lane);
  g_clear_object (&work->cancellable);
  question_free (work->waiting);
  question_free (work->to_draw);
  tf_study_taken_unref (work->rows);
  live_clear (&work->live);
  tf_laws_answer_unref (work->full);
  g_free (work);
}

void
tf_laws_work_ask (TfLawsWork *work, const TfStudy *study, const TfLawsAsk *ask)
{
  g_return_if_fail (work != NULL && study != NULL && ask != NULL);
  question_free (work->waiting);
  stop_drawing (work);
  work->waiting = g_new0 (Question, 1);
  work->waiting->serial = ++work->serial;
  work->waiting->age = work->age;
  work->waiting->study = tf_study_copy (study);
  work->waiting->ask = *ask;
  begin_next (work);
}

void
tf_laws_work_forget (TfLawsWork *work)
{
  g_return_if_fail (work != NULL);
  work->age++;
  g_clear_pointer (&work->rows, tf_study_taken_unref);
  g_clear_pointer (&work->full, tf_laws_answer_unref);
}
