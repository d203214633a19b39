/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Hints on small built frames: what is told with a hint, and what is refused. */

#include <math.h>

#include "hints-compare.h"
#include "region-builder.h"
#include "tf-hint-private.h"
#include "test-hints.h"

static GPtrArray *
hints_of (const BuilderPole *poles, guint n, double noise)
{
  BuilderFrame how;
  builder_init (&how, 5.0, 15.0, 2.0);
  how.half_deg = 17.0;
  how.noise = noise;
  how.fine = 1;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, n);
  GPtrArray *hints = hints_find (frame);
  hints_print ("built", frame, hints);
  return hints;
}

static const char *const told[]
    = { "hint-neighbour-near", "hint-long", "hint-one-sided", "hint-at-edge", "hint-active-frame", "hint-leader-flips", NULL };

/* Every hint has the caution @code (NULL: none), and none of the others. */
static void
check_told (const GPtrArray *hints, guint n, const char *code)
{
  g_assert_cmpuint (hints->len, ==, n);
  for (guint k = 0; k < n; k++)
    for (guint c = 0; told[c] != NULL; c++)
      {
        const TfHint *hint = g_ptr_array_index (hints, k);
        gboolean has = tf_notes_find (hint->cautions, told[c]) != NULL;
        if (has != (g_strcmp0 (told[c], code) == 0))
          {
            g_test_message ("%s: %s", told[c], has ? "there" : "missing");
            g_test_fail ();
          }
      }
}

static void
test_plain (void)
{
  BuilderPole poles[2];
  builder_bipole (poles, 5.0, 15.0, 5.0, 8.0, 1e22, 1);
  g_autoptr (GPtrArray) hints = hints_of (poles, 2, 10.0);
  check_told (hints, 1, NULL);
}

/* Where no pixel reaches the measurement's floor there is nothing to tell. */
static void
test_nothing_above (void)
{
  BuilderPole poles[2];
  BuilderFrame how;
  TfHintParams params;
  TfMeasureParams measure;
  builder_bipole (poles, 5.0, 15.0, 5.0, 8.0, 1e22, 1);
  builder_init (&how, 5.0, 15.0, 2.0);
  how.half_deg = 17.0;
  g_autoptr (TfFrame) frame = builder_frame (&how, poles, 2);
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  g_autoptr (GPtrArray) some = tf_hints_find (frame, &params, &measure, NULL, NULL);
  g_assert_cmpuint (some->len, ==, 1);
  measure.floor_gauss = 9000.0;
  g_autoptr (GPtrArray) none = tf_hints_find (frame, &params, &measure, NULL, NULL);
  g_assert_cmpuint (none->len, ==, 0);
}

/* Two balanced bipoles, one above the other, their edges some Mm apart. */
static void
test_neighbours (void)
{
  BuilderPole poles[4];
  builder_bipole (poles, 5.0, 12.0, 4.5, 0.0, 1e22, 1);
  builder_bipole (poles + 2, 5.0, 17.8, 4.5, 0.0, 1e22, 1);
  g_autoptr (GPtrArray) hints = hints_of (poles, 4, 10.0);
  check_told (hints, 2, "hint-neighbour-near");
}

static void
test_neighbours_far (void)
{
  BuilderPole poles[4];
  builder_bipole (poles, 5.0, 9.0, 4.5, 0.0, 1e22, 1);
  builder_bipole (poles + 2, 5.0, 21.0, 4.5, 0.0, 1e22, 1);
  g_autoptr (GPtrArray) hints = hints_of (poles, 4, 10.0);
  check_told (hints, 2, NULL);
}

/* Wide poles that touch, far apart for their flux. */
static void
test_long (void)
{
  const BuilderPole poles[] = { { 10.8, 15.0, 2.2, 1e22, 0.0 }, { -0.8, 15.0, 2.2, -1e22, 0.0 } };
  g_autoptr (GPtrArray) hints = hints_of (poles, 2, 10.0);
  check_told (hints, 1, "hint-long");
}

static void
test_one_sided (void)
{
  const BuilderPole poles[] = { { 7.0, 15.0, 0.7, 1e22, 0.0 }, { 3.0, 15.0, 0.7, -2.7e21, 0.0 } };
  g_autoptr (GPtrArray) hints = hints_of (poles, 2, 10.0);
  check_told (hints, 1, "hint-one-sided");
}

/* Poles nearly above each other; weak field in the east just at the floor draws one of them over when the floor is lowered. */
static void
test_flips (void)
{
  const BuilderPole poles[] = {
    { 5.10, 16.6, 0.6, 4e21, 0.0 }, { 5.0, 13.4, 0.6, -4e21, 0.0 }, { 0.8, 16.6, 1.6, 5.6e20, 3.0 }
  };
  g_autoptr (GPtrArray) hints = hints_of (poles, 3, 10.0);
  check_told (hints, 1, "hint-leader-flips");
}

