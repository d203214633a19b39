/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-verdict.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#define O(member) offsetof (TfVerdictParams, member)
const TfOption tf_verdict_options[] = {
  { "equator-zone", TF_OPTION_NUMBER, "deg", 3, 0, 30, NULL,
    N_ ("below this distance from the equator Hale's law cannot be tested"), O (equator_deg) },
  { "verdict-mu", TF_OPTION_NUMBER, "", 0.34, 0, 1, NULL,
    N_ ("smallest mu at which a verdict is given"), O (mu_min) },
  { "weaker-share", TF_OPTION_NUMBER, "", 0.10, 0, 0.5, NULL,
    N_ ("smallest share of the flux in the weaker polarity"), O (weaker_share) },
  { "verdict-steep", TF_OPTION_NUMBER, "deg", 75, 0, 90, NULL,
    N_ ("largest size of the axis tilt at which a verdict is given"), O (steep_deg) },
  { NULL },
};
#undef O

/* An imbalance of 0.8 is a weaker share of 0.1 but for rounding. */
#define SHARE_STEP 1e-12

static gboolean
straddles (const TfSampleRow *row)
{
  if (row->straddles >= 0)
    return row->straddles == 1;
  return row->leading_lat_deg * row->following_lat_deg < 0.0;
}

/* +1 north, -1 south; 0 where the law has no sign. */
static int
hemisphere_of (const TfSampleRow *row)
{
  if (straddles (row))
    return 0;
  return row->lat_deg > 0.0 ? 1 : row->lat_deg < 0.0 ? -1 : 0;
}

double
tf_verdict_weaker_share (const TfSampleRow *row)
{
  return 0.5 * (1.0 - fabs (row->imbalance));
}

/* The size of the tilt, by the bearing where no tilt is given. */
static double
steepness (const TfSampleRow *row)
{
  return fabs (isnan (row->axis_tilt_deg) ? row->axis_bearing_deg : row->axis_tilt_deg);
}

/* The first reason that does not concern the cycle; NULL when there is none. */
static const char *
find_reason (const TfSampleRow *row, const TfVerdictParams *params)
{
  if (tf_verdict_weaker_share (row) < params->weaker_share - SHARE_STEP)
    return "hale-unipolar";
  if (row->leading_polarity == 0)
    return "hale-no-polarity";
  if (isnan (row->lat_deg))
    return "hale-no-place";
  if (straddles (row))
    return "hale-straddles";
  if (fabs (row->lat_deg) < params->equator_deg || hemisphere_of (row) == 0)
    return "hale-equator";
  if (row->mu < params->mu_min)
    return "hale-near-limb";
  if (steepness (row) > params->steep_deg)
    return "hale-steep";
  if (row->leading_sure == 0)
    return "hale-leader-unsure";
  return row->witnesses_differ == 1 ? "hale-witnesses-differ" : NULL;
}

static TfVerdictKind
compare_leader (const TfSampleRow *row, int cycle)
{
  int expected = tf_hale_expected (cycle, hemisphere_of (row));
  if (expected == 0)
    return TF_VERDICT_CANNOT_SAY;
  return (row->leading_polarity > 0) == (expected > 0) ? TF_VERDICT_KEEPS : TF_VERDICT_BREAKS;
}

TfVerdict
tf_verdict_judge (const TfSampleRow *row, const TfDivides *divides, const TfVerdictParams *params)
{
  TfVerdict verdict = { .kind = TF_VERDICT_CANNOT_SAY };
  verdict.cycle = tf_divides_call (divides, row->time, row->lat_deg);
  verdict.expected = tf_hale_expected (verdict.cycle.number, hemisphere_of (row));
  verdict.reason = find_reason (row, params);
  if (verdict.reason != NULL)
    return verdict;
  if (verdict.cycle.number == 0)
    {
      verdict.reason = "hale-no-cycle";
      return verdict;
    }
  if (verdict.cycle.sure)
    {
      verdict.kind = compare_leader (row, verdict.cycle.number);
      return verdict;
    }
  verdict.reason = "hale-cycle-unsure";
  verdict.as_number = compare_leader (row, verdict.cycle.number);
  verdict.as_other = compare_leader (row, verdict.cycle.other);
  return verdict;
}

const char *
tf_verdict_name (TfVerdictKind kind)
{
  switch (kind)
    {
    case TF_VERDICT_KEEPS:
      return "keeps";
    case TF_VERDICT_BREAKS:
      return "breaks";
    case TF_VERDICT_CANNOT_SAY:
    default:
      return "cannot say";
    }
}

double
tf_verdict_polarity_tilt (const TfSampleRow *row, const TfVerdict *verdict)
{
  if (!verdict->cycle.sure || verdict->expected == 0 || row->leading_polarity == 0
      || row->leading_sure == 0 || isnan (row->axis_tilt_deg))
    return NAN;
  if ((row->leading_polarity > 0) == (verdict->expected > 0))
    return row->axis_tilt_deg;
  return row->axis_tilt_deg > 0.0 ? row->axis_tilt_deg - 180.0 : row->axis_tilt_deg + 180.0;
}

static char *
note_text (TfNote *taken, gboolean english)
{
  g_autoptr (TfNote) note = taken;
  return tf_note_dup_text (note, english);
}

/* "as 23 breaks, as 24 keeps", the older cycle first. */
static char *
dup_readings (const TfVerdict *verdict, gboolean english)
{
  gboolean number_breaks = verdict->as_number == TF_VERDICT_BREAKS;
  int breaks = number_breaks ? verdict->cycle.number : verdict->cycle.other;
  int keeps = number_breaks ? verdict->cycle.other : verdict->cycle.number;
  if (breaks < keeps)
    return note_text (tf_note_new ("hale-readings-breaks-keeps", "ii", breaks, keeps), english);
  return note_text (tf_note_new ("hale-readings-keeps-breaks", "ii", keeps, breaks), english);
}

char *
tf_verdict_dup_text (const TfVerdict *verdict, const TfSampleRow *row, gboolean english)
{
  gboolean north = row->lat_deg > 0.0;
  const char *sign = verdict->expected > 0 ? "+" : "−";
  if (verdict->kind == TF_VERDICT_KEEPS)
    return note_text (tf_note_new (north ? "hale-keeps-north" : "hale-keeps-south", "is",
                                   verdict->cycle.number, sign),
                      english);
  if (verdict->kind == TF_VERDICT_BREAKS)
    return note_text (tf_note_new (north ? "hale-breaks-north" : "hale-breaks-south", "is",
                                   verdict->cycle.number, sign),
                      english);
  g_autofree char *reason = note_text (tf_note_new (verdict->reason, ""), english);
  if (verdict->as_number == TF_VERDICT_CANNOT_SAY || verdict->as_other == TF_VERDICT_CANNOT_SAY)
    return g_steal_pointer (&reason);
  g_autofree char *readings = dup_readings (verdict, english);
  return g_strdup_printf ("%s (%s)", reason, readings);
}
