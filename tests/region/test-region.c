/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "inversion-builder.h"
#include "region-builder.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_tilt_tests ();
  add_bipole_tests ();
  add_inversion_tests ();
  add_complexity_tests ();
  add_invariant_tests ();
  add_flag_tests ();
  add_noise_tests ();
  add_outline_tests ();
  add_real_tests ();
  add_split_tests ();
  add_potential_tests ();
  add_companion_tests ();
  return g_test_run ();
}