/* A wide pole that stays below the high level (27 G) everywhere: with a pole that reaches it it makes a bipole; alone, or beside one
 * that is as faint, it is nothing. */
static void
test_partner (void)
{
  const BuilderPole poles[] = { { 7.5, 15.0, 0.5, 1e21, 0.0 }, { 2.5, 15.0, 2.4, -1.3e21, 0.0 }, { 7.5, 15.0, 2.4, 1.3e21, 0.0 } };
  g_autoptr (GPtrArray) both = hints_of (poles, 2, 10.0);
  g_autoptr (GPtrArray) strong = hints_of (poles, 1, 10.0);
  g_autoptr (GPtrArray) faint = hints_of (poles + 1, 1, 10.0);
  g_autoptr (GPtrArray) faint_ones = hints_of (poles + 1, 2, 10.0);
  g_assert_cmpuint (both->len, ==, 1);
  const TfHint *hint = g_ptr_array_index (both, 0);
  g_assert_false (hint->unipolar);
  g_assert_cmpint (hint->measure.leading_polarity, ==, 1);
  tf_check_between ("distance of its poles, Mm", hint->measure.separation_mm, 45.0, 70.0);
  g_assert_cmpuint (strong->len, ==, 0);
  g_assert_cmpuint (faint->len, ==, 0);
  g_assert_cmpuint (faint_ones->len, ==, 0);
}

static TfHintCluster
cluster_of (double lon, double positive, double negative)
{
  TfHintCluster cluster = { .flux = { positive, negative } };
  for (guint sign = 0; sign < 2; sign++)
    {
      tf_sphere_unit (lon + sign, 20.0, cluster.place[sign]);
      for (guint k = 0; k < 3; k++)
        cluster.place[sign][k] *= cluster.flux[sign];
    }
  return cluster;
}

/* Two clusters of one flux and unlike imbalance: which of them is the larger by one per cent must not decide what becomes of them. */
static void
test_even (void)
{
  TfHintParams params;
  tf_hint_params_init (&params);
  const TfHintGrid grid = { .radius_mm = 695.7 };
  const TfHintPieces pieces = { .grid = &grid, .params = &params };
  TfHintCluster a = cluster_of (0.0, 4.6e21, 1.4e21), b = cluster_of (5.0, 5.3e21, 0.7e21);
  TfHintCluster more_a = cluster_of (0.0, 1.01 * 4.6e21, 1.01 * 1.4e21), more_b = cluster_of (5.0, 1.01 * 5.3e21, 1.01 * 0.7e21);
  double one = tf_hint_score (&pieces, &more_a, &b, 4.0), two = tf_hint_score (&pieces, &a, &more_b, 4.0);
  tf_check_between ("score", one, 0.05, 1.0);
  tf_check_near ("the other the larger", two / one, 1.0, 0.02);
}

/* Four hills on the equator of mean field @gauss that were joined to one region, @flux in units of 1e21 Mx; into how many is it parted? */
static guint
parts_of (const double lon[4], const double flux[4], double gauss)
{
  TfHintParams params;
  TfHintGrid grid = { .radius_mm = 695.7 };
  TfHintPieces pieces = { .grid = &grid, .params = &params };
  g_autoptr (GArray) clusters = g_array_new (FALSE, TRUE, sizeof (TfHintCluster));
  g_autoptr (GArray) hills = g_array_new (FALSE, TRUE, sizeof (TfHintCluster));
  tf_hint_params_init (&params);
  for (guint k = 0; k < 4; k++)
    {
      TfHintCluster hill = { .into = (int)k };
      guint sign = flux[k] < 0.0 ? 1 : 0;
      hill.flux[sign] = fabs (flux[k]) * 1e21;
      hill.area_mm2 = hill.flux[sign] / gauss / 1e16;
      tf_sphere_unit (lon[k], 0.0, hill.place[sign]);
      for (guint j = 0; j < 3; j++)
        hill.place[sign][j] *= hill.flux[sign];
      g_array_append_val (hills, hill);
      hill.into = 0;
      g_array_append_val (clusters, hill);
    }
  pieces.clusters = clusters;
  pieces.hills = hills;
  g_assert_true (tf_hint_part (&pieces) == (tf_hint_root (&pieces, 2) != 0));
  g_assert_cmpuint (tf_hint_root (&pieces, 1), ==, 0);
  g_assert_cmpuint (tf_hint_root (&pieces, 3), ==, tf_hint_root (&pieces, 2));
  if (tf_hint_root (&pieces, 2) == 0)
    return 1;
  const TfHintCluster *small = &g_array_index (clusters, TfHintCluster, 2);
  tf_check_near ("flux of the part", tf_hint_total (small) / (1e21 * (fabs (flux[2]) + fabs (flux[3]))), 1.0, 1e-12);
  return 2;
}

