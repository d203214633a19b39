/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfLawsBench: the study at the left, its charts in the middle, the numbers in words and what they
 * would be under other choices at the right. */

#include "tf-power-view.h"
#include "tf-session-laws.h"

G_BEGIN_DECLS

#define TF_TYPE_LAWS_BENCH (tf_laws_bench_get_type ())
G_DECLARE_FINAL_TYPE (TfLawsBench, tf_laws_bench, TF, LAWS_BENCH, GtkWidget)

void tf_laws_bench_set_session (TfLawsBench *bench, TfSession *session);
/** tf_laws_bench_enlarge: one chart by its name; "": all of them. FALSE: no such chart. */
gboolean tf_laws_bench_enlarge (TfLawsBench *bench, const char *name);
/** tf_laws_bench_get_words: what stands under "In words" now. */
const char *tf_laws_bench_get_words (TfLawsBench *bench);
TfPowerView *tf_laws_bench_get_power (TfLawsBench *bench);

G_END_DECLS
