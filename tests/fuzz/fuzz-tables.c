/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Tables that people bring (CSV, VOTable, FITS, JSON), column maps and daily region summaries, mutated
 * from a seed: rows that hold together, or one sentence. Usage: fuzz-tables [MUTATIONS [SEED]]. The
 * corpus is what the program itself exports; the summaries of the real data are added where they
 * are there. */

#include <glib/gstdio.h>
#include <math.h>
#include <stdio.h>

#include "made-rows.h"
#include "tf-bring.h"
#include "tf-daily-summary.h"
#include "tf-export.h"
#include "tf-fuzz.h"
#include "tf-json.h"

static const char map_text[] = "# theirs\ntime_year = YEAR\nlat_deg = LAT ; unit rad\naxis_tilt_deg = TILT ; positive poleward ; missing -999\n"
                               "cmd_deg = CMD ; positive east\nflux_unsigned_mx = FLUX ; unit 10**21 Mx\nregion = none\n";
static const char mapped_text[] = "YEAR,LAT,TILT,CMD,FLUX\n1950.5,0.2,-5,10,3\n1950.503,-0.3,-999,20,4\n1950.506,0.21,12,-30,\n";
static const char summary_text[]
    = ":Product: made by hand\nSolar Region Summary\nSRS Number 60 Issued at 0030Z on 01 Mar 2013\n"
      "I.  Regions with Sunspots.  Locations Valid at 28/2400Z \nNmbr Location  Lo  Area  Z   LL   NN Mag Type\n"
      "1682 S19W42   153  0030 Cao  05   03 Beta\n1684 N13E05   106  0260 Ekc  12   21 Beta-Gamma-Delta\n"
      "IA. H-alpha Plages without Spots.  Locations Valid at 28/2400Z Feb\nNmbr  Location  Lo\n1680  N05W70   170\n"
      "II. Regions Due to Return 01 Mar to 03 Mar\nNmbr Lat    Lo\n1671 S10    310\n";

/* CFITSIO asks for as much as a header says and takes no for an answer. */
const char *__asan_default_options (void);
const char *
__asan_default_options (void)
{
  return "allocator_may_return_null=1";
}

/* -- what must hold ---------------------------------------------------------------------------- */

static void
judge_rows (const TfBrought *b)
{
  fuzz_must (b->entries->len > 0, "what is brought has rows");
  for (guint k = 0; k < b->entries->len; k++)
    {
      const TfOutsideEntry *e = &g_array_index (b->entries, TfOutsideEntry, k);
      g_autoptr (JsonNode) flat = json_from_string (e->flat, NULL);
      fuzz_must (flat != NULL && JSON_NODE_HOLDS_OBJECT (flat), "a row is an object");
      fuzz_must (tf_time_is_known (e->time), "a row has its time");
      double lat = tf_json_member_number (json_node_get_object (flat), "lat_deg");
      fuzz_must (fabs (lat) <= 90, "a latitude is one");
      double tilt = tf_json_member_number (json_node_get_object (flat), "axis_tilt_deg");
      fuzz_must (isnan (tilt) || fabs (tilt) <= 90, "a tilt is one");
      fuzz_must (e->group <= k, "a region begins at its first row");
      fuzz_must (*e->region != '\0' && *e->passage != '\0', "a row has region and passage");
    }
}

static gboolean
judge_table (const char *path, const TfColumnMap *map, gboolean alone)
{
  g_autoptr (GError) error = NULL;
  const TfBringParams params = { .source = "fuzz", .rows_alone = alone };
  g_autoptr (TfCells) table = tf_cells_read (path, &error);
  g_autoptr (TfBrought) brought
      = table != NULL ? tf_bring (table, map, &params, "fuzzed", "c0ffee", &error) : NULL;
  if (brought == NULL)
    fuzz_must_say (error);
  else
    judge_rows (brought);
  return brought != NULL;
}

static gboolean
judge_map (const char *text)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfColumnMap) map = tf_column_map_read (text, "fuzzed", &error);
  if (map == NULL)
    {
      fuzz_must_say (error);
      return FALSE;
    }
  g_autofree char *once = tf_column_map_dup_text (map);
  g_autoptr (TfColumnMap) again = tf_column_map_read (once, "again", &error);
  fuzz_must (again != NULL, "a map's own text is a map");
  g_autofree char *twice = tf_column_map_dup_text (again);
  fuzz_must (strcmp (once, twice) == 0, "it reads back the same");
  return TRUE;
}

static gboolean
judge_summary (const char *text, gsize n)
{
  g_autoptr (GError) error = NULL;
  tf_daily_summary_is (text, n);
  g_autoptr (TfDailySummary) summary = tf_daily_summary_read (text, n, "fuzzed", &error);
  if (summary == NULL)
    {
      fuzz_must_say (error);
      return FALSE;
    }
  fuzz_must (tf_time_is_known (summary->time), "a summary has its day");
  for (guint k = 0; k < summary->regions->len; k++)
    {
      const TfListedRegion *r = &g_array_index (summary->regions, TfListedRegion, k);
      fuzz_must (fabs (r->lat_deg) <= 90, "a listed latitude is one");
      fuzz_must (isnan (r->cmd_deg) || fabs (r->cmd_deg) <= 180, "a listed longitude is one");
      fuzz_must (g_utf8_validate (r->mw_class, -1, NULL), "a class is text");
    }
  return TRUE;
}

