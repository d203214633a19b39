/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-hale-bin.h"
#include "tf-hale-private.h"
#include "tf-many.h"

#include <math.h>
#include <glib/gi18n-lib.h>

static double
flux_of (const TfSampleRow *row)
{
  return row->flux_mx;
}

static double
separation_of (const TfSampleRow *row)
{
  return row->separation_deg;
}

static double
latitude_of (const TfSampleRow *row)
{
  return fabs (row->lat_deg);
}

const TfHaleQuantity tf_hale_quantities[] = {
  { "flux_unsigned_mx",
    N_ ("unsigned flux"),
    "Mx",
    8,
    { 0, 3e20, 1e21, 3e21, 1e22, 3e22, 1e23, HUGE_VAL },
    flux_of },
  { "separation_deg",
    N_ ("separation"),
    "deg",
    7,
    { 0, 1.5, 2.5, 3.5, 5, 7, HUGE_VAL },
    separation_of },
  { "abs_lat_deg",
    N_ ("distance from the equator"),
    "deg",
    9,
    { 0, 3, 5, 8, 12, 17, 23, 30, HUGE_VAL },
    latitude_of },
  { NULL },
};

/* Hale & Nicholson 1925 to Zhukova et al. 2022, from their abstracts or restated there; "from memory"
 * where nobody of this project read them. */
const TfHalePublished tf_hale_published[] = {
  { "Hale & Nicholson 1925", N_ ("each group looked at"), 0, 0, 0.024, 0.024 },
  { "Richardson 1948", N_ ("bipolar groups 1917–1946"), 180, 5814, 0.031, 0.031 },
  { "Wang & Sheeley 1989", N_ ("about 2700 regions from 3·10²⁰ Mx, cycle 21, by eye"), 0, 0, 0.04,
    0.04 },
  { "Khlystova & Sokoloff 2009", N_ ("sunspot groups (from memory)"), 0, 0, 0.04, 0.05 },
  { "Stenflo & Kosovichev 2012",
    N_ ("bipoles of medium and large size; half of the smallest (from memory)"), 0, 0, 0.04, 0.04 },
  { "McClintock et al. 2014", N_ ("bipolar regions; more within 5° of the equator"), 0, 0, 0.076,
    0.092 },
  { "Li 2018", N_ ("4385 groups of cycles 23–24 by their polarity; small ones taken in"), 0, 0,
    0.077, 0.085 },
  { "Zhukova et al. 2020", N_ ("1989–2018; a reversed bipole and its magnetic connection seen"),
    275, 8606, 0.032, 0.032 },
  { "Muñoz-Jaramillo et al. 2021", N_ ("95 % keep the law"), 0, 0, 0.05, 0.05 },
  { "Zhukova et al. 2022", N_ ("the same criteria, a longer series"), 367, 14838, 0.0247, 0.0247 },
  { NULL, NULL, 0, 0, 0.0, 0.0 },
};

enum
{
  NO_BIN = 255
};

/* (transfer full): of each row the bin of its quantity. */
static guint8 *
find_bins (const TfSample *sample, const TfHaleQuantity *quantity, guint *lacking)
{
  guint n = tf_sample_get_n (sample);
  guint8 *bins = tf_new_many (guint8, n + 1);
  *lacking = 0;
  for (guint k = 0; k < n; k++)
    {
      double value = quantity->get (tf_sample_get (sample, k));
      bins[k] = NO_BIN;
      *lacking += isnan (value);
      for (guint e = 0; bins[k] == NO_BIN && e + 1 < quantity->n_edges; e++)
        if (value >= quantity->edges[e] && value < quantity->edges[e + 1])
          bins[k] = (guint8)e;
    }
  return bins;
}

GArray *
tf_hale_bins (const TfSample *sample, const TfVerdict *verdicts, const TfHaleQuantity *quantity,
              const TfHaleParams *params, guint *lacking)
{
  GArray *bins = g_array_new (FALSE, FALSE, sizeof (TfHaleBin));
  g_autofree double *chances = tf_hale_chances (sample, verdicts);
  guint without = 0;
  g_autofree guint8 *in = find_bins (sample, quantity, lacking != NULL ? lacking : &without);
  for (guint e = 0; e + 1 < quantity->n_edges; e++)
    {
      TfHaleBin bin = { .from = quantity->edges[e], .to = quantity->edges[e + 1] };
      const TfHalePart part = { sample, verdicts, chances, tf_group_of (0, 0), in, (guint8)e };
      bin.row = tf_hale_row_of (&part, params);
      g_array_append_val (bins, bin);
    }
  return bins;
}
