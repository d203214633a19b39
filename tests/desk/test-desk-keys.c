/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Keys, the page that lists them, and the commands: read from the real application, window and page, and held against each
 * other. */

#include "test-desk.h"

#include <string.h>

#include "tf-application.h"
#include "tf-plate.h"
#include "tf-window.h"
#include "tf-wings-view.h"

/* -- what is bound ---------------------------------------------------------------------------- */

typedef struct
{
  char *action; /* as a button would name it: "class::β" */
  char *place;  /* "" everywhere in the window, else the part that must have the focus */
  GArray *keys; /* Key: each of them does it */
} Binding;

typedef struct
{
  guint key;
  GdkModifierType state;
} Key;

static void
binding_free (gpointer data)
{
  Binding *binding = data;
  g_free (binding->action);
  g_free (binding->place);
  g_array_unref (binding->keys);
  g_free (binding);
}

static Binding *
binding_new (const char *action, const char *place)
{
  Binding *binding = g_new0 (Binding, 1);
  binding->action = g_strdup (action);
  binding->place = g_strdup (place);
  binding->keys = g_array_new (FALSE, TRUE, sizeof (Key));
  return binding;
}

/* <Shift> in front of a sign that is shifted anyhow says nothing. */
static void
add_key (GArray *keys, guint key, GdkModifierType state)
{
  gboolean letter = gdk_keyval_to_upper (key) != gdk_keyval_to_lower (key);
  Key add = { gdk_keyval_to_lower (key), state };
  if (!letter && key < 0x80)
    add.state &= ~GDK_SHIFT_MASK;
  g_array_append_val (keys, add);
}

static void
add_trigger (GArray *keys, GtkShortcutTrigger *trigger)
{
  if (GTK_IS_ALTERNATIVE_TRIGGER (trigger))
    {
      add_trigger (keys, gtk_alternative_trigger_get_first (GTK_ALTERNATIVE_TRIGGER (trigger)));
      add_trigger (keys, gtk_alternative_trigger_get_second (GTK_ALTERNATIVE_TRIGGER (trigger)));
    }
  else if (GTK_IS_KEYVAL_TRIGGER (trigger))
    add_key (keys, gtk_keyval_trigger_get_keyval (GTK_KEYVAL_TRIGGER (trigger)),
             gtk_keyval_trigger_get_modifiers (GTK_KEYVAL_TRIGGER (trigger)));
}

/* Of the command's own, when it has keys already. */
static GArray *
keys_of (GPtrArray *bindings, const char *action, const char *place)
{
  for (guint k = 0; k < bindings->len; k++)
    {
      const Binding *binding = bindings->pdata[k];
      if (strcmp (binding->action, action) == 0 && strcmp (binding->place, place) == 0)
        return binding->keys;
    }
  Binding *binding = binding_new (action, place);
  g_ptr_array_add (bindings, binding);
  return binding->keys;
}

/* What the shortcut does, as a detailed name without "win."; NULL: no command of the window. */
static char *
dup_command (GtkShortcut *shortcut)
{
  GtkShortcutAction *action = gtk_shortcut_get_action (shortcut);
  GVariant *arguments = gtk_shortcut_get_arguments (shortcut);
  const char *name
      = GTK_IS_NAMED_ACTION (action) ? gtk_named_action_get_action_name (GTK_NAMED_ACTION (action)) : "";
  if (!g_str_has_prefix (name, "win."))
    return NULL;
  if (strcmp (name, "win.press") == 0)
    return g_variant_dup_string (arguments, NULL);
  return g_action_print_detailed_name (name + strlen ("win."), arguments);
}

static void
read_controller (GtkShortcutController *controller, const char *place, GPtrArray *bindings)
{
  guint n = g_list_model_get_n_items (G_LIST_MODEL (controller));
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (GtkShortcut) shortcut = g_list_model_get_item (G_LIST_MODEL (controller), k);
      g_autofree char *command = dup_command (shortcut);
      if (command != NULL)
        add_trigger (keys_of (bindings, command, place), gtk_shortcut_get_trigger (shortcut));
    }
}

