/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-sun.h"

#include <glib.h>

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_time_tests ();
  add_observer_tests ();
  add_geometry_tests ();
  add_outline_tests ();
  add_outline_combine_tests ();
  return g_test_run ();
}
