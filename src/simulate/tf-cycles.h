/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Invented cycles: regions of whole cycles as rows of a sample, with the truth they were drawn from.
 *
 * A region's time follows the mean shape of a cycle, A x^3 / (exp x^2 - c), x = (t - t0)/b with b = 54
 * months, c = 0.8, t0 = -4 months from the minimum (Hathaway 2015, Living Rev. Solar Phys. 12, 4;
 * constants from memory); its latitude lambda = 28 exp (-t/90 months) (Hathaway 2011) with a scatter;
 * its separation a log-normal law, its flux d^1.3 (Wang & Sheeley 1989) with a scatter; its tilt slope
 * |lambda| with the scatter by separation of tf_joy_expected(), redrawn beyond 85 deg. A set share
 * breaks Hale's law, whatever the tilt. Each region is seen a few times near the central meridian,
 * with errors of measurement. The divides are known: no region lies on the wrong side of a computed
 * one (strays: some may, as on the Sun).
 *
 * Seeded by GSL's mt19937: equal options give equal rows.
 */

#include "tf-joy.h"
#include "tf-option.h"
#include "tf-sample.h"
#include "tf-simulate.h"

G_BEGIN_DECLS

typedef struct
{
  int first, n_cycles;    /* 23, 3 */
  int regions;            /* 800 a cycle */
  double slope;           /* 0.4 deg/deg */
  double scatter_factor;  /* 1: of the scatter by separation */
  double anti_hale_share; /* 0.05 */
  double lat_scatter;     /* 0.18 of the latitude */
  double marks;           /* 2: beyond the first, on average */
  double tilt_error_deg;  /* 1.5: of one mark */
  gboolean strays;
  int seed;
} TfCyclesParams;
extern const TfOption tf_cycles_options[];

/** TfInventedRegion: the truth of a region; its number is its place. */
typedef struct
{
  int cycle;
  gboolean breaks;
  TfTime time; /* over the central meridian */
  double lat_deg, tilt_deg, separation_deg, flux_mx;
} TfInventedRegion;

typedef struct
{
  TfSample *sample; /* every mark; region and passage are the region's number */
  GArray *regions;  /* TfInventedRegion */
} TfInvented;

TfInvented *tf_cycles_invent (const TfCyclesParams *params);
void tf_invented_free (TfInvented *invented);
/** tf_cycles_write: into @folder: cycles.csv (the sample under the names of our own tables),
 * cycles.truth.csv (a line a region) and cycles.truth.json (options and divides). */
gboolean tf_cycles_write (const char *folder, const TfCyclesParams *params, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfInvented, tf_invented_free)

G_END_DECLS
