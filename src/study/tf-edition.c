/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-study-compare.h"

/* The text of an edition: {program, study, laws, picks}, a pick as an array in the order of
 * pick_members. */

enum
{
  MARK,
  REGION,
  VERDICT,
  CYCLE,
  LAT,
  TILT,
  SEPARATION,
  FLUX,
  FLOOR,
  PICK_MEMBERS
};

static const char *const pick_members[PICK_MEMBERS]
    = { "mark", "region", "hale", "cycle", "lat_deg", "axis_tilt_deg", "separation_deg",
        "flux_unsigned_mx", "floor_gauss" };

enum
{
  MOST_NAMED = 200
};

static void
put_number (JsonBuilder *builder, double value, double step)
{
  if (isnan (value))
    json_builder_add_null_value (builder);
  else
    json_builder_add_double_value (builder, step > 0 ? round (value / step) * step : value);
}

static void
put_pick (JsonBuilder *builder, const TfSampleRow *s, const TfVerdict *v, const TfRow *row)
{
  json_builder_begin_array (builder);
  json_builder_add_string_value (builder, row->mark_id);
  json_builder_add_string_value (builder, row->region);
  json_builder_add_string_value (builder, tf_verdict_name (v->kind));
  json_builder_add_int_value (builder, v->cycle.number);
  put_number (builder, s->lat_deg, 0);
  put_number (builder, s->axis_tilt_deg, 0);
  put_number (builder, s->separation_deg, 0);
  put_number (builder, s->flux_mx, 0);
  put_number (builder, row->measure.floor_gauss, 0);
  json_builder_end_array (builder);
}

static void
put_picks (JsonBuilder *builder, const TfFindings *findings, const GArray *rows)
{
  json_builder_set_member_name (builder, "picks");
  json_builder_begin_array (builder);
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      const TfSampleRow *s = tf_sample_get (findings->sample, k);
      if (s->row < rows->len)
        put_pick (builder, s, &findings->verdicts[k], g_array_index (rows, TfExportRow, s->row).row);
    }
  json_builder_end_array (builder);
}

char *
tf_edition_dup_text (const TfStudy *study, const TfFindings *findings, const GArray *rows)
{
  g_return_val_if_fail (study != NULL && findings != NULL && rows != NULL, NULL);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_string (builder, "program", TF_VERSION);
  json_builder_set_member_name (builder, "study");
  tf_study_build_file (study, builder);
  json_builder_set_member_name (builder, "laws");
  tf_findings_build_json (findings, study, builder);
  put_picks (builder, findings, rows);
  json_builder_end_object (builder);
  return tf_json_dup_text (builder, FALSE);
}

/* -- comparing --------------------------------------------------------------------------------- */

typedef struct
{
  JsonObject *root;
  GHashTable *picks; /* mark -> JsonArray, borrowed */
} Edition;

static const char *
pick_text (JsonArray *pick, guint k)
{
  const char *text = tf_json_element_string (pick, k);
  return text != NULL ? text : "";
}

static gboolean
read_edition (JsonNode *node, Edition *edition, GError **error)
{
  JsonArray *picks = NULL;
  edition->root = node != NULL && JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
  if (edition->root != NULL)
    picks = tf_json_member_array (edition->root, "picks");
  if (picks == NULL || tf_json_member_object (edition->root, "study") == NULL
      || tf_json_member_object (edition->root, "laws") == NULL)
    {
      g_set_error_literal (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ, _ ("that is no edition of a study"));
      return FALSE;
    }
  edition->picks = g_hash_table_new (g_str_hash, g_str_equal);
  for (guint k = 0; k < json_array_get_length (picks); k++)
    {
      JsonNode *pick = json_array_get_element (picks, k);
      if (JSON_NODE_HOLDS_ARRAY (pick)
          && json_array_get_length (json_node_get_array (pick)) == PICK_MEMBERS)
        g_hash_table_insert (edition->picks, (gpointer)pick_text (json_node_get_array (pick), MARK),
                             json_node_get_array (pick));
    }
  return TRUE;
}

static void
add_named (GPtrArray *sentences, guint *n, char *sentence)
{
  if ((*n)++ < MOST_NAMED)
    g_ptr_array_add (sentences, sentence);
  else
    g_free (sentence);
}