/* -- the corpus -------------------------------------------------------------------------------- */

static GBytes *
read_bytes (const char *path)
{
  char *bytes = NULL;
  gsize n = 0;
  if (!g_file_get_contents (path, &bytes, &n, NULL))
    abort ();
  return g_bytes_new_take (bytes, n);
}

static GBytes *
export_rows (const char *folder, const char *name)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = made_rows_new (&keep);
  g_autofree char *path = g_build_filename (folder, name, NULL);
  g_array_set_size (rows, 3); /* the fourth has no time */
  if (!tf_export_write (path, rows, NULL, "made here", NULL))
    abort ();
  GBytes *bytes = read_bytes (path);
  g_unlink (path);
  return bytes;
}

typedef struct
{
  guint good, all;
} Count;

static void
judge_mutation (GBytes *source, gboolean text, const TfColumnMap *map, const char *path, GRand *chance, Count *count)
{
  g_autoptr (GByteArray) bytes = NULL;
  if (text)
    bytes = fuzz_mutate_cells (source, chance, ",:<>\n");
  else
    {
      gsize n;
      const guint8 *data = g_bytes_get_data (source, &n);
      bytes = g_byte_array_sized_new ((guint)n);
      g_byte_array_append (bytes, data, (guint)n);
      fuzz_flip (bytes, chance, 6);
    }
  if (!g_file_set_contents (path, (const char *)bytes->data, bytes->len, NULL))
    abort ();
  count->good += judge_table (path, map, g_rand_boolean (chance));
  count->all++;
}

int
main (int argc, char **argv)
{
  guint n = argc > 1 ? (guint)g_ascii_strtoull (argv[1], NULL, 10) : 400;
  guint32 seed = argc > 2 ? (guint32)g_ascii_strtoull (argv[2], NULL, 10) : 20131012;
  g_autoptr (GRand) chance = g_rand_new_with_seed (seed);
  const char *top = g_file_test ("/dev/shm", G_FILE_TEST_IS_DIR) ? "/dev/shm" : g_get_tmp_dir ();
  g_autofree char *folder = g_mkdtemp (g_build_filename (top, "tf-fuzz-XXXXXX", NULL)),
                  *path = g_build_filename (folder, "table", NULL);
  static const char *const names[] = { "a.csv", "a.vot", "a.json", "a.fits" };
  g_autoptr (TfColumnMap) map = tf_column_map_read (map_text, "map", NULL);
  g_autoptr (GBytes) mapped = g_bytes_new_static (mapped_text, strlen (mapped_text)),
                     map_bytes = g_bytes_new_static (map_text, strlen (map_text));
  Count count = { 0 };
  for (guint f = 0; f <= G_N_ELEMENTS (names); f++)
    {
      gboolean own = f < G_N_ELEMENTS (names);
      g_autoptr (GBytes) source = own ? export_rows (folder, names[f]) : g_bytes_ref (mapped);
      gsize size;
      const char *data = g_bytes_get_data (source, &size);
      if (!g_file_set_contents (path, data, (gssize)size, NULL))
        abort ();
      fuzz_must (judge_table (path, own ? NULL : map, FALSE), "the corpus itself is taken");
      for (guint k = 0; k < n; k++)
        judge_mutation (source, f != 3, own ? NULL : map, path, chance, &count);
    }
  printf ("ok 1 - %u tables of five formats from seed %u, %u of them taken, are rows or a sentence\n",
          count.all, seed, count.good);
  fuzz_must (judge_map (map_text), "the map itself is taken");
  count = (Count){ 0 };
  for (guint k = 0; k < n; k++, count.all++)
    {
      g_autoptr (GByteArray) bytes = k % 2 == 0 ? fuzz_mutate_cells (map_bytes, chance, " =;\n")
                                                : fuzz_mutate_text (map_bytes, chance);
      g_byte_array_append (bytes, (const guint8 *)"", 1);
      count.good += judge_map ((const char *)bytes->data);
    }
  printf ("ok 2 - %u column maps, %u of them taken, read back the same or are a sentence\n", count.all, count.good);
  g_autoptr (GPtrArray) summaries = fuzz_read_folder ("tables/noaa_srs");
  g_ptr_array_add (summaries, g_bytes_new_static (summary_text, strlen (summary_text)));
  fuzz_must (judge_summary (summary_text, strlen (summary_text)), "the summary itself is taken");
  count = (Count){ 0 };
  for (guint k = 0; k < 2 * n; k++, count.all++)
    {
      GBytes *source = summaries->pdata[summaries->len - 1 - k % summaries->len];
      g_autoptr (GByteArray) bytes = k % 2 == 0 ? fuzz_mutate_cells (source, chance, " \n")
                                                : fuzz_mutate_text (source, chance);
      count.good += judge_summary ((const char *)bytes->data, bytes->len);
    }
  printf ("ok 3 - %u daily summaries, %u of them taken, are regions or a sentence\n1..3\n", count.all, count.good);
  g_unlink (path);
  g_rmdir (folder);
  return 0;
}
