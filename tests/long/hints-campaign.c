/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* hints-campaign [--disks N] [--seed S] [--scales 2,5] [--crowded]: hints on invented disks against what was put there, at several
 * pixel sizes, and how far the hints of two pixel sizes agree. Prints one line a disk and the sums; says nothing about good or bad. */

#include <stdio.h>

#include "hints-compare.h"
#include "made-disk.h"

enum
{
  MOST_SCALES = 4
};

typedef struct
{
  int disks, first;
  gboolean crowded;
  char *words;
  double scale[MOST_SCALES]; /* arcsec a pixel, finest first */
  guint n_scales;
} Campaign;

/* Bipole hints of the finer frame and how far the coarser frame's best one agrees: all of them, and those above LARGE_MX. */
typedef struct
{
  guint n, flux_alike, area_alike; /* by 0.8 or more */
} Count;

typedef struct
{
  Count all, large;
} Alike;

static const double LARGE_MX = 1e21;

static void
count (Count *to, const HintOverlap *overlap)
{
  to->n++;
  to->flux_alike += overlap->flux >= 0.8;
  to->area_alike += overlap->area >= 0.8;
}

static void
compare (const TfFrame *fine, const GPtrArray *hints, const GPtrArray *coarse, Alike *alike)
{
  for (guint k = 0; k < hints->len; k++)
    {
      const TfHint *hint = g_ptr_array_index (hints, k);
      HintOverlap overlap;
      if (hint->unipolar)
        continue;
      hints_best (fine, coarse, hint->outline, &overlap);
      count (&alike->all, &overlap);
      if (hint->measure.flux_unsigned_mx > LARGE_MX)
        count (&alike->large, &overlap);
      if (overlap.flux < 0.8)
        printf ("  overlap %.2f by flux, %.2f by area: N%+.1f W%+.1f mu %.2f flux %.2e\n", overlap.flux, overlap.area,
                hint->measure.lat_deg, hint->measure.cmd_deg, hint->measure.mu, hint->measure.flux_unsigned_mx);
    }
}

static void
run_disk (const Campaign *campaign, guint k, MadeScore *scores, Alike *alike, const TfWork *work)
{
  MadePlan plan;
  TfFrame *frames[MOST_SCALES] = { NULL };
  GPtrArray *hints[MOST_SCALES] = { NULL };
  made_plan_of (&plan, k, campaign->crowded);
  g_autoptr (MadeDisk) disk = made_disk_new (&plan, (guint32)(campaign->first + (int)k));
  for (guint s = 0; s < campaign->n_scales; s++)
    {
      frames[s] = made_disk_shoot (disk, campaign->scale[s], 0, made_noise_of (k), 1000 * k + s, work);
      hints[s] = hints_find (frames[s]);
      printf ("disk %u, %u bipoles, %.0f G, %.1f arcsec: %u hints\n", k, plan.bipoles, made_noise_of (k), campaign->scale[s],
              hints[s]->len);
      made_score_add (&scores[s], disk, frames[s], hints[s]);
      if (s > 0)
        compare (frames[s - 1], hints[s - 1], hints[s], &alike[s]);
    }
  for (guint s = 0; s < campaign->n_scales; s++)
    {
      tf_frame_unref (frames[s]);
      g_ptr_array_unref (hints[s]);
    }
  fflush (stdout);
}

static void
print_count (const double scales[2], const char *which, const Count *count)
{
  if (count->n > 0)
    printf ("%.1f and %.1f arcsec: of %u %s %.1f %% overlap by 0.8 in flux, %.1f %% in area\n", scales[0], scales[1], count->n,
            which, 100.0 * count->flux_alike / count->n, 100.0 * count->area_alike / count->n);
}

static void
print_sums (const Campaign *campaign, const MadeScore *scores, const Alike *alike)
{
  for (guint s = 0; s < campaign->n_scales; s++)
    {
      g_autofree char *text = made_score_dup_text (&scores[s]);
      printf ("%.1f arcsec: %s\n", campaign->scale[s], text);
      if (s == 0)
        continue;
      print_count (&campaign->scale[s - 1], "bipole hints", &alike[s].all);
      print_count (&campaign->scale[s - 1], "bipole hints above 1e21 Mx", &alike[s].large);
    }
}

static gboolean
read_words (Campaign *campaign, int argc, char **argv)
{
  const GOptionEntry entries[] = {
    { "disks", 0, 0, G_OPTION_ARG_INT, &campaign->disks, "how many (30)", "N" },
    { "seed", 0, 0, G_OPTION_ARG_INT, &campaign->first, "of the first disk (1)", "S" },
    { "crowded", 0, 0, G_OPTION_ARG_NONE, &campaign->crowded, "the crowded set", NULL },
    { "scales", 0, 0, G_OPTION_ARG_STRING, &campaign->words, "arcsec a pixel, finest first (0.5,2,5)", "A,B" },
    { NULL },
  };
  g_autoptr (GOptionContext) context = g_option_context_new (NULL);
  g_autoptr (GError) error = NULL;
  g_option_context_add_main_entries (context, entries, NULL);
  if (!g_option_context_parse (context, &argc, &argv, &error))
    {
      fprintf (stderr, "%s\n", error->message);
      return FALSE;
    }
  g_auto (GStrv) words = g_strsplit (campaign->words != NULL ? campaign->words : "0.5,2,5", ",", MOST_SCALES);
  for (; words[campaign->n_scales] != NULL; campaign->n_scales++)
    campaign->scale[campaign->n_scales] = g_ascii_strtod (words[campaign->n_scales], NULL);
  return TRUE;
}

int
main (int argc, char **argv)
{
  Campaign campaign = { .disks = 30, .first = 1 };
  MadeScore scores[MOST_SCALES];
  Alike alike[MOST_SCALES] = { { { 0 } } };
  if (!read_words (&campaign, argc, argv))
    return 2;
  g_autoptr (TfWorkers) workers = tf_workers_new (0);
  const TfWork work = { .workers = workers };
  for (guint s = 0; s < campaign.n_scales; s++)
    made_score_init (&scores[s]);
  for (int k = 0; k < campaign.disks; k++)
    run_disk (&campaign, (guint)k, scores, alike, &work);
  print_sums (&campaign, scores, alike);
  for (guint s = 0; s < campaign.n_scales; s++)
    made_score_clear (&scores[s]);
  g_free (campaign.words);
  return 0;
}
