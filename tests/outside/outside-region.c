/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Measures regions on invented frames and, where they are there, on real ones, and hands
 * pixels, geometry, outline and result to region.py: one JSON document a line on standard
 * output, pixels as raw floats in files of the folder named.
 *
 * Usage: outside-region FOLDER DATA
 */

#include <math.h>
#include <stdio.h>

#include "region-builder.h"
#include "tf-constants.h"
#include "tf-json.h"

/* Pixels about the mask's box that go with it. */
enum
{
  MARGIN = 12
};

typedef struct
{
  const char *folder;
  guint n;
} Output;

static void
build_geometry (JsonBuilder *builder, const TfGeometry *g)
{
  tf_json_numbers (builder, "crpix", g->crpix, 2);
  tf_json_numbers (builder, "crval_deg", g->crval_deg, 2);
  tf_json_numbers (builder, "cd_deg", &g->cd[0][0], 4);
  tf_json_number (builder, "distance_m", g->observer.distance_m);
  tf_json_number (builder, "b0_deg", g->observer.b0_deg);
  tf_json_number (builder, "l0_deg", g->observer.carrington_lon_deg);
  tf_json_number (builder, "radius_mm", g->radius_mm);
}

static void
build_noise (JsonBuilder *builder, const TfFrame *frame)
{
  json_builder_set_member_name (builder, "sigma");
  json_builder_begin_array (builder);
  for (guint k = 0; k <= 512; k++)
    {
      double pair[2] = { k / 512.0, tf_frame_noise_at (frame, k / 512.0) };
      tf_json_numbers (builder, NULL, pair, 2);
    }
  json_builder_end_array (builder);
  tf_json_number (builder, "correlation", tf_frame_noise_correlation (frame));
}

/* The box of the frame about the mask, as raw floats. */
static void
write_pixels (JsonBuilder *builder, const TfFrame *frame, const TfMask *mask, const char *path)
{
  guint x0, y0, w, h;
  tf_mask_get_box (mask, &x0, &y0, &w, &h);
  guint left = x0 > MARGIN ? x0 - MARGIN : 0, low = y0 > MARGIN ? y0 - MARGIN : 0;
  guint right = MIN (x0 + w + MARGIN, tf_frame_get_width (frame)),
        top = MIN (y0 + h + MARGIN, tf_frame_get_height (frame));
  double box[4] = { left, low, right - left, top - low }, inner[4] = { x0, y0, w, h };
  FILE *file = fopen (path, "wb");
  g_assert_nonnull (file);
  for (guint y = low; y < top; y++)
    fwrite (tf_frame_get_pixels (frame) + (gsize)y * tf_frame_get_width (frame) + left,
            sizeof (float), right - left, file);
  fclose (file);
  tf_json_string (builder, "pixels", path);
  tf_json_numbers (builder, "box", box, 4);
  tf_json_numbers (builder, "mask_box", inner, 4);
  tf_json_int (builder, "mask_pixels", tf_mask_get_n (mask));
}

static void
put_out (Output *out, const char *name, const TfFrame *frame, const TfOutline *outline,
         const TfMeasureParams *params)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_strdup_printf ("%s/box-%u.f32", out->folder, out->n++);
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, params->mu_min, (guint)params->law);
  g_auto (TfMeasure) m = { 0 };
  tf_measure_masked (&m, frame, mask, outline, params, &error);
  g_assert_no_error (error);
  json_builder_begin_object (builder);
  tf_json_string (builder, "name", name);
  build_geometry (builder, tf_frame_get_geometry (frame));
  build_noise (builder, frame);
  write_pixels (builder, frame, mask, path);
  tf_json_bool (builder, "radial_product", tf_frame_get_info (frame)->field == TF_FIELD_RADIAL);
  json_builder_set_member_name (builder, "params");
  tf_options_build_json (tf_measure_options, params, builder);
  json_builder_set_member_name (builder, "outline");
  g_autoptr (TfOutline) here = tf_mask_outline (frame, outline, (guint)params->law);
  tf_outline_build_json (here, builder);
  json_builder_set_member_name (builder, "measure");
  json_builder_begin_object (builder);
  tf_measure_build_members (&m, builder);
  json_builder_end_object (builder);
  json_builder_end_object (builder);
  g_autofree char *text = tf_json_dup_text (builder, FALSE);
  printf ("%s\n", text);
}

/* -- invented regions -------------------------------------------------------------------------- */

typedef struct
{
  double lon, lat, scale, turn, b0, distance, noise, even, great_circle, observed;
} Invented;

