/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Small FITS files, mutated from a seed, into tf_frame_open: a frame or one sentence, no crash,
 * no great memory. Packed rows that are read without CFITSIO are what CFITSIO reads, or both refuse
 * them. Usage: fuzz-frame-files [MUTATIONS [SEED]]. The corpus is written by the
 * program itself (plain and compressed, 16 and 32 bits and floats); the conformance and broken
 * files of the real data are added where they are there. */

#include <glib.h>
#include <glib/gstdio.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <unistd.h>

#include "tf-fits-private.h"
#include "tf-frame-write.h"
#include "tf-fuzz.h"

enum
{
  SIDE = 40,
  LARGEST = 200000, /* bytes of a real file that is mutated */
};

static const char header_text[] = "CTYPE1  = 'HPLN-TAN'\nCTYPE2  = 'HPLT-TAN'\nCUNIT1  = "
                                  "'arcsec'\nCUNIT2  = 'arcsec'\nCRPIX1  = 20.5\nCRPIX2  = 20.5\n"
                                  "CRVAL1  = 0\nCRVAL2  = 0\nCDELT1  = 60\nCDELT2  = 60\nCROTA2  = "
                                  "10\nDATE-AVG= '2013-10-12T06:00:00'\nBUNIT   = 'G'\n";

static GBytes *
sample (const char *path, const TfFrameWrite *how)
{
  float pixels[SIDE * SIDE];
  char *bytes = NULL;
  gsize n = 0;
  g_autoptr (TfHeader) header = tf_header_read (header_text, -1);
  g_autoptr (GRand) chance = g_rand_new_with_seed (1);
  for (int k = 0; k < SIDE * SIDE; k++)
    pixels[k] = hypot (k % SIDE - 19.5, k / SIDE - 19.5) < 16
                    ? (float)g_rand_double_range (chance, -100, 100)
                    : NAN;
  if (!tf_frame_write (path, header, pixels, SIDE, SIDE, how, NULL)
      || !g_file_get_contents (path, &bytes, &n, NULL))
    abort ();
  return g_bytes_new_take (bytes, n);
}

static GPtrArray *
make_corpus (const char *path)
{
  static const TfFrameWrite ways[] = {
    { .bitpix = -32 },
    { .bitpix = 16, .bscale = 0.1, .blank = -32768, .has_blank = TRUE },
    { .bitpix = 32, .bscale = 0.01, .blank = G_MININT32, .has_blank = TRUE },
    { .bitpix = 16, .bscale = 0.1, .blank = -32768, .has_blank = TRUE, .compress = TRUE },
    { .bitpix = 32, .bscale = 0.01, .blank = G_MININT32, .has_blank = TRUE, .compress = TRUE },
  };
  GPtrArray *corpus = fuzz_read_folder ("broken");
  g_autoptr (GPtrArray) more = fuzz_read_folder ("conformance");
  for (guint k = 0; k < more->len; k++)
    g_ptr_array_add (corpus, g_bytes_ref (more->pdata[k]));
  for (guint k = 0; k < G_N_ELEMENTS (ways); k++)
    g_ptr_array_add (corpus, sample (path, &ways[k]));
  return corpus;
}

/* Header bytes are changed most; or the data; or the end is cut off; or a block is lost. */
static GByteArray *
mutate (GBytes *source, GRand *chance)
{
  gsize n = 0;
  const guint8 *data = g_bytes_get_data (source, &n);
  GByteArray *out = g_byte_array_new ();
  g_byte_array_append (out, data, (guint)n);
  for (gint turn = g_rand_int_range (chance, 1, 4); turn > 0 && out->len > 2880; turn--)
    switch (g_rand_int_range (chance, 0, 7))
      {
      case 0:
        g_byte_array_set_size (out, (guint)g_rand_int_range (chance, 1, (gint)out->len));
        break;
      case 1:
        g_byte_array_remove_range (
            out, (guint)g_rand_int_range (chance, 0, (gint)(out->len / 2880)) * 2880, 2880);
        break;
      case 2:
        fuzz_flip (out, chance, 30);
        break;
      default: /* one digit of one card */
        for (guint tries = 0; tries < 400; tries++)
          {
            guint at = (guint)g_rand_int_range (chance, 0, (gint)MIN (out->len, 14400));
            if (at % 80 > 8 && at % 80 < 31 && g_ascii_isdigit (out->data[at]))
              {
                out->data[at] = (guint8) "0123456789-. "[g_rand_int_range (chance, 0, 13)];
                break;
              }
          }
      }
  return out;
}

static float *
read_picture (TfFits *fits)
{
  gsize n = (gsize)tf_fits_get_width (fits) * tf_fits_get_height (fits);
  g_autofree float *pixels = g_new (float, n);
  return tf_fits_check_size (fits, NULL)
                 && tf_fits_read_rows (fits, 1, 0, tf_fits_get_height (fits), pixels, NULL)
             ? g_steal_pointer (&pixels)
             : NULL;
}

