/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-json.h"
#include "tf-measure.h"
#include "tf-number.h"

/* measure: one region on one frame, by a circle or by an outline file. */

typedef struct
{
  gboolean json, carrington, anyway;
  char *cap, *outline, *floor, *even_floor, *companion;
  TfFrameWords frame;
  TfMeasureParams params;
  TfComplexityParams complexity_params;
  TfCompanionParams companion_params;
} Words;

static TfOutline *
read_cap (const Words *words, const TfFrame *frame, GError **error)
{
  double cap[3];
  if (!tf_batch_read_numbers (words->cap, cap, 3) || !(cap[2] > 0 && cap[2] <= 45) || fabs (cap[1]) > 90)
    {
      g_set_error (error, G_OPTION_ERROR, G_OPTION_ERROR_BAD_VALUE,
                   _ ("--cap takes LON,LAT,RADIUS in degrees, radius above 0 to 45, not “%s”."), words->cap);
      return NULL;
    }
  const TfGeometry *g = tf_frame_get_geometry (frame);
  gboolean stonyhurst = !words->carrington && !tf_geometry_is_map (g);
  double lon = cap[0] + (stonyhurst ? g->observer.carrington_lon_deg - g->observer.stonyhurst_lon_deg : 0.0);
  return tf_outline_new_cap (tf_frame_get_info (frame)->time, tf_wrap_360 (lon), cap[1], cap[2], 0);
}

static TfOutline *
read_outline (const Words *words, const TfFrame *frame, GError **error)
{
  if (words->cap != NULL)
    return read_cap (words, frame, error);
  g_autofree char *text = NULL;
  if (!g_file_get_contents (words->outline, &text, NULL, error))
    return NULL;
  TfOutline *outline = tf_outline_from_text (text, error);
  if (outline == NULL)
    g_prefix_error (error, "%s: ", words->outline);
  return outline;
}

/* --floor and --even-floor are the short forms of two options of the method. */
static gboolean
read_floors (Words *words, GError **error)
{
  const char *text = words->floor != NULL ? words->floor : words->even_floor;
  if (text == NULL)
    return TRUE;
  if (words->floor != NULL && words->even_floor != NULL)
    {
      g_set_error_literal (error, G_OPTION_ERROR, G_OPTION_ERROR_FAILED, _ ("--floor and --even-floor exclude each other."));
      return FALSE;
    }
  words->params.floor_kind = words->floor != NULL ? TF_FLOOR_LOCAL : TF_FLOOR_EVEN;
  if (tf_number_read (text, &words->params.floor_gauss) && words->params.floor_gauss >= 0)
    return TRUE;
  g_set_error (error, G_OPTION_ERROR, G_OPTION_ERROR_BAD_VALUE, _ ("A floor is a number of gauss, 0 or more, not “%s”."), text);
  return FALSE;
}

/* The companion's spots, where one is named; FALSE with an error when it cannot be read. */
static gboolean
find_spots (const Words *words, const TfFrame *frame, const TfOutline *outline, const TfWork *work, TfSpots *spots, GError **error)
{
  const TfFrameSpec whole = { 0 };
  if (words->companion == NULL)
    return TRUE;
  g_autoptr (TfFrame) intensity = tf_frame_open_companion (words->companion, &whole, work, error);
  if (intensity == NULL)
    return FALSE;
  tf_spots_find (spots, frame, intensity, outline, &words->params, &words->companion_params);
  return TRUE;
}

static void
print_text (const TfMeasure *m, const TfStudy *study, const TfFigures *figures)
{
  g_autofree char *text = tf_batch_dup_measure_text (m, study);
  g_autofree char *complexity = tf_complexity_dup_text (figures->complexity);
  tf_batch_print (text);
  tf_batch_print (complexity);
  if (figures->spots == NULL)
    return;
  g_autofree char *spots = tf_spots_dup_text (figures->spots, figures->companion_params);
  tf_batch_print (spots);
}

