/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-json.h"
#include "tf-study-private.h"

/* What stands in the `laws` document besides the two tables and the what-ifs. */

void
tf_study_build_interval (JsonBuilder *builder, const char *key, TfInterval interval)
{
  tf_json_numbers (builder, key, (const double[]){ interval.low, interval.high }, 2);
}

void
tf_study_build_cell (JsonBuilder *builder, int cycle, int hemisphere)
{
  if (cycle != 0)
    tf_json_int (builder, "cycle", cycle);
  else
    tf_json_null (builder, "cycle");
  tf_json_string (builder, "hemisphere", hemisphere > 0 ? "N" : hemisphere < 0 ? "S" : "both");
}

static void
begin_array (JsonBuilder *builder, const char *key)
{
  json_builder_set_member_name (builder, key);
  json_builder_begin_array (builder);
}

/* -- comparisons -------------------------------------------------------------------------------- */

static void
build_group (JsonBuilder *builder, const TfGroup *group)
{
  static const char *const parities[] = { NULL, "odd", "even" };
  json_builder_begin_object (builder);
  tf_study_build_cell (builder, group->cycle, group->hemisphere);
  tf_json_string (builder, "parity", parities[group->parity]);
  tf_json_string (builder, "size",
                  group->size < 0    ? NULL
                  : group->size == 0 ? "region"
                                     : "ephemeral");
  gboolean any = !(group->flux_to_mx > 0.0);
  tf_study_build_interval (builder, "flux_mx",
                           any ? (TfInterval){ NAN, NAN }
                               : (TfInterval){ group->flux_from_mx, group->flux_to_mx });
  json_builder_end_object (builder);
}

static void
build_pair (JsonBuilder *builder, const char *key, double first, double second)
{
  tf_json_numbers (builder, key, (const double[]){ first, second }, 2);
}

static void
build_comparison (JsonBuilder *builder, const TfComparison *c)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "kind", c->kind);
  begin_array (builder, "groups");
  build_group (builder, &c->groups[0]);
  build_group (builder, &c->groups[1]);
  json_builder_end_array (builder);
  build_pair (builder, "regions", c->regions[0], c->regions[1]);
  build_pair (builder, "breaks", c->breaks[0], c->breaks[1]);
  build_pair (builder, "share_breaks", c->share[0], c->share[1]);
  tf_json_number (builder, "fisher_p", c->share_p);
  tf_json_number (builder, "fisher_p_holm", c->share_p_holm);
  build_pair (builder, "n_tilts", c->n_tilts[0], c->n_tilts[1]);
  build_pair (builder, "slope", c->slope[0], c->slope[1]);
  tf_study_build_interval (builder, "slope_difference_ci", c->difference);
  tf_json_number (builder, "slope_p", c->slope_p);
  tf_json_number (builder, "slope_p_holm", c->slope_p_holm);
  json_builder_end_object (builder);
}