/* Picks of @one that @other has not. */
static void
list_missing (JsonArray *one, GHashTable *other, gboolean gone,
              GPtrArray *sentences)
{
  guint n = 0;
  for (guint k = 0; k < json_array_get_length (one); k++)
    {
      JsonNode *node = json_array_get_element (one, k);
      JsonArray *pick = JSON_NODE_HOLDS_ARRAY (node) ? json_node_get_array (node) : NULL;
      if (pick == NULL || g_hash_table_contains (other, pick_text (pick, MARK)))
        continue;
      add_named (sentences, &n,
                 g_strdup_printf (gone ? _ ("Gone: region %s, mark %s.") : _ ("New: region %s, mark %s."),
                                  pick_text (pick, REGION), pick_text (pick, MARK)));
    }
  if (n > MOST_NAMED)
    g_ptr_array_add (sentences, g_strdup_printf (gone ? _ ("%u picks are gone in all.") : _ ("%u picks are new in all."), n));
}

static char *
describe_change (JsonArray *before, JsonArray *now)
{
  g_autoptr (GString) text = g_string_new (NULL);
  for (guint k = REGION; k < PICK_MEMBERS; k++)
    {
      JsonNode *a = json_array_get_element (before, k), *b = json_array_get_element (now, k);
      if (json_node_equal (a, b))
        continue;
      g_autofree char *was = tf_json_node_dup_text (a, FALSE), *is = tf_json_node_dup_text (b, FALSE);
      g_string_append_printf (text, _ ("%s%s was %s, is %s"), text->len > 0 ? "; " : "", pick_members[k], was, is);
    }
  return text->len > 0 ? g_strdup (text->str) : NULL;
}

static void
list_changed (JsonArray *now, GHashTable *before, GPtrArray *sentences)
{
  guint n = 0;
  for (guint k = 0; k < json_array_get_length (now); k++)
    {
      JsonNode *node = json_array_get_element (now, k);
      JsonArray *pick = JSON_NODE_HOLDS_ARRAY (node) ? json_node_get_array (node) : NULL;
      JsonArray *old = pick != NULL ? g_hash_table_lookup (before, pick_text (pick, MARK)) : NULL;
      g_autofree char *change = old != NULL && json_array_get_length (pick) == PICK_MEMBERS
                                    ? describe_change (old, pick)
                                    : NULL;
      if (change != NULL)
        add_named (sentences, &n,
                   g_strdup_printf (_ ("Changed: region %s, mark %s: %s."), pick_text (pick, REGION),
                                    pick_text (pick, MARK), change));
    }
  if (n > MOST_NAMED)
    g_ptr_array_add (sentences, g_strdup_printf (_ ("%u picks have changed in all."), n));
}

static void
list_documents (Edition *before, Edition *now, const char *member, const char *form,
                GPtrArray *sentences)
{
  g_autoptr (GPtrArray) differences = tf_json_differences (json_object_get_member (before->root, member),
                                                           json_object_get_member (now->root, member));
  for (guint k = 0; k < differences->len; k++)
    g_ptr_array_add (sentences, g_strconcat (form, g_ptr_array_index (differences, k), NULL));
}

static void
compare (Edition *before, Edition *now, GPtrArray *sentences)
{
  const char *was = tf_json_member_string (before->root, "program");
  const char *is = tf_json_member_string (now->root, "program");
  if (g_strcmp0 (was, is) != 0)
    g_ptr_array_add (sentences, g_strdup_printf (_ ("The edition was made by program version %s, this is %s."), was, is));
  json_object_remove_member (tf_json_member_object (before->root, "study"), "version");
  json_object_remove_member (tf_json_member_object (now->root, "study"), "version");
  list_documents (before, now, "study", _ ("Choice: "), sentences);
  list_missing (tf_json_member_array (before->root, "picks"), now->picks, TRUE, sentences);
  list_missing (tf_json_member_array (now->root, "picks"), before->picks, FALSE, sentences);
  list_changed (tf_json_member_array (now->root, "picks"), before->picks, sentences);
  JsonObject *old_laws = tf_json_member_object (before->root, "laws");
  JsonObject *new_laws = tf_json_member_object (now->root, "laws");
  json_object_remove_member (old_laws, "study"); /* stands among the choices */
  json_object_remove_member (new_laws, "study");
  list_documents (before, now, "laws", _ ("Number: "), sentences);
}

GPtrArray *
tf_edition_differences (const char *text, const char *now_text, GError **error)
{
  g_return_val_if_fail (text != NULL && now_text != NULL, NULL);
  g_autoptr (JsonNode) one = json_from_string (text, NULL), other = json_from_string (now_text, NULL);
  Edition before = { 0 }, now = { 0 };
  GPtrArray *sentences = NULL;
  if (read_edition (one, &before, error) && read_edition (other, &now, error))
    {
      sentences = g_ptr_array_new_with_free_func (g_free);
      compare (&before, &now, sentences);
    }
  g_clear_pointer (&before.picks, g_hash_table_unref);
  g_clear_pointer (&now.picks, g_hash_table_unref);
  return sentences;
}
