/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Outside tables and their rows: put in, listed, taken out, gathered, read as flat rows. */

#include "tf-ledger-outside.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-ledger-private.h"

enum
{
  OUTSIDE_CLUSTER = 1 << 30 /* as in OUTSIDE_POINTS: apart from regions and from hints */
};

void
tf_outside_table_free (TfOutsideTable *table)
{
  if (table == NULL)
    return;
  char *texts[] = { table->cid,    table->name,    table->checksum, table->format, table->source,
                    table->licence, table->about, table->columns,  table->linking };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    g_free (texts[k]);
  g_free (table);
}

void
tf_outside_entry_clear (TfOutsideEntry *entry)
{
  g_clear_pointer (&entry->region, g_free);
  g_clear_pointer (&entry->passage, g_free);
  g_clear_pointer (&entry->flat, g_free);
}

void
tf_outside_row_free (TfOutsideRow *row)
{
  if (row == NULL)
    return;
  g_clear_pointer (&row->parsed, json_node_unref);
  g_free (row->source);
  g_free (row->licence);
  g_free (row->flat);
  g_free (row);
}

JsonObject *
tf_outside_row_get_flat (TfOutsideRow *row)
{
  if (row->parsed == NULL)
    row->parsed = json_from_string (row->flat, NULL);
  if (row->parsed == NULL || !JSON_NODE_HOLDS_OBJECT (row->parsed))
    {
      g_clear_pointer (&row->parsed, json_node_unref);
      row->parsed = json_from_string ("{}", NULL);
    }
  return json_node_get_object (row->parsed);
}

/* -- putting in -------------------------------------------------------------------------------- */

char *
tf_ledger_outside_cid (const char *checksum, const char *columns, const char *linking)
{
  return tf_content_id ("tiltfield outside 1", checksum, columns, linking, NULL);
}

gint64
tf_ledger_find_outside (TfLedger *ledger, const char *cid_or_name)
{
  g_return_val_if_fail (ledger != NULL && cid_or_name != NULL, 0);
  return tf_value (ledger, NULL, 0,
                   "SELECT id FROM outside WHERE lower (hex (cid)) = ?1 OR name = ?1"
                   " ORDER BY id DESC LIMIT 1",
                   "t", cid_or_name);
}

/* Members of flat that have columns of their own, in the order of NUMBERS and of read_measure. */
static const char *const numbers[] = {
  "leading_lat_deg",    "following_lat_deg",  "lat_deg",          "carrington_lon_deg",
  "stonyhurst_lon_deg", "cmd_deg",            "mu",               "axis_bearing_deg",
  "axis_tilt_deg",      "tilt_sigma_deg",     "separation_deg",   "separation_sigma_deg",
  "compactness",        "flux_unsigned_mx",   "imbalance",        "axial_dipole_gauss",
  "floor_gauss",
};
#define NUMBERS                                                                                    \
  "leading_lat_deg, following_lat_deg, lat_deg, carrington_lon_deg, stonyhurst_lon_deg, cmd_deg, " \
  "mu, axis_bearing_deg, axis_tilt_deg, tilt_sigma_deg, separation_deg, separation_sigma_deg, "    \
  "compactness, flux_unsigned_mx, imbalance, axial_dipole_gauss, floor_gauss"

#define ENTRY_SQL                                                                                  \
  "INSERT INTO outside_row (id, cid, outside, ordinal, place, grp, region, passage, time, year, "  \
  "flat, hinted, leading, leading_sure, " NUMBERS ") VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, " \
  "?10, ?11, ?12, ?13, ?14, ?15, ?16, ?17, ?18, ?19, ?20, ?21, ?22, ?23, ?24, ?25, ?26, ?27, "     \
  "?28, ?29, ?30, ?31)"

