/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLawsStudy: the study as controls: sieve, cycle, verdict, Joy, intervals, each a part that opens.
 * Every option of the methods' own tables is there. */

#include "tf-session-laws.h"

G_BEGIN_DECLS

#define TF_TYPE_LAWS_STUDY (tf_laws_study_get_type ())
G_DECLARE_FINAL_TYPE (TfLawsStudy, tf_laws_study, TF, LAWS_STUDY, GtkWidget)

GtkWidget *tf_laws_study_new (void);
void tf_laws_study_set_session (TfLawsStudy *study, TfSession *session);

G_END_DECLS
