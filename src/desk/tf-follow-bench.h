/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFollowBench: one region through its passage: the strip of close looks above, the charts on one
 * axis of time below, the look in view and what is known of the passage beside them. */

#include "tf-followed.h"

G_BEGIN_DECLS

#define TF_TYPE_FOLLOW_BENCH (tf_follow_bench_get_type ())
G_DECLARE_FINAL_TYPE (TfFollowBench, tf_follow_bench, TF, FOLLOW_BENCH, GtkWidget)

void tf_follow_bench_set_followed (TfFollowBench *bench, TfFollowed *followed);

G_END_DECLS
