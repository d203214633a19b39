/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-joy.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"

static double
stenflo_2012 (double lat)
{
  return 32.1 * sin (lat * TF_DEG);
}

static double
wang_1991 (double lat)
{
  return asin (0.48 * sin (lat * TF_DEG) + 0.03) / TF_DEG;
}

static double
tian_2003 (double lat)
{
  return asin (0.5 * sin (lat * TF_DEG)) / TF_DEG;
}

static double
li_2012 (double lat)
{
  return 0.5 * lat;
}

static double
li_2018 (double lat)
{
  return 23.80 * sin (lat * TF_DEG);
}

static double
tlatova_2018 (double lat)
{
  return 0.20 * sin (2.80 * lat * TF_DEG) / TF_DEG;
}

static double
dasi_espuig_2010_first (double lat)
{
  return 0.26 * lat;
}

static double
dasi_espuig_2010_second (double lat)
{
  return 0.28 * lat;
}

const TfJoyRelation tf_joy_relations[] = {
  { "Stenflo & Kosovichev 2012",
    N_ ("32.1° sin|λ|; magnetograms, 160,079 regions, no dependence on size"), TRUE, stenflo_2012 },
  { "Wang & Sheeley 1991", N_ ("sin γ = 0.48 sin|λ| + 0.03; magnetograms, cycle 21 (from memory)"),
    TRUE, wang_1991 },
  { "Tian et al. 2003", N_ ("sin γ = 0.5 sin|λ|; magnetograms, 517 regions, 1988-2001"), TRUE,
    tian_2003 },
  { "Li & Ulrich 2012", N_ ("0.5 |λ|; sunspots with measured polarity, medians, 1974-2012"), TRUE,
    li_2012 },
  { "Li 2018", N_ ("23.80° sin|λ|; magnetograms, cycles 23-24, regions that keep Hale's law"), TRUE,
    li_2018 },
  { "Tlatova et al. 2018",
    N_ ("0.20 rad sin(2.80 |λ|); sunspots with measured polarity, cycles 15-24"), TRUE,
    tlatova_2018 },
  { "Dasi-Espuig et al. 2010, Mount Wilson", N_ ("0.26 |λ|; white light (from memory)"), FALSE,
    dasi_espuig_2010_first },
  { "Dasi-Espuig et al. 2010, Kodaikanal", N_ ("0.28 |λ|; white light (from memory)"), FALSE,
    dasi_espuig_2010_second },
  { NULL, NULL, FALSE, NULL },
};

/* 1.4826 MAD of the tilt about Joy's law by separation, up to "below" deg: worked out for this
 * project from the Mount Wilson group tilts 1917-1985 (Howard, Gilman & Gilman 1984); falls with
 * separation as Fisher, Fan & Howard 1995 found. */
static const struct
{
  double below, scatter;
} scatters[] = {
  { 1.5, 40.0 }, { 2.5, 32.0 }, { 3.5, 25.0 }, { 5.0, 18.0 }, { 7.0, 14.0 }, { INFINITY, 11.0 },
};

void
tf_joy_expected (double lat_deg, double separation_deg, double *tilt_deg, double *scatter_deg)
{
  *tilt_deg = tf_joy_relations[0].tilt (fabs (lat_deg));
  *scatter_deg = NAN;
  for (guint k = 0; k < G_N_ELEMENTS (scatters) && isnan (*scatter_deg); k++)
    if (separation_deg < scatters[k].below)
      *scatter_deg = scatters[k].scatter;
}
