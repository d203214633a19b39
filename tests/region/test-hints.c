/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-hints.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_hint_built_tests ();
  add_hint_real_tests ();
  add_hint_simulated_tests ();
  return g_test_run ();
}
