/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <gsl/gsl_randist.h>
#include <gsl/gsl_rng.h>
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-rotation.h"
#include "tf-sun-private.h"

/* A sun that is only added to: sources, and the elements they are drawn by. The random numbers
 * of fragments and network come from one generator in the order in which things are added.
 */

struct _TfSun
{
  TfTime epoch;
  guint64 seed;
  gsl_rng *rng;
  GArray *sources;  /* TfSource */
  GArray *elements; /* TfElement */
};

enum
{
  LAW = 0, /* Snodgrass & Ulrich 1990, magnetic: the default law of tf-rotation.h */
};

static const double FRAGMENT_SIGMA
    = 0.45; /* of the pole's: pieces are told apart, the whole stays as wide */
static const double NETWORK_SIGMA_DEG = 0.4;
static const double SPREAD_MAX = 2.2; /* fragments lie within so many sigma of their pole */

G_DEFINE_QUARK (tf - simulate - error - quark, tf_simulate_error)

static void
clear_source (gpointer data)
{
  TfSource *source = data;
  g_free (source->name);
  g_free (source->what);
}

TfSun *
tf_sun_new (TfTime epoch, guint64 seed)
{
  TfSun *sun = g_new0 (TfSun, 1);
  sun->epoch = epoch;
  sun->seed = seed;
  sun->rng = gsl_rng_alloc (gsl_rng_mt19937);
  gsl_rng_set (sun->rng, (unsigned long)((seed ^ (seed >> 32)) & 0xffffffffu));
  sun->sources = g_array_new (FALSE, TRUE, sizeof (TfSource));
  g_array_set_clear_func (sun->sources, clear_source);
  sun->elements = g_array_new (FALSE, TRUE, sizeof (TfElement));
  return sun;
}

void
tf_sun_free (TfSun *sun)
{
  if (sun == NULL)
    return;
  gsl_rng_free (sun->rng);
  g_array_unref (sun->sources);
  g_array_unref (sun->elements);
  g_free (sun);
}

TfTime
tf_sun_get_epoch (const TfSun *sun)
{
  return sun->epoch;
}

guint64
tf_sun_get_seed (const TfSun *sun)
{
  return sun->seed;
}

guint
tf_sun_get_n_sources (const TfSun *sun)
{
  return sun->sources->len;
}

const TfSource *
tf_sun_get_source (const TfSun *sun, guint k)
{
  return &g_array_index (sun->sources, TfSource, k);
}

guint
tf_sun_get_n_elements (const TfSun *sun)
{
  return sun->elements->len;
}

/* -- elements --------------------------------------------------------------------------------- */

static void
add_element (TfSun *sun, TfSource *source, const double unit[3], double sigma, double flux_mx)
{
  TfElement element = { .sigma = sigma, .flux_mx = flux_mx };
  memcpy (element.unit, unit, sizeof element.unit);
  g_array_append_val (sun->elements, element);
  source->n++;
}

static void
normalise (double v[3])
{
  double length = sqrt (v[0] * v[0] + v[1] * v[1] + v[2] * v[2]);
  for (int k = 0; k < 3; k++)
    v[k] /= length;
}

void
tf_tangents (const double unit[3], double west[3], double north[3])
{
  west[0] = -unit[1];
  west[1] = unit[0];
  west[2] = 0.0;
  normalise (west);
  north[0] = unit[1] * west[2] - unit[2] * west[1];
  north[1] = unit[2] * west[0] - unit[0] * west[2];
  north[2] = unit[0] * west[1] - unit[1] * west[0];
}

typedef struct
{
  double x, y, weight;
} Piece;

/* Moves the pieces so that the weighted mean of their directions is the pole's middle. A piece
 * at (x, y) of the tangent plane has the direction (x, y, 1) / sqrt (1 + x^2 + y^2); moving all
 * by the mean is a contraction, so few rounds do. */
static void
centre_pieces (Piece *pieces, guint n)
{
  for (int round = 0; round < 30; round++)
    {
      double sx = 0.0, sy = 0.0, sw = 0.0;
      for (guint k = 0; k < n; k++)
        {
          Piece *p = &pieces[k];
          double w = p->weight / sqrt (1.0 + p->x * p->x + p->y * p->y);
          sx += w * p->x;
          sy += w * p->y;
          sw += w;
        }
      for (guint k = 0; k < n; k++)
        {
          pieces[k].x -= sx / sw;
          pieces[k].y -= sy / sw;
        }
    }
}

static void
scatter_pieces (TfSun *sun, Piece *pieces, guint n, double spread)
{
  double total = 0.0;
  for (guint k = 0; k < n; k++)
    {
      double x, y;
      do
        {
          x = gsl_ran_gaussian (sun->rng, 1.0);
          y = gsl_ran_gaussian (sun->rng, 1.0);
        }
      while (hypot (x, y) > SPREAD_MAX);
      pieces[k] = (Piece){ x * spread, y * spread, 0.5 + gsl_rng_uniform (sun->rng) };
      total += pieces[k].weight;
    }
  for (guint k = 0; k < n; k++)
    pieces[k].weight /= total;
  centre_pieces (pieces, n);
}

