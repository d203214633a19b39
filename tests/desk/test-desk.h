/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include <gtk/gtk.h>

#include "tf-session.h"

/** Turns the main loop until @test is TRUE; fails after ten seconds. */
typedef gboolean (*TestUntil) (gpointer data);
void test_desk_wait (const char *what, TestUntil test, gpointer data);
/** A path in a folder of the program's own, which is removed at its end. */
char *test_desk_path (const char *name);
/** A session with a new ledger that holds one demo frame with its hints, open on the plate;
 * person "north desk". */
TfSession *test_desk_session (const char *ledger_path);
gboolean test_desk_has_display (void);

void test_desk_add_words (void);
void test_desk_add_follow (void);
void test_desk_add_gaps (void);
void test_desk_add_geometry (void);
void test_desk_add_hand (void);
void test_desk_add_keys (void);
void test_desk_add_list (void);
void test_desk_add_mark (void);
void test_desk_add_plate (void);
void test_desk_add_roll (void);
void test_desk_add_session (void);
void test_desk_add_window (void);
void test_desk_add_laws (void);
void test_desk_add_studies (void);
void test_desk_add_bundles (void);
