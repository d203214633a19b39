/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Briefs: made of marks, hints and their measures for a block (tf-ledger-pack.c), and read from the
 * blocks again with the floor that is asked for. */

#include "tf-ledger-brief.h"

#include <math.h>
#include <string.h>

#include "tf-ledger-private.h"
#include "tf-many.h"

static const struct
{
  const char *column;
  size_t offset;
} numbers[] = {
#define NUMBER(column, member) { column, offsetof (TfBrief, member) }
  NUMBER ("floor_gauss", floor_gauss),
  NUMBER ("time", time_s),
  NUMBER ("lat_deg", lat_deg),
  NUMBER ("positive_lat_deg", positive_lat_deg),
  NUMBER ("negative_lat_deg", negative_lat_deg),
  NUMBER ("cmd_deg", cmd_deg),
  NUMBER ("mu", mu),
  NUMBER ("axis_tilt_deg", axis_tilt_deg),
  NUMBER ("axis_bearing_deg", axis_bearing_deg),
  NUMBER ("tilt_sigma_deg", tilt_sigma_deg),
  NUMBER ("separation_deg", separation_deg),
  NUMBER ("separation_sigma_deg", separation_sigma_deg),
  NUMBER ("flux_unsigned_mx", flux_unsigned_mx),
  NUMBER ("imbalance", imbalance),
  NUMBER ("compactness", compactness),
  NUMBER ("axial_dipole_gauss", axial_dipole_gauss),
  NUMBER ("axial_dipole_sigma_gauss", axial_dipole_sigma_gauss),
#undef NUMBER
};

/* The measure's columns begin after these. */
#define WHOLES                                                                                     \
  "e.floor_kind, e.leading, e.leading_sure, e.ephemeral, e.witness_a, e.witness_b, e.witness_c"
#define MARKS_SQL                                                                                  \
  " FROM mark m JOIN measure e ON e.id = m.measure JOIN method t ON t.id = e.method "              \
  "JOIN frame f ON f.id = m.frame WHERE m.live = 1 AND m.id >= ?1 AND m.id < ?2 ORDER BY m.id"
#define HINTS_SQL                                                                                  \
  " FROM point q JOIN hint h ON h.id = q.mark JOIN measure e ON e.id = h.measure "                 \
  "JOIN method t ON t.id = e.method JOIN frame f ON f.id = h.frame "                               \
  "WHERE q.hint = 1 AND q.mark >= ?1 AND q.mark < ?2 ORDER BY q.mark"

enum
{
  AT_OUTLINE = 6,
  AT_METHOD,
  AT_FRAME,
  AT_MEASURE
};

static char *
dup_measured (void)
{
  GString *text = g_string_new (WHOLES);
  for (guint k = 0; k < G_N_ELEMENTS (numbers); k++)
    g_string_append_printf (text, ", e.%s", numbers[k].column);
  return g_string_free (text, FALSE);
}

static gint8
read_witness (sqlite3_stmt *query, int column)
{
  return sqlite3_column_type (query, column) == SQLITE_NULL ? G_MININT8
                                                            : (gint8)sqlite3_column_int (query, column);
}

static void
read_measured (TfBrief *brief, sqlite3_stmt *query, int at)
{
  brief->even = sqlite3_column_int (query, at) == TF_FLOOR_EVEN;
  brief->leading = (gint8)sqlite3_column_int (query, at + 1);
  brief->leading_sure = (gint8)sqlite3_column_int (query, at + 2);
  brief->ephemeral = (gint8)sqlite3_column_int (query, at + 3);
  for (int k = 0; k < 3; k++)
    brief->witnesses[k] = read_witness (query, at + 4 + k);
  for (guint k = 0; k < G_N_ELEMENTS (numbers); k++)
    G_STRUCT_MEMBER (double, brief, numbers[k].offset) = tf_column_double (query, at + 7 + (int)k);
}

/* -- other floors ---------------------------------------------------------------------------- */

/* The methods of the ledger that are @own but for an even floor, @own itself left out. */
static GPtrArray *
list_even_methods (TfLedger *ledger, const char *own)
{
  GPtrArray *found = g_ptr_array_new_with_free_func (g_free);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, NULL, "SELECT text FROM method ORDER BY id", "");
  while (query != NULL && tf_query_step (ledger, query, NULL) > 0)
    {
      TfMeasureParams params, other;
      TfCorrection correction;
      const char *text = tf_column_text (query, 0);
      if (strcmp (text, own) == 0 || !tf_measure_read_method (text, &params, &correction)
          || params.floor_kind != TF_FLOOR_EVEN)
        continue;
      g_autofree char *even = tf_measure_dup_even_method (own, params.floor_gauss, &other);
      if (g_strcmp0 (even, text) == 0)
        g_ptr_array_add (found, g_steal_pointer (&even));
    }
  return found;
}

