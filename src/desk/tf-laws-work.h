/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLawsWork: what the Laws bench shows is worked out here, off the main thread. Questions are
 * numbered; while one is being answered only the newest waiting one is kept, and an answer that a
 * newer question has overtaken is dropped. Each question is answered twice: quickly (counts, exact
 * intervals, lines), then with what takes draws.
 *
 * It owns a connection to the ledger of its own; rows are read once and kept until the ledger
 * changes. Main thread only. */

#include "tf-laws-charts.h"
#include "tf-study-again.h"

G_BEGIN_DECLS

/** TfLawsAnswer: immutable, reference counted. */
typedef struct _TfLawsAnswer
{
  TfStudy *study;          /* as asked, with the divides of the answer */
  TfStretch stretch;
  TfFindingsDepth depth;
  TfFindings *findings;    /* NULL when there is nothing: trouble says why */
  TfLawsCharts *charts;    /* as findings */
  char *words;             /* as findings */
  char *trouble;           /* in words; NULL */
  gboolean empty;          /* no mark (and, when asked for, no hint) is there */
  gboolean complete;       /* nothing more comes to this question */
  struct _TfLawsAnswer *before; /* of many rows while a divide moves: whose findings these are; only charts
                                    and words have moved. NULL: its own */
} TfLawsAnswer;
TfLawsAnswer *tf_laws_answer_ref (TfLawsAnswer *answer);
void tf_laws_answer_unref (TfLawsAnswer *answer);

typedef struct _TfLawsWork TfLawsWork;
/** TfLawsAnswered: @answer: borrowed. */
typedef void (*TfLawsAnswered) (TfLawsAnswer *answer, gpointer data);

TfLawsWork *tf_laws_work_new (const char *path, TfLawsAnswered answered, gpointer data);
/** tf_laws_work_free: waits for what is in hand; nothing is answered afterwards. */
void tf_laws_work_free (TfLawsWork *work);

/** TfLawsAsk: how a question is to be answered. */
typedef struct
{
  TfStretch stretch;
  gboolean moving;        /* a divide is in hand: the quick answer, then nothing that takes draws */
  gboolean plain;         /* verdicts hidden on its wings */
  gboolean all_relations; /* on the Joy plot */
} TfLawsAsk;
/** tf_laws_work_ask: @study: copied. */
void tf_laws_work_ask (TfLawsWork *work, const TfStudy *study, const TfLawsAsk *ask);
/** tf_laws_work_forget: the ledger changed: rows are read anew at the next question. */
void tf_laws_work_forget (TfLawsWork *work);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfLawsAnswer, tf_laws_answer_unref)

G_END_DECLS
