/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Ids and hashes. Every part of a hash has its length (8 bytes, little endian) before it, so that
 * no two lists of parts run together into the same bytes. BLAKE2b-256 (RFC 7693) by libsodium. */

#include "tf-ledger-private.h"

#include <string.h>

enum
{
  HASH_BYTES = 32,
  UUID_BYTES = 16
};

static char *
to_hex (const guint8 *bytes, gsize n)
{
  char *hex = g_malloc (2 * n + 1);
  return sodium_bin2hex (hex, 2 * n + 1, bytes, n);
}

void
tf_digest_begin (TfDigest *digest, const char *tag)
{
  crypto_generichash_init (&digest->state, NULL, 0, HASH_BYTES);
  tf_digest_add_text (digest, tag);
}

void
tf_digest_add (TfDigest *digest, const void *bytes, gsize n)
{
  guint64 length = GUINT64_TO_LE ((guint64)n);
  crypto_generichash_update (&digest->state, (const guint8 *)&length, sizeof length);
  if (n > 0)
    crypto_generichash_update (&digest->state, bytes, n);
}

void
tf_digest_add_text (TfDigest *digest, const char *text)
{
  tf_digest_add (digest, text, strlen (text));
}

void
tf_digest_add_int (TfDigest *digest, gint64 value)
{
  gint64 bytes = GINT64_TO_LE (value);
  tf_digest_add (digest, &bytes, sizeof bytes);
}

char *
tf_digest_end (TfDigest *digest)
{
  guint8 hash[HASH_BYTES];
  crypto_generichash_final (&digest->state, hash, sizeof hash);
  return to_hex (hash, sizeof hash);
}

static void
add_column (TfDigest *digest, sqlite3_stmt *query, int k)
{
  int type = sqlite3_column_type (query, k);
  tf_digest_add_int (digest, type);
  if (type == SQLITE_INTEGER)
    tf_digest_add_int (digest, sqlite3_column_int64 (query, k));
  else if (type == SQLITE_FLOAT)
    {
      double value = sqlite3_column_double (query, k);
      tf_digest_add (digest, &value, sizeof value);
    }
  else if (type != SQLITE_NULL)
    {
      const void *bytes = sqlite3_column_blob (query, k);
      tf_digest_add (digest, bytes, (gsize)sqlite3_column_bytes (query, k));
    }
}

char *
tf_digest_row (sqlite3_stmt *query, const char *tag, int first, int last)
{
  TfDigest digest;
  tf_digest_begin (&digest, tag);
  for (int k = first; k <= last; k++)
    add_column (&digest, query, k);
  return tf_digest_end (&digest);
}

/* RFC 9562, section 5.7: 48 bits of milliseconds, the rest drawn by lot. The time helps an index;
 * nothing is decided by it. */
char *
tf_uuid7 (gint64 now_ms)
{
  guint8 id[UUID_BYTES];
  randombytes_buf (id, sizeof id);
  for (int k = 0; k < 6; k++)
    id[k] = (guint8)(now_ms >> (8 * (5 - k)));
  id[6] = (guint8)((id[6] & 0x0f) | 0x70);
  id[8] = (guint8)((id[8] & 0x3f) | 0x80);
  return to_hex (id, sizeof id);
}

char *
tf_content_id (const char *tag, ...)
{
  TfDigest digest;
  tf_digest_begin (&digest, tag);
  va_list ap;
  va_start (ap, tag);
  const char *text;
  while ((text = va_arg (ap, const char *)) != NULL)
    tf_digest_add_text (&digest, text);
  va_end (ap);
  return tf_digest_end (&digest);
}