static const GPtrArray *
find_even_methods (TfLedger *ledger, GHashTable *known, const char *own)
{
  GPtrArray *methods = g_hash_table_lookup (known, own);
  if (methods == NULL)
    {
      methods = list_even_methods (ledger, own);
      g_hash_table_insert (known, g_strdup (own), methods);
    }
  return methods;
}

static gboolean
append_even (TfLedger *ledger, const TfBrief *own, const char *cid, const char *sql, GArray *items,
             GError **error)
{
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "h", cid);
  int more = query != NULL ? tf_query_step (ledger, query, error) : -1;
  if (more <= 0)
    return more == 0;
  TfBrief brief = *own;
  brief.own = 0;
  read_measured (&brief, query, 0);
  g_array_append_val (items, brief);
  return TRUE;
}

/* -- a block --------------------------------------------------------------------------------- */

/* What a block needs beside its rows. */
typedef struct
{
  GHashTable *methods; /* own method -> GPtrArray of texts */
  char *even_sql;
} Maker;

static gboolean
append_mark (TfLedger *ledger, const Maker *maker, sqlite3_stmt *query, gboolean hint, GArray *items,
             GError **error)
{
  TfBrief brief;
  memset (&brief, 0, sizeof brief); /* byte by byte the same for the same row */
  brief.hint = (gint8)hint;
  brief.own = 1;
  brief.mark = sqlite3_column_int64 (query, 0);
  brief.frame = sqlite3_column_int64 (query, 1);
  brief.region = (guint32)sqlite3_column_int64 (query, 2);
  brief.origin = (gint8)sqlite3_column_int (query, 3);
  brief.unipolar = (gint8)sqlite3_column_int (query, 4);
  brief.from_hint = sqlite3_column_int64 (query, 5);
  read_measured (&brief, query, AT_MEASURE);
  g_array_append_val (items, brief);
  const GPtrArray *methods
      = find_even_methods (ledger, maker->methods, tf_column_text (query, AT_METHOD));
  for (guint k = 0; k < methods->len; k++)
    {
      g_autofree char *cid
          = tf_measure_dup_cid (tf_column_text (query, AT_FRAME), g_ptr_array_index (methods, k),
                                tf_column_text (query, AT_OUTLINE));
      if (!append_even (ledger, &brief, cid, maker->even_sql, items, error))
        return FALSE;
    }
  return TRUE;
}

gboolean
tf_brief_append (TfLedger *ledger, int kind, gint64 first, gint64 end, GArray *items, GError **error)
{
  if (kind > 1)
    return TRUE;
  g_autofree char *measured = dup_measured ();
  g_autofree char *sql = g_strconcat (
      kind == 0 ? "SELECT m.id, m.frame, m.region, m.origin, e.leading = 0, coalesce (m.hint, 0), m.outline, "
                : "SELECT h.id, h.frame, 0, -1, h.unipolar, 0, h.outline, ",
      "t.text, lower (hex (f.cid)), ", measured, kind == 0 ? MARKS_SQL : HINTS_SQL, NULL);
  g_autofree char *even_sql = g_strconcat ("SELECT ", measured, " FROM measure e WHERE e.cid = ?1", NULL);
  g_autoptr (GHashTable) methods
      = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, (GDestroyNotify)g_ptr_array_unref);
  const Maker maker = { methods, even_sql };
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "ii", first, end);
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    if (!append_mark (ledger, &maker, query, kind == 1, items, error))
      return FALSE;
  return more == 0;
}

/* -- reading --------------------------------------------------------------------------------- */

gboolean
tf_ledger_has_briefs (TfLedger *ledger)
{
  return tf_pack_is_there (ledger, TF_PACK_BRIEF);
}

/* As a study tells it: within half a per cent. */
static gboolean
has_floor (const TfBrief *brief, double gauss)
{
  return brief->even && fabs (brief->floor_gauss - gauss) <= 0.005 * gauss;
}

/* Of the items of one mark the one that is asked for: of that even floor to the last digits. */
static const TfBrief *
choose (const TfBrief *items, guint n, double gauss)
{
  for (guint k = 1; gauss > 0.0 && k < n; k++)
    if (fabs (items[k].floor_gauss - gauss) <= 1e-9 * gauss)
      return &items[k];
  return &items[0];
}

typedef struct
{
  const TfBriefQuery *query;
  TfBriefs *out;
} Reading;

static void
take_mark (const Reading *reading, const TfBrief *items, guint n)
{
  const TfBrief *chosen = choose (items, n, reading->query->floor_gauss);
  reading->out->n_hints += chosen->hint;
  if (chosen->hint && !reading->query->hints)
    return;
  reading->out->n_even += !chosen->own;
  for (int k = 0; k < 2; k++)
    if (reading->query->asked_gauss[k] > 0.0)
      reading->out->n_lacking[k] += !has_floor (choose (items, n, reading->query->asked_gauss[k]),
                                                reading->query->asked_gauss[k]);
  g_array_append_vals (reading->out->rows, chosen, 1);
}

