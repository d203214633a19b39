/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-frame.h"

#include <string.h>

#include "tf-check.h"

static TfHeader *
from_cards (const char *const *cards)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; cards[k] != NULL; k++)
    g_string_append_printf (text, "%-80s", cards[k]);
  TfHeader *header = tf_header_read (text->str, (gssize)text->len);
  g_string_free (text, TRUE);
  return header;
}

static void
test_values (void)
{
  static const char *const cards[] = {
    "SIMPLE  =                    T / a comment",
    "NAXIS1  =                 1024",
    "CDELT1  =           1.98600D0 / double",
    "OBJECT  = 'the ''quiet'' Sun  ' / quoted",
    "DATE-OBS= 2011/04/01 / bare, with slashes",
    "HGLN_OBS= nan",
    "EMPTY   =                      / nothing",
    "COMMENT = not kept",
    "HISTORY what happened",
    "lower   = 3",
    "END",
    "AFTER   = 1",
    NULL,
  };
  g_autoptr (TfHeader) h = from_cards (cards);
  g_assert_cmpstr (tf_header_get (h, "SIMPLE"), ==, "T");
  g_assert_cmpint (tf_header_int (h, "NAXIS1", -1), ==, 1024);
  tf_check_near ("a D exponent", tf_header_number (h, "CDELT1"), 1.986, 1e-12);
  g_assert_cmpstr (tf_header_get (h, "OBJECT"), ==, "the 'quiet' Sun");
  g_assert_cmpstr (tf_header_get (h, "DATE-OBS"), ==, "2011/04/01");
  g_assert_cmpstr (tf_header_get (h, "HGLN_OBS"), ==, "nan");
  tf_check_nan ("bare nan", tf_header_number (h, "HGLN_OBS"));
  g_assert_cmpstr (tf_header_get (h, "EMPTY"), ==, "");
  g_assert_false (tf_header_has (h, "COMMENT"));
  g_assert_cmpint (tf_header_int (h, "LOWER", -1), ==, 3);
  g_assert_false (tf_header_has (h, "AFTER"));
  tf_check_nan ("an absent keyword", tf_header_number (h, "NOT"));
  g_assert_cmpint (tf_header_int (h, "OBJECT", -7), ==, -7);
}

static void
test_continued (void)
{
  static const char *const cards[]
      = { "LONGKEY = 'one &'", "CONTINUE  'two&'", "CONTINUE  '' / end", "NEXT    = 5", NULL };
  g_autoptr (TfHeader) h = from_cards (cards);
  g_assert_cmpstr (tf_header_get (h, "LONGKEY"), ==, "one two");
  g_assert_cmpint (tf_header_int (h, "NEXT", -1), ==, 5);
}

static void
test_lines (void)
{
  g_autoptr (TfHeader) h
      = tf_header_read ("CRPIX1  = 5.5\r\nOBJECT=  'x'\nnot a card\n\nEND\nLATE = 1\n", -1);
  tf_check_near ("a line", tf_header_number (h, "CRPIX1"), 5.5, 0);
  g_assert_cmpstr (tf_header_get (h, "OBJECT"), ==, "x");
  g_assert_cmpuint (tf_header_get_n (h), ==, 2);
}

static void
test_editing (void)
{
  g_autoptr (TfHeader) h = tf_header_new ();
  tf_header_set (h, "TEXT", "it's");
  tf_header_set_number (h, "NUMBER", 0.1);
  tf_header_set (h, "YES", "T");
  tf_header_set (h, "TEXT", "other");
  g_autoptr (TfHeader) copy = tf_header_copy (h);
  tf_header_remove (h, "NUMBER");
  g_assert_cmpuint (tf_header_get_n (h), ==, 2);
  guint n = 0;
  g_autofree char *cards = tf_header_dup_cards (copy, &n);
  g_assert_cmpuint (n, ==, 4);
  g_assert_cmpuint (strlen (cards), ==, 4 * 80);
  g_autoptr (TfHeader) again = tf_header_read (cards, -1);
  g_assert_cmpstr (tf_header_get (again, "TEXT"), ==, "other");
  g_assert_cmpstr (tf_header_get (again, "YES"), ==, "T");
  tf_check_near ("a number", tf_header_number (again, "NUMBER"), 0.1, 0);
}

/* Bytes of every kind: no crash, and what is read is printable. */
static void
test_rubbish (void)
{
  g_autoptr (GRand) chance = g_rand_new_with_seed (4);
  for (guint turn = 0; turn < 200; turn++)
    {
      char text[1000];
      for (guint k = 0; k < sizeof text; k++)
        text[k] = g_rand_boolean (chance) ? "='/& \nEND"[g_rand_int_range (chance, 0, 9)]
                                          : (char)g_rand_int_range (chance, 0, 256);
      g_autoptr (TfHeader) h = tf_header_read (text, sizeof text);
      for (guint k = 0; k < tf_header_get_n (h); k++)
        g_assert_true (g_utf8_validate (tf_header_get (h, tf_header_get_keyword (h, k)), -1, NULL));
      g_autofree char *cards = tf_header_dup_cards (h, NULL);
      g_assert_cmpuint (strlen (cards) % 80, ==, 0);
    }
}

void
add_header_tests (void)
{
  g_test_add_func ("/frame/header/cards-become-values", test_values);
  g_test_add_func ("/frame/header/continued-strings-are-joined", test_continued);
  g_test_add_func ("/frame/header/lines-of-text-are-read-too", test_lines);
  g_test_add_func ("/frame/header/set-remove-copy-and-cards", test_editing);
  g_test_add_func ("/frame/header/rubbish-is-survived", test_rubbish);
}
