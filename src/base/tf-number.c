/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-number.h"

#include <errno.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

char *
tf_number_dup (double value)
{
  if (isnan (value))
    return g_strdup ("nan");
  if (isinf (value))
    return g_strdup (value > 0 ? "inf" : "-inf");
  char text[G_ASCII_DTOSTR_BUF_SIZE];
  for (int digits = 15; digits <= 17; digits++)
    {
      char form[8];
      g_snprintf (form, sizeof form, "%%.%dg", digits);
      g_ascii_formatd (text, sizeof text, form, value);
      double back = g_ascii_strtod (text, NULL);
      if (!(back < value) && !(back > value))
        break;
    }
  return g_strdup (text);
}

static gboolean
form_is_good (const char *form)
{
  gsize n = strlen (form);
  return n >= 1 && n < 16 && strspn (form, "+ #0123456789.") == n - 1 && strchr ("feg", form[n - 1]) != NULL;
}

char *
tf_number_dup_form (double value, const char *form, gboolean local)
{
  g_return_val_if_fail (form != NULL, NULL);
  if (*form == '\0' || !form_is_good (form))
    return tf_number_dup (value);
  char full[20], text[400];
  g_snprintf (full, sizeof full, "%%%s", form);
  g_ascii_formatd (text, sizeof text, full, value);
  if (!local)
    return g_strdup (text);
  char point[8];
  snprintf (point, sizeof point, "%.1f", 0.5); /* the locale's point stands between 0 and 5 */
  point[strlen (point) - 1] = '\0';
  g_auto (GStrv) parts = g_strsplit (text, ".", 2);
  return g_strjoinv (point + 1, parts);
}

gboolean
tf_number_read (const char *text, double *value)
{
  g_return_val_if_fail (value != NULL, FALSE);
  if (text == NULL)
    return FALSE;
  g_autofree char *bare = g_strstrip (g_strdup (text));
  if (*bare == '\0' || strchr ("+-.0123456789", *bare) == NULL || strpbrk (bare, "xXnN") != NULL)
    return FALSE;
  char *end = NULL;
  errno = 0;
  double number = g_ascii_strtod (bare, &end);
  if (*end != '\0' || end == bare || !isfinite (number))
    return FALSE;
  *value = number;
  return TRUE;
}

gboolean
tf_number_read_int (const char *text, gint64 *value)
{
  g_return_val_if_fail (value != NULL, FALSE);
  if (text == NULL)
    return FALSE;
  g_autofree char *bare = g_strstrip (g_strdup (text));
  return g_ascii_string_to_signed (*bare == '+' ? bare + 1 : bare, 10, G_MININT64, G_MAXINT64, value, NULL);
}
