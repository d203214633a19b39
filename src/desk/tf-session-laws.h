/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The part of TfSession that is about the laws: the study, what it finds, and the divides, of which
 * one at a time can be in hand. Main thread only. Signal "laws-changed": any of these. */

#include "tf-laws-work.h"
#include "tf-session.h"
#include "tf-wings.h"

G_BEGIN_DECLS

/* -- the study and its findings */
const TfStudy *tf_session_get_study (TfSession *session);
/** tf_session_set_study: options and sieve; divides are those of the ledger, whatever @study has. */
void tf_session_set_study (TfSession *session, const TfStudy *study);
/** tf_session_show_laws: whether the findings are looked at; they are worked out only then. */
void tf_session_show_laws (TfSession *session, gboolean shown);
gboolean tf_session_shows_laws (TfSession *session);
/** tf_session_get_laws: (nullable): the newest answer; borrowed. */
TfLawsAnswer *tf_session_get_laws (TfSession *session);
/** tf_session_awaits_laws: more is on its way. */
gboolean tf_session_awaits_laws (TfSession *session);
gboolean tf_session_get_all_relations (TfSession *session);
void tf_session_set_all_relations (TfSession *session, gboolean all);

/* -- divides. A line belongs to one minimum and hemisphere; how far divides reach in time, their unsure
 * band and the provisional next minimum are the study's, for all of them. */
enum
{
  TF_DIVIDE_HANDLES = 3 /* where it begins to act, at the minimum, where it ceases */
};
typedef struct
{
  int cycle, hemisphere;           /* cycle 0: none is chosen */
  int handle;                      /* TfWingsHandle */
  gboolean in_hand;                /* being moved: not yet kept */
  gboolean drawn;                  /* its line is, too */
  TfTime times[TF_DIVIDE_HANDLES]; /* of the chosen one */
  double lats[TF_DIVIDE_HANDLES];
  TfDivideParams params;           /* the study's, as moved */
} TfDivideHold;
const TfDivideHold *tf_session_get_divide (TfSession *session);
/** tf_session_choose_divide: cycle 0: none. What is in hand is put back first. */
void tf_session_choose_divide (TfSession *session, int cycle, int hemisphere, int handle);
/** tf_session_step_divide: the next (1) or previous (-1) divide within @from_year to @to_year, or the
 * nearest to their middle. */
void tf_session_step_divide (TfSession *session, int step, double from_year, double to_year);
/** tf_session_turn_divide: another handle of the one in hand, which stays in hand. */
void tf_session_turn_divide (TfSession *session, int handle);
/** tf_session_can_move_divide: one is chosen and the ledger can be written to. */
gboolean tf_session_can_move_divide (TfSession *session);
/** tf_session_move_divide: its handle, or all of it, by so many degrees of |lat|, or its band by so many
 * wider; it is in hand from then on. Numbers follow; dots are plain unless polarity is shown. */
void tf_session_move_divide (TfSession *session, double degrees);
/** tf_session_can_shift_divide: what is chosen of it can go in time: an end, or a provisional minimum. */
gboolean tf_session_can_shift_divide (TfSession *session);
/** tf_session_shift_divide: it goes by so many months; in hand from then on. */
void tf_session_shift_divide (TfSession *session, int months);
/** tf_session_take_provisional: the provisional next minimum is chosen; where there is none, one is in
 * hand at the mean length of a cycle after the last. FALSE: nothing can be moved now. */
gboolean tf_session_take_provisional (TfSession *session);
/** tf_session_keep_divide: lets it go where it is: a deed. FALSE when none is in hand. */
gboolean tf_session_keep_divide (TfSession *session);
/** tf_session_put_back_divide: as if it had not been taken in hand. */
gboolean tf_session_put_back_divide (TfSession *session);
/** tf_session_compute_divide: sets what is chosen back to computed: a deed. Of an end, how far it reaches,
 * too; of the band, its width alone; a provisional minimum is taken away. */
gboolean tf_session_compute_divide (TfSession *session);
gboolean tf_session_get_show_polarity (TfSession *session);
/** tf_session_set_show_polarity: while moving; what is moved so says so for ever. */
void tf_session_set_show_polarity (TfSession *session, gboolean show);
/** tf_session_is_plain: dots are plain and verdicts hidden now. */
gboolean tf_session_is_plain (TfSession *session);

/* -- the stretch picked on the wings, as the study takes it */
/** tf_session_pick_band: years and latitudes; NaN: all. */
void tf_session_pick_band (TfSession *session, double from, double to, double low, double high);
TfStretch tf_session_get_stretch (TfSession *session);
/** tf_session_pick_named: "today" (the day of the newest frame), "days" (three days up to the frame
 * in view), "passage" (of the chosen region, else of the centre of the frame in view), "rotation"
 * (Carrington, of the frame in view), "cycle" (by its minima), "all". FALSE when there is no such. */
gboolean tf_session_pick_named (TfSession *session, const char *name);

G_END_DECLS
