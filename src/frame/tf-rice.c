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

/* One coded difference, however near the end: zeros, a one, @low bits. */
static guint32
take_coded (Bits *b, guint low)
{
  guint32 high = take_zeros (b);
  return high << low | take (b, low);
}

/* Coded differences with @low < 32 plain bits each. What the next 32 bits and more hold is taken
 * at once; a long run of zeros and the last bytes are left to take_coded. */
TF_HOT static void
coded_block (Bits *shared, Chain *chain_shared, guint low, guint n, gint32 *out)
{
  Bits b = *shared;
  Chain chain = *chain_shared;
  for (guint k = 0; k < n && !b.over; k++)
    {
      if (b.held < 32)
        refill (&b);
      guint lead = (guint)__builtin_clzll (b.bits | 1);
      if (lead + low + 1 > b.held)
        {
          *shared = b;
          guint32 packed = take_coded (shared, low);
          b = *shared;
          out[k] = step (&chain, packed);
          continue;
        }
      guint64 rest = b.bits << lead << 1;
      guint32 packed = lead << low | (guint32)(rest >> 1 >> (63 - low));
      b.bits = rest << low;
      b.held -= lead + 1 + low;
      out[k] = step (&chain, packed);
    }
  *shared = b;
  *chain_shared = chain;
}

/* Differences that stand unpacked, @width bits each. */
static void
plain_block (Bits *b, Chain *chain, guint width, guint n, gint32 *out)
{
  for (guint k = 0; k < n && !b->over; k++)
    out[k] = step (chain, take (b, width));
}

gboolean
tf_rice_decode (const guint8 *bytes, gsize n_bytes, guint pixel_bytes, guint block, guint n,
                gint32 *out)
{
  const guint code_bits = pixel_bytes == 4 ? 5 : pixel_bytes == 2 ? 4 : 3;
  const guint plain_code = pixel_bytes == 4 ? 25 : pixel_bytes == 2 ? 14 : 6;
  const guint width = 8 * pixel_bytes;
  Bits b = { bytes, bytes + n_bytes, 0, 0, FALSE };
  g_return_val_if_fail (block > 0, FALSE);
  Chain chain = { take (&b, width), 32 - width };
  for (guint k = 0; k < n && !b.over;)
    {
      guint count = MIN (block, n - k), code = take (&b, code_bits);
      if (b.over)
        return FALSE;
      if (code > plain_code)
        plain_block (&b, &chain, width, count, out + k);
      else if (code > 0)
        coded_block (&b, &chain, code - 1, count, out + k);
      else
        for (guint j = 0; j < count; j++)
          out[k + j] = step (&chain, 0);
      k += count;
    }
  return !b.over;
}
