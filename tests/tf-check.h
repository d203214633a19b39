/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Checkers for numbers. A NaN never passes where a number is expected, and the message has 17 digits. */

#include <glib.h>
#include <math.h>

/* |got - expected| <= tolerance; @what says in words which number this is. */
#define tf_check_near(what, got, expected, tolerance)                                              \
  G_STMT_START                                                                                     \
  {                                                                                                \
    double tf_got = (got), tf_expected = (expected), tf_tolerance = (tolerance);                   \
    if (!(fabs (tf_got - tf_expected) <= tf_tolerance))                                            \
      {                                                                                            \
        g_printerr ("# %s:%d: %s: got %.17g, expected %.17g within %g\n", __FILE__, __LINE__,      \
                    what, tf_got, tf_expected, tf_tolerance);                                      \
        g_test_fail ();                                                                            \
      }                                                                                            \
  }                                                                                                \
  G_STMT_END

/* As above for angles in degrees, on the circle. */
#define tf_check_angle(what, got, expected, tolerance)                                             \
  tf_check_near (what, (expected) + remainder ((got) - (expected), 360.0), expected, tolerance)

#define tf_check_between(what, got, low, high)                                                     \
  G_STMT_START                                                                                     \
  {                                                                                                \
    double tf_got = (got), tf_low = (low), tf_high = (high);                                       \
    if (!(tf_got >= tf_low && tf_got <= tf_high))                                                  \
      {                                                                                            \
        g_printerr ("# %s:%d: %s: got %.17g, expected %g to %g\n", __FILE__, __LINE__, what,       \
                    tf_got, tf_low, tf_high);                                                      \
        g_test_fail ();                                                                            \
      }                                                                                            \
  }                                                                                                \
  G_STMT_END

#define tf_check_nan(what, got)                                                                    \
  G_STMT_START                                                                                     \
  {                                                                                                \
    double tf_got = (got);                                                                         \
    if (!isnan (tf_got))                                                                           \
      {                                                                                            \
        g_printerr ("# %s:%d: %s: got %.17g, expected no number\n", __FILE__, __LINE__, what,      \
                    tf_got);                                                                       \
        g_test_fail ();                                                                            \
      }                                                                                            \
  }                                                                                                \
  G_STMT_END
