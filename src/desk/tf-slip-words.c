/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-words.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-joy.h"
#include "tf-number.h"

/* -- small words ----------------------------------------------------------------------------- */

char *
tf_words_dup_number (double value, guint decimals)
{
  if (!isfinite (value))
    return g_strdup ("—");
  char form[8];
  g_snprintf (form, sizeof form, ".%uf", decimals);
  if (fabs (value) < 0.5 * pow (10, -(double)decimals))
    value = 0; /* no minus before nothing */
  g_autofree char *number = tf_number_dup_form (value, form, TRUE);
  return number[0] == '-' ? g_strconcat ("−", number + 1, NULL) : g_steal_pointer (&number);
}

char *
tf_words_dup_signed (double value, guint decimals)
{
  g_autofree char *number = tf_words_dup_number (value, decimals);
  return value >= 0.5 * pow (10, -(double)decimals) ? g_strconcat ("+", number, NULL)
                                                    : g_steal_pointer (&number);
}

char *
tf_words_dup_place (const TfMeasure *m)
{
  if (!isfinite (m->lat_deg))
    return g_strdup ("—");
  if (isfinite (m->cmd_deg))
    return tf_chart_dup_place (m->lat_deg, m->cmd_deg);
  g_autofree char *lon = tf_words_dup_number (m->carrington_lon_deg, 0);
  return g_strdup_printf (_ ("%s%.0f, Carrington %s°"), m->lat_deg < 0 ? _ ("S") : _ ("N"),
                          fabs (m->lat_deg), lon);
}

char *
tf_words_dup_longitude (const TfMeasure *m)
{
  if (!isfinite (m->cmd_deg) || !isfinite (m->stonyhurst_lon_deg)
      || fabs (tf_wrap_180 (m->cmd_deg - m->stonyhurst_lon_deg)) < 0.5)
    return NULL;
  g_autofree char *lon = tf_words_dup_signed (m->stonyhurst_lon_deg, 1);
  return g_strdup_printf (_ ("Stonyhurst %s°"), lon);
}

void
tf_words_split_verdict (const char *sentence, char **said, char **why)
{
  const char *bracket = strstr (sentence, " ("), *colon = strstr (sentence, ": ");
  gsize n = strlen (sentence);
  *why = NULL;
  if (bracket != NULL && (colon == NULL || bracket < colon) && sentence[n - 1] == ')')
    {
      *said = g_strndup (sentence, (gsize)(bracket - sentence));
      *why = g_strndup (bracket + 2, n - (gsize)(bracket - sentence) - 3);
    }
  else if (colon != NULL)
    {
      *said = g_strndup (sentence, (gsize)(colon - sentence));
      *why = g_strdup (colon + 2);
    }
  else
    *said = g_strdup (sentence);
}

char *
tf_words_dup_age (double seconds)
{
  if (!isfinite (seconds))
    return g_strdup (_ ("unknown"));
  double hours = fabs (seconds) / 3600;
  if (hours < 1)
    return g_strdup_printf (_ ("%.0f min"), hours * 60);
  if (hours < 48)
    return g_strdup_printf (_ ("%.0f h"), hours);
  if (hours < 24 * 365.25)
    return g_strdup_printf (_ ("%.0f d"), hours / 24);
  return g_strdup_printf (_ ("%.0f y"), hours / 24 / 365.25);
}

char *
tf_words_dup_short_source (const char *source)
{
  GString *text = g_string_new (NULL);
  g_auto (GStrv) words = g_strsplit (source, " ", -1);
  for (guint k = 0; words[k] != NULL; k++)
    {
      gunichar first = g_utf8_get_char (words[k]);
      if (k > 0)
        g_string_append_c (text, ' ');
      if (g_unichar_isupper (first))
        g_string_append_unichar (text, first);
      else
        g_string_append (text, words[k]);
    }
  return g_string_free (text, FALSE);
}

const char *
tf_line_name (TfLine line)
{
  static const char *const names[TF_N_LINES]
      = { N_ ("axis tilt"),  N_ ("leading"), N_ ("following"),
          N_ ("separation"), N_ ("shape"),   N_ ("floor") };
  return _ (names[line]);
}

static const char *
sign_of (int polarity)
{
  return polarity > 0 ? "+" : polarity < 0 ? "−" : "?";
}

static const TfPole *
pole_of (const TfMeasure *m, gboolean leading)
{
  gboolean positive = (m->leading_polarity > 0) == leading;
  return positive ? &m->positive : &m->negative;
}

/* -- values ---------------------------------------------------------------------------------- */

static char *
value_tilt (const TfMeasure *m)
{
  if (!isfinite (m->axis_tilt_deg))
    return isfinite (m->axis_bearing_deg) ? g_strdup (_ ("none: straddles the equator"))
                                          : g_strdup ("—");
  g_autofree char *tilt = tf_words_dup_signed (m->axis_tilt_deg, 1);
  g_autofree char *sigma = tf_words_dup_number (m->tilt_terms.total, 1);
  return g_strdup_printf ("%s° ± %s°", tilt, sigma);
}

