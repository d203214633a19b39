/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stddef.h>

#include <glib/gi18n-lib.h>

#include "tf-complexity.h"

static const char *const weights[] = { "area", "peak", NULL };

#define AT(member) offsetof (TfComplexityParams, member)

/* Sources, all from memory but the 50 G/Mm and 150 G of Falconer, Moore & Gary: the reference's
 * section 7. The core's field is our choice. */
const TfOption tf_complexity_options[] = {
  { "complexity-mu", TF_OPTION_NUMBER, "", 0.7, 0.0, 1.0, NULL,
    N_ ("complexity is given where the region's mu is at least this (0.7 is 45 degrees from disk "
        "centre)"),
    AT (mu_min) },
  { "complexity-near-limb", TF_OPTION_BOOL, "", 0, 0, 1, NULL,
    N_ ("give complexity nearer the limb as well; false inversion lines appear there on the "
        "limbward side of spots"),
    AT (anyway) },
  { "reference-fwhm", TF_OPTION_NUMBER, "Mm", 3.0, 0.5, 20.0, NULL,
    N_ ("width of the Gaussian that brings every frame to one resolution"), AT (fwhm_mm) },
  { "reference-step", TF_OPTION_NUMBER, "Mm", 1.5, 0.25, 10.0, NULL,
    N_ ("distance of the grid's nodes on which complexity is worked out"), AT (step_mm) },
  { "strong-field", TF_OPTION_NUMBER, "G", 150.0, 1.0, 3000.0, NULL,
    N_ ("strong field: R's two bitmaps (Schrijver 2007) and the fields that an inversion line "
        "parts"),
    AT (strong_gauss) },
  { "line-side", TF_OPTION_NUMBER, "Mm", 15.0, 1.5, 100.0, NULL,
    N_ ("an inversion line has strong field of both signs within this distance straight across"),
    AT (side_mm) },
  { "strong-gradient", TF_OPTION_NUMBER, "G/Mm", 50.0, 0.0, 2000.0, NULL,
    N_ ("gradient across the line that counts as strong (Falconer, Moore & Gary 2003)"),
    AT (gradient_gauss_mm) },
  { "strong-transverse", TF_OPTION_NUMBER, "G", 150.0, 0.0, 3000.0, NULL,
    N_ ("potential field along the surface that counts as strong (Falconer, Moore & Gary 2003)"),
    AT (transverse_gauss) },
  { "near-line", TF_OPTION_NUMBER, "Mm", 15.0, 1.0, 100.0, NULL,
    N_ ("FWHM of the Gaussian about the line in R (Schrijver 2007), and reach of the flux near the "
        "line"),
    AT (near_mm) },
  { "r-weight", TF_OPTION_CHOICE, "", 0, 0, 1, weights,
    N_ ("R's Gaussian has unit area or unit peak (the paper's choice is from memory: area)"),
    AT (r_weight) },
  { "core-field", TF_OPTION_NUMBER, "G", 1000.0, 100.0, 4000.0, NULL,
    N_ ("field that counts as the core of a spot, for a delta candidate (our choice)"),
    AT (core_gauss) },
  { "core-distance", TF_OPTION_NUMBER, "deg", 2.0, 0.2, 10.0, NULL,
    N_ ("cores of opposite polarity nearer than this can be a delta candidate"), AT (core_deg) },
  { NULL },
};

void
tf_complexity_params_init (TfComplexityParams *params)
{
  tf_options_reset (tf_complexity_options, params);
}
