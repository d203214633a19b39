/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDeed: one thing a person did, on its way into the ledger. It holds all it needs, so that it
 * can wait, be tried again, and be carried out in the writer's thread without anything of the
 * window. */

#include "tf-ledger-divides.h"
#include "tf-ledger-follow.h"
#include "tf-ledger-scales.h"

G_BEGIN_DECLS

typedef enum
{
  TF_DEED_KEEP,     /* frame, hint, follows, region, joins, origin, outline, measure, method, pixels */
  TF_DEED_DROP,     /* hint */
  TF_DEED_WITHDRAW, /* follows: the mark */
  TF_DEED_NOTE,     /* region, text */
  TF_DEED_CLASS,    /* region, frame, text */
  TF_DEED_LABEL,    /* region, text */
  TF_DEED_EXTERNAL, /* region, text: its number in an official list */
  TF_DEED_LINK,     /* ends, text: the reason: both are one region */
  TF_DEED_CUT,      /* likewise: they are not */
  TF_DEED_UNDO,
  TF_DEED_REDO,
  TF_DEED_DRAFT, /* frame, text; NULL text takes the draft away */
  TF_DEED_TOGETHER, /* parts, as: several as one, recorded and undone together */
  TF_DEED_GEOMETRY, /* frame, text: a TfCorrection; "" takes it back to the header */
  TF_DEED_DIVIDE, /* study, divide */
  TF_DEED_SETTLE,   /* region, author: that person's note on it is settled */
  TF_DEED_HAND_OVER,
  TF_DEED_BRING,    /* text: path of a daily region summary */
  TF_DEED_TANGLE,   /* frame: complexity of the marks on it that have none */
  TF_DEED_STUDY,    /* study, text: a new version; "" puts it away */
  TF_DEED_EDITION,  /* study, name, text */
  TF_DEED_SCALE,    /* scale */
} TfDeedKind;

/** TfJoins: by what a mark that is kept without a region finds the one its passage has. */
typedef enum
{
  TF_JOINS_NOTHING,
  TF_JOINS_BY_HINT,
  TF_JOINS_BY_OUTLINE,
} TfJoins;

typedef struct
{
  TfDeedKind kind;
  char *person;
  gint64 frame, hint, follows, region, author;
  TfJoins joins;
  gboolean ends_draft; /* what is kept was the draft */
  TfMarkOrigin origin;
  TfOutline *outline;
  TfMeasure measure;
  TfFrame *pixels; /* when @measure has no outline term yet: it is measured before it is kept; else NULL */
  TfMeasureParams params;
  char *method;
  char *text;
  TfSight ends[2];
  GPtrArray *parts; /* of TfDeed, the same person's */
  const char *as;   /* static: "split", "join", "several" */
  char *study, *name;
  TfMovedDivide *divide;
  TfKeptScale *scale;
  /* what came of it */
  gint64 mark; /* together: the first one kept */
  TfUndone undone;
  gboolean can_undo, can_redo;
} TfDeed;

TfDeed *tf_deed_new (TfDeedKind kind, const char *person);
/** tf_deed_new_together: @as: static; parts are added with tf_deed_add (transfer full). */
TfDeed *tf_deed_new_together (const char *as, const char *person);
void tf_deed_add (TfDeed *deed, TfDeed *part);
/** tf_deed_copy: without what came of it. */
TfDeed *tf_deed_copy (const TfDeed *deed);
void tf_deed_free (TfDeed *deed);
/** tf_deed_run: in the writer's thread; sets what came of it. */
gboolean tf_deed_run (TfDeed *deed, TfLedger *ledger, GError **error);
/** tf_deed_name: "keeping the outline": in the current language, for a sentence. */
const char *tf_deed_name (const TfDeed *deed);
/** tf_deed_word: of the ledger's own English word for a deed or several as one ("keep", "split"). */
const char *tf_deed_word (const char *what);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfDeed, tf_deed_free)

G_END_DECLS
