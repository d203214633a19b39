/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-zip.h"

#include <archive.h>
#include <archive_entry.h>
#include <errno.h>
#include <string.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>

#include "tf-export-private.h"

enum
{
  MOST_FILES = 4096,
  LONGEST_NAME = 256,
  BLOCK = 65536,
};
#define MOST_BYTES ((gsize)1 << 30)

typedef struct archive Archive;
G_DEFINE_AUTOPTR_CLEANUP_FUNC (Archive, archive_free)

struct _TfZip
{
  GArray *files; /* TfZipFile */
};

static void
clear_file (gpointer data)
{
  TfZipFile *file = data;
  g_free (file->name);
  g_bytes_unref (file->bytes);
}

TfZip *
tf_zip_new (void)
{
  TfZip *zip = g_new0 (TfZip, 1);
  zip->files = g_array_new (FALSE, TRUE, sizeof (TfZipFile));
  g_array_set_clear_func (zip->files, clear_file);
  return zip;
}

void
tf_zip_free (TfZip *zip)
{
  if (zip == NULL)
    return;
  g_array_unref (zip->files);
  g_free (zip);
}

void
tf_zip_add (TfZip *zip, const char *name, GBytes *bytes)
{
  TfZipFile file = { g_strdup (name), bytes };
  g_array_append_val (zip->files, file);
}

void
tf_zip_add_text (TfZip *zip, const char *name, const char *text)
{
  tf_zip_add (zip, name, g_bytes_new (text, strlen (text)));
}

const GArray *
tf_zip_get_files (const TfZip *zip)
{
  return zip->files;
}

GBytes *
tf_zip_get (const TfZip *zip, const char *name)
{
  for (guint k = 0; k < zip->files->len; k++)
    if (strcmp (g_array_index (zip->files, TfZipFile, k).name, name) == 0)
      return g_array_index (zip->files, TfZipFile, k).bytes;
  return NULL;
}

/* -- writing ----------------------------------------------------------------------------------- */

/* No time is set: a zip then says 1980 in every time zone. */
static gboolean
put_file (Archive *out, const TfZipFile *file)
{
  gsize n;
  const void *bytes = g_bytes_get_data (file->bytes, &n);
  struct archive_entry *entry = archive_entry_new ();
  archive_entry_set_pathname (entry, file->name);
  archive_entry_set_filetype (entry, AE_IFREG);
  archive_entry_set_perm (entry, 0644);
  archive_entry_set_size (entry, (la_int64_t)n);
  gboolean good = archive_write_header (out, entry) == ARCHIVE_OK
                  && (n == 0 || archive_write_data (out, bytes, n) == (la_ssize_t)n);
  archive_entry_free (entry);
  return good;
}

static gboolean
put_files (const TfZip *zip, Archive *out, const char *path)
{
  gboolean good = archive_write_set_format_zip (out) == ARCHIVE_OK
                  && archive_write_set_options (out, "zip:compression=deflate") == ARCHIVE_OK
                  && archive_write_open_filename (out, path) == ARCHIVE_OK;
  for (guint k = 0; good && k < zip->files->len; k++)
    good = put_file (out, &g_array_index (zip->files, TfZipFile, k));
  return good && archive_write_close (out) == ARCHIVE_OK;
}

gboolean
tf_zip_write (const TfZip *zip, const char *path, GError **error)
{
  g_return_val_if_fail (zip != NULL && path != NULL, FALSE);
  g_autoptr (Archive) out = archive_write_new ();
  g_autofree char *part
      = g_strdup_printf ("%s.%" G_GINT64_MODIFIER "x.part", path, g_get_monotonic_time ());
  gboolean written = put_files (zip, out, part);
  if (written && g_rename (part, path) == 0)
    return TRUE;
  const char *reason = written ? g_strerror (errno) : archive_error_string (out);
  tf_export_set_error (error, path, reason != NULL ? reason : "");
  g_unlink (part);
  return FALSE;
}

/* -- reading ----------------------------------------------------------------------------------- */

static gboolean
refuse (GError **error, const char *path, const char *name, const char *reason)
{
  g_autofree char *shown = g_utf8_make_valid (name, (gssize)MIN (strlen (name), 80));
  g_autofree char *text = g_strdup_printf (_ ("the file “%s” inside: %s; nothing was taken"), shown, reason);
  tf_export_fail_read (error, path, text);
  return FALSE;
}

