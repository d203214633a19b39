/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfHeader: the cards of one FITS header, in order, as text.
 *
 * Keywords are upper case. A value is kept as its text without quotes and outer blanks, with a
 * flag that tells whether it was quoted; unquoted strings and bare nan cards are kept as they
 * stand. HISTORY, COMMENT and blank cards are dropped. CONTINUE cards are joined. Repairs edit
 * a header, so that what follows reads only standard words.
 */

#include <glib.h>

G_BEGIN_DECLS

typedef struct _TfHeader TfHeader;

/** tf_header_read: from 80-character cards without line ends (@n_bytes a multiple of 80 or less
 * at the end), or from lines of text, one card a line: told apart by the first line end. Never
 * fails: what is not a card is left out. */
TfHeader *tf_header_read (const char *text, gssize n_bytes);
TfHeader *tf_header_new (void);
TfHeader *tf_header_copy (const TfHeader *header);
void tf_header_free (TfHeader *header);

gboolean tf_header_has (const TfHeader *header, const char *keyword);
/** tf_header_get: the value's text, borrowed; NULL when absent. */
const char *tf_header_get (const TfHeader *header, const char *keyword);
/** tf_header_number: NaN when absent or not a number (FITS 'D' exponents are read). */
double tf_header_number (const TfHeader *header, const char *keyword);
gint64 tf_header_int (const TfHeader *header, const char *keyword, gint64 fallback);
void tf_header_set (TfHeader *header, const char *keyword, const char *text);
void tf_header_set_number (TfHeader *header, const char *keyword, double value);
void tf_header_remove (TfHeader *header, const char *keyword);
guint tf_header_get_n (const TfHeader *header);
const char *tf_header_get_keyword (const TfHeader *header, guint k);
/** tf_header_dup_cards: 80-character cards with END, as wcslib takes them. */
char *tf_header_dup_cards (const TfHeader *header, guint *n_cards);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfHeader, tf_header_free)

G_END_DECLS
