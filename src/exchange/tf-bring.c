/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-bring.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-bring-private.h"
#include "tf-export.h"
#include "tf-json.h"
#include "tf-mount-wilson.h"

void
tf_brought_free (TfBrought *brought)
{
  if (brought == NULL)
    return;
  tf_outside_table_free (brought->table);
  g_array_unref (brought->entries);
  g_array_unref (brought->faults);
  g_ptr_array_unref (brought->taken);
  g_ptr_array_unref (brought->not_taken);
  g_ptr_array_unref (brought->said);
  g_free (brought);
}

static TfBrought *
brought_new (void)
{
  TfBrought *b = g_new0 (TfBrought, 1);
  b->entries = g_array_new (FALSE, TRUE, sizeof (TfOutsideEntry));
  g_array_set_clear_func (b->entries, (GDestroyNotify)tf_outside_entry_clear);
  b->faults = tf_faults_new ();
  b->taken = g_ptr_array_new_with_free_func (g_free);
  b->not_taken = g_ptr_array_new_with_free_func (g_free);
  b->said = g_ptr_array_new_with_free_func (g_free);
  return b;
}

/* -- columns ----------------------------------------------------------------------------------- */

static char *
list_names (const TfCells *table)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < MIN (table->columns->len, 40); k++)
    g_string_append_printf (text, "%s%s", k > 0 ? ", " : "",
                            g_array_index (table->columns, TfCellsColumn, k).name);
  if (table->columns->len > 40)
    g_string_append (text, ", …");
  return g_string_free (text, FALSE);
}

/* A rule's column must be there; its unit must be one that can be turned into ours. */
static gboolean
use_rule (TfBrought *b, const TfCells *table, const TfColumnRule *rule, gboolean mapped,
          GArray *columns, const char *name, GError **error)
{
  int at = tf_cells_find (table, rule->column);
  if (at < 0)
    {
      g_autofree char *names = list_names (table);
      g_autofree char *reason
          = g_strdup_printf (_ ("the map's line %u names a column “%s” that is not there; there are %s"),
                             rule->line, rule->column, names);
      tf_export_fail_read (error, name, reason);
      return FALSE;
    }
  const char *given = g_array_index (table->columns, TfCellsColumn, at).unit;
  TfBroughtColumn column = { .rule = rule, .at = (guint)at };
  if (!tf_brought_column_init (&column, given))
    {
      g_autofree char *text = g_strdup_printf (
          _ ("%s: its unit “%s” is not one of %s; say in a map what it is"), rule->column,
          rule->unit != NULL ? rule->unit : given, rule->name);
      if (!mapped)
        {
          g_ptr_array_add (b->not_taken, g_steal_pointer (&text));
          return TRUE;
        }
      tf_export_fail_read (error, name, text);
      return FALSE;
    }
  const char *unit = rule->unit != NULL ? rule->unit : given;
  g_ptr_array_add (b->taken, *unit != '\0'
                                 ? g_strdup_printf ("%s = %s (%s)", rule->name, rule->column, unit)
                                 : g_strdup_printf ("%s = %s", rule->name, rule->column));
  g_array_append_val (columns, column);
  return TRUE;
}

static gboolean
is_used (const GArray *columns, guint at)
{
  for (guint k = 0; k < columns->len; k++)
    if (g_array_index (columns, TfBroughtColumn, k).at == at)
      return TRUE;
  return FALSE;
}

static gboolean
is_listed (const GPtrArray *texts, const char *name)
{
  g_autofree char *start = g_strconcat (name, ": ", NULL);
  for (guint k = 0; k < texts->len; k++)
    if (g_str_has_prefix (g_ptr_array_index (texts, k), start))
      return TRUE;
  return FALSE;
}

/* Whether a word of our column begins as theirs does, or theirs as it does. */
static gboolean
is_like (const char *ours, const char *theirs)
{
  g_auto (GStrv) words = g_strsplit (ours, "_", -1);
  for (guint k = 0; words[k] != NULL; k++)
    if (strlen (words[k]) > 2 && strcmp (words[k], "deg") != 0
        && (g_str_has_prefix (theirs, words[k]) || g_str_has_prefix (words[k], theirs)))
      return TRUE;
  return FALSE;
}

