/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-json.h"
#include "tf-number.h"
#include "tf-sun-private.h"

/* What is true of every source at the time of a frame. "poles" are as they were asked for;
 * "drawn" is what is left where a source's own opposite polarities overlap, and is what a
 * perfect measurement of the source alone would find. Angles in degrees to 1e-6, flux in Mx to
 * nine digits, so that the text is the same on every processor. Tilts are planar, with the
 * cosine of the mean latitude; the hemisphere is that of the midpoint.
 */

typedef struct
{
  JsonBuilder *builder;
  const TfGeometry *geometry;
  TfTime time; /* at which the source is drawn: on maps, its own */
} Scene;

static void
put_angle (JsonBuilder *builder, const char *key, double degrees)
{
  tf_json_number (builder, key, rint (degrees * 1e6) / 1e6 + 0.0);
}

static void
put_digits (JsonBuilder *builder, const char *key, double value)
{
  char text[G_ASCII_DTOSTR_BUF_SIZE];
  g_ascii_formatd (text, sizeof text, "%.9g", value);
  tf_json_number (builder, key, g_ascii_strtod (text, NULL) + 0.0);
}

static void
put_time (JsonBuilder *builder, const char *key, TfTime time)
{
  g_autofree char *text = tf_time_dup_iso (time, 3);
  tf_json_string (builder, key, text);
}

/* lat, longitudes, mu and pixel of a point; what has no value is null. */
static void
put_place (const Scene *scene, double carrington_lon_deg, double lat_deg)
{
  const TfGeometry *g = scene->geometry;
  double x = NAN, y = NAN, mu = NAN, stonyhurst = tf_geometry_stonyhurst_of (g, carrington_lon_deg);
  double lon = tf_wrap_360 (carrington_lon_deg);
  gboolean seen = tf_geometry_sun_to_pixel (g, lon, lat_deg, &x, &y, &mu);
  put_angle (scene->builder, "lat_deg", lat_deg);
  put_angle (scene->builder, "carrington_lon_deg", lon);
  put_angle (scene->builder, "stonyhurst_lon_deg", stonyhurst);
  put_angle (scene->builder, "cmd_deg", tf_wrap_180 (lon - tf_geometry_central_carrington (g)));
  put_angle (scene->builder, "mu", seen ? mu : NAN);
  put_angle (scene->builder, "x", x);
  put_angle (scene->builder, "y", y);
  tf_json_bool (scene->builder, "visible", seen);
}

typedef struct
{
  double bearing, tilt, separation;
} Axis;

static Axis
axis_of (double lead_lon, double lead_lat, double follow_lon, double follow_lat)
{
  double mean = 0.5 * (lead_lat + follow_lat), dlat = lead_lat - follow_lat;
  double dlon = tf_wrap_180 (lead_lon - follow_lon) * cos (mean * TF_DEG);
  Axis axis = { .bearing = atan2 (dlat, dlon) / TF_DEG,
                .separation = tf_sphere_distance (lead_lon, lead_lat, follow_lon, follow_lat) };
  axis.tilt = lead_lat * follow_lat < 0.0 ? NAN : (mean < 0.0 ? axis.bearing : -axis.bearing);
  return axis;
}

static void
put_axis (JsonBuilder *builder, const Axis *axis)
{
  put_angle (builder, "axis_bearing_deg", axis->bearing);
  put_angle (builder, "axis_tilt_deg", axis->tilt);
  put_angle (builder, "separation_deg", axis->separation);
}

static void
put_poles (const Scene *scene, const TfSource *source, double growth, double carry)
{
  JsonBuilder *b = scene->builder;
  json_builder_set_member_name (b, "poles");
  json_builder_begin_array (b);
  for (guint k = 0; k < source->n_poles; k++)
    {
      const TfPoleTruth *pole = &source->pole[k];
      json_builder_begin_object (b);
      tf_json_int (b, "polarity", pole->flux_mx > 0.0 ? 1 : -1);
      put_digits (b, "flux_mx", fabs (pole->flux_mx) * growth);
      put_angle (b, "radius_deg", pole->radius_deg);
      put_place (scene, pole->lon_deg + carry, pole->lat_deg);
      json_builder_end_object (b);
    }
  json_builder_end_array (b);
}