static int
measure (Words *words, const char *path)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (TfFrame) frame = tf_frame_open (path, &words->frame.spec, work, &error);
  g_autoptr (TfOutline) outline = frame != NULL ? read_outline (words, frame, &error) : NULL;
  g_auto (TfMeasure) m = { 0 };
  g_auto (TfComplexity) complexity = { 0 };
  g_auto (TfSpots) spots = { 0 };
  if (outline == NULL || !find_spots (words, frame, outline, work, &spots, &error)
      || !tf_measure_region_with (&m, frame, outline, &words->params, &spots, &error))
    {
      tf_batch_say_error (error);
      return g_error_matches (error, G_OPTION_ERROR, G_OPTION_ERROR_BAD_VALUE) ? TF_EXIT_CALL : TF_EXIT_NOTHING;
    }
  tf_complexity_region (&complexity, frame, outline, &words->params, &words->complexity_params);
  const TfFigures figures = { &complexity, &words->complexity_params, words->companion != NULL ? &spots : NULL, &words->companion_params };
  g_autoptr (TfStudy) study = tf_study_new_default ();
  if (words->json)
    {
      g_autofree char *method = tf_options_dup_canonical (tf_measure_options, &words->params, TF_MEASURE_METHOD);
      g_autoptr (JsonBuilder) builder = json_builder_new ();
      tf_batch_build_measure (builder, path, frame, &m, method, study, &figures);
      tf_batch_print_json (builder);
      return TF_EXIT_DONE;
    }
  tf_batch_print_frame_cautions (frame);
  print_text (&m, study, &figures);
  return TF_EXIT_DONE;
}

static void
words_clear (Words *words)
{
  g_free (words->cap);
  g_free (words->outline);
  g_free (words->floor);
  g_free (words->even_floor);
  g_free (words->companion);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Words, words_clear)

int
tf_verb_measure (int argc, char **argv)
{
  g_auto (Words) words = { 0 };
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &words.json, N_ ("print one JSON document"), NULL },
    { "cap", 0, 0, G_OPTION_ARG_STRING, &words.cap, N_ ("a circle about a Stonyhurst place, degrees"), "LON,LAT,RADIUS" },
    { "carrington", 0, 0, G_OPTION_ARG_NONE, &words.carrington, N_ ("--cap is Carrington"), NULL },
    { "outline", 0, 0, G_OPTION_ARG_FILENAME, &words.outline, N_ ("an outline as JSON"), "FILE" },
    { "floor", 0, 0, G_OPTION_ARG_STRING, &words.floor, N_ ("local floor on the field as observed"), "G" },
    { "even-floor", 0, 0, G_OPTION_ARG_STRING, &words.even_floor, N_ ("even floor on the field used"), "G" },
    { "complexity-anyway", 0, 0, G_OPTION_ARG_NONE, &words.anyway, N_ ("give complexity near the limb as well"), NULL },
    { "companion", 0, 0, G_OPTION_ARG_FILENAME, &words.companion, N_ ("an intensity frame of the same time: spots, leading spot"), "FILE" },
    { NULL },
  };
  tf_measure_params_init (&words.params);
  tf_companion_params_init (&words.companion_params);
  tf_complexity_params_init (&words.complexity_params);
  GOptionContext *context = tf_batch_context ("measure");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_add_frame_words (context, &words.frame);
  g_option_context_add_group (context, tf_options_new_group (tf_measure_options, &words.params, "method", N_ ("the method")));
  g_option_context_add_group (context, tf_options_new_group (tf_complexity_options, &words.complexity_params, "complexity",
                                                             N_ ("inversion lines and complexity")));
  g_option_context_add_group (context, tf_options_new_group (tf_companion_options, &words.companion_params, "spots",
                                                             N_ ("a companion intensity frame")));
  g_autoptr (GError) error = NULL;
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2 || (words.cap == NULL) == (words.outline == NULL))
    return tf_batch_usage ("measure", _ ("Name one frame, and either --cap LON,LAT,RADIUS or --outline FILE."));
  words.complexity_params.anyway |= words.anyway;
  if (!read_floors (&words, &error))
    {
      tf_batch_say_error (error);
      return TF_EXIT_CALL;
    }
  return measure (&words, argv[1]);
}