/* Those of our columns that this might be meant for: "lat_deg, leading_lat_deg"; NULL. */
static char *
dup_likes (const char *name)
{
  enum { MOST = 4 };
  g_autofree char *theirs = g_ascii_strdown (name, -1);
  g_autoptr (GPtrArray) likes = g_ptr_array_new ();
  for (const TfColumn *c = tf_columns; strlen (theirs) > 2 && c->name != NULL; c++)
    if ((tf_column_is_brought (c->name) || strcmp (c->name, "polarity_tilt_deg") == 0) && likes->len < MOST
        && is_like (c->name, theirs))
      g_ptr_array_add (likes, (gpointer)c->name);
  if (likes->len == 0)
    return NULL;
  g_ptr_array_add (likes, NULL);
  return g_strjoinv (", ", (char **)likes->pdata);
}

/* Why a column is not taken. */
static char *
dup_rest (const char *name)
{
  g_autofree char *likes = dup_likes (name);
  if (strcmp (name, "polarity_tilt_deg") != 0 && tf_column_is_brought (name))
    return g_strdup_printf (_ ("%s: the map does not take it"), name);
  if (strcmp (name, "polarity_tilt_deg") == 0 || tf_column_find (name) != NULL)
    return g_strdup_printf (_ ("%s: judged here anew"), name);
  if (likes != NULL)
    return g_strdup_printf (_ ("%s: not known; if one of these is meant, say so in a map: %s"), name,
                            likes);
  return g_strdup_printf (_ ("%s: not known"), name);
}

static void
list_the_rest (TfBrought *b, const TfCells *table, const GArray *columns)
{
  for (guint k = 0; k < table->columns->len; k++)
    {
      const char *name = g_array_index (table->columns, TfCellsColumn, k).name;
      if (!is_used (columns, k) && !is_listed (b->not_taken, name))
        g_ptr_array_add (b->not_taken, dup_rest (name));
    }
  for (guint k = 0; k < table->not_read->len; k++)
    g_ptr_array_add (b->not_taken, g_strdup (g_ptr_array_index (table->not_read, k)));
}

static gboolean
has_target (const GArray *columns, const char *name)
{
  for (guint k = 0; k < columns->len; k++)
    if (strcmp (g_array_index (columns, TfBroughtColumn, k).rule->name, name) == 0)
      return TRUE;
  return FALSE;
}

static gboolean
need_time_and_place (const TfCells *table, const GArray *columns, const char *name, GError **error)
{
  guint times = has_target (columns, "time") + has_target (columns, "time_jd")
                + has_target (columns, "time_year");
  if (times == 1 && has_target (columns, "lat_deg"))
    return TRUE;
  g_autofree char *names = list_names (table);
  g_autofree char *reason = g_strdup_printf (
      times > 1 ? _ ("more than one of time, time_jd and time_year is given; leave one in a map. "
                     "The table's columns are %s")
                : _ ("one of time, time_jd and time_year, and lat_deg, are needed. The table's "
                     "columns are %s; write a map (--columns FILE) with lines like “lat_deg = "
                     "THEIR COLUMN ; unit deg”"),
      names);
  tf_export_fail_read (error, name, reason);
  return FALSE;
}

/* -- rows -------------------------------------------------------------------------------------- */

/* The source's own origin and mark go aside; a row that was outside already keeps where it came
 * from. */
static void
set_origin_aside (JsonObject *flat)
{
  const char *origin = tf_json_member_string (flat, "origin");
  const char *mark = tf_json_member_string (flat, "mark");
  if (g_strcmp0 (origin, "outside") != 0)
    {
      if (origin != NULL)
        json_object_set_string_member (flat, "source_origin", origin);
      if (mark != NULL)
        json_object_set_string_member (flat, "source_mark", mark);
    }
  else if (mark != NULL && !json_object_has_member (flat, "source_mark"))
    json_object_set_string_member (flat, "source_mark", mark);
  json_object_remove_member (flat, "origin");
  json_object_remove_member (flat, "mark");
}

