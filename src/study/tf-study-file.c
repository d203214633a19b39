/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-sieve.h"
#include "tf-study-private.h"

/* study.json, both ways. The sieve's own options are conditions there like any other; read back,
 * those that an option can say become the option again. What a file does not name is as in the
 * default study, except conditions: none named, none made. */

static const char *const members[]
    = { "name",  "version", "mark_conditions", "sampling", "region_conditions", "conventions",
        "methods", "divides", NULL };

/* -- writing ----------------------------------------------------------------------------------- */

static void
put_condition (JsonBuilder *builder, const char *column, TfIs is, double number, const char *text)
{
  g_autoptr (TfCondition) condition = tf_condition_new (column, is, number, text);
  tf_condition_build_json (condition, builder);
}

static void
put_more (JsonBuilder *builder, const GPtrArray *conditions)
{
  for (guint k = 0; conditions != NULL && k < conditions->len; k++)
    tf_condition_build_json (g_ptr_array_index (conditions, k), builder);
}

static void
put_mark_conditions (JsonBuilder *builder, const TfStudy *study)
{
  const TfSieveParams *p = &study->sieve;
  json_builder_set_member_name (builder, "mark_conditions");
  json_builder_begin_array (builder);
  if (!p->with_hints)
    put_condition (builder, "origin", TF_IS_NOT, NAN, "hint");
  if (!p->with_models)
    put_condition (builder, "kind", TF_IS_NOT, NAN, "model map");
  if (p->cmd_max_deg < 90)
    put_condition (builder, "cmd_deg", TF_IS_WITHIN, p->cmd_max_deg, NULL);
  if (p->mu_min > 0)
    put_condition (builder, "mu", TF_IS_AT_LEAST, p->mu_min, NULL);
  put_more (builder, study->mark_conditions);
  json_builder_end_array (builder);
}

static void
put_region_conditions (JsonBuilder *builder, const TfStudy *study)
{
  const TfSieveParams *p = &study->sieve;
  json_builder_set_member_name (builder, "region_conditions");
  json_builder_begin_array (builder);
  if (p->ephemeral != TF_EPHEMERAL_IN)
    put_condition (builder, "size", p->ephemeral == TF_EPHEMERAL_OUT ? TF_IS_NOT : TF_IS_EQUALS, NAN,
                   "ephemeral");
  if (p->flux_min_mx > 0)
    put_condition (builder, "flux_unsigned_mx", TF_IS_AT_LEAST, p->flux_min_mx, NULL);
  if (p->separation_min_deg > 0)
    put_condition (builder, "separation_deg", TF_IS_AT_LEAST, p->separation_min_deg, NULL);
  put_more (builder, study->region_conditions);
  json_builder_end_array (builder);
}

static void
put_options (JsonBuilder *builder, const char *key, const TfOption *table, const void *params)
{
  json_builder_set_member_name (builder, key);
  tf_options_build_json (table, params, builder);
}

