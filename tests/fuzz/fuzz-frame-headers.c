/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Headers as text, mutated from a seed, into tf_frame_info_read: whatever comes, an answer that
 * holds together. Usage: fuzz-frame-headers [MUTATIONS [SEED]]. A corpus is built in; the real
 * headers are added where they are there. */

#include <glib.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "tf-frame-info.h"
#include "tf-fuzz.h"

static const char *const corpus[] = {
  "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = "
  "50.5\nCRPIX2  = 50.5\nCRVAL1  = 0\n"
  "CRVAL2  = 0\nCDELT1  = 20\nCDELT2  = 20\nCROTA2  = 179.9\nDATE-OBS= "
  "'2013-10-12T06:00:00'\nDSUN_OBS= 1.496E11\nHGLN_OBS= 0\n"
  "HGLT_OBS= 5\nRSUN_OBS= 959\nBUNIT   = 'G'\nTELESCOP= 'TEST'\nNAXIS   = 2\nNAXIS1  = 100\nNAXIS2 "
  " = 100\nBITPIX  = -32\n",
  "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCRPIX1  = 5\nCRPIX2  = 5\nCD1_1   = 0.01\nCD1_2   = "
  "0.002\nCD2_1   = -0.002\n"
  "CD2_2   = 0.01\nCUNIT1  = 'deg'\nCUNIT2  = 'deg'\nLONPOLE = 170\nT_OBS   = "
  "'2010.10.15_00:03:30.000_TAI'\nCRLN_OBS= 203\n"
  "CRLT_OBS= 5.9\nOBS_DIST= 0.98\nBUNIT   = 'mT'\nNAXIS   = 2\nNAXIS1  = 64\nNAXIS2  = "
  "64\nINTERVAL= 300\nBLANK   = -32768\n",
  "X0      = 256.5\nY0      = 256.5\nR0      = 256.0\nB0      = -0.114862\nCENLON  = "
  "153.1617\nDATE-OBS= '03-31-11'\nTAVG-UT = 17.814\n"
  "BUNIT   = 'GAUSS'\nNAXIS   = 2\nNAXIS1  = 512\nNAXIS2  = 512\nBSCALE  = 0.1\nTELESCOP= '150 "
  "ft'\nORIGIN  = Bare text\n",
  "CTYPE1  = 'solar-x'\nCTYPE2  = 'solar-y'\nCRPIX1  = 64.5\nCRPIX2  = 64.5\nCRVAL1  = 0\nCRVAL2  "
  "= 0\nCDELT1  = 15.9\nCDELT2  = 15.9\n"
  "SOLAR_P = -180\nOBS_R0  = 984.9\nDSUN_OBS= 149597870691.0\nT_OBS   = "
  "'2009.01.31_08:03:30_TAI'\nOBS_B0  = -6\nOBS_L0  = 130.9\n"
  "R_SUN   = 496.0\nX0      = 511.5\nBUNIT   = 'Gauss'\nNAXIS   = 2\nNAXIS1  = 128\nNAXIS2  = "
  "128\n",
  "CTYPE1  = 'GONGX'\nCTYPE2  = 'GONGY'\nCRPIX1  = 422.5\nCRPIX2  = 442.6\nFNDLMBMI= "
  "385.2\nFNDLMBMA= 385.3\nSEMIDIAM= 0.00473\n"
  "DISTANCE= 0.98337\nL0      = 330.4\nB0      = -3.9\nDATE-OBS= '2025/01/09'\nTIME-OBS= "
  "'01:35:16.008'\nGPSSTAT = 81\nIMTYPE  = 'MAGNETIC'\n"
  "BUNIT   = 'GAUSS'\nNAXIS   = 2\nNAXIS1  = 860\nNAXIS2  = 860\nP_ANGLE = 0\n",
  "CTYPE1  = 'CRLN-CEA'\nCTYPE2  = 'CRLT-CEA'\nCRPIX1  = 360.4\nCRPIX2  = 180.5\nCRVAL1  = "
  "795260.3\nCRVAL2  = 0\nCDELT1  = -0.5\n"
  "CDELT2  = 0.006944\nCUNIT1  = 'Degree'\nCUNIT2  = 'Sine Latitude'\nCRDER1  = nan\nHGLN_OBS= "
  "nan\nCAR_ROT = 2210\n"
  "LON_FRST= 795080.5\nLON_LAST= 795440\nLON_STEP= -0.5\nBUNIT   = 'Mx/cm^2'\nCONTENT = 'Synoptic "
  "MAP (Mr)'\nNAXIS   = 3\n"
  "NAXIS1  = 720\nNAXIS2  = 360\nNAXIS3  = 12\nT_OBS   = '2018.11.06_11:56:08_TAI'\nPV2_1   = "
  "1.0\nMISSING = -9999.0\n",
  "CTYPE1  = 'Long'\nCTYPE2  = 'Lat'\nCRPIX1  = 180.5\nCRPIX2  = 90.5\nCUNIT1  = 'deg'\nCUNIT2  = "
  "'deg'\nCDELT1  = 1\nCDELT2  = 1\n"
  "CRVAL1  = 180\nCRVAL2  = 0\nMODEL   = 'X'\nMAPTIME = '2017-07-20T08:00:00'\nNAXIS   = 2\nNAXIS1 "
  " = 360\nNAXIS2  = 180\n",
};

