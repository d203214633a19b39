/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-json.h"

/* where: FITS pixel -> place on the Sun, and back. */

typedef struct
{
  double x, y;
  TfPlace place;
  double field;
} Spot;

static void
spot_from_pixel (Spot *spot, const TfFrame *frame, double x, double y)
{
  spot->x = x;
  spot->y = y;
  tf_geometry_pixel_to_sun (tf_frame_get_geometry (frame), x, y, &spot->place);
  spot->field = tf_frame_value (frame, x, y);
}

static void
spot_from_sun (Spot *spot, const TfFrame *frame, double lon, double lat, gboolean carrington)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  if (!carrington)
    lon += g->observer.carrington_lon_deg - g->observer.stonyhurst_lon_deg;
  double x, y;
  if (tf_geometry_sun_to_pixel (g, tf_wrap_360 (lon), lat, &x, &y, NULL))
    {
      spot_from_pixel (spot, frame, x, y);
      return;
    }
  const TfPlace behind = { tf_geometry_stonyhurst_of (g, lon), tf_wrap_360 (lon), lat, NAN, NAN };
  *spot = (Spot){ NAN, NAN, behind, NAN };
}

static void
build_spot (JsonBuilder *builder, const Spot *s)
{
  json_builder_begin_object (builder);
  tf_json_number (builder, "x", s->x);
  tf_json_number (builder, "y", s->y);
  tf_json_number (builder, "stonyhurst_lon_deg", s->place.stonyhurst_lon_deg);
  tf_json_number (builder, "carrington_lon_deg", s->place.carrington_lon_deg);
  tf_json_number (builder, "lat_deg", s->place.lat_deg);
  tf_json_number (builder, "cmd_deg", s->place.cmd_deg);
  tf_json_number (builder, "mu", s->place.mu);
  tf_json_number (builder, "field_gauss", s->field);
  json_builder_end_object (builder);
}

static void
print_spot (const Spot *s)
{
  if (isnan (s->x))
    printf (_ ("Carrington %.4f° latitude %+.4f°: not on this frame\n"), s->place.carrington_lon_deg, s->place.lat_deg);
  else if (isnan (s->place.lat_deg))
    printf (_ ("pixel %.2f,%.2f: off the disk\n"), s->x, s->y);
  else if (isnan (s->place.mu)) /* a map */
    printf (_ ("pixel %.2f,%.2f: Carrington %.4f° latitude %+.4f° %.1f G\n"), s->x, s->y, s->place.carrington_lon_deg,
            s->place.lat_deg, s->field);
  else
    printf (_ ("pixel %.2f,%.2f: Stonyhurst %+.4f° Carrington %.4f° latitude %+.4f° CMD %+.4f° μ %.4f %.1f G\n"), s->x, s->y,
            s->place.stonyhurst_lon_deg, s->place.carrington_lon_deg, s->place.lat_deg, s->place.cmd_deg, s->place.mu, s->field);
}

int
tf_verb_where (int argc, char **argv)
{
  gboolean json = FALSE, carrington = FALSE;
  g_auto (GStrv) sun = NULL;
  TfFrameWords words;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "sun", 0, 0, G_OPTION_ARG_STRING_ARRAY, &sun, N_ ("a place on the Sun to find; may be given again"), "LON,LAT" },
    { "carrington", 0, 0, G_OPTION_ARG_NONE, &carrington, N_ ("places of --sun are Carrington (default Stonyhurst)"), NULL },
    { NULL },
  };
  /* Negative numbers would be taken for options: "-20,15" is given behind "--". */
  GOptionContext *context = tf_batch_context ("where");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_add_frame_words (context, &words);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc >= 2 && strcmp (argv[1], "--") == 0)
    argv++, argc--;
  if (argc < 2 || (argc < 3 && sun == NULL))
    return tf_batch_usage ("where", _ ("Name one frame and at least one X,Y or --sun LON,LAT."));

  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrame) frame = tf_frame_open (argv[1], &words.spec, work, &error);
  if (frame == NULL)
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  g_autoptr (GArray) spots = g_array_new (FALSE, FALSE, sizeof (Spot));
  for (int k = 2; k < argc + (sun != NULL ? (int)g_strv_length (sun) : 0); k++)
    {
      const char *text = k < argc ? argv[k] : sun[k - argc];
      double pair[2];
      if (k < argc && strcmp (text, "--") == 0)
        continue;
      if (!tf_batch_read_numbers (text, pair, 2))
        {
          g_autofree char *what = g_strdup_printf (_ ("“%s” is not two numbers with a comma."), text);
          return tf_batch_usage ("where", what);
        }
      Spot spot;
      if (k < argc)
        spot_from_pixel (&spot, frame, pair[0], pair[1]);
      else
        spot_from_sun (&spot, frame, pair[0], pair[1], carrington || tf_geometry_is_map (tf_frame_get_geometry (frame)));
      g_array_append_val (spots, spot);
    }
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_array (builder);
  for (guint k = 0; k < spots->len; k++)
    json ? build_spot (builder, &g_array_index (spots, Spot, k)) : print_spot (&g_array_index (spots, Spot, k));
  json_builder_end_array (builder);
  if (json)
    tf_batch_print_json (builder);
  return TF_EXIT_DONE;
}
