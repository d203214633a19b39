/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-follow-facts.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-followed-private.h"
#include "tf-slip-words.h"

static void
fact_free (gpointer data)
{
  TfFact *fact = data;
  g_free (fact->name);
  g_free (fact->value);
  g_free (fact->how);
  g_free (fact);
}

/* (transfer full) @value: NULL: no such fact */
static void
add (GPtrArray *facts, const char *name, char *value, const char *how)
{
  if (value == NULL)
    return;
  TfFact *fact = g_new0 (TfFact, 1);
  fact->name = g_strdup (name);
  fact->value = value;
  fact->how = g_strdup (how);
  g_ptr_array_add (facts, fact);
}

static const TfMeasure *
measure_at (const TfPassageContent *content, int point)
{
  return &((const TfRow *)g_ptr_array_index (content->rows, point))->measure;
}

/* -- when ------------------------------------------------------------------------------------ */

static void
add_end (GPtrArray *facts, TfTime time, TfEnd end, gboolean born)
{
  const char *where = _ ("end of frames"), *how = _ ("No frame was taken near that time.");
  if (end == TF_END_ON_DISK)
    {
      where = born ? _ ("born on disk") : _ ("gone on disk");
      how = _ ("Its place was in sight, and nothing was there.");
    }
  else if (end == TF_END_LIMB)
    {
      where = _ ("at the limb");
      how = born ? _ ("It came over the limb.") : _ ("It went over the limb.");
    }
  else if (end == TF_END_FAR_SIDE)
    {
      where = _ ("on the far side");
      how = _ ("Half a rotation away its place was in sight, and nothing was there.");
    }
  g_autofree char *day = tf_series_chart_dup_day (time);
  add (facts, born ? _ ("first seen") : _ ("last seen"), g_strdup_printf ("%s, %s", day, where), how);
}

static char *
dup_missing (const TfPassageContent *content)
{
  const TfSeriesMoment *p = (const TfSeriesMoment *)(gconstpointer)content->points->data;
  double usual = tf_series_chart_cadence (p, content->points->len), longest = 0;
  guint at = 0, gaps = 0;
  for (guint k = 1; k < content->points->len; k++)
    {
      double step = p[k].time.s - p[k - 1].time.s;
      gaps += step > 2.2 * usual;
      if (step > longest)
        {
          longest = step;
          at = k;
        }
    }
  if (gaps == 0)
    return NULL;
  g_autofree char *day = tf_series_chart_dup_day (
      (TfTime){ (p[at].time.s + p[at - 1].time.s) / 2 });
  return gaps == 1 ? g_strdup_printf (_ ("%.0f h about %s"), longest / 3600, day)
                   : g_strdup_printf (_ ("%u gaps, longest %.0f h about %s"), gaps, longest / 3600, day);
}

/* -- the figures ----------------------------------------------------------------------------- */

static TfUnits
units_of (TfFollowed *followed)
{
  return tf_session_get_units (followed->session);
}

static char *
dup_tilt (const TfMeasure *m)
{
  if (!isfinite (m->axis_tilt_deg))
    return g_strdup (_ ("none: poles straddle the equator, or one pole alone"));
  g_autofree char *value = tf_words_dup_signed (m->axis_tilt_deg, 1),
                  *sigma = tf_words_dup_number (m->tilt_terms.total, 1);
  return g_strdup_printf ("%s° ± %s°", value, sigma);
}

static void
add_taken (GPtrArray *facts, TfFollowed *followed, const TfPassageContent *content)
{
  int taken = tf_followed_get_taken (followed);
  if (taken < 0)
    return;
  const TfMeasure *m = measure_at (content, taken);
  gboolean flux = tf_followed_get_take (followed) == TF_TAKE_FLUX;
  gboolean open = flux && !tf_followed_get_derived (followed)->bracketed;
  g_autofree char *day = tf_series_chart_dup_day (m->time);
  add (facts, flux ? _ ("greatest flux") : _ ("nearest meridian"),
       open ? g_strdup_printf (_ ("%s, not bracketed"), day) : g_strdup (day),
       open   ? _ ("Sampling rule: the mark of greatest unsigned flux among those with μ ≥ 0.5. It is the "
                   "first or the last of them: the peak may lie beyond.")
       : flux ? _ ("Sampling rule: the mark of greatest unsigned flux among those with μ ≥ 0.5.")
            : _ ("Sampling rule: the mark nearest the central meridian."));
  add (facts, _ ("tilt then"), dup_tilt (m), NULL);
  add (facts, _ ("flux then"), tf_units_dup_flux (units_of (followed), m->flux_unsigned_mx), _ ("Unsigned."));
}

/* What is derived from the passage, or the brushed stretch of it, each with the window it was taken from. */
static char *
dup_window (const TfFigure *figure, const char *method)
{
  g_autofree char *from = tf_series_chart_dup_day (figure->from),
                  *to = tf_series_chart_dup_day (figure->to);
  return g_strdup_printf (ngettext ("%s %u mark, %s – %s.", "%s %u marks, %s – %s.", figure->n), method,
                          figure->n, from, to);
}

