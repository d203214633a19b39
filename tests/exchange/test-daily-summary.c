/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* The daily region summary: made ones, real ones where they are at hand, and broken ones. */

#include <string.h>

#include "test-sheets.h"
#include "tf-check.h"
#include "tf-daily-summary.h"
#include "tf-export.h"

static const char made[] = ":Product: made by hand\n"
                           ":Issued: 2013 Mar 01 0030 UTC\r\n"
                           "Solar Region Summary\n"
                           "SRS Number 60 Issued at 0030Z on 01 Mar 2013\n"
                           "I.  Regions with Sunspots.  Locations Valid at 28/2400Z \n"
                           "Nmbr Location  Lo  Area  Z   LL   NN Mag Type\n"
                           "1682 S19W42   153  0030 Cao  05   03 Beta\n"
                           "1683 N13E05   106  0260 Ekc  12   21 Beta-Gamma-Delta\n"
                           "1684 N13X05   106  0260 Ekc  12   21 Beta\n"
                           "IA. H-alpha Plages without Spots.  Locations Valid at 28/2400Z Feb\n"
                           "Nmbr  Location  Lo\n"
                           "1678  N09W77   200\n"
                           "II. Regions Due to Return 01 Mar to 03 Mar\n"
                           "Nmbr Lat    Lo\n"
                           "1669 N08    008\n";

static TfDailySummary *
read_text (const char *text, gssize n)
{
  g_autoptr (GError) error = NULL;
  TfDailySummary *summary = tf_daily_summary_read (text, n < 0 ? strlen (text) : (gsize)n, "made.txt", &error);
  g_assert_true ((summary == NULL) == (error != NULL));
  return summary;
}

static const TfListedRegion *
region (const TfDailySummary *summary, guint k)
{
  return &g_array_index (summary->regions, TfListedRegion, k);
}

static void
every_section_is_read (void)
{
  g_autoptr (TfDailySummary) summary = read_text (made, -1);
  g_autofree char *iso = tf_time_dup_iso (summary->time, 0);
  g_assert_cmpstr (iso, ==, "2013-03-01T00:00:00Z"); /* 24:00 UT of February 28 */
  g_assert_cmpuint (summary->regions->len, ==, 4);
  g_assert_cmpuint (summary->faults->len, ==, 1);
  g_assert_cmpuint (g_array_index (summary->faults, TfListedFault, 0).place, ==, 9);
  const TfListedRegion *r = region (summary, 1);
  g_assert_cmpint (r->number, ==, 11683);
  g_assert_cmpint (r->listed, ==, TF_LISTED_SPOTS);
  g_assert_cmpstr (r->mw_class, ==, "βγδ");
  g_assert_cmpstr (r->z, ==, "Ekc");
  g_assert_cmpint (r->spots, ==, 21);
  tf_check_near ("latitude", r->lat_deg, 13, 0);
  tf_check_near ("east is negative", r->cmd_deg, -5, 0);
  tf_check_near ("Carrington", r->carrington_lon_deg, 106, 0);
  tf_check_near ("area", r->spot_area_msh, 260, 0);
  tf_check_near ("extent", r->extent_deg, 12, 0);
  g_assert_cmpint (region (summary, 2)->listed, ==, TF_LISTED_PLAGE);
  tf_check_nan ("a plage has no spots", region (summary, 2)->spot_area_msh);
  g_assert_cmpint (region (summary, 3)->listed, ==, TF_LISTED_DUE);
  tf_check_nan ("no longitude yet", region (summary, 3)->cmd_deg);
  g_assert_cmpstr (region (summary, 3)->mw_class, ==, "");
}

static void
what_is_none_is_told (void)
{
  g_assert_null (read_text ("region,time,lat_deg\nA,2013-01-01,12\n", -1));
  g_assert_null (read_text ("Solar Region Summary\nI. Regions with Sunspots.\n1682 S19W42 153 0030 Cao 05 03 Beta\n", -1));
  g_assert_null (read_text ("", 0));
  g_assert_true (tf_daily_summary_is (made, sizeof made - 1));
  g_assert_false (tf_daily_summary_is ("SIMPLE  =                    T", 30));
}

/* Whatever bytes come: no crash, and only finite or absent numbers in range. */
static void
broken_bytes_do_no_harm (void)
{
  GRand *rand = g_rand_new_with_seed (7);
  for (guint turn = 0; turn < 3000; turn++)
    {
      g_autofree char *bytes = g_memdup2 (made, sizeof made);
      gsize n = (gsize)g_rand_int_range (rand, 1, sizeof made);
      if (turn % 2 == 0)
        n = sizeof made - 1;
      for (guint k = 0; k < 1 + turn % 12; k++)
        bytes[g_rand_int_range (rand, 0, (int)n)] = (char)g_rand_int_range (rand, 0, 256);
      g_autoptr (TfDailySummary) summary = tf_daily_summary_read (bytes, n, "broken.txt", NULL);
      for (guint k = 0; summary != NULL && k < summary->regions->len; k++)
        g_assert_cmpfloat (ABS (region (summary, k)->lat_deg), <=, 90);
    }
  g_rand_free (rand);
}

