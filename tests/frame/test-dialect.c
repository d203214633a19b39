/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"

/* One row a habit: the dialect alone is run on the header; what must stand there afterwards is
 * a text or a number. */
typedef struct
{
  const char *keyword;
  const char *text; /* NULL: a number */
  double number, tolerance;
} Expected;

typedef struct
{
  const char *dialect, *header, *note;
  Expected expected[6];
} Case;

#define AU 149597870700.0

static const Case cases[] = {
  { "bare-text",
    "ORIGIN  = Some place\nNAXIS   = 2\nDATE-OBS= 2011/04/01\nSIMPLE  = T\nEXPO    = 1.5D3\n",
    "text-without-quotes",
    { { "ORIGIN", "Some place" }, { "DATE-OBS", "2011/04/01" } } },
  { "bare-nan",
    "HGLN_OBS= nan\nCRLN_OBS= 12.5\nCRDER1  = NaN\nCRDER2  = 'nan'\n",
    "bare-nan",
    { { "CRLN_OBS", NULL, 12.5, 0 },
      { "CRDER2", "nan" },
      { "HGLN_OBS", NULL, NAN },
      { "CRDER1", NULL, NAN } } },
  { "blank-with-floats",
    "BITPIX  = -64\nBLANK   = -2147483648\n",
    "blank-with-floats",
    { { "BLANK", NULL, NAN } } },
  { "fill-keyword", "MISSING = -9999.0\n", "fill-keyword", { { "TFFILL", NULL, -9999, 0 } } },

  { "underscore-date",
    "DATE_OBS= '2011-02-14T03:04:43'\nDATE_END= '2011-02-14T03:05:07'\n",
    "keyword-read-as",
    { { "DATE-OBS", "2011-02-14T03:04:43" }, { "DATE-END", "2011-02-14T03:05:07" } } },
  /* TAI - UTC was 34 s in 2010 (IERS Bulletin C 36) */
  { "tai-text",
    "T_OBS   = '2010.10.15_19:15:30.000_TAI'\n",
    "tai-text",
    { { "T_OBS", "2010-10-15T19:14:56.000Z" } } },
  { "tai-text",
    "T_OBS   = '2021.04.28_00:39_UTC'\n",
    "tai-text",
    { { "T_OBS", "2021-04-28T00:39:00.000Z" } } },
  /* GPS time was 18 s ahead of UTC in 2025 (IERS Bulletin C 52) */
  { "gps-time",
    "CTYPE1  = 'GONGX'\nDATE-OBS= '2025/01/09 '\nTIME-OBS= '01:35:16.008025 '\n",
    "gps-time",
    { { "DATE-OBS", "2025-01-09T01:34:58.008Z" }, { "TIME-OBS", NULL, NAN } } },
  { "slash-date", "DATE-OBS= '1998/07/03'\n", "date-format", { { "DATE-OBS", "1998-07-03" } } },
  { "two-digit-year", "DATE-OBS= '03-31-11'\n", "date-format", { { "DATE-OBS", "2011-03-31" } } },
  { "two-digit-year", "DATE-OBS= '31/03/97'\n", "date-format", { { "DATE-OBS", "1997-03-31" } } },
  { "date-and-time-apart",
    "DATE-OBS= '2024-03-30'\nTIME-OBS= '07:04'\n",
    "date-and-time-apart",
    { { "DATE-OBS", "2024-03-30T07:04:00.000Z" } } },
  { "mean-hours",
    "DATE-OBS= '2011-03-31'\nTAVG-UT = 17.814\n",
    "mean-hours",
    { { "DATE-AVG", "2011-03-31T17:48:50.400Z" }, { "TFTIME", "TAVG-UT" } } },
  { "time-system",
    "TIMESYS = 'TAI'\nDATE-OBS= '2010-10-15T19:15:30'\n",
    "time-system",
    { { "DATE-OBS", "2010-10-15T19:14:56.000Z" }, { "TIMESYS", "UTC" } } },

  { "old-observer",
    "OBS_L0  = 130.9\nL0      = 7\nOBS_B0  = -6.03\nOBS_DIST= 0.9743\n",
    "old-keyword",
    { { "CRLN_OBS", NULL, 130.9, 0 },
      { "CRLT_OBS", NULL, -6.03, 0 },
      { "DSUN_OBS", NULL, 0.9743 * AU, 1 } } },
  { "b0-in-radians",
    "DATE-OBS= '2011-03-31T17:48:50'\nB0      = -0.114862\nCRLT_OBS= -0.114862\n",
    "b0-in-radians",
    { { "CRLT_OBS", NULL, -6.5811, 1e-4 } } },
  { "angular-radius",
    "RADIUS  = 0.0047311\n",
    "old-keyword",
    { { "RSUN_OBS", NULL, 975.859, 1e-3 } } },
  { "angular-radius", "OBS_R0  = 984.95\n", "old-keyword", { { "RSUN_OBS", NULL, 984.95, 0 } } },

  { "unit-spelling",
    "CUNIT1  = 'Degree'\nCUNIT2  = 'ARCSEC'\n",
    "unit-spelling",
    { { "CUNIT1", "deg" }, { "CUNIT2", "arcsec" } } },
  { "solar-xy",
    "CTYPE1  = 'solar-x'\nCTYPE2  = 'solar-y'\n",
    "solar-xy",
    { { "CTYPE1", "HPLN-TAN" }, { "CTYPE2", "HPLT-TAN" } } },
  { "missing-ctype",
    "CRPIX1  = 50.5\nCDELT1  = 0.5\nDSUN_OBS= 1.477E11\n",
    "missing-ctype",
    { { "CTYPE1", "HPLN-TAN" } } },
  { "ground-network",
    "CTYPE1  = 'GONGX'\nCRPIX1  = 422.5\nCRPIX2  = 442.6\nFNDLMBMI= 385\nFNDLMBMA= 387\nRSUN_OBS= "
    "975.86\n",
    "ground-network", /* 975.86 / 386; the tangent adds 7e-6 of it */
    { { "CTYPE1", "HPLN-TAN" },
      { "CDELT1", NULL, 2.528135, 3e-5 },
      { "CUNIT2", "arcsec" },
      { "CRPIX2", NULL, 442.6, 0 } } },
  { "centre-and-radius-in-pixels",
    "X0      = 256.5\nY0      = 250.5\nR0      = 256\nRSUN_OBS= 960\n",
    "centre-and-radius-in-pixels",
    { { "CRPIX1", NULL, 256.5, 0 },
      { "CRPIX2", NULL, 250.5, 0 },
      { "CDELT2", NULL, 3.75, 5e-5 } } },
  { "centre-and-radius-in-pixels",
    "X0      = 511.5\nY0      = 510.5\nR_SUN   = 480\nRSUN_OBS= 960\n",
    "centre-and-radius-in-pixels",
    { { "CRPIX1", NULL, 512.5, 0 },
      { "CRPIX2", NULL, 511.5, 0 },
      { "CDELT2", NULL, 2, 5e-5 } } }, /* counted from 0 */
  { "solar-radii",
    "CUNIT1  = 'solRad'\nCRPIX1  = 1024.5\nCRPIX2  = 1024.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = "
    "0.002\nCDELT2  = 0.002\n"
    "RSUN_OBS= 950\n",
    "solar-radii",
    { { "CDELT1", NULL, 1.9, 5e-5 }, { "CTYPE2", "HPLT-TAN" } } },
  { "pointing-only",
    "NAXIS1  = 200\nNAXIS2  = 100\nXCEN    = -8.5\nYCEN    = 30\nCDELT1  = 0.5\n",
    "pointing-only",
    { { "CRPIX1", NULL, 100.5, 0 },
      { "CRPIX2", NULL, 50.5, 0 },
      { "CRVAL1", NULL, -8.5, 0 },
      { "CTYPE1", "HPLN-TAN" } } },
  { "missing-cunit",
    "CTYPE1  = 'HPLN-TAN'\nCDELT1  = 1.98\n",
    "missing-cunit",
    { { "CUNIT1", "arcsec" }, { "CUNIT2", "arcsec" } } },
  { "missing-cunit",
    "CTYPE1  = 'HPLN-TAN'\nCDELT1  = 0.00055\n",
    "missing-cunit",
    { { "CUNIT1", "deg" } } },
  { "crota-elsewhere",
    "CTYPE1  = 'HPLN-TAN'\nCROTA1  = 12.5\n",
    "crota-elsewhere",
    { { "CROTA2", NULL, 12.5, 0 } } },
  { "p-angle",
    "CTYPE1  = 'HPLN-TAN'\nSOLAR_P = -179.9\n",
    "p-angle",
    { { "CROTA2", NULL, 179.9, 0 } } },
  { "stale-pixels",
    "CTYPE1  = 'HPLN-TAN'\nCRPIX1  = 32.5\nCDELT1  = 31.776\nX0      = 511.6\nR_SUN   = "
    "488.7\nRSUN_OBS= 970.6\n",
    "stale-pixels",
    { { "CRPIX1", NULL, 32.5, 0 }, { "CDELT1", NULL, 31.776, 0 } } },

  { "map-names",
    "CTYPE1  = 'Long'\nCTYPE2  = 'Lat'\n",
    "map-names",
    { { "CTYPE1", "CRLN-CAR" }, { "CUNIT2", "deg" } } },
  { "map-names",
    "CTYPE1  = 'Carrington Time'\nCTYPE2  = 'Sine Latitude'\n",
    "map-names",
    { { "CTYPE2", "CRLT-CEA" }, { "CUNIT2", "Sine Latitude" } } },
  /* 795260.3 = 360 * 2210 - 339.7 */
  { "carrington-time",
    "CTYPE1  = 'CRLN-CEA'\nCRVAL1  = 795260.3\nCDELT1  = -0.5\n",
    "carrington-time",
    { { "CRVAL1", NULL, 339.7, 1e-6 }, { "CDELT1", NULL, 0.5, 0 } } },
  { "whole-map",
    "CTYPE1  = 'CRLN-CEA'\nNAXIS1  = 360\nNAXIS2  = 180\nCRPIX1  = 1800\nCRPIX2  = 540.5\nCDELT1  "
    "= 0.1\nCDELT2  = 0.00185\n"
    "LON_FRST= 691560\nLON_LAST= 691919.9\nLON_STEP= -0.1\n",
    "header-of-another-map",
    { { "CDELT1", NULL, 1, 0 },
      { "CDELT2", NULL, 2 / 180.0, 1e-12 },
      { "CRPIX2", NULL, 90.5, 0 },
      { "CRPIX1", NULL, 180.45, 1e-9 } } },
  { "sine-latitude",
    "CTYPE1  = 'CRLN-CEA'\nNAXIS2  = 180\nCRPIX2  = 90.5\nCRVAL2  = 0\nCDELT2  = 0.0111111\n",
    "sine-latitude",
    { { "CDELT2", NULL, 0.63662, 1e-5 }, { "CUNIT2", "deg" } } },
  { "sine-latitude",
    "CTYPE1  = 'CRLN-CEA'\nNAXIS2  = 360\nCRPIX2  = 180.5\nCRVAL2  = 0\nCDELT2  = 0.006944\nCUNIT2 "
    " = 'Sine Latitude'\n",
    "impossible-cdelt2",
    { { "CDELT2", NULL, 2 / 360.0 * 180 / TF_PI, 1e-9 } } },
  { "stonyhurst-map",
    "CTYPE1  = 'HGLN-CAR'\nCTYPE2  = 'HGLT-CAR'\nCRVAL1  = 10\nDATE-OBS= '2013-04-01T00:00:00'\n",
    "stonyhurst-map",
    { { "CTYPE1", "CRLN-CAR" },
      { "CTYPE2", "CRLT-CAR" },
      { "CRVAL1", NULL, 231.44, 0.02 } } }, /* L0 221.44: Almanac 2013 */
};

