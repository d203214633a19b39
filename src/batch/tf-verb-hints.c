/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <malloc.h>
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-hint.h"
#include "tf-json.h"

/* hints: suggested outlines of each frame. */

typedef struct
{
  TfFrameWords frame;
  TfHintParams hint;
  TfMeasureParams measure;
  TfStudy *study;
  char *method;
  gboolean complexity; /* asked for: it takes longer than all the rest */
  TfComplexityParams complexity_params;
} Words;

static void
build_hint (JsonBuilder *builder, const char *path, const TfFrame *frame, const TfHint *hint, const Words *words)
{
  g_auto (TfComplexity) complexity = { 0 };
  if (words->complexity)
    tf_complexity_region (&complexity, frame, hint->outline, &words->measure, &words->complexity_params);
  const TfFigures figures = { words->complexity ? &complexity : NULL, &words->complexity_params, NULL, NULL };
  json_builder_begin_object (builder);
  tf_json_string (builder, "kind", hint->unipolar ? "unipolar" : "bipole");
  tf_json_string (builder, "size", hint->measure.ephemeral ? "ephemeral" : "region");
  json_builder_set_member_name (builder, "outline");
  tf_outline_build_json (hint->outline, builder);
  json_builder_set_member_name (builder, "measure");
  tf_batch_build_measure (builder, path, frame, &hint->measure, words->method, words->study, &figures);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (hint->cautions, builder);
  json_builder_end_object (builder);
}

static void
build_units (JsonBuilder *builder)
{
  json_builder_set_member_name (builder, "units");
  json_builder_begin_object (builder);
  for (const TfOption *option = tf_hint_options; option->name != NULL; option++)
    if (*option->unit != '\0')
      tf_json_string (builder, option->name, option->unit);
  json_builder_end_object (builder);
}

static void
build_hints (JsonBuilder *builder, const char *path, const TfFrame *frame, const GPtrArray *hints, const Words *words)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "file", path);
  json_builder_set_member_name (builder, "rule");
  json_builder_begin_object (builder);
  tf_json_string (builder, "name", TF_HINT_RULE);
  json_builder_set_member_name (builder, "parameters");
  tf_options_build_json (tf_hint_options, &words->hint, builder);
  build_units (builder);
  json_builder_end_object (builder);
  json_builder_set_member_name (builder, "hints");
  json_builder_begin_array (builder);
  for (guint k = 0; k < hints->len; k++)
    build_hint (builder, path, frame, g_ptr_array_index (hints, k), words);
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

/* The rule and every number of it, with its unit. */
static void
print_rule (const TfHintParams *params)
{
  printf (_ ("rule %s:"), TF_HINT_RULE);
  for (const TfOption *option = tf_hint_options; option->name != NULL; option++)
    {
      g_autofree char *value = tf_options_dup_value (option, params);
      printf ("%s %s %s%s%s", option == tf_hint_options ? "" : ",", option->name, value, *option->unit != '\0' ? " " : "",
              option->unit);
    }
  printf ("\n");
}

static void
print_complexity (const TfFrame *frame, const TfHint *hint, const Words *words)
{
  g_auto (TfComplexity) complexity = { 0 };
  tf_complexity_region (&complexity, frame, hint->outline, &words->measure, &words->complexity_params);
  g_autofree char *text = tf_complexity_dup_text (&complexity);
  tf_batch_print (text);
}

static void
print_hints (const char *path, const TfFrame *frame, const GPtrArray *hints, const Words *words)
{
  print_rule (&words->hint);
  printf (ngettext ("%s: %u hint\n", "%s: %u hints\n", hints->len), path, hints->len);
  tf_batch_print_frame_cautions (frame);
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      g_autofree char *text = tf_batch_dup_measure_text (&hint->measure, words->study);
      printf ("%u. %s, %s", k + 1, hint->unipolar ? _ ("unipolar") : _ ("bipole"), text);
      if (words->complexity)
        print_complexity (frame, hint, words);
      for (guint j = 0; j < tf_notes_get_n (hint->cautions); j++)
        {
          g_autofree char *caution = tf_note_dup_text (tf_notes_get (hint->cautions, j), FALSE);
          printf (_ ("  caution: %s\n"), caution);
        }
    }
}

static gboolean
hints_one (const char *path, const Words *words, const TfWork *work, JsonBuilder *builder)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrame) frame = tf_frame_open (path, &words->frame.spec, work, &error);
  g_autoptr (GPtrArray) hints = frame != NULL ? tf_hints_find (frame, &words->hint, &words->measure, work, &error) : NULL;
  if (hints == NULL)
    {
      tf_batch_say_error (error);
      return FALSE;
    }
  if (builder != NULL)
    build_hints (builder, path, frame, hints, words);
  else
    print_hints (path, frame, hints, words);
  return TRUE;
}

int
tf_verb_hints (int argc, char **argv)
{
  gboolean json = FALSE;
  Words words = { 0 };
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "complexity", 0, 0, G_OPTION_ARG_NONE, &words.complexity,
      N_ ("inversion lines and complexity of each hint, too (fill always keeps them; here they take longer than all the rest)"), NULL },
    { NULL },
  };
  tf_complexity_params_init (&words.complexity_params);
  tf_hint_params_init (&words.hint);
  tf_measure_params_init (&words.measure);
  GOptionContext *context = tf_batch_context ("hints");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_add_frame_words (context, &words.frame);
  g_option_context_add_group (context, tf_options_new_group (tf_hint_options, &words.hint, "rule", N_ ("the rule")));
  g_option_context_add_group (context, tf_options_new_group (tf_measure_options, &words.measure, "method", N_ ("the method")));
  g_option_context_add_group (context, tf_options_new_group (tf_complexity_options, &words.complexity_params, "complexity",
                                                             N_ ("inversion lines and complexity")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc < 2)
    return tf_batch_usage ("hints", _ ("Name at least one frame."));

  mallopt (M_ARENA_MAX, 1); /* what one region's thread gives back serves the next, on any thread */
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autofree char *method = tf_options_dup_canonical (tf_measure_options, &words.measure, TF_MEASURE_METHOD);
  g_autoptr (JsonBuilder) builder = json ? json_builder_new () : NULL;
  words.study = study;
  words.method = method;
  int failed = 0;
  if (json)
    json_builder_begin_array (builder);
  for (int k = 1; k < argc && !tf_cancel_is_raised (work->cancel); k++)
    failed += !hints_one (argv[k], &words, work, builder);
  if (json)
    {
      json_builder_end_array (builder);
      tf_batch_print_json (builder);
    }
  return failed == 0 ? TF_EXIT_DONE : failed == argc - 1 ? TF_EXIT_NOTHING : TF_EXIT_PART;
}