static const Invented invented[] = {
  { 0, 12, 2.0, 0, 4.0, 1.0, 10, 0, 0, 0 },    { -48, -20, 2.0, 180, -7.0, 0.983, 12, 90, 0, 0 },
  { 55, 25, 0.6, 33, 0.0, 1.016, 8, 0, 1, 0 }, { 20, -33, 4.0, -77, 6.0, 0.99, 15, 60, 0, 0 },
  { -30, 8, 3.0, 121, 3.0, 0.6, 9, 0, 0, 1 },  { 62, -6, 1.0, 3.1, -2.0, 1.0, 10, 120, 1, 0 },
};

static void
invent (Output *out, guint k)
{
  const Invented *v = &invented[k];
  BuilderFrame how;
  BuilderPole poles[5];
  TfMeasureParams params;
  g_autofree char *name = g_strdup_printf ("invented %u", k + 1);
  builder_init (&how, v->lon, v->lat, v->scale);
  how.turn_deg = v->turn;
  how.b0_deg = v->b0;
  how.distance_au = v->distance;
  how.noise = v->noise;
  how.fine = 2;
  builder_bipole (poles, v->lon, v->lat, 4.5, 7.0 * k - 15.0, 9e21, k % 2 ? 1 : -1);
  poles[2] = poles[1];
  poles[2].lon -= 1.6;
  poles[2].lat += 1.1;
  poles[2].flux *= 0.35;
  poles[2].sigma = 0.4;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 3);
  g_autoptr (TfOutline) cap = builder_cap (v->lon, v->lat, 5.4);
  TfVertex hole[4] = { { BUILDER_L0 + v->lon - 0.6, v->lat - 3.1 },
                       { BUILDER_L0 + v->lon + 0.9, v->lat - 3.3 },
                       { BUILDER_L0 + v->lon + 1.2, v->lat - 2.0 },
                       { BUILDER_L0 + v->lon - 0.4, v->lat - 1.8 } };
  g_autoptr (TfOutline) outline = tf_outline_with_ring (cap, hole, 4, k % 2 == 0, NULL);
  g_assert_nonnull (outline);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  params.tilt_form = v->great_circle > 0.0;
  params.field_used = v->observed > 0.0 ? TF_FIELD_USED_OBSERVED : TF_FIELD_USED_RADIAL;
  if (v->even > 0.0)
    {
      params.floor_kind = TF_FLOOR_EVEN;
      params.floor_gauss = v->even;
    }
  put_out (out, name, frame, outline, &params);
}

/* A frame of noise alone, whose sigma another library finds too. */
static void
quiet (Output *out)
{
  BuilderFrame how;
  TfMeasureParams params;
  builder_init (&how, 10.0, 5.0, 2.0);
  how.noise = 13.0;
  how.half_deg = 14.0;
  how.fine = 1;
  g_autoptr (TfFrame) frame = builder_frame (&how, NULL, 0);
  g_autoptr (TfOutline) outline = builder_cap (10.0, 5.0, 9.0);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  put_out (out, "quiet", frame, outline, &params);
}

/* -- real regions ------------------------------------------------------------------------------ */

typedef struct
{
  const char *file;
  double cmd, lat, radius;
} Real;

static const Real real[] = {
  { "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", -15, 15, 7.5 },
  { "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", 44, -17, 10.0 },
  { "mdi.fd_M_96m_lev182.20110401_000000_TAI.data.fits", 21, -17, 5.0 },
  { "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", 3, -21, 9.0 },
  { "mdi.fd_m_96m_lev182.20101015_000000_TAI.data.fits", -62, 17, 5.0 },
  { "sdo-hmi_2011-02-14_20-34-12.fits", 11, -21, 5.5 },
};

static void
measure_real (Output *out, const Real *r, const char *data)
{
  TfMeasureParams params;
  g_autoptr (GError) error = NULL;
  g_autofree char *path = g_build_filename (data, "magnetograms", r->file, NULL);
  g_autofree char *name = g_strdup_printf ("%.20s at %+.0f %+.0f", r->file, r->cmd, r->lat);
  if (!g_file_test (path, G_FILE_TEST_EXISTS))
    return;
  g_autoptr (TfFrame) frame = tf_frame_open (path, &(TfFrameSpec){ 0 }, NULL, &error);
  g_assert_no_error (error);
  double l0 = tf_geometry_central_carrington (tf_frame_get_geometry (frame));
  g_autoptr (TfOutline) cap
      = tf_outline_new_cap (tf_frame_get_info (frame)->time, l0 + r->cmd, r->lat, r->radius, 40);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  put_out (out, name, frame, cap, &params);
}

int
main (int argc, char **argv)
{
  if (argc < 3)
    return 2;
  Output out = { argv[1], 0 };
  for (guint k = 0; k < G_N_ELEMENTS (invented); k++)
    invent (&out, k);
  quiet (&out);
  for (guint k = 0; k < G_N_ELEMENTS (real); k++)
    measure_real (&out, &real[k], argv[2]);
  return 0;
}