static void
take_block (gconstpointer data, guint n, gpointer user)
{
  const TfBrief *items = data;
  for (guint first = 0, next = 0; first < n; first = next)
    {
      for (next = first + 1; next < n && !items[next].own;)
        next++;
      take_mark (user, items + first, next - first);
    }
}

/* -- passages -------------------------------------------------------------------------------- */

typedef struct
{
  gint64 passage, same;
  int born;
} Passage;

/* A passage of each mark and hint by their keys; 0: none. */
typedef struct
{
  GArray *of[2]; /* guint32: a place among the passages, from 1 */
  GArray *passages;
} Members;

static void
members_clear (Members *members)
{
  g_clear_pointer (&members->of[0], g_array_unref);
  g_clear_pointer (&members->of[1], g_array_unref);
  g_clear_pointer (&members->passages, g_array_unref);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Members, members_clear)

static GHashTable *
read_passages (TfLedger *ledger, GArray *passages, GError **error)
{
  g_autoptr (GHashTable) places = g_hash_table_new (NULL, NULL);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, "SELECT id, same, born FROM passage", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      const Passage passage = { sqlite3_column_int64 (query, 0), sqlite3_column_int64 (query, 1),
                                sqlite3_column_int (query, 2) };
      g_array_append_val (passages, passage);
      g_hash_table_insert (places, GSIZE_TO_POINTER (passage.passage), GUINT_TO_POINTER (passages->len));
    }
  return more == 0 ? g_steal_pointer (&places) : NULL;
}

static gboolean
read_members (TfLedger *ledger, Members *members, GError **error)
{
  for (int hint = 0; hint < 2; hint++)
    members->of[hint] = g_array_new (FALSE, TRUE, sizeof (guint32));
  members->passages = g_array_new (FALSE, FALSE, sizeof (Passage));
  g_autoptr (GHashTable) places = read_passages (ledger, members->passages, error);
  g_autoptr (sqlite3_stmt) query
      = places != NULL ? tf_query (ledger, error, "SELECT hint, mark, passage FROM member", "") : NULL;
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      GArray *of = members->of[sqlite3_column_int (query, 0) == 1];
      guint mark = (guint)sqlite3_column_int64 (query, 1);
      gpointer place = g_hash_table_lookup (places, GSIZE_TO_POINTER (sqlite3_column_int64 (query, 2)));
      if (mark >= of->len)
        g_array_set_size (of, MAX (mark + 1, 2 * of->len));
      g_array_index (of, guint32, mark) = GPOINTER_TO_UINT (place);
    }
  return more == 0;
}

static guint32
place_of (const GArray *of, gint64 key)
{
  return key < (gint64)of->len ? g_array_index (of, guint32, key) : 0;
}

/* A mark that follow has not seen stands in the passage of its hint. */
static gboolean
join_passages (TfLedger *ledger, GArray *rows, GError **error)
{
  g_auto (Members) members = { 0 };
  if (!read_members (ledger, &members, error))
    return FALSE;
  for (guint k = 0; members.passages->len > 0 && k < rows->len; k++)
    {
      TfBrief *brief = &g_array_index (rows, TfBrief, k);
      guint32 place = place_of (members.of[brief->hint], brief->mark);
      if (place == 0 && !brief->hint && brief->from_hint != 0)
        place = place_of (members.of[1], brief->from_hint);
      if (place == 0)
        continue;
      const Passage *passage = &g_array_index (members.passages, Passage, place - 1);
      brief->passage = passage->passage;
      brief->same = passage->same;
      brief->born = (gint8)passage->born;
    }
  return TRUE;
}

/* A mark that follow has not seen is of one region with the others of its number. */
static void
complete_same (GArray *rows)
{
  g_autoptr (GHashTable) by_region = g_hash_table_new (NULL, NULL);
  gboolean missing = FALSE, there = FALSE;
  for (guint k = 0; k < rows->len; k++)
    {
      const TfBrief *brief = &g_array_index (rows, TfBrief, k);
      missing = missing || (brief->same == 0 && brief->region != 0);
      there = there || brief->same != 0;
    }
  for (guint k = 0; missing && there && k < rows->len; k++)
    {
      const TfBrief *brief = &g_array_index (rows, TfBrief, k);
      if (brief->same != 0 && brief->region != 0)
        g_hash_table_insert (by_region, GUINT_TO_POINTER (brief->region), GSIZE_TO_POINTER (brief->same));
    }
  for (guint k = 0; missing && there && k < rows->len; k++)
    {
      TfBrief *brief = &g_array_index (rows, TfBrief, k);
      if (brief->same == 0 && brief->region != 0)
        brief->same = (gint64)GPOINTER_TO_SIZE (
            g_hash_table_lookup (by_region, GUINT_TO_POINTER (brief->region)));
    }
}