/* A header with nothing to repair. */
static const char standard[]
    = "SIMPLE  = T\nBITPIX  = -32\nNAXIS   = 2\nNAXIS1  = 100\nNAXIS2  = 100\nCTYPE1  = "
      "'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\n"
      "CUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = 50.5\nCRPIX2  = 50.5\nCRVAL1  = 0\nCRVAL2 "
      " = 0\nCDELT1  = 20\nCDELT2  = 20\n"
      "CROTA2  = 3\nDATE-OBS= '2013-10-12T06:00:00'\nDATE-AVG= '2013-10-12T06:00:30'\nTIMESYS = "
      "'UTC'\nDSUN_OBS= 1.496E11\n"
      "HGLN_OBS= 0\nHGLT_OBS= 5\nRSUN_OBS= 959\nBUNIT   = 'G'\nTELESCOP= 'TEST'\n";

static const TfDialect *
find (const char *name)
{
  for (const TfDialect *d = tf_dialects; d->name != NULL; d++)
    if (strcmp (d->name, name) == 0)
      return d;
  return NULL;
}

static void
test_one (gconstpointer data)
{
  const Case *c = data;
  const TfDialect *dialect = find (c->dialect);
  g_autoptr (TfHeader) header = tf_header_read (c->header, -1);
  g_autoptr (GPtrArray) notes = tf_notes_new ();
  g_assert_nonnull (dialect);
  g_assert_true (dialect->repair (header, notes));
  const TfNote *note = tf_notes_find (notes, c->note);
  g_assert_nonnull (note);
  g_autofree char *sentence = tf_note_dup_text (note, TRUE);
  g_assert_cmpuint (strlen (sentence), >, 15);
  g_assert_null (strchr (sentence, '{'));
  for (const Expected *e = c->expected; e->keyword != NULL; e++)
    if (e->text != NULL)
      g_assert_cmpstr (tf_header_get (header, e->keyword), ==, e->text);
    else if (isnan (e->number))
      tf_check_nan (e->keyword, tf_header_number (header, e->keyword));
    else
      tf_check_near (e->keyword, tf_header_number (header, e->keyword), e->number, e->tolerance);
}