static void
add_rate (GPtrArray *facts, const char *name, const TfFigure *rate, TfUnits units)
{
  if (!isfinite (rate->value))
    return;
  g_autofree char *value = tf_units_dup_flux (units, fabs (rate->value) * 24),
                  *sigma = tf_units_dup_flux (units, rate->sigma * 24);
  g_autofree char *how = dup_window (
      rate, _ ("Least squares on the unsigned flux between a tenth and nine tenths of the greatest."));
  add (facts, name, g_strdup_printf (_ ("%s ± %s a day"), value, sigma), how);
}

static void
add_derived (GPtrArray *facts, TfFollowed *followed)
{
  const TfDerived *d = tf_followed_get_derived (followed);
  TfTime from, to;
  tf_followed_get_brush (followed, &from, &to);
  add_rate (facts, _ ("emerging at"), &d->emergence, units_of (followed));
  add_rate (facts, _ ("decaying at"), &d->decay, units_of (followed));
  if (!isfinite (d->tilt_mean.value))
    return;
  g_autofree char *value = tf_words_dup_signed (d->tilt_mean.value, 1),
                  *sigma = tf_words_dup_number (d->tilt_mean.sigma, 1),
                  *n = tf_words_dup_number (d->n_effective, 1);
  g_autofree char *method = g_strdup_printf (
      _ ("Axial mean over |CMD| ≤ 45°; its error allows for marks that are not independent: they count "
         "as %s."),
      n);
  g_autofree char *how = dup_window (&d->tilt_mean, method);
  add (facts, tf_time_is_known (from) ? _ ("mean of the stretch") : _ ("mean tilt"), g_strdup_printf ("%s° ± %s°", value, sigma), how);
}

static void
add_floor (GPtrArray *facts, const TfPassageContent *content, TfUnits units)
{
  double floor = content->series->floor_gauss;
  guint other = content->series->n_other_floor;
  if (!isfinite (floor))
    return;
  g_autofree char *value = tf_units_dup_field (units, floor, 0);
  add (facts, _ ("even floor"),
       other == 0 ? g_strdup_printf (_ ("%s, all"), value)
                  : g_strdup_printf (_ ("%s; %u measured with another"), value, other),
       _ ("One floor for the whole passage, so that the flux of a constant region does not fall "
          "towards the limb. tiltfield-run laws or export measures what lacks it."));
}

GPtrArray *
tf_follow_facts (TfFollowed *followed)
{
  GPtrArray *facts = g_ptr_array_new_with_free_func (fact_free);
  const TfPassageContent *content = tf_followed_get_content (followed);
  if (content == NULL || content->rows->len == 0)
    return facts;
  const TfPassageRow *p = content->passage;
  add_end (facts, p->first_time, p->born, TRUE);
  add_end (facts, p->last_time, p->ended, FALSE);
  add (facts, _ ("missing"), dup_missing (content), NULL);
  add_taken (facts, followed, content);
  add_derived (facts, followed);
  add_floor (facts, content, units_of (followed));
  return facts;
}

/* -- the verdict ----------------------------------------------------------------------------- */

char *
tf_follow_dup_verdict (TfFollowed *followed, int *diamond)
{
  const TfDerived *d = tf_followed_get_derived (followed);
  *diamond = TF_DIAMOND_HOLLOW;
  if (d == NULL)
    return g_strdup ("");
  switch (d->verdict.kind)
    {
    case TF_VERDICT_KEEPS:
      *diamond = TF_DIAMOND_PLAIN;
      return g_strdup_printf (_ ("keeps Hale’s law, held %u of %u"), d->held, d->of);
    case TF_VERDICT_BREAKS:
      *diamond = TF_DIAMOND_STRUCK;
      return g_strdup_printf (_ ("breaks Hale’s law, held %u of %u"), d->held, d->of);
    case TF_VERDICT_CANNOT_SAY:
    default:
      break;
    }
  g_autoptr (TfNote) reason = tf_note_new (d->verdict.reason, "");
  g_autofree char *words = tf_note_dup_text (reason, FALSE);
  return d->held > 0 ? g_strdup_printf (_ ("%s (%u of %u)"), words, d->held, d->of)
                     : g_strdup_printf (_ ("Hale’s law: %s"), words);
}

/* -- links ----------------------------------------------------------------------------------- */

static char *
dup_sight_day (const TfPassageContent *content, TfSight sight)
{
  int at = tf_passage_content_find (content, sight);
  return at < 0 ? g_strdup (_ ("another passage"))
                : tf_series_chart_dup_day (measure_at (content, at)->time);
}

char *
tf_follow_dup_link (const TfPassageContent *content, const TfPassageLink *link)
{
  static const char *const kinds[]
      = { N_ ("one region on one frame"), N_ ("overlap"), N_ ("seen from two vantages, overlap"),
          N_ ("out of it, overlap"), N_ ("into it, overlap"), N_ ("by hand") };
  g_autofree char *a = dup_sight_day (content, link->a), *b = dup_sight_day (content, link->b);
  if (link->kind == TF_LINK_HAND)
    return g_strdup_printf (_ ("%s → %s · by hand, %s%s%s"), a, b,
                            link->person != NULL ? link->person : "?",
                            link->reason != NULL && *link->reason != '\0' ? ": " : "",
                            link->reason != NULL ? link->reason : "");
  return g_strdup_printf ("%s → %s · %s %.2f", a, b, _ (kinds[link->kind]), link->overlap);
}
