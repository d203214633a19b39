/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The laws' part of TfSession, for tf-session-*.c alone. */

#include "tf-session-laws.h"
#include "tf-session-private.h"

G_BEGIN_DECLS

struct _TfSessionLaws
{
  TfStudy *study; /* with the divides of the ledger */
  TfLawsWork *work;
  TfLawsAnswer *answer;
  gboolean shown, awaits, all_relations;

  TfDivideHold hold;
  TfDivides *moved;    /* all divides with the one in hand; NULL: none is in hand */
  guint keeping;       /* divides on their way into the ledger */
  gboolean show_polarity, was_shown; /* was_shown: at any time while the one in hand moved */

  GPtrArray *studies, *editions; /* of TfNamed: as they stand in the ledger; NULL: not read yet */
  char *kept_text;               /* what stands under the study's name, to compare; NULL: nothing */
  GHashTable *set_aside;         /* name -> TfStudy: changed and not kept when another was chosen */
  struct _TfStudyTask *task;     /* a study is being worked out whole; NULL */
};

void tf_session_laws_init (TfSession *session);
void tf_session_laws_finalize (TfSession *session);
/** tf_session_laws_close: the ledger is let go. */
void tf_session_laws_close (TfSession *session);
void tf_session_ask_laws (TfSession *session);
/** tf_session_forget_laws: the ledger changed. */
void tf_session_forget_laws (TfSession *session);
/** tf_session_take_divides: as a reading of the ledger brings them, with the judge made of them. */
void tf_session_take_divides (TfSession *session, const TfStudy *read, TfJudge *judge);
/** tf_session_judge_divide: dots that came from the ledger, judged by what is in hand or on its way. */
void tf_session_judge_divide (TfSession *session);
/** tf_session_divide_saved: the deed is in the ledger, or will not come. */
void tf_session_divide_saved (TfSession *session);
/** tf_session_read_studies: the ledger may have others by now. */
void tf_session_read_studies (TfSession *session);
void tf_session_studies_close (TfSession *session);
/** tf_session_take_study: (transfer full): the study from now on, with its divides. */
void tf_session_take_study (TfSession *session, TfStudy *study);
/** tf_session_study_deed: (transfer full): keeps it. tf_session_push_study: (transfer full): a deed about
 * a study; what the window has is newer until it is in the ledger. */
TfDeed *tf_session_study_deed (TfSession *session, const TfStudy *study);
/** tf_session_is_same_reach: in what is moved on the wings for all divides: how far they reach, their
 * band, the provisional minimum. */
gboolean tf_session_is_same_reach (const TfDivideParams *a, const TfDivideParams *b);
/** tf_session_divide_options_deed: (transfer full): keeps the study as it was kept, but for those; what
 * else is changed stays not kept. */
TfDeed *tf_session_divide_options_deed (TfSession *session, const TfDivideParams *params);
void tf_session_push_study (TfSession *session, TfDeed *deed);

G_END_DECLS
