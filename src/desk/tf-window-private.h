/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

#include "tf-power.h"
#include "tf-window.h"

G_BEGIN_DECLS

/** tf_window_focus_plate: the keys of drawing go to the plate. */
void tf_window_focus_plate (TfWindow *window);
/** tf_window_show_bench: "mark", "laws"; FALSE: no such bench. */
gboolean tf_window_show_bench (TfWindow *window, const char *name);
void tf_window_enlarge_chart (TfWindow *window, const char *name);
/** tf_window_dup_power: (nullable) (transfer full): the power curve as far as it is worked out. */
TfPowerCurve *tf_window_dup_power (TfWindow *window, double *wanted);
/** tf_window_get_wings_span: the years in view on the wings. */
void tf_window_get_wings_span (TfWindow *window, double *from, double *to);
/* tf-window-actions.c */
void tf_window_add_actions (TfWindow *window);
/** tf_window_update_actions: which commands are possible now, and the state of those that have
 * one */
void tf_window_update_actions (TfWindow *window);
/* tf-actions-plate.c */
void tf_window_add_plate_actions (TfWindow *window);
void tf_window_update_plate_actions (TfWindow *window);
/** tf_window_restore_plate: as the preferences say. */
void tf_window_restore_plate (TfWindow *window);
/* tf-actions-frame.c */
void tf_window_add_frame_actions (TfWindow *window);
void tf_window_update_frame_actions (TfWindow *window);
void tf_window_forget_geometry (TfWindow *window);
/** tf_window_restore_watch: the folder that was watched for this ledger is watched again. */
void tf_window_restore_watch (TfWindow *window);
/* tf-actions-list.c */
void tf_window_add_list_actions (TfWindow *window);
void tf_window_update_list_actions (TfWindow *window);
/** tf_window_show_list: the regions beside the plate instead of the roll */
void tf_window_show_list (TfWindow *window, gboolean list);
/* tf-actions-tools.c */
void tf_window_add_tool_actions (TfWindow *window);
void tf_window_update_tool_actions (TfWindow *window);
/* tf-actions-mark.c */
void tf_window_add_mark_actions (TfWindow *window);
void tf_window_update_mark_actions (TfWindow *window);
/** tf_window_restore_units: as the preferences say. */
void tf_window_restore_units (TfWindow *window);
/* tf-window-pin.c, tf-journal-view.c */
void tf_window_ask_pin (TfWindow *window, double lon_deg, double lat_deg);
/** tf_window_show_journal: @region: (nullable): of it alone */
void tf_window_show_journal (TfWindow *window, TfRegionItem *region);
/* tf-window-keys.c */
/** tf_window_press: @detailed: a window action as of a key: done, or said why it cannot be */
void tf_window_press (TfWindow *window, const char *detailed);
/* tf-window-files.c: choosing files, dropping them, asking for names */
void tf_window_choose_ledger (TfWindow *window);
void tf_window_choose_new_ledger (TfWindow *window);
/** tf_window_make_here: makes the ledger that was asked for and is not there; asks its letter. */
void tf_window_make_here (TfWindow *window);
gboolean tf_window_can_make_here (TfWindow *window);
void tf_window_choose_frames (TfWindow *window);
void tf_window_open_demo (TfWindow *window);
void tf_window_add_drop (TfWindow *window);
/** tf_window_ask_person: @then: (nullable): window action to activate when a name was given */
void tf_window_ask_person (TfWindow *window, const char *then);
/** tf_window_judge: a deed of the session's person; where there is none, the name is asked for and the action done then. */
void tf_window_judge (gpointer window, GSimpleAction *action, gboolean (*deed) (TfSession *));
/** tf_window_enable: a window action of that name */
void tf_window_enable (TfWindow *window, const char *name, gboolean enabled);
void tf_window_show_about (TfWindow *window);
void tf_window_show_cautions (TfWindow *window);

G_END_DECLS
