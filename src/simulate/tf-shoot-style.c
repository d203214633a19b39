/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <math.h>

#include "tf-constants.h"
#include "tf-sun-private.h"

/* Headers in the habits of real ones, with invented names. What every style says alike
 * (common): SIMULATD = T, the unit, what the picture is. Numbers are rounded to a few digits
 * below any use of them, so that a header is the same bytes on every processor.
 */

typedef void (*StyleFunc) (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time);

static void
set_rounded (TfHeader *header, const char *keyword, double value, int decimals)
{
  double unit = pow (10.0, decimals), rounded = rint (value * unit) / unit;
  tf_header_set_number (header, keyword, rounded + 0.0); /* no minus zero */
}

static void
set_text (TfHeader *header, const char *keyword, char *take)
{
  tf_header_set (header, keyword, take);
  g_free (take);
}

typedef struct
{
  int year, month, day, hour, minute;
  double second;
} Calendar;

/* What a clock of that scale shows at @time. */
static Calendar
calendar_in (TfTime time, TfTimeScale scale)
{
  Calendar c;
  /* Rounded to a millisecond first: 59.9996 s must not print as 60.000. */
  time.s = rint (time.s * 1000.0) / 1000.0;
  tf_time_calendar (time, &c.year, &c.month, &c.day, &c.hour, &c.minute, &c.second);
  /* A clock that knows no leap seconds: set by what it should show, again where a leap second
   * lies between. */
  TfTime shifted = time;
  for (int round = 0; round < 3 && scale != TF_SCALE_UTC; round++)
    {
      double shown
          = tf_time_from_calendar (c.year, c.month, c.day, c.hour, c.minute, c.second, scale).s;
      shifted = tf_time_add (shifted, rint ((time.s - shown) * 1000.0) / 1000.0);
      TfTime inside = tf_time_add (shifted, 1e-5);
      tf_time_calendar (inside, &c.year, &c.month, &c.day, &c.hour, &c.minute, &c.second);
    }
  return c;
}

static char *
tai_text (TfTime time)
{
  Calendar c = calendar_in (time, TF_SCALE_TAI);
  int ms = (int)(c.second * 1000.0 + 0.5);
  return g_strdup_printf ("%04d.%02d.%02d_%02d:%02d:%02d.%03d_TAI", c.year, c.month, c.day, c.hour,
                          c.minute, ms / 1000, ms % 1000);
}

/* DATE-OBS and its kin by the standard: UTC is the default, no Z. */
static char *
iso_text (TfTime time)
{
  char *text = tf_time_dup_iso (time, 3);
  gsize n = strlen (text);
  if (n > 0 && text[n - 1] == 'Z')
    text[n - 1] = '\0';
  return text;
}

/* -- what every style has --------------------------------------------------------------------- */

static void
set_common (TfHeader *header, const TfShot *shot, guint64 seed)
{
  tf_header_set (header, "SIMULATD", "T");
  tf_header_set (header, "TELESCOP", shot->instrument != NULL ? shot->instrument : "BRINDLE-1K");
  tf_header_set (header, "ORIGIN", "Tiltfield simulator");
  if (shot->desk != NULL)
    tf_header_set (header, "OBSERVER", shot->desk);
  tf_header_set (header, "BUNIT", shot->intensity ? "counts" : "Gauss");
  set_rounded (header, "SIMSEED", (double)(seed & 0xffffffffu), 0);
}

static void
set_content (TfHeader *header, const TfShot *shot)
{
  tf_header_set (header, "CONTENT",
                 shot->intensity ? "continuum intensity" : "line-of-sight magnetic field");
}

static void
set_times (TfHeader *header, TfTime time)
{
  set_text (header, "DATE-OBS", iso_text (tf_time_add (time, -0.5 * TF_EXPOSURE_S)));
  set_text (header, "DATE-AVG", iso_text (time));
  tf_header_set (header, "TIMESYS", "UTC");
  set_rounded (header, "EXPTIME", TF_EXPOSURE_S, 3);
}

static void
set_pixels (TfHeader *header, const TfGeometry *g)
{
  set_rounded (header, "CRPIX1", g->crpix[0], 6);
  set_rounded (header, "CRPIX2", g->crpix[1], 6);
  set_rounded (header, "CRVAL1", 0.0, 0);
  set_rounded (header, "CRVAL2", 0.0, 0);
  set_rounded (header, "CDELT1", tf_geometry_scale_arcsec (g), 9);
  set_rounded (header, "CDELT2", tf_geometry_scale_arcsec (g), 9);
}

