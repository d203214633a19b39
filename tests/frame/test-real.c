/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>
#include <string.h>

#include "tf-check.h"
#include "tf-constants.h"
#include "tf-witness.h"

/* What every real file must be, written down from its header and from the data's index before
 * the library was asked. Stonyhurst longitudes are sunpy 4.1's of an observer at the header's
 * Carrington place and distance, the Earth's places its L0, B0 and earth_distance. NaN in a
 * number: no value expected. An empty @refusal: a field that opens. */
typedef struct
{
  const char *file;
  TfKind kind;
  TfRole role;
  TfFieldKind field;
  const char *refusal, *cautions;
  const char *time, *source;
  double au, b0, stonyhurst, carrington;
  TfObserverSource observer;
  double scale, north;
  const char *instrument;
  double rotation;
} Truth;

#define NONE NAN, NAN, NAN, NAN, TF_OBSERVER_UNKNOWN, NAN, NAN

static const Truth truths[] = {
  { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", TF_KIND_DISK, TF_ROLE_FIELD,
    TF_FIELD_LOS, "", "", "2010-10-15T00:02:56Z", "T_OBS", 147937426993.65 / TF_AU_M, 5.91587,
    0.09975, 203.46173, TF_OBSERVER_HEADER, 1.986008, 0, "SOHO MDI", NAN },
  { "magnetograms/mdi.fd_M_96m_lev182.20101015_191200_TAI.data.fits", TF_KIND_DISK, TF_ROLE_FIELD,
    TF_FIELD_LOS, "", "limb-off", "2010-10-15T19:14:56Z", "T_OBS", 147904704539.75 / TF_AU_M,
    5.85769, 0.09278, 192.90198, TF_OBSERVER_HEADER, 31.77609, 0, "SOHO MDI", NAN },
  { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", TF_KIND_DISK, TF_ROLE_FIELD,
    TF_FIELD_LOS, "", "", "2011-04-01T00:02:56Z", "T_OBS", 148184496664.88 / TF_AU_M, -6.5318,
    0.15332, 149.875, TF_OBSERVER_HEADER, 1.986059, -3.0978, "SOHO MDI", NAN },
  /* OBS_R0 = 984.9524" and 695.7 Mm give 0.97389 au; DSUN_OBS says 1 au, which is not the
   * spacecraft's place */
  { "magnetograms/mdi_fd_M_96m_01d.5874.0005_s.fits", TF_KIND_DISK, TF_ROLE_FIELD, TF_FIELD_LOS, "",
    "distance-disagrees", "2009-01-31T08:02:56Z", "T_OBS", 0.973887, -6.02897, -0.07848, 130.88929,
    TF_OBSERVER_HEADER, 15.88479, 180, "SOHO MDI", NAN },
  { "magnetograms/mwo_m110331_1781_0na1.fits", TF_KIND_DISK, TF_ROLE_FIELD, TF_FIELD_LOS, "",
    "north-taken-up limb-off", "2011-03-31T17:48:50Z", "TAVG-UT", 0.9990002, -6.58111, 0.0123,
    153.1617, TF_OBSERVER_HEADER_EARTH, 3.75077, 0, "MT. WILSON 150 ft", NAN },
  { "magnetograms/sdo-hmi_2011-02-14_20-34-12.fits", TF_KIND_CUT_OUT, TF_ROLE_FIELD, TF_FIELD_LOS,
    "", "", "2011-02-14T20:34:35Z", "T_OBS", 147699950484.1 / TF_AU_M, -6.803794, 0.0741, 24.698355,
    TF_OBSERVER_HEADER, 0.504228, -179.929855, "SDO/HMI", NAN },
  { "magnetograms/FGMG4_20110214_030443.7_v80640.fits", TF_KIND_CUT_OUT, TF_ROLE_FIELD,
    TF_FIELD_LOS, "", "stokes-sign unit-missing header-of-another-size", "2011-02-14T03:04:56Z",
    "DATE-OBS", 0.9874191, -6.77506, 0, 34.22272, TF_OBSERVER_EARTH, 0.16, -0.412043,
    "HINODE SOT/NB", NAN },
  { "magnetograms/synthetic_no_date_no_ctype.fits", TF_KIND_UNKNOWN, TF_ROLE_REFUSED, TF_FIELD_LOS,
    "no-time-no-place", "unit-missing content-unknown time-unknown", NULL, "unknown", NONE,
    "Example Data", NAN },

  { "maps/mrbqs240330t0704c2282_071.fits", TF_KIND_MAP, TF_ROLE_FIELD, TF_FIELD_UNKNOWN, "",
    "field-kind-unknown", "2024-03-30T07:04:00Z", "DATE-OBS", NONE, "NSO-GONG", 2282 },
  { "maps/hmi.mrdailysynframe_small_720s.20181106_120000_TAI.data.fits", TF_KIND_MAP, TF_ROLE_FIELD,
    TF_FIELD_RADIAL, "", "missing-data", "2018-11-06T11:55:31Z", "T_OBS", NONE, "SDO/HMI", 2210 },
  { "maps/swmf_test.fits", TF_KIND_MAP, TF_ROLE_FIELD, TF_FIELD_UNKNOWN, "",
    "field-kind-unknown header-of-another-map", "1997-05-08T11:27:29Z", "T_OBS", NONE, "SOHO MDI",
    1922 },
  { "maps/adapt40311_03k012_201707200800_i00015600n1.fts.gz", TF_KIND_MODEL_MAP, TF_ROLE_FIELD,
    TF_FIELD_UNKNOWN, "", "unit-missing field-kind-unknown cube", "2017-07-20T08:00:00Z", "MAPTIME",
    NONE, "ADAPT", 2193 },

  { "headers/sunpy_gong_magnetogram.header", TF_KIND_DISK, TF_ROLE_FIELD, TF_FIELD_LOS, "",
    "start-or-middle", "2025-01-09T01:34:58Z", "DATE-OBS", 0.983369126, -3.93743, -0.0097,
    330.44058, TF_OBSERVER_HEADER, 975.454 / 385.2565, 0, "NSO-GONG", NAN },
  { "headers/sunpy_gong_halpha.header", TF_KIND_DISK, TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha",
    "start-or-middle north-taken-up", "2024-02-16T00:00:02Z", "DATE-OBS", 0.987326, -6.84025,
    0.0356, 341.74281, TF_OBSERVER_HEADER, 971.54457 / 900, 0, "NSO-GONG", NAN },
  { "headers/sunpy_gong_synoptic.header", TF_KIND_MAP, TF_ROLE_FIELD, TF_FIELD_UNKNOWN, "",
    "field-kind-unknown", "2023-09-30T06:44:00Z", "DATE-OBS", NONE, "NSO-GONG", 2276 },
  { "headers/sunpy_hmi_synoptic.header", TF_KIND_MAP, TF_ROLE_FIELD, TF_FIELD_RADIAL, "", "",
    "2018-11-09T12:30:15Z", "T_OBS", NONE, "SDO/HMI", 2210 },
  { "headers/sunpy_mdi_synoptic.header", TF_KIND_MAP, TF_ROLE_FIELD, TF_FIELD_RADIAL, "",
    "impossible-cdelt2", "2010-07-27T00:08:31Z", "T_OBS", NONE, "SOHO MDI", 2099 },
  { "headers/sunpy_mdi.fd_Ic.20101015_230100_TAI.data.header", TF_KIND_DISK, TF_ROLE_INTENSITY,
    TF_FIELD_UNKNOWN, "intensity", "", "2010-10-15T23:00:26Z", "T_OBS", 147898297373.48 / TF_AU_M,
    5.84617, 0.0914, 190.83495, TF_OBSERVER_HEADER, 15.888041, 0, "SOHO MDI", NAN },
  { "headers/sunpy_solo_L2_phi-hrt-blos_20220307T000009_V202208311927_0243070101.header",
    TF_KIND_CUT_OUT, TF_ROLE_FIELD, TF_FIELD_LOS, "", "", "2022-03-07T00:00:32Z", "DATE-AVG",
    0.50143555, -4.29241, -0.61965, 5.88158, TF_OBSERVER_HEADER, 0.5, 0.59185, "SOLO/PHI/HRT",
    NAN },
  { "headers/sunpy_solo_L2_phi-hrt-bazi_20220307T000009_V202208311927_0243070101.header",
    TF_KIND_CUT_OUT, TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "azimuth", "", "2022-03-07T00:00:32Z",
    "DATE-AVG", 0.50143555, -4.29241, -0.61965, 5.88158, TF_OBSERVER_HEADER, 0.5, 0.59185,
    "SOLO/PHI/HRT", NAN },
  { "headers/sunpy_solo_LL02_phi-fdt-blos_20240305T041509_V202405151730C_0403057611.header",
    TF_KIND_DISK, TF_ROLE_FIELD, TF_FIELD_LOS, "", "", "2024-03-05T04:15:52Z", "DATE-AVG",
    0.62493847, -4.71244, -21.82038, 80.3866, TF_OBSERVER_HEADER, 7.148, -121.33361, "SOLO/PHI/FDT",
    NAN },
  { "headers/sunpy_svsm_e3100_S2_20110625_1856.header", TF_KIND_DISK, TF_ROLE_REFUSED,
    TF_FIELD_UNKNOWN, "helium-line", "start-or-middle", "2011-06-25T18:56:07Z", "DATE-OBS", 1.01606,
    2.2301, -0.014, 95.51645, TF_OBSERVER_HEADER, 1.0000, 0, "solis vsm", NAN },

  { "broken/mdi.fd_Ic.20101015_230100_TAI.data.fits", TF_KIND_DISK, TF_ROLE_INTENSITY,
    TF_FIELD_UNKNOWN, "intensity", "", "2010-10-15T23:00:26Z", "T_OBS", 147898297373.48 / TF_AU_M,
    5.84617, 0.0914, 190.83495, TF_OBSERVER_HEADER, 15.888041, 0, "SOHO MDI", NAN },
  { "broken/resampled_hmi_CONTINUUM.fits", TF_KIND_DISK, TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN,
    "intensity", "", "2014-03-01T00:00:50Z", "T_OBS", 148205511547.72 / TF_AU_M, -7.226688, 0.0713,
    132.560135, TF_OBSERVER_HEADER, 20.655759, -179.929779, "SDO/HMI", NAN },
};

