/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-json.h"
#include "tf-ledger-outside.h"
#include "tf-mount-wilson.h"

#define TF_COLUMNS_ROW TfExportRow
#include "tf-columns-table.h"

/* The flat columns. A number that is not there is NaN, a text "". Yes/no and whole numbers come
 * as doubles and are NaN when missing. Values stay in Mx, G and millionths of the hemisphere;
 * the units are written so that standard readers parse them: 1 Mx = 1e-8 Wb, 1 G = 1e-4 T
 * (VOUnits 1.0; FITS standard 4.0 section 4.3). UCDs are of the UCD1+ list of IVOA.
 */

/* -- getting at a row ------------------------------------------------------------------------- */

static char *
text_or_empty (const char *text)
{
  return g_strdup (text != NULL ? text : "");
}

static double
int_or_nan (gboolean there, int value)
{
  return there ? (double)value : (double)NAN;
}

static const TfPole *
pole_of (const TfExportRow *r, gboolean leading)
{
  const TfMeasure *m = &r->row->measure;
  if (m->leading_polarity == 0)
    return NULL;
  return (m->leading_polarity > 0) == leading ? &m->positive : &m->negative;
}

static double
pole_lat (const TfExportRow *r, gboolean leading)
{
  const TfPole *pole = pole_of (r, leading);
  return pole != NULL ? pole->lat_deg : NAN;
}

static double
pole_lon (const TfExportRow *r, gboolean leading)
{
  const TfPole *pole = pole_of (r, leading);
  return pole != NULL ? pole->carrington_lon_deg : NAN;
}

#define TEXT(name, expression) GETTER (char *, name, text_or_empty (expression))
#define M (r->row->measure)

/* clang-format off */
TEXT (get_region, r->row->region)
TEXT (get_passage, r->row->passage)
TEXT (get_mark, r->row->mark_id)
TEXT (get_origin, r->row->origin)
TEXT (get_label, r->row->label)
TAKE (get_frame, r->row->frame_path != NULL ? g_path_get_basename (r->row->frame_path) : g_strdup (""))
TEXT (get_frame_checksum, r->row->frame_checksum)
TEXT (get_method, r->row->method)
TEXT (get_program_version, r->row->program_version)
TEXT (get_field_used, tf_field_used_name (M.field_used))
TEXT (get_size, M.ephemeral ? "ephemeral" : "region")
TIME (get_time, M.time)
TEXT (get_time_source, r->row->time_source)
TEXT (get_kind, r->row->kind)
TEXT (get_instrument, r->row->instrument)
NUMBER (get_scale, M.scale)
TEXT (get_person, r->row->person)
TEXT (get_vantage, r->row->vantage)
NUMBER (get_leading_lat, pole_lat (r, TRUE))
NUMBER (get_leading_lon, pole_lon (r, TRUE))
NUMBER (get_following_lat, pole_lat (r, FALSE))
NUMBER (get_following_lon, pole_lon (r, FALSE))
NUMBER (get_lat, M.lat_deg)
NUMBER (get_cmd, M.cmd_deg)
NUMBER (get_stonyhurst, M.stonyhurst_lon_deg)
NUMBER (get_carrington, M.carrington_lon_deg)
NUMBER (get_mu, M.mu)
NUMBER (get_bearing, M.axis_bearing_deg)
NUMBER (get_tilt, M.axis_tilt_deg)
NUMBER (get_polarity_tilt, tf_verdict_polarity_tilt (&r->sample, &r->verdict))
NUMBER (get_tilt_sigma, M.tilt_terms.total)
NUMBER (get_separation, M.separation_deg)
NUMBER (get_separation_sigma, M.separation_sigma_deg)
NUMBER (get_separation_mm, M.separation_mm)
NUMBER (get_compactness, M.compactness)
NUMBER (get_pieces, M.pieces)
NUMBER (get_leading_polarity, M.leading_polarity)
NUMBER (get_leading_sure, int_or_nan (M.leading_polarity != 0, M.leading_sure != 0))
NUMBER (get_flux, M.flux_unsigned_mx)
NUMBER (get_flux_positive, M.positive.flux_mx)
NUMBER (get_flux_negative, M.negative.flux_mx)
NUMBER (get_imbalance, M.imbalance)
NUMBER (get_magnetic_area, M.positive.magnetic_area_msh + M.negative.magnetic_area_msh)
NUMBER (get_cycle, int_or_nan (r->verdict.cycle.number != 0, r->verdict.cycle.number))
NUMBER (get_cycle_sure, int_or_nan (r->verdict.cycle.number != 0, r->verdict.cycle.sure != 0))
TEXT (get_hale, tf_verdict_name (r->verdict.kind))
TEXT (get_hale_reason, r->verdict.reason)
TEXT (get_class, r->row->mw_class)
NUMBER (get_axial_dipole, M.axial_dipole_gauss)
NUMBER (get_floor, M.floor_gauss)
TEXT (get_floor_kind, tf_floor_kind_name (M.floor_kind))
TAKE (get_cautions, tf_notes_dup_codes (M.cautions))
TAKE (get_class_base, tf_mount_wilson_dup_base (r->row->mw_class))
NUMBER (get_class_delta,
        int_or_nan (tf_mount_wilson_delta (r->row->mw_class) >= 0, tf_mount_wilson_delta (r->row->mw_class)))
