/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>
#include <string.h>
#include <sys/resource.h>

#include "tf-check.h"
#include "tf-fits-private.h"
#include "tf-frame-write.h"

static long
peak_kb (void)
{
  struct rusage usage;
  getrusage (RUSAGE_SELF, &usage);
  return usage.ru_maxrss;
}

/* One clear sentence or a correct read: the error names the file, is one line, and no file
 * makes memory grow. */
static void
open_and_judge (const char *path)
{
  g_autoptr (GError) error = NULL;
  long before = peak_kb ();
  g_autofree char *name = g_path_get_basename (path);
  g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, &error);
  g_assert_true ((frame != NULL) != (error != NULL));
  if (error != NULL)
    {
      g_test_message ("%s", error->message);
      g_assert_nonnull (strstr (error->message, name));
      g_assert_null (strchr (error->message, '\n'));
      g_assert_cmpuint (strlen (error->message), >, strlen (path) + 20);
      g_assert_true (error->domain == TF_FRAME_ERROR);
    }
  g_assert_cmpint (peak_kb () - before, <, 60000);
}

static void
test_folder (gconstpointer data)
{
  g_autofree char *path = shared_data (data);
  g_autoptr (GDir) dir = path != NULL ? g_dir_open (path, 0, NULL) : NULL;
  guint n = 0;
  if (dir == NULL)
    {
      g_test_skip ("real data not there");
      return;
    }
  for (const char *name; (name = g_dir_read_name (dir)) != NULL;)
    {
      g_autofree char *file = g_build_filename (path, name, NULL);
      if (!g_file_test (file, G_FILE_TEST_IS_REGULAR))
        continue;
      open_and_judge (file);
      n++;
    }
  g_assert_cmpuint (n, >, 0);
}

/* What each broken file must end in: a piece of the sentence (the reasons are the data index's). */
static void
test_broken (void)
{
  static const struct
  {
    const char *file;
    TfFrameError code;
    const char *piece;
  } files[] = {
    { "broken/not_actually_fits.fits", TF_FRAME_ERROR_READ, "not a FITS file" },
    { "broken/tca110810_truncated", TF_FRAME_ERROR_READ, "no picture of two axes" },
    { "broken/svsm_e3100_S2_20110625_1856.fts", TF_FRAME_ERROR_REFUSED, "helium" },
    { "broken/gzip_fits_test.file", TF_FRAME_ERROR_REFUSED, "picture of the Sun" },
    { "broken/mq130812.084253.fits", TF_FRAME_ERROR_REFUSED, "hydrogen alpha" },
    { "broken/mdi.fd_Ic.20101015_230100_TAI.data.fits", TF_FRAME_ERROR_REFUSED, "intensity" },
    { "broken/resampled_hmi_CONTINUUM.fits", TF_FRAME_ERROR_REFUSED, "intensity" },
    { "conformance/verify.fits", TF_FRAME_ERROR_READ, "damaged" },
    { "conformance/zerowidth.fits", TF_FRAME_ERROR_READ, "no picture of two axes" },
    { "conformance/random_groups.fits", TF_FRAME_ERROR_READ, "no picture of two axes" },
  };
  for (guint k = 0; k < G_N_ELEMENTS (files); k++)
    {
      g_autofree char *path = shared_data (files[k].file);
      g_autoptr (GError) error = NULL;
      if (path == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      g_assert_null (tf_frame_open (path, NULL, NULL, &error));
      g_test_message ("%s", error->message);
      g_assert_error (error, TF_FRAME_ERROR, (int)files[k].code);
      g_assert_nonnull (strstr (error->message, files[k].piece));
    }
  /* the truncated one by its pixels: 2048 x 2048 floats are claimed, 668 kB are there */
  g_autofree char *path = shared_data ("broken/svsm_e3100_S2_20110625_1856.fts");
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFits) fits = tf_fits_open (path, 0, NULL);
  g_assert_nonnull (fits);
  g_assert_false (tf_fits_check_size (fits, &error));
  g_assert_nonnull (strstr (error->message, "cut short"));
}

static float *
read_all (const char *name, guint *n)
{
  g_autofree char *path = shared_data (name);
  g_autoptr (TfFits) fits = path != NULL ? tf_fits_open (path, 0, NULL) : NULL;
  if (fits == NULL)
    return NULL;
  g_assert_true (tf_fits_check_size (fits, NULL));
  *n = tf_fits_get_width (fits) * tf_fits_get_height (fits);
  float *pixels = g_new (float, *n);
  for (guint y = 0; y < tf_fits_get_height (fits); y += 13)
    {
      guint rows = MIN (13, tf_fits_get_height (fits) - y);
      g_assert_true (
          tf_fits_read_rows (fits, 1, y, rows, pixels + (gsize)y * tf_fits_get_width (fits), NULL));
    }
  return pixels;
}

/* One picture, five ways of tile compression: the same pixels (hcompress and the real one are
 * lossy by their header). */
static void
test_compressions (void)
{
  static const struct
  {
    const char *plain, *packed;
    double tolerance;
  } pairs[] = {
    { "conformance/m13.fits", "conformance/m13_rice.fits", 0 },
    { "conformance/m13.fits", "conformance/m13_gzip.fits", 0 },
    { "conformance/m13.fits", "conformance/m13_plio.fits", 0 },
    { "conformance/m13.fits", "conformance/m13_hcomp.fits", 0 },
    { "conformance/m13real.fits", "conformance/m13real_rice.fits", 3 },
  };
  for (guint k = 0; k < G_N_ELEMENTS (pairs); k++)
    {
      guint n = 0, m = 0;
      g_autofree float *a = read_all (pairs[k].plain, &n), *b = read_all (pairs[k].packed, &m);
      if (a == NULL || b == NULL)
        {
          g_test_skip ("real data not there");
          return;
        }
      g_assert_cmpuint (n, ==, m);
      double worst = 0;
      for (guint j = 0; j < n; j++)
        worst = fabs ((double)a[j] - (double)b[j]) > worst ? fabs ((double)a[j] - (double)b[j])
                                                           : worst;
      tf_check_near (pairs[k].packed, worst, 0, pairs[k].tolerance);
    }
}

