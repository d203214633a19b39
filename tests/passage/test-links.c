/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Links by hand-made circles: overlap, gaps, splits and mergers, two people, two vantages, cuts. */

#include "test-passage.h"

#include "tf-rotation.h"

#define EPOCH "2013-10-12T06:00:00Z"
#define DAY_S 86400.0

static TfTime
at (double days)
{
  return tf_time_add (tf_time_read (EPOCH), days * DAY_S);
}

/* A circle that turns with the law from longitude 100 at the epoch. */
static void
add_at (MadeSky *sky, guint truth, double days, const char *frame, double lon, double lat,
        double radius)
{
  made_sky_add (sky, truth, at (days), frame, lon + tf_rotation_carry (0, lat, days * DAY_S), lat,
                radius, 0.0, -30 + 13.2 * days);
}

static TfFollowParams
defaults (void)
{
  TfFollowParams params;
  tf_follow_params_init (&params);
  return params;
}

static guint
count (const GArray *links, TfLinkKind kind)
{
  guint n = 0;
  for (guint k = 0; k < links->len; k++)
    n += g_array_index (links, TfLink, k).kind == kind;
  return n;
}

/* Two circles of radius r whose middles are d apart share 2 r^2 acos (d/2r) - d/2 sqrt (4r^2 - d^2). */
static void
test_overlap_of_circles (void)
{
  TfFollowParams params = defaults ();
  static const double apart[] = { 0.0, 1.0, 3.0, 5.0, 7.0, 9.0 };
  for (guint k = 0; k < G_N_ELEMENTS (apart); k++)
    {
      double d = apart[k], r = 4.0;
      g_autoptr (TfOutline) a = tf_outline_new_cap (at (0), 100, 0, r, 72);
      g_autoptr (TfOutline) b = tf_outline_new_cap (at (0), 100 + d, 0, r, 72);
      double share = d < 2 * r ? (2 * r * r * acos (d / 2 / r) - d / 2 * sqrt (4 * r * r - d * d))
                                     / (G_PI * r * r)
                               : 0.0;
      tf_check_near ("overlap of two circles", tf_follow_overlap (a, b, 0.0, &params), share, 0.04);
    }
  g_autoptr (TfOutline) large = tf_outline_new_cap (at (0), 100, 20, 8, 72),
                        small = tf_outline_new_cap (at (0), 102, 21, 2, 72);
  tf_check_near ("a small circle within a large one",
                 tf_follow_overlap (large, small, 0.0, &params), 1.0, 0.1);
}

/* Carried for three days by each law: the overlap is whole when the other circle turned by that law,
 * and less when it turned by one that differs by 0.6 deg a day. */
static void
test_overlap_is_carried (void)
{
  TfFollowParams params = defaults ();
  for (guint law = 0; tf_rotation_names[law] != NULL; law++)
    {
      params.law = (int)law;
      double moved = tf_rotation_carry (law, 25.0, 3.0 * DAY_S);
      g_autoptr (TfOutline) a = tf_outline_new_cap (at (0), 100, 25, 3, 48),
                            b = tf_outline_new_cap (at (3), 100 + moved, 25, 3, 48),
                            c = tf_outline_new_cap (at (3), 100 + moved + 1.8, 25, 3, 48);
      double whole = tf_follow_overlap (a, b, 3.0 * DAY_S, &params),
             less = tf_follow_overlap (a, c, 3.0 * DAY_S, &params);
      tf_check_between ("carried by its own law", whole, 0.9, 1.0);
      tf_check_between ("carried by another", less, 0.5, 0.8);
    }
}

static void
test_gap (void)
{
  TfFollowParams params = defaults ();
  static const struct
  {
    double days;
    guint links;
  } gaps[] = { { 0.1, 1 }, { 2.9, 1 }, { 3.0, 1 }, { 3.1, 0 } };
  for (guint k = 0; k < G_N_ELEMENTS (gaps); k++)
    {
      g_autoptr (MadeSky) sky = made_sky_empty ();
      add_at (sky, 0, 0, "a", 100, 15, 3);
      add_at (sky, 0, gaps[k].days, "b", 100, 15, 3);
      g_autoptr (GArray) links = made_sky_links (sky, &params);
      g_assert_cmpuint (links->len, ==, gaps[k].links);
    }
}

/* On the middle frame one outline holds both neighbours: the larger goes on, the other ends in it and
 * is found again after it; nothing is forced into it. */
static void
test_neighbours_drawn_as_one (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = made_sky_empty ();
  add_at (sky, 0, 0, "a", 100, 15, 4);
  add_at (sky, 1, 0, "a", 107, 15, 2.5);
  add_at (sky, 0, 1, "b", 102.5, 15, 7);
  add_at (sky, 0, 2, "c", 100, 15, 4);
  add_at (sky, 1, 2, "c", 107, 15, 2.5);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_assert_cmpuint (count (links, TF_LINK_NEXT), ==, 3);
  g_assert_cmpuint (count (links, TF_LINK_INTO), ==, 1);
  g_assert_cmpuint (count (links, TF_LINK_FROM), ==, 1);
  g_assert_cmpuint (found->passages->len, ==, 2);
  g_assert_cmpuint (found->passage[1], ==, found->passage[4]);
  g_assert_cmpuint (found->passage[0], ==, found->passage[2]);
}

