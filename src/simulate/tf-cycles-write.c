/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-cycles.h"
#include "tf-json.h"
#include "tf-number.h"
#include "tf-sun-private.h"

/* Invented cycles as files: a table that can be brought into a ledger, and the truth apart from it. */

static void
put (GString *out, double value)
{
  g_autofree char *text = isnan (value) ? g_strdup ("") : tf_number_dup (value);
  g_string_append_printf (out, ",%s", text);
}

static const struct
{
  const char *name;
  gsize offset;
} columns[] = {
  { "lat_deg", offsetof (TfSampleRow, lat_deg) },
  { "leading_lat_deg", offsetof (TfSampleRow, leading_lat_deg) },
  { "following_lat_deg", offsetof (TfSampleRow, following_lat_deg) },
  { "cmd_deg", offsetof (TfSampleRow, cmd_deg) },
  { "mu", offsetof (TfSampleRow, mu) },
  { "axis_bearing_deg", offsetof (TfSampleRow, axis_bearing_deg) },
  { "axis_tilt_deg", offsetof (TfSampleRow, axis_tilt_deg) },
  { "tilt_sigma_deg", offsetof (TfSampleRow, tilt_sigma_deg) },
  { "separation_deg", offsetof (TfSampleRow, separation_deg) },
  { "separation_sigma_deg", offsetof (TfSampleRow, separation_sigma_deg) },
  { "compactness", offsetof (TfSampleRow, compactness) },
  { "flux_unsigned_mx", offsetof (TfSampleRow, flux_mx) },
  { "imbalance", offsetof (TfSampleRow, imbalance) },
};

/* Names and units are those of our own tables. */
static char *
dup_sample (const TfInvented *invented)
{
  GString *out = g_string_new ("# invented: no row of this table was ever seen on the Sun\r\n"
                               "region,time,size,leading_polarity,leading_sure");
  for (guint c = 0; c < G_N_ELEMENTS (columns); c++)
    g_string_append_printf (out, ",%s", columns[c].name);
  for (guint k = 0; k < tf_sample_get_n (invented->sample); k++)
    {
      const TfSampleRow *row = tf_sample_get (invented->sample, k);
      g_autofree char *time = tf_time_dup_iso (row->time, 0);
      g_string_append_printf (out, "\r\nI%06u,%s,region,%d,true", row->region + 1, time,
                              row->leading_polarity);
      for (guint c = 0; c < G_N_ELEMENTS (columns); c++)
        put (out, G_STRUCT_MEMBER (double, row, columns[c].offset));
    }
  g_string_append (out, "\r\n");
  return g_string_free (out, FALSE);
}

static char *
dup_truth (const TfInvented *invented)
{
  GString *out = g_string_new ("region,cycle,breaks,time,lat_deg,tilt_deg,separation_deg,flux_mx");
  for (guint k = 0; k < invented->regions->len; k++)
    {
      const TfInventedRegion *r = &g_array_index (invented->regions, TfInventedRegion, k);
      g_autofree char *time = tf_time_dup_iso (r->time, 0);
      g_string_append_printf (out, "\r\nI%06u,%d,%s,%s", k + 1, r->cycle,
                              r->breaks ? "true" : "false", time);
      put (out, r->lat_deg);
      put (out, r->tilt_deg);
      put (out, r->separation_deg);
      put (out, r->flux_mx);
    }
  g_string_append (out, "\r\n");
  return g_string_free (out, FALSE);
}

/* The computed divide about one minimum, every three months. */
static void
build_divide (JsonBuilder *builder, const TfDivides *divides, int cycle)
{
  json_builder_begin_object (builder);
  tf_json_int (builder, "cycle", cycle);
  json_builder_set_member_name (builder, "points");
  json_builder_begin_array (builder);
  for (int months = -24; months <= 18; months += 3)
    {
      TfTime time = tf_time_add (tf_cycle_minimum (cycle), months * 365.25 / 12.0 * 86400.0);
      double lat = tf_divides_latitude (divides, cycle, 1, time);
      if (isnan (lat))
        continue;
      g_autofree char *text = tf_time_dup_iso (time, 0);
      json_builder_begin_array (builder);
      json_builder_add_string_value (builder, text);
      json_builder_add_double_value (builder, lat);
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

static char *
dup_json (const TfInvented *invented, const TfCyclesParams *params)
{
  TfDivideParams divide;
  tf_options_reset (tf_divide_options, &divide);
  g_autoptr (TfDivides) divides = tf_divides_new (&divide);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  guint breaks = 0;
  for (guint k = 0; k < invented->regions->len; k++)
    breaks += g_array_index (invented->regions, TfInventedRegion, k).breaks != FALSE;
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "options");
  tf_options_build_json (tf_cycles_options, params, builder);
  tf_json_int (builder, "regions", invented->regions->len);
  tf_json_int (builder, "marks", tf_sample_get_n (invented->sample));
  tf_json_int (builder, "breaks", breaks);
  json_builder_set_member_name (builder, "divides");
  json_builder_begin_array (builder);
  for (int c = 0; c <= params->n_cycles; c++)
    if (tf_cycle_find (params->first + c) != NULL)
      build_divide (builder, divides, params->first + c);
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, TRUE);
}

/* Takes @text. */
static gboolean
save (const char *folder, const char *name, char *text, GError **error)
{
  g_autofree char *path = g_build_filename (folder, name, NULL), *own = text;
  g_autoptr (GError) why = NULL;
  if (g_file_set_contents (path, own, -1, &why))
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_WRITE, _ ("%s cannot be written: %s"),
               path, why->message);
  return FALSE;
}

gboolean
tf_cycles_write (const char *folder, const TfCyclesParams *params, GError **error)
{
  if (!tf_simulate_make_folder (folder, error))
    return FALSE;
  g_autoptr (TfInvented) invented = tf_cycles_invent (params);
  return save (folder, "cycles.csv", dup_sample (invented), error)
         && save (folder, "cycles.truth.csv", dup_truth (invented), error)
         && save (folder, "cycles.truth.json", dup_json (invented, params), error);
}
