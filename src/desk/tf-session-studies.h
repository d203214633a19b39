/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Named studies of a session: kept in the ledger by deeds, chosen, copied, renamed, put away; editions
 * kept and compared. What is changed and not kept stays in the window under its name.
 * "laws-changed" tells of all of it. Main thread only. */

#include "tf-ledger-scales.h"
#include "tf-ledger-studies.h"
#include "tf-session-laws.h"

G_BEGIN_DECLS

/** tf_session_get_studies: (element-type TfNamed) (nullable): those that stand in the ledger. */
const GPtrArray *tf_session_get_studies (TfSession *session);
/** tf_session_get_editions: (element-type TfNamed) (nullable): without their texts. */
const GPtrArray *tf_session_get_editions (TfSession *session);
/** tf_session_get_kept_version: of the study in view; 0: nothing stands under its name. */
guint tf_session_get_kept_version (TfSession *session);
/** tf_session_is_study_changed: it says other things than what is kept under its name (or, kept never,
 * than the default). Divides do not count: they are deeds of their own. */
gboolean tf_session_is_study_changed (TfSession *session);

/** tf_session_choose_study: one that stands, one set aside in this window, or "default". */
void tf_session_choose_study (TfSession *session, const char *name);
/** tf_session_revert_study: back to what is kept. */
void tf_session_revert_study (TfSession *session);
/** tf_session_keep_study: a deed: a new version, under @name (NULL: its own; another: a copy, its
 * divides with it). FALSE: it cannot be; a person is asked for where one is missing. */
gboolean tf_session_keep_study (TfSession *session, const char *name);
/** tf_session_rename_study: a copy is kept and the old name put away, as one deed. */
gboolean tf_session_rename_study (TfSession *session, const char *name);
/** tf_session_put_away_study: the default study is chosen. */
gboolean tf_session_put_away_study (TfSession *session);
/** tf_session_open_study: a study.json is kept in the ledger as a deed and chosen. What is wrong with
 * the file is said. */
void tf_session_open_study (TfSession *session, GFile *file);
/** tf_session_take_study_of: the same with a study that was read. */
void tf_session_take_study_of (TfSession *session, const TfStudy *study);
void tf_session_save_study (TfSession *session, GFile *file);

/** tf_session_keep_scale: a deed: an instrument's scale. */
gboolean tf_session_keep_scale (TfSession *session, const TfKeptScale *scale);
/** tf_session_keep_edition: works it out off the main thread, then keeps study and edition as one deed. */
void tf_session_keep_edition (TfSession *session, const char *name);
/** tf_session_apply_what_if: takes a choice into the study and keeps it as a new edition. FALSE: the
 * study has no option that says so. */
gboolean tf_session_apply_what_if (TfSession *session, const char *what_if);
/** tf_session_makes_edition: one, or a comparison, is being worked out (tf-study-task.h). */
gboolean tf_session_makes_edition (TfSession *session);

/** TfCompared: @differences: (element-type utf8): sentences, none when they are the same; NULL: @trouble. */
typedef void (*TfCompared) (const GPtrArray *differences, const char *trouble, gpointer data);
/** tf_session_compare_editions: @second: NULL: the study as it is now. @data: (nullable): kept alive. */
void tf_session_compare_editions (TfSession *session, const char *first, const char *second,
                                  TfCompared compared, GObject *data);

G_END_DECLS
