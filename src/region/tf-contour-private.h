/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Lines of equal value on a grid of nodes, by marching squares with linear interpolation along the
 * edges.
 *
 * Higher values lie on the left of a line as it runs, seen with x to the right and y up. Places are
 * in steps: node (0, 0) is the origin. A line that comes back to its start is closed and its first
 * point is repeated at its end; others end at the grid's border or at squares with a node that is
 * not there.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  double x, y;
} TfContourPoint;

/** tf_contours: (transfer full): an array of GArray of TfContourPoint, in the order of their first
 * square.
 * @there: (nullable): 1 where a node has a value */
GPtrArray *
tf_contours (const double *values, const guint8 *there, guint width, guint height, double level);

G_END_DECLS