static void
set_axes (TfHeader *header)
{
  set_rounded (header, "WCSAXES", 2.0, 0);
  tf_header_set (header, "CTYPE1", "HPLN-TAN");
  tf_header_set (header, "CTYPE2", "HPLT-TAN");
  tf_header_set (header, "CUNIT1", "arcsec");
  tf_header_set (header, "CUNIT2", "arcsec");
}

static void
set_observer (TfHeader *header, const TfGeometry *g)
{
  set_rounded (header, "DSUN_OBS", g->observer.distance_m, 0);
  set_rounded (header, "HGLN_OBS", g->observer.stonyhurst_lon_deg, 8);
  set_rounded (header, "HGLT_OBS", g->observer.b0_deg, 8);
  set_rounded (header, "CRLN_OBS", g->observer.carrington_lon_deg, 8);
  set_rounded (header, "CRLT_OBS", g->observer.b0_deg, 8);
  set_rounded (header, "RSUN_REF", g->radius_mm * 1e6, 0);
  set_rounded (header, "RSUN_OBS", tf_geometry_radius_arcsec (g), 8);
}

/* -- styles ----------------------------------------------------------------------------------- */

/* CROTA2 counts clockwise what the north angle counts counter-clockwise. */
static double
crota (const TfGeometry *g)
{
  return tf_wrap_180 (-tf_geometry_north_angle (g));
}

static void
style_standard (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time)
{
  double turn = crota (g) * TF_DEG;
  set_axes (header);
  set_pixels (header, g);
  set_rounded (header, "PC1_1", cos (turn), 12);
  set_rounded (header, "PC1_2", -sin (turn), 12);
  set_rounded (header, "PC2_1", sin (turn), 12);
  set_rounded (header, "PC2_2", cos (turn), 12);
  set_times (header, time);
  set_observer (header, g);
}

static void
style_turned (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time)
{
  set_axes (header);
  set_pixels (header, g);
  set_rounded (header, "CROTA2", crota (g), 8);
  set_times (header, time);
  set_observer (header, g);
}

static void
style_tai (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time)
{
  set_axes (header);
  tf_header_remove (header, "CUNIT1");
  tf_header_remove (header, "CUNIT2");
  set_pixels (header, g);
  set_rounded (header, "CROTA2", crota (g), 8);
  set_text (header, "T_REC", tai_text (tf_time_add (time, -0.5 * TF_EXPOSURE_S)));
  set_text (header, "T_OBS", tai_text (time));
  set_rounded (header, "INTERVAL", TF_EXPOSURE_S, 3);
  set_observer (header, g);
  tf_header_remove (header, "HGLN_OBS");
  tf_header_remove (header, "HGLT_OBS");
  set_rounded (header, "R_SUN", tf_geometry_disk_radius (g), 6);
}

static void
style_old_pixels (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time)
{
  Calendar c = calendar_in (time, TF_SCALE_UTC);
  tf_header_set (header, "DATA-TYP", shot->intensity ? "INTENSITY" : "MAGNETOGRAM");
  tf_header_set (header, "OBJECT", "SUN");
  set_text (header, "DATE-OBS", g_strdup_printf ("%02d-%02d-%02d", c.month, c.day, c.year % 100));
  set_rounded (header, "TAVG-UT", c.hour + c.minute / 60.0 + c.second / 3600.0, 7);
  set_rounded (header, "CARROT", tf_carrington_rotation (time), 4);
  set_rounded (header, "CENLON", g->observer.carrington_lon_deg, 4);
  set_rounded (header, "B0", g->observer.b0_deg * TF_DEG, 6);
  set_rounded (header, "X0", g->crpix[0], 4);
  set_rounded (header, "Y0", g->crpix[1], 4);
  set_rounded (header, "R0", tf_geometry_disk_radius (g), 4);
}

