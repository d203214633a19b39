/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stddef.h>

#include <glib/gi18n-lib.h>

#include "tf-follow.h"
#include "tf-rotation.h"

#define AT(member) offsetof (TfFollowParams, member)

const TfOption tf_follow_options[] = {
  { "rotation", TF_OPTION_CHOICE, "", 0, 0, 100, tf_rotation_names,
    N_ ("rotation law that carries outlines from frame to frame"), AT (law) },
  { "gap-days", TF_OPTION_NUMBER, "d", 3.0, 0.0, 7.0, NULL,
    N_ ("longest gap across which two outlines are linked"), AT (gap_days) },
  { "overlap-share", TF_OPTION_NUMBER, "", 0.3, 0.05, 0.95, NULL,
    N_ ("least overlap of two outlines that are linked, as a share of the smaller"), AT (share) },
  { "same-share", TF_OPTION_NUMBER, "", 0.5, 0.05, 0.95, NULL,
    N_ ("overlap from which two people's outlines on one frame are one region"), AT (same_share) },
  { "vantage-deg", TF_OPTION_NUMBER, "deg", 15.0, 0.0, 90.0, NULL,
    N_ ("observers within this longitude of each other see one passage"), AT (vantage_deg) },
  { "across-hours", TF_OPTION_NUMBER, "h", 24.0, 0.0, 72.0, NULL,
    N_ ("most time between frames of two vantages that are compared"), AT (across_hours) },
  { "seen-mu", TF_OPTION_NUMBER, "", 0.5, 0.1, 0.9, NULL,
    N_ ("a place nearer the limb than this mu is not said to be empty"), AT (seen_mu) },
  { "return-lon", TF_OPTION_NUMBER, "deg", 8.0, 0.0, 30.0, NULL,
    N_ ("how far in longitude from its carried place a region may come back and be offered"),
    AT (return_lon_deg) },
  { "return-lat", TF_OPTION_NUMBER, "deg", 4.0, 0.0, 15.0, NULL,
    N_ ("how far in latitude from its place a region may come back and be offered"),
    AT (return_lat_deg) },
  { NULL },
};

void
tf_follow_params_init (TfFollowParams *params)
{
  tf_options_reset (tf_follow_options, params);
}
