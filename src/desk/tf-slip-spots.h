/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the spots of a companion intensity frame tell, as a line of the slip. Pure text, current
 * language. */

#include "tf-companion.h"
#include "tf-frame-item.h"

G_BEGIN_DECLS

/** tf_spots_dup_value: "tilt +7.2° · − leads"; "—" where the frames do not belong together. */
char *tf_spots_dup_value (const TfSpots *spots);
/** tf_spots_dup_under: number and area, cautions; or why they tell nothing. */
char *tf_spots_dup_under (const TfSpots *spots);
/** tf_spots_dup_how: @companion: (nullable): the intensity frame */
char *tf_spots_dup_how (const TfSpots *spots, const TfFrameRow *companion);

G_END_DECLS
