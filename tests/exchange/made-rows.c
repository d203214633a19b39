/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "made-rows.h"

#include <math.h>

#include "tf-study.h"

static void
free_row (gpointer data)
{
  TfRow *row = data;
  g_clear_pointer (&row->measure.cautions, g_ptr_array_unref);
  g_free (row);
}

static TfPole
pole (double flux, double lon, double lat)
{
  return (TfPole){ .flux_mx = flux,
                   .flux_sigma_mx = 0.02 * flux,
                   .lon_deg = lon - 200,
                   .carrington_lon_deg = lon,
                   .lat_deg = lat,
                   .place_sigma_deg = 0.05,
                   .rms_radius_deg = 1.2,
                   .pixels = 300,
                   .magnetic_area_msh = flux / 1e19 };
}

/* Texts are literals here: nothing frees them. */
static TfRow *
full_row (void)
{
  TfRow *row = g_new0 (TfRow, 1);
  *row = (TfRow){
    .mark = 7,
    .mark_id = (char *)"0123456789abcdef0123456789abcdef",
    .region_key = 3,
    .region = (char *)"T2013-0412",
    .passage = (char *)"fedcba",
    .origin = "changed",
    .label = (char *)"gannet",
    .note = (char *)"",
    .mw_class = (char *)"beta-gamma",
    .frame_path = (char *)"/invented/frames/brindle-20131012-0600.fits",
    .frame_checksum = (char *)"aa55",
    .method = (char *)"flux-centroid/1 floor-kind=even",
    .program_version = (char *)"0.1.0",
    .person = (char *)"north",
    .instrument = (char *)"BRINDLE-1K",
    .vantage = (char *)"earth",
    .kind = "disk",
    .time_source = (char *)"DATE-AVG",
    .simulated = TRUE,
  };
  row->measure = (TfMeasure){
    .time = tf_time_read ("2013-10-12T06:00:00Z"),
    .field_used = TF_FIELD_USED_RADIAL,
    .floor_kind = TF_FLOOR_EVEN,
    .floor_gauss = 48.25,
    .noise_gauss = 8,
    .scale = 1.0625,
    .positive = pole (8.8e21, 171.2, 13.1),
    .negative = pole (9.1e21, 177.3, 12.6),
    .leading_polarity = -1,
    .leading_sure = TRUE,
    .witnesses = { -1, -1, -1 },
    .lat_deg = 12.85,
    .carrington_lon_deg = 174.25,
    .stonyhurst_lon_deg = -25.75,
    .cmd_deg = -25.75,
    .mu = 0.875,
    .axis_bearing_deg = -4.8,
    .axis_tilt_deg = 4.8,
    .tilt_terms = { 0.5, 1.0, 0.25, 1.1456439237389600 },
    .separation_deg = 6.0,
    .separation_sigma_deg = 0.1,
    .separation_mm = 72.85,
    .compactness = 1.5,
    .pieces = 2,
    .flux_unsigned_mx = 1.79e22,
    .imbalance = -0.0167597765363128,
    .axial_dipole_gauss = 0.0123,
  };
  return row;
}

static TfRow *
hint_row (void)
{
  TfRow *row = full_row ();
  TfMeasure *m = &row->measure;
  row->is_hint = row->unipolar = TRUE;
  row->mark_id = (char *)"hint-1";
  row->region = row->passage = row->label = row->mw_class = row->person = (char *)"";
  row->origin = "hint";
  m->leading_polarity = 0;
  m->leading_sure = FALSE;
  m->negative = (TfPole){ .lon_deg = NAN, .carrington_lon_deg = NAN, .lat_deg = NAN };
  m->axis_bearing_deg = m->axis_tilt_deg = m->separation_deg = m->separation_sigma_deg
      = m->separation_mm = NAN;
  m->compactness = m->scale = m->tilt_terms.total = NAN;
  m->floor_kind = TF_FLOOR_LOCAL;
  m->cautions = tf_notes_new ();
  return row;
}

static TfRow *
awkward_row (void)
{
  TfRow *row = full_row ();
  row->mark_id = (char *)"awkward";
  row->region = (char *)"#1, \"so called\"";
  row->label = (char *)"two\r\nlines, <and> & more";
  row->person = (char *)"Zo\xc3\xab \xc3\x85s";       /* Zoë Ås */
  row->mw_class = (char *)"\xce\xb2\xce\xb3\xce\xb4"; /* beta gamma delta */
  row->instrument = (char *)" blanks about ";
  row->measure.axial_dipole_gauss = -1.0 / 3.0 * 1e-7;
  return row;
}

static TfRow *
map_row (void)
{
  TfRow *row = full_row ();
  TfMeasure *m = &row->measure;
  row->mark_id = (char *)"map";
  row->kind = "map";
  row->mw_class = (char *)"not a class";
  m->stonyhurst_lon_deg = m->cmd_deg = m->mu = NAN;
  m->time = TF_TIME_UNKNOWN;
  m->ephemeral = TRUE;
  return row;
}

GArray *
made_rows_new (GPtrArray **keep)
{
  TfRow *(*const makers[]) (void) = { full_row, hint_row, awkward_row, map_row };
  GArray *rows = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  *keep = g_ptr_array_new_with_free_func (free_row);
  for (guint k = 0; k < G_N_ELEMENTS (makers); k++)
    {
      TfExportRow made = { .row = makers[k]() };
      g_ptr_array_add (*keep, (gpointer)made.row);
      tf_sample_row_init (&made.sample);
      made.sample.axis_tilt_deg = made.row->measure.axis_tilt_deg;
      made.sample.leading_polarity = made.row->measure.leading_polarity;
      made.sample.leading_sure = made.row->measure.leading_sure != 0;
      made.sample.lat_deg = made.row->measure.lat_deg;
      made.verdict = (TfVerdict){ .kind = TF_VERDICT_KEEPS,
                                  .cycle = { .number = 24, .sure = TRUE },
                                  .expected = -1 };
      if (k % 2 == 1)
        made.verdict = (TfVerdict){ .kind = TF_VERDICT_CANNOT_SAY, .reason = "hale-no-polarity" };
      g_array_append_val (rows, made);
    }
  return rows;
}
