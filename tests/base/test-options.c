/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-base.h"

#include <stddef.h>
#include <string.h>

#include "tf-check.h"
#include "tf-json.h"
#include "tf-option.h"

typedef struct
{
  double floor, radius;
  int rounds, kind;
  gboolean even;
} Params;

static const char *const kinds[] = { "plain", "fancy", NULL };

static const TfOption table[] = {
  { "floor", TF_OPTION_NUMBER, "G", NAN, 0.0, 1e5, NULL, "the floor", offsetof (Params, floor) },
  { "radius", TF_OPTION_NUMBER, "deg", 0.1, 0.0, 90.0, NULL, "the radius",
    offsetof (Params, radius) },
  { "rounds", TF_OPTION_INT, "", 500.0, 1.0, 1000.0, NULL, "how often", offsetof (Params, rounds) },
  { "kind", TF_OPTION_CHOICE, "", 1.0, 0.0, 1.0, kinds, "which kind", offsetof (Params, kind) },
  { "even", TF_OPTION_BOOL, "", 0.0, 0.0, 1.0, NULL, "whether", offsetof (Params, even) },
  { NULL },
};

static void
test_defaults (void)
{
  Params p = { 1.0, 1.0, 1, 0, TRUE };
  tf_options_reset (table, &p);
  tf_check_nan ("floor", p.floor);
  tf_check_near ("radius", p.radius, 0.1, 0.0);
  g_assert_cmpint (p.rounds, ==, 500);
  g_assert_cmpint (p.kind, ==, 1);
  g_assert_false (p.even);
}

static void
test_canonical (void)
{
  Params p, q;
  g_autoptr (GError) error = NULL;
  tf_options_reset (table, &p);
  g_autofree char *text = tf_options_dup_canonical (table, &p, "method/1");
  g_assert_cmpstr (text, ==, "method/1 floor= radius=0.1 rounds=500 kind=fancy even=no");
  g_assert_true (tf_options_set (table, &p, "floor", "25.5", &error));
  g_assert_true (tf_options_set (table, &p, "radius", " 9e1 ", &error));
  g_assert_true (tf_options_set (table, &p, "rounds", "7", &error));
  g_assert_true (tf_options_set (table, &p, "kind", "plain", &error));
  g_assert_true (tf_options_set (table, &p, "even", "yes", &error));
  g_assert_no_error (error);
  g_autofree char *set = tf_options_dup_canonical (table, &p, "method/1");
  g_assert_cmpstr (set, ==, "method/1 floor=25.5 radius=90 rounds=7 kind=plain even=yes");
  /* What dup_value writes, set reads. */
  tf_options_reset (table, &q);
  for (const TfOption *o = table; o->name != NULL; o++)
    {
      g_autofree char *value = tf_options_dup_value (o, &p);
      g_assert_true (tf_options_set (table, &q, o->name, value, NULL));
    }
  g_autofree char *same = tf_options_dup_canonical (table, &q, "method/1");
  g_assert_cmpstr (same, ==, set);
  g_assert_true (tf_options_set (table, &p, "floor", "", NULL));
  tf_check_nan ("taken back", p.floor);
}

static void
test_refusals (void)
{
  const char *const rows[][2] = { { "radius", "90.1" }, { "radius", "-1" },
                                  { "radius", "" },     { "radius", "nan" },
                                  { "radius", "1,5" },  { "radius", "5 deg" },
                                  { "floor", "inf" },   { "rounds", "0" },
                                  { "rounds", "1.5" },  { "rounds", "99999999999999999999" },
                                  { "kind", "Fancy" },  { "kind", "0" },
                                  { "even", "1" },      { "even", "true" } };
  Params p;
  tf_options_reset (table, &p);
  g_autofree char *before = tf_options_dup_canonical (table, &p, "m");
  for (guint k = 0; k < G_N_ELEMENTS (rows); k++)
    {
      g_autoptr (GError) error = NULL;
      g_assert_false (tf_options_set (table, &p, rows[k][0], rows[k][1], &error));
      g_assert_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE);
      g_assert_nonnull (strstr (error->message, rows[k][0]));
    }
  g_autoptr (GError) error = NULL;
  g_assert_false (tf_options_set (table, &p, "flour", "1", &error));
  g_assert_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_UNKNOWN);
  g_autofree char *after = tf_options_dup_canonical (table, &p, "m");
  g_assert_cmpstr (before, ==, after);
}

