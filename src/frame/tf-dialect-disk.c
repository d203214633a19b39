/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-constants.h"
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

/* Habits of pictures of the disk. They end as HPLN-TAN/HPLT-TAN, CRPIX, CRVAL, CDELT in arcsec,
 * CROTA2. */

static void
set_helioprojective (TfHeader *header)
{
  tf_header_set (header, "CTYPE1", "HPLN-TAN");
  tf_header_set (header, "CTYPE2", "HPLT-TAN");
}

static gboolean
type_begins (const TfHeader *header, const char *start)
{
  const char *type = tf_header_get (header, "CTYPE1");
  return type != NULL && g_ascii_strncasecmp (type, start, strlen (start)) == 0;
}

/* Centre at (@x, @y), the Sun's radius @radius pixels: scale and centre, axes in arcsec. FALSE
 * without an angular radius. */
static gboolean
set_centre_and_radius (TfHeader *header, double x, double y, double radius)
{
  double scale
      = tan (tf_header_angular_radius (header)) / radius / TF_ARCSEC; /* TAN: r = tan rho */
  if (!(scale > 0 && scale < 1e4))
    return FALSE;
  set_helioprojective (header);
  for (int k = 1; k <= 2; k++)
    {
      char word[12];
      g_snprintf (word, sizeof word, "CRPIX%d", k);
      tf_header_set_number (header, word, k == 1 ? x : y);
      g_snprintf (word, sizeof word, "CRVAL%d", k);
      tf_header_set_number (header, word, 0);
      g_snprintf (word, sizeof word, "CDELT%d", k);
      tf_header_set_number (header, word, scale);
      g_snprintf (word, sizeof word, "CUNIT%d", k);
      tf_header_set (header, word, "arcsec");
    }
  return TRUE;
}

gboolean
tf_dialect_unit_spelling (TfHeader *header, TfNotes *repairs)
{
  static const char *const spellings[][2] = {
    { "degree", "deg" },       { "degrees", "deg" },    { "arcseconds", "arcsec" },
    { "arcsecond", "arcsec" }, { "arcsecs", "arcsec" }, { "asec", "arcsec" },
    { "arcsec", "arcsec" },    { "deg", "deg" },        { "radians", "rad" },
    { "radian", "rad" },
  };
  static const char *const words[] = { "CUNIT1", "CUNIT2" };
  gboolean done = FALSE;
  for (guint w = 0; w < G_N_ELEMENTS (words); w++)
    for (guint k = 0; k < G_N_ELEMENTS (spellings); k++)
      {
        const char *unit = tf_header_get (header, words[w]);
        if (unit == NULL || g_ascii_strcasecmp (unit, spellings[k][0]) != 0
            || strcmp (unit, spellings[k][1]) == 0)
          continue;
        tf_notes_add (repairs, "unit-spelling", "sss", words[w], unit, spellings[k][1]);
        tf_header_set (header, words[w], spellings[k][1]);
        done = TRUE;
      }
  return done;
}

/* CTYPE solar-x / solar-y in any spelling. */
gboolean
tf_dialect_solar_xy (TfHeader *header, TfNotes *repairs)
{
  static const char *const spellings[]
      = { "solar-x", "solar_x", "solarx", "solar x", "hpln---", "hpln-" };
  const char *type = tf_header_get (header, "CTYPE1");
  for (guint k = 0; type != NULL && k < G_N_ELEMENTS (spellings); k++)
    if (g_ascii_strcasecmp (type, spellings[k]) == 0
        || (k > 3 && g_ascii_strcasecmp (type, "hpln") == 0))
      {
        tf_notes_add (repairs, "solar-xy", "s", type);
        set_helioprojective (header);
        return TRUE;
      }
  return FALSE;
}

