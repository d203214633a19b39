/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-header.h"
#include "tf-header-private.h"

#include <math.h>
#include <string.h>

#include "tf-number.h"

enum
{
  CARD = 80,
  KEYWORD = 8,
  MAX_CARDS = 100000, /* a header of more is damage */
};

typedef struct
{
  char keyword[KEYWORD + 1];
  char *text;
  gboolean quoted;
} Card;

struct _TfHeader
{
  GArray *cards; /* of Card */
};

static void
card_clear (gpointer data)
{
  g_free (((Card *)data)->text);
}

TfHeader *
tf_header_new (void)
{
  TfHeader *header = g_new (TfHeader, 1);
  header->cards = g_array_new (FALSE, FALSE, sizeof (Card));
  g_array_set_clear_func (header->cards, card_clear);
  return header;
}

void
tf_header_free (TfHeader *header)
{
  if (header == NULL)
    return;
  g_array_unref (header->cards);
  g_free (header);
}

static Card *
card_at (const TfHeader *header, guint k)
{
  return &g_array_index (header->cards, Card, k);
}

static void
append (TfHeader *header, const char *keyword, char *take_text, gboolean quoted)
{
  Card card = { .text = take_text, .quoted = quoted };
  g_strlcpy (card.keyword, keyword, sizeof card.keyword);
  g_array_append_val (header->cards, card);
}

TfHeader *
tf_header_copy (const TfHeader *header)
{
  TfHeader *copy = tf_header_new ();
  for (guint k = 0; k < header->cards->len; k++)
    {
      const Card *card = card_at (header, k);
      append (copy, card->keyword, g_strdup (card->text), card->quoted);
    }
  return copy;
}

/* -- reading --------------------------------------------------------------------------------- */

/* The string after the opening quote at @s; a doubled quote is one, a missing end is the end of
 * the line. */
static char *
read_quoted (const char *s)
{
  GString *text = g_string_new (NULL);
  for (; *s != '\0'; s++)
    {
      if (*s == '\'' && s[1] != '\'')
        break;
      if (*s == '\'')
        s++;
      g_string_append_c (text, *s);
    }
  return g_strstrip (g_string_free (text, FALSE));
}

/* A value without quotes ends at the comment's slash; a slash between two digits is part of a
 * date. */
static char *
read_bare (const char *s)
{
  const char *end = s;
  for (; *end != '\0'; end++)
    if (*end == '/' && !(end > s && g_ascii_isdigit (end[-1]) && g_ascii_isdigit (end[1])))
      break;
  return g_strstrip (g_strndup (s, (gsize)(end - s)));
}

/* CONTINUE joins to a string that ends in '&'. */
static void
join (TfHeader *header, const char *line)
{
  Card *last = header->cards->len > 0 ? card_at (header, header->cards->len - 1) : NULL;
  const char *quote = strchr (line, '\'');
  if (last == NULL || !last->quoted || !g_str_has_suffix (last->text, "&") || quote == NULL)
    return;
  last->text[strlen (last->text) - 1] = '\0';
  g_autofree char *more = read_quoted (quote + 1);
  char *whole = g_strconcat (last->text, more, NULL);
  g_free (last->text);
  last->text = whole;
}

/* The keyword before the '=' at most eight places in: FALSE when the line is not a card with a
 * value. */
static gboolean
read_keyword (const char *line, char keyword[KEYWORD + 1], const char **value)
{
  const char *equals = memchr (line, '=', MIN (strlen (line), KEYWORD + 1));
  if (equals == NULL)
    return FALSE;
  guint n = 0;
  for (const char *s = line; s < equals && *s != ' '; s++)
    {
      if (!g_ascii_isalnum (*s) && *s != '-' && *s != '_')
        return FALSE;
      keyword[n++] = g_ascii_toupper (*s);
    }
  for (const char *s = line + n; s < equals; s++)
    if (*s != ' ')
      return FALSE;
  keyword[n] = '\0';
  *value = equals + 1;
  return n > 0;
}

/* FALSE at END. */
static gboolean
read_line (TfHeader *header, const char *line)
{
  char keyword[KEYWORD + 1];
  const char *value;
  if (g_str_has_prefix (line, "END") && strspn (line + 3, " ") == strlen (line + 3))
    return FALSE;
  if (g_str_has_prefix (line, "CONTINUE"))
    join (header, line);
  else if (read_keyword (line, keyword, &value) && g_strcmp0 (keyword, "HISTORY") != 0
           && g_strcmp0 (keyword, "COMMENT") != 0 && header->cards->len < MAX_CARDS)
    {
      value += strspn (value, " ");
      if (*value == '\'')
        append (header, keyword, read_quoted (value + 1), TRUE);
      else
        append (header, keyword, read_bare (value), FALSE);
    }
  return TRUE;
}

/* A line of @n bytes as text: bytes that are not printable ASCII become '?'. */
static void
copy_line (GString *line, const char *text, gsize n)
{
  g_string_truncate (line, 0);
  for (gsize k = 0; k < n; k++)
    g_string_append_c (line, g_ascii_isprint (text[k]) ? text[k] : text[k] == '\t' ? ' ' : '?');
}

