/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-distinct.h"

#include "tf-many.h"

/* Ids are as a rule numbers from 1 up without many gaps: those stand in a table of their own, by
 * themselves. The others by open addressing; a place holds its id and number plus one, 0 is free. */
typedef struct
{
  guint32 id;
  guint number;
} Place;

struct _TfDistinct
{
  guint n;
  guint limit;   /* of the ids that stand by themselves */
  guint *direct; /* number plus one */
  guint n_placed, bits;
  Place *places; /* 1 << bits of them, more than half of them free; NULL: none yet */
};

static Place *
place_of (const TfDistinct *distinct, guint32 id)
{
  guint mask = (1u << distinct->bits) - 1;
  guint at = (guint)((id * 2654435769u) >> (32 - distinct->bits)); /* Knuth, vol. 3, sec. 6.4 */
  while (distinct->places[at].number != 0 && distinct->places[at].id != id)
    at = (at + 1) & mask;
  return &distinct->places[at];
}

static void
make_room (TfDistinct *distinct, guint bits)
{
  g_autofree Place *before = distinct->places;
  guint n = before != NULL ? 1u << distinct->bits : 0;
  distinct->bits = bits;
  distinct->places = g_new0 (Place, 1u << bits);
  for (guint k = 0; k < n; k++)
    if (before[k].number != 0)
      *place_of (distinct, before[k].id) = before[k];
}

TfDistinct *
tf_distinct_new (guint expected)
{
  TfDistinct *distinct = g_new0 (TfDistinct, 1);
  distinct->limit = 2 * MIN (expected, 1u << 27) + 64;
  distinct->direct = tf_new0_many (guint, distinct->limit);
  return distinct;
}

void
tf_distinct_free (TfDistinct *distinct)
{
  if (distinct == NULL)
    return;
  g_free (distinct->direct);
  g_free (distinct->places);
  g_free (distinct);
}

static guint
add_placed (TfDistinct *distinct, guint32 id)
{
  if (distinct->places == NULL || distinct->n_placed >= (1u << distinct->bits) / 2)
    make_room (distinct, distinct->places == NULL ? 6 : distinct->bits + 1);
  Place *place = place_of (distinct, id);
  if (place->number == 0)
    {
      *place = (Place){ id, ++distinct->n };
      distinct->n_placed++;
    }
  return place->number - 1;
}

guint
tf_distinct_add (TfDistinct *distinct, guint32 id)
{
  if (id >= distinct->limit)
    return add_placed (distinct, id);
  if (distinct->direct[id] == 0)
    distinct->direct[id] = ++distinct->n;
  return distinct->direct[id] - 1;
}

guint
tf_distinct_find (const TfDistinct *distinct, guint32 id)
{
  guint number = id < distinct->limit        ? distinct->direct[id]
                 : distinct->places != NULL ? place_of (distinct, id)->number
                                            : 0;
  return number == 0 ? G_MAXUINT : number - 1;
}

guint
tf_distinct_get_n (const TfDistinct *distinct)
{
  return distinct->n;
}