static void
read_widget (GtkWidget *widget, GPtrArray *bindings)
{
  g_autoptr (GListModel) controllers = gtk_widget_observe_controllers (widget);
  guint n = g_list_model_get_n_items (controllers);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (GObject) controller = g_list_model_get_item (controllers, k);
      if (GTK_IS_SHORTCUT_CONTROLLER (controller))
        read_controller (GTK_SHORTCUT_CONTROLLER (controller),
                         TF_IS_WINDOW (widget) ? "" : G_OBJECT_TYPE_NAME (widget), bindings);
    }
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    read_widget (child, bindings);
}

static void
read_application (GtkApplication *application, GPtrArray *bindings)
{
  g_auto (GStrv) actions = gtk_application_list_action_descriptions (application);
  for (guint k = 0; actions[k] != NULL; k++)
    {
      g_auto (GStrv) accels = gtk_application_get_accels_for_action (application, actions[k]);
      const char *name = g_str_has_prefix (actions[k], "win.") ? actions[k] + strlen ("win.") : actions[k];
      GArray *keys = keys_of (bindings, name, "");
      for (guint j = 0; accels[j] != NULL; j++)
        {
          guint key;
          GdkModifierType state;
          g_assert_true (gtk_accelerator_parse (accels[j], &key, &state));
          add_key (keys, key, state);
        }
    }
}

/* -- what the page lists ---------------------------------------------------------------------- */

typedef struct
{
  char *title;
  char *place; /* words of the part that must have the focus, at the end of its title or its group's */
  GArray *keys;
} Listed;

static void
listed_free (gpointer data)
{
  Listed *listed = data;
  g_free (listed->title);
  g_free (listed->place);
  g_array_unref (listed->keys);
  g_free (listed);
}

static char *
dup_place (const char *title, const char *group)
{
  const char *own = strrchr (title, '('), *of_group = strrchr (group, '(');
  return g_strdup (own != NULL && g_str_has_suffix (title, " focused)") ? own
                   : of_group != NULL                                   ? of_group
                                                                        : "");
}

/* What the search would find is made of copies, which stand in no group. */
static void
read_page (GtkWidget *widget, GPtrArray *page)
{
  GtkWidget *group = gtk_widget_get_ancestor (widget, GTK_TYPE_SHORTCUTS_GROUP);
  if (GTK_IS_SHORTCUTS_SHORTCUT (widget) && group != NULL)
    {
      g_autofree char *accelerator = NULL, *of_group = NULL;
      Listed *listed = g_new0 (Listed, 1);
      g_object_get (widget, "title", &listed->title, "accelerator", &accelerator, NULL);
      g_object_get (group, "title", &of_group, NULL);
      listed->place = dup_place (listed->title, of_group);
      g_auto (GStrv) accels = g_strsplit (accelerator, " ", -1);
      listed->keys = g_array_new (FALSE, TRUE, sizeof (Key));
      for (guint k = 0; accels[k] != NULL; k++)
        {
          guint key;
          GdkModifierType state;
          if (!gtk_accelerator_parse (accels[k], &key, &state))
            g_error ("“%s” has no key that can be read: %s", listed->title, accels[k]);
          add_key (listed->keys, key, state);
        }
      g_ptr_array_add (page, listed);
    }
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    read_page (child, page);
}

static GPtrArray *
page_new (void)
{
  GPtrArray *page = g_ptr_array_new_with_free_func (listed_free);
  g_autoptr (GtkBuilder) builder
      = gtk_builder_new_from_resource ("/io/tiltfield/Tiltfield/gtk/help-overlay.ui");
  GtkWidget *window = GTK_WIDGET (gtk_builder_get_object (builder, "help_overlay"));
  read_page (window, page);
  gtk_window_destroy (GTK_WINDOW (window));
  return page;
}

/* -- the three held against each other --------------------------------------------------------- */

