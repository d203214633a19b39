/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <math.h>
#include <string.h>

#include "tf-fits-private.h"
#include "tf-rice-private.h"

/* Values 100 100 101 99 coded by hand after the FITS Standard 4.0, 10.4.1: the first value in 32
 * bits; 5 bits of code 2, so one plain bit; differences 0 0 1 -2 folded to 0 0 2 3. */
static void
test_by_hand (void)
{
  const guint8 bytes[] = { 0, 0, 0, 100, 0x15, 0x26 };
  const gint32 expected[] = { 100, 100, 101, 99 };
  gint32 out[4];
  g_assert_true (tf_rice_decode (bytes, sizeof bytes, 4, 32, 4, out));
  for (guint k = 0; k < 4; k++)
    g_assert_cmpint (out[k], ==, expected[k]);
  g_assert_false (tf_rice_decode (bytes, sizeof bytes - 1, 4, 32, 4, out));
}

static gboolean
is_same (float a, float b)
{
  return isnan (a) ? isnan (b) != 0 : memcmp (&a, &b, sizeof a) == 0;
}

/* What is told of the two, header and all. */
static void
compare_words (const TfFits *ours, const TfFits *theirs)
{
  guint n = tf_header_get_n (ours->header);
  g_assert_cmpint (ours->hdu, ==, theirs->hdu);
  g_assert_cmpint (ours->bitpix, ==, theirs->bitpix);
  g_assert_cmpint (ours->compressed, ==, theirs->compressed);
  g_assert_cmpint (ours->n_axes, ==, theirs->n_axes);
  for (int k = 0; k < ours->n_axes; k++)
    g_assert_cmpint (ours->axes[k], ==, theirs->axes[k]);
  g_assert_cmpuint (n, ==, tf_header_get_n (theirs->header));
  for (guint k = 0; k < n; k++)
    {
      const char *keyword = tf_header_get_keyword (ours->header, k);
      g_assert_cmpstr (keyword, ==, tf_header_get_keyword (theirs->header, k));
      g_assert_cmpstr (tf_header_get (ours->header, keyword), ==,
                       tf_header_get (theirs->header, keyword));
    }
  g_assert_cmpint (tf_fits_check_size (ours, NULL), ==, tf_fits_check_size (theirs, NULL));
}

/* The current picture, @some rows at a time, against the whole of it as CFITSIO reads it. */
static void
compare_pixels (TfFits *fits, TfFits *other, guint some)
{
  guint width = tf_fits_get_width (fits), height = tf_fits_get_height (fits);
  gsize n = (gsize)width * height;
  g_autofree float *ours = g_new (float, n), *theirs = g_new (float, n);
  for (guint y = 0; y < height; y += some)
    g_assert_true (
        tf_fits_read_rows (fits, 1, y, MIN (some, height - y), ours + (gsize)y * width, NULL));
  g_assert_true (tf_fits_read_rows (other, 1, 0, height, theirs, NULL));
  for (gsize k = 0; k < n; k++)
    if (!is_same (ours[k], theirs[k]))
      g_error ("%s, HDU %d, pixel %" G_GSIZE_FORMAT ": %.9g, not %.9g", fits->path, fits->hdu, k,
               (double)ours[k], (double)theirs[k]);
}

/* All pictures of a file, as we and as CFITSIO see it; returns how many were read here. */
static guint
compare_file (const char *path)
{
  g_autoptr (TfFits) ours = tf_fits_open (path, 0, NULL);
  g_autoptr (TfFits) theirs = tf_fits_open_by_cfitsio (path, 0, NULL);
  guint n = 0;
  gboolean more = ours != NULL;
  g_assert_cmpint (more, ==, theirs != NULL);
  while (more)
    {
      compare_words (ours, theirs);
      if (ours->rows.at != NULL && tf_fits_check_size (ours, NULL))
        {
          g_autoptr (TfFits) again = tf_fits_reopen (ours, NULL);
          g_assert_true (again != NULL && again->rows.at != NULL && theirs->rows.at == NULL);
          compare_pixels (ours, theirs, 7);
          compare_pixels (again, theirs, 64);
          n++;
        }
      more = tf_fits_next (ours);
      g_assert_cmpint (more, ==, tf_fits_next (theirs));
    }
  return n;
}

static guint
compare_folder (const char *folder)
{
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  guint n = 0;
  for (const char *name; dir != NULL && (name = g_dir_read_name (dir)) != NULL;)
    {
      g_autofree char *path = g_build_filename (folder, name, NULL);
      if (g_file_test (path, G_FILE_TEST_IS_REGULAR) && !g_str_has_suffix (name, ".json"))
        n += compare_file (path);
    }
  return n;
}

static void
test_demo (void)
{
  g_autofree char *folder = g_build_filename (TF_SOURCE_ROOT, "data-demo", "frames", NULL);
  g_assert_cmpuint (compare_folder (folder), >=, 20);
}

static void
test_real (gconstpointer data)
{
  g_autofree char *folder = shared_data (data);
  if (folder == NULL)
    g_test_skip ("real data not there");
  else
    g_test_message ("%u pictures unpacked here", compare_folder (folder));
}

void
add_rice_tests (void)
{
  g_test_add_func ("/frame/rice/a-tile-coded-by-hand", test_by_hand);
  g_test_add_func ("/frame/rice/demo-frames-are-cfitsio's-bit-for-bit", test_demo);
  g_test_add_data_func ("/frame/rice/conformance-files-are-cfitsio's-bit-for-bit", "conformance",
                        test_real);
  g_test_add_data_func ("/frame/rice/magnetograms-are-cfitsio's-bit-for-bit", "magnetograms",
                        test_real);
  g_test_add_data_func ("/frame/rice/broken-files-are-cfitsio's", "broken", test_real);
}
