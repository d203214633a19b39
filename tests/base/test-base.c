/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-base.h"

#include <glib.h>

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_text_tests (); /* first: one of them sets LOCPATH, which must not be done beside threads */
  add_notes_tests ();
  add_options_tests ();
  add_bands_tests ();
  return g_test_run ();
}
