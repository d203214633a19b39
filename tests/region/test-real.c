/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Real frames: leading polarity, hemisphere and place of nine regions. Source: daily region
 * summaries of others and fluxes summed by hand in fixed boxes, as listed beside the data
 * (INDEX.md); kept outside the project. */

#include <math.h>

#include "region-builder.h"

#define FRAME_2011 "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits"
#define FRAME_2010 "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits"
#define CUT_OUT    "sdo-hmi_2011-02-14_20-34-12.fits"

typedef struct
{
  const char *frame, *name;
  double lat, cmd; /* deg; west positive */
  int leader;
  double radius;               /* of the cap that is measured, deg */
  double shift_lon, shift_lat; /* of the cap against the place in the list */
} RealRegion;

static const RealRegion regions[] = {
  { FRAME_2011, "11183", 15, -15, -1, 7.5, 0, 0 },
  { FRAME_2011, "11180", 24, 12, -1, 6.0, 0, 0 },
  { FRAME_2011, "11178", -17, 21, 1, 5.0, 0, 0 },
  { FRAME_2011, "11181", -27, 7, 1, 6.0, -4, -2 },
  { FRAME_2011, "11176", -16, 51, 1, 10.0, -7, -1 },
  { CUT_OUT, "11158", -21, 11, 1, 5.5, 0, 0 },
  { FRAME_2010, "11112", -19, 3, 1, 9.0, 0, -2 },
  { FRAME_2010, "11114", -22, 41, 1, 3.0, 1, 1 },
  { FRAME_2010, "11113", 17, -62, -1, 5.0, 0, 0 },
};

static TfFrame *
open_real (const char *name)
{
  const char *path = builder_real (name);
  g_autoptr (GError) error = NULL;
  if (path == NULL)
    return NULL;
  TfFrame *frame = tf_frame_open (path, &(TfFrameSpec){ 0 }, NULL, &error);
  g_assert_no_error (error);
  return frame;
}

static void
test_region (gconstpointer data)
{
  const RealRegion *r = data;
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrame) frame = open_real (r->frame);
  if (frame == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  double l0 = tf_geometry_central_carrington (tf_frame_get_geometry (frame));
  g_autoptr (TfOutline) cap
      = tf_outline_new_cap (tf_frame_get_info (frame)->time, l0 + r->cmd + r->shift_lon,
                            r->lat + r->shift_lat, r->radius, 0);
  g_auto (TfMeasure) m = { 0 };
  tf_measure_params_init (&params);
  tf_measure_region (&m, frame, cap, &params, &error);
  g_assert_no_error (error);
  g_autofree char *codes = tf_notes_dup_codes (m.cautions);
  g_test_message ("%s: N%+.1f W%+.1f flux %.2e leader %+d%s tilt %.1f +- %.1f separation %.1f [%s]",
                  r->name, m.lat_deg, m.cmd_deg, m.flux_unsigned_mx, m.leading_polarity,
                  m.leading_sure ? " sure" : "", m.axis_tilt_deg, m.tilt_terms.total,
                  m.separation_deg, codes);
  g_assert_cmpint (m.leading_polarity, ==, r->leader);
  g_assert_cmpint (m.lat_deg > 0.0, ==, r->lat > 0.0);
  tf_check_near ("latitude", m.lat_deg, r->lat, 4.0);
  tf_check_near ("distance from central meridian", m.cmd_deg, r->cmd, 8.0);
}

void
add_real_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (regions); k++)
    {
      g_autofree char *path
          = g_strdup_printf ("/region/real/%s-has-its-leader-and-place", regions[k].name);
      g_test_add_data_func (path, &regions[k], test_region);
    }
}
