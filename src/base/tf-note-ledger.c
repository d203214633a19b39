/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-note.h"

/* One row a code, in the order of the code's name. */
const TfNoteKind tf_note_kinds_ledger[] = {
  { NULL, TF_NOTE_INFO, NULL },
};
