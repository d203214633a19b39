/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <stddef.h>
#include <string.h>

#include <glib/gi18n-lib.h>

#include "tf-measure.h"
#include "tf-rotation.h"

static const char *const field_names[] = { "radial", "as observed", "potential", NULL };
static const char *const floor_names[] = { "local", "even", NULL };
static const char *const tilt_forms[] = { "planar", "great-circle", NULL };

#define AT(member) offsetof (TfMeasureParams, member)

const TfOption tf_measure_options[] = {
  { "field", TF_OPTION_CHOICE, "", TF_FIELD_USED_RADIAL, 0, 2, field_names,
    N_ ("field that is summed: radial (line-of-sight field over mu; a radial product as it is), as "
        "observed, or the radial field of the "
        "potential field that shows the observed one (Leka, Barnes & Wagner 2017)"),
    AT (field_used) },
  { "floor-kind", TF_OPTION_CHOICE, "", TF_FLOOR_LOCAL, 0, 1, floor_names,
    N_ ("local: a floor on the observed field; even: one floor on the field used, the same all "
        "over the disk"),
    AT (floor_kind) },
  { "floor-sigma", TF_OPTION_NUMBER, "sigma", 3.0, 0.0, 20.0, NULL,
    N_ ("local floor in units of the noise where no floor in gauss is given"), AT (floor_sigma) },
  { "floor-gauss", TF_OPTION_NUMBER, "G", (double)NAN, 0.0, 5000.0, NULL,
    N_ ("floor in gauss; not given: from the frame's noise"), AT (floor_gauss) },
  { "mu-min", TF_OPTION_NUMBER, "", 0.17, 0.05, 0.95, NULL,
    N_ ("pixels nearer the limb than this mu are left out"), AT (mu_min) },
  { "tilt-form", TF_OPTION_CHOICE, "", 0, 0, 1, tilt_forms,
    N_ ("planar: with the cosine of the mean latitude; great-circle: bearing at the midpoint of "
        "the poles"),
    AT (tilt_form) },
  { "rotation", TF_OPTION_CHOICE, "", 0, 0, 100, tf_rotation_names,
    N_ ("rotation law that carries an outline to the time of the frame"), AT (law) },
  { "scale", TF_OPTION_NUMBER, "", (double)NAN, 0.05, 20.0, NULL,
    N_ ("factor that turns the instrument's field into a common one; not given: not scaled"),
    AT (scale) },
  { "strong-floors", TF_OPTION_NUMBER, "floors", 3.0, 1.5, 20.0, NULL,
    N_ ("strong field, for the second witness, in units of the floor"), AT (strong_floors) },
  { "piece-share", TF_OPTION_NUMBER, "", 0.15, 0.01, 0.5, NULL,
    N_ ("share of the flux from which a part of one polarity counts as a piece"),
    AT (piece_share) },
  { "smooth", TF_OPTION_NUMBER, "pixel", 0.9, 0.5, 5.0, NULL,
    N_ ("sigma of the Gaussian that smooths the field of the noise term"), AT (smooth_px) },
  { "floor-step", TF_OPTION_NUMBER, "", 0.2, 0.01, 0.5, NULL,
    N_ ("relative step of the floor for the floor term of the uncertainty"), AT (floor_step) },
  { "outline-deg", TF_OPTION_NUMBER, "deg", 0.5, 0.0, 5.0, NULL,
    N_ ("least amplitude of the outline's deformations, for the outline term"), AT (outline_deg) },
  { "outline-share", TF_OPTION_NUMBER, "", 0.08, 0.0, 0.5, NULL,
    N_ ("amplitude of the outline's deformations as a share of its radius"), AT (outline_share) },
  { "outline-term", TF_OPTION_BOOL, "", 1, 0, 1, NULL,
    N_ ("work out the outline term of the uncertainty"), AT (outline_term) },
  { "ephemeral-flux", TF_OPTION_NUMBER, "Mx", 3e20, 0.0, 1e23, NULL,
    N_ ("unsigned flux below which a region counts as ephemeral"), AT (ephemeral_mx) },
  { "realisations", TF_OPTION_INT, "", 0, 0, 10000, NULL,
    N_ ("seeded noise realisations for the noise term; 0: by its formula"), AT (realisations) },
  { "seed", TF_OPTION_INT, "", 1, 0, G_MAXINT, NULL, N_ ("seed of the noise realisations"),
    AT (seed) },
  { "potential-step", TF_OPTION_NUMBER, "Mm", 1.0, 0.2, 20.0, NULL,
    N_ ("distance of the nodes of the potential field's grid"), AT (potential_step_mm) },
  { "potential-margin", TF_OPTION_NUMBER, "Mm", 60.0, 0.0, 400.0, NULL,
    N_ ("surroundings of the region that the potential field's box holds, on all sides"),
    AT (potential_margin_mm) },
  { NULL },
};

G_DEFINE_QUARK (tf - region - error - quark, tf_region_error)

void
tf_measure_params_init (TfMeasureParams *params)
{
  tf_options_reset (tf_measure_options, params);
}

const char *
tf_field_used_name (TfFieldUsed used)
{
  return field_names[CLAMP (used, 0, 2)];
}

const char *
tf_floor_kind_name (TfFloorKind kind)
{
  return floor_names[CLAMP (kind, 0, 1)];
}

static const char geometry_word[] = " geometry=";

char *
tf_measure_dup_method (const TfMeasureParams *params, const TfCorrection *correction)
{
  g_return_val_if_fail (params != NULL, NULL);
  char *text = tf_options_dup_canonical (tf_measure_options, params, TF_MEASURE_METHOD);
  if (!tf_correction_is_set (correction))
    return text;
  g_autofree char *plain = text, *by_hand = tf_correction_dup_text (correction);
  return g_strconcat (plain, geometry_word, by_hand, NULL);
}

gboolean
tf_measure_read_method (const char *method, TfMeasureParams *params, TfCorrection *correction)
{
  g_return_val_if_fail (method != NULL && params != NULL && correction != NULL, FALSE);
  g_autofree char *plain = g_strdup (method);
  char *word = strstr (plain, geometry_word);
  *correction = tf_correction_none ();
  if (word != NULL && !tf_correction_from_text (correction, word + strlen (geometry_word)))
    return FALSE;
  if (word != NULL)
    *word = '\0';
  return tf_options_read_canonical (tf_measure_options, params, TF_MEASURE_METHOD, plain);
}

char *
tf_measure_dup_even_method (const char *method, double floor_gauss, TfMeasureParams *params)
{
  TfCorrection correction;
  g_return_val_if_fail (method != NULL && params != NULL, NULL);
  if (!tf_measure_read_method (method, params, &correction))
    return NULL;
  params->floor_kind = TF_FLOOR_EVEN;
  params->floor_gauss = floor_gauss;
  return tf_measure_dup_method (params, &correction);
}
