/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Study bundles in the window: a zip that a paper's archive keeps (tf-bundle.h). Main thread only. */

#include "tf-session.h"
#include "tf-study.h"

G_BEGIN_DECLS

/** tf_session_save_bundle: the study in view, worked out whole; counted, stopped and told as any file that
 * is saved (tf-save-as.h). */
void tf_session_save_bundle (TfSession *session, const char *path);

/** TfBundleLook: a bundle, and what it says when it is worked out again. */
typedef struct
{
  char *name;               /* of the file */
  TfStudy *study;
  char *program;            /* version that wrote it */
  guint n_rows, n_picks;
  GPtrArray *differences;   /* of char *; empty: the same */
  GPtrArray *not_compared;  /* of char *: other choices that need the ledger */
} TfBundleLook;
void tf_bundle_look_free (TfBundleLook *look);

/** TfBundleTold: @look: borrowed; NULL: @trouble. */
typedef void (*TfBundleTold) (const TfBundleLook *look, const char *trouble, gpointer data);
/** tf_session_look_at_bundle: nothing is kept of it. @data: (nullable): kept alive. */
void tf_session_look_at_bundle (TfSession *session, const char *path, TfBundleTold told, GObject *data);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfBundleLook, tf_bundle_look_free)

G_END_DECLS
