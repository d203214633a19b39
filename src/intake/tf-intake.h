/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Frames into a ledger. Skips what is there unchanged, goes on past bad files, can be stopped and started again at any
 * point with the same result: all it writes are machine rows with content ids. */

#include <glib.h>

#include "tf-complexity.h"
#include "tf-hint.h"
#include "tf-ledger.h"
#include "tf-measure.h"

G_BEGIN_DECLS

typedef enum
{
  TF_INTAKE_ADDED,
  TF_INTAKE_THERE,    /* unchanged, nothing done */
  TF_INTAKE_REFUSED,  /* recorded with its reason, now or before */
  TF_INTAKE_FAILED,   /* could not be read: nothing recorded */
} TfIntakeOutcome;

typedef struct
{
  const char *path;
  TfIntakeOutcome outcome;
  gint64 frame;          /* local key; 0 when FAILED */
  guint n_hints;
  const char *message;   /* REFUSED, FAILED: one sentence: file, reason, what to do */
  guint done, total;
} TfIntakeReport;
/** TfIntakeFunc: called in the thread that called tf_intake_fill, once a file, in any order of files. */
typedef void (*TfIntakeFunc) (const TfIntakeReport *report, gpointer data);

typedef struct
{
  guint workers;         /* frames at a time, one thread each; 0: one a core */
  guint part, parts;     /* take every parts-th file from the part-th (1-based); 0, 0: all */
  gboolean no_hints;
  TfFrameSpec spec;
  TfHintParams hint;
  TfMeasureParams measure;
  TfComplexityParams complexity; /* of every hint */
} TfIntakeParams;
void tf_intake_params_init (TfIntakeParams *params);

/** tf_intake_list: (transfer full) NULL-ended: files of the given files and folders (*.fits *.fit *.fts *.fits.gz *.fz, folders deep), each once, in name order. */
char **tf_intake_list (char *const *paths, GError **error);
/** tf_intake_find_moved: frames of the ledger whose file is not where it was are looked for, by checksum, in files and folders @paths; the
 * ledger then knows their new place. Nothing else is taken in. @n_missing: before. Cancelled: what was found so far stays. */
gboolean tf_intake_find_moved (TfLedger *ledger, char *const *paths, TfCancel *cancel, guint *n_missing, guint *n_found, GError **error);
/** tf_intake_fill: FALSE with an error only when nothing could be done (ledger not writable) or cancelled. */
gboolean tf_intake_fill (TfLedger *ledger, char *const *files, const TfIntakeParams *params, TfCancel *cancel,
                         TfIntakeFunc func, gpointer data, GError **error);
/** tf_intake_measure_even: measures the rows of @query with one even floor, G, where that was not done yet, and keeps that beside what is there.
 * Rows whose frame is gone, and a ledger that cannot be written, are left as they are. Stops between frames when cancelled. */
gboolean tf_intake_measure_even (TfLedger *ledger, double floor_gauss, const TfRowQuery *query, const TfWork *work, GError **error);
/** tf_intake_complexity: figures of the marks and hints of @query that nobody worked out yet: of an older ledger, or kept when the program was
 * stopped. As tf_intake_measure_even goes on where a frame is gone. @n: (out): rows worked out */
gboolean tf_intake_complexity (TfLedger *ledger, const TfRowQuery *query, const TfComplexityParams *params, const TfWork *work, guint *n,
                               GError **error);
/** tf_intake_remeasure: re-measures at most @limit rows from their frames and adds "measure-differs" / "frame-missing" to @findings. */
gboolean tf_intake_remeasure (TfLedger *ledger, guint limit, TfNotes *findings, GError **error);

G_END_DECLS