static TfFrameInfo *
info_of_text (const char *path)
{
  g_autofree char *text = NULL;
  gsize n = 0;
  g_assert_true (g_file_get_contents (path, &text, &n, NULL));
  g_autoptr (TfHeader) header = tf_header_read (text, (gssize)n);
  return tf_frame_info_read (header, (guint)tf_header_int (header, "NAXIS1", 0),
                             (guint)tf_header_int (header, "NAXIS2", 0));
}

static void
check_near_or_none (const char *what, double got, double expected, double tolerance)
{
  if (isnan (expected))
    tf_check_nan (what, got);
  else
    tf_check_near (what, got, expected, tolerance);
}

static void
check_info (const Truth *t, const TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  g_autofree char *codes = tf_notes_dup_codes (info->cautions),
                  *iso = tf_time_dup_iso (info->time, 0);
  g_assert_cmpstr (tf_kind_name (info->kind), ==, tf_kind_name (t->kind));
  g_assert_cmpstr (tf_role_name (info->role), ==, tf_role_name (t->role));
  g_assert_cmpstr (tf_field_name (info->field), ==, tf_field_name (t->field));
  g_assert_cmpstr (info->refusal != NULL ? tf_note_get_code (info->refusal) : "", ==, t->refusal);
  g_assert_cmpstr (codes, ==, t->cautions);
  g_assert_cmpstr (iso, ==, t->time);
  g_assert_cmpstr (info->time_source, ==, t->source);
  g_assert_cmpstr (info->instrument, ==, t->instrument);
  check_near_or_none ("rotation", info->rotation_number, t->rotation, 0);
  if (t->kind == TF_KIND_UNKNOWN)
    return;
  check_near_or_none ("distance, au", g->observer.distance_m / TF_AU_M, t->au, 3e-6);
  check_near_or_none ("B0", g->observer.b0_deg, t->b0, 2e-5);
  check_near_or_none ("Carrington longitude", g->observer.carrington_lon_deg, t->carrington, 2e-5);
  check_near_or_none ("Stonyhurst longitude", g->observer.stonyhurst_lon_deg, t->stonyhurst, 1e-4);
  g_assert_cmpint (g->observer.source, ==, t->observer);
  if (tf_geometry_is_map (g))
    return;
  tf_check_near ("scale", tf_geometry_scale_arcsec (g) / t->scale, 1, 1e-5);
  tf_check_angle ("north angle", tf_geometry_north_angle (g), t->north, 5e-4);
}

