/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-how.h"

#include <math.h>
#include <glib/gi18n-lib.h>

static const char *
sign_of (int polarity)
{
  return polarity > 0 ? "+" : polarity < 0 ? "−" : "?";
}

static void
append_degrees (GString *text, const char *head, double deg, guint decimals, gboolean sign,
                const char *tail)
{
  if (!isfinite (deg))
    return;
  g_autofree char *number
      = sign ? tf_words_dup_signed (deg, decimals) : tf_words_dup_number (deg, decimals);
  g_string_append_printf (text, "%s%s%s", head, number, tail);
}

static void
append_note (GString *text, const char *head, const char *code)
{
  g_autoptr (TfNote) note = tf_note_new (code, "");
  g_autofree char *sentence = tf_note_dup_text (note, FALSE);
  g_string_append_printf (text, "%s%s", head, sentence);
}

/* -- place ----------------------------------------------------------------------------------- */

static void
append_pole (GString *text, const char *head, const TfPole *pole)
{
  if (pole->pixels == 0 && !pole->pinned)
    return;
  g_autofree char *lat = tf_words_dup_signed (pole->lat_deg, 2),
                  *lon = tf_words_dup_number (pole->carrington_lon_deg, 2),
                  *sigma = tf_words_dup_number (pole->place_sigma_deg, 2);
  g_string_append_printf (text, _ ("\n%s: latitude %s°, Carrington %s°, ± %s°"), head, lat, lon, sigma);
}

char *
tf_how_dup_place (const TfReading *r, TfSession *session)
{
  const TfMeasure *m = r->measure;
  TfCorrection correction = tf_session_get_correction (session);
  GString *text = g_string_new (
      m->leading_polarity != 0
          ? _ ("The middle of the two poles, which are the flux-weighted centroids of the two "
               "polarities as unit vectors on the Sun.")
          : _ ("The one pole: the flux-weighted centroid of the polarity that is there."));
  append_degrees (text, _ ("\n\nLatitude "), m->lat_deg, 2, TRUE, _ ("° (heliographic, north positive)"));
  append_degrees (text, "\nCMD ", m->cmd_deg, 2, TRUE,
                  _ ("° (Stonyhurst longitude less that of the observer’s meridian, west positive)"));
  append_degrees (text, _ ("\nStonyhurst longitude "), m->stonyhurst_lon_deg, 2, TRUE, "°");
  append_degrees (text, _ ("\nCarrington longitude "), m->carrington_lon_deg, 2, FALSE, "°");
  append_degrees (text, "\nμ ", m->mu, 3, FALSE,
                  _ (" (cosine at the Sun’s surface, the observer at a finite distance)"));
  append_pole (text, _ ("Positive pole"), &m->positive);
  append_pole (text, _ ("Negative pole"), &m->negative);
  g_autofree char *time = tf_time_dup_iso (m->time, 0);
  g_string_append_printf (text, _ ("\n\nAt %s, from the frame’s header"),
                          time != NULL ? time : _ ("an unknown time"));
  g_string_append (text, tf_correction_is_set (&correction) ? _ (", with your correction of its geometry.")
                                                            : ".");
  g_string_append_printf (text, _ ("\n\nMethod: %s"), r->method);
  return g_string_free (text, FALSE);
}

/* -- verdict --------------------------------------------------------------------------------- */

static void
append_cycle (GString *text, const TfCycleCall *call)
{
  if (call->number == 0)
    g_string_append (text, _ ("\n\nCycle: unknown, "));
  else if (call->sure)
    g_string_append_printf (text, _ ("\n\nCycle: %d, "), call->number);
  else
    g_string_append_printf (text, _ ("\n\nCycle: %d or %d, "), call->number, call->other);
  g_string_append (text, _ ("told by time and latitude alone, never by polarity."));
  if (call->reason != NULL)
    append_note (text, " ", call->reason);
}

static void
append_limits (GString *text, const TfVerdictParams *p)
{
  g_autofree char *zone = tf_words_dup_number (p->equator_deg, 0),
                  *mu = tf_words_dup_number (p->mu_min, 2),
                  *weaker = tf_words_dup_number (100 * p->weaker_share, 0),
                  *steep = tf_words_dup_number (p->steep_deg, 0);
  g_string_append_printf (
      text,
      _ ("\n\nNothing is said within %s° of the equator or with poles on both sides of it, at μ below "
         "%s, when the weaker polarity holds less than %s %% of the flux, when the axis is steeper than "
         "%s°, when the leader is unsure or its witnesses differ, and when the cycle is unsure."),
      zone, mu, weaker, steep);
}

char *
tf_how_dup_verdict (const TfReading *r, const TfJudge *judge)
{
  const TfMeasure *m = r->measure;
  const TfVerdict *v = r->verdict;
  GString *text = g_string_new (
      _ ("Hale’s law: within one cycle the same polarity leads in all regions of a hemisphere, the other "
         "one in the other hemisphere, and both change with the next cycle."));
  append_cycle (text, &v->cycle);
  append_degrees (text, _ ("\nHemisphere: by the latitude of the middle, "), m->lat_deg, 2, TRUE, "°.");
  if (v->expected != 0)
    g_string_append_printf (text, _ ("\nExpected to lead: %s."), sign_of (v->expected));
  if (m->leading_polarity != 0)
    g_string_append_printf (text, m->leading_sure ? _ ("\nFound to lead: %s, sure.")
                                                  : _ ("\nFound to lead: %s, unsure."),
                            sign_of (m->leading_polarity));
  if (v->kind == TF_VERDICT_CANNOT_SAY && v->reason != NULL)
    append_note (text, "\n", v->reason);
  append_limits (text, tf_judge_get_params (judge));
  g_string_append (text, _ ("\n\nNo verdict is stored: it follows the divides as they are now."));
  return g_string_free (text, FALSE);
}

