/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

static const char *const kind_names[] = { "unknown", "disk", "cut-out", "map", "model map" };

const char *
tf_kind_name (TfKind kind)
{
  return (guint)kind < G_N_ELEMENTS (kind_names) ? kind_names[kind] : kind_names[0];
}

TfKind
tf_kind_from_name (const char *name)
{
  for (guint k = 0; k < G_N_ELEMENTS (kind_names); k++)
    if (g_strcmp0 (name, kind_names[k]) == 0)
      return (TfKind)k;
  return TF_KIND_UNKNOWN;
}

const char *
tf_role_name (TfRole role)
{
  return role == TF_ROLE_FIELD ? "field" : role == TF_ROLE_INTENSITY ? "intensity" : "refused";
}

const char *
tf_field_name (TfFieldKind field)
{
  return field == TF_FIELD_LOS ? "los" : field == TF_FIELD_RADIAL ? "radial" : "unknown";
}

TfTime
tf_frame_info_column_time (const TfFrameInfo *info, double x)
{
  const TfGeometry *g = &info->geometry;
  if (info->kind != TF_KIND_MAP)
    return info->time;
  if (isnan (info->rotation_number) || !(x >= 0.5 && x <= g->width + 0.5))
    return TF_TIME_UNKNOWN;
  double lon = tf_wrap_360 (g->crval_deg[0]) + g->cd[0][0] * (x - g->crpix[0]); /* runs on */
  return tf_carrington_time (info->rotation_number + 1 - lon / 360);
}

static TfFrameInfo *
info_new (guint width, guint height)
{
  TfFrameInfo *info = g_new0 (TfFrameInfo, 1);
  info->repairs = tf_notes_new ();
  info->cautions = tf_notes_new ();
  info->time = TF_TIME_UNKNOWN;
  info->time_source = "unknown";
  info->to_gauss = 1;
  info->n_planes = 1;
  info->time_span_s = info->distance_given_m = info->rotation_number = info->fill_value = NAN;
  info->geometry.observer = (TfObserver){ NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN };
  info->geometry.radius_mm = NAN;
  info->geometry.width = width;
  info->geometry.height = height;
  return info;
}

static TfNotes *
notes_copy (const TfNotes *notes)
{
  TfNotes *copy = tf_notes_new ();
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    tf_notes_add_copy (copy, tf_notes_get (notes, k));
  return copy;
}

TfFrameInfo *
tf_frame_info_copy (const TfFrameInfo *info)
{
  TfFrameInfo *copy = g_memdup2 (info, sizeof *info);
  copy->refusal = info->refusal != NULL ? tf_note_copy (info->refusal) : NULL;
  copy->instrument = g_strdup (info->instrument);
  copy->unit = g_strdup (info->unit);
  copy->repairs = notes_copy (info->repairs);
  copy->cautions = notes_copy (info->cautions);
  return copy;
}

void
tf_frame_info_free (TfFrameInfo *info)
{
  if (info == NULL)
    return;
  tf_note_free (info->refusal);
  g_free (info->instrument);
  g_free (info->unit);
  g_ptr_array_unref (info->repairs);
  g_ptr_array_unref (info->cautions);
  g_free (info);
}

static TfHeader *
repair (const TfHeader *header, guint width, guint height, TfNotes *repairs)
{
  TfHeader *repaired = tf_header_copy (header);
  tf_header_set_number (repaired, "NAXIS1", width);
  tf_header_set_number (repaired, "NAXIS2", height);
  for (const TfDialect *dialect = tf_dialects; dialect->name != NULL; dialect++)
    if (dialect->applies == NULL || dialect->applies (repaired))
      dialect->repair (repaired, repairs);
  return repaired;
}

/* After the repairs every header of the Sun has one of these. */
static gboolean
is_solar (const TfHeader *header)
{
  static const char *const words[] = { "DSUN_OBS", "RSUN_OBS", "CRLN_OBS", "HGLN_OBS" };
  const char *type = tf_header_get (header, "CTYPE1");
  if (type != NULL && (g_str_has_prefix (type, "HPLN") || tf_header_is_map (header)))
    return TRUE;
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    if (tf_header_has (header, words[k]))
      return TRUE;
  return FALSE;
}

/* A refusal that stands already is not replaced. */
static void
refuse (TfFrameInfo *info, TfNote *refusal)
{
  if (info->role == TF_ROLE_REFUSED && info->refusal != NULL)
    tf_note_free (refusal);
  else
    {
      tf_note_free (info->refusal);
      info->refusal = refusal;
    }
  info->role = TF_ROLE_REFUSED;
}

static void
read_maps (const TfHeader *header, TfFrameInfo *info)
{
  double rotation = tf_header_number (header, "CAR_ROT");
  if (!tf_header_is_map (header))
    return;
  info->rotation_number = isnan (rotation) ? floor (tf_header_number (header, "MAPCR")) : rotation;
  if (info->role == TF_ROLE_FIELD && info->field == TF_FIELD_UNKNOWN)
    tf_notes_add (info->cautions, "field-kind-unknown", "");
}

/* A header that describes another picture is a caution, not only a repair. */
static void
move_lies (TfFrameInfo *info)
{
  static const char *const lies[] = { "header-of-another-map", "impossible-cdelt2" };
  for (guint k = 0; k < G_N_ELEMENTS (lies); k++)
    {
      const TfNote *lie = tf_notes_find (info->repairs, lies[k]);
      if (lie != NULL)
        tf_notes_add_copy (info->cautions, lie);
    }
}

TfFrameInfo *
tf_frame_info_read (const TfHeader *header, guint width, guint height)
{
  TfFrameInfo *info = info_new (width, height);
  g_autoptr (TfHeader) repaired = repair (header, width, height, info->repairs);
  const char *simulated = tf_header_get (repaired, "SIMULATD");
  info->simulated = simulated != NULL && strcmp (simulated, "T") == 0;
  info->instrument = tf_info_read_instrument (repaired);
  info->fill_value = tf_header_number (repaired, "TFFILL");
  info->n_planes = (guint)CLAMP (tf_header_int (repaired, "NAXIS3", 1), 1, 1 << 20);
  if (tf_header_int (repaired, "NAXIS", 2) < 3)
    info->n_planes = 1;
  tf_info_read_role (repaired, info);
  tf_info_read_time (repaired, info);
  tf_info_read_observer (repaired, info);
  if (!is_solar (repaired))
    {
      refuse (info, tf_note_new ("not-the-sun", ""));
      g_ptr_array_set_size (info->cautions, 0); /* "taken as a field" would be no longer true */
    }
  else if (!tf_info_read_geometry (repaired, info))
    {
      const char *type = tf_header_get (repaired, "CTYPE1");
      info->geometry.projection = TF_PROJECTION_NONE;
      if (!tf_time_is_known (info->time))
        refuse (info,
                tf_note_new ("no-time-no-place", "s",
                             tf_header_get (header, "DATE-OBS") ? tf_header_get (header, "DATE-OBS")
                                                                : ""));
      else
        refuse (info, tf_note_new ("no-geometry", "s", type != NULL ? type : ""));
    }
  read_maps (repaired, info);
  move_lies (info);
  if (info->n_planes > 1)
    tf_notes_add (info->cautions, "cube", "i", (int)info->n_planes);
  return info;
}