NUMBER (get_unipolar, int_or_nan (r->row->is_hint, r->row->unipolar != 0))
NUMBER (get_simulated, r->row->simulated != 0)
#define O (r->row->outside)
TEXT (get_source, O != NULL ? O->source : NULL)
TEXT (get_licence, O != NULL ? O->licence : NULL)
NUMBER (get_source_row, O != NULL ? O->place : (double)NAN)
#define C (r->row->complexity)
NUMBER (get_schrijver, C.there ? C.r_mx : (double)NAN)
NUMBER (get_gradient_length, C.there ? C.strong_gradient_length_mm : (double)NAN)
NUMBER (get_gradient_weighted, C.there ? C.gradient_weighted_gauss : (double)NAN)
NUMBER (get_flux_near, C.there ? C.flux_near_mx : (double)NAN)
NUMBER (get_strong_pieces, int_or_nan (C.there, (int)C.pieces))
NUMBER (get_delta_candidate, int_or_nan (C.there, C.delta_candidate != 0))
NUMBER (get_complexity_mu, r->row->complexity_method != NULL ? C.mu : (double)NAN)
TEXT (get_complexity_method, r->row->complexity_method)
TEXT (get_external, r->row->external)

static char *
get_nothing (gconstpointer row)
{
  return g_strdup ("");
}

/* -- the table -------------------------------------------------------------------------------- */

