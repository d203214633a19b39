/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-rice-private.h"

#include <string.h>

#if defined(__x86_64__) && defined(__GNUC__) && !defined(__clang__)                                \
    && !defined(__SANITIZE_ADDRESS__)
#define TF_HOT __attribute__ ((target_clones ("arch=x86-64-v3", "default")))
#else
#define TF_HOT
#endif

/* The bits of a tile, most significant first. Beyond the end come zeros, and `over` grows;
 * every call that may go over is followed by a look at it before the number is used. */
typedef struct
{
  const guint8 *next, *end;
  guint64 bits; /* the next ones at the top */
  guint held;   /* how many are valid */
  gboolean over;
} Bits;

static inline void
refill (Bits *b)
{
  if (b->end - b->next >= 8)
    {
      guint64 more;
      memcpy (&more, b->next, 8);
      b->bits |= GUINT64_FROM_BE (more) >> b->held;
      guint taken = (63 - b->held) / 8;
      b->next += taken;
      b->held += taken * 8;
      return;
    }
  while (b->held <= 56 && b->next < b->end)
    {
      b->bits |= (guint64)*b->next++ << (56 - b->held);
      b->held += 8;
    }
}

/* @n <= 32 bits. */
static inline guint32
take (Bits *b, guint n)
{
  if (n == 0)
    return 0;
  if (b->held < n)
    refill (b);
  if (b->held < n)
    {
      b->over = TRUE;
      return 0;
    }
  guint32 value = (guint32)(b->bits >> (64 - n));
  b->bits <<= n;
  b->held -= n;
  return value;
}

/* Zeros before the next one, the one taken too. */
static inline guint32
take_zeros (Bits *b)
{
  guint32 zeros = 0;
  for (;;)
    {
      if (b->held < 33)
        refill (b);
      guint lead = b->bits == 0 ? 64 : (guint)__builtin_clzll (b->bits);
      if (lead < b->held)
        {
          b->bits <<= lead;
          b->bits <<= 1;
          b->held -= lead + 1;
          return zeros + lead;
        }
      zeros += b->held;
      b->bits = 0;
      b->held = 0;
      if (b->next >= b->end)
        {
          b->over = TRUE;
          return 0;
        }
    }
}

/* Differences are packed so that small ones of both signs are small: 0 -1 1 -2 2 as 0 1 2 3 4. */
static inline guint32
unfold (guint32 packed)
{
  return (packed >> 1) ^ -(packed & 1);
}

/* The value before, carried from pixel to pixel; pixels narrower than 32 bits wrap in their own
 * width. */
typedef struct
{
  guint32 last;
  guint up; /* 32 - width */
} Chain;

static inline gint32
step (Chain *chain, guint32 packed)
{
  chain->last += unfold (packed);
  return (gint32)(chain->last << chain->up) >> chain->up;
}

/* A tile while it is decoded. */
typedef struct
{
  Bits bits;
  Chain chain;
} Tile;

/* One coded difference, however near the end: zeros, a one, @low bits. */
static guint32
take_coded (Bits *b, guint low)
{
  guint32 high = take_zeros (b);
  return high << low | take (b, low);
}

/* The same when what is held has all of it; FALSE, and nothing taken, when not. */
static inline gboolean
take_held (Bits *b, guint low, guint32 *packed)
{
  if (b->held < 32)
    refill (b);
  if (b->bits == 0)
    return FALSE;
  guint lead = (guint)__builtin_clzll (b->bits);
  if (lead + low + 1 > b->held)
    return FALSE;
  guint64 rest = b->bits << lead << 1;
  *packed = lead << low | (guint32)(rest >> 1 >> (63 - low));
  b->bits = rest << low;
  b->held -= lead + 1 + low;
  return TRUE;
}

/* Coded differences with @low < 32 plain bits each. Copies stay in registers; a long run of zeros
 * and the last bytes go the slow way. */
TF_HOT static void
coded_block (Tile *tile, guint low, guint n, gint32 *out)
{
  Tile t = *tile;
  for (guint k = 0; k < n && !t.bits.over; k++)
    {
      guint32 packed;
      if (!take_held (&t.bits, low, &packed))
        {
          tile->bits = t.bits;
          packed = take_coded (&tile->bits, low);
          t.bits = tile->bits;
        }
      out[k] = step (&t.chain, packed);
    }
  *tile = t;
}