static void
put_divide (JsonBuilder *builder, const TfStudy *study, int cycle, int hemisphere)
{
  const double *times, *lats;
  guint n = tf_divides_get_moved (study->divides, cycle, hemisphere, &times, &lats);
  if (n == 0)
    return;
  json_builder_begin_object (builder);
  tf_json_int (builder, "minimum", cycle);
  tf_json_string (builder, "hemisphere", hemisphere > 0 ? "N" : "S");
  json_builder_set_member_name (builder, "points");
  json_builder_begin_array (builder);
  for (guint k = 0; k < n; k++)
    {
      g_autofree char *iso = tf_time_dup_iso ((TfTime){ times[k] }, 3);
      json_builder_begin_array (builder);
      json_builder_add_string_value (builder, iso);
      json_builder_add_double_value (builder, lats[k]);
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
  tf_json_number (builder, "band_deg", study->divide.band_deg);
  json_builder_end_object (builder);
}

static void
put_divides (JsonBuilder *builder, const TfStudy *study)
{
  json_builder_set_member_name (builder, "divides");
  json_builder_begin_array (builder);
  for (const TfCycle *c = tf_cycles; study->divides != NULL && c->number != 0; c++)
    for (int side = 1; side >= -1; side -= 2)
      put_divide (builder, study, c->number, side);
  json_builder_end_array (builder);
}

void
tf_study_build_file (const TfStudy *study, JsonBuilder *builder)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "name", study->name);
  tf_json_int (builder, "version", study->version);
  put_mark_conditions (builder, study);
  put_options (builder, "sampling", tf_sampling_options, &study->sampling);
  put_region_conditions (builder, study);
  json_builder_set_member_name (builder, "conventions");
  json_builder_begin_object (builder);
  put_options (builder, "cycle", tf_divide_options, &study->divide);
  put_options (builder, "verdict", tf_verdict_options, &study->verdict);
  tf_json_number (builder, "even_floor_gauss", study->even_floor_gauss);
  tf_json_bool (builder, "instrument_scales", study->sieve.with_scales);
  tf_json_string (builder, "divides_moved_with_polarity_in_sight", study->divides_shown);
  json_builder_end_object (builder);
  json_builder_set_member_name (builder, "methods");
  json_builder_begin_object (builder);
  put_options (builder, "hale", tf_hale_options, &study->hale);
  put_options (builder, "joy", tf_joy_options, &study->joy);
  put_options (builder, "drift", tf_drift_options, &study->drift);
  put_options (builder, "emergence", tf_emergence_options, &study->emergence);
  json_builder_end_object (builder);
  put_divides (builder, study);
  json_builder_end_object (builder);
}

char *
tf_study_dup_text (const TfStudy *study)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_study_build_file (study, builder);
  return tf_json_dup_text (builder, TRUE);
}

/* -- reading ----------------------------------------------------------------------------------- */

static gboolean
fail (GError **error, const char *name, const char *where, const char *reason)
{
  g_set_error (error, TF_STUDY_ERROR, TF_STUDY_ERROR_READ, "%s: %s: %s", name, where, reason);
  return FALSE;
}

static gboolean
is_text (const TfCondition *c, const char *column, TfIs is, const char *text)
{
  return strcmp (c->column->name, column) == 0 && c->is == is && c->n == 1
         && g_strcmp0 (c->texts[0], text) == 0;
}

static gboolean
is_number (const TfCondition *c, const char *column, TfIs is, double *number)
{
  gboolean same = strcmp (c->column->name, column) == 0 && c->is == is && c->n == 1
                  && c->texts[0] == NULL;
  if (same)
    *number = c->numbers[0];
  return same;
}

/* Whether one of the sieve's options says the same; it is set. */
static gboolean
take_mark_option (TfSieveParams *p, const TfCondition *c)
{
  double limit = c->n > 0 ? c->numbers[0] : NAN;
  if (is_text (c, "origin", TF_IS_NOT, "hint"))
    p->with_hints = FALSE;
  else if (is_text (c, "kind", TF_IS_NOT, "model map"))
    p->with_models = FALSE;
  else if (limit > 0 && limit < 90 && p->cmd_max_deg >= 90
           && is_number (c, "cmd_deg", TF_IS_WITHIN, &p->cmd_max_deg))
    return TRUE;
  else
    return limit > 0 && limit <= 1 && p->mu_min <= 0
           && is_number (c, "mu", TF_IS_AT_LEAST, &p->mu_min);
  return TRUE;
}

static gboolean
take_region_option (TfSieveParams *p, const TfCondition *c)
{
  double limit = c->n > 0 ? c->numbers[0] : NAN;
  if (p->ephemeral == TF_EPHEMERAL_IN && is_text (c, "size", TF_IS_NOT, "ephemeral"))
    p->ephemeral = TF_EPHEMERAL_OUT;
  else if (p->ephemeral == TF_EPHEMERAL_IN && is_text (c, "size", TF_IS_EQUALS, "ephemeral"))
    p->ephemeral = TF_EPHEMERAL_ALONE;
  else if (limit > 0 && p->flux_min_mx <= 0
           && is_number (c, "flux_unsigned_mx", TF_IS_AT_LEAST, &p->flux_min_mx))
    return TRUE;
  else
    return limit > 0 && limit <= 90 && p->separation_min_deg <= 0
           && is_number (c, "separation_deg", TF_IS_AT_LEAST, &p->separation_min_deg);
  return TRUE;
}