static gboolean
insert_entry (TfLedger *ledger, gint64 id, gint64 table, const char *cid, guint ordinal,
              const TfOutsideEntry *entry, JsonObject *flat, GError **error)
{
  double n[G_N_ELEMENTS (numbers)];
  for (guint k = 0; k < G_N_ELEMENTS (numbers); k++)
    n[k] = tf_json_member_number (flat, numbers[k]);
  double leading = tf_json_member_number (flat, "leading_polarity");
  double sure = tf_json_member_number (flat, "leading_sure");
  gboolean hinted = g_strcmp0 (tf_json_member_string (flat, "source_origin"), "hint") == 0;
  return tf_run (ledger, error, ENTRY_SQL, "ihiiiittddtiiiddddddddddddddddd", id, cid, table,
                 (gint64)ordinal, (gint64)entry->place, (gint64)entry->group + 1, entry->region,
                 entry->passage, entry->time.s, tf_time_year (entry->time), entry->flat,
                 (gint64)hinted, (gint64)(leading > 0 ? 1 : leading < 0 ? -1 : 0),
                 (gint64)(isnan (sure) ? -1 : sure > 0), n[0], n[1], n[2], n[3], n[4], n[5], n[6],
                 n[7], n[8], n[9], n[10], n[11], n[12], n[13], n[14], n[15], n[16]);
}

static gboolean
put_entry (TfLedger *ledger, gint64 base, gint64 table, const char *table_cid, guint ordinal,
           const TfOutsideEntry *entry, GError **error)
{
  g_autofree char *place = g_strdup_printf ("%u", entry->place);
  g_autofree char *cid = tf_content_id ("tiltfield outside row 1", table_cid, place, NULL);
  g_autoptr (JsonNode) flat = json_from_string (entry->flat, NULL);
  if (flat == NULL || !JSON_NODE_HOLDS_OBJECT (flat))
    {
      g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_DAMAGED,
                   _ ("row %u of an outside table holds no columns"), entry->place);
      return FALSE;
    }
  return insert_entry (ledger, base + ordinal, table, cid, ordinal, entry,
                       json_node_get_object (flat), error)
         && tf_digest_store (ledger, "outside_row", base + ordinal, error);
}

static gint64
put_table (TfLedger *ledger, const TfOutsideTable *t, const char *cid, const char *program,
           GError **error)
{
  if (!tf_run (ledger, error,
               "INSERT INTO outside (cid, name, checksum, format, source, licence, about, columns,"
               " linking, program, n_rows, n_left)"
               " VALUES (?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8, ?9, ?10, ?11, ?12)",
               "htttttttttii", cid, t->name, t->checksum, t->format, t->source, t->licence,
               t->about, t->columns, t->linking, program, (gint64)t->n_rows, (gint64)t->n_left))
    return 0;
  gint64 id = sqlite3_last_insert_rowid (ledger->db);
  return tf_digest_store (ledger, "outside", id, error) ? id : 0;
}

static gint64
put (TfLedger *ledger, const TfOutsideTable *table, const GArray *entries, const char *program,
     GError **error)
{
  g_autofree char *cid = tf_ledger_outside_cid (table->checksum, table->columns, table->linking);
  gint64 there = tf_value (ledger, NULL, 0, "SELECT id FROM outside WHERE cid = ?1", "h", cid);
  if (there != 0)
    return there;
  gint64 id = put_table (ledger, table, cid, program, error);
  gint64 base = tf_value (ledger, NULL, 0, "SELECT max (id) FROM outside_row", "");
  for (guint k = 0; id != 0 && k < entries->len; k++)
    if (!put_entry (ledger, base, id, cid, k + 1, &g_array_index (entries, TfOutsideEntry, k),
                    error))
      return 0;
  return id != 0 && tf_point_refresh_outside (ledger, id, error) ? id : 0;
}

static gint64
add (TfLedger *ledger, const TfOutsideTable *table, const GArray *entries, const char *program,
     GError **error)
{
  if (!tf_ledger_begin (ledger, error))
    return 0;
  gint64 id = put (ledger, table, entries, program, error);
  if (id == 0)
    {
      tf_ledger_rollback (ledger);
      return 0;
    }
  return tf_ledger_commit (ledger, error) ? id : 0;
}

gint64
tf_ledger_add_outside (TfLedger *ledger, const TfOutsideTable *table, const GArray *entries,
                       GError **error)
{
  g_return_val_if_fail (ledger != NULL && table != NULL && entries != NULL, 0);
  return add (ledger, table, entries, TF_VERSION, error);
}

