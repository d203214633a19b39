/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-study.h"

#include <math.h>
#include <glib/gstdio.h>

TfMeasure
test_study_measure (double lat, int leading)
{
  double h = lat < 0 ? -1 : 1;
  TfPole lead = { .flux_mx = 5.5e21,
                  .lon_deg = 12,
                  .carrington_lon_deg = 112,
                  .lat_deg = lat - 0.3 * h,
                  .place_sigma_deg = 0.05 };
  TfPole follow = { .flux_mx = 4.5e21,
                    .lon_deg = 8,
                    .carrington_lon_deg = 108,
                    .lat_deg = lat + 0.3 * h,
                    .place_sigma_deg = 0.05 };
  TfMeasure m = {
    .time = tf_time_read ("2013-06-01T00:00:00Z"),
    .floor_kind = TF_FLOOR_LOCAL,
    .floor_gauss = 40,
    .noise_gauss = 10,
    .scale = NAN,
    .positive = leading > 0 ? lead : follow,
    .negative = leading > 0 ? follow : lead,
    .leading_polarity = leading,
    .leading_sure = TRUE,
    .witnesses = { leading, leading, TF_WITNESS_ABSENT },
    .lat_deg = lat,
    .carrington_lon_deg = 110,
    .stonyhurst_lon_deg = 10,
    .cmd_deg = 10,
    .mu = 0.9,
    .axis_bearing_deg = -8.5 * h,
    .axis_tilt_deg = 8.5,
    .tilt_terms = { 0.5, 0.5, 0.1, 0.71 },
    .separation_deg = 4,
    .separation_sigma_deg = 0.1,
    .separation_mm = 48.6,
    .compactness = 1.5,
    .pieces = 2,
    .flux_unsigned_mx = 1e22,
    .imbalance = 0.1 * leading,
    .axial_dipole_gauss = 0.01,
    .axial_dipole_sigma_gauss = 0.001,
    .axial_dipole_poles_gauss = 0.01,
    .cautions = tf_notes_new (),
  };
  return m;
}

void
test_study_ledger_open (TestLedger *t)
{
  g_autoptr (GError) error = NULL;
  *t = (TestLedger){ .folder = g_dir_make_tmp ("tiltfield-study-XXXXXX", &error) };
  g_assert_no_error (error);
  t->path = g_build_filename (t->folder, "study.ledger", NULL);
  t->ledger = tf_ledger_create (t->path, 'T', &error);
  g_assert_no_error (error);
  t->person = tf_ledger_person (t->ledger, "Ada", &error);
  g_assert_no_error (error);
}

static void
remove_tree (const char *path)
{
  g_autoptr (GDir) dir = g_dir_open (path, 0, NULL);
  for (const char *name = dir != NULL ? g_dir_read_name (dir) : NULL; name != NULL;
       name = g_dir_read_name (dir))
    {
      g_autofree char *inside = g_build_filename (path, name, NULL);
      remove_tree (inside);
    }
  g_remove (path);
}

void
test_study_ledger_clear (TestLedger *t)
{
  g_clear_pointer (&t->ledger, tf_ledger_close);
  remove_tree (t->folder);
  g_clear_pointer (&t->folder, g_free);
  g_clear_pointer (&t->path, g_free);
}

gint64
test_study_frame (TestLedger *t, const char *time, const char *instrument, double noise_gauss)
{
  g_autofree char *cards
      = g_strdup_printf ("SIMPLE  = T\nBITPIX  = -32\nNAXIS   = 2\nNAXIS1  = 512\nNAXIS2  = "
                         "512\nCTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\n"
                         "CUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = 256.5\nCRPIX2  = "
                         "256.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 4\n"
                         "CDELT2  = 4\nCROTA2  = 0\nDATE-OBS= '%s'\nTELESCOP= '%s'\nINSTRUME= "
                         "'%s'\nBUNIT   = 'Gauss'\nCONTENT = 'MAGNETOGRAM'\n",
                         time, instrument, instrument);
  g_autoptr (TfHeader) header = tf_header_read (cards, -1);
  g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, 512, 512);
  g_assert_cmpint (info->role, ==, TF_ROLE_FIELD);
  g_autofree char *name = g_strdup_printf ("frame-%u.fits", t->n_frames++);
  g_autofree char *path = g_build_filename (t->folder, name, NULL);
  g_autofree char *checksum = g_compute_checksum_for_string (G_CHECKSUM_SHA256, name, -1);
  g_autoptr (GError) error = NULL;
  gint64 id = tf_ledger_add_frame (t->ledger, path, checksum, 0, 0, info, noise_gauss, &error);
  g_assert_no_error (error);
  g_assert_cmpint (id, >, 0);
  return id;
}

static TfOutline *
outline_of (const TfMeasure *m)
{
  return tf_outline_new_cap (m->time, m->carrington_lon_deg, m->lat_deg, 6, 24);
}

gint64
test_study_mark (TestLedger *t, gint64 frame, gint64 region, TfMeasure measure)
{
  g_auto (TfMeasure) own = measure;
  g_autoptr (TfOutline) outline = outline_of (&own);
  const TfMarkDeed deed = { .frame = frame,
                            .person = t->person,
                            .region = region,
                            .origin = TF_MARK_DRAWN,
                            .outline = outline,
                            .measure = &own,
                            .method = "flux-centroid/1 test" };
  g_autoptr (GError) error = NULL;
  gint64 mark = tf_ledger_keep (t->ledger, &deed, &error);
  g_assert_no_error (error);
  g_assert_cmpint (mark, >, 0);
  return mark;
}

void
test_study_hint (TestLedger *t, gint64 frame, gboolean unipolar, TfMeasure measure)
{
  g_autoptr (GPtrArray) hints = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_hint_free);
  TfHint *hint = g_new0 (TfHint, 1);
  *hint = (TfHint){ unipolar, outline_of (&measure), measure, tf_notes_new () };
  g_ptr_array_add (hints, hint);
  g_autoptr (GError) error = NULL;
  tf_ledger_add_hints (t->ledger, frame, "plain/1 test", hints, "flux-centroid/1 test", &error);
  g_assert_no_error (error);
}

int
main (int argc, char **argv)
{
  g_autofree char *state = g_dir_make_tmp ("tiltfield-state-XXXXXX", NULL);
  g_setenv ("XDG_STATE_HOME", state, TRUE);
  g_test_init (&argc, &argv, NULL);
  test_study_add_row ();
  test_study_add_series ();
  test_study_add_ledger ();
  test_study_add_live ();
  test_study_add_pair ();
  test_study_add_sample ();
  test_study_add_shift ();
  test_study_add_take ();
  test_study_add_file ();
  int result = g_test_run ();
  remove_tree (state);
  return result;
}