static gboolean
read_conditions (TfStudy *study, JsonObject *root, const char *key, gboolean region,
                 const char *name, GError **error)
{
  if (!json_object_has_member (root, key))
    return TRUE;
  JsonArray *array = tf_json_member_array (root, key);
  if (array == NULL)
    return fail (error, name, key, _ ("this is an array of conditions"));
  GPtrArray *more = region ? study->region_conditions : study->mark_conditions;
  for (guint k = 0; k < json_array_get_length (array); k++)
    {
      g_autofree char *where = g_strdup_printf ("%s: %s[%u]", name, key, k);
      g_autoptr (TfCondition) c
          = tf_condition_read (json_array_get_element (array, k), where, error);
      if (c == NULL)
        return FALSE;
      if (!(region ? take_region_option (&study->sieve, c) : take_mark_option (&study->sieve, c)))
        g_ptr_array_add (more, g_steal_pointer (&c));
    }
  return TRUE;
}

/* @key of @object into an option table; absent is as it was. */
static gboolean
read_options (JsonObject *object, const char *key, const TfOption *table, void *params,
              const char *name, GError **error)
{
  g_autoptr (GError) problem = NULL;
  if (object == NULL || !json_object_has_member (object, key))
    return TRUE;
  JsonObject *options = tf_json_member_object (object, key);
  if (options == NULL)
    return fail (error, name, key, _ ("this is an object of options"));
  return tf_options_read_json (table, params, options, &problem)
         || fail (error, name, key, problem->message);
}

static gboolean
read_points (JsonArray *points, GArray *times, GArray *lats)
{
  for (guint k = 0; k < json_array_get_length (points); k++)
    {
      JsonNode *node = json_array_get_element (points, k);
      JsonArray *pair = JSON_NODE_HOLDS_ARRAY (node) ? json_node_get_array (node) : NULL;
      const char *text = pair != NULL && json_array_get_length (pair) == 2
                             ? tf_json_element_string (pair, 0)
                             : NULL;
      TfTime time = text != NULL ? tf_time_read (text) : TF_TIME_UNKNOWN;
      double lat = text != NULL ? tf_json_element_number (pair, 1) : NAN;
      gboolean after = k == 0 || time.s > g_array_index (times, TfTime, k - 1).s;
      if (!tf_time_is_known (time) || !(lat >= 0 && lat <= 90) || !after)
        return FALSE;
      g_array_append_val (times, time);
      g_array_append_val (lats, lat);
    }
  return times->len > 0;
}

static gboolean
read_divide (TfStudy *study, JsonObject *divide, const char *name, const char *where,
             GError **error)
{
  const char *side = divide != NULL ? tf_json_member_string (divide, "hemisphere") : NULL;
  JsonArray *points = divide != NULL ? tf_json_member_array (divide, "points") : NULL;
  gint64 cycle = divide != NULL ? tf_json_member_int (divide, "minimum", 0) : 0;
  g_autoptr (GArray) times = g_array_new (FALSE, FALSE, sizeof (TfTime));
  g_autoptr (GArray) lats = g_array_new (FALSE, FALSE, sizeof (double));
  gboolean sided = g_strcmp0 (side, "N") == 0 || g_strcmp0 (side, "S") == 0;
  if (!sided || points == NULL || cycle < 1 || cycle > 1000 || !read_points (points, times, lats))
    return fail (error, name, where,
                 _ ("a divide is {\"minimum\": the cycle that begins, \"hemisphere\": \"N\" or \"S\", "
                    "\"points\": [[time, latitude]…] in order of time}"));
  g_autoptr (TfDivides) before = tf_study_dup_divides (study);
  g_clear_pointer (&study->divides, tf_divides_unref);
  study->divides = tf_divides_with (before, (int)cycle, *side == 'N' ? 1 : -1,
                                    (const TfTime *)(gconstpointer)times->data,
                                    (const double *)(gconstpointer)lats->data, times->len);
  return TRUE;
}