const TfColumn tf_columns[] = {
  AS_TEXT ("region", "meta.id;src", "own number of the region", get_region),
  AS_TEXT ("passage", "meta.id.parent", "disk passage that the mark belongs to", get_passage),
  AS_TEXT ("mark", "meta.id;meta.main", "id of the mark or hint, the same in every ledger", get_mark),
  AS_TEXT ("origin", "meta.code.status", "hint, kept as hinted, changed, drawn new, outside", get_origin),
  AS_TEXT ("label", "meta.id.assoc", "a person's own name of the region", get_label),
  AS_TEXT ("frame", "meta.id;meta.file", "name of the frame's file", get_frame),
  AS_TEXT ("frame_checksum", "meta.ref;meta.file", "SHA-256 of the frame's file", get_frame_checksum),
  AS_TEXT ("method", "meta.note;meta.software", "how it was measured, with every option", get_method),
  AS_TEXT ("program_version", "meta.version;meta.software", "version that measured it", get_program_version),
  AS_TEXT ("field_used", "meta.code", "radial (B/mu), as observed, or potential", get_field_used),
  AS_TEXT ("size", "meta.code.class", "region, or ephemeral by its flux", get_size),
  AS_TEXT ("time", "time.epoch;obs", "middle of the exposure, UTC", get_time),
  AS_TEXT ("time_source", "meta.code", "keyword that the time was read from", get_time_source),
  AS_TEXT ("kind", "meta.code.class;obs.image", "kind of the frame: disk, cut-out, map, model map", get_kind),
  AS_TEXT ("instrument", "meta.id;instr", "origin of the frame", get_instrument),
  AS_NUMBER ("scale", NONE, "instr.calib", "factor applied to the instrument's field; missing: not scaled", get_scale),
  AS_TEXT ("person", "obs.observer", "who marked it", get_person),
  AS_TEXT ("vantage", "meta.id;instr.obsty", "where it was seen from: earth, or the Stonyhurst longitude", get_vantage),
  AS_NUMBER ("leading_lat_deg", DEG, "pos.bodyrc.lat", "latitude of the leading pole", get_leading_lat),
  AS_NUMBER ("leading_carrington_lon_deg", DEG, "pos.bodyrc.long", "Carrington longitude of the leading pole", get_leading_lon),
  AS_NUMBER ("following_lat_deg", DEG, "pos.bodyrc.lat", "latitude of the following pole", get_following_lat),
  AS_NUMBER ("following_carrington_lon_deg", DEG, "pos.bodyrc.long", "Carrington longitude of the following pole",
             get_following_lon),
  AS_NUMBER ("lat_deg", DEG, "pos.bodyrc.lat;meta.main", "latitude of the poles' midpoint", get_lat),
  AS_NUMBER ("cmd_deg", DEG, "pos.bodyrc.long", "longitude from the observer's central meridian, west positive", get_cmd),
  AS_NUMBER ("stonyhurst_lon_deg", DEG, "pos.bodyrc.long", "Stonyhurst longitude, west positive", get_stonyhurst),
  AS_NUMBER ("carrington_lon_deg", DEG, "pos.bodyrc.long;meta.main", "Carrington longitude, 0 to 360", get_carrington),
  AS_NUMBER ("mu", NONE, "obs.param", "cosine of the angle between vertical and line of sight", get_mu),
  AS_NUMBER ("axis_bearing_deg", DEG, "pos.posAng", "from following to leading pole, from west towards north", get_bearing),
  AS_NUMBER ("axis_tilt_deg", DEG, "pos.posAng;meta.main", "tilt, positive: the leader equatorward", get_tilt),
  AS_NUMBER ("polarity_tilt_deg", DEG, "pos.posAng", "tilt from the pole that should follow to the one that should lead",
             get_polarity_tilt),
  AS_NUMBER ("tilt_sigma_deg", DEG, "stat.error;pos.posAng", "uncertainty of the tilt: noise, outline and floor", get_tilt_sigma),
  AS_NUMBER ("separation_deg", DEG, "pos.angDistance", "great-circle distance of the poles", get_separation),
  AS_NUMBER ("separation_sigma_deg", DEG, "stat.error;pos.angDistance", "uncertainty of the separation", get_separation_sigma),
  AS_NUMBER ("separation_mm", MEGAMETRE, "phys.size", "distance of the poles on the Sun", get_separation_mm),
  AS_NUMBER ("compactness", NONE, "phys.size.axisRatio", "separation over the sum of the poles' radii", get_compactness),
  AS_INT ("pieces", "meta.number", "single-polarity pieces of at least 15 % of the flux", get_pieces),
  AS_INT ("leading_polarity", "meta.code", "1 positive, -1 negative, 0 without two poles", get_leading_polarity),
  AS_BOOL ("leading_sure", "meta.code.qual", "whether the leading polarity is sure", get_leading_sure),
  AS_NUMBER ("flux_unsigned_mx", MX, "phys.magField;phys.area", "unsigned flux, Mx", get_flux),
  AS_NUMBER ("flux_positive_mx", MX, "phys.magField;phys.area", "positive flux, Mx", get_flux_positive),
  AS_NUMBER ("flux_negative_mx", MX, "phys.magField;phys.area", "size of the negative flux, Mx", get_flux_negative),
  AS_NUMBER ("imbalance", NONE, "phys.magField;arith.ratio", "positive less negative over unsigned flux", get_imbalance),
  AS_NUMBER ("magnetic_area_msh", MSH, "phys.area", "area above the floor, millionths of the hemisphere",
             get_magnetic_area),
  AS_INT ("cycle", "meta.number", "sunspot cycle, by the study's divides", get_cycle),
  AS_BOOL ("cycle_sure", "meta.code.qual", "whether the cycle is sure", get_cycle_sure),
  AS_TEXT ("hale", "meta.code.class", "Hale's law: keeps, breaks, cannot say", get_hale),
  AS_TEXT ("hale_reason", "meta.code", "why it cannot be said", get_hale_reason),
  AS_TEXT ("class", "src.class", "Mount Wilson class", get_class),
  AS_NUMBER ("axial_dipole_gauss", GAUSS, "phys.magField", "contribution to the axial dipole, G", get_axial_dipole),
  AS_NUMBER ("floor_gauss", GAUSS, "phys.magField;stat.min", "floor of the field that counts, G", get_floor),
  AS_TEXT ("floor_kind", "meta.code", "local (as observed) or even (radial)", get_floor_kind),
  AS_TEXT ("cautions", "meta.code.qual", "codes of what to beware of", get_cautions),
  AS_TEXT ("class_base", "src.class", "Mount Wilson class without delta", get_class_base),
  AS_BOOL ("class_delta", "meta.code", "whether the Mount Wilson class has delta", get_class_delta),
  AS_BOOL ("unipolar", "meta.code", "hints: offered as unipolar", get_unipolar),
  AS_BOOL ("simulated", "meta.code", "the frame is simulated", get_simulated),
  AS_NUMBER ("r_schrijver_mx", MX, "phys.magField;phys.area", "R of Schrijver 2007 where mu is at least 0.7; no forecast",
             get_schrijver),
  AS_NUMBER ("strong_gradient_length_mm", MEGAMETRE, "phys.size", "length of inversion line with a strong gradient",
             get_gradient_length),
  AS_NUMBER ("gradient_weighted_length_gauss", GAUSS, "phys.magField", "gradient summed along the strong-field inversion line, G",
             get_gradient_weighted),
  AS_NUMBER ("flux_near_line_mx", MX, "phys.magField;phys.area", "unsigned flux near strong-gradient inversion line, Mx", get_flux_near),
  AS_INT ("strong_pieces", "meta.number", "single-polarity pieces of strong field", get_strong_pieces),
  AS_BOOL ("delta_candidate", "meta.code", "opposite cores close together; delta is a person's to say",
           get_delta_candidate),
  AS_NUMBER ("complexity_mu", NONE, "obs.param", "mu at the outline's middle, where complexity was asked for", get_complexity_mu),
  AS_TEXT ("complexity_method", "meta.note;meta.software", "how complexity was worked out, with every option", get_complexity_method),
  AS_TEXT ("external_number", "meta.id.assoc", "number of the region in an official or other list",
           get_external),
  AS_TEXT ("source", "meta.bib", "outside rows: where the table is from", get_source),
  AS_TEXT ("licence", "meta.note", "outside rows: licence of the table", get_licence),
  AS_INT ("source_row", "meta.record", "outside rows: line or row of the table", get_source_row),
  AS_TEXT ("source_origin", "meta.code.status", "outside rows: origin as the table has it", get_nothing),
  AS_TEXT ("source_mark", "meta.id", "outside rows: id of the mark as the table has it", get_nothing),
  { NULL },
};
/* clang-format on */