/* NULL when a name is one that this program writes: relative, no ".", "..", empty parts, drive or
 * back-slash. */
static const char *
find_fault (const char *name)
{
  if (!g_utf8_validate (name, -1, NULL) || strlen (name) > LONGEST_NAME || *name == '\0')
    return _ ("its name is too long or no text");
  if (strpbrk (name, "\\:") != NULL || *name == '/')
    return _ ("its name leads out of the archive");
  for (const char *p = name; *p != '\0'; p++)
    if ((guchar)*p < 0x20)
      return _ ("its name has signs that no name has");
  g_auto (GStrv) parts = g_strsplit (name, "/", -1);
  for (guint k = 0; parts[k] != NULL; k++)
    if (*parts[k] == '\0' || strcmp (parts[k], ".") == 0 || strcmp (parts[k], "..") == 0)
      return _ ("its name leads out of the archive");
  return NULL;
}

/* What is unpacked is counted, not what the header says. */
static GBytes *
read_bytes (Archive *in, gsize room, gboolean *too_much)
{
  g_autoptr (GByteArray) all = g_byte_array_new ();
  g_autofree guchar *block = g_malloc (BLOCK);
  la_ssize_t n;
  while ((n = archive_read_data (in, block, BLOCK)) > 0)
    {
      if ((gsize)n > room - all->len)
        {
          *too_much = TRUE;
          return NULL;
        }
      g_byte_array_append (all, block, (guint)n);
    }
  return n == 0 ? g_byte_array_free_to_bytes (g_steal_pointer (&all)) : NULL;
}

static gboolean
take_file (TfZip *zip, Archive *in, struct archive_entry *entry, const char *path, gsize *room,
           GError **error)
{
  const char *name = archive_entry_pathname (entry);
  if (name == NULL)
    return refuse (error, path, "?", _ ("its name is no text"));
  if (archive_entry_filetype (entry) == AE_IFDIR)
    return TRUE;
  if (archive_entry_filetype (entry) != AE_IFREG || archive_entry_is_encrypted (entry))
    return refuse (error, path, name, _ ("it is a link, encrypted, or no plain file"));
  const char *fault = find_fault (name);
  if (fault == NULL && tf_zip_get (zip, name) != NULL)
    fault = _ ("there is a second one of that name");
  if (fault == NULL && zip->files->len >= MOST_FILES)
    fault = _ ("there are more than 4,096 files");
  if (fault != NULL)
    return refuse (error, path, name, fault);
  gboolean too_much = FALSE;
  GBytes *bytes = read_bytes (in, *room, &too_much);
  if (bytes == NULL)
    return refuse (error, path, name,
                   too_much ? _ ("with it the archive unpacks to more than may be read (1 GiB)") : _ ("it is damaged; fetch the file again"));
  *room -= g_bytes_get_size (bytes);
  tf_zip_add (zip, name, bytes);
  return TRUE;
}

static gboolean
take_files (TfZip *zip, Archive *in, const char *path, gsize room, GError **error)
{
  struct archive_entry *entry;
  int status;
  while ((status = archive_read_next_header (in, &entry)) == ARCHIVE_OK)
    if (!take_file (zip, in, entry, path, &room, error))
      return FALSE;
  if (status == ARCHIVE_EOF)
    return TRUE;
  tf_export_fail_read (error, path, _ ("the zip file is damaged; fetch it again"));
  return FALSE;
}

TfZip *
tf_zip_read (const char *path, GError **error)
{
  return tf_zip_read_most (path, MOST_BYTES, error);
}

TfZip *
tf_zip_read_most (const char *path, gsize most_bytes, GError **error)
{
  g_return_val_if_fail (path != NULL, NULL);
  g_autoptr (TfZip) zip = tf_zip_new ();
  g_autoptr (Archive) in = archive_read_new ();
  archive_read_support_format_zip (in);
  if (archive_read_open_filename (in, path, BLOCK) != ARCHIVE_OK)
    {
      tf_export_fail_read (error, path, _ ("it is not there, or no zip file"));
      return NULL;
    }
  return take_files (zip, in, path, most_bytes, error) ? g_steal_pointer (&zip) : NULL;
}
