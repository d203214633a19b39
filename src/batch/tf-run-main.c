/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* tiltfield-run: one verb first, then options. */

#include <locale.h>
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>
#include <gsl/gsl_errno.h>

#include "tf-batch.h"
#include "tf-pool.h"

/* All other verbs are loaded when called. */
static const struct
{
  const char *name;
  TfVerbFunc run;
} at_hand[] = {
  { "inspect", tf_verb_inspect }, { "where", tf_verb_where },   { "measure", tf_verb_measure },
  { "hints", tf_verb_hints },     { "fill", tf_verb_fill },     { "gather", tf_verb_gather },
  { "follow", tf_verb_follow },   { "pair", tf_verb_pair },     { "check", tf_verb_check },
  { "simulate", tf_verb_simulate },
};

static void
print_verbs (FILE *to)
{
  fprintf (to, _ ("tiltfield-run %s: bipolar regions on the Sun, without a window.\n\nUse: tiltfield-run VERB WORDS…\n\n"), TF_VERSION);
  glong wide = 0;
  for (const TfVerb *v = tf_verbs; v->name != NULL; v++)
    wide = MAX (wide, g_utf8_strlen (v->words, -1));
  for (const TfVerb *v = tf_verbs; v->name != NULL; v++)
    fprintf (to, "  %-9s %s%*s  %s\n", v->name, v->words, (int)(wide - g_utf8_strlen (v->words, -1)), "", _ (v->summary));
  fprintf (to, _ ("\nEvery verb has --help with an example. Exit: 0 all done, 1 in part, 2 the call is off, 3 nothing done.\n"));
}

static int
run_verb (const char *verb, int argc, char **argv)
{
  g_autofree char *name = g_strdup_printf ("tiltfield-run %s", verb), *why = NULL;
  TfVerbFunc run = NULL;
  argv[0] = name;
  g_set_prgname (name);
  for (guint k = 0; k < G_N_ELEMENTS (at_hand) && run == NULL; k++)
    if (strcmp (at_hand[k].name, verb) == 0)
      run = at_hand[k].run;
  if (run == NULL)
    run = tf_verb_load (verb, &why);
  if (run != NULL)
    return run (argc, argv);
  fprintf (stderr, _ ("%s cannot be run: a part of Tiltfield is not there (%s). Install it again.\n"), name, why);
  return TF_EXIT_NOTHING;
}

int
main (int argc, char **argv)
{
  tf_heap_keep ();
  setlocale (LC_ALL, "");
  bindtextdomain (GETTEXT_PACKAGE, TF_LOCALE_DIR);
  bind_textdomain_codeset (GETTEXT_PACKAGE, "UTF-8");
  textdomain (GETTEXT_PACKAGE);
  gsl_set_error_handler_off ();
  if (argc >= 2 && strcmp (argv[1], "--version") == 0)
    {
      printf ("tiltfield-run %s\n", TF_VERSION);
      return TF_EXIT_DONE;
    }
  if (argc >= 2 && (strcmp (argv[1], "--help") == 0 || strcmp (argv[1], "-h") == 0))
    {
      print_verbs (stdout);
      return TF_EXIT_DONE;
    }
  for (const TfVerb *v = tf_verbs; argc >= 2 && v->name != NULL; v++)
    if (strcmp (v->name, argv[1]) == 0)
      return run_verb (v->name, argc - 1, argv + 1);
  if (argc >= 2)
    fprintf (stderr, _ ("“%s” is not a verb of tiltfield-run. See tiltfield-run --help.\n"), argv[1]);
  else
    print_verbs (stderr);
  return TF_EXIT_CALL;
}
