/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-export-series.h"

#include <math.h>

#include "tf-export-private.h"
#include "tf-number.h"

static char *
number (double value, const char *form)
{
  return isnan (value) ? g_strdup ("not known") : tf_number_dup_form (value, form, FALSE);
}

/* "value +- sigma unit, from ... to ..., n marks", or why there is none. */
static char *
figure_text (const TfFigure *figure, const char *form, const char *unit)
{
  if (figure->reason != NULL || isnan (figure->value))
    {
      g_autoptr (TfNote) note = figure->reason != NULL ? tf_note_new (figure->reason, "") : NULL;
      g_autofree char *why = note != NULL ? tf_note_dup_text (note, TRUE) : g_strdup ("no value");
      return g_strdup_printf ("none: %s", why);
    }
  g_autofree char *value = number (figure->value, form);
  g_autofree char *sigma = number (figure->sigma, form);
  g_autofree char *from = tf_time_dup_iso (figure->from, 0);
  g_autofree char *to = tf_time_dup_iso (figure->to, 0);
  if (figure->n == 1)
    return g_strdup_printf ("%s %s, uncertainty %s, at %s", value, unit, sigma, from);
  return g_strdup_printf ("%s %s, uncertainty %s, from %s to %s, %u marks", value, unit, sigma,
                          from, to, figure->n);
}

static void
add_mean (GArray *facts, const TfDerived *d)
{
  g_autofree char *mean = figure_text (&d->tilt_mean, ".2f", "deg");
  g_autofree char *worth = number (d->n_effective, ".1f");
  g_autofree char *days = number (d->persistence_days, ".2f");
  g_autofree char *floor = number (d->tilt_floor_deg, ".2f");
  tf_facts_add (facts, "mean axis tilt",
                d->tilt_mean.n < 2
                    ? g_strdup (mean)
                    : g_strdup_printf (
                        "%s; worth %s independent marks, deviations persist for %s d (first-order "
                        "autoregression); floor term, common to all marks, %s deg",
                        mean, worth, days, floor));
}

static void
add_verdict (GArray *facts, const TfDerived *d)
{
  tf_facts_add (
      facts, "Hale's law",
      g_strdup_printf ("%s%s%s at greatest flux; held %u of %u", tf_verdict_name (d->verdict.kind),
                       d->verdict.reason != NULL ? ": " : "",
                       d->verdict.reason != NULL ? d->verdict.reason : "", d->held, d->of));
}

static void
add_derived (GArray *facts, const TfSeries *series)
{
  const TfDerived *d = &series->derived;
  const TfRow *row = series->rows->len > 0 ? g_ptr_array_index (series->rows, 0) : NULL;
  g_autofree char *floor = number (series->floor_gauss, ".0f");
  g_autofree char *options
      = tf_options_dup_canonical (tf_series_options, &series->params, "series/1");
  if (row == NULL)
    return;
  tf_facts_add (facts, "passage",
                g_strdup_printf (
                    "%s, seen from %s, %u rows, even floor %s G, %u rows with another floor",
                    row->passage, row->vantage, series->rows->len, floor, series->n_other_floor));
  tf_facts_add (facts, "derived by", g_strdup (options));
  g_autofree char *greatest = figure_text (&d->greatest_flux, ".3g", "Mx");
  tf_facts_add (facts, "greatest flux",
                g_strconcat (greatest,
                             d->bracketed || d->greatest_flux.n == 0 ? "" : "; peak not bracketed",
                             NULL));
  tf_facts_add (facts, "emergence rate", figure_text (&d->emergence, ".3g", "Mx/h"));
  tf_facts_add (facts, "decay rate", figure_text (&d->decay, ".3g", "Mx/h"));
  tf_facts_add (facts, "axis tilt at greatest flux",
                figure_text (&d->tilt_at_greatest, ".2f", "deg"));
  g_autofree char *meridian = figure_text (&d->tilt_at_meridian, ".2f", "deg");
  g_autofree char *cmd = number (d->meridian_cmd_deg, ".1f");
  tf_facts_add (facts, "axis tilt at central meridian",
                isnan (d->meridian_cmd_deg) ? g_strdup (meridian)
                                            : g_strdup_printf ("%s, CMD %s deg", meridian, cmd));
  add_mean (facts, d);
  add_verdict (facts, d);
}

gboolean
tf_export_series (const char *path, const GPtrArray *series, const TfStudy *study,
                  const char *source, GError **error)
{
  g_return_val_if_fail (path != NULL && series != NULL && study != NULL, FALSE);
  g_autoptr (GArray) rows = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  for (guint k = 0; k < series->len; k++)
    {
      const TfSeries *one = g_ptr_array_index (series, k);
      for (guint p = 0; p < one->points->len; p++)
        {
          const TfSeriesPoint *point = &g_array_index (one->points, TfSeriesPoint, p);
          TfExportRow row = { .row = point->row, .verdict = point->verdict };
          tf_study_row (point->row, &row.sample);
          g_array_append_val (rows, row);
        }
    }
  g_autoptr (GArray) facts = tf_facts_new (rows, study, source);
  for (guint k = 0; k < series->len; k++)
    add_derived (facts, g_ptr_array_index (series, k));
  g_auto (TfTableOut) table = { 0 };
  tf_table_out_init (&table, "marks", TRUE, NULL, rows, facts);
  return tf_export_write_table (path, &table, error);
}
