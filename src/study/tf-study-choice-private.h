/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfChoice: another choice of a what-if. It changes a copy of the study and says from where on the work
 * must be done again. */

#include "tf-study.h"

G_BEGIN_DECLS

typedef enum
{
  TF_FROM_FIT,      /* the verdicts stay */
  TF_FROM_VERDICTS, /* the picks stay */
  TF_FROM_PICKS,    /* the marks stay */
  TF_FROM_MARKS,    /* the rows stay */
  TF_FROM_ROWS,     /* other rows of the ledger */
} TfChoiceFrom;

/* A study with what its options cannot say. */
typedef struct
{
  TfStudy study;
  double later_s;       /* every minimum comes that much later */
  gboolean bracketed;   /* picks with their greatest flux between other marks alone */
  gboolean marks_alone; /* no hints */
  double floor_factor;  /* of the even floor; 0: each row's own floor */
  gboolean turn_scales; /* scales of instruments on where they are off, off where on */
  gboolean with_hints;  /* rows with the hints */
} TfVariant;

typedef struct
{
  const char *name, *title;
  TfChoiceFrom from;
  /* Changes the study; FALSE: it is so already. */
  gboolean (*change) (TfVariant *variant);
} TfChoice;

/** tf_choices: in the order in which they are shown; ends with name NULL. The names stand in files: never
 * renamed; new ones at a fit place. */
extern const TfChoice tf_choices[];
guint tf_choices_get_n (void);

G_END_DECLS
