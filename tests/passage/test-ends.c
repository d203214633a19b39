/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Birth, end, and return after half a rotation. */

#include "test-passage.h"

#include "tf-rotation.h"

#define EPOCH        "2013-10-12T06:00:00Z"
#define DAY_S        86400.0
#define L0_DEG       200.0
#define TURN_DEG_DAY 13.2

static TfTime
at (double days)
{
  return tf_time_add (tf_time_read (EPOCH), days * DAY_S);
}

static TfFollowParams
defaults (void)
{
  TfFollowParams params;
  tf_follow_params_init (&params);
  return params;
}

static double
cmd_of (double lon, double days)
{
  return tf_wrap_180 (lon + tf_rotation_carry (0, 15.0, days * DAY_S)
                      - (L0_DEG - TURN_DEG_DAY * days));
}

static void
look_at (MadeSky *sky, double days)
{
  TfLookout look = { at (days), 0.0, tf_wrap_360 (L0_DEG - TURN_DEG_DAY * days), 0.0, TRUE };
  g_array_append_val (sky->lookouts, look);
}

/* A region at a CMD of @cmd at the epoch, seen daily from @from to @to while it is within 65 deg; frames daily from @first to @last. */
static MadeSky *
daily (double cmd, double from, double to, int first, int last, double shift)
{
  MadeSky *sky = made_sky_empty ();
  for (int day = first; day <= last; day++)
    {
      double lon = L0_DEG + cmd + (day > 15 ? shift : 0.0),
             moved = tf_rotation_carry (0, 15.0, day * DAY_S);
      g_autofree char *frame = g_strdup_printf ("%03d", day + 100);
      look_at (sky, day);
      if (day >= from && day <= to && fabs (cmd_of (lon, day)) <= 65.0)
        made_sky_add (sky, 0, at (day), frame, lon + moved, 15.0, 3.0, 0.0, cmd_of (lon, day));
    }
  return sky;
}

static const struct
{
  const char *name;
  double cmd, from, to;
  int first, last;
  TfEnd born, ended;
} passages[] = {
  { "both-limbs", -60, -50, 50, -3, 13, TF_END_LIMB, TF_END_LIMB },
  { "born-and-ended-on-the-disk", -30, 1, 3, -3, 8, TF_END_ON_DISK, TF_END_ON_DISK },
  { "no-frames-before-and-after", -20, 0, 3, 0, 3, TF_END_UNKNOWN, TF_END_UNKNOWN },
  { "its-place-was-empty-half-a-rotation-before-and-after", -60, -2, 12, -30, 40, TF_END_FAR_SIDE,
    TF_END_FAR_SIDE },
};

static void
test_ends (gconstpointer data)
{
  guint k = GPOINTER_TO_UINT (data);
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = daily (passages[k].cmd, passages[k].from, passages[k].to,
                                   passages[k].first, passages[k].last, 0.0);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  g_assert_cmpuint (found->passages->len, ==, 1);
  const TfPassage *p = &g_array_index (found->passages, TfPassage, 0);
  g_assert_cmpstr (tf_end_name (p->born), ==, tf_end_name (passages[k].born));
  g_assert_cmpstr (tf_end_name (p->ended), ==, tf_end_name (passages[k].ended));
}

/* A region that comes round is offered, not taken: two passages, two regions, until a person says so. */
static void
test_return (void)
{
  TfFollowParams params = defaults ();
  for (int shift = 0; shift <= 12; shift += 6)
    {
      g_autoptr (MadeSky) sky = daily (-60, -50, 80, -3, 45, shift);
      g_autoptr (GArray) links = made_sky_links (sky, &params);
      g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
      g_assert_cmpuint (found->passages->len, ==, 2);
      const TfPassage *p = &g_array_index (found->passages, TfPassage, 0),
                      *q = &g_array_index (found->passages, TfPassage, 1);
      g_assert_cmpuint (p->region, !=, q->region);
      if (shift == 12) /* too far from where it should be: it may be another */
        {
          g_assert_cmpuint (found->returns->len, ==, 0);
          g_assert_cmpint (p->ended, ==, TF_END_FAR_SIDE);
          g_assert_cmpint (q->born, ==, TF_END_FAR_SIDE);
          continue;
        }
      g_assert_cmpuint (found->returns->len, ==, 1);
      const TfReturn *r = &g_array_index (found->returns, TfReturn, 0);
      g_assert_cmpuint (r->earlier, ==, 0);
      g_assert_cmpuint (r->later, ==, 1);
      tf_check_near ("longitude off", r->lon_deg, shift, 0.05);
      tf_check_near ("latitude off", r->lat_deg, 0.0, 1e-9);
      g_assert_cmpint (p->ended, ==, TF_END_LIMB);
      g_assert_cmpint (q->born, ==, TF_END_LIMB);
    }
}

/* What a person says of an offer: a link makes one region of two passages; a cut ends the offer. */
static void
test_return_taken_and_declined (void)
{
  TfFollowParams params = defaults ();
  g_autoptr (MadeSky) sky = daily (-60, -50, 80, -3, 45, 0);
  g_autoptr (GArray) links = made_sky_links (sky, &params);
  g_autoptr (TfPassages) found = made_sky_follow (sky, links, &params);
  guint last = g_array_index (found->passages, TfPassage, 0).last,
        first = g_array_index (found->passages, TfPassage, 1).first;
  for (int cut = 0; cut < 2; cut++)
    {
      TfTie tie = { last, first, cut };
      g_autoptr (TfPassages) said = tf_follow_passages (
          (const TfSighting *)(void *)sky->sightings->data, sky->sightings->len,
          (const TfLink *)(void *)links->data, links->len, &tie, 1,
          (const TfLookout *)(void *)sky->lookouts->data, sky->lookouts->len, &params);
      g_assert_cmpuint (said->passages->len, ==, 2);
      g_assert_cmpuint (said->returns->len, ==, 0);
      g_assert_cmpuint (g_array_index (said->passages, TfPassage, 1).region, ==, cut ? 1 : 0);
    }
}

void
add_ends_tests (void)
{
  for (guint k = 0; k < G_N_ELEMENTS (passages); k++)
    {
      g_autofree char *path = g_strdup_printf ("/passage/ends/%s", passages[k].name);
      g_test_add_data_func (path, GUINT_TO_POINTER (k), test_ends);
    }
  g_test_add_func ("/passage/ends/a-return-is-offered", test_return);
  g_test_add_func ("/passage/ends/an-offer-is-taken-or-declined", test_return_taken_and_declined);
}
