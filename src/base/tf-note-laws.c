/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-note.h"

/* One row a code, in the order of the code's name. */
const TfNoteKind tf_note_kinds_laws[] = {
  { "condition-names-nothing", TF_NOTE_CAUTION,
    N_ ("A condition names the {0} {1}, which no row has. A passage has another id when an earlier frame of "
        "it is filled in: follow prints them.") },
  { "cycle-before-table", TF_NOTE_REASON,
    N_ ("The time is before cycle 1, the first of the table: the cycle is unknown.") },
  { "cycle-by-date", TF_NOTE_INFO, N_ ("The cycle follows from the date: no minimum is near.") },
  { "cycle-by-divide", TF_NOTE_INFO,
    N_ ("The cycle follows from the latitude: the region lies clear of the divide between the old "
        "and the new cycle.") },
  { "cycle-early-wing", TF_NOTE_REASON,
    N_ ("The cycle is unsure: it is the year before the divide begins to act, and the latitude is "
        "high enough for the next cycle.") },
  { "cycle-late-wing", TF_NOTE_REASON,
    N_ ("The cycle is unsure: it is the year after the divide ceases to act, and the latitude is "
        "low enough for the cycle before.") },
  { "cycle-near-divide", TF_NOTE_REASON,
    N_ ("The cycle is unsure: the region lies too near the divide between the old and the new "
        "cycle; look at the wings, and move the divide if it is wrong.") },
  { "cycle-next-minimum-unknown", TF_NOTE_REASON,
    N_ ("The cycle is unsure: the next minimum is not known, and the latitude is high enough for "
        "the next cycle; a provisional minimum can be entered.") },
  { "cycle-no-latitude", TF_NOTE_REASON,
    N_ ("The cycle is unsure: a minimum is near, and the region has no latitude.") },
  { "cycle-no-time", TF_NOTE_REASON, N_ ("The cycle is unknown: the region has no time.") },
  { "cycle-provisional", TF_NOTE_CAUTION,
    N_ ("The cycle leans on a provisional minimum that a person entered.") },
  { "divides-moved", TF_NOTE_CAUTION,
    N_ ("Divides were moved by hand: {0} (cycle begun and hemisphere).") },
  { "divides-shown", TF_NOTE_CAUTION,
    N_ ("Polarity was in sight while these divides were moved: {0}. What they say of Hale's law is "
        "circular to that extent.") },
  { "every-mark-is-a-pick", TF_NOTE_CAUTION,
    N_ ("Every mark is a pick: {0} picks of {1} regions. Intervals cluster by region; counts of "
        "picks are not counts of regions.") },
  { "every-mark-is-its-own-passage", TF_NOTE_CAUTION,
    N_ ("Marks are not linked into passages yet: every mark counts as a passage of its own, so one "
        "region seen on several "
        "frames is several picks. Intervals cluster by region.") },
  { "hale-breaks-north", TF_NOTE_INFO,
    N_ ("breaks Hale's law (cycle {0}, sure: {1} should lead in the north)") },
  { "hale-breaks-south", TF_NOTE_INFO,
    N_ ("breaks Hale's law (cycle {0}, sure: {1} should lead in the south)") },
  { "hale-changes", TF_NOTE_REASON, N_ ("cannot say: fewer than four in five marks of its passage agree") },
  { "hale-cycle-unsure", TF_NOTE_REASON, N_ ("cannot say: the cycle is unsure") },
  { "hale-equator", TF_NOTE_REASON,
    N_ ("cannot say: the region lies too near the equator for its hemisphere to be told") },
  { "hale-keeps-north", TF_NOTE_INFO,
    N_ ("keeps Hale's law (cycle {0}, sure: {1} leads in the north)") },
  { "hale-keeps-south", TF_NOTE_INFO,
    N_ ("keeps Hale's law (cycle {0}, sure: {1} leads in the south)") },
  { "hale-leader-unsure", TF_NOTE_REASON, N_ ("cannot say: which polarity leads is unsure") },
  { "hale-near-limb", TF_NOTE_REASON,
    N_ ("cannot say: the region is too near the limb; look at a frame nearer its passage over the "
        "central meridian") },
  { "hale-no-cycle", TF_NOTE_REASON, N_ ("cannot say: the cycle is unknown") },
  { "hale-no-place", TF_NOTE_REASON, N_ ("cannot say: the region has no latitude") },
  { "hale-no-polarity", TF_NOTE_REASON, N_ ("cannot say: the source gives no polarity") },
  { "hale-readings-breaks-keeps", TF_NOTE_INFO, N_ ("as {0} breaks, as {1} keeps") },
  { "hale-readings-keeps-breaks", TF_NOTE_INFO, N_ ("as {0} keeps, as {1} breaks") },
  { "hale-steep", TF_NOTE_REASON,
    N_ ("cannot say: the axis is too steep for one polarity to lead") },
  { "hale-straddles", TF_NOTE_REASON,
    N_ ("cannot say: the poles lie on opposite sides of the equator") },
  { "hale-unipolar", TF_NOTE_REASON,
    N_ ("cannot say: the region is nearly unipolar, the weaker polarity holds too little of the "
        "flux; check that the outline holds both poles") },
  { "hale-witnesses-differ", TF_NOTE_REASON,
    N_ ("cannot say: the witnesses of the leading polarity differ") },
  { "hints-counted", TF_NOTE_CAUTION,
    N_ ("{0} of the rows are hints that nobody has judged; {1} are people's marks. A hint that "
        "follow has not linked counts as a region of its own.") },
  { "instruments-scaled", TF_NOTE_CAUTION,
    N_ ("Fluxes were multiplied by scales of instruments that people kept: {0}. Floors were not.") },
  { "instruments-unscaled-pooled", TF_NOTE_CAUTION,
    N_ ("Frames of several instruments are pooled without a scale between their fields: {0}. "
        "Fluxes and floors are not alike.") },
  { "minimum-provisional", TF_NOTE_CAUTION,
    N_ ("The next minimum is provisional: {0:.1f}, entered by a person; {1} of the picks lean on "
        "it.") },
  { "outside-rows", TF_NOTE_CAUTION,
    N_ ("{0} of the rows came in tables from elsewhere and were not measured here: {1}.") },
  { "peak-not-bracketed", TF_NOTE_CAUTION,
    N_ ("Peak not bracketed: of {0} of the {1} picks the greatest flux is the first or the last "
        "mark, so that it may have been greater still when nobody looked.") },
  { "rows-simulated", TF_NOTE_CAUTION,
    N_ ("{0} of the rows come from invented frames (SIMULATD = T).") },
  { "rows-with-other-floor", TF_NOTE_CAUTION,
    N_ ("{0} rows were measured with another floor than the study's even floor of {1:.1f} G; "
        "fluxes near the limb are not quite alike.") },
  { "series-few-marks", TF_NOTE_REASON, N_ ("no mark away from the limb has a flux") },
  { "series-no-decay", TF_NOTE_REASON, N_ ("no decay was seen: fewer than three marks, or the flux did not fall enough") },
  { "series-no-meridian", TF_NOTE_REASON, N_ ("no mark near the central meridian has a tilt") },
  { "series-no-rise", TF_NOTE_REASON, N_ ("no rise was seen: fewer than three marks, or the flux did not grow enough") },
  { "series-no-tilt", TF_NOTE_REASON, N_ ("there is no tilt") },
  { NULL, TF_NOTE_INFO, NULL },
};
