/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* An invented sample with a known law: cycles 23 and 24, tilt 0.45 |lat| with a scatter of 18 deg,
 * one region in twenty the wrong way round. */

#include "tf-laws-charts.h"

typedef struct
{
  TfSample *sample;
  TfVerdict *verdicts;
  GArray *hale, *joy;
  TfLawsFacts facts;
} MadeStudy;

MadeStudy made_study_new (guint n, guint seed);
void made_study_clear (MadeStudy *study);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (MadeStudy, made_study_clear)