static void
test_standard (void)
{
  g_autoptr (TfHeader) header = tf_header_read (standard, -1);
  g_autofree char *before = tf_header_dup_cards (header, NULL);
  for (const TfDialect *d = tf_dialects; d->name != NULL; d++)
    {
      g_autoptr (GPtrArray) notes = tf_notes_new ();
      if (d->repair (header, notes) || tf_notes_get_n (notes) > 0)
        g_error ("%s repairs a standard header", d->name);
    }
  g_autofree char *after = tf_header_dup_cards (header, NULL);
  g_assert_cmpstr (before, ==, after);
}

static void
test_all_have_a_case (void)
{
  for (const TfDialect *d = tf_dialects; d->name != NULL; d++)
    {
      gboolean found = FALSE;
      for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
        found |= strcmp (cases[k].dialect, d->name) == 0;
      if (!found)
        g_error ("%s has no case in this test", d->name);
    }
}

/* The same field written in each unit's every spelling. */
static void
test_units (void)
{
  static const struct
  {
    const char *unit;
    double gauss;
  } units[] = {
    { "G", 1 },       { "Gauss", 1 },     { "GAUSS", 1 },    { "gauss", 1 },
    { "kG", 1000 },   { "KGauss", 1000 }, { "mT", 10 },      { "mTesla", 10 },
    { "T", 1e4 },     { "Tesla", 1e4 },   { "Mx/cm^2", 1 },  { "Mx/cm2", 1 },
    { "Mx cm-2", 1 }, { "Mx cm**-2", 1 }, { "Mx/cm**2", 1 }, { "Mx cm^-2", 1 },
    { "MX/CM^2", 1 }, { "Mx.cm-2", 1 },   { "10**-4 T", 1 }, { "1e-4T", 1 },
    { "10^-4 T", 1 }, { "uT", 0.01 },     { "Wb/m2", 1e4 },  { "milliGauss", 1e-3 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (units); k++)
    {
      g_autoptr (TfHeader) header = tf_header_read (standard, -1);
      tf_header_set (header, "BUNIT", units[k].unit);
      g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 100, 100);
      g_test_message ("%s", units[k].unit);
      g_assert_cmpint (info->role, ==, TF_ROLE_FIELD);
      tf_check_near (units[k].unit, info->to_gauss / units[k].gauss, 1, 1e-12);
      g_assert_cmpuint (tf_notes_get_n (info->cautions), ==, 0);
    }
  g_autoptr (TfHeader) header = tf_header_read (standard, -1);
  tf_header_remove (header, "BUNIT");
  tf_header_set (header, "CONTENT", "MAGNETOGRAM");
  g_autoptr (TfFrameInfo) none = tf_frame_info_read (header, 100, 100);
  g_assert_nonnull (tf_notes_find (none->cautions, "unit-missing"));
  tf_check_near ("no unit", none->to_gauss, 1, 0);
}

