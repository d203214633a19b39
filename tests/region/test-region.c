/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "region-builder.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_tilt_tests ();
  add_bipole_tests ();
  return g_test_run ();
}
