/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-constants.h"
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

/* Habits of Carrington maps. They end as CRLN-CEA/CRLT-CEA or CRLN-CAR/CRLT-CAR with both axes
 * in degrees as Paper II has them: for CEA, CDELT2 = (180/pi) d(sin latitude). */

static const char *
type_of (const TfHeader *header, const char *word)
{
  const char *type = tf_header_get (header, word);
  return type != NULL ? type : "";
}

static gboolean
begins (const char *text, const char *start)
{
  return g_ascii_strncasecmp (text, start, strlen (start)) == 0;
}

gboolean
tf_header_is_map (const TfHeader *header)
{
  const char *type = type_of (header, "CTYPE1");
  return begins (type, "CRLN") || begins (type, "HGLN") || begins (type, "Carrington")
         || begins (type, "Long");
}

static gboolean
equal_area (const TfHeader *header)
{
  return begins (type_of (header, "CTYPE1"), "CRLN-CEA");
}

/* "Carrington Time" / "Sine Latitude", "Long" / "Lat". */
gboolean
tf_dialect_map_names (TfHeader *header, TfNotes *repairs)
{
  const char *lon = type_of (header, "CTYPE1"), *lat = type_of (header, "CTYPE2");
  gboolean sine = begins (lat, "Sine") || begins (lat, "sin");
  if (!begins (lon, "Carrington") && !begins (lon, "Long"))
    return FALSE;
  tf_notes_add (repairs, "map-names", "ss", lon, lat);
  if (sine && !tf_header_has (header, "CUNIT2"))
    tf_header_set (header, "CUNIT2", "Sine Latitude");
  tf_header_set (header, "CTYPE1", sine ? "CRLN-CEA" : "CRLN-CAR");
  tf_header_set (header, "CTYPE2", sine ? "CRLT-CEA" : "CRLT-CAR");
  if (!tf_header_has (header, "CUNIT1"))
    tf_header_set (header, "CUNIT1", "deg");
  if (!tf_header_has (header, "CUNIT2"))
    tf_header_set (header, "CUNIT2", "deg");
  return TRUE;
}

/* CRVAL1 = 360 * rotation - longitude, growing with time, so that longitude runs the other way. */
gboolean
tf_dialect_carrington_time (TfHeader *header, TfNotes *repairs)
{
  double time = tf_header_number (header, "CRVAL1"), step = tf_header_number (header, "CDELT1");
  if (!begins (type_of (header, "CTYPE1"), "CRLN") || !(time > 10000) || !(fabs (step) > 0))
    return FALSE;
  double lon = tf_wrap_360 (-time);
  tf_notes_add (repairs, "carrington-time", "dd", time, lon);
  tf_header_set_number (header, "CRVAL1", lon);
  tf_header_set_number (header, "CDELT1", -step);
  return TRUE;
}

/* How many columns the words LON_FRST, LON_LAST, LON_STEP say the map has; NaN. */
static double
columns_told (const TfHeader *header)
{
  double first = tf_header_number (header, "LON_FRST"),
         last = tf_header_number (header, "LON_LAST");
  return rint (fabs ((last - first) / tf_header_number (header, "LON_STEP"))) + 1;
}

/* The header of a finer map over a picture of fewer pixels: taken as the whole Sun, and said to
 * lie. */
gboolean
tf_dialect_whole_map (TfHeader *header, TfNotes *repairs)
{
  double told = columns_told (header), width = tf_header_number (header, "NAXIS1");
  double height = tf_header_number (header, "NAXIS2"), step = tf_header_number (header, "LON_STEP");
  if (!tf_header_is_map (header) || !(told > 0) || fabs (told - width) < 1.5
      || !(fabs (told * step) > 359))
    return FALSE;
  double pixel = (tf_header_number (header, "CRPIX1") - 0.5) * width / told + 0.5;
  double sign = copysign (1, tf_header_number (header, "CDELT1"));
  tf_notes_add (repairs, "header-of-another-map", "dddd", told, width, height, 360 / width);
  tf_header_set_number (header, "CRPIX1", pixel);
  tf_header_set_number (header, "CDELT1", sign * 360 / width);
  tf_header_set_number (header, "CRPIX2", 0.5 * (height + 1));
  tf_header_set_number (header, "CRVAL2", 0);
  if (equal_area (header))
    tf_header_set_number (header, "CDELT2", 2 / height);
  else
    tf_header_set_number (header, "CDELT2", 180 / height);
  return TRUE;
}

/* CDELT2 in sine latitude: told by CUNIT2, or by there being none. */
static gboolean
in_sines (const TfHeader *header)
{
  const char *unit = tf_header_get (header, "CUNIT2");
  return unit == NULL || *unit == '\0' || begins (unit, "sin");
}

/* A step that reaches past the pole cannot be: the map is then taken to end at both. */
static double
possible_step (TfHeader *header, TfNotes *repairs, double step)
{
  double n = tf_header_number (header, "NAXIS2"), middle = tf_header_number (header, "CRPIX2");
  double reach = MAX (fabs (0.5 - middle), fabs (n + 0.5 - middle)) * fabs (step);
  if (!(reach > 1 + fabs (step)))
    return step;
  double better = copysign (2 / n, step);
  tf_notes_add (repairs, "impossible-cdelt2", "ddd", step, reach, better);
  tf_header_set_number (header, "CRPIX2", 0.5 * (n + 1));
  return better;
}

gboolean
tf_dialect_sine_latitude (TfHeader *header, TfNotes *repairs)
{
  double step = tf_header_number (header, "CDELT2"), value = tf_header_number (header, "CRVAL2");
  const char *unit = tf_header_get (header, "CUNIT2");
  if (!equal_area (header) || !in_sines (header) || !(fabs (step) > 0))
    return FALSE;
  tf_notes_add (repairs, "sine-latitude", "sd", unit != NULL && *unit != '\0' ? unit : "-", step);
  step = possible_step (header, repairs, step);
  if (fabs (value) > 0 && fabs (value) <= 1)
    tf_header_set_number (header, "CRPIX2", tf_header_number (header, "CRPIX2") - value / step);
  tf_header_set_number (header, "CRVAL2", 0);
  tf_header_set_number (header, "CDELT2", step / TF_DEG);
  tf_header_set (header, "CUNIT2", "deg");
  if (!tf_header_has (header, "CUNIT1"))
    tf_header_set (header, "CUNIT1", "deg");
  return TRUE;
}

/* Stonyhurst longitudes: the Earth's central meridian is added. */
gboolean
tf_dialect_stonyhurst_map (TfHeader *header, TfNotes *repairs)
{
  const char *type = type_of (header, "CTYPE1");
  double lon = tf_header_number (header, "CRVAL1"),
         l0 = tf_earth_l0 (tf_header_time (header), TF_L0_IMAGE);
  if (!begins (type, "HGLN") || strlen (type) != 8 || isnan (lon + l0))
    return FALSE;
  g_autofree char *first = g_strconcat ("CRLN", type + 4, NULL),
                  *second = g_strconcat ("CRLT", type + 4, NULL);
  tf_header_set (header, "CTYPE1", first);
  tf_header_set (header, "CTYPE2", second);
  tf_header_set_number (header, "CRVAL1", tf_wrap_360 (lon + l0));
  tf_notes_add (repairs, "stonyhurst-map", "d", l0);
  return TRUE;
}
