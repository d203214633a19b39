/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-note.h"

/* One row a code, in the order of the code's name. */
const TfNoteKind tf_note_kinds_laws[] = {
  { "every-mark-is-its-own-passage", TF_NOTE_CAUTION,
    N_ ("Marks are not linked into passages yet: every mark counts as a passage of its own, so one region seen on several "
        "frames is several picks. Intervals cluster by region.") },
  { "hints-counted", TF_NOTE_CAUTION,
    N_ ("{0} of the rows are hints that nobody has judged; {1} are people's marks. A hint is counted as a region of its own.") },
  { "instruments-unscaled-pooled", TF_NOTE_CAUTION,
    N_ ("Frames of several instruments are pooled without a scale between their fields: {0}. Fluxes and floors are not alike.") },
  { "rows-simulated", TF_NOTE_CAUTION, N_ ("{0} of the rows come from invented frames (SIMULATD = T).") },
  { "rows-with-other-floor", TF_NOTE_CAUTION,
    N_ ("{0} rows were measured with another floor than the study's even floor of {1:.1f} G; fluxes near the limb are not quite alike.") },
  { NULL, TF_NOTE_INFO, NULL },
};
