/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-follow-facts.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-followed-private.h"
#include "tf-slip-words.h"

static const double clear_mu = 0.5;

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

static char *
dup_end (TfTime time, TfEnd end, gboolean born)
{
  g_autofree char *day = tf_series_chart_dup_day (time);
  switch (end)
    {
    case TF_END_ON_DISK:
      return g_strdup_printf (born ? _ ("%s, born on the disk") : _ ("%s, gone on the disk"), day);
    case TF_END_LIMB:
      return g_strdup_printf (born ? _ ("%s, came over the limb") : _ ("%s, at the limb"), day);
    case TF_END_FAR_SIDE:
      return g_strdup_printf (born ? _ ("%s, born on the far side") : _ ("%s, ended on the far side"),
                              day);
    default:
      return g_strdup_printf (_ ("%s, no frames beyond"), day);
    }
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

static char *
dup_tilt (const TfMeasure *m)
{
  if (!isfinite (m->axis_tilt_deg))
    return g_strdup (_ ("none: poles straddle the equator, or one pole alone"));
  g_autofree char *value = tf_words_dup_signed (m->axis_tilt_deg, 1),
                  *sigma = tf_words_dup_number (m->tilt_terms.total, 1);
  return g_strdup_printf ("%s° ± %s°", value, sigma);
}

static gboolean
is_bracketed (const TfPassageContent *content, int point)
{
  return point > 0 && point + 1 < (int)content->rows->len;
}

static void
add_taken (GPtrArray *facts, TfFollowed *followed, const TfPassageContent *content)
{
  int taken = tf_followed_get_taken (followed);
  TfTake take = tf_followed_get_take (followed);
  double mean;
  guint n = tf_followed_mean_tilt (followed, &mean);
  if (taken >= 0)
    {
      const TfMeasure *m = measure_at (content, taken);
      g_autofree char *day = tf_series_chart_dup_day (m->time);
      gboolean flux = take == TF_TAKE_FLUX;
      add (facts, flux ? _ ("greatest flux") : _ ("nearest meridian"),
           flux && !is_bracketed (content, taken)
               ? g_strdup_printf (_ ("%s (peak not bracketed)"), day)
               : g_strdup (day),
           flux ? _ ("Sampling rule: the mark of greatest unsigned flux among those with μ ≥ 0.5.")
                : _ ("Sampling rule: the mark nearest the central meridian."));
      add (facts, _ ("tilt then"), dup_tilt (m), NULL);
      add (facts, _ ("flux then"), tf_chart_dup_flux (m->flux_unsigned_mx), _ ("Unsigned."));
    }
  TfTime from, to;
  tf_followed_get_brush (followed, &from, &to);
  if (n > 0 && tf_time_is_known (from))
    {
      g_autofree char *value = tf_words_dup_signed (mean, 1);
      add (facts, _ ("mean of the stretch"), g_strdup_printf (ngettext ("%s° of %u mark", "%s° of %u marks", n), value, n),
           _ ("Axial mean (doubled angles) of the axis tilt over |CMD| ≤ 45°, each mark once."));
    }
}

/* What is derived from the whole passage, each with the window it was taken from. */
static char *
dup_window (const TfFigure *figure, const char *method)
{
  g_autofree char *from = tf_series_chart_dup_day (figure->from),
                  *to = tf_series_chart_dup_day (figure->to);
  return g_strdup_printf (ngettext ("%s %u mark, %s – %s.", "%s %u marks, %s – %s.", figure->n), method,
                          figure->n, from, to);
}

static void
add_rate (GPtrArray *facts, const char *name, const TfFigure *rate)
{
  if (!isfinite (rate->value))
    return;
  g_autofree char *value = tf_chart_dup_flux (fabs (rate->value) * 24),
                  *sigma = tf_chart_dup_flux (rate->sigma * 24);
  g_autofree char *how = dup_window (
      rate, _ ("Least squares on the unsigned flux between a tenth and nine tenths of the greatest."));
  add (facts, name, g_strdup_printf (_ ("%s ± %s a day"), value, sigma), how);
}

static void
add_derived (GPtrArray *facts, const TfPassageContent *content)
{
  if (content->series == NULL)
    return;
  const TfDerived *d = &content->series->derived;
  add_rate (facts, _ ("emerging at"), &d->emergence);
  add_rate (facts, _ ("decaying at"), &d->decay);
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
  add (facts, _ ("mean tilt"), g_strdup_printf ("%s° ± %s°", value, sigma), how);
}

static void
add_held (GPtrArray *facts, const TfPassageContent *content)
{
  guint n = 0, positive = 0;
  for (guint k = 0; k < content->rows->len; k++)
    {
      const TfMeasure *m = measure_at (content, (int)k);
      if (!(m->mu >= clear_mu) || m->leading_polarity == 0)
        continue;
      n++;
      positive += m->leading_polarity > 0;
    }
  if (n == 0)
    return;
  gboolean plus = positive * 2 >= n;
  add (facts, _ ("leading held"),
       g_strdup_printf (_ ("%s in %u of %u at μ ≥ 0.5"), plus ? "+" : "−",
                        plus ? positive : n - positive, n),
       _ ("The polarity of the western pole, mark by mark."));
}

static void
add_floor (GPtrArray *facts, const TfPassageContent *content)
{
  if (!isfinite (content->floor_gauss))
    return;
  add (facts, _ ("even floor"),
       content->n_other_floor == 0
           ? g_strdup_printf (_ ("%.0f G, all"), content->floor_gauss)
           : g_strdup_printf (_ ("%.0f G; %u measured with another"), content->floor_gauss,
                              content->n_other_floor),
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
  add (facts, _ ("first seen"), dup_end (p->first_time, p->born, TRUE), NULL);
  add (facts, _ ("last seen"), dup_end (p->last_time, p->ended, FALSE), NULL);
  add (facts, _ ("missing"), dup_missing (content), NULL);
  add_taken (facts, followed, content);
  add_derived (facts, content);
  add_held (facts, content);
  add_floor (facts, content);
  return facts;
}

/* -- the verdict ----------------------------------------------------------------------------- */

char *
tf_follow_dup_verdict (TfFollowed *followed, int *diamond)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  guint n = 0, keeps = 0, breaks = 0;
  *diamond = TF_DIAMOND_HOLLOW;
  for (guint k = 0; content != NULL && k < content->rows->len; k++)
    {
      if (!(measure_at (content, (int)k)->mu >= clear_mu))
        continue;
      n++;
      keeps += content->verdicts[k].kind == TF_VERDICT_KEEPS;
      breaks += content->verdicts[k].kind == TF_VERDICT_BREAKS;
    }
  if (n == 0)
    return g_strdup (_ ("Hale’s law: cannot say, no mark at μ ≥ 0.5"));
  if (keeps * 5 >= n * 4)
    {
      *diamond = TF_DIAMOND_PLAIN;
      return g_strdup_printf (_ ("keeps Hale’s law, held %u of %u"), keeps, n);
    }
  if (breaks * 5 >= n * 4)
    {
      *diamond = TF_DIAMOND_STRUCK;
      return g_strdup_printf (_ ("breaks Hale’s law, held %u of %u"), breaks, n);
    }
  if (keeps > 0 && breaks > 0)
    return g_strdup_printf (_ ("cannot say: changes (keeps %u, breaks %u, of %u)"), keeps, breaks, n);
  return g_strdup_printf (_ ("Hale’s law: cannot say in %u of %u marks"), n - keeps - breaks, n);
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
