/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-simulate.h"

#include <math.h>
#include <string.h>

#include "tf-json.h"
#include "tf-option.h"

/* Every file of @a is in @b with the same bytes. Returns how many. */
static guint
check_same (const char *a, const char *b)
{
  guint n = 0;
  const char *name;
  g_autoptr (GError) error = NULL;
  g_autoptr (GDir) dir = g_dir_open (a, 0, &error);
  g_assert_no_error (error);
  while ((name = g_dir_read_name (dir)) != NULL)
    {
      gsize n_one = 0, n_other = 0;
      g_autofree char *one = NULL, *other = NULL, *path = g_build_filename (a, name, NULL);
      g_autofree char *beside = g_build_filename (b, name, NULL);
      g_assert_true (g_file_get_contents (path, &one, &n_one, NULL));
      if (!g_file_get_contents (beside, &other, &n_other, NULL) || n_one != n_other
          || memcmp (one, other, n_one) != 0)
        {
          g_printerr ("# %s is not the same in %s\n", name, b);
          g_test_fail ();
        }
      n++;
    }
  return n;
}

static void
test_demo_same (gconstpointer data)
{
  char *folder = make_folder ();
  g_autoptr (GError) error = NULL;
  g_assert_true (tf_simulate_demo (folder, NULL, &error));
  g_assert_no_error (error);
  g_assert_cmpuint (check_same (folder, data), ==, 48);
  g_assert_cmpuint (check_same (data, folder), ==, 48);
  remove_folder (folder);
}

static void
test_frames_same (void)
{
  char *first = make_folder (), *second = make_folder ();
  TfSimulateParams params;
  g_autoptr (GError) error = NULL;
  g_autoptr (TfWorkers) workers = tf_workers_new (3);
  TfWork work = { .workers = workers };
  tf_options_reset (tf_simulate_options, &params);
  params.size = 128;
  params.n_frames = 2;
  g_assert_true (tf_simulate_frames (first, &params, NULL, &error));
  g_assert_true (tf_simulate_frames (second, &params, &work, &error));
  g_assert_cmpuint (check_same (first, second), ==, 4);
  remove_folder (first);
  remove_folder (second);
}

static JsonNode *
read_truth (const char *folder, const char *name)
{
  g_autofree char *path = g_build_filename (folder, name, NULL), *text = NULL;
  g_autoptr (GError) error = NULL;
  g_file_get_contents (path, &text, NULL, &error);
  g_assert_no_error (error);
  JsonNode *node = json_from_string (text, &error);
  g_assert_no_error (error);
  return node;
}

static void
test_anti_hale_share (void)
{
  char *folder = make_folder ();
  TfSimulateParams params;
  g_autoptr (GError) error = NULL;
  guint anti = 0, right = 0;
  tf_options_reset (tf_simulate_options, &params);
  params.size = 32;
  params.n_frames = 1;
  params.n_regions = 60;
  params.anti_hale_share = 0.5;
  params.start_year = 2014.0; /* cycle 24: negative leads in the north (reference page 4.1) */
  g_assert_true (tf_simulate_frames (folder, &params, NULL, &error));
  g_autoptr (JsonNode) truth = read_truth (folder, "frame-0001.truth.json");
  JsonArray *sources = tf_json_member_array (json_node_get_object (truth), "sources");
  for (guint k = 0; k < json_array_get_length (sources); k++)
    {
      JsonObject *source = json_array_get_object_element (sources, k);
      gboolean breaks = strcmp (tf_json_member_string (source, "what"), "anti-hale") == 0;
      gboolean north = tf_json_member_number (source, "lat_deg") > 0;
      int leading = (int)tf_json_member_int (source, "leading_polarity", 0);
      anti += breaks;
      right += (leading == (north ? -1 : 1)) != breaks;
    }
  g_assert_cmpuint (right, ==, 60);
  tf_check_between ("anti-Hale of 60", anti, 18, 42); /* binomial, 3 sigma */
  remove_folder (folder);
}

static void
test_folder_refused (void)
{
  TfSimulateParams params;
  g_autoptr (GError) error = NULL;
  tf_options_reset (tf_simulate_options, &params);
  g_assert_false (tf_simulate_frames ("/proc/none/here", &params, NULL, &error));
  g_assert_error (error, TF_SIMULATE_ERROR, TF_SIMULATE_ERROR_WRITE);
  g_assert_nonnull (strstr (error->message, "/proc/none/here"));
}

void
add_scenario_tests (const char *demo_folder)
{
  if (demo_folder != NULL)
    g_test_add_data_func ("/simulate/demo/the-demo-frames-are-made-again-byte-for-byte",
                          demo_folder, test_demo_same);
  g_test_add_func ("/simulate/frames/equal-seeds-give-equal-bytes-on-any-number-of-threads",
                   test_frames_same);
  g_test_add_func ("/simulate/frames/the-share-that-breaks-hales-law-is-the-one-asked-for",
                   test_anti_hale_share);
  g_test_add_func ("/simulate/frames/a-folder-that-cannot-be-made-is-named", test_folder_refused);
}
