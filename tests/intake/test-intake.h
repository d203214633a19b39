/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <glib.h>
#include <glib/gstdio.h>

#include "tf-check.h"
#include "tf-intake.h"

/* A folder with small made frames, and room for ledgers beside it. */
typedef struct
{
  char *folder, *frames, *state, *path;
  guint n;
} Fixture;

enum { N_FRAMES = 6 };

void fixture_set_up (Fixture *f, gconstpointer data);
void fixture_tear_down (Fixture *f, gconstpointer data);
/* A disk of 256 x 256 pixels with two bipoles; different for every @seed. */
void write_frame (const char *path, int seed);
/* A Dopplergram: refused. */
void write_velocity (const char *path);
TfLedger *open_ledger (Fixture *f, const char *path);

typedef struct
{
  guint count[4]; /* by outcome */
  guint hints;
  char *message; /* the last one */
  TfCancel *cancel_after_one;
} Tally;
void tally_clear (Tally *tally);
void fill (Fixture *f, TfLedger *ledger, const TfIntakeParams *params, Tally *tally);
/* Content ids of all machine rows, in order: what must be the same however the ledger was filled. */
char *machine_ids (const char *path);
/* The first column of all rows, a line each, through a connection of the test's own. */
char *sql_text (const char *path, const char *sql);
void check_clean (TfLedger *ledger);

int run_child (const char *what, const char *folder);

void add_kill_tests (void);
void add_watch_tests (void);

#define FIXTURE_TEST(path, func) g_test_add (path, Fixture, NULL, fixture_set_up, func, fixture_tear_down)
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Tally, tally_clear)