static void
put_drawn (const Scene *scene, const TfSource *source, double growth, double carry)
{
  static const char *const names[2] = { "positive", "negative" };
  JsonBuilder *b = scene->builder;
  const TfDrawn *drawn = &source->drawn;
  json_builder_set_member_name (b, "drawn");
  json_builder_begin_object (b);
  for (int sign = 0; sign < 2; sign++)
    {
      if (!(drawn->flux_mx[sign] > 0.0))
        {
          tf_json_null (b, names[sign]);
          continue;
        }
      json_builder_set_member_name (b, names[sign]);
      json_builder_begin_object (b);
      put_digits (b, "flux_mx", drawn->flux_mx[sign] * growth);
      put_place (scene, drawn->lon_deg[sign] + carry, drawn->lat_deg[sign]);
      json_builder_end_object (b);
    }
  if (drawn->flux_mx[0] > 0.0 && drawn->flux_mx[1] > 0.0)
    {
      int west = tf_wrap_180 (drawn->lon_deg[0] - drawn->lon_deg[1]) >= 0.0 ? 0 : 1,
          east = 1 - west;
      Axis axis = axis_of (drawn->lon_deg[west], drawn->lat_deg[west], drawn->lon_deg[east],
                           drawn->lat_deg[east]);
      tf_json_int (b, "leading_polarity", west == 0 ? 1 : -1);
      put_axis (b, &axis);
    }
  json_builder_end_object (b);
}

/* The middle of a source: of a bipole's poles, else the mean of its poles by flux. */
static void
middle_of (const TfSource *source, double *lon_deg, double *lat_deg)
{
  double sum[3] = { 0.0, 0.0, 0.0 };
  if (source->is_bipole)
    {
      *lon_deg = source->bipole.carrington_lon_deg;
      *lat_deg = source->bipole.lat_deg;
      return;
    }
  for (guint k = 0; k < source->n_poles; k++)
    {
      double unit[3];
      tf_sphere_unit (source->pole[k].lon_deg, source->pole[k].lat_deg, unit);
      for (int j = 0; j < 3; j++)
        sum[j] += fabs (source->pole[k].flux_mx) * unit[j];
    }
  tf_sphere_lonlat (sum, lon_deg, lat_deg);
}

static void
put_source (const Scene *scene, const TfSun *sun, const TfSource *source)
{
  JsonBuilder *b = scene->builder;
  double seconds = scene->time.s - tf_sun_get_epoch (sun).s, lon, lat, flux[2];
  double growth = tf_source_growth (source, seconds), carry = tf_source_carry (source, seconds);
  middle_of (source, &lon, &lat);
  json_builder_begin_object (b);
  tf_json_string (b, "name", source->name);
  tf_json_string (b, "what", source->what);
  put_time (b, "time", scene->time);
  put_digits (b, "growth", growth);
  put_place (scene, lon + carry, lat);
  tf_sun_flux (sun, source->name, scene->time, &flux[0], &flux[1]);
  put_digits (b, "flux_positive_mx", flux[0]);
  put_digits (b, "flux_negative_mx", flux[1]);
  if (source->is_bipole)
    {
      const TfPoleTruth *lead = &source->pole[0], *follow = &source->pole[1];
      Axis axis = axis_of (lead->lon_deg, lead->lat_deg, follow->lon_deg, follow->lat_deg);
      tf_json_int (b, "leading_polarity", source->bipole.leading_polarity);
      put_axis (b, &axis);
    }
  put_poles (scene, source, growth, carry);
  put_drawn (scene, source, growth, carry);
  json_builder_end_object (b);
}

/* On a map a source is drawn when the Earth's central meridian passes it. */
static TfTime
passage_time (const TfSun *sun, const TfSource *source, int rotation)
{
  double lon, lat;
  TfTime time = tf_carrington_time (rotation + 0.5);
  middle_of (source, &lon, &lat);
  for (int round = 0; round < 20; round++)
    {
      double carry = tf_source_carry (source, time.s - tf_sun_get_epoch (sun).s);
      time = tf_map_column_time (rotation, tf_wrap_360 (lon + carry));
    }
  return time;
}

