/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-note.h"

/* One row a code, in the order of the code's name. */
const TfNoteKind tf_note_kinds_ledger[] = {
  { "check-act-chain", TF_NOTE_STRONG,
    N_ ("{0}: act {2} of replica {1} does not continue the one before it; an act was changed or taken out: go back to a backup") },
  { "check-act-gap", TF_NOTE_STRONG,
    N_ ("{0}: acts of replica {1} are missing before or at number {2}; go back to a backup") },
  { "check-act-hash", TF_NOTE_STRONG,
    N_ ("{0}: act {2} of replica {1} is not as it was written; go back to a backup") },
  { "check-act-unreadable", TF_NOTE_STRONG,
    N_ ("{0}: act {2} of replica {1} cannot be read or names what is not there; go back to a backup") },
  { "check-file", TF_NOTE_STRONG, N_ ("{0}: the file is damaged ({1}); go back to a backup") },
  { "check-machine-row", TF_NOTE_STRONG,
    N_ ("{0}: row {2} of table {1} is not as it was written; fill the frames into a new ledger, or go back to a backup") },
  { "check-passages", TF_NOTE_STRONG,
    N_ ("{0}: the passages of {1} marks or hints are not those that follow makes of them; run follow again") },
  { "check-points", TF_NOTE_STRONG,
    N_ ("{0}: the points of the wings differ from the marks and hints ({2} missing, {3} that should not be there)") },
  { "check-projection", TF_NOTE_STRONG,
    N_ ("{0}: table {1} differs from what the acts say ({2} rows missing, {3} that should not be there); go back to a backup") },
  { "check-reference", TF_NOTE_STRONG, N_ ("{0}: a row of table {1} names a row of table {2} that is not there") },
  { "check-schema", TF_NOTE_STRONG, N_ ("{0}: the table, index or view {1} is not as this version makes it") },
  { "clock-set-back", TF_NOTE_CAUTION,
    N_ ("{0}: this machine's clock is {1:.1f} h before the newest act; set it right. The order of acts does not depend on it") },
  { "frame-missing", TF_NOTE_CAUTION,
    N_ ("{0}: the frame {1} is not at that place as it was when it was filled in; its rows were not measured anew. Put it back, or "
        "fill it from where it is now") },
  { "gather-acts-left", TF_NOTE_CAUTION,
    N_ ("{0} also holds {1} acts of people; gathering does not take them. Send them in a parcel") },
  { "ledger-copied", TF_NOTE_INFO,
    N_ ("{0} is a copy of a ledger that is still in its place; what is done here is recorded as a line of its own") },
  { "ledger-from-elsewhere", TF_NOTE_INFO,
    N_ ("{0} was written on another machine or by another user; what is done here is recorded as a line of its own") },
  { "ledger-migrated", TF_NOTE_INFO,
    N_ ("{0} was brought from version {1} to version {2}; the ledger as it was is kept in {3}") },
  { "ledger-newer-version", TF_NOTE_CAUTION,
    N_ ("{0} was written by a newer version of the program (ledger version {1}, this one knows {2}); it can be read and not be "
        "changed. Install the newer version to work in it") },
  { "ledger-not-writable", TF_NOTE_CAUTION,
    N_ ("{0} or its folder cannot be written; it can be read and not be changed. Copy it to a folder of your own to work in it") },
  { "ledger-older-copy", TF_NOTE_CAUTION,
    N_ ("{0} lacks acts that were recorded here before: an older copy was put back, or another copy went on. What is done now is "
        "recorded as a line of its own; look for the newer file") },
  { "measure-differs", TF_NOTE_STRONG,
    N_ ("{0}: {1} on {2}, measured anew, differs in {3}; the ledger or the frame was changed, or another version measures "
        "differently") },
  { "replica-state-unwritten", TF_NOTE_CAUTION,
    N_ ("the folder {0} cannot be written, so the next opening of this ledger will begin a new line of acts; undo will not reach "
        "back past it") },
  { NULL, TF_NOTE_INFO, NULL },
};
