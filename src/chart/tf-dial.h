/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The dial: west at the right, north up. A grey fan where Joy's law with its scatter would put the
 * axis (the relation named under it), a bar for the measured axis, a dark fan for its uncertainty,
 * disc and ring at its ends, beside it the leader that Hale's law expects and the three witnesses.
 */

#include "tf-chart.h"

G_BEGIN_DECLS

typedef struct
{
  double bearing_deg;              /* axis, from west towards north; NaN: no axis, an empty dial */
  double sigma_deg;                /* NaN: no fan */
  double lat_deg;                  /* hemisphere of the Joy fan */
  double joy_deg, joy_scatter_deg; /* expected axis tilt (+ equatorward); NaN: no fan */
  const char *joy_name;            /* "S & K 2012"; borrowed */
  int leading_polarity;            /* west end's sign; 0 unknown */
  int expected;                    /* sign Hale's law expects to lead; 0 unknown */
  int witnesses[3];                /* 1, -1, 0 undecided, 2 absent */
} TfDial;

/** tf_dial_draw: words shrink to 8 units where the area is narrow; a small area, or text_pt 0, has
 * none. */
void tf_dial_draw (cairo_t *cr, const TfDial *dial, const TfChartStyle *style, TfArea area);
/** tf_dial_dup_description: what it shows now, in words, for a screen reader. */
char *tf_dial_dup_description (const TfDial *dial);

G_END_DECLS