/* FITS holds ASCII alone: a class stands there by the names of its letters. */
static void
spell_class (JsonObject *flat)
{
  const char *text = tf_json_member_string (flat, "class");
  g_autofree char *greek = text != NULL ? tf_mount_wilson_dup_greek (text) : NULL;
  if (greek != NULL)
    json_object_set_string_member (flat, "class", greek);
}

static void
take_row (TfBrought *b, const TfCells *table, guint k, const GArray *columns, TfLedger *ledger)
{
  g_autoptr (JsonObject) flat = json_object_new ();
  char **cells = g_ptr_array_index (table->rows, k);
  guint place = g_array_index (table->places, guint, k);
  TfOutsideEntry entry = { .place = place, .time = TF_TIME_UNKNOWN };
  for (guint c = 0; c < columns->len; c++)
    {
      const TfBroughtColumn *column = &g_array_index (columns, TfBroughtColumn, c);
      const char *cell = cells[column->at];
      g_autofree char *wrong = tf_brought_column_take (column, cell, flat, &entry.time);
      if (wrong == NULL)
        continue;
      tf_fault_add (b->faults, place, column->rule->column, cell != NULL ? cell : "", wrong);
      return;
    }
  const char *mark = tf_json_member_string (flat, "mark");
  if (ledger != NULL && mark != NULL && tf_ledger_has_mark_id (ledger, mark))
    {
      b->n_own++;
      return;
    }
  tf_brought_fold_tilt (flat);
  if (strcmp (table->format, "fits") == 0)
    spell_class (flat);
  set_origin_aside (flat);
  const char *region = tf_json_member_string (flat, "region");
  const char *passage = tf_json_member_string (flat, "passage");
  entry.region = g_strdup (region != NULL ? region : "");
  entry.passage = g_strdup (passage != NULL ? passage : "");
  json_object_remove_member (flat, "region");
  json_object_remove_member (flat, "passage");
  g_autoptr (JsonNode) node = json_node_init_object (json_node_alloc (), flat);
  entry.flat = tf_json_node_dup_text (node, FALSE);
  g_array_append_val (b->entries, entry);
}

static int
compare_entries (gconstpointer a, gconstpointer b)
{
  const TfOutsideEntry *p = a, *q = b;
  if (p->time.s < q->time.s || p->time.s > q->time.s)
    return p->time.s < q->time.s ? -1 : 1;
  return (p->place > q->place) - (p->place < q->place);
}

/* -- regions ----------------------------------------------------------------------------------- */

/* By name; a row without one (and a hint, which has none) stands alone. */
static void
group_by_name (TfBrought *b, const char *tag)
{
  g_autoptr (GHashTable) first = g_hash_table_new (g_str_hash, g_str_equal);
  for (guint k = 0; k < b->entries->len; k++)
    {
      TfOutsideEntry *e = &g_array_index (b->entries, TfOutsideEntry, k);
      gpointer known = NULL;
      if (*e->region == '\0')
        {
          g_free (e->region);
          e->region = g_strdup_printf ("%s-%u", tag, e->place);
        }
      e->group = g_hash_table_lookup_extended (first, e->region, NULL, &known)
                     ? GPOINTER_TO_UINT (known)
                     : k;
      if (known == NULL && e->group == k)
        g_hash_table_insert (first, e->region, GUINT_TO_POINTER (k));
      if (*e->passage == '\0')
        {
          g_free (e->passage);
          e->passage = g_strdup (e->region);
        }
      b->n_regions += e->group == k;
    }
}

static double
flat_number (const TfOutsideEntry *e, const char *name)
{
  g_autoptr (JsonNode) node = json_from_string (e->flat, NULL);
  return tf_json_member_number (json_node_get_object (node), name);
}

/* Groups by place, or every row alone; names are made of the table's tag and the first row's
 * place. */