TfBriefs *
tf_ledger_briefs (TfLedger *ledger, const TfBriefQuery *query, GError **error)
{
  g_return_val_if_fail (ledger != NULL && query != NULL, NULL);
  g_autoptr (TfBriefs) out = g_new0 (TfBriefs, 1);
  gint64 n = tf_value (ledger, NULL, 0, "SELECT count (*) FROM brief", "") * TF_BRIEF_BLOCK;
  out->rows = tf_array_of_many (sizeof (TfBrief), (guint)CLAMP (n, 1, 1 << 22));
  const Reading reading = { query, out };
  if (!tf_pack_each (ledger, TF_PACK_BRIEF, take_block, (gpointer)&reading, error)
      || !join_passages (ledger, out->rows, error))
    return NULL;
  complete_same (out->rows);
  return g_steal_pointer (&out);
}

void
tf_briefs_free (TfBriefs *briefs)
{
  if (briefs != NULL)
    g_array_unref (briefs->rows);
  g_free (briefs);
}

/* -- frames ---------------------------------------------------------------------------------- */

GArray *
tf_ledger_brief_frames (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GArray) frames = g_array_new (FALSE, TRUE, sizeof (TfBriefFrame));
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, error, "SELECT id, instrument, kind = 'model map', simulated FROM frame ORDER BY id", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      const TfBriefFrame frame = { sqlite3_column_int64 (query, 0),
                                   g_intern_string (tf_column_text (query, 1)),
                                   (gint8)sqlite3_column_int (query, 2),
                                   (gint8)(sqlite3_column_int (query, 3) != 0) };
      g_array_append_val (frames, frame);
    }
  return more == 0 ? g_steal_pointer (&frames) : NULL;
}

TfFrameNoise
tf_frame_noise (const TfFrameRow *row)
{
  const TfFrameInfo *info = row->info;
  return (TfFrameNoise){ .instrument = g_intern_string (info->instrument),
                         .noise_gauss = row->noise_gauss,
                         .model_map = info->kind == TF_KIND_MODEL_MAP,
                         .known_unit = *info->unit != '\0',
                         .as_is = info->field == TF_FIELD_RADIAL || tf_geometry_is_map (&info->geometry) };
}

GArray *
tf_ledger_noises (TfLedger *ledger, GError **error)
{
  g_return_val_if_fail (ledger != NULL, NULL);
  g_autoptr (GArray) noises = g_array_new (FALSE, TRUE, sizeof (TfFrameNoise));
  g_autofree char *sql = g_strdup_printf (
      "SELECT instrument, noise_gauss, kind, json_extract (info, '$.unit'), "
      "json_extract (info, '$.field') = %d OR json_extract (info, '$.geometry.projection') >= %d "
      "FROM frame WHERE noise_gauss IS NOT NULL ORDER BY id",
      (int)TF_FIELD_RADIAL, (int)TF_PROJECTION_CEA);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, sql, "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfKind kind = tf_kind_from_name (tf_column_text (query, 2));
      const TfFrameNoise noise
          = { .instrument = g_intern_string (tf_column_text (query, 0)),
              .noise_gauss = tf_column_double (query, 1),
              .model_map = kind == TF_KIND_MODEL_MAP,
              .known_unit = *tf_column_text (query, 3) != '\0',
              .as_is = sqlite3_column_int (query, 4) == 1 };
      g_array_append_val (noises, noise);
    }
  return more == 0 ? g_steal_pointer (&noises) : NULL;
}

gboolean
tf_ledger_even_measure (TfLedger *ledger, gint64 mark, gboolean is_hint, const char *method,
                        TfMeasure *measure)
{
  g_return_val_if_fail (ledger != NULL && method != NULL && measure != NULL, FALSE);
  g_autoptr (sqlite3_stmt) query = tf_query (
      ledger, NULL,
      is_hint ? "SELECT lower (hex (f.cid)), h.outline FROM hint h JOIN frame f ON f.id = h.frame WHERE h.id = ?1"
              : "SELECT lower (hex (f.cid)), m.outline FROM mark m JOIN frame f ON f.id = m.frame WHERE m.id = ?1",
      "i", mark);
  if (query == NULL || tf_query_step (ledger, query, NULL) <= 0)
    return FALSE;
  g_autofree char *cid = tf_measure_dup_cid (tf_column_text (query, 0), method, tf_column_text (query, 1));
  return tf_measure_find (ledger, cid, measure);
}