/* What a header says its pixels are, and what becomes of it. */
static void
test_roles (void)
{
  static const struct
  {
    const char *word, *text;
    TfRole role;
    TfFieldKind field;
    const char *refusal;
  } roles[] = {
    { "CONTENT", "MAGNETOGRAM", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
    { "CONTENT", "Carrington Synoptic Chart Of Br Field", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
    { "CONTENT", "Update Synoptic MAP (Mr)", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
    { "CONTENT", "Synoptic Chart Of Ml Field", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
    { "BTYPE", "BLOS", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
    { "BTYPE", "LOS Magnetic Field Strength", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
    { "BTYPE", "BAZI", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "azimuth" },
    { "BTYPE", "BINC", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "inclination" },
    { "BTYPE", "BMAG", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "unsigned-field" },
    { "BTYPE", "VLOS", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "velocity" },
    { "CONTENT", "DOPPLERGRAM", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "velocity" },
    { "CONTENT", "LINE WIDTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "line-shape" },
    { "CONTENT", "Transverse field", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "transverse-field" },
    { "IMTYPE", "H-ALPHA", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha" },
    { "WAVELNTH", "6562.8", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha" },
    { "CONTENT", "CONTINUUM INTENSITY", TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN, "intensity" },
    { "BUNIT", "DN/s", TF_ROLE_INTENSITY, TF_FIELD_LOS, "intensity" },
    { "BUNIT", "m/s", TF_ROLE_REFUSED, TF_FIELD_LOS, "velocity" },
    { "BUNIT", "deg", TF_ROLE_REFUSED, TF_FIELD_LOS, "azimuth" },
    { "BUNIT", "pm", TF_ROLE_REFUSED, TF_FIELD_LOS, "unit-not-field" },
  };
  for (guint k = 0; k < G_N_ELEMENTS (roles); k++)
    {
      g_autoptr (TfHeader) header = tf_header_read (standard, -1);
      tf_header_set (header, roles[k].word, roles[k].text);
      g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 100, 100);
      g_test_message ("%s = %s", roles[k].word, roles[k].text);
      g_assert_cmpint (info->role, ==, roles[k].role);
      if (info->role == TF_ROLE_FIELD)
        g_assert_cmpint (info->field, ==, roles[k].field);
      g_assert_cmpstr (info->refusal != NULL ? tf_note_get_code (info->refusal) : NULL, ==,
                       roles[k].refusal);
    }
}

/* Observers: all from the header, part, none; angular radius against distance; longitudes
 * either way. */
static void
test_observers (void)
{
  g_autoptr (TfHeader) header = tf_header_read (standard, -1);
  tf_header_remove (header, "RSUN_OBS");
  g_autoptr (TfFrameInfo) all = tf_frame_info_read (header, 100, 100);
  TfObserver earth = tf_observer_earth (all->time);
  g_assert_cmpint (all->geometry.observer.source, ==, TF_OBSERVER_HEADER);
  tf_check_angle ("Carrington from Stonyhurst", all->geometry.observer.carrington_lon_deg,
                  tf_observer_carrington (all->time, 0, 1.496e11), 1e-9);
  tf_check_near ("the distance as given", all->geometry.observer.distance_m, 1.496e11, 1);

  tf_header_remove (header, "DSUN_OBS");
  g_autoptr (TfFrameInfo) part = tf_frame_info_read (header, 100, 100);
  g_assert_cmpint (part->geometry.observer.source, ==, TF_OBSERVER_HEADER_EARTH);
  tf_check_near ("the Earth's distance", part->geometry.observer.distance_m, earth.distance_m, 1);
  tf_check_near ("the header's latitude", part->geometry.observer.b0_deg, 5, 0);
  tf_check_nan ("no distance given", part->distance_given_m);

  tf_header_set_number (header, "RSUN_OBS", 1500);
  g_autoptr (TfFrameInfo) near = tf_frame_info_read (header, 100, 100);
  tf_check_near ("distance from the angular radius", near->geometry.observer.distance_m,
                 TF_RADIUS_MM * 1e6 / sin (1500 * TF_ARCSEC), 1);
  tf_header_set_number (header, "DSUN_OBS", AU);
  g_autoptr (TfFrameInfo) differ = tf_frame_info_read (header, 100, 100);
  g_assert_nonnull (tf_notes_find (differ->cautions, "distance-disagrees"));
  tf_check_near ("the angular radius rules", tf_geometry_radius_arcsec (&differ->geometry), 1500,
                 1e-6);
  tf_check_near ("the distance is kept", differ->distance_given_m, AU, 1);
  tf_header_set_number (header, "RSUN_OBS", 959.63 * 1.0005); /* 0.05 % is within the rule */
  g_autoptr (TfFrameInfo) agree = tf_frame_info_read (header, 100, 100);
  tf_check_near ("the distance stands", agree->geometry.observer.distance_m, AU, 1);
  tf_header_set_number (header, "RSUN_REF", 696000000.0);
  g_autoptr (TfFrameInfo) other = tf_frame_info_read (header, 100, 100);
  tf_check_near ("the header's radius", other->geometry.radius_mm, 696, 1e-9);

  tf_header_remove (header, "HGLN_OBS");
  tf_header_remove (header, "HGLT_OBS");
  tf_header_remove (header, "DSUN_OBS");
  tf_header_remove (header, "RSUN_OBS");
  g_autoptr (TfFrameInfo) none = tf_frame_info_read (header, 100, 100);
  g_assert_cmpint (none->geometry.observer.source, ==, TF_OBSERVER_EARTH);
  tf_header_set_number (header, "CRLN_OBS", earth.carrington_lon_deg + 40);
  g_autoptr (TfFrameInfo) west = tf_frame_info_read (header, 100, 100);
  tf_check_angle ("Stonyhurst from Carrington", west->geometry.observer.stonyhurst_lon_deg, 40,
                  1e-9);
}

static void
test_times (void)
{
  static const struct
  {
    const char *header, *source, *time, *caution;
  } times[] = {
    { "DATE-AVG= '2013-10-12T06:00:30'\nT_OBS   = '2013.10.12_07:00:00_TAI'\n", "DATE-AVG",
      "2013-10-12T06:00:30Z", NULL },
    { "DATE-OBS= '2013-10-12T06:00:00'\nT_OBS   = '2013.10.12_07:00:35_TAI'\n", "T_OBS",
      "2013-10-12T07:00:00Z", NULL },
    { "DATE-OBS= '2013-10-12T06:00:00'\nINTERVAL= 300\n", "DATE-OBS", "2013-10-12T06:02:30Z",
      NULL },
    { "DATE-OBS= '2013-10-12T06:00:00'\nDATE-END= '2013-10-12T06:00:40'\nEXPTIME = 5\n", "DATE-OBS",
      "2013-10-12T06:00:20Z", NULL },
    { "DATE-OBS= '2013-10-12T06:00:00'\n", "DATE-OBS", "2013-10-12T06:00:00Z", "start-or-middle" },
    { "DATE-OBS= '2013-10-12'\n", "DATE-OBS", "2013-10-12T00:00:00Z", "time-of-day-unknown" },
    { "DATE-OBS= 'N/A'\n", "unknown", NULL, "time-unknown" },
    { "DATE-OBS= '2013-13-45T99:99:99'\n", "unknown", NULL, "time-unknown" },
  };
  for (guint k = 0; k < G_N_ELEMENTS (times); k++)
    {
      g_autoptr (TfHeader) header = tf_header_read (times[k].header, -1),
                           base = tf_header_read (standard, -1);
      for (guint j = 0; j < tf_header_get_n (base); j++)
        if (!g_str_has_prefix (tf_header_get_keyword (base, j), "DATE"))
          tf_header_set (header, tf_header_get_keyword (base, j),
                         tf_header_get (base, tf_header_get_keyword (base, j)));
      g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 100, 100);
      g_autofree char *iso = tf_time_dup_iso (info->time, 0);
      g_test_message ("%s", times[k].header);
      g_assert_cmpstr (info->time_source, ==, times[k].source);
      g_assert_cmpstr (iso, ==, times[k].time);
      if (times[k].caution != NULL)
        g_assert_nonnull (tf_notes_find (info->cautions, times[k].caution));
      else
        g_assert_cmpuint (tf_notes_get_n (info->cautions), ==, 0);
    }
}

/* The turn by CROTA2, PC and CD, also near 180 deg: the same geometry. */
static void
test_turns (void)
{
  for (double c = -179.93; c < 180; c += 37.1)
    {
      g_autoptr (TfHeader) by_angle = tf_header_read (standard, -1),
                           by_pc = tf_header_read (standard, -1),
                           by_cd = tf_header_read (standard, -1);
      double cs = cos (c * TF_DEG), sn = sin (c * TF_DEG);
      const double m[4] = { cs, -sn, sn, cs };
      static const char *const pc[] = { "PC1_1", "PC1_2", "PC2_1", "PC2_2" }, *const cd[] = {
        "CD1_1", "CD1_2", "CD2_1", "CD2_2"
      };
      tf_header_set_number (by_angle, "CROTA2", c);
      tf_header_remove (by_pc, "CROTA2");
      tf_header_remove (by_cd, "CROTA2");
      for (int k = 0; k < 4; k++)
        {
          tf_header_set_number (by_pc, pc[k], m[k]);
          tf_header_set_number (by_cd, cd[k], m[k] * 20);
        }
      tf_header_remove (by_cd, "CDELT1");
      tf_header_remove (by_cd, "CDELT2");
      const TfHeader *headers[] = { by_angle, by_pc, by_cd };
      for (int k = 0; k < 3; k++)
        {
          g_autoptr (TfFrameInfo) info = tf_frame_info_read (headers[k], 100, 100);
          g_assert_cmpint (info->role, ==, TF_ROLE_FIELD);
          tf_check_angle ("north angle", tf_geometry_north_angle (&info->geometry), -c, 1e-6);
          tf_check_near ("scale", tf_geometry_scale_arcsec (&info->geometry), 20, 1e-9);
        }
    }
}

void
add_dialect_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autofree char *path = g_strdup_printf ("/frame/dialect/%s-%u", cases[k].dialect, k + 1);
      g_test_add_data_func (path, &cases[k], test_one);
    }
  g_test_add_func ("/frame/dialect/a-standard-header-is-left-alone", test_standard);
  g_test_add_func ("/frame/dialect/every-one-has-a-case-here", test_all_have_a_case);
  g_test_add_func ("/frame/info/units-become-gauss", test_units);
  g_test_add_func ("/frame/info/roles-and-refusals", test_roles);
  g_test_add_func ("/frame/info/observers-radius-and-distance", test_observers);
  g_test_add_func ("/frame/info/times", test_times);
  g_test_add_func ("/frame/info/turns-by-crota-pc-and-cd", test_turns);
}