static gboolean
read_divides (TfStudy *study, JsonObject *root, const char *name, GError **error)
{
  if (!json_object_has_member (root, "divides"))
    return TRUE;
  JsonArray *array = tf_json_member_array (root, "divides");
  if (array == NULL)
    return fail (error, name, "divides", _ ("this is an array"));
  for (guint k = 0; k < MIN (json_array_get_length (array), 400); k++)
    {
      JsonNode *node = json_array_get_element (array, k);
      g_autofree char *where = g_strdup_printf ("divides[%u]", k);
      JsonObject *divide = JSON_NODE_HOLDS_OBJECT (node) ? json_node_get_object (node) : NULL;
      if (!read_divide (study, divide, name, where, error))
        return FALSE;
    }
  return TRUE;
}

static gboolean
read_names (TfStudy *study, JsonObject *root, const char *name, GError **error)
{
  g_autoptr (GList) keys = json_object_get_members (root);
  for (GList *l = keys; l != NULL; l = l->next)
    if (!g_strv_contains (members, l->data))
      {
        g_autofree char *words = g_strjoinv (", ", (char **)members);
        g_autofree char *reason = g_strdup_printf (_ ("a study has %s, and not this"), words);
        return fail (error, name, l->data, reason);
      }
  const char *own = tf_json_member_string (root, "name");
  if (own == NULL || *own == '\0')
    return fail (error, name, "name", _ ("a study needs a name"));
  g_free (study->name);
  study->name = g_strdup (own);
  gint64 version = tf_json_member_int (root, "version", 0);
  study->version = version > 0 && version < G_MAXINT32 ? (guint)version : 0;
  return TRUE;
}

/* Conditions that a file gives stand for all that the sieve's options say; where it gives none the default
 * ones hold, as with methods. */
static void
open_sieve (TfSieveParams *p, JsonObject *root)
{
  if (json_object_has_member (root, "mark_conditions"))
    {
      p->with_hints = p->with_models = TRUE;
      p->cmd_max_deg = 90;
    }
  if (json_object_has_member (root, "region_conditions"))
    p->ephemeral = TF_EPHEMERAL_IN;
}

static gboolean
read_study (TfStudy *study, JsonObject *root, const char *name, GError **error)
{
  JsonObject *conventions = tf_json_member_object (root, "conventions");
  JsonObject *methods = tf_json_member_object (root, "methods");
  open_sieve (&study->sieve, root);
  if (!read_names (study, root, name, error)
      || !read_conditions (study, root, "mark_conditions", FALSE, name, error)
      || !read_conditions (study, root, "region_conditions", TRUE, name, error)
      || !read_options (root, "sampling", tf_sampling_options, &study->sampling, name, error)
      || !read_options (conventions, "cycle", tf_divide_options, &study->divide, name, error)
      || !read_options (conventions, "verdict", tf_verdict_options, &study->verdict, name, error)
      || !read_options (methods, "hale", tf_hale_options, &study->hale, name, error)
      || !read_options (methods, "joy", tf_joy_options, &study->joy, name, error)
      || !read_options (methods, "drift", tf_drift_options, &study->drift, name, error)
      || !read_options (methods, "emergence", tf_emergence_options, &study->emergence, name, error))
    return FALSE;
  if (conventions != NULL)
    {
      study->even_floor_gauss = tf_json_member_number (conventions, "even_floor_gauss");
      study->sieve.with_scales = tf_json_member_bool (conventions, "instrument_scales", FALSE);
      study->divides_shown
          = g_strdup (tf_json_member_string (conventions, "divides_moved_with_polarity_in_sight"));
    }
  return read_divides (study, root, name, error);
}

TfStudy *
tf_study_read_text (const char *text, const char *name, GError **error)
{
  g_return_val_if_fail (text != NULL && name != NULL, NULL);
  g_autoptr (JsonParser) parser = json_parser_new ();
  g_autoptr (GError) problem = NULL;
  if (!json_parser_load_from_data (parser, text, -1, &problem))
    {
      fail (error, name, _ ("no JSON"), problem->message);
      return NULL;
    }
  JsonNode *root = json_parser_get_root (parser);
  if (root == NULL || !JSON_NODE_HOLDS_OBJECT (root))
    {
      fail (error, name, _ ("no study"), _ ("a study is a JSON object"));
      return NULL;
    }
  g_autoptr (TfStudy) study = tf_study_new_default ();
  return read_study (study, json_node_get_object (root), name, error) ? g_steal_pointer (&study)
                                                                      : NULL;
}
