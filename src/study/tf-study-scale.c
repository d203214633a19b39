/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-private.h"

/* Scales of instruments as a study applies them: to fluxes, never to what is stored. */

static const TfKeptScale *
find_scale (const GPtrArray *scales, const char *instrument)
{
  for (guint k = 0; scales != NULL && k < scales->len; k++)
    {
      const TfKeptScale *scale = g_ptr_array_index (scales, k);
      if (g_strcmp0 (scale->instrument, instrument) == 0)
        return scale;
    }
  return NULL;
}

guint
tf_study_scale (TfSample *all, const TfStudyRows *rows, gboolean on)
{
  guint n = 0;
  gboolean any = rows->scales != NULL && rows->scales->len > 0;
  for (guint k = 0; any && k < tf_sample_get_n (all); k++)
    {
      TfStudyFact own = tf_study_fact (rows, tf_sample_get (all, k)->row);
      const TfKeptScale *scale = find_scale (rows->scales, own.instrument);
      if (scale == NULL)
        continue;
      tf_sample_scale_flux (all, k, on ? scale->factor : 1.0 / scale->factor);
      n++;
    }
  return n;
}

static gboolean
is_reference (const GPtrArray *scales, const char *instrument)
{
  for (guint k = 0; scales != NULL && k < scales->len; k++)
    if (g_strcmp0 (((TfKeptScale *)g_ptr_array_index (scales, k))->reference, instrument) == 0)
      return TRUE;
  return FALSE;
}

gboolean
tf_study_unscaled (const TfFindings *findings, const TfStudy *study, const TfStudyRows *rows)
{
  gboolean several = FALSE, lacking = FALSE;
  const char *first = NULL, *last = NULL;
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      const char *name = tf_study_fact (rows, tf_sample_get (findings->sample, k)->row).instrument;
      if (name == NULL || name == last)
        continue; /* interned names of one instrument are the same */
      last = name;
      first = first != NULL ? first : name;
      several |= g_strcmp0 (first, name) != 0;
      lacking |= !study->sieve.with_scales
                 || (find_scale (rows->scales, name) == NULL && !is_reference (rows->scales, name));
    }
  return several && lacking;
}
