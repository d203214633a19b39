/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Every number of the rule. Where they come from and how sharp each is: the study of hints in the design notes. */

#include <stddef.h>

#include <glib/gi18n-lib.h>

#include "tf-hint.h"

#define AT(member) offsetof (TfHintParams, member)

const TfOption tf_hint_options[] = {
  /* the working grid and its levels */
  { "cell", TF_OPTION_NUMBER, "Mm", 4.0, 1.0, 10.0, NULL,
    N_ ("cell of the equal-area working grid"), AT (cell_mm) },
  { "smooth-field", TF_OPTION_NUMBER, "Mm", 4.0, 1.0, 20.0, NULL,
    N_ ("sigma of the Gaussian that smooths the field"), AT (smooth_mm) },
  { "edge-mu", TF_OPTION_NUMBER, "", 0.26, 0.1, 0.9, NULL,
    N_ ("mu below which nothing is looked at"), AT (edge_mu) },
  { "low-sigma", TF_OPTION_NUMBER, "sigma", 3.5, 1.0, 20.0, NULL,
    N_ ("low level of the smoothed radial field in units of its scatter"), AT (low_sigma) },
  { "noise-sigma", TF_OPTION_NUMBER, "sigma", 2.5, 1.0, 20.0, NULL,
    N_ ("the same where that scatter is pixel noise alone and not the network"), AT (noise_sigma) },
  { "low-gauss", TF_OPTION_NUMBER, "G", 12.0, 0.0, 500.0, NULL,
    N_ ("least low level, in (scaled) gauss"), AT (low_gauss) },
  { "high-sigma", TF_OPTION_NUMBER, "sigma", 8.0, 1.0, 50.0, NULL,
    N_ ("level that a piece must reach somewhere, in units of the noise"), AT (high_sigma) },
  { "active-share", TF_OPTION_NUMBER, "", 0.5, 0.0, 1.0, NULL,
    N_ ("share of the frame above low-gauss from which its noise is not believed"),
    AT (active_share) },
  /* pieces of one sign */
  { "smooth-hills", TF_OPTION_NUMBER, "Mm", 5.0, 0.0, 50.0, NULL,
    N_ ("sigma by which the field is smoothed once more to tell hills apart"), AT (hill_mm) },
  { "saddle", TF_OPTION_NUMBER, "", 0.8, 0.0, 1.0, NULL,
    N_ ("two hills are one when the saddle reaches this share of the lower top"), AT (saddle) },
  { "patch-flux", TF_OPTION_NUMBER, "Mx", 4e19, 0.0, 1e22, NULL,
    N_ ("pieces with less flux are dropped"), AT (patch_mx) },
  /* joining */
  { "reach", TF_OPTION_NUMBER, "Mm", 40.0, 1.0, 200.0, NULL,
    N_ ("widest gap across which pieces may be joined"), AT (reach_mm) },
  { "gap-scale", TF_OPTION_NUMBER, "Mm", 15.0, 0.1, 200.0, NULL,
    N_ ("gap at which the score of pieces that balance falls to 1/e"), AT (gap_mm) },
  { "gap-scale-same", TF_OPTION_NUMBER, "Mm", 14.0, 0.1, 200.0, NULL,
    N_ ("the same for pieces that do not balance"), AT (gap_same_mm) },
  { "same-weight", TF_OPTION_NUMBER, "", 0.5, 0.0, 1.0, NULL,
    N_ ("weight of pairs that do not balance"), AT (same_weight) },
  { "balance", TF_OPTION_NUMBER, "", 0.05, 0.0, 1.0, NULL,
    N_ ("share of the smaller one's flux from which a pair balances"), AT (balance) },
  { "least-score", TF_OPTION_NUMBER, "", 0.14, 0.01, 1.0, NULL,
    N_ ("score below which no more pieces are joined"), AT (score_min) },
  { "length", TF_OPTION_NUMBER, "Mm", 125.0, 10.0, 1000.0, NULL,
    N_ ("longest plausible distance of the poles at length-flux; grows with the fourth "
        "root of the flux"),
    AT (length_mm) },
  { "length-flux", TF_OPTION_NUMBER, "Mx", 1e22, 1e18, 1e24, NULL,
    N_ ("flux to which length belongs"), AT (length_mx) },
  { "length-least", TF_OPTION_NUMBER, "Mm", 40.0, 1.0, 1000.0, NULL,
    N_ ("never less than this"), AT (length_least_mm) },
  { "length-most", TF_OPTION_NUMBER, "Mm", 160.0, 1.0, 1000.0, NULL,
    N_ ("never more than this"), AT (length_most_mm) },
  { "centres", TF_OPTION_NUMBER, "", 1.3, 0.1, 10.0, NULL,
    N_ ("widest distance of the centres of a pair, in plausible lengths"), AT (centres_share) },
  { "nest-weaker", TF_OPTION_NUMBER, "", 0.3, 0.0, 0.5, NULL,
    N_ ("share of the weaker sign from which two regions each stand for themselves and "
        "are never joined"),
    AT (nest_weaker) },
  { "nest-flux", TF_OPTION_NUMBER, "Mx", 1e21, 0.0, 1e24, NULL,
    N_ ("least flux of each of them"), AT (nest_mx) },
  { "nest-small", TF_OPTION_NUMBER, "", 0.05, 0.0, 1.0, NULL,
    N_ ("a region smaller than this share of the other may be joined all the same"),
    AT (nest_small) },
  /* parting */
  { "part-gain", TF_OPTION_NUMBER, "", 0.5, 0.01, 10.0, NULL,
    N_ ("two hills of a region stand for themselves when that saves this share of the way to the other sign"),
    AT (part_gain) },
  { "part-compact", TF_OPTION_NUMBER, "", 0.3, 0.01, 10.0, NULL,
    N_ ("the same share where both hills are compact"), AT (part_compact) },
  { "part-gauss", TF_OPTION_NUMBER, "G", 90.0, 0.0, 5000.0, NULL,
    N_ ("mean smoothed field from which a hill is compact"), AT (part_gauss) },
  { "part-flux", TF_OPTION_NUMBER, "Mx", 5e20, 0.0, 1e24, NULL,
    N_ ("least flux of each part"), AT (part_mx) },
  /* left-overs */
  { "single-weaker", TF_OPTION_NUMBER, "", 0.15, 0.0, 0.5, NULL,
    N_ ("share of the weaker sign below which a cluster is plage of one sign, offered as unipolar"),
    AT (single_weaker) },
  { "tidy-gap", TF_OPTION_NUMBER, "Mm", 12.0, 0.0, 200.0, NULL,
    N_ ("gap across which a one-signed left-over goes to a bipole"), AT (tidy_mm) },
  { "tidy-single", TF_OPTION_NUMBER, "", 0.12, 0.0, 0.5, NULL,
    N_ ("share of the weaker sign below which a cluster is a left-over of one sign"), AT (tidy_single) },
  { "tidy-weaker", TF_OPTION_NUMBER, "", 0.25, 0.0, 0.5, NULL,
    N_ ("share of the weaker sign that must then remain"), AT (tidy_weaker) },
  { "tidy-length", TF_OPTION_NUMBER, "", 1.25, 0.1, 10.0, NULL,
    N_ ("distance of the poles that is then allowed, in plausible lengths"), AT (tidy_length) },
  { "plage-gap", TF_OPTION_NUMBER, "Mm", 30.0, 0.0, 200.0, NULL,
    N_ ("gap across which left-overs of one sign are one plage"), AT (plage_mm) },
  { "plage-centres", TF_OPTION_NUMBER, "Mm", 120.0, 0.0, 1000.0, NULL,
    N_ ("distance of their centres that is then allowed"), AT (plage_centres_mm) },
  /* what is offered */
  { "bipole-flux", TF_OPTION_NUMBER, "Mx", 3e20, 0.0, 1e23, NULL,
    N_ ("least unsigned flux of a bipole, times (full-mu/mu)^2 below full-mu"), AT (bipole_mx) },
  { "unipolar-flux", TF_OPTION_NUMBER, "Mx", 2e21, 0.0, 1e23, NULL,
    N_ ("least flux of a unipolar hint, times (full-mu/mu)^2 below full-mu"), AT (unipolar_mx) },
  { "full-mu", TF_OPTION_NUMBER, "", 0.5, 0.1, 1.0, NULL,
    N_ ("mu below which more flux is asked for"), AT (full_mu) },
  { "unipolar-mu", TF_OPTION_NUMBER, "", 0.45, 0.1, 1.0, NULL,
    N_ ("mu below which no unipolar hint is offered"), AT (unipolar_mu) },
  { "small-flux", TF_OPTION_NUMBER, "Mx", 1e21, 0.0, 1e24, NULL,
    N_ ("bipoles with less flux are held to the next two"), AT (small_mx) },
  { "small-weaker", TF_OPTION_NUMBER, "", 0.25, 0.0, 0.5, NULL,
    N_ ("least share of their weaker sign"), AT (small_weaker) },
  { "small-length", TF_OPTION_NUMBER, "Mm", 45.0, 1.0, 1000.0, NULL,
    N_ ("longest distance of their poles"), AT (small_mm) },
  /* the outline */
  { "close", TF_OPTION_NUMBER, "Mm", 12.0, 0.0, 100.0, NULL,
    N_ ("gaps in a region are closed over this radius, up to three times half as far "
        "again until it is one piece"),
    AT (close_mm) },
  { "grow", TF_OPTION_NUMBER, "Mm", 6.0, 0.0, 50.0, NULL,
    N_ ("an outline is grown by this"), AT (grow_mm) },
  { "smooth-outline", TF_OPTION_NUMBER, "Mm", 6.0, 0.0, 50.0, NULL,
    N_ ("sigma by which an outline is smoothed"), AT (soften_mm) },
  { "smooth-area", TF_OPTION_NUMBER, "Mm2", 2000.0, 0.0, 1e6, NULL,
    N_ ("smaller outlines are not smoothed"), AT (soften_mm2) },
  { "simplify", TF_OPTION_NUMBER, "Mm", 3.0, 0.1, 30.0, NULL,
    N_ ("tolerance to which an outline is simplified"), AT (simplify_mm) },
  /* cautions */
  { "near", TF_OPTION_NUMBER, "Mm", 15.0, 0.0, 200.0, NULL,
    N_ ("a neighbour across a smaller gap is told"), AT (near_mm) },
  { "long", TF_OPTION_NUMBER, "", 0.9, 0.1, 10.0, NULL,
    N_ ("poles farther apart than this share of the plausible length are told"), AT (long_share) },
  { "one-sided", TF_OPTION_NUMBER, "", 0.5, 0.0, 1.0, NULL,
    N_ ("imbalance from which it is told"), AT (one_sided) },
  { NULL },
};

void
tf_hint_params_init (TfHintParams *params)
{
  tf_options_reset (tf_hint_options, params);
}
