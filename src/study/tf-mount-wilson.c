/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-mount-wilson.h"

#include <string.h>

enum
{
  ALPHA = 1,
  BETA = 2,
  GAMMA = 4,
  DELTA = 8,
};

static const struct
{
  const char *letter, *name;
  guint flag;
} letters[] = {
  { "\xce\xb1", "alpha", ALPHA },
  { "\xce\xb2", "beta", BETA },
  { "\xce\xb3", "gamma", GAMMA },
  { "\xce\xb4", "delta", DELTA },
};

/* Which letters @text has; 0 when there is anything else in it. */
static guint
read_letters (const char *text)
{
  guint found = 0;
  if (text == NULL || !g_utf8_validate (text, -1, NULL))
    return 0;
  g_autofree char *lower = g_utf8_strdown (text, -1);
  for (const char *at = lower; *at != '\0';)
    {
      const char *before = at;
      for (guint k = 0; k < G_N_ELEMENTS (letters) && at == before; k++)
        {
          const char *form
              = g_str_has_prefix (at, letters[k].letter) ? letters[k].letter : letters[k].name;
          if (!g_str_has_prefix (at, form))
            continue;
          found |= letters[k].flag;
          at += strlen (form);
        }
      if (at == before && strchr ("- _/", *at) != NULL)
        at++;
      if (at == before)
        return 0;
    }
  return found;
}

static char *
join_names (guint found)
{
  GString *names = g_string_new (NULL);
  for (guint k = 0; k < G_N_ELEMENTS (letters); k++)
    if ((found & letters[k].flag) != 0)
      g_string_append_printf (names, "%s%s", names->len > 0 ? "-" : "", letters[k].name);
  return g_string_free (names, FALSE);
}

char *
tf_mount_wilson_dup_ascii (const char *text)
{
  guint found = read_letters (text);
  if (found != 0)
    return join_names (found);
  if (text == NULL || !g_utf8_validate (text, -1, NULL))
    return g_strdup ("");
  return g_str_to_ascii (text, "C");
}

char *
tf_mount_wilson_dup_greek (const char *text)
{
  guint found = read_letters (text);
  if (found == 0)
    return g_strdup (text);
  GString *greek = g_string_new (NULL);
  for (guint k = 0; k < G_N_ELEMENTS (letters); k++)
    if ((found & letters[k].flag) != 0)
      g_string_append (greek, letters[k].letter);
  return g_string_free (greek, FALSE);
}

char *
tf_mount_wilson_dup_base (const char *text)
{
  return join_names (read_letters (text) & ~(guint)DELTA);
}

int
tf_mount_wilson_delta (const char *text)
{
  guint found = read_letters (text);
  return found == 0 ? -1 : (found & DELTA) != 0;
}