/* A pole, whole or in @n pieces of one size. */
static void
add_pole (TfSun *sun, TfSource *source, const TfPoleTruth *pole, guint n)
{
  double unit[3], west[3], north[3], sigma = pole->radius_deg * TF_DEG, left = pole->flux_mx;
  source->pole[source->n_poles++] = *pole;
  tf_sphere_unit (pole->lon_deg, pole->lat_deg, unit);
  if (n < 2)
    {
      add_element (sun, source, unit, sigma, pole->flux_mx);
      return;
    }
  g_autofree Piece *pieces = g_new (Piece, n);
  scatter_pieces (sun, pieces, n, sigma * sqrt (1.0 - FRAGMENT_SIGMA * FRAGMENT_SIGMA));
  tf_tangents (unit, west, north);
  for (guint k = 0; k < n; k++)
    {
      double at[3], flux = k + 1 < n ? pieces[k].weight * pole->flux_mx : left;
      for (int j = 0; j < 3; j++)
        at[j] = unit[j] + pieces[k].x * west[j] + pieces[k].y * north[j];
      normalise (at);
      add_element (sun, source, at, sigma * FRAGMENT_SIGMA, flux);
      left -= flux;
    }
}

/* -- sources ---------------------------------------------------------------------------------- */

static TfSource
source_new (const TfSun *sun, const char *name, const char *what)
{
  return (
      TfSource){ .name = g_strdup (name), .what = g_strdup (what), .first = sun->elements->len };
}

static void
source_add (TfSun *sun, TfSource *source)
{
  tf_source_draw (source, &g_array_index (sun->elements, TfElement, source->first));
  g_array_append_val (sun->sources, *source);
}

/* Poles so that the planar tilt (cosine of the mean latitude) and the great-circle separation
 * are exactly those asked for. */
static void
place_poles (const TfBipole *b, TfPoleTruth *lead, TfPoleTruth *follow)
{
  double hemisphere = b->lat_deg < 0.0 ? -1.0 : 1.0, tilt = b->axis_tilt_deg * TF_DEG;
  double apart = b->separation_deg;
  for (int round = 0; round < 20; round++)
    {
      double dlat = -hemisphere * 0.5 * apart * sin (tilt);
      double dlon = 0.5 * apart * cos (tilt) / cos (b->lat_deg * TF_DEG);
      lead->lat_deg = b->lat_deg + dlat;
      lead->lon_deg = b->carrington_lon_deg + dlon;
      follow->lat_deg = b->lat_deg - dlat;
      follow->lon_deg = b->carrington_lon_deg - dlon;
      double got
          = tf_sphere_distance (lead->lon_deg, lead->lat_deg, follow->lon_deg, follow->lat_deg);
      if (got > 0.0)
        apart *= b->separation_deg / got;
    }
  lead->radius_deg = b->lead_radius_deg;
  follow->radius_deg = b->follow_radius_deg;
  lead->flux_mx = b->leading_polarity * b->flux_mx;
  follow->flux_mx = -b->leading_polarity * b->flux_mx * (1.0 - b->imbalance);
}

static void
add_poles (TfSun *sun, TfSource *source, const TfBipole *bipole)
{
  TfPoleTruth lead, follow;
  place_poles (bipole, &lead, &follow);
  add_pole (sun, source, &lead, bipole->fragments / 3);
  add_pole (sun, source, &follow, bipole->fragments);
}

static void
take_life (TfSource *source, const TfBipole *bipole)
{
  source->born_s = bipole->born_s;
  source->grow_s = bipole->grow_s;
  source->decay_s = bipole->decay_s;
}

void
tf_sun_add_bipole (TfSun *sun, const char *name, const char *what, const TfBipole *bipole)
{
  g_return_if_fail (name != NULL && what != NULL);
  g_return_if_fail (bipole->lead_radius_deg > 0.0 && bipole->follow_radius_deg > 0.0);
  TfSource source = source_new (sun, name, what);
  source.lat_deg = bipole->lat_deg;
  source.is_bipole = TRUE;
  source.bipole = *bipole;
  take_life (&source, bipole);
  add_poles (sun, &source, bipole);
  source_add (sun, &source);
}

void
tf_sun_add_quadrupole (TfSun *sun, const char *name, const TfBipole *first, const TfBipole *second)
{
  g_return_if_fail (name != NULL);
  TfSource source = source_new (sun, name, "quadrupole");
  source.lat_deg = 0.5 * (first->lat_deg + second->lat_deg);
  take_life (&source, first);
  add_poles (sun, &source, first);
  add_poles (sun, &source, second);
  source_add (sun, &source);
}

