/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Small invented frames with known truth, made without the simulator.
 *
 * A pole's radial field is B = A exp (-(1 - cos psi) / s^2) about its centre (von Mises-Fisher
 * on the sphere, a Gaussian of sigma s for small s): its flux is 2 pi A s^2 R^2 (1 - exp (-2 /
 * s^2)) and its centroid its centre, exactly. The line-of-sight field of a pixel is the mean
 * of B mu over a fine grid inside it. Frames are cut-outs about the region.
 */

#include <glib.h>

#include "tf-measure.h"
#include "tf-check.h"

typedef struct
{
  double lon, lat; /* deg; longitude from central meridian */
  double sigma;    /* deg */
  double flux;     /* Mx, signed */
  double power;    /* 0 as 1: Gaussian; more: exp (-x^power), a flat top, flux no longer exact */
} BuilderPole;

typedef struct
{
  double scale_arcsec;
  double turn_deg; /* north angle */
  double b0_deg;
  double distance_au;
  double lon, lat; /* middle of the cut-out; lon from central meridian */
  double half_deg; /* half its side, deg on the Sun at disk centre */
  double noise;    /* G, one pixel */
  guint32 seed;
  gboolean radial; /* a radial product: no mu */
  guint fine;      /* grid inside a pixel: fine x fine */
  double dx, dy;   /* the region's middle against the middle pixel's centre, pixels */
} BuilderFrame;

/* Carrington longitude of the central meridian in all built frames. */
#define BUILDER_L0 123.4

void builder_init (BuilderFrame *how, double lon, double lat, double scale_arcsec);
TfGeometry builder_geometry (const BuilderFrame *how);
/** builder_field: width*height floats, no noise. */
float *
builder_field (const TfGeometry *g, const BuilderFrame *how, const BuilderPole *poles, guint n);
void builder_add_noise (float *field, gsize n, double sigma, guint32 seed);
TfFrame *builder_frame_of (const TfGeometry *g, const BuilderFrame *how, const float *field);
TfFrame *builder_frame (const BuilderFrame *how, const BuilderPole *poles, guint n);
/** builder_cap: outline about a place, lon from central meridian. */
TfOutline *builder_cap (double lon, double lat, double radius_deg);
/** builder_bipole: two poles about (lon, lat), separation and tilt (positive: leader
 * equatorward), leader's sign. */
void builder_bipole (BuilderPole poles[2], double lon, double lat, double separation, double tilt,
                     double flux, int leader);
TfTime builder_time (void);
const char *builder_real (const char *name); /* path of a real frame, or NULL */

void add_tilt_tests (void);
void add_bipole_tests (void);
void add_noise_tests (void);
void add_outline_tests (void);
void add_flag_tests (void);
void add_invariant_tests (void);
void add_real_tests (void);
void add_split_tests (void);
