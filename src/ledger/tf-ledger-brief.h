/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfBrief: of a live mark or an open hint what laws are tested on, and no more: a million of them are
 * read in the time in which the whole rows (tf_ledger_rows()) of some thousands are.
 *
 * They lie in blocks of the table `brief`, derived as the points are (tf-ledger-pack.c), each mark with
 * its own measure and those with other even floors. Rows of outside tables are not among them. */

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef struct
{
  gint64 mark, frame; /* local keys */
  gint64 from_hint;   /* of a mark that was a hint; 0 */
  double floor_gauss, time_s, lat_deg, positive_lat_deg, negative_lat_deg, cmd_deg, mu, axis_tilt_deg,
      axis_bearing_deg, tilt_sigma_deg, separation_deg, separation_sigma_deg, flux_unsigned_mx,
      imbalance, compactness, axial_dipole_gauss, axial_dipole_sigma_gauss; /* NaN: no value */
  gint64 passage, same; /* as in TfRow; joined when it is read */
  guint32 region;       /* local key; 0 for a hint */
  gint8 hint, unipolar;
  gint8 origin;         /* TfMarkOrigin; -1 for a hint */
  gint8 own;            /* 1: of its own measure, 0: of another with an even floor */
  gint8 even;           /* the floor is an even one */
  gint8 leading, leading_sure, ephemeral;
  gint8 witnesses[3];   /* 1, -1, 0; G_MININT8: absent */
  gint8 born;           /* as in TfRow; joined when it is read */
} TfBrief;

/** TfBriefQuery: which, and with which floor. */
typedef struct
{
  gboolean hints;       /* open hints, too */
  double floor_gauss;   /* measures with that even floor where they are there; 0: each its own */
  double asked_gauss[2]; /* floors of which is only asked how many rows lack them; 0: none */
} TfBriefQuery;

/** TfBriefs: (element-type TfBrief) marks in order of their keys, then hints; @n_lacking: rows that have
 * neither that even floor nor one within half a per cent of it; @n_even: rows not of their own measure. */
typedef struct
{
  GArray *rows;
  guint n_lacking[2], n_even, n_hints;
} TfBriefs;

/** tf_ledger_has_briefs: not in an older ledger that cannot be written. */
gboolean tf_ledger_has_briefs (TfLedger *ledger);
/** tf_ledger_briefs: NULL on error. */
TfBriefs *tf_ledger_briefs (TfLedger *ledger, const TfBriefQuery *query, GError **error);
void tf_briefs_free (TfBriefs *briefs);

/** TfBriefFrame: of a frame what a study asks. */
typedef struct
{
  gint64 frame;
  const char *instrument; /* interned */
  gint8 model_map, simulated;
} TfBriefFrame;
/** tf_ledger_brief_frames: (element-type TfBriefFrame) in order of their keys. */
GArray *tf_ledger_brief_frames (TfLedger *ledger, GError **error);

/** TfFrameNoise: of a usable frame what the even floor hangs on. */
typedef struct
{
  const char *instrument; /* interned */
  double noise_gauss;     /* as TfFrameRow has it */
  gint8 model_map, known_unit;
  gint8 as_is;            /* the field needs no 1/mu: a radial product, a map */
} TfFrameNoise;
/** tf_frame_noise: of a frame that was read. */
TfFrameNoise tf_frame_noise (const TfFrameRow *row);
/** tf_ledger_noises: (element-type TfFrameNoise) those of all frames with a noise. */
GArray *tf_ledger_noises (TfLedger *ledger, GError **error);

/** tf_ledger_even_measure: the measure of a mark's or hint's outline by another method, if it was made.
 * @measure: (out): cleared by the caller */
gboolean tf_ledger_even_measure (TfLedger *ledger, gint64 mark, gboolean is_hint, const char *method,
                                 TfMeasure *measure);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfBriefs, tf_briefs_free)

G_END_DECLS
