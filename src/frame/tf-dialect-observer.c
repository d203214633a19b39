/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-constants.h"
#include "tf-info-private.h"

#include <math.h>

/* Habits of the observer's place and of the Sun's angular radius. They end as DSUN_OBS (m),
 * CRLN_OBS, CRLT_OBS (deg) and RSUN_OBS (arcsec). */

typedef struct
{
  const char *from, *to;
  double factor;    /* old value * factor = new value */
  double low, high; /* old values outside cannot mean this */
} Habit;

static gboolean
take (TfHeader *header, TfNotes *repairs, const Habit *habit)
{
  double value = tf_header_number (header, habit->from);
  if (!(value >= habit->low && value <= habit->high)
      || !isnan (tf_header_number (header, habit->to)))
    return FALSE;
  tf_header_set_number (header, habit->to, value * habit->factor);
  tf_notes_add (repairs, "old-keyword", "sdsd", habit->from, value, habit->to,
                value * habit->factor);
  return TRUE;
}

static gboolean
take_all (TfHeader *header, TfNotes *repairs, const Habit *habits, guint n)
{
  gboolean done = FALSE;
  for (guint k = 0; k < n; k++)
    done |= take (header, repairs, &habits[k]);
  return done;
}

gboolean
tf_dialect_old_observer (TfHeader *header, TfNotes *repairs)
{
  static const Habit habits[] = {
    { "OBS_L0", "CRLN_OBS", 1, -360, 720 },         { "L0", "CRLN_OBS", 1, -360, 720 },
    { "SOLAR-L0", "CRLN_OBS", 1, -360, 720 },       { "EPH_L0", "CRLN_OBS", 1, -360, 720 },
    { "CENLON", "CRLN_OBS", 1, -360, 720 },         { "OBS_B0", "CRLT_OBS", 1, -90, 90 },
    { "SOLAR_B0", "CRLT_OBS", 1, -90, 90 },         { "SOLAR-B0", "CRLT_OBS", 1, -90, 90 },
    { "EPH_B0", "CRLT_OBS", 1, -90, 90 },           { "B0", "CRLT_OBS", 1, -90, 90 },
    { "DSUN_AU", "DSUN_OBS", TF_AU_M, 0.01, 100 },  { "OBS_DIST", "DSUN_OBS", TF_AU_M, 0.01, 100 },
    { "DISTANCE", "DSUN_OBS", TF_AU_M, 0.01, 100 },
  };
  if (!isnan (tf_header_number (header, "HGLT_OBS")) || tf_header_is_map (header))
    return FALSE;
  return take_all (header, repairs, habits, G_N_ELEMENTS (habits));
}

/* B0 is in radians when it is far from the Earth's as degrees and near it as radians. */
gboolean
tf_dialect_b0_in_radians (TfHeader *header, TfNotes *repairs)
{
  double b0 = tf_header_number (header, "B0"), taken = tf_header_number (header, "CRLT_OBS");
  TfTime time = tf_header_time (header);
  if (!(fabs (b0) < 0.2) || !(fabs (taken - b0) < 1e-12) || !tf_time_is_known (time))
    return FALSE;
  double earth = tf_observer_earth (time).b0_deg;
  if (!(fabs (b0 / TF_DEG - earth) < 0.3) || fabs (b0 - earth) < 0.3)
    return FALSE;
  tf_header_set_number (header, "CRLT_OBS", b0 / TF_DEG);
  tf_notes_add (repairs, "b0-in-radians", "dd", b0, b0 / TF_DEG);
  return TRUE;
}

gboolean
tf_dialect_angular_radius (TfHeader *header, TfNotes *repairs)
{
  const double radian = 1 / TF_ARCSEC;
  const Habit habits[] = {
    { "OBS_R0", "RSUN_OBS", 1, 300, 20000 },       { "RSUN_ARC", "RSUN_OBS", 1, 300, 20000 },
    { "SOLAR_R", "RSUN_OBS", 1, 300, 20000 },      { "SOLAR-R", "RSUN_OBS", 1, 300, 20000 },
    { "EPH_R0", "RSUN_OBS", 1, 300, 20000 },       { "SEMIDIAM", "RSUN_OBS", radian, 0.0015, 0.1 },
    { "RADIUS", "RSUN_OBS", radian, 0.0015, 0.1 },
  };
  return !tf_header_is_map (header) && take_all (header, repairs, habits, G_N_ELEMENTS (habits));
}