/* No CTYPE, but a scale and words that only pictures of the Sun have. */
gboolean
tf_dialect_missing_ctype (TfHeader *header, TfNotes *repairs)
{
  const char *type = tf_header_get (header, "CTYPE1");
  gboolean solar = tf_header_has (header, "DSUN_OBS") || tf_header_has (header, "RSUN_OBS")
                   || tf_header_has (header, "CRLN_OBS") || tf_header_has (header, "HGLN_OBS");
  if ((type != NULL && *type != '\0') || !solar || isnan (tf_header_number (header, "CRPIX1"))
      || isnan (tf_header_number (header, "CDELT1")))
    return FALSE;
  set_helioprojective (header);
  tf_notes_add (repairs, "missing-ctype", "");
  return TRUE;
}

/* CTYPE GONGX, or any without CDELT: centre in CRPIX, radius in FNDLMBMI and FNDLMBMA, pixels;
 * no scale. */
gboolean
tf_dialect_ground_network (TfHeader *header, TfNotes *repairs)
{
  double minor = tf_header_number (header, "FNDLMBMI"),
         major = tf_header_number (header, "FNDLMBMA");
  double x = tf_header_number (header, "CRPIX1"), y = tf_header_number (header, "CRPIX2");
  double radius = isnan (major) ? minor : isnan (minor) ? major : 0.5 * (minor + major);
  gboolean network = type_begins (header, "GONG") || !tf_header_has (header, "CDELT1");
  if (!network || !(radius > 1) || isnan (x + y) || !set_centre_and_radius (header, x, y, radius))
    return FALSE;
  tf_notes_add (repairs, "ground-network", "dddd", x, y, radius,
                tf_header_number (header, "CDELT1"));
  return TRUE;
}

/* X0, Y0 and R0 (or R_SUN) in pixels and no CRPIX. */
gboolean
tf_dialect_centre_and_radius (TfHeader *header, TfNotes *repairs)
{
  double x = tf_header_number (header, "X0"), y = tf_header_number (header, "Y0"),
         radius = tf_header_number (header, "R0");
  double zero_based = 0;
  if (isnan (radius))
    {
      radius = tf_header_number (header, "R_SUN");
      zero_based = 1; /* the family that writes R_SUN counts X0 and Y0 from 0 */
    }
  if (tf_header_has (header, "CRPIX1") || isnan (x + y) || !(radius > 1)
      || !set_centre_and_radius (header, x + zero_based, y + zero_based, radius))
    return FALSE;
  tf_notes_add (repairs, "centre-and-radius-in-pixels", "dddd", x + zero_based, y + zero_based,
                radius, tf_header_number (header, "CDELT1"));
  return TRUE;
}

/* CUNIT solRad: a scale in radii of the disk. */
gboolean
tf_dialect_solar_radii (TfHeader *header, TfNotes *repairs)
{
  const char *unit = tf_header_get (header, "CUNIT1");
  double scale = tf_header_number (header, "CDELT1"), other = tf_header_number (header, "CDELT2");
  double x = tf_header_number (header, "CRPIX1"), y = tf_header_number (header, "CRPIX2");
  gboolean radii = unit != NULL
                   && (g_ascii_strcasecmp (unit, "solRad") == 0
                       || g_ascii_strcasecmp (unit, "solar radii") == 0);
  if (!radii || !(scale > 0) || isnan (x + y) || !(fabs (scale - other) <= 1e-6 * scale))
    return FALSE;
  x -= tf_header_number (header, "CRVAL1") / scale;
  y -= tf_header_number (header, "CRVAL2") / scale;
  if (isnan (x + y) || !set_centre_and_radius (header, x, y, 1 / scale))
    return FALSE;
  tf_notes_add (repairs, "solar-radii", "dd", scale, tf_header_number (header, "CDELT1"));
  return TRUE;
}