static char *
value_flux (const TfReading *r, gboolean leading)
{
  const TfMeasure *m = r->measure;
  const TfPole *pole = pole_of (m, leading);
  if (m->leading_polarity == 0 && pole->pixels == 0)
    return g_strdup ("—");
  g_autofree char *flux = tf_units_dup_flux (r->units, pole->flux_mx);
  return g_strdup_printf ("%s %s", pole == &m->positive ? "+" : "−", flux);
}

static char *
value_separation (const TfReading *r)
{
  const TfMeasure *m = r->measure;
  if (!isfinite (m->separation_deg))
    return g_strdup ("—");
  return tf_units_dup_length (r->units, m->separation_deg, 1, m->separation_mm, 0);
}

static char *
value_shape (const TfMeasure *m)
{
  g_autofree char *imbalance = tf_words_dup_signed (m->imbalance, 2);
  return g_strdup_printf (_ ("imbalance %s"), imbalance);
}

static char *
value_floor (const TfReading *r)
{
  g_autofree char *floor = tf_units_dup_field (r->units, r->measure->floor_gauss, 0);
  return g_strdup_printf (r->measure->floor_kind == TF_FLOOR_EVEN ? _ ("even, %s") : _ ("local, %s"),
                          floor);
}

char *
tf_line_dup_value (TfLine line, const TfReading *r)
{
  switch (line)
    {
    case TF_LINE_TILT:
      return value_tilt (r->measure);
    case TF_LINE_LEADING:
      return value_flux (r, TRUE);
    case TF_LINE_FOLLOWING:
      return value_flux (r, FALSE);
    case TF_LINE_SEPARATION:
      return value_separation (r);
    case TF_LINE_SHAPE:
      return value_shape (r->measure);
    case TF_LINE_FLOOR:
      return value_floor (r);
    case TF_N_LINES:
    default:
      g_return_val_if_reached (NULL);
    }
}

/* -- what stands under them ------------------------------------------------------------------ */

static void
append_witnesses (GString *text, const TfMeasure *m)
{
  g_string_append (text, m->leading_sure ? _ ("\nleads, sure: witnesses")
                                         : _ ("\nleads, unsure: witnesses"));
  for (guint k = 0; k < G_N_ELEMENTS (m->witnesses); k++)
    g_string_append_printf (text, " %s",
                            m->witnesses[k] == TF_WITNESS_ABSENT ? "–" : sign_of (m->witnesses[k]));
}

static char *
under_tilt (const TfReading *r)
{
  const TfMeasure *m = r->measure;
  double expected, scatter;
  g_autofree char *noise = tf_words_dup_number (m->tilt_terms.noise, 1);
  g_autofree char *outline
      = r->at_rest ? tf_words_dup_number (m->tilt_terms.outline, 1) : g_strdup ("…");
  g_autofree char *floor = tf_words_dup_number (m->tilt_terms.floor, 1);
  GString *text = g_string_new (NULL);
  tf_joy_expected (m->lat_deg, m->separation_deg, &expected, &scatter);
  if (isfinite (expected))
    {
      g_autofree char *e = tf_words_dup_signed (expected, 0), *s = tf_words_dup_number (scatter, 0);
      g_string_append_printf (text, _ ("expected %s° ± %s° (Joy)\n"), e, s);
    }
  g_string_append_printf (text, _ ("noise %s, outline %s, floor %s"), noise, outline, floor);
  return g_string_free (text, FALSE);
}

static char *
under_flux (const TfReading *r, gboolean leading)
{
  const TfMeasure *m = r->measure;
  const TfPole *pole = pole_of (m, leading);
  if (!(m->flux_unsigned_mx > 0))
    return NULL;
  g_autofree char *sigma = tf_units_dup_flux_bare (r->units, pole->flux_sigma_mx);
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("± %s · %.0f %% of the flux"), sigma,
                          100 * pole->flux_mx / m->flux_unsigned_mx);
  if (leading && m->leading_polarity != 0)
    append_witnesses (text, m);
  return g_string_free (text, FALSE);
}

static char *
under_separation (const TfReading *r)
{
  const TfMeasure *m = r->measure;
  if (!isfinite (m->separation_deg))
    return NULL;
  g_autofree char *sigma = tf_units_dup_length (
      r->units, m->separation_sigma_deg, 2,
      m->separation_sigma_deg * m->separation_mm / m->separation_deg, 1);
  return g_strdup_printf ("± %s", sigma);
}

static char *
under_shape (const TfMeasure *m)
{
  g_autofree char *compactness = tf_words_dup_number (m->compactness, 2);
  g_autofree char *pieces
      = g_strdup_printf (ngettext ("%u piece", "%u pieces", m->pieces), m->pieces);
  return g_strdup_printf (_ ("compactness %s · %s"), compactness, pieces);
}

