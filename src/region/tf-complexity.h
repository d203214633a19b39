/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfComplexity: how tangled the field inside one outline is, in published figures, at one reference
 * resolution.
 *
 * The figures describe the field; they are not a flare forecast, and the note
 * "complexity-describes" stands with them wherever they are shown. They are worked out on a flat
 * equal-area grid (Gaussian of FWHM fwhm_mm on the Sun, nodes step_mm apart), so that frames of
 * different pixels agree; both numbers belong to every figure. They are given for mu >= mu_min
 * unless asked for, since nearer the limb false inversion lines appear on the limbward side of
 * spots (reference, from memory). NaN: no value.
 *
 * Schrijver 2007, ApJ 655, L117 (R); Falconer, Moore & Gary 2003, 2006, 2008 (strong-gradient
 * length and gradient-weighted length of the main inversion line). Their details are from memory
 * where an option's sentence says so.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

#include "tf-inversion.h"
#include "tf-measure.h"

G_BEGIN_DECLS

#define TF_COMPLEXITY_METHOD "inversion-lines/1"

typedef struct
{
  double mu_min;            /* 0.7: beyond it the figures are not given ... */
  gboolean anyway;          /* ... unless asked for */
  double fwhm_mm, step_mm;  /* 3, 1.5: the reference resolution */
  double strong_gauss;      /* 150: strong field, both for R and beside an inversion line */
  double side_mm;           /* 15: an inversion line has strong field of both signs within this */
  double gradient_gauss_mm; /* 50: strong gradient */
  double transverse_gauss;  /* 150: strong transverse potential field */
  double near_mm;           /* 15: FWHM of R's Gaussian, and reach of "flux near the line" */
  int r_weight;             /* 0: Gaussian of unit area; 1: of unit peak */
  double core_gauss;        /* 1000: core of a spot, for a delta candidate */
  double core_deg;          /* 2: cores of opposite sign nearer than this */
} TfComplexityParams;
extern const TfOption tf_complexity_options[];
void tf_complexity_params_init (TfComplexityParams *params);

typedef struct
{
  gboolean given;
  TfNote *refusal; /* owned: why the figures are not given; NULL when they are */
  double mu;       /* at the middle of the outline; NaN on maps */
  double fwhm_mm, step_mm;
  TfFieldUsed field_used;
  double length_mm;                 /* of all inversion lines */
  double strong_field_length_mm;    /* where the transverse potential field is strong */
  double strong_gradient_length_mm; /* where the gradient is strong as well */
  double gradient_weighted_gauss;   /* gradient summed along the strong-field length, G */
  double max_gradient_gauss_mm;
  double r_mx, r_log10; /* Schrijver's R; log10: NaN when R is 0 */
  double flux_near_mx;  /* unsigned, within near_mm of a strong-gradient stretch */
  guint pieces;         /* single-polarity pieces of strong field with enough of its flux */
  gboolean delta_candidate;
  double delta_distance_mm; /* between the nearest cores of opposite sign; NaN without two */
  TfNote *delta_reason;     /* owned: why it is one, or is not */
  TfInversion inversion;    /* owned */
  TfNotes *notes;           /* owned: what the figures are, and cautions */
} TfComplexity;

/**
 * tf_complexity_region: of @outline (at any time; carried to the frame's) on @frame. Near the limb,
 * on a map and where the frame has no values the figures are not given and the refusal says why.
 * @measure: field used, scale, rotation law, least mu and piece share are taken from it
 */
void tf_complexity_region (TfComplexity *complexity, const TfFrame *frame, const TfOutline *outline,
                           const TfMeasureParams *measure, const TfComplexityParams *params);
void tf_complexity_clear (TfComplexity *complexity);
void tf_complexity_copy (TfComplexity *to, const TfComplexity *from);

/** tf_complexity_build_json: the builder's next value: an object of figures, lines and notes, or
 * null when they are not given.
 * @params: kept with the figures */
void tf_complexity_build_json (const TfComplexity *complexity, const TfComplexityParams *params,
                               JsonBuilder *builder);
/** tf_complexity_build_members: "complexity" and "complexity_reason" ({code, text} or null), into
 * the open object; NULL @complexity:
 * both null. */
void tf_complexity_build_members (const TfComplexity *complexity, const TfComplexityParams *params,
                                  JsonBuilder *builder);
/** tf_complexity_dup_text: the figures with the caution, or why they are not given: lines for a
 * person, each ended. */
char *tf_complexity_dup_text (const TfComplexity *complexity);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TfComplexity, tf_complexity_clear)

G_END_DECLS
