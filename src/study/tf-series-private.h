/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-series.h"
#include "tf-study-private.h"

G_BEGIN_DECLS

/* Fills @series->derived from its points. */
void tf_series_derive (TfSeries *series);

G_END_DECLS
