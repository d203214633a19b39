/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Scales of instruments that people kept. One an instrument: what its field is multiplied by to be
 * like that of the reference. Measures stay as they were made; a study applies scales when it is told
 * to. */

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef struct
{
  char *instrument, *reference;
  double factor, sigma; /* factor > 0; sigma NaN: not known */
  char *evidence;       /* how it was got: canonical option text and counts */
  char *person;         /* who kept it */
} TfKeptScale;
TfKeptScale *tf_kept_scale_copy (const TfKeptScale *scale);
void tf_kept_scale_free (TfKeptScale *scale);

/** tf_ledger_set_scale: a deed; factor NaN takes the instrument's scale back. */
gboolean
tf_ledger_set_scale (TfLedger *ledger, const TfKeptScale *scale, gint64 person, GError **error);
/** tf_ledger_scales: (element-type TfKeptScale) by instrument. */
GPtrArray *tf_ledger_scales (TfLedger *ledger, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfKeptScale, tf_kept_scale_free)

G_END_DECLS
