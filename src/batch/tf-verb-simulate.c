/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-simulate.h"

/* simulate: invented frames, their truth beside them. */

int
tf_verb_simulate (int argc, char **argv)
{
  TfSimulateParams params;
  tf_options_reset (tf_simulate_options, &params);
  GOptionContext *context = tf_batch_context ("simulate");
  g_option_context_add_group (context, tf_options_new_group (tf_simulate_options, &params, "sun", N_ ("the invented sun")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  gboolean demo = argc == 3 && strcmp (argv[1], "demo") == 0;
  if (argc != 3 || (!demo && strcmp (argv[1], "frames") != 0))
    return tf_batch_usage ("simulate", _ ("Say “frames” (or “demo”, the frames of data-demo) and a folder."));

  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (0);
  if (demo ? tf_simulate_demo (argv[2], work, &error) : tf_simulate_frames (argv[2], &params, work, &error))
    {
      g_autofree char *line = g_strdup_printf (_ ("%s: made, the truth beside each frame as .truth.json"), argv[2]);
      tf_batch_say (line);
      return TF_EXIT_DONE;
    }
  tf_batch_say_error (error);
  return TF_EXIT_NOTHING;
}
