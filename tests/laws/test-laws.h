/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-divide.h"
#include "tf-sample.h"
#include "tf-verdict.h"

void test_laws_add_bin (void);
void test_laws_add_agreement (void);
void test_laws_add_compare (void);
void test_laws_add_cycle (void);
void test_laws_add_emergence (void);
void test_laws_add_hale (void);
void test_laws_add_held (void);
void test_laws_add_joy (void);
void test_laws_add_line (void);
void test_laws_add_proportion (void);
void test_laws_add_sampling (void);
void test_laws_add_sort (void);
void test_laws_add_tally (void);
void test_laws_add_verdict (void);

/** test_laws_row: a well measured bipole of cycle 24 (2013-06-01) at @lat with that leader. */
TfSampleRow test_laws_row (double lat, int leading);
/** test_laws_divides: by the default options. */
TfDivides *test_laws_divides (void);
TfDivideParams test_laws_divide_params (void);
TfVerdictParams test_laws_verdict_params (void);
/** test_laws_month: @months (of 365.25/12 days) after the minimum that begins @cycle. */
TfTime test_laws_month (int cycle, double months);
