/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-findings-figures.h"

#include "tf-figure.h"

GPtrArray *
tf_findings_write_figures (const TfFindings *findings, const TfStudy *study, const char *folder,
                           GError **error)
{
  g_return_val_if_fail (findings != NULL && study != NULL && folder != NULL, NULL);
  g_autoptr (TfDivides) computed = tf_divides_new (&study->divide);
  const TfLawsFacts facts = { .sample = findings->sample,
                              .verdicts = findings->verdicts,
                              .hale = findings->hale,
                              .joy = findings->joy,
                              .emergence = findings->emergence,
                              .divides = study->divides != NULL ? study->divides : computed,
                              .hale_params = study->hale,
                              .joy_params = study->joy };
  g_autoptr (TfLawsCharts) charts = tf_laws_charts_new (&facts);
  g_autofree char *words = tf_findings_dup_words (findings, study);
  return tf_laws_charts_write (charts, folder, "pdf", words, error);
}