void
tf_sun_add_blob (TfSun *sun, const char *name, const char *what, const TfBlob *blob)
{
  g_return_if_fail (name != NULL && what != NULL && blob->radius_deg > 0.0);
  TfPoleTruth pole = { blob->carrington_lon_deg, blob->lat_deg, blob->radius_deg, blob->flux_mx };
  TfSource source = source_new (sun, name, what);
  source.lat_deg = blob->lat_deg;
  add_pole (sun, &source, &pole, 0);
  source_add (sun, &source);
}

void
tf_sun_add_network (TfSun *sun, guint n, double flux_mx)
{
  double flux = 0.0;
  for (guint k = 0; k < n - n % 2; k++)
    {
      double lon = 360.0 * gsl_rng_uniform (sun->rng);
      double lat = asin (2.0 * gsl_rng_uniform (sun->rng) - 1.0) / TF_DEG;
      /* Every second element takes the flux of the one before with the other sign: balanced as
       * a whole. */
      flux = k % 2 == 0 ? gsl_ran_exponential (sun->rng, flux_mx) : -flux;
      TfSource source = source_new (sun, NULL, "network");
      source.lat_deg = lat;
      TfPoleTruth pole = { lon, lat, NETWORK_SIGMA_DEG, flux };
      add_pole (sun, &source, &pole, 0);
      g_array_append_val (sun->sources, source);
    }
}

/* -- at a time -------------------------------------------------------------------------------- */

double
tf_source_growth (const TfSource *source, double seconds)
{
  if (source->grow_s <= 0.0)
    return 1.0;
  double age = seconds - source->born_s;
  if (age <= 0.0)
    return 0.0;
  if (age < source->grow_s)
    return age / source->grow_s;
  return source->decay_s > 0.0 ? exp (-(age - source->grow_s) / source->decay_s) : 1.0;
}

double
tf_source_carry (const TfSource *source, double seconds)
{
  return tf_rotation_carry (LAW, source->lat_deg, seconds);
}

double
tf_element_peak (double flux_mx, double sigma)
{
  double radius_cm = TF_RADIUS_MM * 1e8, s2 = sigma * sigma, cut = fmin (TF_ELEMENT_CUT, 2.0 / s2);
  return flux_mx / (2.0 * TF_PI * radius_cm * radius_cm * s2 * (1.0 - exp (-cut)));
}

guint
tf_sun_light (const TfSun *sun, TfTime time, TfLit *lit)
{
  double seconds = time.s - sun->epoch.s;
  guint n = 0;
  for (guint k = 0; k < sun->sources->len; k++)
    {
      const TfSource *source = tf_sun_get_source (sun, k);
      double growth = tf_source_growth (source, seconds);
      double turn = tf_source_carry (source, seconds) * TF_DEG, c = cos (turn), s = sin (turn);
      for (guint j = 0; j < source->n && growth > 0.0; j++)
        {
          const TfElement *e = &g_array_index (sun->elements, TfElement, source->first + j);
          lit[n++] = (TfLit){
            .unit
            = { c * e->unit[0] - s * e->unit[1], s * e->unit[0] + c * e->unit[1], e->unit[2] },
            .peak_gauss = tf_element_peak (e->flux_mx * growth, e->sigma),
            .cos_cut = 1.0 - fmin (2.0, TF_ELEMENT_CUT * e->sigma * e->sigma),
            .inverse = 1.0 / (e->sigma * e->sigma),
          };
        }
    }
  return n;
}

double
tf_lit_field (const TfLit *lit, guint n, const double unit[3])
{
  double field = 0.0;
  for (guint k = 0; k < n; k++)
    {
      const double *u = lit[k].unit;
      double cosine = u[0] * unit[0] + u[1] * unit[1] + u[2] * unit[2];
      if (cosine >= lit[k].cos_cut)
        field += lit[k].peak_gauss * exp ((cosine - 1.0) * lit[k].inverse);
    }
  return field;
}

double
tf_sun_field (const TfSun *sun, TfTime time, const double unit[3])
{
  g_autofree TfLit *lit = g_new (TfLit, sun->elements->len + 1);
  return tf_lit_field (lit, tf_sun_light (sun, time, lit), unit);
}

gboolean
tf_sun_flux (const TfSun *sun, const char *name, TfTime time, double *positive_mx,
             double *negative_mx)
{
  for (guint k = 0; k < sun->sources->len; k++)
    {
      const TfSource *source = tf_sun_get_source (sun, k);
      if (source->name == NULL || strcmp (source->name, name) != 0)
        continue;
      double growth = tf_source_growth (source, time.s - sun->epoch.s);
      *positive_mx = *negative_mx = 0.0;
      for (guint j = 0; j < source->n; j++)
        {
          double flux
              = g_array_index (sun->elements, TfElement, source->first + j).flux_mx * growth;
          *(flux > 0.0 ? positive_mx : negative_mx) += fabs (flux);
        }
      return TRUE;
    }
  return FALSE;
}
