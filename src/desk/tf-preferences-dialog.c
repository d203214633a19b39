/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-preferences-dialog.h"

#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-preferences.h"

struct _TfPreferencesDialog
{
  AdwPreferencesWindow parent;
  TfSession *session;
  AdwPreferencesGroup *measure;
  GPtrArray *rows; /* borrowed widgets, one an option shown, to be set anew */
  gboolean setting;
};

G_DEFINE_FINAL_TYPE (TfPreferencesDialog, tf_preferences_dialog, ADW_TYPE_PREFERENCES_WINDOW)

static const char key[] = "measure", option_key[] = "tf-option";

/* The options a person changes; the rest stays with the method's defaults. */
static const struct
{
  const char *name, *title;
} shown[] = {
  { "field", N_ ("Field that is summed") },
  { "floor-sigma", N_ ("Floor, in noise") },
  { "floor-gauss", N_ ("Floor, in gauss") },
  { "tilt-form", N_ ("Tilt") },
  { "rotation", N_ ("Rotation law") },
};

static const TfOption *
find_option (const char *name)
{
  for (const TfOption *o = tf_measure_options; o->name != NULL; o++)
    if (strcmp (o->name, name) == 0)
      return o;
  return NULL;
}

/* -- kept ------------------------------------------------------------------------------------ */

void
tf_preferences_restore_measure (TfSession *session)
{
  TfMeasureParams params;
  g_autofree char *text = tf_preferences_dup (key);
  if (text != NULL
      && tf_options_read_canonical (tf_measure_options, &params, TF_MEASURE_METHOD, text))
    tf_session_set_params (session, &params);
}

gboolean
tf_preferences_set_measure (TfSession *session, const char *option, const char *text,
                            GError **error)
{
  TfMeasureParams params = *tf_session_get_params (session);
  if (!tf_options_set (tf_measure_options, &params, option, text, error))
    return FALSE;
  g_autofree char *all = tf_options_dup_canonical (tf_measure_options, &params, TF_MEASURE_METHOD);
  tf_session_set_params (session, &params);
  tf_preferences_set (key, all);
  return TRUE;
}

static void
set_option (TfPreferencesDialog *self, const TfOption *option, const char *text)
{
  g_autoptr (GError) error = NULL;
  if (self->setting || tf_preferences_set_measure (self->session, option->name, text, &error))
    return;
  AdwToast *toast = adw_toast_new (error->message);
  adw_preferences_window_add_toast (ADW_PREFERENCES_WINDOW (self), toast);
}

/* -- rows ------------------------------------------------------------------------------------ */

static void
choice_changed (AdwComboRow *row, GParamSpec *spec, TfPreferencesDialog *self)
{
  const TfOption *option = g_object_get_data (G_OBJECT (row), option_key);
  guint at = adw_combo_row_get_selected (row);
  if (at != GTK_INVALID_LIST_POSITION)
    set_option (self, option, option->choices[at]);
}

static void
number_changed (AdwEntryRow *row, TfPreferencesDialog *self)
{
  set_option (self, g_object_get_data (G_OBJECT (row), option_key),
              gtk_editable_get_text (GTK_EDITABLE (row)));
}

static GtkWidget *
row_for (TfPreferencesDialog *self, const TfOption *option, const char *title)
{
  GtkWidget *row;
  if (option->type == TF_OPTION_CHOICE)
    {
      g_autoptr (GtkStringList) names = gtk_string_list_new (option->choices);
      row = adw_combo_row_new ();
      adw_combo_row_set_model (ADW_COMBO_ROW (row), G_LIST_MODEL (names));
      adw_action_row_set_subtitle (ADW_ACTION_ROW (row), _ (option->sentence));
      g_signal_connect (row, "notify::selected", G_CALLBACK (choice_changed), self);
      adw_preferences_row_set_title (ADW_PREFERENCES_ROW (row), title);
    }
  else
    {
      g_autofree char *with_unit = g_strdup_printf ("%s (%s)", title, option->unit);
      row = adw_entry_row_new ();
      adw_entry_row_set_show_apply_button (ADW_ENTRY_ROW (row), TRUE);
      gtk_widget_set_tooltip_text (row, _ (option->sentence));
      g_signal_connect (row, "apply", G_CALLBACK (number_changed), self);
      adw_preferences_row_set_title (ADW_PREFERENCES_ROW (row), with_unit);
    }
  g_object_set_data (G_OBJECT (row), option_key, (gpointer)option);
  return row;
}

static void
show_value (GtkWidget *row, const TfMeasureParams *params)
{
  const TfOption *option = g_object_get_data (G_OBJECT (row), option_key);
  g_autofree char *value = tf_options_dup_value (option, params);
  if (option->type != TF_OPTION_CHOICE)
    {
      gtk_editable_set_text (GTK_EDITABLE (row), value);
      return;
    }
  for (guint k = 0; option->choices[k] != NULL; k++)
    if (strcmp (option->choices[k], value) == 0)
      adw_combo_row_set_selected (ADW_COMBO_ROW (row), k);
}

static void
show_values (TfPreferencesDialog *self)
{
  self->setting = TRUE;
  for (guint k = 0; k < self->rows->len; k++)
    show_value (g_ptr_array_index (self->rows, k), tf_session_get_params (self->session));
  self->setting = FALSE;
}

