/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-many.h"

#include <string.h>
#include <sys/mman.h>

enum
{
  LARGE = 2 * 1024 * 1024
};

/* Advice on the whole large pages inside: a refusal only costs speed. */
static gpointer
advise (gpointer block, gsize bytes)
{
  gsize first = ((gsize)block + LARGE - 1) / LARGE * LARGE, end = ((gsize)block + bytes) / LARGE * LARGE;
  if (end > first)
    madvise ((gpointer)first, end - first, MADV_HUGEPAGE);
  return block;
}

gpointer
tf_many (gsize n, gsize size)
{
  return advise (g_malloc_n (n, size), n * size);
}

gpointer
tf_many0 (gsize n, gsize size)
{
  return advise (g_malloc0_n (n, size), n * size);
}

gpointer
tf_dup_many (gconstpointer items, gsize n, gsize size)
{
  gpointer copy = tf_many (n, size);
  if (n > 0)
    memcpy (copy, items, n * size);
  return copy;
}

GArray *
tf_array_of_many (guint size, guint n)
{
  GArray *array = g_array_sized_new (FALSE, FALSE, size, n);
  advise (array->data, (gsize)n * size);
  return array;
}