const TfColumn *
tf_column_find (const char *name)
{
  for (const TfColumn *column = tf_columns; column->name != NULL; column++)
    if (strcmp (column->name, name) == 0)
      return column;
  return NULL;
}

/* Of a row that came in a table, what is judged or says which row it is is worked out here; all
 * else stands as it was brought. */
static JsonObject *
find_flat (const TfColumn *column, const TfExportRow *row)
{
  static const char *const here[]
      = { "region", "passage", "mark",        "origin",     "time",        "polarity_tilt_deg",
          "cycle",  "cycle_sure", "hale",     "hale_reason", "class_base", "class_delta",
          "source", "licence", "source_row", NULL };
  if (row->row->outside == NULL || g_strv_contains (here, column->name))
    return NULL;
  return tf_outside_row_get_flat (row->row->outside);
}

double
tf_column_number (const TfColumn *column, const TfExportRow *row)
{
  JsonObject *flat = find_flat (column, row);
  double value = flat != NULL ? tf_json_member_number (flat, column->name) : column->number (row);
  return value * column->factor;
}

char *
tf_column_dup_text (const TfColumn *column, const TfExportRow *row)
{
  JsonObject *flat = find_flat (column, row);
  if (flat == NULL)
    return column->text (row);
  const char *text = tf_json_member_string (flat, column->name);
  return g_strdup (text != NULL ? text : "");
}