/* For good: a split is told of the passage that begins, a merger of the one that ends. */
static void
test_split_and_merger (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = made_sky_empty ();
  add_at (sky, 0, 0, "a", 102, 15, 6);
  add_at (sky, 0, 1, "b", 100, 15, 4);
  add_at (sky, 1, 1, "b", 106.5, 15, 2);
  add_at (sky, 0, 2, "c", 100, 15, 4);
  add_at (sky, 1, 2, "c", 106.5, 15, 2);
  add_at (sky, 0, 3, "d", 102, 15, 6);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_assert_cmpuint (found->passages->len, ==, 2);
  const TfPassage *small = &g_array_index (found->passages, TfPassage, found->passage[2]);
  guint large = found->passage[0];
  g_assert_cmpint (small->split_from, ==, (int)large);
  g_assert_cmpint (small->merged_into, ==, (int)large);
  g_assert_cmpint (g_array_index (found->passages, TfPassage, large).split_from, ==, -1);
}

static void
mark_last (MadeSky *sky, guint32 author, guint32 region)
{
  TfSighting *s = &g_array_index (sky->sightings, TfSighting, sky->sightings->len - 1);
  s->author = author;
  s->region = region;
}

/* Two people and a rule on one frame: one region, one passage; two outlines of one person never. */
static void
test_two_people (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = made_sky_empty ();
  add_at (sky, 0, 0, "a", 100, 15, 4);
  add_at (sky, 0, 0, "a", 100.5, 15.4, 3.5);
  mark_last (sky, 1, 7);
  add_at (sky, 0, 0, "a", 99.7, 14.8, 4.5);
  mark_last (sky, 2, 8);
  add_at (sky, 0, 1, "b", 100, 15, 4);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_assert_cmpuint (found->passages->len, ==, 1);
  g_assert_cmpuint (count (links, TF_LINK_SAME), ==, 2);
  g_assert_cmpuint (count (links, TF_LINK_NEXT), ==, 1);
  mark_last (sky, 0, 0);
  g_array_index (sky->sightings, TfSighting, 2).author = 1;
  g_autoptr (GArray) again = made_sky_links (sky, &params);
  g_autoptr (TfPassages) two = made_sky_follow (sky, again, &params);
  g_assert_cmpuint (two->passages->len, ==, 2);
}

/* Two vantages 60 deg apart see one region in two passages; 10 deg apart in one. */
static void
test_two_vantages (void)
{
  TfFollowParams params = defaults ();
  for (int apart = 10; apart <= 60; apart += 50)
    {
      g_autoptr (MadeSky) sky = made_sky_empty ();
      for (int n = 0; n < 8; n++)
        {
          g_autofree char *frame = g_strdup_printf ("%d", n);
          add_at (sky, 0, n * 0.5, frame, 100, 15, 4);
          if (n % 2 == 1)
            g_array_index (sky->sightings, TfSighting, n).observer_lon_deg = -apart;
        }
      g_autoptr (GArray) links = made_sky_links (sky, &params);
      g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
      g_assert_cmpuint (found->passages->len, ==, apart == 10 ? 1 : 2);
      for (guint k = 0; k < found->passages->len; k++)
        g_assert_cmpuint (g_array_index (found->passages, TfPassage, k).region, ==, 0);
    }
}

static void
test_ties (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = made_sky_empty ();
  for (int n = 0; n < 4; n++)
    {
      g_autofree char *frame = g_strdup_printf ("%d", n);
      add_at (sky, 0, n, frame, 100, 15, 4);
    }
  const TfSighting *s = (const TfSighting *)(void *)sky->sightings->data;
  TfTie cut = { 1, 2, TRUE }, link = { 0, 3, FALSE };
  g_autoptr (GArray) links = tf_follow_links (s, 4, &cut, 1, &params);
  g_autoptr (TfPassages) parted = tf_follow_passages (s, 4, (TfLink *)(void *)links->data,
                                                      links->len, &cut, 1, NULL, 0, &params);
  g_assert_cmpuint (parted->passages->len, ==, 2);
  g_assert_cmpuint (parted->passage[0], ==, parted->passage[1]);
  g_assert_cmpuint (parted->passage[2], ==, parted->passage[3]);
  g_assert_cmpuint (g_array_index (parted->passages, TfPassage, 1).region, ==, 1);
  g_autoptr (TfPassages) none = tf_follow_passages (s, 4, NULL, 0, &link, 1, NULL, 0, &params);
  g_assert_cmpuint (none->passages->len, ==, 3);
  g_assert_cmpuint (none->passage[0], ==, none->passage[3]);
}

static void
test_nothing (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = made_sky_empty ();
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_assert_cmpuint (links->len, ==, 0);
  g_assert_cmpuint (found->passages->len, ==, 0);
  made_sky_add (sky, 0, TF_TIME_UNKNOWN, "a", 100, 15, 4, 0, 0);
  made_sky_add (sky, 0, TF_TIME_UNKNOWN, "b", 100, 15, 4, 0, 0);
  g_autoptr (GArray) timeless = made_sky_links (sky, &params);
  g_autoptr (TfPassages) alone = made_sky_follow (sky, timeless, &params);
  g_assert_cmpuint (timeless->len, ==, 0);
  g_assert_cmpuint (alone->passages->len, ==, 2);
}

void
add_links_tests (void)
{
  g_test_add_func ("/passage/links/circles-overlap-as-they-should", test_overlap_of_circles);
  g_test_add_func ("/passage/links/outlines-are-carried-by-the-law", test_overlap_is_carried);
  g_test_add_func ("/passage/links/gaps-up-to-three-days", test_gap);
  g_test_add_func ("/passage/links/neighbours-drawn-as-one-part-again",
                   test_neighbours_drawn_as_one);
  g_test_add_func ("/passage/links/splits-and-mergers-are-told", test_split_and_merger);
  g_test_add_func ("/passage/links/two-people-draw-one-region", test_two_people);
  g_test_add_func ("/passage/links/two-vantages-see-one-region", test_two_vantages);
  g_test_add_func ("/passage/links/ties-part-and-join", test_ties);
  g_test_add_func ("/passage/links/nothing-gives-nothing", test_nothing);
}