/* Two tiles in turn: each waits for its own bits, so the processor has twice as much at hand. */
TF_HOT static void
coded_blocks (Tile tiles[2], const guint low[2], guint n, gint32 *const out[2])
{
  Tile a = tiles[0], b = tiles[1];
  gint32 *out_a = out[0], *out_b = out[1];
  guint low_a = low[0], low_b = low[1];
  for (guint k = 0; k < n && !(a.bits.over | b.bits.over); k++)
    {
      guint32 packed_a, packed_b;
      if (!take_held (&a.bits, low_a, &packed_a))
        {
          tiles[0].bits = a.bits;
          packed_a = take_coded (&tiles[0].bits, low_a);
          a.bits = tiles[0].bits;
        }
      if (!take_held (&b.bits, low_b, &packed_b))
        {
          tiles[1].bits = b.bits;
          packed_b = take_coded (&tiles[1].bits, low_b);
          b.bits = tiles[1].bits;
        }
      out_a[k] = step (&a.chain, packed_a);
      out_b[k] = step (&b.chain, packed_b);
    }
  tiles[0] = a;
  tiles[1] = b;
}

/* How a block stands: coded (then @low is how many plain bits), or all alike, or plain. */
typedef enum
{
  BLOCK_ALIKE,
  BLOCK_CODED,
  BLOCK_PLAIN
} BlockKind;

static BlockKind
take_kind (Bits *b, guint pixel_bytes, guint *low)
{
  guint code = take (b, pixel_bytes == 4 ? 5 : pixel_bytes == 2 ? 4 : 3);
  if (code > (pixel_bytes == 4 ? 25 : pixel_bytes == 2 ? 14 : 6))
    return BLOCK_PLAIN;
  *low = MAX (code, 1) - 1;
  return code > 0 ? BLOCK_CODED : BLOCK_ALIKE;
}

static void
any_block (Tile *t, BlockKind kind, guint low, guint n, gint32 *out)
{
  gint32 alike = step (&t->chain, 0);
  if (kind == BLOCK_CODED)
    coded_block (t, low, n, out);
  else if (kind == BLOCK_PLAIN)
    for (guint k = 0; k < n && !t->bits.over; k++)
      out[k] = step (&t->chain, take (&t->bits, 32 - t->chain.up));
  else
    for (guint k = 0; k < n; k++)
      out[k] = alike;
}

static Tile
begin (const guint8 *bytes, gsize n_bytes, guint pixel_bytes)
{
  Tile t = { { bytes, bytes + n_bytes, 0, 0, FALSE }, { 0, 32 - 8 * pixel_bytes } };
  t.chain.last = take (&t.bits, 8 * pixel_bytes);
  return t;
}

gboolean
tf_rice_decode (const guint8 *bytes, gsize n_bytes, guint pixel_bytes, guint block, guint n,
                gint32 *out)
{
  g_return_val_if_fail (block > 0, FALSE);
  Tile t = begin (bytes, n_bytes, pixel_bytes);
  for (guint k = 0; k < n && !t.bits.over; k += MIN (block, n - k))
    {
      guint low = 0;
      BlockKind kind = take_kind (&t.bits, pixel_bytes, &low);
      any_block (&t, kind, low, MIN (block, n - k), out + k);
    }
  return !t.bits.over;
}

gboolean
tf_rice_decode_two (const guint8 *const bytes[2], const gsize n_bytes[2], guint pixel_bytes,
                    guint block, guint n, gint32 *const out[2])
{
  g_return_val_if_fail (block > 0, FALSE);
  Tile t[2] = { begin (bytes[0], n_bytes[0], pixel_bytes), begin (bytes[1], n_bytes[1], pixel_bytes) };
  for (guint k = 0, count; k < n && !(t[0].bits.over | t[1].bits.over); k += count)
    {
      guint low[2] = { 0 };
      BlockKind kind[2] = { take_kind (&t[0].bits, pixel_bytes, &low[0]),
                            take_kind (&t[1].bits, pixel_bytes, &low[1]) };
      count = MIN (block, n - k);
      if (kind[0] == BLOCK_CODED && kind[1] == BLOCK_CODED)
        {
          gint32 *const at[2] = { out[0] + k, out[1] + k };
          coded_blocks (t, low, count, at);
          continue;
        }
      for (guint i = 0; i < 2; i++)
        any_block (&t[i], kind[i], low[i], count, out[i] + k);
    }
  return !(t[0].bits.over | t[1].bits.over);
}
