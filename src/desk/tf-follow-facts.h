/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The passage in hand in words: what stands beside its charts. Pure text, current language. */

#include "tf-followed.h"

G_BEGIN_DECLS

typedef struct
{
  char *name, *value;
  char *how; /* how it was got: the tooltip; NULL */
} TfFact;

/** tf_follow_facts: (element-type TfFact) (transfer full) */
GPtrArray *tf_follow_facts (TfFollowed *followed);
/** tf_follow_dup_verdict: what Hale's law says of the passage by its clear marks, and how many of them
 * agree. @diamond: (out): TfDiamond */
char *tf_follow_dup_verdict (TfFollowed *followed, int *diamond);
/** tf_follow_dup_link: one link of the passage: "13 Oct 06:00 → 12:00 · overlap 0.91" */
char *tf_follow_dup_link (const TfPassageContent *content, const TfPassageLink *link);

G_END_DECLS
