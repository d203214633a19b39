/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <glib.h>
#include <glib/gstdio.h>

#include "tf-check.h"
#include "tf-ledger.h"

/* One ledger in a folder of its own, with a state folder and a clock that the test sets. */
typedef struct
{
  char *folder, *path, *state;
  gint64 now; /* ms */
  TfLedger *ledger;
} Fixture;

void fixture_set_up (Fixture *f, gconstpointer data);
void fixture_tear_down (Fixture *f, gconstpointer data);
TfLedger *fixture_open (Fixture *f, const char *path, GError **error);
void fixture_reopen (Fixture *f);
void fixture_remove_folder (const char *folder);

/* Things to put in. @day counts from 2013-10-12; they differ by @n. */
gint64 fixture_frame (TfLedger *ledger, int n);
TfFrameInfo *fixture_info (int n);
TfOutline *fixture_outline (int n);
void fixture_measure (TfMeasure *measure, int n);
/* Three hints (the last one unipolar) with their measures. */
GPtrArray *fixture_hints (int n);
gint64 fixture_keep (TfLedger *ledger, gint64 frame, gint64 person, gint64 hint, gint64 follows, int n);

/* What the ledger holds, as counts: by rows and by points, which must agree. */
void fixture_count (TfLedger *ledger, guint marks, guint hints);
gint64 fixture_region (TfLedger *ledger, gint64 mark);
gint64 fixture_hint (TfLedger *ledger, guint k); /* local key of the k-th open hint */
/* One statement through a connection of the test's own. */
void fixture_sql (const char *path, const char *sql);
char *fixture_sql_text (const char *path, const char *sql);
/* Check must find exactly the codes given ("" for none). */
void fixture_check (TfLedger *ledger, const char *codes);
gboolean fixture_finds (TfLedger *ledger, const char *code);

void add_acts_tests (void);
void add_check_tests (void);
void add_divides_tests (void);
void add_scales_tests (void);
void add_faults_tests (void);
void add_file_tests (void);
void add_follow_tests (void);
void add_machine_tests (void);
void add_shift_tests (void);
void add_outside_tests (void);
void add_studies_tests (void);
void add_together_tests (void);

#define FIXTURE_TEST(path, func) g_test_add (path, Fixture, NULL, fixture_set_up, func, fixture_tear_down)