static gboolean
has_key (const GArray *keys, const Key *key)
{
  for (guint k = 0; k < keys->len; k++)
    if (memcmp (&g_array_index (keys, Key, k), key, sizeof *key) == 0)
      return TRUE;
  return FALSE;
}

static gboolean
shares_key (const GArray *a, const GArray *b)
{
  for (guint k = 0; k < a->len; k++)
    if (has_key (b, &g_array_index (a, Key, k)))
      return TRUE;
  return FALSE;
}

static gboolean
is_of_place (const Listed *listed, const char *place)
{
  static const struct
  {
    const char *type, *words;
  } places[] = { { "", "" },
                 { "TfPlate", "(plate focused)" },
                 { "TfWingsView", "(wings focused)" },
                 { "TfFollowBench", "(on Follow)" } };
  for (guint k = 0; k < G_N_ELEMENTS (places); k++)
    if (strcmp (place, places[k].type) == 0)
      return strcmp (listed->place, places[k].words) == 0;
  return FALSE;
}

typedef struct
{
  TfApplication *application;
  TfWindow *window;
  GPtrArray *bindings, *page;
} Keys;

static void
keys_begin (Keys *keys)
{
  keys->application = tf_application_new ();
  g_application_set_flags (G_APPLICATION (keys->application), G_APPLICATION_NON_UNIQUE);
  g_application_register (G_APPLICATION (keys->application), NULL, NULL);
  keys->window = tf_window_new (GTK_APPLICATION (keys->application));
  keys->bindings = g_ptr_array_new_with_free_func (binding_free);
  keys->page = page_new ();
  read_application (GTK_APPLICATION (keys->application), keys->bindings);
  read_widget (GTK_WIDGET (keys->window), keys->bindings);
  g_assert_cmpuint (keys->bindings->len, >, 60); /* they were found at all */
  g_assert_cmpuint (keys->page->len, >, 60);
}

static void
keys_end (Keys *keys)
{
  g_ptr_array_unref (keys->bindings);
  g_ptr_array_unref (keys->page);
  gtk_window_destroy (GTK_WINDOW (keys->window));
  g_object_unref (keys->application);
}

static char *
dup_key_names (const GArray *keys)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < keys->len; k++)
    {
      const Key *key = &g_array_index (keys, Key, k);
      g_autofree char *name = gtk_accelerator_name (key->key, key->state);
      g_string_append_printf (text, "%s%s", k > 0 ? " " : "", name);
    }
  return g_string_free (text, FALSE);
}

static void
report (GString *missing, const char *what, const char *name, const GArray *keys)
{
  g_autofree char *text = keys != NULL ? dup_key_names (keys) : g_strdup ("");
  g_string_append_printf (missing, "\n  %s: %s %s", what, name, text);
}

static void
expect_none (const GString *missing)
{
  if (missing->len > 0)
    g_error ("%s", missing->str);
}

static void
every_key_is_listed (void)
{
  if (!test_desk_has_display ())
    return;
  Keys keys;
  g_autoptr (GString) missing = g_string_new (NULL);
  keys_begin (&keys);
  for (guint k = 0; k < keys.bindings->len; k++)
    {
      const Binding *binding = keys.bindings->pdata[k];
      gboolean found = FALSE;
      for (guint j = 0; j < keys.page->len && !found; j++)
        {
          const Listed *listed = keys.page->pdata[j];
          found = is_of_place (listed, binding->place) && shares_key (binding->keys, listed->keys);
        }
      if (!found)
        report (missing, "a key that the page does not list", binding->action, binding->keys);
    }
  expect_none (missing);
  keys_end (&keys);
}