/* -- class and cautions ----------------------------------------------------------------------- */

char *
tf_how_dup_class (const TfRow *row)
{
  GString *text = g_string_new (
      _ ("The Mount Wilson class is a person’s judgement; the program gives none. It belongs to region, "
         "time and person: the last word of each person on this frame stands, and the journal has those "
         "before it. From a magnetogram alone δ is a candidate only; δ is refused with α."));
  if (row->mw_class[0] != '\0')
    g_string_append_printf (text, _ ("\n\n%s: seen on the magnetogram of this frame. Who gave it, and "
                                     "when, stands in the journal of the region."),
                            row->mw_class);
  else
    g_string_append (text, _ ("\n\nNobody has given one on this frame yet."));
  g_string_append (text, _ ("\n\nComplexity describes the field; it is no flare forecast. Operational "
                            "decisions rest with the responsible national space-weather service."));
  return g_string_free (text, FALSE);
}

char *
tf_how_dup_cautions (const TfReading *r)
{
  const TfMeasure *m = r->measure;
  double weaker = fmin (m->positive.flux_mx, m->negative.flux_mx) / m->flux_unsigned_mx;
  g_autofree char *mu = tf_words_dup_number (m->mu, 2), *share = tf_words_dup_number (100 * weaker, 0),
                  *compactness = tf_words_dup_number (m->compactness, 2),
                  *floor = tf_units_dup_field (r->units, m->floor_gauss, 1),
                  *noise = tf_units_dup_field (r->units, m->noise_gauss, 1);
  GString *text = g_string_new (_ ("A caution stands where a figure passes its limit; the numbers are given "
                                   "all the same."));
  g_string_append_printf (text, _ ("\n\nμ %s: near the limb below 0.5, strongly below 0.34."), mu);
  g_string_append_printf (text, _ ("\nWeaker polarity %s %% of the flux: doubtful from 10 to 20 %%."), share);
  g_string_append_printf (text, _ ("\nCompactness %s: the poles overlap below 0.8, the tilt is unsure below "
                                   "0.5."),
                          compactness);
  g_string_append_printf (text, _ ("\nPieces of at least 15 %% of the flux: %u; more than two may be more than "
                                   "one bipole."),
                          m->pieces);
  g_string_append_printf (text, _ ("\nFloor %s, noise %s: a floor × μ below twice the noise is below the "
                                   "noise."),
                          floor, noise);
  g_string_append_printf (text, _ ("\n\nMethod: %s"), r->method);
  return g_string_free (text, FALSE);
}

/* -- joining and splitting --------------------------------------------------------------------- */

char *
tf_how_dup_joins (void)
{
  return g_strdup (
      _ ("Marks of one passage are one region. Outlines of the frames before and after are carried to each "
         "other’s time by the rotation law; those that overlap most, each for the other, are one passage. "
         "This one lies in a passage whose marks all belong to that region, so it is kept as a mark of it. "
         "Where a passage holds two regions nothing is assumed. Shift+K keeps it as a new region; undo "
         "takes back mark and region together."));
}

char *
tf_words_dup_half (const TfMeasure *m, TfUnits units)
{
  g_autofree char *tilt = tf_words_dup_signed (m->axis_tilt_deg, 1),
                  *sigma = tf_words_dup_number (m->tilt_terms.total, 1),
                  *flux = tf_units_dup_flux (units, m->flux_unsigned_mx);
  if (m->leading_polarity == 0)
    return g_strdup_printf (_ ("one polarity, no tilt, %s"), flux);
  return g_strdup_printf (m->leading_sure ? _ ("tilt %s° ± %s°, %s leads, %s")
                                          : _ ("tilt %s° ± %s°, %s leads (unsure), %s"),
                          tilt, sigma, sign_of (m->leading_polarity), flux);
}

char *
tf_how_dup_proposal (const TfProposal *proposal, TfUnits units)
{
  g_autofree char *misplaced = tf_words_dup_number (100 * proposal->line.misplaced, 1),
                  *first = tf_words_dup_half (&proposal->half[0], units),
                  *second = tf_words_dup_half (&proposal->half[1], units);
  return g_strdup_printf (
      _ ("More than two pieces of one polarity hold 15 %% of the flux each: it may be more than one bipole. "
         "The line comes from the pieces alone: they are parted so that opposite fluxes balance in each half "
         "and lie near each other; a piece between two partners may be shared. Neither Hale’s nor Joy’s law "
         "is expected of the halves.\n\nOn the wrong side of the line: %s %% of the pieces’ flux.\n\nStronger "
         "half: %s.\nOther half: %s.\n\nThe tilts hold noise and floor; the outline term follows when the "
         "split is taken. Nothing is changed until then."),
      misplaced, first, second);
}
