/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>

#include "tf-note.h"

/* One row a code, in the order of the code's name. */
const TfNoteKind tf_note_kinds_region[] = {
  { "companion-apart", TF_NOTE_REASON,
    N_ ("The intensity frame is {0:.0f} minutes from the magnetogram, more than {1:.0f}: choose one of the same time.") },
  { "companion-coarse", TF_NOTE_CAUTION,
    N_ ("The intensity frame's pixels are too coarse to see spots at {0:.1f} Mm: edges are smeared, umbrae and small spots lost. Areas "
        "and the spots' tilt are rough.") },
  { "companion-lies", TF_NOTE_REASON,
    N_ ("The limb of the intensity frame is not where its header puts it, the header lies: spots would come out in the wrong place. "
        "Choose another, or correct its geometry.") },
  { "companion-limb-published", TF_NOTE_INFO,
    N_ ("The intensity frame spans too little from centre to limb for a profile of its own: limb darkening is the published law's.") },
  { "companion-missing-data", TF_NOTE_CAUTION,
    N_ ("{0:.0f} % of the outline has no value in the intensity frame: spots there are not seen, areas and tilt are those of the rest.") },
  { "companion-no-disk", TF_NOTE_REASON,
    N_ ("Spots are looked for on frames of the disk whose geometry is known: one of the two is not.") },
  { "companion-no-intensity", TF_NOTE_REASON,
    N_ ("The companion is not an intensity picture: choose a continuum or white-light frame.") },
  { "companion-no-spots", TF_NOTE_INFO,
    N_ ("The intensity frame shows no spot inside the outline: the third witness is told by the magnetogram.") },
  { "companion-no-time", TF_NOTE_REASON,
    N_ ("The time of one of the two frames is not known, so that nobody can tell whether they belong together: set it by hand.") },
  { "companion-no-values", TF_NOTE_REASON,
    N_ ("The intensity frame has no values on the disk: choose another.") },
  { "companion-vantage", TF_NOTE_REASON,
    N_ ("The two frames were taken {0:.1f} degrees apart, more than {1:.1f}: choose an intensity frame from the same vantage.") },
  { "companion-view", TF_NOTE_REASON,
    N_ ("The intensity frame shows {0:.0f} % of the outline: choose one with the whole region in view.") },
  { "companion-view-disk", TF_NOTE_REASON,
    N_ ("The intensity frame shows {0:.0f} % of what the magnetogram shows of the Sun, less than half: choose one of the same field of view.") },
  { "companion-weak-field", TF_NOTE_CAUTION,
    N_ ("A spot of {1:.0f} millionths lies where the magnetogram shows {0:.0f} G only: the two frames may not lie on each other, or it is "
        "no spot. Compare them on the plate.") },
  { "complexity-coarse", TF_NOTE_CAUTION,
    N_ ("The frame's pixels are too coarse for the reference resolution of {0:.1f} Mm: gradients and R come out too low. Compare with "
        "frames of the same instrument only.") },
  { "complexity-describes", TF_NOTE_INFO,
    N_ ("Complexity figures are a description of the field, not a flare forecast.") },
  { "complexity-limb-asked", TF_NOTE_STRONG,
    N_ ("The region is at mu {0:.2f}, nearer the limb than {1:.2f}: false inversion lines appear on the limbward side of spots. The "
        "figures were asked for; do not compare them with others.") },
  { "complexity-map", TF_NOTE_REASON,
    N_ ("Complexity is not given on a map, whose columns are of different times: measure the region on a frame of the disk.") },
  { "complexity-missing-data", TF_NOTE_CAUTION,
    N_ ("{0:.0f} % of the outline has no value at the reference resolution: lines may be cut and the figures are those of the rest.") },
  { "complexity-near-limb", TF_NOTE_REASON,
    N_ ("Complexity is not given at mu {0:.2f}, below {1:.2f}: false inversion lines appear there. Take a frame nearer central meridian, or "
        "ask for it anyway.") },
  { "complexity-no-values", TF_NOTE_REASON,
    N_ ("Complexity is not given: the frame has no values inside the outline at the reference resolution of {0:.1f} Mm. Draw it larger, or "
        "choose another frame.") },
  { "decisions-elsewhere", TF_NOTE_INFO,
    N_ ("Operational decisions rest with the responsible national space-weather service and licensed staff.") },
  { "delta-apart", TF_NOTE_REASON,
    N_ ("No delta candidate: the nearest strong cores of opposite polarity are {0:.0f} Mm apart, more than {1:.0f} Mm.") },
  { "delta-candidate", TF_NOTE_CAUTION,
    N_ ("Delta candidate: cores above {0:.0f} G of opposite polarity lie {1:.0f} Mm apart across a line of strong gradient (up to {2:.0f} "
        "G/Mm). A magnetogram cannot show a common penumbra: look at an intensity frame before you call it delta.") },
  { "delta-gentle", TF_NOTE_REASON,
    N_ ("No delta candidate: strong cores of opposite polarity lie {0:.0f} Mm apart, but no line between them reaches {1:.0f} G/Mm.") },
  { "delta-no-cores", TF_NOTE_REASON,
    N_ ("No delta candidate: one polarity or both have no core above {0:.0f} G at the reference resolution.") },
  { "floor-below-noise", TF_NOTE_CAUTION,
    N_ ("The floor is {0:.1f} G in the observed field here, less than twice the noise of {1:.1f} G: noise adds to the flux. "
        "Raise the floor or leave frames this near the limb out.") },
  { "hint-active-frame", TF_NOTE_CAUTION,
    N_ ("More than half of this frame is active: its noise cannot be told, the hint's level is {0:.0f} G. Look at the outline.") },
  { "hint-at-edge", TF_NOTE_CAUTION,
    N_ ("The hint touches missing data, the frame's edge or the limb: part of the region may be missing.") },
  { "hint-leader-flips", TF_NOTE_CAUTION,
    N_ ("The leading polarity changes when the floor is moved by {0:.0f} %: look before you keep this hint.") },
  { "hint-long", TF_NOTE_CAUTION,
    N_ ("The poles are {0:.0f} Mm apart, near the most that is plausible for this flux ({1:.0f} Mm): it may be two regions. "
        "Split it if so.") },
  { "hint-neighbour-near", TF_NOTE_CAUTION,
    N_ ("Another region is less than {0:.0f} Mm away and was kept apart: join the two if they are one.") },
  { "hint-one-sided", TF_NOTE_CAUTION,
    N_ ("{0:.0f} % of the flux is not balanced: part of the other polarity may lie outside the hint.") },
  { "leader-unsure", TF_NOTE_CAUTION,
    N_ ("The leading polarity is not sure: the witnesses differ, or the poles' longitudes differ by less than twice their "
        "uncertainty. Look at the picture, or at a frame nearer central meridian.") },
  { "measured-elsewhere", TF_NOTE_STRONG,
    N_ ("These numbers were measured with another geometry of the frame than the one shown: measure it again.") },
  { "near-limb", TF_NOTE_CAUTION,
    N_ ("The region is near the limb (mu {0:.2f}): places and fluxes are less sure. Prefer a frame nearer central meridian.") },
  { "near-limb-strong", TF_NOTE_STRONG,
    N_ ("The region is very near the limb (mu {0:.2f}): a false polarity may show on its limbward side. Do not lean on "
        "these numbers; take another frame.") },
  { "no-strong-field", TF_NOTE_CAUTION,
    N_ ("One or both polarities have no field well above the floor: a decayed region without a leader to go by. The second witness is "
        "silent; look at earlier frames.") },
  { "not-one-bipole", TF_NOTE_STRONG,
    N_ ("The outline holds {0} strong pieces of one polarity each: it may not be one bipole. Split it, or leave a part out.") },
  { "nothing-above-floor", TF_NOTE_STRONG,
    N_ ("No field inside the outline reaches the floor of {0:.1f} G: there is nothing to measure. Lower the floor or look at "
        "the outline.") },
  { "outline-cut", TF_NOTE_CAUTION,
    N_ ("{0:.0f} % of the outline's area lies off the frame or too near the limb and was left out: flux and poles are "
        "those of the rest.") },
  { "pole-pinned", TF_NOTE_INFO,
    N_ ("A pole was placed by hand ({0}): tilt and separation are from that place, which has no uncertainty of its own.") },
  { "poles-overlap", TF_NOTE_CAUTION,
    N_ ("The polarities overlap (separation over sum of radii {0:.2f}): the axis depends on how the flux is spread. Compare "
        "with the strong field alone.") },
  { "potential-unsettled", TF_NOTE_CAUTION,
    N_ ("The potential field leaves {0:.0f} % of the observed field unexplained: compare with the radial field.") },
  { "saturated-core", TF_NOTE_CAUTION,
    N_ ("{0} pixels share the extreme value of {1:.0f} G: the core seems saturated and the flux is a lower bound.") },
  { "straddles-equator", TF_NOTE_CAUTION,
    N_ ("The poles lie on opposite sides of the equator: the bearing is given, a tilt by hemisphere has no meaning.") },
  { "tilt-unsure", TF_NOTE_STRONG,
    N_ ("The polarities lie almost on top of each other (separation over sum of radii {0:.2f}): the tilt is given but left "
        "out of the default Joy sample.") },
  { "touches-missing-data", TF_NOTE_CAUTION,
    N_ ("{0} pixels inside the outline have no value: flux and poles are those of the rest. Take another frame if the gap "
        "matters.") },
  { "unipolar", TF_NOTE_STRONG,
    N_ ("The weaker polarity holds {0:.1f} % of the flux: the outline is unipolar. Widen it to the other polarity, or keep "
        "it as unipolar.") },
  { "weak-polarity", TF_NOTE_CAUTION,
    N_ ("The weaker polarity holds only {0:.1f} % of the flux: its pole and the tilt are less sure.") },
  { NULL, TF_NOTE_INFO, NULL },
};
