/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-passage.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_links_tests ();
  add_ends_tests ();
  add_sky_tests ();
  return g_test_run ();
}