/* Keys of a drawing, which it hears itself: sent to it, they must be taken. */
static gboolean
is_heard (GtkWidget *widget, const Key *key)
{
  g_autoptr (GListModel) controllers = gtk_widget_observe_controllers (widget);
  gboolean heard = FALSE;
  for (guint k = 0; k < g_list_model_get_n_items (controllers) && !heard; k++)
    {
      g_autoptr (GObject) controller = g_list_model_get_item (controllers, k);
      if (GTK_IS_EVENT_CONTROLLER_KEY (controller))
        g_signal_emit_by_name (controller, "key-pressed", key->key, 0, key->state, &heard);
      else if (GTK_IS_SHORTCUT_CONTROLLER (controller))
        for (guint j = 0; j < g_list_model_get_n_items (G_LIST_MODEL (controller)) && !heard; j++)
          {
            g_autoptr (GtkShortcut) shortcut = g_list_model_get_item (G_LIST_MODEL (controller), j);
            g_autoptr (GArray) bound = g_array_new (FALSE, TRUE, sizeof (Key));
            add_trigger (bound, gtk_shortcut_get_trigger (shortcut));
            heard = has_key (bound, key);
          }
    }
  return heard;
}

static GtkWidget *
find_widget (GtkWidget *widget, GType type)
{
  if (G_TYPE_CHECK_INSTANCE_TYPE (widget, type))
    return widget;
  GtkWidget *found = NULL;
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL && found == NULL;
       child = gtk_widget_get_next_sibling (child))
    found = find_widget (child, type);
  return found;
}

static gboolean
is_done (Keys *keys, const Listed *listed, const Key *key)
{
  for (guint k = 0; k < keys->bindings->len; k++)
    {
      const Binding *binding = keys->bindings->pdata[k];
      if (is_of_place (listed, binding->place) && has_key (binding->keys, key))
        return TRUE;
    }
  GtkWidget *window = GTK_WIDGET (keys->window);
  TfSession *session = tf_window_get_session (keys->window);
  GtkWidget *plate = find_widget (window, TF_TYPE_PLATE);
  if (is_of_place (listed, "TfWingsView"))
    {
      g_action_group_activate_action (G_ACTION_GROUP (window), "choose-divide", g_variant_new ("(ii)", 24, 1));
      return is_heard (find_widget (window, TF_TYPE_WINGS_VIEW), key);
    }
  tf_session_set_tool (session, is_of_place (listed, "TfPlate") ? TF_TOOL_NONE : TF_TOOL_POLYGON);
  is_heard (plate, &(Key){ GDK_KEY_Left, 0 }); /* the cross of the polygon comes with an arrow key */
  return is_heard (plate, key);
}

static gboolean
has_regions (gpointer session)
{
  return tf_session_get_frame (session) != NULL
         && g_list_model_get_n_items (tf_session_get_regions (session)) > 0;
}

static void
show_work (TfWindow *window)
{
  g_autofree char *path = test_desk_path ("all-keys.ledger");
  g_autoptr (TfSession) session = test_desk_session (path);
  tf_session_close (session);
  const char *paths[] = { path, NULL };
  gtk_window_present (GTK_WINDOW (window));
  tf_window_open (window, (char *const *)paths);
  test_desk_wait ("the frame in the window", has_regions, tf_window_get_session (window));
  tf_session_set_person (tf_window_get_session (window), "north desk");
  tf_session_step_hint (tf_window_get_session (window), 1);
}

static void
every_row_does_something (void)
{
  if (!test_desk_has_display ())
    return;
  Keys keys;
  g_autoptr (GString) missing = g_string_new (NULL);
  keys_begin (&keys);
  show_work (keys.window);
  g_action_group_activate_action (G_ACTION_GROUP (keys.window), "bench", g_variant_new_string ("laws"));
  for (guint j = 0; j < keys.page->len; j++)
    {
      Listed *listed = keys.page->pdata[j];
      for (guint k = 0; k < listed->keys->len; k++)
        if (!is_done (&keys, listed, &g_array_index (listed->keys, Key, k)))
          report (missing, "a row of the page that no part of the window hears", listed->title, listed->keys);
    }
  expect_none (missing);
  keys_end (&keys);
}