gboolean
tf_ledger_remove_outside (TfLedger *ledger, gint64 table, GError **error)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  if (!tf_ledger_begin (ledger, error))
    return FALSE;
  if (!tf_pack_spoil_outside (ledger, table, error)
      || !tf_run (ledger, error,
               "DELETE FROM point WHERE hint = 2 AND mark IN (SELECT id FROM outside_row WHERE"
               " outside = ?1)",
               "i", table)
      || !tf_run (ledger, error, "DELETE FROM outside_row WHERE outside = ?1", "i", table)
      || !tf_run (ledger, error, "DELETE FROM outside WHERE id = ?1", "i", table))
    {
      tf_ledger_rollback (ledger);
      return FALSE;
    }
  return tf_ledger_commit (ledger, error);
}

gboolean
tf_ledger_has_mark_id (TfLedger *ledger, const char *id)
{
  g_return_val_if_fail (ledger != NULL && id != NULL, FALSE);
  gsize n = strlen (id);
  if ((n != TF_ID_HEX && n != TF_CID_HEX) || strspn (id, "0123456789abcdefABCDEF") != n)
    return FALSE;
  return tf_value (ledger, NULL, 0,
                   n == TF_ID_HEX ? "SELECT 1 FROM mark WHERE uid = ?1"
                                  : "SELECT 1 FROM hint WHERE cid = ?1",
                   "h", id)
         != 0;
}

/* -- listing and gathering --------------------------------------------------------------------- */

static char *
dup_text (sqlite3_stmt *query, int column)
{
  return g_strdup (tf_column_text (query, column));
}

GPtrArray *
tf_ledger_outside_tables (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GPtrArray) tables
      = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_outside_table_free);
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error,
      "SELECT s.id, lower (hex (s.cid)), s.name, s.checksum, s.format, s.source, s.licence,"
      " s.about, s.columns, s.linking, s.n_rows, s.n_left,"
      " (SELECT count (*) FROM outside_row o WHERE o.outside = s.id) FROM outside s ORDER BY s.id",
      "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfOutsideTable *t = g_new0 (TfOutsideTable, 1);
      char **texts[] = { &t->cid,     &t->name,  &t->checksum, &t->format, &t->source,
                         &t->licence, &t->about, &t->columns,  &t->linking };
      t->id = sqlite3_column_int64 (query, 0);
      for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
        *texts[k] = dup_text (query, (int)k + 1);
      t->n_rows = (guint)sqlite3_column_int (query, 10);
      t->n_left = (guint)sqlite3_column_int (query, 11);
      t->n_taken = (guint)sqlite3_column_int (query, 12);
      g_ptr_array_add (tables, t);
    }
  return more == 0 ? g_steal_pointer (&tables) : NULL;
}

static GArray *
read_entries (TfLedger *ledger, gint64 table, GError **error)
{
  g_autoptr (GArray) entries = g_array_new (FALSE, FALSE, sizeof (TfOutsideEntry));
  g_array_set_clear_func (entries, (GDestroyNotify)tf_outside_entry_clear);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error,
                  "SELECT place, grp, region, passage, time, flat FROM outside_row"
                  " WHERE outside = ?1 ORDER BY ordinal",
                  "i", table);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfOutsideEntry entry = { .place = (guint)sqlite3_column_int (query, 0),
                               .group = (guint)sqlite3_column_int (query, 1) - 1,
                               .region = dup_text (query, 2),
                               .passage = dup_text (query, 3),
                               .time = { tf_column_double (query, 4) },
                               .flat = dup_text (query, 5) };
      g_array_append_val (entries, entry);
    }
  return more == 0 ? g_steal_pointer (&entries) : NULL;
}

gboolean
tf_outside_gather (TfLedger *ledger, TfLedger *part, GError **error)
{
  g_autoptr (GPtrArray) tables = tf_ledger_outside_tables (part, error);
  for (guint k = 0; tables != NULL && k < tables->len; k++)
    {
      const TfOutsideTable *table = g_ptr_array_index (tables, k);
      if (tf_ledger_find_outside (ledger, table->cid) != 0)
        continue;
      g_autofree char *program = tf_text_value (
          part, error, "SELECT program FROM outside WHERE id = ?1", "i", table->id);
      g_autoptr (GArray) entries
          = program != NULL ? read_entries (part, table->id, error) : NULL;
      if (entries == NULL || add (ledger, table, entries, program, error) == 0)
        return FALSE;
    }
  return tables != NULL;
}

