/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <stdio.h>

#include "tf-batch.h"
#include "tf-json.h"
#include "tf-power-plot.h"
#include "tf-power-run.h"

/* power: how many regions are needed to tell two slopes or two shares apart. */

static void
build (JsonBuilder *builder, const TfPowerCurve *curve, const TfPowerParams *params)
{
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "options");
  tf_options_build_json (tf_power_options, params, builder);
  tf_json_string (builder, "what", tf_power_names[curve->what]);
  tf_json_number (builder, "first", curve->first);
  tf_json_number (builder, "second", curve->second);
  tf_json_number (builder, "chance", curve->chance);
  tf_json_number (builder, "power", params->power);
  tf_json_number (builder, "regions_needed", ceil (tf_power_needed (curve, params->power)));
  json_builder_set_member_name (builder, "points");
  json_builder_begin_array (builder);
  for (guint k = 0; k < curve->points->len; k++)
    {
      const TfPowerPoint *p = &g_array_index (curve->points, TfPowerPoint, k);
      json_builder_begin_object (builder);
      tf_json_int (builder, "regions", p->n);
      tf_json_int (builder, "runs", p->runs);
      tf_json_int (builder, "found", p->found);
      tf_json_number (builder, "power", p->power);
      tf_json_numbers (builder, "interval", (const double[]){ p->interval.low, p->interval.high }, 2);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

static void
print_curve (const TfPowerCurve *curve, const TfPowerParams *params)
{
  const char *const heads[] = { _ ("regions in each"), _ ("found"), _ ("of"), _ ("power"), _ ("95 %"), NULL };
  g_autoptr (TfTable) table = tf_table_new (0, heads);
  for (guint k = 0; k < curve->points->len; k++)
    {
      const TfPowerPoint *p = &g_array_index (curve->points, TfPowerPoint, k);
      tf_table_add (table, "%u\t%u\t%u\t%.2f\t%.2f–%.2f", p->n, p->found, p->runs, p->power, p->interval.low,
                    p->interval.high);
    }
  g_autofree char *text = tf_table_dup_text (table);
  if (curve->what == TF_POWER_SLOPE)
    printf (_ ("Slopes %.3f and %.3f °/°, told apart at p ≤ %.3f:\n%s"), curve->first, curve->second, curve->chance, text);
  else
    printf (_ ("Shares %.3f and %.3f, told apart at p ≤ %.3f:\n%s"), curve->first, curve->second, curve->chance, text);
  double needed = tf_power_needed (curve, params->power);
  if (isnan (needed))
    printf (_ ("More than %d regions in each group are needed for a power of %.2f.\n"), params->most, params->power);
  else
    printf (_ ("About %.0f regions in each group are needed for a power of %.2f.\n"), ceil (needed), params->power);
}

/* NULL, or why the two numbers cannot be told apart by any number of regions. */
static const char *
find_fault (const TfPowerParams *p)
{
  gboolean share = p->what == TF_POWER_SHARE;
  if (p->most < p->least)
    return _ ("--least is more than --most.");
  if (share && !((isnan (p->first) || (p->first >= 0 && p->first <= 1)) && (isnan (p->second) || (p->second >= 0 && p->second <= 1))))
    return _ ("A share lies from 0 to 1.");
  if (fabs (p->first - p->second) < 1e-9)
    return _ ("--first and --second are the same: there is nothing to tell apart.");
  return NULL;
}

int
tf_verb_power (int argc, char **argv)
{
  gboolean json = FALSE;
  g_autofree char *figure = NULL;
  TfPowerParams params;
  tf_options_reset (tf_power_options, &params);
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "figure", 0, 0, G_OPTION_ARG_FILENAME, &figure, N_ ("write the curve as PDF, SVG or PNG"), "FILE" },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("power");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  g_option_context_add_group (context, tf_options_new_group (tf_power_options, &params, "power", N_ ("the difference")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  const char *fault = argc != 1 ? _ ("It takes options only.") : find_fault (&params);
  if (fault != NULL)
    return tf_batch_usage ("power", fault);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (TfPowerCurve) curve = tf_power_run (&params, work, &error);
  if (curve == NULL || (figure != NULL && !tf_power_plot_write (curve, params.power, figure, &error)))
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  if (!json)
    {
      print_curve (curve, &params);
      return TF_EXIT_DONE;
    }
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  build (builder, curve, &params);
  tf_batch_print_json (builder);
  return TF_EXIT_DONE;
}
