/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "test-laws.h"

#include <string.h>

#include "tf-check.h"
#include "tf-held.h"

/* One letter a mark: k keeps, b breaks, n cannot say; capitals at mu 0.4, which are not asked. */
static const struct
{
  const char *marks;
  char pick;
  guint held, of;
  gboolean changes;
} passages[] = {
  { "kkkkkkkkkk", 'k', 10, 10, FALSE }, { "kkkkkkkkbb", 'k', 8, 10, FALSE },
  { "kkkkkkkbbb", 'k', 7, 10, TRUE },   { "kkkkkkkkbb", 'b', 2, 10, TRUE },
  { "bbbbknnn", 'b', 4, 5, FALSE },     { "kkkkBBBB", 'k', 4, 4, FALSE },
  { "kkbb", 'n', 0, 4, FALSE },         { "K", 'k', 0, 0, FALSE },
};

static TfVerdict
verdict_of (char letter)
{
  TfVerdict verdict = { .kind = letter == 'k' || letter == 'K'   ? TF_VERDICT_KEEPS
                                : letter == 'b' || letter == 'B' ? TF_VERDICT_BREAKS
                                                                 : TF_VERDICT_CANNOT_SAY };
  verdict.reason = verdict.kind == TF_VERDICT_CANNOT_SAY ? "hale-leader-unsure" : NULL;
  return verdict;
}

static void
test_held (void)
{
  g_autoptr (TfSample) marks = tf_sample_new ();
  g_autoptr (TfSample) picks = tf_sample_new ();
  g_autoptr (GArray) verdicts = g_array_new (FALSE, FALSE, sizeof (TfVerdict));
  TfVerdict chosen[G_N_ELEMENTS (passages)];
  for (guint p = 0; p < G_N_ELEMENTS (passages); p++)
    {
      TfSampleRow row = test_laws_row (15.0, -1);
      row.passage = p + 1;
      tf_sample_add (picks, &row);
      chosen[p] = verdict_of (passages[p].pick);
    }
  for (guint place = 0; place < 10; place++) /* marks of different passages in turn */
    for (guint p = 0; p < G_N_ELEMENTS (passages); p++)
      {
        if (place >= strlen (passages[p].marks))
          continue;
        char letter = passages[p].marks[place];
        TfSampleRow row = test_laws_row (15.0, -1);
        TfVerdict verdict = verdict_of (letter);
        row.passage = p + 1;
        row.mu = g_ascii_isupper (letter) ? 0.4 : 0.9;
        tf_sample_add (marks, &row);
        g_array_append_val (verdicts, verdict);
      }
  g_autofree TfHeld *held = tf_held (marks, (TfVerdict *)(void *)verdicts->data, picks, chosen);
  for (guint p = 0; p < G_N_ELEMENTS (passages); p++)
    {
      g_assert_cmpuint (held[p].held, ==, passages[p].held);
      g_assert_cmpuint (held[p].of, ==, passages[p].of);
      g_assert_cmpint (g_strcmp0 (chosen[p].reason, "hale-changes") == 0, ==, passages[p].changes);
      if (passages[p].changes)
        g_assert_cmpint (chosen[p].kind, ==, TF_VERDICT_CANNOT_SAY);
    }
}

void
test_laws_add_held (void)
{
  g_test_add_func ("/laws/held/four-of-five-marks-must-agree", test_held);
}