static void
no_key_twice (void)
{
  if (!test_desk_has_display ())
    return;
  Keys keys;
  g_autoptr (GString) missing = g_string_new (NULL);
  keys_begin (&keys);
  for (guint k = 0; k < keys.bindings->len; k++)
    for (guint j = 0; j < k; j++)
      {
        const Binding *a = keys.bindings->pdata[j], *b = keys.bindings->pdata[k];
        if (strcmp (a->place, b->place) == 0 && shares_key (a->keys, b->keys))
          report (missing, a->action, b->action, b->keys);
      }
  for (guint k = 0; k < keys.page->len; k++)
    for (guint j = 0; j < k; j++)
      {
        const Listed *a = keys.page->pdata[j], *b = keys.page->pdata[k];
        if (strcmp (a->place, b->place) == 0 && shares_key (a->keys, b->keys))
          report (missing, a->title, b->title, b->keys);
      }
  expect_none (missing);
  keys_end (&keys);
}

/* -- every command by hand ---------------------------------------------------------------------- */

static void
add_name (GHashTable *reached, const char *detailed)
{
  if (detailed == NULL || !g_str_has_prefix (detailed, "win."))
    return;
  const char *name = detailed + strlen ("win."), *end = strpbrk (name, ":(");
  g_hash_table_add (reached, end != NULL ? g_strndup (name, (gsize)(end - name)) : g_strdup (name));
}

static void
read_menu (GMenuModel *menu, GHashTable *reached)
{
  for (int k = 0; menu != NULL && k < g_menu_model_get_n_items (menu); k++)
    {
      g_autofree char *name = NULL;
      if (g_menu_model_get_item_attribute (menu, k, G_MENU_ATTRIBUTE_ACTION, "s", &name))
        add_name (reached, name);
      static const char *const links[] = { G_MENU_LINK_SECTION, G_MENU_LINK_SUBMENU };
      for (guint j = 0; j < G_N_ELEMENTS (links); j++)
        {
          g_autoptr (GMenuModel) within = g_menu_model_get_item_link (menu, k, links[j]);
          read_menu (within, reached);
        }
    }
}

static void
read_hands (GtkWidget *widget, GHashTable *reached)
{
  if (GTK_IS_ACTIONABLE (widget))
    add_name (reached, gtk_actionable_get_action_name (GTK_ACTIONABLE (widget)));
  if (GTK_IS_MENU_BUTTON (widget))
    read_menu (gtk_menu_button_get_menu_model (GTK_MENU_BUTTON (widget)), reached);
  if (GTK_IS_POPOVER_MENU (widget))
    read_menu (gtk_popover_menu_get_menu_model (GTK_POPOVER_MENU (widget)), reached);
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    read_hands (child, reached);
}

/* Commands that are not pressed as such: with words or numbers for who drives the window over the session bus, or what a hand
 * does to a drawing, a list or a question; each with what stands for it in the window. */
static const struct
{
  const char *action;
  const char *instead; /* a command that can be reached; NULL: a drawing or entry does it */
} unpressed[] = {
  { "open-path", "add-frames" },
  { "make-ledger", "new-ledger" },
  { "set-person", "ask-person" },
  { "press", NULL },        /* what keys go through */
  { "focus-plate", NULL },  /* Tab, a click */
  { "note", NULL },         /* written in the slip */
  { "label", NULL },        /* written in the slip */
  { "external-number", NULL }, /* written in the slip */
  { "bench", NULL },        /* the switcher at the head */
  { "range", NULL },        /* the slider of the plate */
  { "try-geometry", "correct-geometry" },
  { "fit-limb", "correct-geometry" },
  { "keep-geometry", "correct-geometry" },
  { "roll-instrument", NULL }, /* the menu of the roll, made when there are two */
  { "watch-path", "watch-folder" },
  { "find-moved-in", "find-moved" },
  { "shift-sheet-as", "shift-sheet" },
  { "region-sheet-as", "region-sheet" },
  { "bring-file", "bring" },
  { "save-picture-as", "save-picture" },
  { "set-measure-option", "preferences" },
  { "units-flux", "preferences" },
  { "units-field", "preferences" },
  { "units-length", "preferences" },
  { "pin-at", "pin" },
  { "pin-here", "pin" },
  { "choose-divide", "next-divide" },
  { "move-divide", "next-divide" },
  { "shift-divide", "next-divide" },
  { "pick", "stretch" },
  { "open-mark", NULL },     /* a dot of a chart */
  { "apply-what-if", NULL }, /* a row of the list */
  { "follow-choose", NULL },   /* the list of passages */
  { "follow-answer", NULL },   /* a button beside each offer */
  { "follow-beside", NULL },   /* a button beside each offer */
  { "follow-cut-for", "follow-cut" },
  { "follow-join-for", "follow-join" },
  { "follow-save-to", "follow-save" },
};

