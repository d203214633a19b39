/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-live.h"

#include <string.h>

#include "tf-study-private.h"
#include "tf-tally.h"

struct _TfStudyLive
{
  const TfFindings *findings;
  TfTally *tally;
  TfDivides *divides; /* as the tally has them */
  double level;
  GArray *hale, *joy;
};

static void
read_tally (TfStudyLive *live)
{
  g_clear_pointer (&live->hale, g_array_unref);
  live->hale = tf_tally_hale (live->tally, live->level);
  TfJoyFit fit = tf_tally_joy (live->tally);
  g_array_set_size (live->joy, 0);
  g_array_append_val (live->joy, fit);
}

/* The verdicts as they stand; where a passage would change if its cycle were sure, too: a divide may
 * make it so. (transfer full) */
static TfVerdict *
dup_verdicts (const TfStudy *study, const TfFindings *findings)
{
  guint n = tf_sample_get_n (findings->sample);
  TfVerdict *verdicts = g_memdup2 (findings->verdicts, (n + 1) * sizeof *verdicts);
  if (findings->held == NULL || findings->sampling.passages == tf_sample_get_n (findings->every))
    return verdicts;
  TfStudy sure = *study;
  sure.divide.by_date_only = TRUE;
  g_autofree TfVerdict *every = tf_study_judge (&sure, findings->every, 0.0),
                       *picks = tf_study_judge (&sure, findings->sample, 0.0);
  g_free (tf_held (findings->every, every, findings->sample, picks));
  for (guint k = 0; k < n; k++)
    if (g_strcmp0 (picks[k].reason, "hale-changes") == 0)
      {
        verdicts[k].kind = TF_VERDICT_CANNOT_SAY;
        verdicts[k].reason = picks[k].reason;
      }
  return verdicts;
}

TfStudyLive *
tf_study_live_new (const TfStudy *study, const TfFindings *findings)
{
  g_return_val_if_fail (study != NULL && findings != NULL, NULL);
  if (!tf_tally_offers (&study->joy))
    return NULL;
  TfStudyLive *live = g_new0 (TfStudyLive, 1);
  live->findings = findings;
  live->divides = tf_study_dup_divides (study);
  live->level = study->hale.level;
  live->joy = g_array_new (FALSE, FALSE, sizeof (TfJoyFit));
  g_autofree TfVerdict *verdicts = dup_verdicts (study, findings);
  live->tally = tf_tally_new (findings->sample, verdicts, live->divides, &study->verdict,
                              &study->joy);
  read_tally (live);
  return live;
}

void
tf_study_live_free (TfStudyLive *live)
{
  if (live == NULL)
    return;
  tf_tally_free (live->tally);
  tf_divides_unref (live->divides);
  g_array_unref (live->hale);
  g_array_unref (live->joy);
  g_free (live);
}

static gboolean
is_same (const TfDivides *a, const TfDivides *b, int cycle, int hemisphere)
{
  const double *times[2], *lats[2];
  guint n = tf_divides_get_moved (a, cycle, hemisphere, &times[0], &lats[0]);
  return n == tf_divides_get_moved (b, cycle, hemisphere, &times[1], &lats[1])
         && (n == 0
             || (memcmp (times[0], times[1], n * sizeof (double)) == 0
                 && memcmp (lats[0], lats[1], n * sizeof (double)) == 0));
}

guint
tf_study_live_move (TfStudyLive *live, const TfStudy *study)
{
  g_return_val_if_fail (live != NULL && study != NULL, 0);
  g_autoptr (TfDivides) before = live->divides;
  guint changed = 0;
  live->divides = tf_study_dup_divides (study);
  for (int cycle = 2; cycle <= tf_divides_get_last (live->divides); cycle++)
    for (int side = 1; side >= -1; side -= 2)
      if (!is_same (before, live->divides, cycle, side))
        changed += tf_tally_move (live->tally, live->divides, cycle, side);
  if (changed > 0)
    read_tally (live);
  return changed;
}

const GArray *
tf_study_live_hale (const TfStudyLive *live)
{
  return live->hale;
}

const GArray *
tf_study_live_joy (const TfStudyLive *live)
{
  return live->joy;
}

char *
tf_study_live_dup_words (const TfStudyLive *live, const TfStudy *study)
{
  TfFindings now = *live->findings;
  g_autoptr (TfNotes) cautions = tf_notes_new ();
  now.hale = live->hale;
  now.joy = live->joy;
  now.cautions = cautions;
  tf_study_copy_cautions (live->findings->cautions, study, cautions);
  return tf_findings_dup_words (&now, study);
}
