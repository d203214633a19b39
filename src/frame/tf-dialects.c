/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-info-private.h"

/* Order matters: cards first, then time, observer and radius, which the geometry's repairs lean
 * on; maps last. Every function asks by itself whether it applies. To add a habit: one function
 * in the file of its subject, one row here, one note in tf-note-frame.c, one test in
 * tests/frame/test-dialect.c. */
const TfDialect tf_dialects[] = {
  { "bare-text", NULL, tf_dialect_bare_text },
  { "bare-nan", NULL, tf_dialect_bare_nan },
  { "blank-with-floats", NULL, tf_dialect_blank_with_floats },
  { "fill-keyword", NULL, tf_dialect_fill_keyword },

  { "underscore-date", NULL, tf_dialect_underscore_date },
  { "tai-text", NULL, tf_dialect_tai_text },
  { "gps-time", NULL, tf_dialect_gps_time },
  { "slash-date", NULL, tf_dialect_slash_date },
  { "two-digit-year", NULL, tf_dialect_two_digit_year },
  { "date-and-time-apart", NULL, tf_dialect_date_and_time_apart },
  { "mean-hours", NULL, tf_dialect_mean_hours },
  { "time-system", NULL, tf_dialect_time_system },

  { "old-observer", NULL, tf_dialect_old_observer },
  { "b0-in-radians", NULL, tf_dialect_b0_in_radians },
  { "angular-radius", NULL, tf_dialect_angular_radius },

  { "unit-spelling", NULL, tf_dialect_unit_spelling },
  { "solar-xy", NULL, tf_dialect_solar_xy },
  { "missing-ctype", NULL, tf_dialect_missing_ctype },
  { "ground-network", NULL, tf_dialect_ground_network },
  { "centre-and-radius-in-pixels", NULL, tf_dialect_centre_and_radius },
  { "solar-radii", NULL, tf_dialect_solar_radii },
  { "pointing-only", NULL, tf_dialect_pointing_only },
  { "missing-cunit", NULL, tf_dialect_missing_cunit },
  { "crota-elsewhere", NULL, tf_dialect_crota_elsewhere },
  { "p-angle", NULL, tf_dialect_p_angle },
  { "stale-pixels", NULL, tf_dialect_stale_pixels },

  { "map-names", NULL, tf_dialect_map_names },
  { "carrington-time", NULL, tf_dialect_carrington_time },
  { "whole-map", NULL, tf_dialect_whole_map },
  { "sine-latitude", NULL, tf_dialect_sine_latitude },
  { "stonyhurst-map", NULL, tf_dialect_stonyhurst_map },
  { NULL, NULL, NULL },
};
