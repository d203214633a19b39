/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* TfMeasure to and from its columns. One const table says which member is which column. */

#include "tf-ledger-private.h"

#include <math.h>
#include <glib/gi18n-lib.h>

typedef enum
{
  NUMBER,  /* double; NaN is NULL */
  WHOLE,   /* int */
  COUNT,   /* guint */
  WITNESS, /* int; TF_WITNESS_ABSENT is NULL */
} Type;

typedef struct
{
  const char *name;
  Type type;
  size_t offset;
} Column;

#define AT(member) offsetof (TfMeasure, member)
#define POLE(p)                                                                                    \
  { #p "_flux_mx", NUMBER, AT (p.flux_mx) },                                                       \
      { #p "_flux_sigma_mx", NUMBER, AT (p.flux_sigma_mx) },                                       \
      { #p "_flux_noise_mx", NUMBER, AT (p.flux_noise_mx) },                                       \
      { #p "_lon_deg", NUMBER, AT (p.lon_deg) },                                                   \
      { #p "_carrington_lon_deg", NUMBER, AT (p.carrington_lon_deg) },                             \
      { #p "_lat_deg", NUMBER, AT (p.lat_deg) },                                                   \
      { #p "_place_sigma_deg", NUMBER, AT (p.place_sigma_deg) },                                   \
      { #p "_place_noise_deg", NUMBER, AT (p.place_noise_deg) },                                   \
      { #p "_rms_radius_deg", NUMBER, AT (p.rms_radius_deg) },                                     \
      { #p "_pixels", COUNT, AT (p.pixels) },                                                      \
      { #p "_area_msh", NUMBER, AT (p.magnetic_area_msh) },                                        \
  {                                                                                                \
#p "_pinned", WHOLE, AT(p.pinned)                                                              \
  }

G_STATIC_ASSERT (sizeof (TfFieldUsed) == sizeof (int) && sizeof (TfFloorKind) == sizeof (int));

static const Column columns[] = {
  { "time", NUMBER, AT (time.s) },
  { "field_used", WHOLE, AT (field_used) },
  { "floor_kind", WHOLE, AT (floor_kind) },
  { "floor_gauss", NUMBER, AT (floor_gauss) },
  { "noise_gauss", NUMBER, AT (noise_gauss) },
  { "noise_flux_mx", NUMBER, AT (noise_flux_mx) },
  { "scale", NUMBER, AT (scale) },
  POLE (positive),
  POLE (negative),
  { "leading", WHOLE, AT (leading_polarity) },
  { "leading_sure", WHOLE, AT (leading_sure) },
  { "witness_a", WITNESS, AT (witnesses[0]) },
  { "witness_b", WITNESS, AT (witnesses[1]) },
  { "witness_c", WITNESS, AT (witnesses[2]) },
  { "lat_deg", NUMBER, AT (lat_deg) },
  { "carrington_lon_deg", NUMBER, AT (carrington_lon_deg) },
  { "stonyhurst_lon_deg", NUMBER, AT (stonyhurst_lon_deg) },
  { "cmd_deg", NUMBER, AT (cmd_deg) },
  { "mu", NUMBER, AT (mu) },
  { "axis_bearing_deg", NUMBER, AT (axis_bearing_deg) },
  { "axis_tilt_deg", NUMBER, AT (axis_tilt_deg) },
  { "tilt_noise_deg", NUMBER, AT (tilt_terms.noise) },
  { "tilt_outline_deg", NUMBER, AT (tilt_terms.outline) },
  { "tilt_floor_deg", NUMBER, AT (tilt_terms.floor) },
  { "tilt_sigma_deg", NUMBER, AT (tilt_terms.total) },
  { "separation_deg", NUMBER, AT (separation_deg) },
  { "separation_sigma_deg", NUMBER, AT (separation_sigma_deg) },
  { "separation_noise_deg", NUMBER, AT (separation_noise_deg) },
  { "separation_mm", NUMBER, AT (separation_mm) },
  { "compactness", NUMBER, AT (compactness) },
  { "pieces", COUNT, AT (pieces) },
  { "flux_unsigned_mx", NUMBER, AT (flux_unsigned_mx) },
  { "imbalance", NUMBER, AT (imbalance) },
  { "ephemeral", WHOLE, AT (ephemeral) },
  { "axial_dipole_gauss", NUMBER, AT (axial_dipole_gauss) },
  { "axial_dipole_sigma_gauss", NUMBER, AT (axial_dipole_sigma_gauss) },
  { "axial_dipole_poles_gauss", NUMBER, AT (axial_dipole_poles_gauss) },
};

guint
tf_measure_n_columns (void)
{
  return G_N_ELEMENTS (columns) + 1; /* the notes */
}

char *
tf_measure_dup_columns (const char *alias)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < G_N_ELEMENTS (columns); k++)
    g_string_append_printf (text, "%s%s, ", alias, columns[k].name);
  g_string_append_printf (text, "%snotes", alias);
  return g_string_free (text, FALSE);
}

void
tf_measure_from_row (TfMeasure *measure, sqlite3_stmt *query, int column)
{
  *measure = (TfMeasure){ 0 };
  for (guint k = 0; k < G_N_ELEMENTS (columns); k++)
    {
      gpointer member = (char *)measure + columns[k].offset;
      int at = column + (int)k;
      if (columns[k].type == NUMBER)
        *(double *)member = tf_column_double (query, at);
      else if (columns[k].type == WITNESS && sqlite3_column_type (query, at) == SQLITE_NULL)
        *(int *)member = TF_WITNESS_ABSENT;
      else
        *(int *)member = sqlite3_column_int (query, at);
    }
  measure->cautions
      = tf_notes_from_store (tf_column_text (query, column + (int)G_N_ELEMENTS (columns)), NULL);
}

static int
bind_column (sqlite3_stmt *query, int k, const Column *column, const TfMeasure *measure)
{
  gconstpointer member = (const char *)measure + column->offset;
  if (column->type == NUMBER)
    return sqlite3_bind_double (query, k, *(const double *)member);
  if (column->type == WITNESS && *(const int *)member == TF_WITNESS_ABSENT)
    return sqlite3_bind_null (query, k);
  return sqlite3_bind_int (query, k, *(const int *)member);
}

static char *
insert_sql (void)
{
  g_autofree char *names = tf_measure_dup_columns ("");
  GString *sql = g_string_new (
      "INSERT OR IGNORE INTO measure (cid, frame, method, program, time_text, year, cautions, ");
  g_string_append_printf (sql, "%s) VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7", names);
  for (guint k = 0; k < tf_measure_n_columns (); k++)
    g_string_append_printf (sql, ", ?%u", k + 8);
  g_string_append_c (sql, ')');
  return g_string_free (sql, FALSE);
}

static gboolean
insert (TfLedger *ledger, gint64 frame, gint64 method, const char *cid, const TfMeasure *measure,
        const char *program, GError **error)
{
  g_autofree char *sql = insert_sql ();
  g_autofree char *time = tf_time_dup_iso (measure->time, 0);
  g_autofree char *codes = tf_notes_dup_codes (measure->cautions);
  g_autofree char *notes = tf_notes_dup_store (measure->cautions);
  double year = tf_time_is_known (measure->time) ? tf_time_year (measure->time) : NAN;
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, sql, "hiittdt", cid, frame, method, program, time, year, codes);
  if (query == NULL)
    return FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (columns); k++)
    bind_column (query, (int)k + 8, &columns[k], measure);
  sqlite3_bind_text (query, (int)G_N_ELEMENTS (columns) + 8, notes, -1, SQLITE_TRANSIENT);
  return tf_query_step (ledger, query, error) == 0;
}

gint64
tf_method_key (TfLedger *ledger, const char *text, GError **error)
{
  gint64 key = tf_value (ledger, NULL, 0, "SELECT id FROM method WHERE text = ?1", "t", text);
  if (key != 0)
    return key;
  if (!tf_run (ledger, error, "INSERT INTO method (text) VALUES (?1)", "t", text))
    return 0;
  return sqlite3_last_insert_rowid (ledger->db);
}

char *
tf_measure_dup_cid (const char *frame_cid, const char *method, const char *outline_text)
{
  return tf_content_id ("tiltfield measure 1", frame_cid, method, outline_text, NULL);
}

gint64
tf_measure_put (TfLedger *ledger, gint64 frame, const char *frame_cid, const char *method,
                const char *outline_text, const TfMeasure *measure, const char *program,
                char **cid_out, GError **error)
{
  gint64 method_key = tf_method_key (ledger, method, error);
  g_autofree char *cid = tf_measure_dup_cid (frame_cid, method, outline_text);
  if (method_key == 0)
    return 0;
  gint64 key = tf_value (ledger, NULL, 0, "SELECT id FROM measure WHERE cid = ?1", "h", cid);
  if (key == 0)
    {
      if (!insert (ledger, frame, method_key, cid, measure, program, error))
        return 0;
      key = sqlite3_last_insert_rowid (ledger->db);
      if (!tf_digest_store (ledger, "measure", key, error)
          || (measure->floor_kind == TF_FLOOR_EVEN && !tf_pack_spoil_measures (ledger, frame, error)))
        return 0;
    }
  if (cid_out != NULL)
    *cid_out = g_steal_pointer (&cid);
  return key;
}

static char *
frame_cid (TfLedger *ledger, gint64 frame, GError **error)
{
  char *cid = tf_text_value (ledger, error, "SELECT lower (hex (cid)) FROM frame WHERE id = ?1",
                             "i", frame);
  if (cid == NULL && error != NULL && *error == NULL)
    g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                 _ ("the ledger %s has no frame %" G_GINT64_FORMAT), ledger->path, frame);
  return cid;
}

gboolean
tf_ledger_has_measure (TfLedger *ledger, gint64 frame, const TfOutline *outline, const char *method,
                       TfMeasure *measure)
{
  g_return_val_if_fail (ledger != NULL && outline != NULL && method != NULL, FALSE);
  g_autofree char *frame_id = frame_cid (ledger, frame, NULL);
  g_autofree char *text = tf_outline_dup_text (outline);
  g_autofree char *cid = frame_id != NULL
                             ? tf_measure_dup_cid (frame_id, method, text)
                             : NULL;
  return cid != NULL && tf_measure_find (ledger, cid, measure);
}

gboolean
tf_measure_find (TfLedger *ledger, const char *cid, TfMeasure *measure)
{
  g_autofree char *names = tf_measure_dup_columns ("e.");
  g_autofree char *sql = g_strconcat ("SELECT ", names, " FROM measure e WHERE e.cid = ?1", NULL);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, NULL, sql, "h", cid);
  if (query == NULL || tf_query_step (ledger, query, NULL) <= 0)
    return FALSE;
  if (measure != NULL)
    tf_measure_from_row (measure, query, 0);
  return TRUE;
}

gboolean
tf_ledger_add_measures (TfLedger *ledger, guint n, const gint64 *frames, TfOutline *const *outlines,
                        char *const *methods, const TfMeasure *measures, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  if (n == 0)
    return TRUE;
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  for (guint k = 0; k < n; k++)
    {
      g_autofree char *cid = frame_cid (ledger, frames[k], error);
      g_autofree char *text = tf_outline_dup_text (outlines[k]);
      if (cid == NULL
          || tf_measure_put (ledger, frames[k], cid, methods[k], text, &measures[k], TF_VERSION,
                             NULL, error)
                 == 0)
        {
          tf_ledger_rollback (ledger);
          return FALSE;
        }
    }
  return tf_ledger_commit (ledger, error);
}