static void
set_defaults (GtkButton *button, TfPreferencesDialog *self)
{
  TfMeasureParams params;
  tf_measure_params_init (&params);
  tf_session_set_params (self->session, &params);
  tf_preferences_set (key, NULL);
  show_values (self);
}

static void
add_measure (TfPreferencesDialog *self)
{
  GtkWidget *back = gtk_button_new_with_label (_ ("Defaults"));
  self->measure = ADW_PREFERENCES_GROUP (adw_preferences_group_new ());
  adw_preferences_group_set_title (self->measure, _ ("How marks are measured"));
  adw_preferences_group_set_description (
      self->measure, _ ("Of drafts and of what is kept from now on. Each mark keeps the set it was "
                        "measured with; hints and older marks are not changed."));
  gtk_widget_set_valign (back, GTK_ALIGN_CENTER);
  g_signal_connect (back, "clicked", G_CALLBACK (set_defaults), self);
  adw_preferences_group_set_header_suffix (self->measure, back);
  for (guint k = 0; k < G_N_ELEMENTS (shown); k++)
    {
      GtkWidget *row = row_for (self, find_option (shown[k].name), _ (shown[k].title));
      adw_preferences_group_add (self->measure, row);
      g_ptr_array_add (self->rows, row);
    }
}

/* One choice of a command with a state: a radio button. */
static GtkWidget *
state_button (const char *label, const char *action)
{
  GtkWidget *button = gtk_check_button_new_with_label (label);
  gtk_actionable_set_detailed_action_name (GTK_ACTIONABLE (button), action);
  return button;
}

typedef struct
{
  const char *title;
  struct
  {
    const char *label, *action;
  } choice[2];
} StateRow;

static const StateRow palette_row = { N_ ("Colours of the field"),
                                      { { N_ ("grey, white positive"), "win.palette::grey" },
                                        { N_ ("amber positive, indigo negative"),
                                          "win.palette::amber-indigo" } } };
static const StateRow unit_rows[] = {
  { N_ ("Flux"),
    { { N_ ("maxwell, Mx"), "win.units-flux::Mx" }, { N_ ("weber, Wb"), "win.units-flux::Wb" } } },
  { N_ ("Field"),
    { { N_ ("gauss, G"), "win.units-field::G" }, { N_ ("millitesla, mT"), "win.units-field::mT" } } },
  { N_ ("Lengths"),
    { { N_ ("degrees first"), "win.units-length::degrees" },
      { N_ ("megametres first, Mm"), "win.units-length::Mm" } } },
};

static void
add_state_row (AdwPreferencesGroup *group, const StateRow *described)
{
  GtkWidget *row = adw_action_row_new (), *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);
  adw_preferences_row_set_title (ADW_PREFERENCES_ROW (row), _ (described->title));
  for (guint k = 0; k < G_N_ELEMENTS (described->choice); k++)
    gtk_box_append (GTK_BOX (box), state_button (_ (described->choice[k].label),
                                                 described->choice[k].action));
  adw_action_row_add_suffix (ADW_ACTION_ROW (row), box);
  adw_preferences_group_add (group, row);
}

static AdwPreferencesGroup *
units_group (void)
{
  AdwPreferencesGroup *group = ADW_PREFERENCES_GROUP (adw_preferences_group_new ());
  adw_preferences_group_set_title (group, _ ("Units"));
  adw_preferences_group_set_description (
      group, _ ("Of what this window shows. Files, sheets and the ledger keep Mx, G and Mm."));
  for (guint k = 0; k < G_N_ELEMENTS (unit_rows); k++)
    add_state_row (group, &unit_rows[k]);
  return group;
}

static void
dispose (GObject *object)
{
  TfPreferencesDialog *self = TF_PREFERENCES_DIALOG (object);
  g_clear_object (&self->session);
  g_clear_pointer (&self->rows, g_ptr_array_unref);
  G_OBJECT_CLASS (tf_preferences_dialog_parent_class)->dispose (object);
}

static void
tf_preferences_dialog_class_init (TfPreferencesDialogClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
}

static void
tf_preferences_dialog_init (TfPreferencesDialog *self)
{
  self->rows = g_ptr_array_new ();
}

GtkWidget *
tf_preferences_dialog_new (GtkWindow *parent, TfSession *session)
{
  g_return_val_if_fail (TF_IS_SESSION (session), NULL);
  TfPreferencesDialog *self
      = g_object_new (TF_TYPE_PREFERENCES_DIALOG, "transient-for", parent, "modal", TRUE,
                      "search-enabled", FALSE, "title", _ ("Preferences"), NULL);
  self->session = g_object_ref (session);
  /* the window's commands, for what is a command there */
  gtk_widget_insert_action_group (GTK_WIDGET (self), "win", G_ACTION_GROUP (parent));
  AdwPreferencesPage *page = ADW_PREFERENCES_PAGE (adw_preferences_page_new ());
  AdwPreferencesGroup *look = ADW_PREFERENCES_GROUP (adw_preferences_group_new ());
  add_measure (self);
  adw_preferences_group_set_title (look, _ ("How the plate looks"));
  add_state_row (look, &palette_row);
  adw_preferences_page_add (page, self->measure);
  adw_preferences_page_add (page, look);
  adw_preferences_page_add (page, units_group ());
  adw_preferences_window_add (ADW_PREFERENCES_WINDOW (self), page);
  show_values (self);
  return GTK_WIDGET (self);
}