static char *
under_floor (const TfReading *r)
{
  const TfMeasure *m = r->measure;
  g_autofree char *noise = tf_units_dup_field (r->units, m->noise_gauss, 1),
                  *mu = tf_words_dup_number (m->mu, 2);
  const char *why = m->floor_kind == TF_FLOOR_LOCAL ? _ ("of this single look\n") : "";
  return g_strdup_printf (_ ("%snoise %s · μ %s"), why, noise, mu);
}

char *
tf_line_dup_under (TfLine line, const TfReading *r)
{
  switch (line)
    {
    case TF_LINE_TILT:
      return under_tilt (r);
    case TF_LINE_LEADING:
      return under_flux (r, TRUE);
    case TF_LINE_FOLLOWING:
      return under_flux (r, FALSE);
    case TF_LINE_SEPARATION:
      return under_separation (r);
    case TF_LINE_SHAPE:
      return under_shape (r->measure);
    case TF_LINE_FLOOR:
      return under_floor (r);
    case TF_N_LINES:
    default:
      g_return_val_if_reached (NULL);
    }
}

/* -- how they were got ----------------------------------------------------------------------- */

static const char *const how_texts[TF_N_LINES] = {
  [TF_LINE_TILT] = N_ ("Angle of the axis from the following to the leading pole against the "
                       "parallel, planar with the cosine of the mean "
                       "latitude; positive means the leader is nearer to the equator, in both "
                       "hemispheres. Its uncertainty: noise "
                       "(every pixel that may cross the floor counted), outline (16 fixed "
                       "deformations of it), floor (20 % up and down), in quadrature."),
  [TF_LINE_LEADING] = N_ ("Sum of field times area over the pixels of that polarity above the "
                          "floor, inside the outline. The uncertainty holds "
                          "noise, outline and floor.\n\nThe leading polarity is the one whose pole "
                          "lies further west. Three witnesses tell it "
                          "apart from each other: the flux centroids; the centroids of the field "
                          "above three times the floor; the "
                          "western of the two strongest single-polarity pieces. It is sure when "
                          "all agree and the poles are further "
                          "apart in longitude than twice the uncertainty."),
  [TF_LINE_FOLLOWING] = N_ ("Sum of field times area over the pixels of that polarity above the "
                            "floor, inside the outline. The uncertainty "
                            "holds noise, outline and floor."),
  [TF_LINE_SEPARATION] = N_ ("Great-circle distance between the flux-weighted centroids of the two "
                             "polarities, as unit vectors on the Sun; "
                             "lengths on a sphere of 695.7 Mm (IAU 2015 Resolution B3)."),
  [TF_LINE_SHAPE] = N_ ("Imbalance: (positive − negative) / (positive + negative flux). "
                        "Compactness: separation / sum of the two rms radii; below "
                        "0.8 the poles overlap, below 0.5 the tilt is unsure. Pieces: connected "
                        "parts of one polarity with at least 15 % of the flux."),
  [TF_LINE_FLOOR] = N_ ("Only pixels stronger than the floor count. A local floor is three times "
                        "the noise at that place, the default for a "
                        "single look; towards the limb it keeps less of the same region. Follow, "
                        "Laws and export use one even floor for a whole study. "
                        "The noise is 1.4826 × the median absolute deviation of weak pixels by "
                        "rings of μ; the header’s figure is not trusted."),
};

static void
append_source (GString *text, TfLine line)
{
  if (line == TF_LINE_TILT && tf_joy_relations[0].name != NULL)
    g_string_append_printf (
        text, _ ("\n\nExpected tilt: Joy’s law after %s; the scatter is wider for close poles."),
        tf_joy_relations[0].name);
}

char *
tf_line_dup_how (TfLine line, const TfReading *r)
{
  const TfMeasure *m = r->measure;
  GString *text = g_string_new (_ (how_texts[line]));
  append_source (text, line);
  g_autofree char *floor = tf_units_dup_field (r->units, m->floor_gauss, 1);
  g_string_append_printf (text, _ ("\n\nPixels above the floor: %u positive, %u negative."),
                          m->positive.pixels, m->negative.pixels);
  g_string_append_printf (text,
                          m->floor_kind == TF_FLOOR_EVEN ? _ ("\nFloor: even, %s.")
                                                         : _ ("\nFloor: local, %s here."),
                          floor);
  static const char *const used[]
      = { N_ ("radial (line of sight / μ)"), N_ ("as observed"), N_ ("potential-field estimate") };
  g_string_append_printf (text, _ ("\nField used: %s."), _ (used[m->field_used]));
  if (!isfinite (m->scale))
    g_string_append (text, _ ("\nThe instrument’s field is not scaled."));
  if (line == TF_LINE_TILT && !r->at_rest)
    g_string_append (text, _ ("\nThe outline term follows when the drawing rests."));
  g_string_append_printf (text, _ ("\n\nMethod: %s"), r->method);
  return g_string_free (text, FALSE);
}
