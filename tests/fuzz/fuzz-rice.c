/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* RICE_1 tiles, sound and mutated, into the decoder, from and into memory of exactly their size, so that the sanitizers see every
 * byte read or written outside. Sound ones must come back as they went in, alone and two together; of mutated ones
 * two together must say what each says alone.
 * Usage: fuzz-rice [TILES [SEED]] */

#include <glib.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "tf-rice-private.h"

enum
{
  LONGEST = 400 /* pixels of a tile */
};

typedef struct
{
  guint pixel_bytes, block, n;
  gint32 pixels[LONGEST];
  GByteArray *bytes;
} Tile;

typedef struct
{
  GByteArray *bytes;
  guint used; /* bits of the last byte */
} Writer;

static void
put (Writer *w, guint32 value, guint bits)
{
  for (guint k = bits; k-- > 0;)
    {
      if (w->used % 8 == 0)
        g_byte_array_append (w->bytes, (const guint8 *)"", 1);
      w->bytes->data[w->bytes->len - 1] |= (guint8)(((value >> k) & 1) << (7 - w->used % 8));
      w->used++;
    }
}

/* The standard's coding, bit by bit, with any code that holds the block, not only the shortest. */
static void
put_block (Writer *w, GRand *chance, guint pixel_bytes, const guint32 *folded, guint n)
{
  guint code_bits = pixel_bytes == 4 ? 5 : pixel_bytes == 2 ? 4 : 3;
  guint plain = pixel_bytes == 4 ? 26 : pixel_bytes == 2 ? 15 : 7;
  guint code = (guint)g_rand_int_range (chance, 0, (gint)plain + 1);
  for (guint k = 0; k < n; k++)
    while (code < plain && (code == 0 ? folded[k] != 0 : folded[k] >> (code - 1) > 300))
      code++;
  put (w, code, code_bits);
  for (guint k = 0; k < n && code > 0; k++)
    if (code == plain)
      put (w, folded[k], 8 * pixel_bytes);
    else
      {
        for (guint32 zeros = folded[k] >> (code - 1); zeros > 0; zeros--)
          put (w, 0, 1);
        put (w, 1, 1);
        put (w, folded[k], code - 1);
      }
}

static void
make_tile (Tile *t, GRand *chance, guint pixel_bytes, guint block, guint n)
{
  guint32 folded[LONGEST], mask = pixel_bytes == 4 ? G_MAXUINT32 : (1u << (8 * pixel_bytes)) - 1;
  guint up = 32 - 8 * pixel_bytes, loud = (guint)g_rand_int_range (chance, 0, 33);
  guint32 value = g_rand_int (chance) & mask;
  Writer w = { g_byte_array_new (), 0 };
  *t = (Tile){ .pixel_bytes = pixel_bytes, .block = block, .n = n, .bytes = w.bytes };
  put (&w, value, 8 * pixel_bytes);
  for (guint k = 0; k < n; k++)
    {
      guint32 step = loud == 0 ? 0 : g_rand_int (chance) >> (32 - loud);
      folded[k] = (k / block % 3 == 1 ? 0 : step) & mask;
      value += (folded[k] & 1) != 0 ? ~(folded[k] >> 1) : folded[k] >> 1;
      t->pixels[k] = (gint32)(value << up) >> up;
    }
  for (guint k = 0; k < n; k += block)
    put_block (&w, chance, pixel_bytes, folded + k, MIN (block, n - k));
}

static void
fail (const char *what)
{
  printf ("not ok 1 - %s\n", what);
  exit (1);
}

/* One tile from and into memory of its very size. */
static gboolean
decode_alone (const Tile *t, const guint8 *bytes, gsize n_bytes, gint32 *out)
{
  g_autofree guint8 *own = g_memdup2 (bytes, n_bytes);
  g_autofree gint32 *room = g_new0 (gint32, t->n);
  gboolean good = tf_rice_decode (own, n_bytes, t->pixel_bytes, t->block, t->n, room);
  memcpy (out, room, t->n * sizeof *out);
  return good;
}

static gboolean
decode_both (const Tile *t, const guint8 *const bytes[2], const gsize n_bytes[2], gint32 (*out)[LONGEST])
{
  g_autofree guint8 *a = g_memdup2 (bytes[0], n_bytes[0]), *b = g_memdup2 (bytes[1], n_bytes[1]);
  g_autofree gint32 *c = g_new0 (gint32, t->n), *d = g_new0 (gint32, t->n);
  const guint8 *const own[2] = { a, b };
  gint32 *const room[2] = { c, d };
  gboolean good = tf_rice_decode_two (own, n_bytes, t->pixel_bytes, t->block, t->n, room);
  memcpy (out[0], c, t->n * sizeof *c);
  memcpy (out[1], d, t->n * sizeof *d);
  return good;
}

/* @sound: nothing was mutated. */
static void
judge (const Tile tiles[2], gboolean sound)
{
  static const char *const words[] = { "a sound tile comes back changed", "two tiles together are not what they are alone" };
  gint32 alone[2][LONGEST], both[2][LONGEST];
  gboolean good[2];
  const guint8 *const bytes[2] = { tiles[0].bytes->data, tiles[1].bytes->data };
  const gsize n_bytes[2] = { tiles[0].bytes->len, tiles[1].bytes->len };
  gsize size = tiles[0].n * sizeof (gint32);
  for (guint k = 0; k < 2; k++)
    {
      good[k] = decode_alone (&tiles[k], bytes[k], n_bytes[k], alone[k]);
      if (sound && (!good[k] || memcmp (alone[k], tiles[k].pixels, size) != 0))
        fail (words[0]);
    }
  gboolean together = decode_both (&tiles[0], bytes, n_bytes, both);
  if (together != (good[0] && good[1])
      || (together && (memcmp (both[0], alone[0], size) != 0 || memcmp (both[1], alone[1], size) != 0)))
    fail (words[1]);
}

static void
mutate (GByteArray *bytes, GRand *chance)
{
  if (g_rand_int_range (chance, 0, 3) == 0)
    g_byte_array_set_size (bytes, (guint)g_rand_int_range (chance, 0, (gint)bytes->len + 1));
  for (gint k = g_rand_int_range (chance, 0, 6); k > 0 && bytes->len > 0; k--)
    bytes->data[g_rand_int_range (chance, 0, (gint)bytes->len)] = (guint8)g_rand_int_range (chance, 0, 256);
  if (g_rand_int_range (chance, 0, 4) == 0 && bytes->len > 8) /* a long run of zeros */
    memset (bytes->data + bytes->len / 2, 0, bytes->len / 4);
}

int
main (int argc, char **argv)
{
  static const guint widths[] = { 1, 2, 4 };
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 20000;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 5;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  for (guint turn = 0; turn < n; turn++)
    {
      Tile tiles[2];
      guint width = widths[turn % 3], block = turn % 2 == 0 ? 32 : (guint)g_rand_int_range (chance, 1, 70);
      guint pixels = (guint)g_rand_int_range (chance, 1, LONGEST + 1);
      for (guint k = 0; k < 2; k++)
        make_tile (&tiles[k], chance, width, block, pixels);
      judge (tiles, TRUE);
      for (guint k = 0; k < 2; k++)
        mutate (tiles[k].bytes, chance);
      judge (tiles, FALSE);
      for (guint k = 0; k < 2; k++)
        g_byte_array_unref (tiles[k].bytes);
    }
  printf ("ok 1 - %u pairs of tiles, sound and mutated\n1..1\n", n);
  return 0;
}