static void
put_observer (JsonBuilder *b, const TfGeometry *g)
{
  if (tf_geometry_is_map (g))
    {
      tf_json_null (b, "observer");
      return;
    }
  json_builder_set_member_name (b, "observer");
  json_builder_begin_object (b);
  put_digits (b, "distance_m", g->observer.distance_m);
  put_angle (b, "b0_deg", g->observer.b0_deg);
  put_angle (b, "stonyhurst_lon_deg", g->observer.stonyhurst_lon_deg);
  put_angle (b, "carrington_lon_deg", g->observer.carrington_lon_deg);
  json_builder_end_object (b);
}

static void
put_frame (JsonBuilder *b, const TfShot *shot, const TfGeometry *g, int rotation)
{
  tf_json_string (b, "projection", tf_projection_name (g->projection));
  if (rotation != 0)
    tf_json_int (b, "rotation", rotation);
  tf_json_int (b, "width", g->width);
  tf_json_int (b, "height", g->height);
  put_angle (b, "crpix1", g->crpix[0]);
  put_angle (b, "crpix2", g->crpix[1]);
  put_angle (b, "scale_arcsec", tf_geometry_scale_arcsec (g));
  put_angle (b, "north_angle_deg", tf_geometry_is_map (g) ? NAN : tf_geometry_north_angle (g));
  put_angle (b, "radius_mm", g->radius_mm);
  tf_json_string (b, "instrument", shot->instrument);
  tf_json_bool (b, "intensity", shot->intensity);
  put_digits (b, "noise_gauss", shot->noise_gauss);
  put_digits (b, "psf_arcsec", shot->psf_arcsec);
  put_digits (b, "quantum_gauss", shot->quantum_gauss);
  put_observer (b, g);
}

static void
build (const TfSun *sun, const char *file, TfTime time, int rotation, const TfShot *shot,
       const TfGeometry *geometry, guint64 seed, JsonBuilder *b)
{
  json_builder_begin_object (b);
  tf_json_bool (b, "simulated", TRUE);
  tf_json_string (b, "file", file);
  put_time (b, "time", time);
  put_time (b, "epoch", tf_sun_get_epoch (sun));
  tf_json_int (b, "sun_seed", (gint64)tf_sun_get_seed (sun));
  tf_json_int (b, "noise_seed", (gint64)seed);
  put_frame (b, shot, geometry, rotation);
  json_builder_set_member_name (b, "sources");
  json_builder_begin_array (b);
  for (guint k = 0; k < tf_sun_get_n_sources (sun); k++)
    {
      const TfSource *source = tf_sun_get_source (sun, k);
      Scene scene = { b, geometry, rotation != 0 ? passage_time (sun, source, rotation) : time };
      if (source->name != NULL)
        put_source (&scene, sun, source);
    }
  json_builder_end_array (b);
  json_builder_end_object (b);
}

void
tf_sun_build_truth (const TfSun *sun, TfTime time, const TfShot *shot, JsonBuilder *builder)
{
  TfGeometry geometry;
  if (tf_shot_geometry (shot, time, &geometry, NULL))
    build (sun, NULL, time, 0, shot, &geometry, 0, builder);
  else
    json_builder_add_null_value (builder);
}

static char *
truth_path (const char *path)
{
  gsize n = strlen (path);
  if (g_str_has_suffix (path, ".fits"))
    n -= strlen (".fits");
  return g_strdup_printf ("%.*s.truth.json", (int)n, path);
}

gboolean
tf_truth_write (const TfSun *sun, const char *path, TfTime time, int rotation, const TfShot *shot,
                const TfGeometry *geometry, guint64 seed, GError **error)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_autofree char *file = g_path_get_basename (path), *beside = truth_path (path);
  g_autoptr (GError) reason = NULL;
  build (sun, file, time, rotation, shot, geometry, seed, builder);
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  if (g_file_set_contents (beside, text, -1, &reason))
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_WRITE,
               _ ("the truth cannot be written to %s: %s. See that the folder may be written to "
                  "and has room"),
               beside, reason->message);
  return FALSE;
}
