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

const TfVerb tf_verbs[] = {
  { "inspect", "FRAME…", N_ ("Says what a frame is: kind, role, time, observer, geometry, noise, repairs; or why it is refused."),
    "tiltfield-run inspect --json data-demo/frames/*.fits", tf_verb_inspect },
  { "where", "FRAME X,Y…", N_ ("Turns FITS pixels into places on the Sun, or places into pixels."),
    "tiltfield-run where frame.fits 512,512 --sun 20,-15", tf_verb_where },
  { "measure", "FRAME", N_ ("Measures one region: poles, flux, tilt, leading polarity, uncertainties, Hale verdict."),
    "tiltfield-run measure frame.fits --cap 12,-20,8", tf_verb_measure },
  { "hints", "FRAME…", N_ ("Suggests outlines with their measurements."), "tiltfield-run hints --json frame.fits", tf_verb_hints },
  { "fill", "LEDGER FRAME|DIR…", N_ ("Puts frames into a ledger with hints and measurements; skips what is there unchanged."),
    "tiltfield-run fill demo.ledger data-demo/frames", tf_verb_fill },
  { "gather", "LEDGER PART…", N_ ("Puts part ledgers together into one; what is there already is not put in twice."),
    "tiltfield-run gather all.ledger part-*.ledger", tf_verb_gather },
  { "follow", "LEDGER", N_ ("Follows regions through their passages across the disk; offers what may have come round the Sun."),
    "tiltfield-run follow demo.ledger --with-hints", tf_verb_follow },
  { "pair", "LEDGER", N_ ("Offers the scale between two instruments from frames taken nearly at once."),
    "tiltfield-run pair demo.ledger --within 6", tf_verb_pair },
  { "bring", "LEDGER TABLE", N_ ("Brings a table of regions in as outside regions: CSV, VOTable, FITS or JSON."),
    "tiltfield-run bring old.ledger groups.csv --columns groups.map --source \"Spot groups 1917-1985\"", tf_verb_bring },
  { "laws", "LEDGER|BUNDLE", N_ ("Tests Hale's polarity law and Joy's tilt law on a ledger, or works a study bundle out again and says whether its numbers are the same."),
    "tiltfield-run laws demo.ledger --with-hints", tf_verb_laws },
  { "export", "LEDGER OUT", N_ ("Writes the catalogue; OUT ends in .csv, .vot, .fits or .json."),
    "tiltfield-run export demo.ledger regions.vot", tf_verb_export },
  { "check", "LEDGER", N_ ("Looks into a ledger: file, schema, journal, projections, and a sample of measurements made again."),
    "tiltfield-run check demo.ledger", tf_verb_check },
  { "simulate", "frames|demo|cycles DIR", N_ ("Makes invented frames, or a table of whole cycles, with their truth beside them."),
    "tiltfield-run simulate frames suns --n-frames 4", tf_verb_simulate },
  { "power", "", N_ ("Tells how many regions are needed to tell two slopes or two shares apart."),
    "tiltfield-run power --what share --first 0.05 --second 0.08", tf_verb_power },
  { NULL },
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
      {
        g_autofree char *name = g_strdup_printf ("tiltfield-run %s", v->name);
        argv[1] = name;
        g_set_prgname (name);
        return v->run (argc - 1, argv + 1);
      }
  if (argc >= 2)
    fprintf (stderr, _ ("“%s” is not a verb of tiltfield-run. See tiltfield-run --help.\n"), argv[1]);
  else
    print_verbs (stderr);
  return TF_EXIT_CALL;
}