TfHeader *
tf_header_read (const char *text, gssize n_bytes)
{
  TfHeader *header = tf_header_new ();
  gsize n = text == NULL ? 0 : n_bytes >= 0 ? (gsize)n_bytes : strlen (text);
  gboolean lines = n > 0 && (memchr (text, '\n', n) != NULL || memchr (text, '\r', n) != NULL);
  g_autoptr (GString) line = g_string_new (NULL);
  for (gsize at = 0; at < n;)
    {
      gsize length = MIN (CARD, n - at), step = length;
      if (lines)
        {
          for (length = 0;
               at + length < n && text[at + length] != '\n' && text[at + length] != '\r';)
            length++;
          step = length + 1;
        }
      copy_line (line, text + at, length);
      if (!read_line (header, line->str))
        break;
      at += step;
    }
  return header;
}

/* -- asking and setting ---------------------------------------------------------------------- */

static int
find (const TfHeader *header, const char *keyword)
{
  for (guint k = 0; k < header->cards->len; k++)
    if (strcmp (card_at (header, k)->keyword, keyword) == 0)
      return (int)k;
  return -1;
}

gboolean
tf_header_has (const TfHeader *header, const char *keyword)
{
  return find (header, keyword) >= 0;
}

const char *
tf_header_get (const TfHeader *header, const char *keyword)
{
  int k = find (header, keyword);
  return k >= 0 ? card_at (header, (guint)k)->text : NULL;
}

double
tf_header_number (const TfHeader *header, const char *keyword)
{
  const char *text = tf_header_get (header, keyword);
  double value;
  if (text == NULL)
    return NAN;
  if (strpbrk (text, "dD") == NULL)
    return tf_number_read (text, &value) ? value : NAN;
  g_autofree char *plain = g_strdelimit (g_strdup (text), "dD", 'E');
  return tf_number_read (plain, &value) ? value : NAN;
}

gint64
tf_header_int (const TfHeader *header, const char *keyword, gint64 fallback)
{
  const char *text = tf_header_get (header, keyword);
  gint64 value;
  if (text != NULL && tf_number_read_int (text, &value))
    return value;
  double number = tf_header_number (header, keyword);
  return fabs (number) < 9e15 && fabs (number - rint (number)) < 1e-9 ? (gint64)rint (number)
                                                                      : fallback;
}

gboolean
tf_header_is_quoted (const TfHeader *header, guint k)
{
  return card_at (header, k)->quoted;
}

static void
put (TfHeader *header, const char *keyword, char *take_text, gboolean quoted)
{
  int k = find (header, keyword);
  if (k < 0)
    {
      append (header, keyword, take_text, quoted);
      return;
    }
  Card *card = card_at (header, (guint)k);
  g_free (card->text);
  card->text = take_text;
  card->quoted = quoted;
}

void
tf_header_set (TfHeader *header, const char *keyword, const char *text)
{
  g_return_if_fail (keyword != NULL && strlen (keyword) <= KEYWORD && text != NULL);
  gboolean logical = strcmp (text, "T") == 0 || strcmp (text, "F") == 0;
  put (header, keyword, g_strdup (text), !logical);
}

void
tf_header_set_number (TfHeader *header, const char *keyword, double value)
{
  g_return_if_fail (keyword != NULL && strlen (keyword) <= KEYWORD);
  char *text = tf_number_dup (value);
  /* FITS standard 4.0, 4.2.4: an exponent's letter is upper case */
  if (isfinite (value))
    g_strdelimit (text, "e", 'E');
  put (header, keyword, text, FALSE);
}

void
tf_header_remove (TfHeader *header, const char *keyword)
{
  for (int k = find (header, keyword); k >= 0; k = find (header, keyword))
    g_array_remove_index (header->cards, (guint)k);
}

guint
tf_header_get_n (const TfHeader *header)
{
  return header->cards->len;
}

const char *
tf_header_get_keyword (const TfHeader *header, guint k)
{
  return k < header->cards->len ? card_at (header, k)->keyword : NULL;
}

/* -- cards ----------------------------------------------------------------------------------- */

void
tf_header_format_card (const TfHeader *header, guint k, char card[CARD + 1])
{
  const Card *c = card_at (header, k);
  double number;
  gboolean logical = strcmp (c->text, "T") == 0 || strcmp (c->text, "F") == 0;
  g_autofree char *value = NULL;
  if (!c->quoted && (logical || tf_number_read (c->text, &number)))
    value = g_strdup_printf ("%20s", c->text);
  else
    {
      g_auto (GStrv) parts = g_strsplit (c->text, "'", -1);
      g_autofree char *doubled = g_strjoinv ("''", parts);
      gsize room = CARD - KEYWORD - 4;
      if (strlen (doubled) > room)
        doubled[room - (doubled[room - 1] == '\'' ? 1 : 0)] = '\0';
      value = g_strdup_printf ("'%-8s'", doubled);
    }
  g_autofree char *whole = g_strdup_printf ("%-8s= %s", c->keyword, value);
  g_snprintf (card, CARD + 1, "%-80.80s", whole);
}

char *
tf_header_dup_cards (const TfHeader *header, guint *n_cards)
{
  GString *text = g_string_new (NULL);
  char card[CARD + 1];
  for (guint k = 0; k < header->cards->len; k++)
    {
      tf_header_format_card (header, k, card);
      g_string_append (text, card);
    }
  g_string_append_printf (text, "%-80s", "END");
  if (n_cards != NULL)
    *n_cards = header->cards->len + 1;
  return g_string_free (text, FALSE);
}
