/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Invented disks: at least 97 of 100 links right, no two regions in one passage, and the same answer
 * whatever the order. The long campaign is in tests/long. */

#include "test-passage.h"

#include <string.h>

static const struct
{
  const char *name;
  double cadence_hours, missing_days;
} skies[] = {
  { "every-96-minutes", 1.6, 0.15 },
  { "every-6-hours", 6.0, 0.25 },
  { "every-12-hours", 12.0, 0.25 },
  { "every-day", 24.0, 0.2 },
};

static void
test_sky (gconstpointer data)
{
  guint which = GPOINTER_TO_UINT (data);
  TfFollowParams params;
  MadeParams made;
  tf_follow_params_init (&params);
  made_params_init (&made);
  made.cadence_hours = skies[which].cadence_hours;
  made.missing_days = skies[which].missing_days;
  made.seed = which + 1;
  g_autoptr (MadeSky) sky = made_sky_new (&made);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  MadeScore score = made_sky_score (sky, links, found, params.gap_days * 86400.0);
  g_test_message ("%u of %u links right, %u wrong, %u passages of two regions", score.right,
                  score.pairs, score.wrong, score.mixed);
  g_assert_cmpuint (score.pairs, >, 100);
  tf_check_between ("share of links that are right",
                    (double)score.right / (score.pairs + score.wrong), 0.97, 1.0);
  g_assert_cmpuint (score.mixed, ==, 0);
}

static int
compare_lines (gconstpointer a, gconstpointer b)
{
  return strcmp (*(char *const *)a, *(char *const *)b);
}

/* Passages as one text: ids of sightings, passage by passage. */
static char *
describe (const GArray *sightings, const TfPassages *found)
{
  g_autoptr (GPtrArray) lines = g_ptr_array_new_with_free_func (g_free);
  for (guint k = 0; k < sightings->len; k++)
    {
      const TfPassage *p = &g_array_index (found->passages, TfPassage, found->passage[k]);
      g_ptr_array_add (lines, g_strdup_printf ("%s %u %d%d %d %d %u",
                                               g_array_index (sightings, TfSighting, k).id,
                                               found->passage[k], p->born, p->ended, p->split_from,
                                               p->merged_into, p->region));
    }
  g_ptr_array_sort (lines, compare_lines);
  g_ptr_array_add (lines, NULL);
  return g_strjoinv ("\n", (char **)lines->pdata);
}

static void
test_order (void)
{
  TfFollowParams params;
  MadeParams made;
  tf_follow_params_init (&params);
  made_params_init (&made);
  made.seed = 5;
  g_autoptr (MadeSky) sky = made_sky_new (&made);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_autofree char *as_they_came = describe (sky->sightings, found);
  g_autoptr (GRand) lot = g_rand_new_with_seed (9);
  for (int round = 0; round < 3; round++)
    {
      for (guint k = sky->sightings->len - 1; k > 0; k--)
        {
          guint other = (guint)g_rand_int_range (lot, 0, (gint32)k + 1);
          TfSighting held = g_array_index (sky->sightings, TfSighting, k);
          g_array_index (sky->sightings, TfSighting, k)
              = g_array_index (sky->sightings, TfSighting, other);
          g_array_index (sky->sightings, TfSighting, other) = held;
        }
      g_autoptr (GArray) again = made_sky_links (sky, &params);
      g_autoptr (TfPassages) same = made_sky_follow (sky, again, &params);
      g_autofree char *shuffled = describe (sky->sightings, same);
      g_assert_cmpstr (shuffled, ==, as_they_came);
    }
}

/* A part done again alone gives the links it gave in the whole: nothing outside their ends matters. */
static void
test_local (void)
{
  TfFollowParams params;
  MadeParams made;
  tf_follow_params_init (&params);
  made_params_init (&made);
  made.seed = 6;
  g_autoptr (MadeSky) sky = made_sky_new (&made);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  double from = g_array_index (sky->sightings, TfSighting, sky->sightings->len / 3).time.s;
  double to = g_array_index (sky->sightings, TfSighting, 2 * sky->sightings->len / 3).time.s;
  g_autoptr (GArray) part = g_array_new (FALSE, FALSE, sizeof (TfSighting));
  for (guint k = 0; k < sky->sightings->len; k++)
    {
      const TfSighting *s = &g_array_index (sky->sightings, TfSighting, k);
      if (s->time.s >= from && s->time.s <= to)
        g_array_append_val (part, *s);
    }
  g_autoptr (GArray) alone
      = tf_follow_links ((const TfSighting *)(void *)part->data, part->len, NULL, 0, &params);
  guint n = 0;
  for (guint k = 0; k < links->len; k++)
    {
      const TfLink *l = &g_array_index (links, TfLink, k);
      const TfSighting *a = &g_array_index (sky->sightings, TfSighting, l->a),
                       *b = &g_array_index (sky->sightings, TfSighting, l->b);
      if (a->time.s < from || b->time.s > to)
        continue;
      const TfLink *m = &g_array_index (alone, TfLink, n);
      g_assert_cmpuint (n++, <, alone->len);
      g_assert_cmpstr (g_array_index (part, TfSighting, m->a).id, ==, a->id);
      g_assert_cmpstr (g_array_index (part, TfSighting, m->b).id, ==, b->id);
      g_assert_cmpint (m->kind, ==, l->kind);
    }
  g_assert_cmpuint (n, ==, alone->len);
  g_assert_cmpuint (n, >, 100);
}

void
add_sky_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (skies); k++)
    {
      g_autofree char *path = g_strdup_printf ("/passage/sky/%s-links-are-right", skies[k].name);
      g_test_add_data_func (path, GUINT_TO_POINTER (k), test_sky);
    }
  g_test_add_func ("/passage/sky/any-order-gives-the-same", test_order);
  g_test_add_func ("/passage/sky/a-part-alone-gives-the-same", test_local);
}
