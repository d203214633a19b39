/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* One file on its way into a ledger. Workers read and measure, the caller's thread alone talks to
 * the ledger. A job goes through the workers twice: first for its checksum and header, then,
 * unless the ledger knows it, for its pixels. */

#include "tf-intake.h"

G_BEGIN_DECLS

typedef enum
{
  JOB_LOOK, /* checksum and header */
  JOB_FIND, /* pixels, noise, hints */
} TfJobStage;

typedef struct
{
  TfJobStage stage;
  char *path;
  char *checksum;
  int hdu, plane;
  TfFrameInfo *info;
  double noise_gauss;
  GPtrArray *hints; /* NULL when none were asked for */
  GArray *complexity; /* TfComplexityRow, one a hint */
  char *failure;    /* sentence; NULL when well */
} TfJob;

typedef struct
{
  const TfIntakeParams *params;
  TfPool *pool;
  GAsyncQueue *done; /* TfJob, back from the workers */
  char *rule, *method, *complexity;
} TfIntake;

/* The frame's file as it was recorded; NULL when it is gone or another. */
TfFrame *tf_intake_open_frame (TfLedger *ledger, gint64 frame, const TfWork *work);

TfJob *tf_job_new (const char *path);
void tf_job_free (TfJob *job);
/* GFunc of the thread pool: does the stage and pushes the job to @done. */
void tf_job_work (gpointer job, gpointer intake);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfJob, tf_job_free)

G_END_DECLS
