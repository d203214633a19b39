/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Hints on a few invented disks against what was put there; the long campaign beside these tests has many more. */

#include <math.h>

#include "hints-compare.h"
#include "made-disk.h"
#include "test-hints.h"
#include "tf-check.h"

typedef struct
{
  guint n, alike;
} Alike;

static void
compare (const TfFrame *fine, const GPtrArray *hints, const GPtrArray *coarse, Alike *alike)
{
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      HintOverlap overlap;
      if (hint->unipolar || hint->measure.flux_unsigned_mx < 1e21)
        continue;
      hints_best (fine, coarse, hint->outline, &overlap);
      alike->n++;
      alike->alike += overlap.flux >= 0.8;
    }
}

static void
check_score (const MadeScore *score, double tilt_median, double tilt_most)
{
  g_autofree char *text = made_score_dup_text (score);
  double n = score->eligible;
  g_test_message ("%s", text);
  g_assert_cmpuint (score->eligible, >, 8);
  /* 5 %; of fewer than twenty one may fail, since no smaller share can be told there. */
  tf_check_between ("bipoles not found", n - score->found, 0.0, MAX (1.0, 0.05 * n));
  tf_check_between ("bipoles split or joined", score->split + score->joined, 0.0, MAX (1.0, 0.05 * n));
  tf_check_between ("share of false hints", (double)score->false_hints / score->bipole_hints, 0.0, 0.05);
  tf_check_between ("share of wrong polarity", score->wrong_polarity / n, 0.0, 0.02);
  tf_check_between ("median tilt error", made_score_tilt (score, 0.5), 0.0, tilt_median);
  tf_check_between ("tilt error of nine in ten", made_score_tilt (score, 0.9), 0.0, tilt_most);
}

/* -- whole disks ------------------------------------------------------------------------------------------- */

static const guint disks[] = { 0, 3, 5, 6, 8, 10 }; /* two of them quiet */

static void
test_disks (void)
{
  MadeScore scores[2];
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers };
  Alike alike = { 0, 0 };
  for (guint s = 0; s < 2; s++)
    made_score_init (&scores[s]);
  for (guint k = 0; k < G_N_ELEMENTS (disks); k++)
    {
      MadePlan plan;
      made_plan_of (&plan, disks[k], FALSE);
      g_autoptr (MadeDisk) disk = made_disk_new (&plan, 700 + disks[k]);
      g_autoptr (TfFrame) fine = made_disk_shoot (disk, 2.0, 0, made_noise_of (disks[k]), 2 * k, &work);
      g_autoptr (TfFrame) coarse = made_disk_shoot (disk, 5.0, 0, made_noise_of (disks[k]), 2 * k + 1, &work);
      g_autoptr (GPtrArray) hints = hints_find (fine);
      g_autoptr (GPtrArray) others = hints_find (coarse);
      if (plan.bipoles == 0)
        {
          g_assert_cmpuint (hints->len, ==, 0);
          g_assert_cmpuint (others->len, ==, 0);
          continue;
        }
      made_score_add (&scores[0], disk, fine, hints);
      made_score_add (&scores[1], disk, coarse, others);
      compare (fine, hints, others, &alike);
    }
  check_score (&scores[0], 1.0, 3.0);
  check_score (&scores[1], 1.0, 7.0);
  g_test_message ("%u of %u bipole hints above 1e21 Mx overlap by 0.8 at 2 and 5 arcsec", alike.alike, alike.n);
  tf_check_between ("share alike", (double)alike.alike / alike.n, 0.9, 1.0);
  for (guint s = 0; s < 2; s++)
    made_score_clear (&scores[s]);
}

/* -- the middle of the disk at half an arcsec -------------------------------------------------------------- */

static void
test_fine (void)
{
  MadeScore score;
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers };
  Alike alike = { 0, 0 };
  made_score_init (&score);
  for (guint k = 0; k < 2; k++)
    {
      const MadePlan plan = { .bipoles = 14, .plages = 3, .closest = 1.0, .may_share = 0.2 };
      g_autoptr (MadeDisk) disk = made_disk_new (&plan, 720 + k);
      g_autoptr (TfFrame) fine = made_disk_shoot (disk, 0.5, 2048, 10.0, 50 + k, &work);
      g_autoptr (TfFrame) coarse = made_disk_shoot (disk, 2.0, 512, 10.0, 60 + k, &work);
      g_autoptr (GPtrArray) hints = hints_find (fine);
      g_autoptr (GPtrArray) others = hints_find (coarse);
      made_score_add (&score, disk, fine, hints);
      compare (fine, hints, others, &alike);
    }
  check_score (&score, 1.0, 3.0);
  g_test_message ("%u of %u bipole hints above 1e21 Mx overlap by 0.8 at 0.5 and 2 arcsec", alike.alike, alike.n);
  tf_check_between ("share alike", (double)alike.alike / alike.n, 0.95, 1.0);
  made_score_clear (&score);
}

/* -- noise ------------------------------------------------------------------------------------------------- */

/* The noise map of an active disk and of the fullest of the set, the network left out (a real field, which from 10 G down is told as
 * noise: it cannot be parted from it): within 5 % of what was put in. */
static void
test_noise (void)
{
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers };
  for (guint k = 0; k < 8; k++)
    {
      MadePlan plan;
      double noise = made_noise_of (k), worst = 0.0;
      made_plan_of (&plan, k < 4 ? 6 : 9, FALSE);
      plan.bare = TRUE;
      g_autoptr (MadeDisk) disk = made_disk_new (&plan, 740);
      g_autoptr (TfFrame) frame = made_disk_shoot (disk, 3.0, 0, noise, k, &work);
      for (double mu = 0.25; mu < 1.0; mu += 0.05)
        {
          double off = tf_frame_noise_at (frame, mu) / noise - 1.0;
          worst = fabs (off) > fabs (worst) || isnan (off) ? off : worst;
        }
      g_test_message ("%u bipoles, noise of %.0f G: worst ring off by %+.1f %%", plan.bipoles, noise, 100.0 * worst);
      tf_check_between ("noise", worst, -0.05, 0.05);
    }
}

void
add_hint_simulated_tests (void)
{
  g_test_add_func ("/region/hint-simulated/bipoles-are-found-on-whole-disks-and-quiet-ones-have-none", test_disks);
  g_test_add_func ("/region/hint-simulated/bipoles-are-found-at-half-an-arcsec", test_fine);
  g_test_add_func ("/region/hint-simulated/the-noise-of-an-active-disk-is-that-put-in", test_noise);
}
