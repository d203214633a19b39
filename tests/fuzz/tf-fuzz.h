/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the fuzz programs share: real files as corpus, and seeded mutations. */

#include <glib.h>
#include <stdlib.h>
#include <string.h>

static inline int
fuzz_compare_names (gconstpointer a, gconstpointer b)
{
  return strcmp (*(const char *const *)a, *(const char *const *)b);
}

/** fuzz_read_folder: (transfer full): GBytes of every file of a folder of the real data; empty
 * where it is absent. */
static inline GPtrArray *
fuzz_read_folder (const char *name)
{
  GPtrArray *found = g_ptr_array_new_with_free_func ((GDestroyNotify)g_bytes_unref);
  const char *set = g_getenv ("TF_SHARED_DATA");
  g_autofree char *top = set != NULL
                             ? g_strdup (set)
                             : g_build_filename (TF_SOURCE_ROOT, "..", "shared", "data", NULL);
  g_autofree char *folder = g_build_filename (top, name, NULL);
  g_autoptr (GDir) dir = g_dir_open (folder, 0, NULL);
  g_autoptr (GPtrArray) names = g_ptr_array_new_with_free_func (g_free);
  for (const char *file; dir != NULL && (file = g_dir_read_name (dir)) != NULL;)
    g_ptr_array_add (names, g_build_filename (folder, file, NULL));
  g_ptr_array_sort (names, fuzz_compare_names);
  for (guint k = 0; k < names->len; k++)
    {
      char *text = NULL;
      gsize n = 0;
      if (g_file_get_contents (names->pdata[k], &text, &n, NULL))
        g_ptr_array_add (found, g_bytes_new_take (text, n));
    }
  return found;
}

/** fuzz_flip: a few bytes changed anywhere. */
static inline void
fuzz_flip (GByteArray *bytes, GRand *chance, guint most)
{
  for (gint k = g_rand_int_range (chance, 1, (gint)most + 1); k > 0 && bytes->len > 0; k--)
    bytes->data[g_rand_int_range (chance, 0, (gint)bytes->len)]
        = (guint8)g_rand_int_range (chance, 0, 256);
}

/** fuzz_mutate_text: lines dropped, doubled and swapped, numbers replaced by awkward ones, bytes
 * changed, an end cut off. */
static inline GByteArray *
fuzz_mutate_text (GBytes *source, GRand *chance)
{
  static const char *const awkward[] = {
    "0",     "-1", "1E308", "-1E308", "nan",  "inf", "1E-320", "99999999999999999999",  "''",
    "'N/A'", "T",  "-0.0",  "360",    "90.0", "1e9", "2.5e-7", "'2013-02-30T25:61:61'", "'\xc3\xa9'"
  };
  gsize n = 0;
  const char *text = g_bytes_get_data (source, &n);
  g_autofree char *copy = g_strndup (text, n);
  g_auto (GStrv) lines = g_strsplit (copy, "\n", -1);
  guint count = g_strv_length (lines);
  GByteArray *out = g_byte_array_new ();
  gint odds = g_rand_int_range (chance, 4, 40);
  for (guint k = 0; k < count; k++)
    {
      gint what = g_rand_int_range (chance, 0, odds * 3);
      const char *line = what == 1 ? lines[g_rand_int_range (chance, 0, (gint)count)] : lines[k],
                 *equals = strchr (line, '=');
      g_autofree char *changed = NULL;
      if (what == 0)
        continue;
      if ((what == 2 || what == 3) && equals != NULL)
        line = changed
            = g_strdup_printf ("%.*s= %s", (int)(equals - line), line,
                               awkward[g_rand_int_range (chance, 0, G_N_ELEMENTS (awkward))]);
      for (int turn = what == 4 ? 2 : 1; turn > 0; turn--)
        {
          g_byte_array_append (out, (const guint8 *)line, (guint)strlen (line));
          g_byte_array_append (out, (const guint8 *)"\n", 1);
        }
    }
  if (g_rand_int_range (chance, 0, 3) == 0)
    fuzz_flip (out, chance, 12);
  if (g_rand_int_range (chance, 0, 10) == 0 && out->len > 0)
    g_byte_array_set_size (out, (guint)g_rand_int_range (chance, 0, (gint)out->len));
  return out;
}

/** fuzz_mutate_cells: what stands between some of @marks replaced by awkward values; sometimes bytes
 * and an end as well. */
static inline GByteArray *
fuzz_mutate_cells (GBytes *source, GRand *chance, const char *marks)
{
  static const char *const awkward[] = {
    "",    "0",    "-1",   "1e308", "-1e308", "nan", "inf", "1e-320", "99999999999999999999", "-0.0", "361",
    "-91", "true", "null", "\"",    "[]",     "{}",  "\"a\"", "2013-02-30T25:61:61Z", "\xc3\xa9", "\xff", "outside", "hint",
  };
  gsize n = 0;
  const char *text = g_bytes_get_data (source, &n);
  GByteArray *out = g_byte_array_new ();
  double odds = g_rand_double_range (chance, 0, 1);
  odds = odds * odds * odds * 0.2;
  for (gsize k = 0; k < n;)
    {
      gsize end = k;
      while (end < n && strchr (marks, text[end]) == NULL)
        end++;
      const char *with = g_rand_double (chance) < odds
                             ? awkward[g_rand_int_range (chance, 0, G_N_ELEMENTS (awkward))]
                             : NULL;
      g_byte_array_append (out, (const guint8 *)(with != NULL ? with : text + k),
                           with != NULL ? (guint)strlen (with) : (guint)(end - k));
      if (end < n)
        g_byte_array_append (out, (const guint8 *)text + end, 1);
      k = end + 1;
    }
  if (g_rand_int_range (chance, 0, 4) == 0)
    fuzz_flip (out, chance, 12);
  if (g_rand_int_range (chance, 0, 10) == 0 && out->len > 0)
    g_byte_array_set_size (out, (guint)g_rand_int_range (chance, 0, (gint)out->len));
  return out;
}

/** fuzz_must: ends the program when something is not as it must be. */
static inline void
fuzz_must (gboolean good, const char *what)
{
  if (good)
    return;
  g_print ("not ok - %s\n", what);
  abort ();
}

/** fuzz_must_say: an error is one sentence of UTF-8. */
static inline void
fuzz_must_say (const GError *error)
{
  fuzz_must (error != NULL && *error->message != '\0', "a refusal says why");
  fuzz_must (g_utf8_validate (error->message, -1, NULL), "its words are text");
  fuzz_must (strchr (error->message, '\n') == NULL, "it is one line");
}
