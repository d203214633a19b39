/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Number text. Files and JSON use the C locale; only tf_number_dup_form with @local follows the
 * user's. Reading is strict: the whole text must be one number. */

#include <glib.h>

G_BEGIN_DECLS

/** tf_number_dup: the fewest significant digits (15 to 17) that read back the same; "nan" and "inf" for the rest. */
char *tf_number_dup (double value);

/**
 * tf_number_dup_form:
 * @form: "" (as tf_number_dup), or flags, precision and one of f e g: ".2f", "+.1f", ".3g"
 * @local: the user's decimal point when TRUE
 */
char *tf_number_dup_form (double value, const char *form, gboolean local);

/** tf_number_read: TRUE and @value when all of @text but outer blanks is one finite number in the C locale. */
gboolean tf_number_read (const char *text, double *value);
gboolean tf_number_read_int (const char *text, gint64 *value);

G_END_DECLS
