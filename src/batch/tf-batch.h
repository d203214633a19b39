/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What every verb of tiltfield-run shares: reading its words, printing, progress, the frame options, exit codes.
 *
 * Results go to standard output, messages to standard error. A batch never stops at one bad file.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-bands.h"
#include "tf-companion.h"
#include "tf-complexity.h"
#include "tf-frame.h"
#include "tf-study.h"

G_BEGIN_DECLS

enum
{
  TF_EXIT_DONE = 0,    /* all done */
  TF_EXIT_PART = 1,    /* done in part; what failed is listed */
  TF_EXIT_CALL = 2,    /* the words of the call are off */
  TF_EXIT_NOTHING = 3, /* nothing could be done */
};

typedef struct
{
  const char *name;
  const char *words;   /* "FRAME…" */
  const char *summary; /* N_() one sentence */
  const char *example; /* a call that works */
} TfVerb;

typedef int (*TfVerbFunc) (int argc, char **argv);

extern const TfVerb tf_verbs[]; /* ends with name NULL */

/** tf_verb_load: a verb of the module with tables and drawings. NULL: not there; @why: (out): in the loader's words. */
TfVerbFunc tf_verb_load (const char *verb, char **why);

int tf_verb_inspect (int argc, char **argv);
int tf_verb_where (int argc, char **argv);
int tf_verb_measure (int argc, char **argv);
int tf_verb_hints (int argc, char **argv);
int tf_verb_fill (int argc, char **argv);
int tf_verb_gather (int argc, char **argv);
int tf_verb_follow (int argc, char **argv);
int tf_verb_bring (int argc, char **argv);
int tf_verb_laws (int argc, char **argv);
int tf_verb_export (int argc, char **argv);
int tf_verb_check (int argc, char **argv);
int tf_verb_pair (int argc, char **argv);
int tf_verb_power (int argc, char **argv);
int tf_verb_simulate (int argc, char **argv);

/** TfFrameWords: --hdu and --plane, of every verb that takes a frame. */
typedef struct
{
  TfFrameSpec spec;
} TfFrameWords;

/** tf_batch_context: option context of a verb, with its help and example. */
GOptionContext *tf_batch_context (const char *verb);
void tf_batch_add_frame_words (GOptionContext *context, TfFrameWords *words);
/** tf_batch_parse: takes @context. FALSE when the words are off: the complaint is printed; return TF_EXIT_CALL. */
gboolean tf_batch_parse (GOptionContext *context, int *argc, char ***argv);
/** tf_batch_usage: complains that the words are off, names the verb's help; returns TF_EXIT_CALL. */
int tf_batch_usage (const char *verb, const char *what);

void tf_batch_print (const char *text);
/** tf_batch_say: one line on standard error. */
void tf_batch_say (const char *text);
void tf_batch_say_error (const GError *error);
/** tf_batch_print_json: the built document and a line end on standard output. */
void tf_batch_print_json (JsonBuilder *builder);

/** tf_batch_build_texts: a member that is an array of the texts. */
void tf_batch_build_texts (JsonBuilder *builder, const char *key, const GPtrArray *texts);

/** tf_batch_work: threads, pool and a cancel flag that Ctrl-C raises. */
TfWork *tf_batch_work_new (guint threads);
void tf_batch_work_free (TfWork *work);

/** tf_batch_read_numbers: "12.5,-3" into exactly @n numbers. */
gboolean tf_batch_read_numbers (const char *text, double *numbers, guint n);

/* -- progress: a line on a terminal, else a plain line a minute -------------------------------- */
typedef struct
{
  gint64 begun, shown; /* monotonic time, us */
  gboolean terminal;
} TfProgress;
void tf_progress_begin (TfProgress *progress);
void tf_progress_step (TfProgress *progress, guint done, guint total);
void tf_progress_end (TfProgress *progress);

/** tf_batch_open_measured: opens a ledger and sees to it that its rows are measured with the study's even floor, as far as their frames
 * are there. NULL with an error. */
TfLedger *
tf_batch_open_measured (const char *path, const TfStudy *study, gboolean with_hints, GError **error);

/* -- tables of text ---------------------------------------------------------------------------- */
typedef struct _TfTable TfTable;
/** tf_table_new: @heads: NULL-ended; the first @n_left columns are set left, the others right. */
TfTable *tf_table_new (guint n_left, const char *const *heads);
void tf_table_free (TfTable *table);
/** tf_table_add: a row, its cells parted by tabulators. */
void tf_table_add (TfTable *table, const char *format, ...) G_GNUC_PRINTF (2, 3);
/** tf_table_dup_text: lines indented by two, each ended. */
char *tf_table_dup_text (const TfTable *table);

/* -- measures ---------------------------------------------------------------------------------- */
/** TfFigures: what may stand beside a measure; each pair may be NULL. */
typedef struct
{
  const TfComplexity *complexity;
  const TfComplexityParams *complexity_params;
  const TfSpots *spots; /* of a companion intensity frame */
  const TfCompanionParams *companion_params;
} TfFigures;
/** tf_batch_build_measure: the whole `measure` object of one frame as the builder's next value. What @figures do not have is null. */
void tf_batch_build_measure (JsonBuilder *builder, const char *path, const TfFrame *frame, const TfMeasure *measure,
                             const char *method, const TfStudy *study, const TfFigures *figures);
/** tf_batch_print_frame_cautions: what holds for all that is measured on the frame, as that its header lies. */
void tf_batch_print_frame_cautions (const TfFrame *frame);
/** tf_batch_dup_measure_text: the same for a person, a few lines. */
char *tf_batch_dup_measure_text (const TfMeasure *measure, const TfStudy *study);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfTable, tf_table_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfWork, tf_batch_work_free)

G_END_DECLS
