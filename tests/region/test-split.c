/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The proposed split: built poles are on the side of the line on which their partners are. */

#include "region-builder.h"
#include "tf-split.h"

enum
{
  MOST = 6
};

/* Which poles belong together: one letter a pole. */
typedef struct
{
  const char *name, *together;
  guint n;
  BuilderPole poles[MOST]; /* lon from central meridian, lat, sigma, flux */
} Case;

static const Case cases[] = {
  { "two bipoles, one north of the other", "aabb", 4,
    { { -2, 18, 0.7, 4e21 }, { 2, 17.4, 0.7, -4e21 }, { -2, 12.6, 0.7, -3e21 }, { 2, 12, 0.7, 3e21 } } },
  { "two bipoles, one west of the other", "aabb", 4,
    { { -6, 15, 0.7, 4e21 }, { -3, 14.5, 0.7, -4e21 }, { 3, 15, 0.7, 3e21 }, { 6, 14.5, 0.7, -3e21 } } },
  /* The neighbours in the middle are nearer to each other than to their partners. */
  { "two bipoles in a row, close in the middle", "aabb", 4,
    { { -5.6, 15, 0.6, 4e21 }, { -1.4, 15, 0.6, -4e21 }, { 1.4, 15, 0.6, 4e21 }, { 5.6, 15, 0.6, -4e21 } } },
  { "a quadrupole, longer one way", "abab", 4,
    { { -2.6, 16.8, 0.7, 3e21 }, { 2.6, 16.8, 0.7, -3e21 }, { -2.6, 13.2, 0.7, -3e21 }, { 2.6, 13.2, 0.7, 3e21 } } },
  { "a bipole and one piece more", "aab", 3,
    { { -4, 15, 0.7, 4e21 }, { -1, 14.5, 0.7, -4e21 }, { 5, 15, 0.7, 2e21 } } },
};

static TfFrame *
frame_of (const Case *c, double sign, double turn)
{
  BuilderFrame how;
  BuilderPole poles[MOST];
  builder_init (&how, 0, 15, 2.0);
  how.turn_deg = turn;
  how.half_deg = 13.0;
  how.noise = 8.0;
  for (guint k = 0; k < c->n; k++)
    {
      poles[k] = c->poles[k];
      poles[k].flux *= sign;
    }
  return builder_frame (&how, poles, c->n);
}

static gboolean
holds (const TfOutline *outline, const BuilderPole *pole)
{
  double unit[3];
  tf_sphere_unit (BUILDER_L0 + pole->lon, pole->lat, unit);
  return tf_outline_contains (outline, unit);
}

static void
check_halves (const Case *c, const TfOutline *outline, const TfSplitLine *line)
{
  g_autoptr (TfOutline) one = NULL, other = NULL;
  g_autoptr (GError) error = NULL;
  tf_outline_split (outline, line->a, line->b, &one, &other, &error);
  g_assert_no_error (error);
  gboolean first = holds (one, &c->poles[0]);
  g_test_message ("%s: from %.2f %.2f to %.2f %.2f, misplaced %.4f", c->name,
                  line->a.lon_deg - BUILDER_L0, line->a.lat_deg, line->b.lon_deg - BUILDER_L0,
                  line->b.lat_deg, line->misplaced);
  for (guint k = 0; k < c->n; k++)
    {
      gboolean with_first = c->together[k] == c->together[0];
      g_assert_true (holds (with_first == first ? one : other, &c->poles[k]));
      g_assert_false (holds (with_first == first ? other : one, &c->poles[k]));
    }
  tf_check_between ("misplaced", line->misplaced, 0.0, 0.02);
}

/* The same with all signs turned and with the frame turned: no leader and no tilt is expected. */
static void
test_partners (gconstpointer data)
{
  static const double turns[] = { 0.0, 180.0, 37.0 };
  const Case *c = data;
  TfMeasureParams params;
  tf_measure_params_init (&params);
  for (int sign = -1; sign <= 1; sign += 2)
    for (guint k = 0; k < G_N_ELEMENTS (turns); k++)
      {
        g_autoptr (TfFrame) frame = frame_of (c, sign, turns[k]);
        g_autoptr (TfOutline) outline = builder_cap (0, 15, 9.0);
        TfSplitLine line;
        g_assert_true (tf_split_propose (&line, frame, outline, &params));
        check_halves (c, outline, &line);
      }
}

/* One large pole between two that are each half of it: the line goes through it and both halves are
 * bipoles of about balanced flux. */
static void
test_shared (void)
{
  static const Case c = { "shared", "", 3,
    { { 0, 15, 1.2, 8e21 }, { -4.5, 15, 0.7, -4e21 }, { 4.5, 15, 0.7, -4e21 } } };
  TfMeasureParams params;
  TfSplitLine line;
  g_autoptr (TfOutline) one = NULL, other = NULL, outline = builder_cap (0, 15, 9.0);
  g_autoptr (TfFrame) frame = frame_of (&c, 1, 0.0);
  tf_measure_params_init (&params);
  params.outline_term = FALSE;
  g_assert_true (tf_split_propose (&line, frame, outline, &params));
  g_assert_true (tf_outline_split (outline, line.a, line.b, &one, &other, NULL));
  g_assert_true (holds (one, &c.poles[1]) != holds (one, &c.poles[2]));
  TfOutline *halves[] = { one, other };
  for (guint k = 0; k < 2; k++)
    {
      g_auto (TfMeasure) m = { 0 };
      g_assert_true (tf_measure_region (&m, frame, halves[k], &params, NULL));
      tf_check_between ("imbalance", m.imbalance, -0.15, 0.15);
      g_assert_cmpint (m.leading_polarity, !=, 0);
    }
}

static void
test_none (void)
{
  static const Case bipole = { "bipole", "aa", 2, { { -2, 15, 0.7, 4e21 }, { 2, 14.5, 0.7, -4e21 } } };
  TfMeasureParams params;
  TfSplitLine line;
  g_autoptr (TfOutline) outline = builder_cap (0, 15, 9.0), empty = builder_cap (0, 40, 1.0);
  g_autoptr (TfFrame) frame = frame_of (&bipole, 1, 0.0);
  tf_measure_params_init (&params);
  g_assert_false (tf_split_propose (&line, frame, outline, &params));
  g_assert_false (tf_split_propose (&line, frame, empty, &params));
}

void
add_split_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      g_autofree char *path = g_strdup_printf ("/region/split/%s", cases[k].name);
      g_test_add_data_func (g_strdelimit (path, " ,", '-'), &cases[k], test_partners);
    }
  g_test_add_func ("/region/split/a-pole-between-two-is-shared", test_shared);
  g_test_add_func ("/region/split/one-bipole-is-not-split", test_none);
}