static void
must (gboolean good, const char *what)
{
  if (good)
    return;
  printf ("not ok - %s\n", what);
  abort ();
}

/* An answer that holds together, whatever the header says. */
static void
judge (const char *text, gsize n)
{
  g_autoptr (TfHeader) header = tf_header_read (text, (gssize)n);
  guint width = (guint)CLAMP (tf_header_int (header, "NAXIS1", 10), 0, 100000);
  guint height = (guint)CLAMP (tf_header_int (header, "NAXIS2", 10), 0, 100000);
  g_autoptr (TfFrameInfo) info = tf_frame_info_read (header, width, height);
  must (info != NULL, "there is an answer");
  must ((info->role == TF_ROLE_FIELD) == (info->refusal == NULL),
        "a refusal has its reason, a field has none");
  must (info->role != TF_ROLE_FIELD || info->geometry.projection != TF_PROJECTION_NONE,
        "a field has a geometry");
  must (isfinite (info->to_gauss) && info->to_gauss > 0, "the unit's factor is a number");
  const TfGeometry *g = &info->geometry;
  if (g->projection != TF_PROJECTION_NONE)
    for (int k = 0; k < 25; k++)
      {
        TfPlace p;
        double x = (k % 5) * g->width / 4.0, y = (k / 5) * g->height / 4.0;
        if (!tf_geometry_pixel_to_sun (g, x, y, &p))
          continue;
        must (fabs (p.lat_deg) <= 90 && p.carrington_lon_deg >= 0 && p.carrington_lon_deg < 360,
              "a place is on the Sun");
        must (isnan (p.mu) || (p.mu >= 0 && p.mu <= 1 + 1e-12), "mu is a cosine");
      }
  for (guint k = 0; k < tf_notes_get_n (info->repairs); k++)
    {
      g_autofree char *sentence = tf_note_dup_text (tf_notes_get (info->repairs, k), TRUE);
      must (sentence != NULL && g_utf8_validate (sentence, -1, NULL), "a note is text");
    }
  g_autoptr (TfFrameInfo) copy = tf_frame_info_copy (info);
  must (copy->kind == info->kind, "a copy is a copy");
}

int
main (int argc, char **argv)
{
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 2000;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 20131012;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  g_autoptr (GPtrArray) texts = fuzz_read_folder ("headers");
  for (guint k = 0; k < G_N_ELEMENTS (corpus); k++)
    g_ptr_array_add (texts, g_bytes_new_static (corpus[k], strlen (corpus[k])));
  for (guint k = 0; k < texts->len; k++)
    {
      gsize size;
      const char *text = g_bytes_get_data (texts->pdata[k], &size);
      judge (text, size);
    }
  printf ("ok 1 - %u headers of the corpus are answered\n", texts->len);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (GByteArray) bytes
          = fuzz_mutate_text (texts->pdata[texts->len - 1 - k % texts->len], chance);
      judge ((const char *)bytes->data, bytes->len);
    }
  printf ("ok 2 - %u mutations from seed %u are answered\n1..2\n", n, seed);
  return 0;
}
