/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-distinct.h"

/* Open addressing; a place holds the number of its id plus one, 0 is free. */
struct _TfDistinct
{
  guint n, bits;
  guint32 *ids;    /* by number */
  guint *places;   /* 1 << bits of them, more than half of them free */
};

static guint
place_of (const TfDistinct *distinct, guint32 id)
{
  guint mask = (1u << distinct->bits) - 1;
  guint at = (guint)((id * 2654435769u) >> (32 - distinct->bits)); /* Knuth, vol. 3, sec. 6.4 */
  while (distinct->places[at] != 0 && distinct->ids[distinct->places[at] - 1] != id)
    at = (at + 1) & mask;
  return at;
}

static void
make_room (TfDistinct *distinct, guint bits)
{
  g_free (distinct->places);
  distinct->bits = bits;
  distinct->ids = g_renew (guint32, distinct->ids, (1u << bits) / 2 + 1);
  distinct->places = g_new0 (guint, 1u << bits);
  for (guint k = 0; k < distinct->n; k++)
    distinct->places[place_of (distinct, distinct->ids[k])] = k + 1;
}

TfDistinct *
tf_distinct_new (guint expected)
{
  TfDistinct *distinct = g_new0 (TfDistinct, 1);
  guint bits = 4;
  while (bits < 28 && (1u << bits) / 2 < expected)
    bits++;
  make_room (distinct, bits);
  return distinct;
}

void
tf_distinct_free (TfDistinct *distinct)
{
  if (distinct == NULL)
    return;
  g_free (distinct->ids);
  g_free (distinct->places);
  g_free (distinct);
}

guint
tf_distinct_add (TfDistinct *distinct, guint32 id)
{
  guint at = place_of (distinct, id);
  if (distinct->places[at] != 0)
    return distinct->places[at] - 1;
  if (distinct->n >= (1u << distinct->bits) / 2)
    {
      make_room (distinct, distinct->bits + 1);
      at = place_of (distinct, id);
    }
  distinct->ids[distinct->n] = id;
  distinct->places[at] = ++distinct->n;
  return distinct->n - 1;
}

guint
tf_distinct_find (const TfDistinct *distinct, guint32 id)
{
  guint at = place_of (distinct, id);
  return distinct->places[at] == 0 ? G_MAXUINT : distinct->places[at] - 1;
}

guint
tf_distinct_get_n (const TfDistinct *distinct)
{
  return distinct->n;
}
