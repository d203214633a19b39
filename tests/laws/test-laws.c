/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* GSL's error handler is left as it is, so that a call it does not like ends the program here. */
#include "test-laws.h"

#include "tf-constants.h"

TfSampleRow
test_laws_row (double lat, int leading)
{
  TfSampleRow row;
  tf_sample_row_init (&row);
  row.time = tf_time_from_calendar (2013, 6, 1, 0, 0, 0.0, TF_SCALE_UTC);
  row.lat_deg = lat;
  row.leading_lat_deg = lat - (lat < 0.0 ? -0.3 : 0.3);
  row.following_lat_deg = lat + (lat < 0.0 ? -0.3 : 0.3);
  row.mu = 0.9;
  row.axis_tilt_deg = 6.0;
  row.tilt_sigma_deg = 1.0;
  row.separation_deg = 5.0;
  row.separation_sigma_deg = 0.1;
  row.flux_mx = 1e22;
  row.imbalance = 0.1;
  row.compactness = 1.2;
  row.leading_polarity = leading;
  row.leading_sure = 1;
  row.witnesses_differ = 0;
  row.straddles = 0;
  row.size = 0;
  return row;
}

TfDivideParams
test_laws_divide_params (void)
{
  TfDivideParams params;
  tf_options_reset (tf_divide_options, &params);
  return params;
}

TfVerdictParams
test_laws_verdict_params (void)
{
  TfVerdictParams params;
  tf_options_reset (tf_verdict_options, &params);
  return params;
}

TfDivides *
test_laws_divides (void)
{
  TfDivideParams params = test_laws_divide_params ();
  return tf_divides_new (&params);
}

TfTime
test_laws_month (int cycle, double months)
{
  return tf_time_add (tf_cycle_minimum (cycle), months * 365.25 / 12.0 * TF_DAY_S);
}

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  test_laws_add_bin ();
  test_laws_add_cycle ();
  test_laws_add_verdict ();
  test_laws_add_proportion ();
  test_laws_add_hale ();
  test_laws_add_held ();
  test_laws_add_joy ();
  test_laws_add_sort ();
  test_laws_add_tally ();
  test_laws_add_emergence ();
  test_laws_add_line ();
  test_laws_add_compare ();
  test_laws_add_sampling ();
  test_laws_add_agreement ();
  return g_test_run ();
}
