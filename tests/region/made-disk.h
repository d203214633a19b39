/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Invented disks whose bipoles are known, and the score of hints against them.
 *
 * A source is a bipole (compact leading pole, following pole of 6 to 120 fragments) or decayed plage (two wide broken poles, often
 * unequal); network lies everywhere. Truth is the source's own field, sampled: where its signs overlap they have cancelled, as in the
 * frame. Signs, tilts and hemispheres are drawn freely: no law is in them.
 *
 * Found: at least half of the source's flux lies in one hint and makes up at least half of that hint's measured flux. Two bipoles
 * overlap when their centres are closer than 0.65 of the sum of their half lengths, half a length being half the poles' distance
 * and one radius of either pole.
 */

#include <glib.h>

#include "tf-hint.h"
#include "tf-simulate.h"

typedef struct
{
  double unit[3];
  double flux; /* Mx, signed */
} MadePoint;

typedef struct
{
  double lat_deg, cmd_deg, half_deg;
  gboolean plage;
  GArray *points;  /* MadePoint */
  double flux;     /* Mx, unsigned */
  int leading;     /* polarity of the western pole */
  double bearing;  /* of the axis, deg, as TfMeasure has it */
  guint overlaps;  /* bipoles it overlaps */
} MadeSource;

typedef struct
{
  TfSun *sun;
  GArray *sources; /* MadeSource */
} MadeDisk;

typedef struct
{
  guint bipoles, plages;
  double closest;   /* bipoles keep this share of the sum of their half lengths apart ... */
  double may_share; /* ... but for this share of them, which may come within half of that */
  gboolean gathered; /* in few places */
  gboolean bare;     /* no network */
} MadePlan;

/** MadeScore: sums over disks. Eligible: bipoles over 1e21 Mx unsigned with mu > 0.4 that the frame shows whole. */
typedef struct
{
  guint disks, hints, bipole_hints;
  guint eligible, found, missed, split, joined, unipolar, wrong_polarity, false_hints;
  guint least_hints, most_hints;
  GArray *tilt_errors; /* double, deg: of those found */
} MadeScore;

/** made_plan_of: disk @k of a set: every tenth is quiet (no bipole, no plage), the others rise to 14 bipoles; or crowded: 16 in few
 * places, plage laid over them. */
void made_plan_of (MadePlan *plan, guint k, gboolean crowded);
/** made_noise_of: 5 to 30 G in turn. */
double made_noise_of (guint k);
MadeDisk *made_disk_new (const MadePlan *plan, guint32 seed);
void made_disk_free (MadeDisk *disk);
/** made_disk_shoot: @size 0: the whole disk. */
TfFrame *made_disk_shoot (const MadeDisk *disk, double scale_arcsec, guint size, double noise_gauss, guint32 seed,
                          const TfWork *work);
void made_score_init (MadeScore *score);
void made_score_clear (MadeScore *score);
void made_score_add (MadeScore *score, const MadeDisk *disk, const TfFrame *frame, const GPtrArray *hints);
/** made_score_tilt: the error that @share (0 to 1) of those found stay below, deg; NaN without any. */
double made_score_tilt (const MadeScore *score, double share);
char *made_score_dup_text (const MadeScore *score);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (MadeDisk, made_disk_free)
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (MadeScore, made_score_clear)
