/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-header-private.h"
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

#include "tf-number.h"

/* Habits of single cards: text without quotes, bare nan, BLANK and fill values. */

/* 0: a number, a logical, empty or quoted; 1: bare text; 2: bare nan. */
static int
bare_kind (const TfHeader *header, guint k, const char *text)
{
  double number;
  if (tf_header_is_quoted (header, k) || *text == '\0' || strcmp (text, "T") == 0
      || strcmp (text, "F") == 0)
    return 0;
  if (g_ascii_strcasecmp (text, "nan") == 0 || g_ascii_strcasecmp (text, "-nan") == 0)
    return 2;
  g_autofree char *plain = g_strdelimit (g_strdup (text), "dD", 'E');
  return tf_number_read (plain, &number) || *text == '(' ? 0 : 1;
}

gboolean
tf_dialect_bare_text (TfHeader *header, TfNotes *repairs)
{
  int found = 0;
  g_autofree char *first = NULL;
  for (guint k = 0; k < tf_header_get_n (header); k++)
    {
      const char *keyword = tf_header_get_keyword (header, k),
                 *text = tf_header_get (header, keyword);
      if (bare_kind (header, k, text) != 1)
        continue;
      if (found++ == 0)
        first = g_strdup (keyword);
      g_autofree char *kept = g_strdup (text);
      tf_header_set (header, keyword, kept);
    }
  if (found > 0)
    tf_notes_add (repairs, "text-without-quotes", "si", first, found);
  return found > 0;
}

gboolean
tf_dialect_bare_nan (TfHeader *header, TfNotes *repairs)
{
  g_autoptr (GString) names = g_string_new (NULL);
  for (guint k = tf_header_get_n (header); k-- > 0;)
    {
      g_autofree char *keyword = g_strdup (tf_header_get_keyword (header, k));
      const char *text = tf_header_get (header, keyword);
      if (bare_kind (header, k, text) != 2)
        continue;
      g_string_prepend (names, names->len > 0 ? ", " : "");
      g_string_prepend (names, keyword);
      tf_header_remove (header, keyword);
      k = MIN (k, tf_header_get_n (header));
    }
  if (names->len > 0)
    tf_notes_add (repairs, "bare-nan", "s", names->str);
  return names->len > 0;
}

gboolean
tf_dialect_blank_with_floats (TfHeader *header, TfNotes *repairs)
{
  if (!(tf_header_number (header, "BITPIX") < 0) || !tf_header_has (header, "BLANK"))
    return FALSE;
  tf_notes_add (repairs, "blank-with-floats", "si", tf_header_get (header, "BLANK"),
                (int)tf_header_int (header, "BITPIX", 0));
  tf_header_remove (header, "BLANK");
  return TRUE;
}

/* MISSING (or MISSVAL, FILLVAL, _FILLVAL) names a number that stands for "no value". */
gboolean
tf_dialect_fill_keyword (TfHeader *header, TfNotes *repairs)
{
  static const char *const words[] = { "MISSING", "MISSVAL", "FILLVAL", "BADVALUE" };
  for (guint k = 0; k < G_N_ELEMENTS (words); k++)
    {
      double fill = tf_header_number (header, words[k]);
      if (isnan (fill))
        continue;
      tf_notes_add (repairs, "fill-keyword", "sd", words[k], fill);
      tf_header_set_number (header, "TFFILL", fill);
      return TRUE;
    }
  return FALSE;
}
