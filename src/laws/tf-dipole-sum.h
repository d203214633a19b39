/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the regions of a sample add to the axial dipole, by cycle, hemisphere and verdict, and which
 * of those that break Hale's law cost their cycle most.
 *
 * A region counts once, with the mean over its rows, however many passages or marks it has. Signed
 * values in G: a cycle's regions that keep Hale's and Joy's laws add to one sign, which changes from
 * cycle to cycle, so a sum over all cycles says little and is not given. Only surely told cycles.
 */

#include <glib.h>

#include "tf-verdict.h"

G_BEGIN_DECLS

typedef struct
{
  int cycle;
  int hemisphere; /* 1, -1, 0 both */
  int verdict;    /* TfVerdictKind; -1 all */
  guint regions;  /* with a dipole */
  guint without;  /* regions whose source gives none */
  double sum_gauss;
  double
      sigma_gauss; /* of the sum, from the regions' own; NaN when one lacks it, or none is there */
  /* Among these: the row whose region works most against the sum over both hemispheres and all
   * verdicts of the cycle; -1 when none does. What it adds, G. */
  gint64 costliest;
  double costliest_gauss;
} TfDipoleSum;

/** tf_dipole_sums: (element-type TfDipoleSum) (transfer full): by cycle; N, S, both; keeps, breaks,
 * cannot say, all. */
GArray *tf_dipole_sums (const TfSample *sample, const TfVerdict *verdicts);

G_END_DECLS
