/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-sort.h"

#include <math.h>
#include <string.h>

#include "tf-many.h"

/* By the bytes of what a double looks like, turned so that it counts upwards (Knuth, vol. 3, sec. 5.2.5). */

typedef struct
{
  guint64 key;
  guint row;
} Item;

static guint64
key_of (double value)
{
  guint64 bits;
  if (isnan (value))
    return G_MAXUINT64;
  if (!(value < 0.0) && !(value > 0.0))
    value = 0.0; /* of either sign */
  memcpy (&bits, &value, sizeof bits);
  return bits >> 63 ? ~bits : bits | (G_GUINT64_CONSTANT (1) << 63);
}

static gboolean
in_order (const Item *items, guint n)
{
  for (guint k = 1; k < n; k++)
    if (items[k - 1].key > items[k].key)
      return FALSE;
  return TRUE;
}

static void
insert (Item *items, guint n)
{
  for (guint k = 1; k < n; k++)
    {
      Item item = items[k];
      guint at = k;
      for (; at > 0 && items[at - 1].key > item.key; at--)
        items[at] = items[at - 1];
      items[at] = item;
    }
}

static void
sort_by_byte (const Item *from, Item *to, guint n, guint shift)
{
  guint start[257] = { 0 };
  for (guint k = 0; k < n; k++)
    start[((from[k].key >> shift) & 255u) + 1]++;
  for (guint byte = 0; byte < 256; byte++)
    start[byte + 1] += start[byte];
  for (guint k = 0; k < n; k++)
    to[start[(from[k].key >> shift) & 255u]++] = from[k];
}

static void
sort (Item *items, guint n)
{
  if (in_order (items, n))
    return;
  if (n < 64)
    {
      insert (items, n);
      return;
    }
  g_autofree Item *other = tf_new_many (Item, n);
  for (guint shift = 0; shift < 64; shift += 16)
    {
      sort_by_byte (items, other, n, shift);
      sort_by_byte (other, items, n, shift + 8);
    }
}

static Item *
items_of (const double *keys, guint n)
{
  Item *items = tf_new_many (Item, n + 1);
  for (guint k = 0; k < n; k++)
    items[k] = (Item){ key_of (keys[k]), k };
  sort (items, n);
  return items;
}

void
tf_sort_numbers (double *values, guint n)
{
  g_autofree double *given = tf_dup_many (values, n, sizeof *values);
  g_autofree Item *items = items_of (values, n);
  for (guint k = 0; k < n; k++)
    values[k] = given[items[k].row];
}

guint *
tf_sort_order (const double *keys, guint n)
{
  guint *order = tf_new_many (guint, n + 1);
  g_autofree Item *items = items_of (keys, n);
  for (guint k = 0; k < n; k++)
    order[k] = items[k].row;
  return order;
}