static void
group_by_place (TfBrought *b, gboolean alone, const char *longitude, const char *tag)
{
  guint n = b->entries->len;
  g_autofree guint *groups = g_new (guint, n + 1);
  g_autofree TfTime *times = g_new (TfTime, n + 1);
  g_autofree double *lats = g_new (double, n + 1), *lons = g_new (double, n + 1);
  for (guint k = 0; k < n; k++)
    {
      const TfOutsideEntry *e = &g_array_index (b->entries, TfOutsideEntry, k);
      groups[k] = k;
      times[k] = e->time;
      lats[k] = alone ? 0 : flat_number (e, "lat_deg");
      lons[k] = alone ? 0 : flat_number (e, longitude);
    }
  if (!alone)
    tf_bring_link (n, times, lats, lons, strcmp (longitude, "carrington_lon_deg") == 0, groups);
  for (guint k = 0; k < n; k++)
    {
      TfOutsideEntry *e = &g_array_index (b->entries, TfOutsideEntry, k);
      const TfOutsideEntry *first = &g_array_index (b->entries, TfOutsideEntry, groups[k]);
      e->group = groups[k];
      g_free (e->region);
      g_free (e->passage);
      e->region = g_strdup_printf ("%s-%u", tag, first->place);
      e->passage = g_strdup_printf ("%s-%u/%u", tag, first->place, e->place);
      b->n_regions += groups[k] == k;
    }
}

/* Returns what `linking` says. */
static const char *
group (TfBrought *b, const GArray *columns, const TfColumnMap *map, gboolean rows_alone,
       const char *tag)
{
  static const char *const longitudes[]
      = { "carrington_lon_deg", "stonyhurst_lon_deg", "cmd_deg", NULL };
  const char *longitude = NULL;
  g_array_sort (b->entries, compare_entries);
  if (!rows_alone && !map->no_region && has_target (columns, "region"))
    {
      group_by_name (b, tag);
      g_ptr_array_add (b->said, g_strdup_printf (
          ngettext ("%u region by the names of the table.", "%u regions by the names of the table.",
                    b->n_regions), b->n_regions));
      return "column";
    }
  for (guint k = 0; longitude == NULL && longitudes[k] != NULL; k++)
    if (has_target (columns, longitudes[k]))
      longitude = longitudes[k];
  gboolean alone = rows_alone || longitude == NULL;
  group_by_place (b, alone, longitude, tag);
  g_ptr_array_add (
      b->said,
      alone ? g_strdup_printf (rows_alone ? _ ("Every row is taken as a region of its own, as asked (%u).")
                                          : _ ("No names of regions and no longitude are taken: every "
                                               "row is taken as a region of its own (%u). Intervals "
                                               "are then too narrow where rows repeat a region."),
                               b->n_regions)
            : g_strdup_printf (
                  ngettext ("No names of regions are taken: %u rows were linked from day to day on their place (%s) "
                            "into %u group. Each row is a pick; intervals cluster by groups. --rows-alone takes "
                            "every row as its own.",
                            "No names of regions are taken: %u rows were linked from day to day on their place (%s) "
                            "into %u groups. Each row is a pick; intervals cluster by groups. --rows-alone takes "
                            "every row as its own.",
                            b->n_regions),
                  b->entries->len, longitude, b->n_regions));
  return alone ? "alone" : "place";
}

/* -- the whole --------------------------------------------------------------------------------- */

static TfOutsideTable *
describe (const TfCells *table, const TfColumnMap *map, const TfBringParams *params,
          const char *name, const char *checksum)
{
  TfOutsideTable *t = g_new0 (TfOutsideTable, 1);
  t->name = g_path_get_basename (name);
  t->checksum = g_strdup (checksum);
  t->format = g_strdup (table->format);
  t->source = g_strdup (params->source != NULL ? params->source : "");
  t->licence = g_strdup (params->licence != NULL ? params->licence : "");
  t->about = g_strdup (table->about->str);
  t->columns = tf_column_map_dup_text (map);
  t->n_rows = table->rows->len + table->faults->len;
  return t;
}

static gboolean
use_rules (TfBrought *b, const TfCells *table, const TfColumnMap *map, gboolean mapped,
           GArray *columns, const char *name, GError **error)
{
  for (guint k = 0; k < map->rules->len; k++)
    if (!use_rule (b, table, &g_array_index (map->rules, TfColumnRule, k), mapped, columns, name,
                   error))
      return FALSE;
  list_the_rest (b, table, columns);
  return need_time_and_place (table, columns, name, error);
}

