/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Zip files for archives: written the same whenever and by whomever (order as given, no times), and
 * read with suspicion (no names that lead out, no second file of a name, no more than stated). */

#include <glib.h>

G_BEGIN_DECLS

typedef struct
{
  char *name; /* relative, parted by "/" */
  GBytes *bytes;
} TfZipFile;

typedef struct _TfZip TfZip;

TfZip *tf_zip_new (void);
void tf_zip_free (TfZip *zip);
/** tf_zip_add: @bytes is taken. */
void tf_zip_add (TfZip *zip, const char *name, GBytes *bytes);
void tf_zip_add_text (TfZip *zip, const char *name, const char *text);
/** tf_zip_get: NULL when it is not there. Borrowed. */
GBytes *tf_zip_get (const TfZip *zip, const char *name);
/** tf_zip_get_files: (element-type TfZipFile). Borrowed. */
const GArray *tf_zip_get_files (const TfZip *zip);
/** tf_zip_write: all of the file or none of it. */
gboolean tf_zip_write (const TfZip *zip, const char *path, GError **error);
/** tf_zip_read: refuses what is no plain zip of at most 4,096 files and 1 GiB unpacked; the message
 * names the file inside. */
TfZip *tf_zip_read (const char *path, GError **error);
/** tf_zip_read_most: likewise, of at most that many bytes unpacked. */
TfZip *tf_zip_read_most (const char *path, gsize most_bytes, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfZip, tf_zip_free)

G_END_DECLS