/* A small bipole beside the pole of a large one stands for itself; the halves of a quadrupole do not, nor does one too faint. */
static void
test_parts (void)
{
  const double wide = 30.0, compact = 200.0, close_by[] = { 0.0, 7.0, 8.0, 9.5 };
  const double beside[] = { 0.0, 7.0, 9.0, 11.0 }, four[] = { 0.0, 4.0, 5.0, 9.0 };
  const double small[] = { 10.0, -10.0, 1.0, -1.0 }, flipped[] = { -10.0, 10.0, -1.0, 1.0 }, even[] = { 5.0, -5.0, 5.0, -5.0 };
  const double faint[] = { 10.0, -10.0, 0.2, -0.2 }, lopsided[] = { 10.0, -10.0, 1.0, -0.3 };
  g_assert_cmpuint (parts_of (beside, small, wide), ==, 2);
  g_assert_cmpuint (parts_of (beside, flipped, wide), ==, 2);
  g_assert_cmpuint (parts_of (four, even, wide), ==, 1);
  g_assert_cmpuint (parts_of (beside, faint, wide), ==, 1);
  g_assert_cmpuint (parts_of (beside, lopsided, wide), ==, 1);
  g_assert_cmpuint (parts_of (close_by, small, wide), ==, 1); /* shards of a plage ... */
  g_assert_cmpuint (parts_of (close_by, small, compact), ==, 2); /* ... or two poles */
}

static void
test_maps (void)
{
  TfGeometry g = { .projection = TF_PROJECTION_CEA, .width = 36, .height = 18, .crpix = { 18.5, 9.5 },
                   .radius_mm = 695.7 };
  TfHintParams params;
  TfMeasureParams measure;
  g_autoptr (GError) error = NULL;
  g.cd[0][0] = 10.0;
  g.cd[1][1] = 2.0 / 18.0;
  g_assert_true (tf_geometry_make (&g));
  g_autofree float *field = g_new0 (float, 36 * 18);
  BuilderFrame how = { .radial = TRUE };
  g_autoptr (TfFrame) frame = builder_frame_of (&g, &how, field);
  tf_hint_params_init (&params);
  tf_measure_params_init (&measure);
  g_assert_null (tf_hints_find (frame, &params, &measure, NULL, &error));
  g_assert_error (error, TF_REGION_ERROR, TF_REGION_ERROR_KIND);
  g_assert_nonnull (strstr (error->message, "different days"));
}

/* Every number of the rule can be set, and has a unit unless it is a share, a cosine or a score. */
static void
test_options (void)
{
  TfHintParams params;
  guint n = 0;
  tf_hint_params_init (&params);
  for (const TfOption *option = tf_hint_options; option->name != NULL; option++, n++)
    {
      g_assert_cmpuint (option->offset, ==, n * sizeof (double));
      g_assert_true (*option->sentence != '\0');
      tf_check_between (option->name, option->fallback, option->min, option->max);
      if (*option->unit == '\0')
        tf_check_between (option->name, option->fallback, 0.0, 1.3);
    }
  g_assert_cmpuint (n * sizeof (double), ==, sizeof params);
}

void
add_hint_built_tests (void)
{
  g_test_add_func ("/region/hint/a-plain-bipole-has-no-caution", test_plain);
  g_test_add_func ("/region/hint/nothing-above-the-floor-is-no-hint", test_nothing_above);
  g_test_add_func ("/region/hint/a-near-neighbour-is-told", test_neighbours);
  g_test_add_func ("/region/hint/a-far-neighbour-is-not-told", test_neighbours_far);
  g_test_add_func ("/region/hint/a-long-region-is-told", test_long);
  g_test_add_func ("/region/hint/a-one-sided-region-is-told", test_one_sided);
  g_test_add_func ("/region/hint/a-leader-that-flips-is-told", test_flips);
  g_test_add_func ("/region/hint/a-pole-finds-its-faint-partner", test_partner);
  g_test_add_func ("/region/hint/the-larger-by-a-hair-does-not-decide", test_even);
  g_test_add_func ("/region/hint/a-small-region-joined-to-a-large-one-is-parted-again", test_parts);
  g_test_add_func ("/region/hint/maps-are-refused-in-words", test_maps);
  g_test_add_func ("/region/hint/every-number-of-the-rule-is-an-option", test_options);
}
