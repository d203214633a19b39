/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-study.h"

void test_study_add_ledger (void);
void test_study_add_live (void);
void test_study_add_pair (void);
void test_study_add_file (void);
void test_study_add_row (void);
void test_study_add_sample (void);
void test_study_add_shift (void);
void test_study_add_series (void);
void test_study_add_take (void);

/** test_study_measure: a well measured bipole of 2013-06-01 (cycle 24) at @lat with that leading
 * polarity. */
TfMeasure test_study_measure (double lat, int leading);

/** TestLedger: a ledger in a folder of its own, with a person and what has been put in. */
typedef struct
{
  char *folder, *path;
  TfLedger *ledger;
  gint64 person;
  guint n_frames;
} TestLedger;
void test_study_ledger_open (TestLedger *t);
void test_study_ledger_clear (TestLedger *t);
/** test_study_frame: a disk frame at @time of that instrument with that noise at mu 0.5, G. */
gint64
test_study_frame (TestLedger *t, const char *time, const char *instrument, double noise_gauss);
/** test_study_mark: keeps @measure (taken over) on a frame; @region 0: a new one. Returns the
 * mark's key. */
gint64 test_study_mark (TestLedger *t, gint64 frame, gint64 region, TfMeasure measure);
/** test_study_hint: puts one hint on a frame. */
void test_study_hint (TestLedger *t, gint64 frame, gboolean unipolar, TfMeasure measure);

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (TestLedger, test_study_ledger_clear)
