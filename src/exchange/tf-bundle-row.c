/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bring-private.h"
#include "tf-bundle-private.h"
#include "tf-json.h"
#include "tf-ledger-outside.h"
#include "tf-number.h"

#define TF_COLUMNS_ROW TfBundleRow
#include "tf-columns-table.h"

/* One row of sample.csv, both ways. */

/* -- out --------------------------------------------------------------------------------------- */

static double
yes_or_nan (int value)
{
  return value < 0 ? (double)NAN : (double)(value != 0);
}

NUMBER (get_picked, r->picked != 0)
NUMBER (get_region, r->flat.sample.region)
NUMBER (get_passage, r->flat.sample.passage)
NUMBER (get_differ, yes_or_nan (r->flat.sample.witnesses_differ))
NUMBER (get_straddles, yes_or_nan (r->flat.sample.straddles))
NUMBER (get_born, yes_or_nan (r->flat.sample.born))
NUMBER (get_dipole_sigma, r->flat.sample.axial_dipole_sigma_gauss)

/* clang-format off */
const TfColumn tf_bundle_columns[] = {
  AS_BOOL ("picked", "meta.code", "whether the sampling rule picked it", get_picked),
  AS_INT ("region_number", "meta.id.parent", "rows of one region share it", get_region),
  AS_INT ("passage_number", "meta.id.parent", "rows of one passage share it", get_passage),
  AS_BOOL ("witnesses_differ", "meta.code.qual", "whether witnesses tell different leaders", get_differ),
  AS_BOOL ("straddles", "meta.code", "whether the poles lie on both sides of the equator", get_straddles),
  AS_BOOL ("born_on_disk", "meta.code", "whether the passage began on the visible disk", get_born),
  AS_NUMBER ("axial_dipole_sigma_gauss", GAUSS, "stat.error;phys.magField", "uncertainty of the axial dipole, G", get_dipole_sigma),
  { NULL },
};
/* clang-format on */

/* -- in ---------------------------------------------------------------------------------------- */

static const TfColumn *
find_column (const char *name)
{
  for (const TfColumn *column = tf_bundle_columns; column->name != NULL; column++)
    if (strcmp (column->name, name) == 0)
      return column;
  return tf_column_find (name);
}

/* NULL, or why the cell is no such value. */
static char *
take_cell (const TfColumn *column, const char *cell, JsonObject *flat)
{
  double value = NAN;
  if (column->type == TF_COLUMN_TEXT)
    {
      json_object_set_string_member (flat, column->name, cell);
      return NULL;
    }
  if (column->type == TF_COLUMN_BOOL)
    value = strcmp (cell, "true") == 0 ? 1 : strcmp (cell, "false") == 0 ? 0 : NAN;
  else if (!tf_number_read (cell, &value))
    value = NAN;
  if (!isfinite (value))
    return g_strdup (_ ("not a value of its column"));
  json_object_set_double_member (flat, column->name, value);
  return tf_brought_check_range (column->name, value);
}

static JsonObject *
read_flat (const TfCells *table, guint k, char **wrong)
{
  JsonObject *flat = json_object_new ();
  char **cells = g_ptr_array_index (table->rows, k);
  for (guint c = 0; c < table->columns->len && *wrong == NULL; c++)
    {
      const char *name = g_array_index (table->columns, TfCellsColumn, c).name;
      const TfColumn *column = find_column (name);
      g_autofree char *reason
          = column != NULL && cells[c] != NULL ? take_cell (column, cells[c], flat) : NULL;
      if (reason != NULL)
        *wrong = g_strdup_printf ("%s “%.60s”: %s", name, cells[c], reason);
    }
  return flat;
}

/* The name as the program's own static text; NULL when it is none. */
static const char *
known_origin (const char *name)
{
  static const char *const origins[]
      = { "hint", "kept as hinted", "changed", "drawn new", "outside" };
  for (guint k = 0; k < G_N_ELEMENTS (origins); k++)
    if (g_strcmp0 (name, origins[k]) == 0)
      return origins[k];
  return NULL;
}

static TfNotes *
read_cautions (const char *codes)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_auto (GStrv) words = g_strsplit (codes != NULL ? codes : "", " ", -1);
  json_builder_begin_array (builder);
  for (char **word = words; *word != NULL; word++)
    if (**word != '\0')
      {
        json_builder_begin_array (builder);
        json_builder_add_string_value (builder, *word);
        json_builder_end_array (builder);
      }
  json_builder_end_array (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  return tf_notes_from_store (text, NULL);
}