/* Real ones: 1996, 2000 (upper case), 2011, 2015. Regions with spots, plages, due, faults; the first number and its class. */
static void
real_ones_are_read (void)
{
  static const struct
  {
    const char *file, *time;
    guint n[3];
    int first;
    const char *mw_class;
  } cases[] = { { "19960106SRS.txt", "1996-01-06T00:00:00Z", { 2, 2, 0 }, 7938, "β" },
                { "20001001SRS.txt", "2000-10-01T00:00:00Z", { 8, 2, 2 }, 9169, "β" },
                { "20110607SRS.txt", "2011-06-07T00:00:00Z", { 5, 4, 1 }, 11226, "β" },
                { "20150101SRS.txt", "2015-01-01T00:00:00Z", { 6, 2, 1 }, 12246, "α" } };
  const char *given = g_getenv ("TF_SHARED_DATA");
  g_autofree char *folder = g_build_filename (given != NULL ? given : TF_SHARED, "tables", "noaa_srs", NULL);
  if (!g_file_test (folder, G_FILE_TEST_IS_DIR))
    {
      g_test_skip ("the real tables are not at hand");
      return;
    }
  for (guint k = 0; k < G_N_ELEMENTS (cases); k++)
    {
      guint n[3] = { 0 };
      gsize length = 0;
      g_autofree char *text = NULL, *path = g_build_filename (folder, cases[k].file, NULL);
      g_assert_true (g_file_get_contents (path, &text, &length, NULL));
      g_autoptr (TfDailySummary) summary = read_text (text, (gssize)length);
      g_autofree char *iso = tf_time_dup_iso (summary->time, 0);
      g_assert_cmpstr (iso, ==, cases[k].time);
      g_assert_cmpuint (summary->faults->len, ==, 0);
      for (guint j = 0; j < summary->regions->len; j++)
        n[region (summary, j)->listed]++;
      g_assert_cmpmem (n, sizeof n, cases[k].n, sizeof n);
      g_assert_cmpint (region (summary, 0)->number, ==, cases[k].first);
      g_assert_cmpstr (region (summary, 0)->mw_class, ==, cases[k].mw_class);
    }
}

/* Each file once; what stands there is found again as listings. */
static void
into_a_ledger (void)
{
  g_autoptr (GError) error = NULL;
  g_autofree char *folder = g_dir_make_tmp ("tf-listed-XXXXXX", NULL);
  g_autofree char *path = g_build_filename (folder, "test.ledger", NULL);
  TfLedger *ledger = tf_ledger_create (path, 'T', &error);
  g_autoptr (TfDailySummary) summary = read_text (made, -1);
  gint64 id = tf_daily_summary_bring (summary, ledger, "made.txt", "abc", "by hand", &error);
  g_assert_no_error (error);
  g_assert_cmpint (id, !=, 0);
  g_assert_cmpint (tf_daily_summary_bring (summary, ledger, "made.txt", "abc", "by hand", &error), ==, id);
  g_autoptr (GPtrArray) listings = tf_ledger_listings (ledger, tf_time_add (summary->time, -3600), tf_time_add (summary->time, 3600), &error);
  g_assert_no_error (error);
  g_assert_cmpuint (listings->len, ==, 4);
  const TfListing *listing = g_ptr_array_index (listings, 1);
  g_assert_cmpstr (listing->number, ==, "11683");
  g_assert_cmpstr (listing->mw_class, ==, "βγδ");
  g_assert_cmpstr (listing->source, ==, "by hand");
  tf_check_near ("area", listing->spot_area_msh, 260, 0);
  tf_check_near ("longitude", listing->cmd_deg, -5, 0);
  g_assert_true (((TfListing *)g_ptr_array_index (listings, 3))->due);
  g_autoptr (GPtrArray) none = tf_ledger_listings (ledger, tf_time_add (summary->time, 60), tf_time_add (summary->time, 3600), &error);
  g_assert_cmpuint (none->len, ==, 0);
  g_autoptr (TfNotes) findings = tf_notes_new ();
  g_assert_true (tf_ledger_check (ledger, findings, &error));
  g_assert_cmpuint (tf_notes_get_n (findings), ==, 0);
  tf_ledger_close (ledger);
  const char *remove[] = { "rm", "-rf", folder, NULL };
  g_spawn_sync (NULL, (char **)remove, NULL, G_SPAWN_SEARCH_PATH, NULL, NULL, NULL, NULL, NULL, NULL);
}

void
add_daily_summary_tests (void)
{
  g_test_add_func ("/exchange/daily-summary/every-section-is-read", every_section_is_read);
  g_test_add_func ("/exchange/daily-summary/what-is-none-is-told", what_is_none_is_told);
  g_test_add_func ("/exchange/daily-summary/broken-bytes-do-no-harm", broken_bytes_do_no_harm);
  g_test_add_func ("/exchange/daily-summary/real-ones-are-read", real_ones_are_read);
  g_test_add_func ("/exchange/daily-summary/each-file-goes-in-once-and-is-found-by-its-time", into_a_ledger);
}
