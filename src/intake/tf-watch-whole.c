/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Whether a FITS file is all there: the sizes that its headers promise (FITS Standard 4.0, section
 * 4.4.1.1 and 7.1.1: Nbits = |BITPIX| * GCOUNT * (PCOUNT + NAXIS1 * ...), in blocks of 2880 bytes)
 * are walked to the end of the file. */

#include "tf-watch.h"

#include <stdlib.h>
#include <string.h>

enum
{
  BLOCK = 2880,
  CARD = 80,
  MOST_AXES = 999,
  MOST_BLOCKS = 20000 /* of one header */
};

typedef struct
{
  gint64 bits, elements, pcount, gcount;
  int naxis;
  gboolean end, groups;
} Sizes;

static gint64
card_value (const char *card)
{
  char text[CARD + 1] = { 0 };
  memcpy (text, card + 10, 70);
  return g_ascii_strtoll (text, NULL, 10);
}

static gboolean
is_key (const char *card, const char *key)
{
  char padded[9];
  g_snprintf (padded, sizeof padded, "%-8s", key);
  return memcmp (card, padded, 8) == 0;
}

static void
read_axis (Sizes *sizes, const char *card)
{
  int axis = atoi (card + 5);
  gint64 value = card_value (card);
  if (axis < 1 || axis > MOST_AXES || axis > sizes->naxis || card[8] != '=')
    return;
  sizes->groups = sizes->groups || (axis == 1 && value == 0);
  if (axis == 1 && value == 0)
    return; /* random groups, or nothing: told apart at the end */
  sizes->elements = value > 0 && sizes->elements < G_MAXINT64 / MAX (value, 1)
                        ? sizes->elements * value
                        : 0;
}

static void
read_card (Sizes *sizes, const char *card)
{
  if (is_key (card, "BITPIX"))
    sizes->bits = ABS (card_value (card));
  else if (is_key (card, "NAXIS"))
    sizes->naxis = (int)card_value (card);
  else if (strncmp (card, "NAXIS", 5) == 0)
    read_axis (sizes, card);
  else if (is_key (card, "PCOUNT"))
    sizes->pcount = card_value (card);
  else if (is_key (card, "GCOUNT"))
    sizes->gcount = card_value (card);
  else if (is_key (card, "END"))
    sizes->end = TRUE;
}

static gint64
data_blocks (const Sizes *sizes)
{
  if (sizes->naxis == 0)
    return 0;
  gint64 elements = sizes->groups && sizes->pcount == 0 && sizes->gcount <= 1 ? 0 : sizes->elements;
  gint64 bytes = sizes->bits / 8 * MAX (sizes->gcount, 1) * (sizes->pcount + elements);
  return (bytes + BLOCK - 1) / BLOCK;
}

/* 1: a block; 0: the end; -1: cut short or unreadable. */
static int
read_block (GInputStream *stream, char block[BLOCK])
{
  gsize n = 0;
  if (!g_input_stream_read_all (stream, block, BLOCK, &n, NULL, NULL))
    return -1;
  return n == BLOCK ? 1 : n == 0 ? 0 : -1;
}

static gboolean
skip_blocks (GInputStream *stream, gint64 blocks)
{
  char block[BLOCK];
  for (gint64 k = 0; k < blocks; k++)
    if (read_block (stream, block) != 1)
      return FALSE;
  return TRUE;
}

/* One header and its data. 1: there; 0: the file ends here; -1: not whole. */
static int
walk_unit (GInputStream *stream, gboolean first)
{
  Sizes sizes = { .elements = 1, .gcount = 1 };
  char block[BLOCK];
  for (guint k = 0; k < MOST_BLOCKS && !sizes.end; k++)
    {
      int got = read_block (stream, block);
      if (got != 1)
        return k == 0 && !first && got == 0 ? 0 : -1;
      if (k == 0 && first && !is_key (block, "SIMPLE"))
        return -1;
      if (k == 0 && !first && !is_key (block, "XTENSION"))
        return 0; /* what follows is no FITS any more: allowed, and nothing to wait for */
      for (guint card = 0; card < BLOCK / CARD && !sizes.end; card++)
        read_card (&sizes, block + card * CARD);
    }
  return sizes.end && skip_blocks (stream, data_blocks (&sizes)) ? 1 : -1;
}

static GInputStream *
open_stream (const char *path)
{
  g_autoptr (GFile) file = g_file_new_for_path (path);
  g_autoptr (GInputStream) plain = (GInputStream *)g_file_read (file, NULL, NULL);
  if (plain == NULL)
    return NULL;
  g_autoptr (GInputStream) buffered = g_buffered_input_stream_new_sized (plain, 1 << 16);
  if (g_buffered_input_stream_fill (G_BUFFERED_INPUT_STREAM (buffered), 2, NULL, NULL) < 2)
    return NULL;
  unsigned char magic[2] = { 0 };
  g_buffered_input_stream_peek (G_BUFFERED_INPUT_STREAM (buffered), magic, 0, 2);
  if (magic[0] != 0x1f || magic[1] != 0x8b)
    return g_steal_pointer (&buffered);
  g_autoptr (GZlibDecompressor) unpack = g_zlib_decompressor_new (G_ZLIB_COMPRESSOR_FORMAT_GZIP);
  return g_converter_input_stream_new (buffered, G_CONVERTER (unpack));
}

gboolean
tf_fits_is_whole (const char *path)
{
  g_return_val_if_fail (path != NULL, FALSE);
  g_autoptr (GInputStream) stream = open_stream (path);
  if (stream == NULL)
    return FALSE;
  int got = walk_unit (stream, TRUE);
  while (got == 1)
    got = walk_unit (stream, FALSE);
  return got == 0;
}