/* -- as flat rows ------------------------------------------------------------------------------ */

#define ROWS_SQL                                                                                   \
  "SELECT o.id, o.outside, lower (hex (o.cid)), o.place, 1073741824 + o.id - o.ordinal + o.grp, "  \
  "o.region, o.passage, o.time, o.flat, "                                                          \
  "CASE s.source WHEN '' THEN s.name ELSE s.source END, s.licence FROM outside_row o "             \
  "JOIN outside s ON s.id = o.outside WHERE ?1 = 0 OR o.id = ?1 ORDER BY o.id"

static const TfPole no_pole = { .flux_mx = NAN,
                                .flux_sigma_mx = NAN,
                                .flux_noise_mx = NAN,
                                .lon_deg = NAN,
                                .carrington_lon_deg = NAN,
                                .lat_deg = NAN,
                                .place_sigma_deg = NAN,
                                .place_noise_deg = NAN,
                                .rms_radius_deg = NAN,
                                .magnetic_area_msh = NAN };

static gint8
size_of (const char *text)
{
  if (g_strcmp0 (text, "ephemeral") == 0)
    return 1;
  return g_strcmp0 (text, "region") == 0 ? 0 : -1;
}

static int
sign_of (double value)
{
  return value > 0 ? 1 : value < 0 ? -1 : 0;
}

/* As far as a table goes: poles have places alone, and those only where polarities are told. */
static void
read_measure (TfMeasure *m, const TfOutsideRow *row, JsonObject *flat)
{
  const struct
  {
    const char *name;
    double *to;
  } numbers_of[] = {
    { "lat_deg", &m->lat_deg },
    { "carrington_lon_deg", &m->carrington_lon_deg },
    { "stonyhurst_lon_deg", &m->stonyhurst_lon_deg },
    { "cmd_deg", &m->cmd_deg },
    { "mu", &m->mu },
    { "axis_bearing_deg", &m->axis_bearing_deg },
    { "axis_tilt_deg", &m->axis_tilt_deg },
    { "tilt_sigma_deg", &m->tilt_terms.total },
    { "separation_deg", &m->separation_deg },
    { "separation_sigma_deg", &m->separation_sigma_deg },
    { "compactness", &m->compactness },
    { "flux_unsigned_mx", &m->flux_unsigned_mx },
    { "imbalance", &m->imbalance },
    { "axial_dipole_gauss", &m->axial_dipole_gauss },
    { "axial_dipole_sigma_gauss", &m->axial_dipole_sigma_gauss },
    { "floor_gauss", &m->floor_gauss },
    { "scale", &m->scale },
  };
  *m = (TfMeasure){ .positive = no_pole,
                    .negative = no_pole,
                    .noise_gauss = NAN,
                    .noise_flux_mx = NAN,
                    .witnesses = { TF_WITNESS_ABSENT, TF_WITNESS_ABSENT, TF_WITNESS_ABSENT },
                    .tilt_terms = { NAN, NAN, NAN, NAN },
                    .separation_noise_deg = NAN,
                    .separation_mm = NAN,
                    .axial_dipole_poles_gauss = NAN };
  for (guint k = 0; k < G_N_ELEMENTS (numbers_of); k++)
    *numbers_of[k].to = tf_json_member_number (flat, numbers_of[k].name);
  m->leading_polarity = sign_of (tf_json_member_number (flat, "leading_polarity"));
  m->leading_sure = row->leading_sure == 1;
  m->ephemeral = row->size == 1;
  m->floor_kind = g_strcmp0 (tf_json_member_string (flat, "floor_kind"), "even") == 0
                      ? TF_FLOOR_EVEN
                      : TF_FLOOR_LOCAL;
  TfPole *lead = m->leading_polarity > 0 ? &m->positive : &m->negative;
  TfPole *follow = m->leading_polarity > 0 ? &m->negative : &m->positive;
  if (m->leading_polarity == 0)
    return;
  lead->lat_deg = row->leading_lat_deg;
  follow->lat_deg = row->following_lat_deg;
}

static char *
dup_flat (JsonObject *flat, const char *name)
{
  const char *text = tf_json_member_string (flat, name);
  return g_strdup (text != NULL ? text : "");
}

