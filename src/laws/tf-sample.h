/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfSample: the rows a law is tested on, as plain columns; row k of every column is one pick.
 *
 * Filled by study (from a ledger), by simulate, or from an outside table. Laws never change it. A
 * quantity that a source lacks is NaN (numbers), 0 (polarity), -1 (yes/no).
 */

#include <glib.h>

#include "tf-time.h"

G_BEGIN_DECLS

typedef enum
{
  TF_ORIGIN_HINT,
  TF_ORIGIN_KEPT, /* "kept as hinted" */
  TF_ORIGIN_CHANGED,
  TF_ORIGIN_DRAWN, /* "drawn new" */
  TF_ORIGIN_OUTSIDE,
} TfOrigin;

typedef struct
{
  TfTime time;
  guint32 region; /* cluster: rows of one region share it */
  guint32 passage;
  guint32 row;    /* the filler's own number of it */
  double lat_deg; /* midpoint of the poles, signed */
  double leading_lat_deg, following_lat_deg;
  double cmd_deg, mu;
  double axis_tilt_deg; /* NaN when straddling or absent */
  double axis_bearing_deg;
  double tilt_sigma_deg;
  double separation_deg, separation_sigma_deg;
  double flux_mx;   /* unsigned */
  double imbalance; /* (+ - -)/(+ + -) */
  double compactness;
  double axial_dipole_gauss, axial_dipole_sigma_gauss;
  int leading_polarity;   /* 1, -1, 0 none in the source */
  gint8 leading_sure;     /* 1 yes, 0 no, -1 the source does not say */
  gint8 witnesses_differ; /* 1, 0, -1 */
  gint8 straddles;        /* poles on opposite sides of the equator */
  gint8 size;             /* 0 region, 1 ephemeral, -1 unknown */
  gint8 born;             /* on the visible disk: 1 yes, 0 no, -1 the source does not say */
  guint16 instrument;     /* number of the instrument; 0 not known */
  TfOrigin origin;
} TfSampleRow;

/* Fill it first, then read it; from then on threads may share it. */
typedef struct _TfSample TfSample;

TfSample *tf_sample_new (void);
/** tf_sample_new_sized: with room for @n rows. */
TfSample *tf_sample_new_sized (guint n);
void tf_sample_free (TfSample *sample);
/** tf_sample_new_part: some rows of another, by their places there: none at first. @whole: must live as
 * long, and is not to change. Of a part: once it is filled, what that is a part of must live. */
TfSample *tf_sample_new_part (const TfSample *whole);
/** tf_sample_take_whole: a part that is filled has its whole; it goes with it at the latest. */
void tf_sample_take_whole (TfSample *part, TfSample *whole);
/** tf_sample_add_place: to a part: the row at that place of the whole. */
void tf_sample_add_place (TfSample *part, guint place);
/** tf_sample_get_root: of a part what its places are in, NULL else. tf_sample_get_places: one a row. */
const TfSample *tf_sample_get_root (const TfSample *sample);
const guint *tf_sample_get_places (const TfSample *part);
/** tf_sample_copy: (transfer full): the same rows, no part of anything. */
TfSample *tf_sample_copy (const TfSample *sample);
/** tf_sample_set_bracketed: of the row added last: its greatest flux is neither that of the first nor of
 * the last mark. tf_sample_get_bracketed: -1: not asked. A part has it of its whole. */
void tf_sample_set_bracketed (TfSample *sample, gboolean bracketed);
int tf_sample_get_bracketed (const TfSample *sample, guint k);
/** tf_sample_row_init: every quantity "absent". */
void tf_sample_row_init (TfSampleRow *row);
/** tf_sample_add: not to a part. */
void tf_sample_add (TfSample *sample, const TfSampleRow *row);
/** tf_sample_scale_flux: while it is being filled. */
void tf_sample_scale_flux (TfSample *sample, guint k, double factor);
guint tf_sample_get_n (const TfSample *sample);
const TfSampleRow *tf_sample_get (const TfSample *sample, guint k);
guint tf_sample_count_regions (const TfSample *sample);
guint tf_sample_count_passages (const TfSample *sample);
/** tf_count_distinct: how many different numbers @ids holds. */
guint tf_count_distinct (const guint32 *ids, guint n);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfSample, tf_sample_free)

G_END_DECLS
