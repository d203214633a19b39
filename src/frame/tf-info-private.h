/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Parts of tf_frame_info_read, each in a file of its own. They read a header that is already
 * repaired. */

#include "tf-frame-info.h"

/** tf_info_read_role: role, refusal, field, unit and to_gauss. */
void tf_info_read_role (const TfHeader *header, TfFrameInfo *info);
/** tf_info_read_time: time, time_source, time_span_s and the cautions about them. */
void tf_info_read_time (const TfHeader *header, TfFrameInfo *info);
/** tf_info_read_observer: observer, radius and distance into info->geometry; needs the time. */
void tf_info_read_observer (const TfHeader *header, TfFrameInfo *info);
/** tf_info_read_geometry: the rest of info->geometry by wcslib, and the kind. FALSE: there is
 * none. */
gboolean tf_info_read_geometry (const TfHeader *header, TfFrameInfo *info);
/** tf_info_read_instrument: (transfer full): origin of the frame. */
char *tf_info_read_instrument (const TfHeader *header);

/** tf_unit_to_gauss: factor from @unit to G, 0 when it is no unit of magnetic field. */
double tf_unit_to_gauss (const char *unit);
/** tf_header_is_map: CTYPE1 is a longitude of a map. */
gboolean tf_header_is_map (const TfHeader *header);
/** tf_header_radius_m: RSUN_REF when it can be true, else the nominal radius. */
double tf_header_radius_m (const TfHeader *header);
/** tf_header_time: the time the header gives, by the rule of tf_info_read_time, without notes. */
TfTime tf_header_time (const TfHeader *header);
/** tf_header_angular_radius: of the Sun, rad: RSUN_OBS, else from DSUN_OBS, else from the Earth
 * at that time; NaN. */
double tf_header_angular_radius (const TfHeader *header);

/* The dialects, by subject. */
gboolean tf_dialect_bare_text (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_bare_nan (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_blank_with_floats (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_fill_keyword (TfHeader *header, TfNotes *repairs);

gboolean tf_dialect_underscore_date (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_tai_text (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_gps_time (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_slash_date (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_two_digit_year (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_date_and_time_apart (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_mean_hours (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_time_system (TfHeader *header, TfNotes *repairs);

gboolean tf_dialect_old_observer (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_b0_in_radians (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_angular_radius (TfHeader *header, TfNotes *repairs);

gboolean tf_dialect_unit_spelling (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_solar_xy (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_missing_ctype (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_ground_network (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_centre_and_radius (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_solar_radii (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_pointing_only (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_missing_cunit (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_crota_elsewhere (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_p_angle (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_stale_pixels (TfHeader *header, TfNotes *repairs);

gboolean tf_dialect_map_names (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_carrington_time (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_whole_map (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_sine_latitude (TfHeader *header, TfNotes *repairs);
gboolean tf_dialect_stonyhurst_map (TfHeader *header, TfNotes *repairs);
