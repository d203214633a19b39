/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-export-kinds.h"

#include <math.h>

#include "tf-export-private.h"

#define TF_COLUMNS_ROW gconstpointer
#include "tf-columns-table.h"

/* The frames of a ledger: what they are, and how far people have got with them. */

#define F ((const TfFrameRow *)*r)
#define G (F->info->geometry)

static gboolean
is_disk (const TfFrameRow *f)
{
  return f->info->kind == TF_KIND_DISK || f->info->kind == TF_KIND_CUT_OUT;
}

static double
of_disk (const TfFrameRow *f, double value)
{
  return is_disk (f) ? value : NAN;
}

TAKE (get_name, g_path_get_basename (F->path))
TAKE (get_checksum, g_strdup (F->checksum))
NUMBER (get_hdu, F->hdu)
NUMBER (get_plane, F->plane)
TAKE (get_kind, g_strdup (tf_kind_name (F->info->kind)))
TAKE (get_role, g_strdup (tf_role_name (F->info->role)))
TIME (get_time, F->info->time)
TAKE (get_time_source, g_strdup (F->info->time_source))
NUMBER (get_span, F->info->time_span_s)
TAKE (get_instrument, g_strdup (F->info->instrument))
NUMBER (get_width, G.width)
NUMBER (get_height, G.height)
TAKE (get_projection, g_strdup (tf_projection_name (G.projection)))
NUMBER (get_scale, of_disk (F, tf_geometry_scale_arcsec (&G)))
NUMBER (get_north, of_disk (F, tf_geometry_north_angle (&G)))
NUMBER (get_distance, of_disk (F, G.observer.distance_m / 1e6))
NUMBER (get_b0, of_disk (F, G.observer.b0_deg))
NUMBER (get_stonyhurst, of_disk (F, G.observer.stonyhurst_lon_deg))
NUMBER (get_carrington, of_disk (F, G.observer.carrington_lon_deg))
NUMBER (get_rotation, F->info->rotation_number)
TAKE (get_unit, g_strdup (F->info->unit))
TAKE (get_field, g_strdup (tf_field_name (F->info->field)))
NUMBER (get_noise, F->noise_gauss)
NUMBER (get_hints, F->n_hints)
NUMBER (get_marks, F->n_marks)
NUMBER (get_done, F->done != 0)
NUMBER (get_corrected, F->geometries != NULL)
NUMBER (get_simulated, F->info->simulated != 0)
TAKE (get_refusal, g_strdup (F->refusal != NULL ? F->refusal : ""))
TAKE (get_repairs, tf_notes_dup_codes (F->info->repairs))
TAKE (get_cautions, tf_notes_dup_codes (F->info->cautions))

/* clang-format off */
static const TfColumn columns[] = {
  AS_TEXT ("frame", "meta.id;meta.file", "name of the frame's file", get_name),
  AS_TEXT ("frame_checksum", "meta.ref;meta.file", "SHA-256 of the frame's file", get_checksum),
  AS_INT ("hdu", "meta.number", "HDU of the file, 1: primary", get_hdu),
  AS_INT ("plane", "meta.number", "plane of a cube, from 1", get_plane),
  AS_TEXT ("kind", "meta.code.class;obs.image", "disk, cut-out, map, model map, unknown", get_kind),
  AS_TEXT ("role", "meta.code.class", "field, intensity (a companion), refused", get_role),
  AS_TEXT ("time", "time.epoch;obs", "middle of the exposure, UTC", get_time),
  AS_TEXT ("time_source", "meta.code", "keyword that the time was read from", get_time_source),
  AS_NUMBER ("time_span_s", SECOND, "time.duration;obs.exposure", "length of the exposure", get_span),
  AS_TEXT ("instrument", "meta.id;instr", "origin of the frame", get_instrument),
  AS_INT ("width", "meta.number", "pixels a row", get_width),
  AS_INT ("height", "meta.number", "rows", get_height),
  AS_TEXT ("projection", "meta.code", "TAN, CEA, CAR", get_projection),
  AS_NUMBER ("scale_arcsec", ARCSEC, "instr.scale", "side of a pixel; maps: none", get_scale),
  AS_NUMBER ("north_angle_deg", DEG, "pos.posAng", "solar north from image up, counter-clockwise", get_north),
  AS_NUMBER ("observer_distance_mm", MEGAMETRE, "pos.distance", "observer's distance from the Sun's centre, Mm", get_distance),
  AS_NUMBER ("observer_b0_deg", DEG, "pos.bodyrc.lat", "heliographic latitude of the observer", get_b0),
  AS_NUMBER ("observer_stonyhurst_lon_deg", DEG, "pos.bodyrc.long", "Stonyhurst longitude of the observer", get_stonyhurst),
  AS_NUMBER ("observer_carrington_lon_deg", DEG, "pos.bodyrc.long", "Carrington longitude of the observer", get_carrington),
  AS_NUMBER ("carrington_rotation", NONE, "meta.number", "maps: Carrington rotation", get_rotation),
  AS_TEXT ("unit", "meta.unit", "unit of the stored values", get_unit),
  AS_TEXT ("field", "meta.code", "los, radial, unknown", get_field),
  AS_NUMBER ("noise_gauss", GAUSS, "stat.error;phys.magField", "one sigma of a pixel at mu 0.5, as observed, G", get_noise),
  AS_INT ("hints", "meta.number", "hints that nobody has judged", get_hints),
  AS_INT ("marks", "meta.number", "marks that stand", get_marks),
  AS_BOOL ("done", "meta.code.status", "no hint waits and somebody has judged", get_done),
  AS_BOOL ("corrected", "meta.code.status", "a person has corrected its geometry", get_corrected),
  AS_BOOL ("simulated", "meta.code", "the frame is simulated", get_simulated),
  AS_TEXT ("refusal", "meta.note", "why it cannot be used as a field", get_refusal),
  AS_TEXT ("repairs", "meta.code", "codes of what was turned into standard words", get_repairs),
  AS_TEXT ("cautions", "meta.code.qual", "codes of what to beware of", get_cautions),
  { NULL },
};
/* clang-format on */

gboolean
tf_export_frames (const char *path, TfLedger *ledger, const char *source, guint *n, GError **error)
{
  g_autoptr (GPtrArray) frames = tf_ledger_frames (ledger, error);
  if (frames == NULL)
    return FALSE;
  g_autoptr (GArray) rows = g_array_new (FALSE, FALSE, sizeof (TfFrameRow *));
  g_autoptr (GArray) facts = tf_facts_new_plain (source, frames->len);
  g_auto (TfTableOut) table = { 0 };
  g_array_append_vals (rows, frames->pdata, frames->len);
  tf_table_out_init (&table, "frames", FALSE, columns, rows, facts);
  *n = frames->len;
  return tf_export_write_table (path, &table, error);
}
