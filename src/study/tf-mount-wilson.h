/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The Mount Wilson magnetic class, whole and in parts. Read from Greek letters or their names
 * in any mix ("βγδ", "Beta-Gamma-Delta", "beta gamma δ"); what is none of that is kept whole
 * and has no parts. Hale, Ellerman, Nicholson & Joy 1919, ApJ 49, 153; delta: Kuenzel 1960.
 */

#include <glib.h>

G_BEGIN_DECLS

/** tf_mount_wilson_dup_ascii: "beta-gamma-delta"; text that is no class: transliterated; "" for
 * NULL or "". */
char *tf_mount_wilson_dup_ascii (const char *text);
/** tf_mount_wilson_dup_greek: "βγδ"; text that is no class as it is. */
char *tf_mount_wilson_dup_greek (const char *text);
/** tf_mount_wilson_dup_base: the class without delta: "alpha", "beta", "gamma", "beta-gamma",
 * or "". */
char *tf_mount_wilson_dup_base (const char *text);
/** tf_mount_wilson_delta: 1 with delta, 0 without, -1 when @text is no class. */
int tf_mount_wilson_delta (const char *text);

G_END_DECLS
