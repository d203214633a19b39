/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-rice-private.h"

#include <string.h>

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
  return (packed & 1) != 0 ? ~(packed >> 1) : packed >> 1;
}

gboolean
tf_rice_decode (const guint8 *bytes, gsize n_bytes, guint pixel_bytes, guint block, guint n,
                gint32 *out)
{
  const guint code_bits = pixel_bytes == 4 ? 5 : pixel_bytes == 2 ? 4 : 3;
  const guint raw_code = pixel_bytes == 4   ? 25
                         : pixel_bytes == 2 ? 14
                                            : 6; /* differences stand unpacked */
  const guint width = 8 * pixel_bytes, up = 32 - width;
  Bits b = { bytes, bytes + n_bytes, 0, 0, FALSE };
  g_return_val_if_fail (block > 0, FALSE);
  guint32 last = take (&b, width);
  for (guint k = 0; k < n;)
    {
      guint end = n - k < block ? n : k + block, code = take (&b, code_bits);
      if (b.over)
        return FALSE;
      for (; k < end && !b.over; k++)
        {
          guint32 packed = 0;
          if (code > raw_code)
            packed = take (&b, width);
          else if (code > 0)
            {
              guint32 high = take_zeros (&b);
              packed = high << (code - 1) | take (&b, code - 1);
            }
          last += unfold (packed);
          out[k] = (gint32)(last << up) >> up;
        }
    }
  return !b.over;
}