static void
complete_poles (TfMeasure *m, JsonObject *flat)
{
  gboolean plus = m->leading_polarity > 0;
  TfPole *lead = plus ? &m->positive : &m->negative, *follow = plus ? &m->negative : &m->positive;
  lead->carrington_lon_deg = tf_json_member_number (flat, "leading_carrington_lon_deg");
  follow->carrington_lon_deg = tf_json_member_number (flat, "following_carrington_lon_deg");
  m->positive.flux_mx = tf_json_member_number (flat, "flux_positive_mx");
  m->negative.flux_mx = tf_json_member_number (flat, "flux_negative_mx");
  m->positive.magnetic_area_msh = tf_json_member_number (flat, "magnetic_area_msh");
  m->negative.magnetic_area_msh = 0; /* the table has their sum */
}

static void
complete_complexity (TfRow *row, JsonObject *flat)
{
  const char *method = tf_json_member_string (flat, "complexity_method");
  double delta = tf_json_member_number (flat, "delta_candidate");
  double pieces = tf_json_member_number (flat, "strong_pieces");
  row->complexity_method = g_strdup (method);
  row->complexity = (TfComplexityRow){
    .there = !isnan (delta),
    .mu = tf_json_member_number (flat, "complexity_mu"),
    .r_mx = tf_json_member_number (flat, "r_schrijver_mx"),
    .strong_gradient_length_mm = tf_json_member_number (flat, "strong_gradient_length_mm"),
    .gradient_weighted_gauss = tf_json_member_number (flat, "gradient_weighted_length_gauss"),
    .flux_near_mx = tf_json_member_number (flat, "flux_near_line_mx"),
    .pieces = pieces > 0 ? (guint)pieces : 0,
    .delta_candidate = delta > 0,
  };
}

/* From a row of a table to a row of a ledger: it was measured here, and stands there whole. */
static void
make_own (TfRow *row, JsonObject *flat)
{
  TfMeasure *m = &row->measure;
  double pieces = tf_json_member_number (flat, "pieces");
  const char *used = tf_json_member_string (flat, "field_used");
  complete_poles (m, flat);
  complete_complexity (row, flat);
  for (int k = TF_FIELD_USED_RADIAL; k <= TF_FIELD_USED_POTENTIAL; k++)
    if (g_strcmp0 (used, tf_field_used_name ((TfFieldUsed)k)) == 0)
      m->field_used = (TfFieldUsed)k;
  m->separation_mm = tf_json_member_number (flat, "separation_mm");
  m->pieces = pieces > 0 ? (guint)pieces : 0;
  m->cautions = read_cautions (tf_json_member_string (flat, "cautions"));
  row->is_hint = strcmp (row->origin, "hint") == 0;
  row->external = g_strdup (tf_json_member_string (flat, "external_number"));
  g_clear_pointer (&row->outside, tf_outside_row_free);
}

static gint8
yes_or_unknown (JsonObject *flat, const char *name)
{
  double value = tf_json_member_number (flat, name);
  return isnan (value) ? -1 : value > 0;
}

static TfSampleRow
sample_row_of (const TfRow *row, JsonObject *flat)
{
  TfSampleRow s;
  tf_study_row (row, &s);
  s.region = (guint32)tf_json_member_number (flat, "region_number");
  s.passage = (guint32)tf_json_member_number (flat, "passage_number");
  s.witnesses_differ = yes_or_unknown (flat, "witnesses_differ");
  s.straddles = yes_or_unknown (flat, "straddles");
  s.born = yes_or_unknown (flat, "born_on_disk");
  return s;
}

static gboolean
is_number (JsonObject *flat, const char *name)
{
  double value = tf_json_member_number (flat, name);
  return value >= 1 && value <= G_MAXINT32 && !(value > floor (value));
}

char *
tf_bundle_add_row (TfStudyTaken *taken, const TfCells *table, guint k)
{
  char *wrong = NULL;
  g_autoptr (JsonObject) flat = read_flat (table, k, &wrong);
  const char *origin = known_origin (tf_json_member_string (flat, "origin"));
  if (wrong == NULL && origin == NULL)
    wrong = g_strdup (_ ("its origin is none that there is"));
  if (wrong == NULL && (!is_number (flat, "region_number") || !is_number (flat, "passage_number")))
    wrong = g_strdup (_ ("it has no region_number or no passage_number"));
  if (wrong != NULL)
    return wrong;
  const char *time = tf_json_member_string (flat, "time");
  g_autoptr (JsonNode) node = json_node_init_object (json_node_alloc (), flat);
  TfRow *row = tf_row_new_flat (tf_json_node_dup_text (node, FALSE),
                                time != NULL ? tf_time_read (time) : TF_TIME_UNKNOWN);
  double place = tf_json_member_number (flat, "source_row");
  row->origin = origin;
  row->outside->place = place > 0 ? (guint)place : 0;
  if (strcmp (origin, "outside") != 0)
    make_own (row, flat);
  tf_study_taken_add (taken, row, sample_row_of (row, flat));
  return NULL;
}