/* By its key, as it has no menu before. */
static void
open_menu (GtkWidget *plate)
{
  g_autoptr (GListModel) controllers = gtk_widget_observe_controllers (plate);
  for (guint k = 0; k < g_list_model_get_n_items (controllers); k++)
    {
      g_autoptr (GObject) controller = g_list_model_get_item (controllers, k);
      guint n = GTK_IS_SHORTCUT_CONTROLLER (controller) ? g_list_model_get_n_items (G_LIST_MODEL (controller)) : 0;
      for (guint j = 0; j < n; j++)
        {
          g_autoptr (GtkShortcut) shortcut = g_list_model_get_item (G_LIST_MODEL (controller), j);
          g_autoptr (GArray) bound = g_array_new (FALSE, TRUE, sizeof (Key));
          add_trigger (bound, gtk_shortcut_get_trigger (shortcut));
          if (has_key (bound, &(Key){ GDK_KEY_Menu, 0 }))
            gtk_shortcut_action_activate (gtk_shortcut_get_action (shortcut), 0, plate, NULL);
        }
    }
}

static gboolean
is_reached (GHashTable *reached, const char *action)
{
  if (g_hash_table_contains (reached, action))
    return TRUE;
  for (guint k = 0; k < G_N_ELEMENTS (unpressed); k++)
    if (strcmp (unpressed[k].action, action) == 0)
      return unpressed[k].instead == NULL || g_hash_table_contains (reached, unpressed[k].instead);
  return FALSE;
}

static void
every_command_has_a_place (void)
{
  if (!test_desk_has_display ())
    return;
  Keys keys;
  g_autoptr (GString) missing = g_string_new (NULL);
  g_autoptr (GHashTable) reached = g_hash_table_new_full (g_str_hash, g_str_equal, g_free, NULL);
  keys_begin (&keys);
  show_work (keys.window);
  open_menu (find_widget (GTK_WIDGET (keys.window), TF_TYPE_PLATE));
  read_hands (GTK_WIDGET (keys.window), reached);
  g_auto (GStrv) actions = g_action_group_list_actions (G_ACTION_GROUP (keys.window));
  for (guint k = 0; actions[k] != NULL; k++)
    if (!is_reached (reached, actions[k]))
      report (missing, "no button or menu for", actions[k], NULL);
  for (guint k = 0; k < G_N_ELEMENTS (unpressed); k++)
    if (!g_action_group_has_action (G_ACTION_GROUP (keys.window), unpressed[k].action))
      report (missing, "no such command any more", unpressed[k].action, NULL);
  GHashTableIter iter;
  gpointer name;
  g_hash_table_iter_init (&iter, reached);
  while (g_hash_table_iter_next (&iter, &name, NULL))
    if (!g_action_group_has_action (G_ACTION_GROUP (keys.window), name))
      report (missing, "a button or menu without a command", name, NULL);
  expect_none (missing);
  keys_end (&keys);
}

void
test_desk_add_keys (void)
{
  g_test_add_func ("/desk/keys/every-key-stands-on-the-page-of-keys", every_key_is_listed);
  g_test_add_func ("/desk/keys/every-row-of-the-page-is-heard", every_row_does_something);
  g_test_add_func ("/desk/keys/no-key-does-two-things", no_key_twice);
  g_test_add_func ("/desk/keys/every-command-has-a-button-or-a-menu", every_command_has_a_place);
}