/* Our own unpacking of tiles against CFITSIO's, bit for bit: quiet, loud, wrapping and constant
 * rows. */
static void
test_own_unpacking (void)
{
  enum
  {
    W = 500,
    H = 120
  };
  g_autoptr (GRand) chance = g_rand_new_with_seed (17);
  g_autofree float *pixels = g_new (float, W *H), *theirs = g_new (float, W *H);
  g_autofree char *path = scratch_file ("rice.fits");
  for (int way = 0; way < 4; way++)
    {
      TfFrameWrite how = { .bitpix = way % 2 ? 16 : 32,
                           .bscale = way < 2 ? 0.1 : 1,
                           .bzero = way == 1 ? 7 : 0,
                           .blank = -32768,
                           .has_blank = TRUE,
                           .compress = TRUE };
      for (int k = 0; k < W * H; k++)
        {
          double reach = pow (10, k / W % 10) / 10;
          pixels[k] = k % 91 == 4      ? NAN
                      : k / W % 7 == 3 ? 5
                                       : (float)g_rand_double_range (chance, -reach, reach);
        }
      g_assert_true (tf_frame_write (path, NULL, pixels, W, H, &how, NULL));
      g_autoptr (TfFits) fits = tf_fits_open (path, 0, NULL);
      g_autoptr (TfFits) other = tf_fits_open_by_cfitsio (path, 0, NULL);
      g_assert_true (fits != NULL && fits->rows.at != NULL && tf_fits_check_size (fits, NULL));
      g_assert_true (other != NULL && other->rows.at == NULL && tf_rice_check (other));
      g_assert_true (tf_fits_read_rows (fits, 1, 0, H, pixels, NULL));
      g_assert_true (tf_fits_read_rows (other, 1, 0, H, theirs, NULL));
      for (int k = 0; k < W * H; k++)
        if (isnan (theirs[k]))
          tf_check_nan ("a blank", (double)pixels[k]);
        else
          tf_check_near ("a pixel", (double)pixels[k], (double)theirs[k], 0);
    }
}

/* A header that claims a terabyte over a few bytes, plain and compressed: a sentence, and no
 * memory. */
static void
test_absurd_claims (void)
{
  static const char *const edits[][2]
      = { { "NAXIS1  =                   40", "NAXIS1  =               100000" },
          { "NAXIS2  =                   40", "NAXIS2  =               100000" },
          { "ZNAXIS1 =                   40", "ZNAXIS1 =               100000" },
          { "ZNAXIS2 =                   40", "ZNAXIS2 =               100000" },
          { "ZTILE1  =                   40", "ZTILE1  =                    0" },
          { "ZTILE2  =                    1", "ZTILE2  =                   -1" } };
  g_autoptr (TfHeader) header = tf_header_read (
      "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = 'arcsec'\nCUNIT2  = 'arcsec'\n"
      "CRPIX1  = 20\nCRPIX2  = 20\nCRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 50\nCDELT2  = 50\n"
      "DATE-AVG= '2013-10-12T06:00:00'\nBUNIT   = 'G'\n",
      -1);
  float pixels[1600];
  for (guint k = 0; k < 1600; k++)
    pixels[k] = (float)(k % 50);
  for (int compress = 0; compress < 2; compress++)
    for (guint k = compress ? 2 : 0; k < (compress ? 6 : 2); k++)
      {
        g_autofree char *path = scratch_file ("absurd.fits");
        g_autoptr (GError) error = NULL;
        char *bytes = NULL;
        gsize n = 0;
        TfFrameWrite how = { .bitpix = 16, .bscale = 1, .compress = compress };
        g_assert_true (tf_frame_write (path, header, pixels, 40, 40, &how, NULL));
        g_assert_true (g_file_get_contents (path, &bytes, &n, NULL));
        char *at = memmem (bytes, n, edits[k][0], strlen (edits[k][0]));
        g_assert_nonnull (at);
        memcpy (at, edits[k][1], strlen (edits[k][1]));
        g_assert_true (g_file_set_contents (path, bytes, (gssize)n, NULL));
        g_free (bytes);
        long before = peak_kb ();
        g_assert_null (tf_frame_open (path, NULL, NULL, &error));
        g_test_message ("%s", error->message);
        g_assert_cmpint (peak_kb () - before, <, 30000);
      }
}

void
add_conformance_tests (void)
{
  g_test_add_data_func ("/frame/conformance/every-file-ends-in-a-sentence-or-a-read", "conformance",
                        test_folder);
  g_test_add_data_func ("/frame/conformance/invalid-files-too", "conformance/invalid", test_folder);
  g_test_add_data_func ("/frame/broken/every-file-ends-in-a-sentence", "broken", test_folder);
  g_test_add_func ("/frame/broken/the-right-sentence", test_broken);
  g_test_add_func ("/frame/conformance/five-compressions-read-the-same", test_compressions);
  g_test_add_func ("/frame/conformance/own-unpacking-equals-cfitsio's", test_own_unpacking);
  g_test_add_func ("/frame/broken/absurd-claims-take-no-memory", test_absurd_claims);
}