/* Returns 1 where ours read the rows by itself. */
static guint
judge_rows (const char *path)
{
  g_autoptr (TfFits) ours = tf_fits_open (path, 0, NULL);
  if (ours == NULL || ours->rows.at == NULL || (guint64)ours->axes[0] * ours->axes[1] > LARGEST)
    return 0;
  /* a file that lost the filling of its last block alone has all pixels; CFITSIO wants it whole */
  if (tf_fits_check_size (ours, NULL) && ours->size < ours->rows.end
      && truncate (path, ours->rows.end) != 0)
    abort ();
  g_autoptr (TfFits) theirs = tf_fits_open_by_cfitsio (path, 0, NULL);
  gboolean same = theirs != NULL && theirs->hdu == ours->hdu && theirs->bitpix == ours->bitpix
                  && theirs->axes[0] == ours->axes[0] && theirs->axes[1] == ours->axes[1];
  g_autofree float *a = read_picture (ours), *b = same ? read_picture (theirs) : NULL;
  same &= (a != NULL) == (b != NULL);
  for (gsize k = 0; same && a != NULL && k < (gsize)ours->axes[0] * (gsize)ours->axes[1]; k++)
    same = isnan (a[k]) ? isnan (b[k]) != 0 : memcmp (&a[k], &b[k], sizeof a[k]) == 0;
  if (!same)
    {
      printf ("not ok - ours and CFITSIO differ\n");
      abort ();
    }
  return a != NULL;
}

/* A frame, or one line that says why not. */
static void
judge (const char *path, const guint8 *data, gsize n)
{
  g_autoptr (GError) error = NULL;
  if (!g_file_set_contents (path, (const char *)data, (gssize)n, NULL))
    abort ();
  g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, &error);
  gboolean good = (frame != NULL) != (error != NULL);
  if (error != NULL)
    good &= error->domain == TF_FRAME_ERROR && strchr (error->message, '\n') == NULL
            && g_utf8_validate (error->message, -1, NULL);
  else
    good &= tf_frame_get_width (frame) > 0 && tf_frame_get_info (frame)->role == TF_ROLE_FIELD;
  if (!good)
    {
      printf ("not ok - %s\n", error != NULL ? error->message : "neither a frame nor an error");
      abort ();
    }
}

int
main (int argc, char **argv)
{
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 300, opened = 0, alike = 0;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 20131012;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  g_autofree char *folder = g_dir_make_tmp ("tf-fuzz-XXXXXX", NULL),
                  *path = g_build_filename (folder, "frame.fits", NULL);
  g_autoptr (GPtrArray) corpus = make_corpus (path);
  guint own = 5;
  for (guint k = 0; k < corpus->len; k++)
    {
      gsize size;
      const guint8 *data = g_bytes_get_data (corpus->pdata[k], &size);
      judge (path, data, size);
    }
  printf ("ok 1 - %u files of the corpus end in a frame or a sentence\n", corpus->len);
  for (guint k = 0; k < n; k++)
    {
      /* two of three from the program's own files, which a change can still leave readable */
      guint which = k % 3 > 0 ? corpus->len - 1 - k % own
                              : (guint)g_rand_int_range (chance, 0, (gint)corpus->len);
      if (g_bytes_get_size (corpus->pdata[which]) > LARGEST)
        which = corpus->len - 1;
      g_autoptr (GByteArray) bytes = mutate (corpus->pdata[which], chance);
      if (g_getenv ("TF_FUZZ_KEEP") != NULL)
        g_file_set_contents (g_getenv ("TF_FUZZ_KEEP"), (const char *)bytes->data, bytes->len,
                             NULL);
      judge (path, bytes->data, bytes->len);
      g_autoptr (TfFrame) frame = tf_frame_open (path, NULL, NULL, NULL);
      opened += frame != NULL;
      alike += judge_rows (path);
    }
  printf ("ok 2 - %u mutations from seed %u end in a frame (%u) or a sentence\n", n, seed, opened);
  printf ("%s 3 - rows of %u of them are read without CFITSIO as it reads them\n",
          alike > 0 ? "ok" : "not ok", alike);
  struct rusage usage;
  getrusage (RUSAGE_SELF, &usage);
  gboolean small = usage.ru_maxrss < 700 * 1024;
  printf ("%s 4 - memory stayed small: %ld MB at most\n1..4\n", small ? "ok" : "not ok",
          usage.ru_maxrss / 1024);
  g_remove (path);
  g_rmdir (folder);
  return small && opened > 0 && alike > 0 ? 0 : 1;
}