static void
take_rows (TfBrought *b, const TfCells *table, const GArray *columns, TfLedger *ledger)
{
  for (guint k = 0; k < table->faults->len; k++)
    {
      const TfFault *f = &g_array_index (table->faults, TfFault, k);
      tf_fault_add (b->faults, f->place, f->column, f->value, f->reason);
    }
  for (guint k = 0; k < table->rows->len; k++)
    take_row (b, table, k, columns, ledger);
}

static gboolean
is_empty (const TfBrought *b, const char *name, GError **error)
{
  if (b->entries->len > 0)
    return FALSE;
  const TfFault *f = b->faults->len > 0 ? &g_array_index (b->faults, TfFault, 0) : NULL;
  g_autofree char *reason
      = b->n_own > 0 ? g_strdup (_ ("its rows are marks of this ledger itself; there is nothing to bring"))
        : f != NULL  ? g_strdup_printf (_ ("no row could be taken; the first, %u: %s “%s”: %s"),
                                        f->place, f->column, f->value, f->reason)
                     : g_strdup (_ ("the table has no rows"));
  tf_export_fail_read (error, name, reason);
  return TRUE;
}

TfBrought *
tf_bring (const TfCells *table, const TfColumnMap *map, const TfBringParams *params,
          const char *name, const char *checksum, GError **error)
{
  g_return_val_if_fail (table != NULL && params != NULL && name != NULL && checksum != NULL, NULL);
  g_autoptr (TfColumnMap) own = map == NULL ? tf_column_map_own (table) : NULL;
  const TfColumnMap *used = map != NULL ? map : own;
  g_autoptr (TfBrought) b = brought_new ();
  g_autoptr (GArray) columns = g_array_new (FALSE, TRUE, sizeof (TfBroughtColumn));
  if (!use_rules (b, table, used, map != NULL, columns, name, error))
    return NULL;
  take_rows (b, table, columns, params->ledger);
  if (is_empty (b, name, error))
    return NULL;
  b->table = describe (table, used, params, name, checksum);
  b->table->n_left = b->faults->len + b->n_own;
  g_autofree char *tag = g_strndup (checksum, 8);
  b->table->linking = g_strdup (group (b, columns, used, params->rows_alone, tag));
  if (has_target (columns, "polarity_tilt_deg"))
    g_ptr_array_add (b->said, g_strdup (_ ("Tilts of ±180° were folded to the axis tilt (±90°); which "
                                           "pole leads was not taken from them.")));
  if (b->n_own > 0)
    g_ptr_array_add (b->said, g_strdup_printf (
        ngettext ("%u row is a mark or hint of this ledger itself and was left out.",
                  "%u rows are marks or hints of this ledger itself and were left out.", b->n_own), b->n_own));
  return g_steal_pointer (&b);
}

TfBrought *
tf_bring_file (const char *path, const char *map_path, const TfBringParams *params, GError **error)
{
  g_return_val_if_fail (path != NULL && params != NULL, NULL);
  g_autoptr (TfColumnMap) map = NULL;
  if (map_path != NULL)
    {
      g_autoptr (GError) problem = NULL;
      g_autofree char *text = NULL;
      if (!g_file_get_contents (map_path, &text, NULL, &problem))
        {
          tf_export_fail_read (error, map_path, problem->message);
          return NULL;
        }
      map = tf_column_map_read (text, map_path, error);
      if (map == NULL)
        return NULL;
    }
  g_autoptr (TfCells) table = tf_cells_read (path, error);
  g_autoptr (GMappedFile) file = table != NULL ? g_mapped_file_new (path, FALSE, error) : NULL;
  if (file == NULL)
    return NULL;
  g_autofree char *checksum
      = g_compute_checksum_for_data (G_CHECKSUM_SHA256, (const guchar *)g_mapped_file_get_contents (file),
                                     g_mapped_file_get_length (file));
  return tf_bring (table, map, params, path, checksum, error);
}
