/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfDeed: one thing a person did, on its way into the ledger. It holds all it needs, so that it
 * can wait, be tried again, and be carried out in the writer's thread without anything of the
 * window. */

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef enum
{
  TF_DEED_KEEP,     /* frame, hint, follows, region, origin, outline, measure, method */
  TF_DEED_DROP,     /* hint */
  TF_DEED_WITHDRAW, /* follows: the mark */
  TF_DEED_NOTE,     /* region, text */
  TF_DEED_CLASS,    /* region, frame, text */
  TF_DEED_UNDO,
  TF_DEED_REDO,
  TF_DEED_DRAFT, /* frame, text; NULL text takes the draft away */
} TfDeedKind;

typedef struct
{
  TfDeedKind kind;
  char *person;
  gint64 frame, hint, follows, region;
  TfMarkOrigin origin;
  TfOutline *outline;
  TfMeasure measure;
  char *method;
  char *text;
  /* what came of it */
  gint64 mark;
  char *what;
  gboolean can_undo, can_redo;
} TfDeed;

TfDeed *tf_deed_new (TfDeedKind kind, const char *person);
/** tf_deed_copy: without what came of it. */
TfDeed *tf_deed_copy (const TfDeed *deed);
void tf_deed_free (TfDeed *deed);
/** tf_deed_run: in the writer's thread; sets what came of it. */
gboolean tf_deed_run (TfDeed *deed, TfLedger *ledger, GError **error);
/** tf_deed_name: "keeping the outline": in the current language, for a sentence. */
const char *tf_deed_name (const TfDeed *deed);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfDeed, tf_deed_free)

G_END_DECLS
