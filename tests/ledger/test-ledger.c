/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-ledger.h"

int
main (int argc, char **argv)
{
  g_test_init (&argc, &argv, NULL);
  add_acts_tests ();
  add_check_tests ();
  add_divides_tests ();
  add_scales_tests ();
  add_faults_tests ();
  add_file_tests ();
  add_follow_tests ();
  add_machine_tests ();
  add_shift_tests ();
  add_outside_tests ();
  add_studies_tests ();
  add_together_tests ();
  return g_test_run ();
}
