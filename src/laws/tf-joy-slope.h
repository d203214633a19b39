/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The slope of Joy's law alone: what other choices and comparisons ask again and again. */

#include "tf-joy.h"

G_BEGIN_DECLS

/** tf_joy_slope: n, no_polarity, slope and intercept as tf_joy_fit_group() gives them; no interval, no
 * scatter, no means, no count of regions. */
TfJoyFit tf_joy_slope (const TfSample *sample, const TfVerdict *verdicts, const TfGroup *group,
                       const TfJoyParams *params);

/** tf_joy_x, tf_joy_y: what stands for |lat| and tilt in the straight line of that form. */
double tf_joy_x (int form, double abs_lat_deg);
double tf_joy_y (int form, double tilt_deg);

G_END_DECLS