static void
style_ground (TfHeader *header, const TfShot *shot, const TfGeometry *g, TfTime time)
{
  Calendar c = calendar_in (time, TF_SCALE_GPS);
  int ms = (int)(c.second * 1000.0 + 0.5);
  double radius = tf_geometry_disk_radius (g);
  tf_header_set (header, "IMTYPE", shot->intensity ? "INTENSITY" : "MAGNETIC");
  set_text (header, "DATE-OBS", g_strdup_printf ("%04d/%02d/%02d", c.year, c.month, c.day));
  set_text (header, "TIME-OBS",
            g_strdup_printf ("%02d:%02d:%02d.%03d", c.hour, c.minute, ms / 1000, ms % 1000));
  tf_header_set (header, "WCSNAME", "Heliocentric-cartesian (approximate)");
  tf_header_set (header, "CTYPE1", "BRINDLEX");
  tf_header_set (header, "CTYPE2", "BRINDLEY");
  set_rounded (header, "CRPIX1", g->crpix[0], 4);
  set_rounded (header, "CRPIX2", g->crpix[1], 4);
  set_rounded (header, "CRVAL1", 0.0, 0);
  set_rounded (header, "CRVAL2", 0.0, 0);
  set_rounded (header, "FNDLMBXC", g->crpix[0], 4);
  set_rounded (header, "FNDLMBYC", g->crpix[1], 4);
  set_rounded (header, "FNDLMBMI", radius, 4);
  set_rounded (header, "FNDLMBMA", radius, 4);
  set_rounded (header, "SEMIDIAM", tf_geometry_radius_arcsec (g) * TF_ARCSEC, 13);
  set_rounded (header, "RADIUS", tf_geometry_radius_arcsec (g) * TF_ARCSEC, 9);
  set_rounded (header, "DISTANCE", g->observer.distance_m / TF_AU_M, 9);
  set_rounded (header, "B0", g->observer.b0_deg, 8);
  set_rounded (header, "L0", g->observer.carrington_lon_deg, 8);
  set_rounded (header, "P_ANGLE", 0.0, 1);
  set_rounded (header, "GPSSTAT", 81.0, 0);
  set_rounded (header, "LON", -0.331613, 6);
  set_rounded (header, "LAT", 0.994838, 6);
}

/* In the order of TfHeaderStyle. */
static const struct
{
  StyleFunc func;
  gboolean plain; /* north up and the Earth's place only */
  const char *name;
} styles[] = {
  { style_standard, FALSE, "standard" },
  { style_turned, FALSE, "turned" },
  { style_old_pixels, TRUE, "old-pixels" },
  { style_ground, TRUE, "ground" },
  { style_tai, FALSE, "tai" },
};

gboolean
tf_style_check (const TfShot *shot, GError **error)
{
  gboolean known = (guint)shot->style < G_N_ELEMENTS (styles);
  if (known && !styles[shot->style].plain)
    return TRUE;
  if (known && fabs (shot->north_angle_deg) <= 0.0 && shot->observer.source == TF_OBSERVER_UNKNOWN)
    return TRUE;
  g_set_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_OPTION,
               _ ("a header of style “%s” can only tell of a frame with north up, taken from the "
                  "Earth; choose “standard”"),
               known ? styles[shot->style].name : "?");
  return FALSE;
}

TfHeader *
tf_style_header (const TfShot *shot, const TfGeometry *geometry, TfTime time, guint64 seed)
{
  TfHeader *header = tf_header_new ();
  set_common (header, shot, seed);
  if (shot->style != TF_STYLE_OLD_PIXELS && shot->style != TF_STYLE_GROUND)
    set_content (header, shot);
  styles[shot->style].func (header, shot, geometry, time);
  return header;
}

TfHeader *
tf_style_map_header (const TfShot *shot, const TfGeometry *geometry, int rotation, guint64 seed)
{
  TfHeader *header = tf_header_new ();
  set_common (header, shot, seed);
  tf_header_set (header, "CONTENT", "Carrington map of the radial magnetic field");
  set_rounded (header, "WCSAXES", 2.0, 0);
  tf_header_set (header, "CTYPE1", "CRLN-CEA");
  tf_header_set (header, "CTYPE2", "CRLT-CEA");
  tf_header_set (header, "CUNIT1", "deg");
  tf_header_set (header, "CUNIT2", "deg");
  set_rounded (header, "CRPIX1", geometry->crpix[0], 1);
  set_rounded (header, "CRPIX2", geometry->crpix[1], 1);
  set_rounded (header, "CRVAL1", geometry->crval_deg[0], 1);
  set_rounded (header, "CRVAL2", 0.0, 1);
  set_rounded (header, "CDELT1", geometry->cd[0][0], 12);
  set_rounded (header, "CDELT2", geometry->cd[1][1] / TF_DEG, 12);
  set_rounded (header, "PV2_1", 1.0, 1);
  set_rounded (header, "CAR_ROT", rotation, 0);
  set_rounded (header, "RSUN_REF", geometry->radius_mm * 1e6, 0);
  set_text (header, "DATE-OBS", iso_text (tf_map_column_time (rotation, 360.0)));
  set_text (header, "DATE-AVG", iso_text (tf_map_column_time (rotation, 180.0)));
  set_text (header, "DATE-END", iso_text (tf_map_column_time (rotation, 0.0)));
  return header;
}
