/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfGroup: part of a sample: a cycle, a hemisphere, odd or even cycles, a range of flux. */

#include <glib.h>

#include "tf-verdict.h"

G_BEGIN_DECLS

typedef enum
{
  TF_PARITY_ANY,
  TF_PARITY_ODD,
  TF_PARITY_EVEN,
} TfParity;

typedef struct
{
  int cycle;      /* 0: all */
  int hemisphere; /* 1, -1; 0 both, the equator too */
  TfParity parity;
  double flux_from_mx, flux_to_mx; /* from <= flux < to; both 0: any, and none */
  int size;                        /* 0 regions, 1 ephemeral; -1 any */
} TfGroup;

/** tf_group_of: a cycle and hemisphere, else everything. */
TfGroup tf_group_of (int cycle, int hemisphere);
/** tf_group_holds: @sure: only rows whose cycle is sure belong to a cycle or a parity; else also those
 * of which it is the likelier. */
gboolean tf_group_holds (const TfGroup *group, const TfSampleRow *row, const TfVerdict *verdict,
                         gboolean sure);

G_END_DECLS
