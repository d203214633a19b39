/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-cycles.h"
#include "tf-simulate.h"

/* simulate: invented frames or whole cycles, their truth beside them. */

typedef enum
{
  FRAMES,
  DEMO,
  CYCLES,
  NOTHING
} What;

static What
what_of (const char *word)
{
  static const char *const words[] = { "frames", "demo", "cycles" };
  for (int k = 0; k < NOTHING; k++)
    if (strcmp (word, words[k]) == 0)
      return (What)k;
  return NOTHING;
}

int
tf_verb_simulate (int argc, char **argv)
{
  TfSimulateParams params;
  tf_options_reset (tf_simulate_options, &params);
  GOptionContext *context = tf_batch_context ("simulate");
  g_option_context_add_group (context, tf_options_new_group (tf_simulate_options, &params, "sun", N_ ("the invented sun")));
  TfCyclesParams cycles;
  tf_options_reset (tf_cycles_options, &cycles);
  g_option_context_add_group (context, tf_options_new_group (tf_cycles_options, &cycles, "cycles", N_ ("invented cycles")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  What what = argc == 3 ? what_of (argv[1]) : NOTHING;
  if (what == NOTHING)
    return tf_batch_usage ("simulate",
                           _ ("Say “frames” (or “demo”, the frames of data-demo; or “cycles”, a table of regions) and a folder."));

  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  gboolean made = what == DEMO     ? tf_simulate_demo (argv[2], work, &error)
                  : what == CYCLES ? tf_cycles_write (argv[2], &cycles, &error)
                                   : tf_simulate_frames (argv[2], &params, work, &error);
  if (made)
    {
      g_autofree char *line = g_strdup_printf (what == CYCLES ? _ ("%s: cycles.csv made, the truth in cycles.truth.csv and .json")
                                                              : _ ("%s: made, the truth beside each frame as .truth.json"),
                                               argv[2]);
      tf_batch_say (line);
      return TF_EXIT_DONE;
    }
  tf_batch_say_error (error);
  return TF_EXIT_NOTHING;
}
