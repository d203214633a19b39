/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-batch.h"

#include <glib/gi18n-lib.h>

/* What each verb says of itself. */

const TfVerb tf_verbs[] = {
  { "inspect", "FRAME…", N_ ("Says what a frame is: kind, role, time, observer, geometry, noise, repairs; or why it is refused."),
    "tiltfield-run inspect --json data-demo/frames/*.fits" },
  { "where", "FRAME X,Y…", N_ ("Turns FITS pixels into places on the Sun, or places into pixels."),
    "tiltfield-run where frame.fits 512,512 --sun 20,-15" },
  { "measure", "FRAME", N_ ("Measures one region: poles, flux, tilt, leading polarity, uncertainties, Hale verdict."),
    "tiltfield-run measure frame.fits --cap 12,-20,8" },
  { "hints", "FRAME…", N_ ("Suggests outlines with their measurements."), "tiltfield-run hints --json frame.fits" },
  { "fill", "LEDGER FRAME|DIR…", N_ ("Puts frames into a ledger with hints and measurements; skips what is there unchanged."),
    "tiltfield-run fill demo.ledger data-demo/frames" },
  { "gather", "LEDGER PART…", N_ ("Puts part ledgers together into one; what is there already is not put in twice."),
    "tiltfield-run gather all.ledger part-*.ledger" },
  { "follow", "LEDGER", N_ ("Follows regions through their passages across the disk; offers what may have come round the Sun."),
    "tiltfield-run follow demo.ledger --with-hints" },
  { "pair", "LEDGER", N_ ("Offers the scale between two instruments from frames taken nearly at once."),
    "tiltfield-run pair demo.ledger --within 6" },
  { "bring", "LEDGER TABLE", N_ ("Brings a table of regions in as outside regions: CSV, VOTable, FITS or JSON."),
    "tiltfield-run bring old.ledger groups.csv --columns groups.map --source \"Spot groups 1917-1985\"" },
  { "laws", "LEDGER|BUNDLE", N_ ("Tests Hale's polarity law and Joy's tilt law on a ledger, or works a study bundle out again and says whether its numbers are the same."),
    "tiltfield-run laws demo.ledger --with-hints" },
  { "export", "LEDGER OUT", N_ ("Writes the catalogue; OUT ends in .csv, .vot, .fits or .json."),
    "tiltfield-run export demo.ledger regions.vot" },
  { "check", "LEDGER", N_ ("Looks into a ledger: file, schema, journal, projections, and a sample of measurements made again."),
    "tiltfield-run check demo.ledger" },
  { "simulate", "frames|demo|cycles DIR", N_ ("Makes invented frames, or a table of whole cycles, with their truth beside them."),
    "tiltfield-run simulate frames suns --n-frames 4" },
  { "power", "", N_ ("Tells how many regions are needed to tell two slopes or two shares apart."),
    "tiltfield-run power --what share --first 0.05 --second 0.08" },
  { NULL },
};
