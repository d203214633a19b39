/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-header.h"

/** tf_header_is_quoted: card @k had quotes. */
gboolean tf_header_is_quoted (const TfHeader *header, guint k);
/** tf_header_format_card: card @k as 80 characters and a NUL; a string that is too long is cut. */
void tf_header_format_card (const TfHeader *header, guint k, char card[81]);
