/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <stdio.h>

#include "tf-batch.h"
#include "tf-json.h"
#include "tf-ledger-scales.h"
#include "tf-pair.h"

/* pair: the scale between two instruments; offered, kept only when told. */

static void
build_bins (JsonBuilder *builder, const char *key, const TfPairBin *bins, guint n)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
  for (guint k = 0; k < n; k++)
    {
      json_builder_begin_object (builder);
      tf_json_numbers (builder, "range", (const double[]){ bins[k].from, bins[k].to }, 2);
      tf_json_int (builder, "cells", bins[k].n);
      tf_json_number (builder, "factor", bins[k].factor);
      tf_json_numbers (builder, "interval", (const double[]){ bins[k].interval.low, bins[k].interval.high }, 2);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static void
build_scale (JsonBuilder *builder, const TfPairScale *s, gboolean kept)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "instrument", s->instrument);
  tf_json_string (builder, "reference", s->reference);
  tf_json_int (builder, "frame_pairs", s->frame_pairs);
  tf_json_number (builder, "hours_apart", s->hours);
  tf_json_int (builder, "cells", s->cells);
  tf_json_number (builder, "factor", s->factor);
  tf_json_number (builder, "sigma", s->sigma);
  tf_json_numbers (builder, "interval", (const double[]){ s->interval.low, s->interval.high }, 2);
  tf_json_number (builder, "offset_gauss", s->offset_gauss);
  tf_json_number (builder, "offset_sigma_gauss", s->offset_sigma);
  tf_json_number (builder, "chi2_per_degree", s->chi2);
  build_bins (builder, "by_mu", s->by_mu, TF_PAIR_MU_BINS);
  build_bins (builder, "by_field", s->by_field, TF_PAIR_FIELD_BINS);
  tf_json_bool (builder, "kept", kept);
  json_builder_end_object (builder);
}

static void
add_bins (TfTable *table, const char *what, const TfPairBin *bins, guint n)
{
  for (guint k = 0; k < n; k++)
    {
      g_autofree char *range = isinf (bins[k].to) ? g_strdup_printf (_ ("from %g"), bins[k].from)
                                                  : g_strdup_printf ("%g–%g", bins[k].from, bins[k].to);
      if (isnan (bins[k].factor))
        tf_table_add (table, "%s\t%s\t%u\t–\t–", what, range, bins[k].n);
      else
        tf_table_add (table, "%s\t%s\t%u\t%.3f\t%.3f–%.3f", what, range, bins[k].n, bins[k].factor, bins[k].interval.low,
                      bins[k].interval.high);
    }
}

static void
print_scale (const TfPairScale *s)
{
  const char *const heads[] = { _ ("by"), _ ("range"), _ ("cells"), _ ("factor"), _ ("interval"), NULL };
  g_autoptr (TfTable) table = tf_table_new (2, heads);
  printf (_ ("%s = %.3f × %s %+.2f G\n"), s->reference, s->factor, s->instrument, s->offset_gauss);
  printf (_ ("  factor %.3f ± %.3f (%.3f–%.3f by blocks), offset %+.2f ± %.2f G, chi² a degree of freedom %.2f\n"), s->factor,
          s->sigma, s->interval.low, s->interval.high, s->offset_gauss, s->offset_sigma, s->chi2);
  printf (_ ("  %u cells of %u frame pairs, %.1f h apart\n"), s->cells, s->frame_pairs, s->hours);
  add_bins (table, _ ("mu"), s->by_mu, TF_PAIR_MU_BINS);
  add_bins (table, _ ("field, G"), s->by_field, TF_PAIR_FIELD_BINS);
  g_autofree char *text = tf_table_dup_text (table);
  printf ("%s", text);
}

/* A person's deed. */
static gboolean
keep (TfLedger *ledger, const TfPairScale *s, const TfPairParams *params, const char *person, GError **error)
{
  gint64 who = tf_ledger_person (ledger, person, error);
  g_autofree char *options = tf_options_dup_canonical (tf_pair_options, params, "pair/1");
  g_autofree char *evidence = g_strdup_printf ("%s frame-pairs=%u cells=%u", options, s->frame_pairs, s->cells);
  const TfKeptScale scale = { s->instrument, s->reference, s->factor, s->sigma, evidence, NULL };
  return who != 0 && tf_ledger_set_scale (ledger, &scale, who, error);
}

static int
show (TfLedger *ledger, const TfPairParams *params, const char *kept_as, const char *person, gboolean json, GError **error)
{
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (GPtrArray) scales = tf_pair_scales (ledger, params, work, error);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  guint n_kept = 0;
  if (scales == NULL)
    return TF_EXIT_NOTHING;
  json_builder_begin_array (builder);
  for (guint k = 0; k < scales->len; k++)
    {
      const TfPairScale *s = g_ptr_array_index (scales, k);
      gboolean keeps = kept_as != NULL && g_str_equal (kept_as, s->instrument) && n_kept == 0;
      if (keeps && !keep (ledger, s, params, person, error))
        return TF_EXIT_NOTHING;
      n_kept += keeps;
      build_scale (builder, s, keeps);
      if (!json)
        print_scale (s);
      if (!json && keeps)
        printf (_ ("  kept by %s\n"), person);
    }
  json_builder_end_array (builder);
  if (json)
    tf_batch_print_json (builder);
  if (scales->len == 0)
    tf_batch_say (_ ("No two instruments have usable disk frames near each other in time (--within)."));
  if (kept_as != NULL && n_kept == 0)
    tf_batch_say (_ ("Nothing was kept: --keep names an instrument of a scale that is offered."));
  return scales->len == 0 || (kept_as != NULL && n_kept == 0) ? TF_EXIT_NOTHING : TF_EXIT_DONE;
}

int
tf_verb_pair (int argc, char **argv)
{
  gboolean json = FALSE;
  g_autofree char *kept_as = NULL, *person = NULL;
  TfPairParams params;
  tf_options_reset (tf_pair_options, &params);
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "keep", 0, 0, G_OPTION_ARG_STRING, &kept_as, N_ ("keep the scale of that instrument to its reference, as a deed"), N_ ("INSTRUMENT") },
    { "person", 0, 0, G_OPTION_ARG_STRING, &person, N_ ("who keeps it"), N_ ("NAME") },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("pair");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  g_option_context_add_group (context, tf_options_new_group (tf_pair_options, &params, "pair", N_ ("the comparison")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2 || (kept_as != NULL) != (person != NULL))
    return tf_batch_usage ("pair", _ ("Name one ledger; --keep and --person go together."));
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (argv[1], &error);
  int code = ledger != NULL ? show (ledger, &params, kept_as, person, json, &error) : TF_EXIT_NOTHING;
  if (error != NULL)
    tf_batch_say_error (error);
  return code;
}