static JsonObject *
parse (const char *text, JsonNode **root)
{
  *root = json_from_string (text, NULL);
  g_assert_nonnull (*root);
  return json_node_get_object (*root);
}

static void
test_json (void)
{
  Params p, q;
  g_autoptr (GError) error = NULL;
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_options_reset (table, &p);
  p.radius = 1.0 / 3.0;
  tf_options_build_json (table, &p, builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  g_assert_cmpstr (text, ==,
                   "{\"floor\":null,\"radius\":0.3333333333333333,\"rounds\":500,\"kind\":"
                   "\"fancy\",\"even\":false}");
  g_autoptr (JsonNode) root = NULL;
  tf_options_reset (table, &q);
  g_assert_true (tf_options_read_json (table, &q, parse (text, &root), &error));
  g_assert_no_error (error);
  g_autofree char *a = tf_options_dup_canonical (table, &p, "m"),
                  *b = tf_options_dup_canonical (table, &q, "m");
  g_assert_cmpstr (a, ==, b);
}

static void
test_bad_json (void)
{
  const char *const texts[]
      = { "{\"radius\":[1]}", "{\"radius\":{}}", "{\"radius\":null}", "{\"radius\":100}",
          "{\"kind\":1}",     "{\"even\":1}",    "{\"rounds\":1.5}",  "{\"other\":1}" };
  for (guint k = 0; k < G_N_ELEMENTS (texts); k++)
    {
      Params p;
      g_autoptr (GError) error = NULL;
      g_autoptr (JsonNode) root = NULL;
      tf_options_reset (table, &p);
      g_assert_false (tf_options_read_json (table, &p, parse (texts[k], &root), &error));
      g_assert_nonnull (error);
    }
}

static gboolean
parse_line (Params *p, const char *const *words, GError **error)
{
  g_autoptr (GOptionContext) context = g_option_context_new (NULL);
  g_auto (GStrv) copy = g_strdupv ((char **)words);
  tf_options_reset (table, p);
  g_option_context_add_group (context, tf_options_new_group (table, p, "test", "the test"));
  return g_option_context_parse_strv (context, &copy, error);
}

static void
test_command_line (void)
{
  Params p;
  g_autoptr (GError) error = NULL;
  const char *const good[]
      = { "program", "--radius", "12.5", "--kind=plain", "--even", "yes", NULL };
  const char *const bad[] = { "program", "--radius", "wide", NULL };
  g_assert_true (parse_line (&p, good, &error));
  g_assert_no_error (error);
  tf_check_near ("radius", p.radius, 12.5, 0.0);
  g_assert_cmpint (p.kind, ==, 0);
  g_assert_true (p.even);
  g_assert_false (parse_line (&p, bad, &error));
  g_assert_error (error, TF_OPTION_ERROR, TF_OPTION_ERROR_VALUE);
}

void
add_options_tests (void)
{
  g_test_add_func ("/base/options/reset-sets-every-default", test_defaults);
  g_test_add_func ("/base/options/canonical-text-goes-both-ways", test_canonical);
  g_test_add_func ("/base/options/a-refused-value-changes-nothing", test_refusals);
  g_test_add_func ("/base/options/json-goes-both-ways", test_json);
  g_test_add_func ("/base/options/bad-json-is-refused", test_bad_json);
  g_test_add_func ("/base/options/the-command-line-sets-them", test_command_line);
}