static void
test_file (gconstpointer data)
{
  const Truth *t = data;
  g_autofree char *path = shared_data (t->file);
  g_autoptr (GError) error = NULL;
  if (path == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  if (g_str_has_suffix (path, ".header"))
    {
      g_autoptr (TfFrameInfo) info = info_of_text (path);
      check_info (t, info);
      return;
    }
  g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, &error);
  if (t->role == TF_ROLE_FIELD)
    {
      g_assert_no_error (error);
      check_info (t, tf_frame_get_info (frame));
      g_assert_cmpfloat (tf_frame_noise_at (frame, 0.7), >, 0.1);
      return;
    }
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_REFUSED);
  g_autoptr (TfFrameInfo) info = tf_frame_look (path, NULL, NULL, NULL);
  g_assert_nonnull (info);
  check_info (t, info);
  g_autoptr (TfFrame) companion = tf_frame_open_companion (path, NULL, NULL, NULL);
  g_assert_true ((companion != NULL) == (t->role == TF_ROLE_INTENSITY));
}

/* Where the corner columns and rows of the maps lie: longitude of the first and last column,
 * latitude of the first row. */
static void
test_map_corners (void)
{
  static const struct
  {
    const char *file;
    double first, last, sin_lat, tolerance;
  } maps[] = {
    { "maps/mrbqs240330t0704c2282_071.fits", 71.5, 70.5, 89.5 / 90, 1e-4 },
    { "maps/hmi.mrdailysynframe_small_720s.20181106_120000_TAI.data.fits", 160, 159.5,
      179.5 * 0.005556, 1e-6 },
    { "maps/swmf_test.fits", 0.55, 359.55, 179.0 / 180, 1e-6 },
    { "maps/adapt40311_03k012_201707200800_i00015600n1.fts.gz", 0.5, 359.5, sin (89.5 * TF_DEG),
      1e-6 },
    { "headers/sunpy_hmi_synoptic.header", 0.3, 359.8, 179.5 * 0.005556, 1e-6 },
    { "headers/sunpy_mdi_synoptic.header", 0.3, 359.8, 359.0 / 360, 1e-6 },
    { "headers/sunpy_gong_synoptic.header", 310.5, 309.5, 89.5 / 90, 1e-4 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (maps); k++)
    {
      g_autofree char *path = shared_data (maps[k].file);
      if (path == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      g_autoptr (TfFrameInfo) info = g_str_has_suffix (path, ".header")
                                         ? info_of_text (path)
                                         : tf_frame_look (path, NULL, NULL, NULL);
      TfPlace a, b;
      const TfGeometry *g = &info->geometry;
      g_assert_true (tf_geometry_pixel_to_sun (g, 1, 1, &a));
      g_assert_true (tf_geometry_pixel_to_sun (g, g->width, g->height, &b));
      tf_check_angle (maps[k].file, a.carrington_lon_deg, maps[k].first, 1e-4);
      tf_check_angle (maps[k].file, b.carrington_lon_deg, maps[k].last, 1e-4);
      tf_check_near (maps[k].file, sin (a.lat_deg * TF_DEG), -maps[k].sin_lat, maps[k].tolerance);
      tf_check_near (maps[k].file, sin (b.lat_deg * TF_DEG), maps[k].sin_lat, maps[k].tolerance);
    }
}

/* The network's own second set of axes gives the rotation of each column (CRVAL1A, CRPIX1A,
 * CDELT1A); the daily map's edge that was seen last is at most three days ahead of its time. */
static void
test_column_times (void)
{
  g_autofree char *path = shared_data ("maps/mrbqs240330t0704c2282_071.fits");
  g_autofree char *daily
      = shared_data ("maps/hmi.mrdailysynframe_small_720s.20181106_120000_TAI.data.fits");
  if (path == NULL || daily == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  g_autoptr (TfFrameInfo) info = tf_frame_look (path, NULL, NULL, NULL);
  for (double x = 1; x <= 360; x += 40)
    {
      double rotation = 2282.302778 - 0.00277777777778 * (x - 180.5);
      tf_check_near ("rotation of a column",
                     tf_carrington_rotation (tf_frame_info_column_time (info, x)), rotation, 1e-5);
    }
  g_assert_false (tf_time_is_known (tf_frame_info_column_time (info, 361)));
  g_autoptr (TfFrameInfo) frame = tf_frame_look (daily, NULL, NULL, NULL);
  TfTime first = tf_frame_info_column_time (frame, 1),
         last = tf_frame_info_column_time (frame, 720);
  /* the first column was 60 deg east of the centre at T_OBS: its passage is 60 / 13.2 days later
   * (common practice, no source) */
  tf_check_near ("days ahead", (first.s - frame->time.s) / TF_DAY_S, 60 / 13.2, 0.1);
  tf_check_near ("days between the edges", (first.s - last.s) / TF_DAY_S, 27.2753 * 719 / 720, 0.4);
}

/* Leading polarity by the flux in a box about the place in the daily region summaries (data
 * index): +1 or -1. */
static int
western_polarity (const TfFrame *frame, double lat, double cmd, double half_arcsec)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double x, y, lon[2] = { 0, 0 }, flux[2] = { 0, 0 };
  double centre = tf_geometry_central_carrington (g),
         half = half_arcsec / tf_geometry_scale_arcsec (g);
  g_assert_true (tf_geometry_sun_to_pixel (g, tf_wrap_360 (centre + cmd), lat, &x, &y, NULL));
  for (double v = ceil (y - half); v <= y + half; v++)
    for (double u = ceil (x - half); u <= x + half; u++)
      {
        double value = tf_frame_value (frame, u, v);
        TfPlace p;
        if (fabs (value) < 100 || isnan (value) || !tf_geometry_pixel_to_sun (g, u, v, &p))
          continue;
        flux[value > 0] += fabs (value) / p.mu;
        lon[value > 0] += fabs (value) / p.mu * p.cmd_deg;
      }
  g_assert_true (flux[0] > 0 && flux[1] > 0);
  return lon[1] / flux[1] > lon[0] / flux[0] ? 1 : -1;
}

static void
test_polarities (void)
{
  static const struct
  {
    const char *file;
    const char *region;
    double lat, cmd, half;
    int western;
  } regions[] = {
    { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", "11183", 15, -15, 90, -1 },
    { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", "11180", 24, 12, 90, -1 },
    { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", "11178", -17, 21, 90, 1 },
    { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", "11181", -27, 7, 90, 1 },
    { "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", "11176", -16, 51, 130, 1 },
    { "magnetograms/sdo-hmi_2011-02-14_20-34-12.fits", "11158", -21, 11, 90, 1 },
    { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", "11112", -19, 3, 90, 1 },
    { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", "11114", -22, 41, 90, 1 },
    { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", "11113", 17, -62, 90, -1 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (regions); k++)
    {
      g_autofree char *path = shared_data (regions[k].file);
      if (path == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, NULL);
      g_test_message ("region %s", regions[k].region);
      g_assert_cmpint (western_polarity (frame, regions[k].lat, regions[k].cmd, regions[k].half),
                       ==, regions[k].western);
    }
}

static void
test_witness_pair (void)
{
  g_autofree char *one
      = shared_data ("magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits");
  g_autofree char *two
      = shared_data ("magnetograms/mdi.fd_M_96m_lev182.20101015_191200_TAI.data.fits");
  if (one == NULL || two == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  g_autoptr (TfFrame) a = tf_frame_open (one, NULL, NULL, NULL),
                      b = tf_frame_open (two, NULL, NULL, NULL);
  double score[4];
  g_assert_cmpint (tf_orientation_witness (a, b, score, NULL), ==, TF_WITNESS_AGREES);
  g_test_message ("%.3f %.3f %.3f %.3f", score[0], score[1], score[2], score[3]);
  /* the same pair under a header turned by 180 deg */
  const TfGeometry *g = tf_frame_get_geometry (a), *h = tf_frame_get_geometry (b);
  TfGeometry turned_a = *g, turned_b = *h;
  for (int i = 0; i < 2; i++)
    for (int j = 0; j < 2; j++)
      {
        turned_a.cd[i][j] = -turned_a.cd[i][j];
        turned_b.cd[i][j] = -turned_b.cd[i][j];
      }
  g_assert_true (tf_geometry_make (&turned_a) && tf_geometry_make (&turned_b));
  g_autoptr (TfFrame) c = tf_frame_with_geometry (a, &turned_a, NULL),
                      d = tf_frame_with_geometry (b, &turned_b, NULL);
  g_assert_cmpint (tf_orientation_witness (c, d, NULL, NULL), ==, TF_WITNESS_TURNED);
}

/* In these frames the circle of valid pixels equals RSUN_OBS to 0.1" and is centred on CRPIX to
 * 0.02" (data index). */
static void
test_real_limb (void)
{
  static const char *const files[]
      = { "magnetograms/mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits",
          "magnetograms/mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits" };
  for (guint k = 0; k < 2; k++)
    {
      g_autofree char *path = shared_data (files[k]);
      if (path == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      double x, y;
      g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, NULL);
      const TfGeometry *g = tf_frame_get_geometry (frame);
      TfLimbFit fit = tf_limb_fit (tf_frame_get_pixels (frame), g);
      g_assert_true (fit.found && tf_geometry_disk_centre (g, &x, &y));
      tf_check_near ("radius", fit.radius_px, tf_geometry_disk_radius (g), 0.1);
      tf_check_near ("centre x", fit.centre_x, x, 0.05);
      tf_check_near ("centre y", fit.centre_y, y, 0.05);
    }
}

static void
test_planes (void)
{
  g_autofree char *path = shared_data ("maps/adapt40311_03k012_201707200800_i00015600n1.fts.gz");
  g_autoptr (GError) error = NULL;
  if (path == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  TfFrameSpec one = { 0, 1 }, last = { 0, 12 }, beyond = { 0, 13 }, table = { 2, 1 };
  g_autoptr (TfFrame) a = tf_frame_open (path, &one, NULL, NULL),
                      b = tf_frame_open (path, &last, NULL, NULL);
  g_assert_nonnull (a);
  g_assert_nonnull (b);
  g_assert_cmpuint (tf_frame_get_info (a)->n_planes, ==, 12);
  gsize bytes = (gsize)360 * 180 * sizeof (float);
  g_assert_true (memcmp (tf_frame_get_pixels (a), tf_frame_get_pixels (b), bytes) != 0);
  g_assert_null (tf_frame_open (path, &beyond, NULL, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ);
  g_clear_error (&error);
  g_assert_null (tf_frame_open (path, &table, NULL, &error));
  g_assert_error (error, TF_FRAME_ERROR, TF_FRAME_ERROR_READ);
}

void
add_real_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (truths); k++)
    {
      g_autofree char *path = g_strdup_printf ("/frame/real/%s", truths[k].file);
      g_strdelimit (path + strlen ("/frame/real/"), "/", '-');
      g_test_add_data_func (path, &truths[k], test_file);
    }
  g_test_add_func ("/frame/real/corners-of-the-maps", test_map_corners);
  g_test_add_func ("/frame/real/columns-of-maps-have-their-times", test_column_times);
  g_test_add_func ("/frame/real/leading-polarities-of-nine-regions", test_polarities);
  g_test_add_func ("/frame/real/the-witness-on-a-pair", test_witness_pair);
  g_test_add_func ("/frame/real/the-limb-is-where-the-header-says", test_real_limb);
  g_test_add_func ("/frame/real/planes-and-hdus", test_planes);
}
