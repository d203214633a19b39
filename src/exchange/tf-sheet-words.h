/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Words that the sheets and the list in the window use, in the current language; (transfer full). */

#include "tf-sheets.h"

G_BEGIN_DECLS

char *tf_sheet_dup_time (TfTime time);                              /* "2013-10-14 06:00 UTC" */
char *tf_sheet_dup_change (const TfShiftValue *value);              /* "+12 %"; "" where it cannot be told */
char *tf_sheet_dup_r (const TfShiftRow *row, TfTime now);           /* "21.35, 2.1 d ago" */
char *tf_sheet_dup_class (const TfShiftRow *row);                   /* "βγ (yesterday β)" */
char *tf_sheet_dup_name (const TfShiftRow *row);
char *tf_sheet_dup_others (const TfOthers *others);                 /* "11158 βγ, spots 120 msh" */
char *tf_sheet_dup_note (const TfRegionNote *note, TfTime since);
GPtrArray *tf_sheet_dup_cautions (const TfNotes *cautions);         /* texts, NULL-ended */

G_END_DECLS
