/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Stamp: one region cut out of its frame onto a grid of Carrington longitude and sine latitude
 * (cylindrical equal-area: every cell has the same area on the Sun), cells as wide as the frame's
 * pixels at the disk's centre. The field is radial, G.
 *
 * Flux is conserved: a pixel of the frame is the four-sided figure of its corners in that plane, and
 * its flux goes to cells by the area that they share (as polygons, exactly). A cell is the mean over
 * what pixels cover of it; less than half covered it has no value. Calabretta & Greisen 2002, A&A
 * 395, 1077, section 5.2.2 (CEA); Thompson 2006, A&A 449, 791, section 2.2 (CRLN, CRLT).
 */

#include "tf-ledger.h"
#include "tf-study.h"

G_BEGIN_DECLS

typedef struct
{
  double step_deg;    /* side of a cell at the equator */
  double centre_deg;  /* Carrington longitude of the grid's middle */
  int first_row;      /* rows from the equator to the lower edge, south negative */
  int width, height;
  float *field;       /* G, rows from south to north, columns from east to west-most longitude */
  double flux_mx[2];  /* positive, size of the negative: of all cells with a value */
} TfStamp;
void tf_stamp_clear (TfStamp *stamp);

/** tf_stamp_cut: about @outline (carried to the frame's time by rotation law @law) and @margin_deg
 * more; of pixels from @mu_min. FALSE when none of it is on the frame, or it would have over 4,096
 * cells a side. */
gboolean tf_stamp_cut (TfStamp *stamp, const TfFrame *frame, const TfOutline *outline, guint law,
                       double mu_min, double margin_deg);

/** TfStampsSum: what was written, and why some were not. */
typedef struct
{
  guint n_written, n_outside; /* outside: picks that came in tables and have no frame */
  GPtrArray *failed;          /* sentences */
} TfStampsSum;
void tf_stamps_sum_clear (TfStampsSum *sum);

/** tf_stamps_write: a FITS file for each pick of @study, into @folder, made when it is not there:
 * T2013-0412-20131012T0600.fits, hint-0123456789ab-20131012T0600.fits. */
gboolean tf_stamps_write (const char *folder, TfLedger *ledger, const TfStudy *study,
                          TfStampsSum *sum, GError **error);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfStamp, tf_stamp_clear)
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfStampsSum, tf_stamps_sum_clear)

G_END_DECLS