static void
build_comparisons (JsonBuilder *builder, const TfComparisons *found)
{
  json_builder_set_member_name (builder, "comparisons");
  json_builder_begin_object (builder);
  tf_json_int (builder, "n_shares", found->n_shares);
  tf_json_int (builder, "n_slopes", found->n_slopes);
  tf_json_number (builder, "flux_divider_mx", found->divider_mx);
  begin_array (builder, "pairs");
  for (guint k = 0; k < found->rows->len; k++)
    build_comparison (builder, &g_array_index (found->rows, TfComparison, k));
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

/* -- against other quantities ------------------------------------------------------------------- */

static void
build_share_bin (JsonBuilder *builder, const TfHaleBin *bin)
{
  json_builder_begin_object (builder);
  tf_study_build_interval (builder, "range", (TfInterval){ bin->from, bin->to });
  tf_json_int (builder, "n", bin->row.n);
  tf_json_int (builder, "regions", bin->row.regions);
  tf_json_int (builder, "breaks", bin->row.breaks);
  tf_json_int (builder, "cannot_say", bin->row.cannot_say);
  tf_json_number (builder, "share_breaks", bin->row.share);
  tf_json_number (builder, "expected_false", bin->row.expected_false);
  tf_study_build_interval (builder, "clopper_pearson", bin->row.clopper_pearson);
  tf_study_build_interval (builder, "cluster", bin->row.cluster);
  json_builder_end_object (builder);
}

static void
build_shares_against (JsonBuilder *builder, const TfFindings *findings)
{
  json_builder_set_member_name (builder, "share_against");
  json_builder_begin_object (builder);
  for (guint q = 0; q < findings->hale_bins->len; q++)
    {
      const GArray *bins = g_ptr_array_index (findings->hale_bins, q);
      begin_array (builder, tf_hale_quantities[q].name);
      for (guint k = 0; k < bins->len; k++)
        build_share_bin (builder, &g_array_index (bins, TfHaleBin, k));
      json_builder_end_array (builder);
    }
  json_builder_end_object (builder);
}

static void
build_bins (JsonBuilder *builder, const char *key, const GArray *bins)
{
  begin_array (builder, key);
  for (guint k = 0; k < bins->len; k++)
    {
      const TfBin *bin = &g_array_index (bins, TfBin, k);
      if (bin->n == 0)
        continue;
      json_builder_begin_object (builder);
      tf_study_build_interval (builder, "range", (TfInterval){ bin->from, bin->to });
      tf_json_number (builder, "mean", bin->x);
      tf_json_int (builder, "n", bin->n);
      tf_json_number (builder, "median_tilt_deg", bin->median);
      tf_study_build_interval (builder, "median_ci", bin->median_ci);
      tf_json_number (builder, "scatter_deg", bin->scatter);
      tf_study_build_interval (builder, "scatter_ci", bin->scatter_ci);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

static void
build_published (JsonBuilder *builder)
{
  begin_array (builder, "published_shares");
  for (const TfHalePublished *p = tf_hale_published; p->name != NULL; p++)
    {
      json_builder_begin_object (builder);
      tf_json_string (builder, "source", p->name);
      tf_json_string (builder, "selection", p->selection);
      build_pair (builder, "share_breaks", p->low, p->high);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
}

/* -- through the cycle -------------------------------------------------------------------------- */

static void
build_drift (JsonBuilder *builder, const TfDrift *drift)
{
  json_builder_begin_object (builder);
  tf_study_build_cell (builder, drift->cycle, drift->hemisphere);
  tf_json_int (builder, "n", drift->n);
  tf_json_int (builder, "regions", drift->regions);
  tf_json_number (builder, "slope_deg_per_year", drift->slope_deg_per_year);
  tf_study_build_interval (builder, "slope_ci", drift->slope_ci);
  tf_json_number (builder, "start_deg", drift->start_deg);
  tf_json_number (builder, "tau_months", drift->tau_months);
  begin_array (builder, "years");
  for (guint k = 0; k < drift->years->len; k++)
    {
      const TfDriftYear *year = &g_array_index (drift->years, TfDriftYear, k);
      json_builder_begin_object (builder);
      tf_json_int (builder, "year", year->year);
      tf_json_int (builder, "n", year->n);
      tf_json_int (builder, "regions", year->regions);
      tf_json_number (builder, "mean_deg", year->mean_deg);
      tf_json_number (builder, "sd_deg", year->sd_deg);
      tf_json_number (builder, "expected_deg", year->expected_deg);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

static void
build_dipole (JsonBuilder *builder, const TfDipoleSum *sum, const TfFindings *findings)
{
  json_builder_begin_object (builder);
  tf_study_build_cell (builder, sum->cycle, sum->hemisphere);
  tf_json_string (builder, "verdict",
                  sum->verdict < 0 ? "all" : tf_verdict_name ((TfVerdictKind)sum->verdict));
  tf_json_int (builder, "regions", sum->regions);
  tf_json_int (builder, "without", sum->without);
  tf_json_number (builder, "sum_gauss", sum->sum_gauss);
  tf_json_number (builder, "sigma_gauss", sum->sigma_gauss);
  tf_json_number (builder, "costliest_gauss", sum->costliest < 0 ? NAN : sum->costliest_gauss);
  if (sum->costliest < 0)
    tf_json_null (builder, "costliest_mark");
  else
    tf_json_int (builder, "costliest_mark", findings->marks[sum->costliest]);
  json_builder_end_object (builder);
}

static void
build_spread (JsonBuilder *builder, const char *key, const TfSpread *spread)
{
  tf_json_numbers (builder, key, (const double[]){ spread->low, spread->median, spread->high }, 3);
}

static void
build_age (JsonBuilder *builder, int side, const TfEmergenceAge *age)
{
  static const char *const sides[] = { "whole", "east", "west" };
  json_builder_begin_object (builder);
  tf_json_string (builder, "half", sides[side]);
  tf_json_number (builder, "age_days", age->age_days);
  tf_json_int (builder, "regions", age->regions);
  build_spread (builder, "tilt_deg", &age->tilt_deg);
  build_spread (builder, "separation_deg", &age->separation_deg);
  build_spread (builder, "flux_mx", &age->flux_mx);
  json_builder_end_object (builder);
}

static void
build_emergence (JsonBuilder *builder, const TfEmergence *found)
{
  json_builder_set_member_name (builder, "since_emergence");
  json_builder_begin_object (builder);
  tf_json_int (builder, "passages", found->passages);
  tf_json_int (builder, "late", found->late);
  tf_json_int (builder, "elsewhere", found->elsewhere);
  tf_json_int (builder, "unmeasured", found->unmeasured);
  begin_array (builder, "ages");
  for (int side = 0; side < TF_EMERGENCE_SIDES; side++)
    for (guint k = 0; k < found->ages[side]->len; k++)
      {
        const TfEmergenceAge *age = &g_array_index (found->ages[side], TfEmergenceAge, k);
        if (age->regions > 0)
          build_age (builder, side, age);
      }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

void
tf_study_build_parts (JsonBuilder *builder, const TfFindings *findings)
{
  build_comparisons (builder, findings->comparisons);
  build_shares_against (builder, findings);
  build_published (builder);
  build_bins (builder, "tilt_by_latitude", findings->joy_bins);
  build_bins (builder, "tilt_by_separation", findings->scatter_bins);
  begin_array (builder, "drift");
  for (guint k = 0; k < findings->drifts->len; k++)
    build_drift (builder, &g_array_index (findings->drifts, TfDrift, k));
  json_builder_end_array (builder);
  begin_array (builder, "axial_dipole");
  for (guint k = 0; k < findings->dipoles->len; k++)
    build_dipole (builder, &g_array_index (findings->dipoles, TfDipoleSum, k), findings);
  json_builder_end_array (builder);
  build_emergence (builder, findings->emergence);
}
