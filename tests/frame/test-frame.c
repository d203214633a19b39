/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <glib/gstdio.h>
#include <locale.h>
#include <math.h>

#include "tf-constants.h"

char *
shared_data (const char *name)
{
  const char *set = g_getenv ("TF_SHARED_DATA");
  g_autofree char *top = set != NULL
                             ? g_strdup (set)
                             : g_build_filename (TF_SOURCE_ROOT, "..", "shared", "data", NULL);
  char *path = g_build_filename (top, name, NULL);
  if (g_file_test (path, G_FILE_TEST_EXISTS))
    return path;
  g_free (path);
  return NULL;
}

static char *folder;

char *
scratch_file (const char *name)
{
  return g_build_filename (folder, name, NULL);
}

double
normal (GRand *chance)
{
  double u = g_rand_double_range (chance, 1e-300, 1), v = g_rand_double (chance);
  return sqrt (-2 * log (u)) * cos (2 * TF_PI * v);
}

TfFrameInfo *
disk_info (guint side, double radius_px, double north_angle_deg)
{
  g_autofree char *angle = g_strdup_printf ("CROTA2  = %.6f\n", -north_angle_deg);
  double radius_arcsec = asin (TF_RADIUS_MM * 1e6 / TF_AU_M) / TF_ARCSEC;
  char scale[G_ASCII_DTOSTR_BUF_SIZE];
  g_ascii_dtostr (scale, sizeof scale, tan (radius_arcsec * TF_ARCSEC) / TF_ARCSEC / radius_px);
  g_autofree char *text = g_strdup_printf (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\n"
      "CRPIX1  = %d.5\nCRPIX2  = %d.5\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = %s\n"
      "CDELT2  = %s\n%sDATE-AVG= '2013-10-12T06:00:00'\nDSUN_OBS= 149597870700.0\n"
      "HGLN_OBS= 0.0\nHGLT_OBS= 5.0\nCRLN_OBS= 120.0\nBUNIT   = 'G'\nCONTENT = 'MAGNETOGRAM'\n"
      "TELESCOP= 'TEST'\n",
      side / 2, side / 2, scale, scale, angle);
  g_autoptr (TfHeader) header = tf_header_read (text, -1);
  return tf_frame_info_read (header, side, side);
}

int
main (int argc, char **argv)
{
  setlocale (LC_ALL, "C.UTF-8");
  g_test_init (&argc, &argv, NULL);
  folder = g_dir_make_tmp ("tf-test-frame-XXXXXX", NULL);
  add_header_tests ();
  add_dialect_tests ();
  add_write_tests ();
  add_pixel_tests ();
  add_picture_tests ();
  add_witness_tests ();
  add_real_tests ();
  add_rice_tests ();
  add_conformance_tests ();
  int bad = g_test_run ();
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  for (const char *name; dir != NULL && (name = g_dir_read_name (dir)) != NULL;)
    {
      g_autofree char *path = scratch_file (name);
      g_remove (path);
    }
  g_rmdir (folder);
  g_free (folder);
  return bad;
}