static TfOutsideRow *
outside_new (char *flat_text)
{
  TfOutsideRow *out = g_new0 (TfOutsideRow, 1);
  out->flat = flat_text;
  JsonObject *flat = tf_outside_row_get_flat (out);
  double sure = tf_json_member_number (flat, "leading_sure");
  out->leading_lat_deg = tf_json_member_number (flat, "leading_lat_deg");
  out->following_lat_deg = tf_json_member_number (flat, "following_lat_deg");
  out->leading_sure = isnan (sure) ? -1 : sure > 0;
  out->hinted = g_strcmp0 (tf_json_member_string (flat, "source_origin"), "hint") == 0;
  out->size = size_of (tf_json_member_string (flat, "size"));
  out->source = dup_flat (flat, "source");
  out->licence = dup_flat (flat, "licence");
  return out;
}

TfRow *
tf_row_new_flat (char *flat_text, TfTime time)
{
  TfRow *row = g_new0 (TfRow, 1);
  row->outside = outside_new (flat_text);
  JsonObject *flat = tf_outside_row_get_flat (row->outside);
  row->origin = "outside";
  row->mark_id = dup_flat (flat, "mark");
  row->region = dup_flat (flat, "region");
  row->passage = dup_flat (flat, "passage");
  row->note = g_strdup ("");
  row->label = dup_flat (flat, "label");
  row->mw_class = dup_flat (flat, "class");
  row->frame_path = dup_flat (flat, "frame");
  row->frame_checksum = dup_flat (flat, "frame_checksum");
  row->method = dup_flat (flat, "method");
  row->program_version = dup_flat (flat, "program_version");
  row->person = dup_flat (flat, "person");
  row->instrument = dup_flat (flat, "instrument");
  row->vantage = dup_flat (flat, "vantage");
  row->time_source = dup_flat (flat, "time_source");
  const char *kind = tf_json_member_string (flat, "kind");
  row->kind = kind != NULL ? tf_kind_name (tf_kind_from_name (kind)) : "";
  row->simulated = tf_json_member_number (flat, "simulated") > 0;
  row->unipolar = tf_json_member_number (flat, "unipolar") > 0;
  read_measure (&row->measure, row->outside, flat);
  row->measure.time = time;
  return row;
}

static void
take_text (char **to, char *text)
{
  g_free (*to);
  *to = text;
}

static TfRow *
read_row (sqlite3_stmt *query)
{
  TfRow *row = tf_row_new_flat (dup_text (query, 8), (TfTime){ tf_column_double (query, 7) });
  TfOutsideRow *out = row->outside;
  row->mark = sqlite3_column_int64 (query, 0);
  out->table = sqlite3_column_int64 (query, 1);
  take_text (&row->mark_id, dup_text (query, 2));
  out->place = (guint)sqlite3_column_int (query, 3);
  out->group = (guint32)sqlite3_column_int64 (query, 4);
  take_text (&row->region, dup_text (query, 5));
  take_text (&row->passage, dup_text (query, 6));
  if (*out->source == '\0')
    take_text (&out->source, dup_text (query, 9));
  if (*out->licence == '\0')
    take_text (&out->licence, dup_text (query, 10));
  return row;
}

/* Rows of one table with one passage text share the first one's key. */
static guint32
number_passage (GHashTable *passages, const TfRow *row)
{
  char *key = g_strdup_printf ("%" G_GINT64_FORMAT "\n%s", row->outside->table, row->passage);
  guint32 first = GPOINTER_TO_UINT (g_hash_table_lookup (passages, key));
  if (first == 0)
    {
      first = OUTSIDE_CLUSTER + (guint32)row->mark;
      g_hash_table_insert (passages, key, GUINT_TO_POINTER (first));
    }
  else
    g_free (key);
  return first;
}

gboolean
tf_outside_read_rows (TfLedger *ledger, gint64 key, GPtrArray *rows, GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, ROWS_SQL, "i", key);
  int more = -1;
  g_autoptr (GHashTable) passages = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL);
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfRow *row = read_row (query);
      row->outside->passage = number_passage (passages, row);
      g_ptr_array_add (rows, row);
    }
  return more == 0;
}