/* XCEN, YCEN: what the middle of the picture points at, without CRPIX or CRVAL. */
gboolean
tf_dialect_pointing_only (TfHeader *header, TfNotes *repairs)
{
  double x = tf_header_number (header, "XCEN"), y = tf_header_number (header, "YCEN");
  double scale = tf_header_number (header, "CDELT1");
  if (tf_header_has (header, "CRPIX1") || tf_header_has (header, "CRVAL1") || isnan (x + y)
      || !(scale > 0))
    return FALSE;
  if (!tf_header_has (header, "CTYPE1"))
    set_helioprojective (header);
  tf_header_set_number (header, "CRVAL1", x);
  tf_header_set_number (header, "CRVAL2", y);
  tf_header_set_number (header, "CRPIX1", 0.5 * (tf_header_number (header, "NAXIS1") + 1));
  tf_header_set_number (header, "CRPIX2", 0.5 * (tf_header_number (header, "NAXIS2") + 1));
  tf_notes_add (repairs, "pointing-only", "dd", x, y);
  return TRUE;
}

/* No CUNIT: arcsec, unless the disk would then be smaller than two pixels. */
gboolean
tf_dialect_missing_cunit (TfHeader *header, TfNotes *repairs)
{
  const char *unit = tf_header_get (header, "CUNIT1");
  double scale = fabs (tf_header_number (header, "CDELT1"));
  if (!type_begins (header, "HPLN") || (unit != NULL && *unit != '\0')
      || tf_header_has (header, "CD1_1"))
    return FALSE;
  const char *taken = scale < 0.02 ? "deg" : "arcsec";
  tf_header_set (header, "CUNIT1", taken);
  tf_header_set (header, "CUNIT2", taken);
  tf_notes_add (repairs, "missing-cunit", "ds", tf_header_number (header, "CDELT1"), taken);
  return TRUE;
}

static gboolean
has_turn (const TfHeader *header)
{
  return tf_header_has (header, "PC1_1") || tf_header_has (header, "PC1_2")
         || tf_header_has (header, "CD1_1") || tf_header_has (header, "CD1_2")
         || !isnan (tf_header_number (header, "CROTA2"));
}

/* CROTA1 or CROTA for CROTA2. */
gboolean
tf_dialect_crota_elsewhere (TfHeader *header, TfNotes *repairs)
{
  const char *word = !isnan (tf_header_number (header, "CROTA")) ? "CROTA" : "CROTA1";
  double angle = tf_header_number (header, word);
  if (!type_begins (header, "HPLN") || has_turn (header) || isnan (angle))
    return FALSE;
  tf_header_set_number (header, "CROTA2", angle);
  tf_notes_add (repairs, "crota-elsewhere", "sd", word, angle);
  return TRUE;
}

/* The position angle of solar north in the picture, counted from up through left, in place of
 * CROTA2 = -P. */
gboolean
tf_dialect_p_angle (TfHeader *header, TfNotes *repairs)
{
  static const char *const words[] = { "SOLAR_P", "P_ANGLE", "SOLAR_P0", "IMG_P" };
  if (!type_begins (header, "HPLN") || has_turn (header))
    return FALSE;
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      double angle = tf_header_number (header, words[k]);
      if (isnan (angle))
        continue;
      tf_header_set_number (header, "CROTA2", 0.0 - angle);
      tf_notes_add (repairs, "p-angle", "sd", words[k], angle);
      return TRUE;
    }
  return FALSE;
}

/* X0, Y0, R_SUN of a picture that was binned or cut afterwards, while CRPIX and CDELT are
 * right: said, not used. */
gboolean
tf_dialect_stale_pixels (TfHeader *header, TfNotes *repairs)
{
  double radius = tf_header_number (header, "R_SUN"), x = tf_header_number (header, "X0");
  double scale = fabs (tf_header_number (header, "CDELT1")),
         rho = tf_header_angular_radius (header) / TF_ARCSEC;
  if (!type_begins (header, "HPLN") || !(radius > 1) || !(scale > 0) || !(rho > 0)
      || !tf_header_has (header, "CRPIX1"))
    return FALSE;
  if (fabs (radius * scale / rho - 1) < 0.01)
    return FALSE;
  tf_notes_add (repairs, "stale-pixels", "ddd", x, radius, rho / scale);
  return TRUE;
}
