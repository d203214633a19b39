/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-condition-row.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-number.h"
#include "tf-widget-style.h"

struct _TfConditionRow
{
  GtkWidget parent;
  GtkWidget *box;
  GtkDropDown *column, *is, *yes;
  GtkEditable *value;
  GtkLabel *unit, *told;
  gboolean filling;
};

G_DEFINE_FINAL_TYPE (TfConditionRow, tf_condition_row, GTK_TYPE_WIDGET)

/* In the order of TfIs. */
static const char *const is_words[]
    = { N_ ("at least"),    N_ ("at most"), N_ ("in size at most"), N_ ("in size at least"), N_ ("is"),
        N_ ("is not"), N_ ("is one of"), N_ ("is none of") };
static const TfIs number_is[] = { TF_IS_AT_LEAST, TF_IS_AT_MOST, TF_IS_WITHIN,  TF_IS_BEYOND,
                                  TF_IS_EQUALS,   TF_IS_NOT,     TF_IS_ONE_OF, TF_IS_NONE_OF };
static const TfIs text_is[] = { TF_IS_EQUALS, TF_IS_NOT, TF_IS_ONE_OF, TF_IS_NONE_OF };
static const TfIs time_is[] = { TF_IS_AT_LEAST, TF_IS_AT_MOST };
static const TfIs bool_is[] = { TF_IS_EQUALS };

static const TfColumn *
column_of (TfConditionRow *self)
{
  return &tf_columns[gtk_drop_down_get_selected (self->column)];
}

static guint
comparisons_of (const TfColumn *column, const TfIs **is)
{
  gboolean time = strcmp (column->name, "time") == 0;
  *is = time                                ? time_is
        : column->type == TF_COLUMN_TEXT    ? text_is
        : column->type == TF_COLUMN_BOOL    ? bool_is
                                            : number_is;
  return time                             ? G_N_ELEMENTS (time_is)
         : column->type == TF_COLUMN_TEXT ? G_N_ELEMENTS (text_is)
         : column->type == TF_COLUMN_BOOL ? G_N_ELEMENTS (bool_is)
                                          : G_N_ELEMENTS (number_is);
}

static TfIs
is_of (TfConditionRow *self)
{
  const TfIs *is;
  guint n = comparisons_of (column_of (self), &is), at = gtk_drop_down_get_selected (self->is);
  return is[MIN (at, n - 1)];
}

static const char *
unit_of (const TfColumn *column)
{
  static const char *const units[][2] = {
    { "_deg", "°" }, { "_mx", "Mx" }, { "_gauss", "G" }, { "_mm", "Mm" }, { "_msh", "µ hem." },
  };
  for (guint k = 0; k < G_N_ELEMENTS (units); k++)
    if (g_str_has_suffix (column->name, units[k][0]))
      return units[k][1];
  return strcmp (column->name, "time") == 0 ? "UTC" : "";
}

/* -- the condition it says ------------------------------------------------------------------------- */

static void
add_value (JsonBuilder *builder, const TfColumn *column, const char *text, gboolean *good)
{
  g_autofree char *own = g_strdup (text);
  double number = NAN;
  g_strstrip (own);
  *good = *good && *own != '\0';
  if (column->type == TF_COLUMN_TEXT)
    json_builder_add_string_value (builder, own);
  else
    {
      *good = *good && tf_number_read (own, &number);
      json_builder_add_double_value (builder, *good ? number : 0);
    }
}

static gboolean
build_value (TfConditionRow *self, JsonBuilder *builder, TfIs is)
{
  const TfColumn *column = column_of (self);
  const char *text = gtk_editable_get_text (self->value);
  gboolean good = TRUE;
  if (column->type == TF_COLUMN_BOOL)
    {
      json_builder_add_boolean_value (builder, gtk_drop_down_get_selected (self->yes) == 0);
      return TRUE;
    }
  if (is != TF_IS_ONE_OF && is != TF_IS_NONE_OF)
    {
      add_value (builder, column, text, &good);
      return good && (strcmp (column->name, "time") != 0 || tf_time_is_known (tf_time_read (text)));
    }
  g_auto (GStrv) parts = g_strsplit (text, ",", -1);
  json_builder_begin_array (builder);
  for (guint k = 0; parts[k] != NULL; k++)
    add_value (builder, column, parts[k], &good);
  json_builder_end_array (builder);
  return good && parts[0] != NULL;
}

TfCondition *
tf_condition_row_dup (TfConditionRow *self)
{
  g_return_val_if_fail (TF_IS_CONDITION_ROW (self), NULL);
  TfIs is = is_of (self);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  json_builder_set_member_name (builder, "column");
  json_builder_add_string_value (builder, column_of (self)->name);
  json_builder_set_member_name (builder, "is");
  json_builder_add_string_value (builder, tf_is_names[is]);
  json_builder_set_member_name (builder, "value");
  gboolean good = build_value (self, builder, is);
  json_builder_end_object (builder);
  g_autoptr (JsonNode) node = json_builder_get_root (builder);
  return good ? tf_condition_read (node, "", NULL) : NULL;
}

static void
tell (TfConditionRow *self, const char *text, gboolean wrong)
{
  gtk_label_set_label (self->told, text);
  gtk_widget_set_visible (GTK_WIDGET (self->told), *text != '\0');
  (wrong ? gtk_widget_add_css_class : gtk_widget_remove_css_class) (GTK_WIDGET (self->told), "caution");
}

static const char *
lack_of (TfConditionRow *self)
{
  const TfColumn *column = column_of (self);
  TfIs is = is_of (self);
  if (*gtk_editable_get_text (self->value) == '\0')
    return _ ("No value yet: nothing is left out.");
  if (strcmp (column->name, "time") == 0)
    return _ ("A time is written 2012-06-30, or 2012-06-30T12:00:00.");
  if (is == TF_IS_ONE_OF || is == TF_IS_NONE_OF)
    return _ ("Values are parted by commas.");
  return _ ("This is no number; the point is “.”, and 1e21 is one.");
}

void
tf_condition_row_tell (TfConditionRow *self, guint left_out, guint lacking)
{
  g_return_if_fail (TF_IS_CONDITION_ROW (self));
  g_autofree char *text
      = lacking > 0 ? g_strdup_printf (_ ("leaves out %u; %u lack it and pass"), left_out, lacking)
                    : g_strdup_printf (_ ("leaves out %u"), left_out);
  tell (self, text, FALSE);
}

static void
changed (TfConditionRow *self)
{
  if (self->filling)
    return;
  g_autoptr (TfCondition) condition = tf_condition_row_dup (self);
  tell (self, condition == NULL ? lack_of (self) : "", condition == NULL);
  g_signal_emit_by_name (self, "changed");
}

/* -- pickers ------------------------------------------------------------------------------------------ */

/* Comparisons and value as the column has them. */
static void
suit_column (TfConditionRow *self)
{
  const TfColumn *column = column_of (self);
  const TfIs *is;
  guint n = comparisons_of (column, &is);
  g_autoptr (GtkStringList) words = gtk_string_list_new (NULL);
  gboolean filling = self->filling, yes = column->type == TF_COLUMN_BOOL;
  for (guint k = 0; k < n; k++)
    gtk_string_list_append (words, _ (is_words[is[k]]));
  self->filling = TRUE;
  gtk_drop_down_set_model (self->is, G_LIST_MODEL (words));
  self->filling = filling;
  gtk_label_set_label (self->unit, unit_of (column));
  gtk_widget_set_visible (GTK_WIDGET (self->value), !yes);
  gtk_widget_set_visible (GTK_WIDGET (self->yes), yes);
  gtk_widget_set_tooltip_text (self->box, column->description);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self->column), GTK_ACCESSIBLE_PROPERTY_DESCRIPTION,
                                  column->description, -1);
}

static void
column_chosen (TfConditionRow *self)
{
  if (self->filling)
    return;
  suit_column (self);
  changed (self);
}

static void
set_up_name (GtkSignalListItemFactory *factory, GtkListItem *item, gpointer whole)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 0);
  for (int line = 0; line < (whole != NULL ? 2 : 1); line++)
    {
      GtkWidget *label = gtk_label_new (NULL);
      gtk_label_set_xalign (GTK_LABEL (label), 0);
      if (whole == NULL)
        gtk_label_set_ellipsize (GTK_LABEL (label), PANGO_ELLIPSIZE_END);
      if (line == 1)
        {
          gtk_widget_add_css_class (label, "caption");
          gtk_widget_add_css_class (label, "dim-label");
        }
      gtk_box_append (GTK_BOX (box), label);
    }
  gtk_list_item_set_child (item, box);
}

static void
bind_name (GtkSignalListItemFactory *factory, GtkListItem *item, gpointer whole)
{
  GtkStringObject *object = gtk_list_item_get_item (item);
  GtkWidget *label = gtk_widget_get_first_child (gtk_list_item_get_child (item));
  const TfColumn *column = tf_column_find (gtk_string_object_get_string (object));
  gtk_label_set_label (GTK_LABEL (label), column->name);
  if (whole != NULL)
    gtk_label_set_label (GTK_LABEL (gtk_widget_get_next_sibling (label)), column->description);
}

static GtkListItemFactory *
factory_new (gboolean whole)
{
  GtkListItemFactory *factory = gtk_signal_list_item_factory_new ();
  g_signal_connect (factory, "setup", G_CALLBACK (set_up_name), GINT_TO_POINTER (whole));
  g_signal_connect (factory, "bind", G_CALLBACK (bind_name), GINT_TO_POINTER (whole));
  return factory;
}

/* By name; typed letters find a column, with its description beside it. */
static GtkWidget *
new_columns (TfConditionRow *self)
{
  GtkStringList *names = gtk_string_list_new (NULL);
  for (const TfColumn *column = tf_columns; column->name != NULL; column++)
    gtk_string_list_append (names, column->name);
  GtkExpression *name = gtk_property_expression_new (GTK_TYPE_STRING_OBJECT, NULL, "string");
  GtkWidget *choice = gtk_drop_down_new (G_LIST_MODEL (names), name);
  g_autoptr (GtkListItemFactory) brief = factory_new (FALSE), whole = factory_new (TRUE);
  gtk_drop_down_set_factory (GTK_DROP_DOWN (choice), brief);
  gtk_drop_down_set_list_factory (GTK_DROP_DOWN (choice), whole);
  gtk_drop_down_set_enable_search (GTK_DROP_DOWN (choice), TRUE);
  gtk_widget_set_hexpand (choice, TRUE);
  return choice;
}

static void
name_it (GtkWidget *widget, const char *name)
{
  gtk_accessible_update_property (GTK_ACCESSIBLE (widget), GTK_ACCESSIBLE_PROPERTY_LABEL, name, -1);
  tf_widget_name_inside (widget, name);
}

static void
removed (TfConditionRow *self)
{
  g_signal_emit_by_name (self, "removed");
}

static GtkWidget *
new_upper (TfConditionRow *self)
{
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 4);
  GtkWidget *column = new_columns (self), *remove = gtk_button_new_from_icon_name ("list-remove-symbolic");
  self->column = GTK_DROP_DOWN (column);
  name_it (column, _ ("Column of the condition"));
  name_it (remove, _ ("Remove the condition"));
  gtk_widget_set_tooltip_text (remove, _ ("Remove the condition"));
  gtk_widget_add_css_class (remove, "flat");
  g_signal_connect_swapped (column, "notify::selected", G_CALLBACK (column_chosen), self);
  g_signal_connect_swapped (remove, "clicked", G_CALLBACK (removed), self);
  gtk_box_append (GTK_BOX (box), column);
  gtk_box_append (GTK_BOX (box), remove);
  return box;
}

static GtkWidget *
new_lower (TfConditionRow *self)
{
  const char *const yes_no[] = { _ ("yes"), _ ("no"), NULL };
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_HORIZONTAL, 4);
  self->is = GTK_DROP_DOWN (gtk_drop_down_new_from_strings ((const char *const[]){ NULL }));
  self->yes = GTK_DROP_DOWN (gtk_drop_down_new_from_strings (yes_no));
  self->value = GTK_EDITABLE (gtk_entry_new ());
  self->unit = GTK_LABEL (gtk_label_new (NULL));
  gtk_editable_set_width_chars (self->value, 5);
  gtk_editable_set_max_width_chars (self->value, 8);
  gtk_widget_set_hexpand (GTK_WIDGET (self->value), TRUE);
  name_it (GTK_WIDGET (self->is), _ ("Comparison of the condition"));
  name_it (GTK_WIDGET (self->yes), _ ("Value of the condition"));
  name_it (GTK_WIDGET (self->value), _ ("Value of the condition"));
  g_signal_connect_swapped (self->is, "notify::selected", G_CALLBACK (changed), self);
  g_signal_connect_swapped (self->yes, "notify::selected", G_CALLBACK (changed), self);
  g_signal_connect_swapped (self->value, "changed", G_CALLBACK (changed), self);
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->is));
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->value));
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->yes));
  gtk_box_append (GTK_BOX (box), GTK_WIDGET (self->unit));
  return box;
}

void
tf_condition_row_focus (TfConditionRow *self)
{
  gtk_widget_grab_focus (GTK_WIDGET (self->column));
}

/* -- the widget ------------------------------------------------------------------------------------- */

static char *
dup_value (const TfCondition *condition)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < condition->n; k++)
    {
      g_autofree char *number
          = condition->texts[k] == NULL ? tf_number_dup_form (condition->numbers[k], ".12g", FALSE) : NULL;
      g_string_append_printf (text, "%s%s", k > 0 ? ", " : "",
                              number != NULL ? number : condition->texts[k]);
    }
  return g_string_free (text, FALSE);
}

static void
fill (TfConditionRow *self, const TfCondition *condition)
{
  const TfIs *is;
  self->filling = TRUE;
  gtk_drop_down_set_selected (self->column, (guint)(condition->column - tf_columns));
  suit_column (self);
  guint n = comparisons_of (condition->column, &is);
  for (guint k = 0; k < n; k++)
    if (is[k] == condition->is)
      gtk_drop_down_set_selected (self->is, k);
  g_autofree char *value = dup_value (condition);
  if (condition->column->type == TF_COLUMN_BOOL)
    gtk_drop_down_set_selected (self->yes, condition->numbers[0] > 0.5 ? 0 : 1);
  else
    gtk_editable_set_text (self->value, value);
  self->filling = FALSE;
}

static void
dispose (GObject *object)
{
  g_clear_pointer (&TF_CONDITION_ROW (object)->box, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_condition_row_parent_class)->dispose (object);
}

static void
tf_condition_row_class_init (TfConditionRowClass *klass)
{
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (GTK_WIDGET_CLASS (klass), GTK_TYPE_BIN_LAYOUT);
  g_signal_new ("changed", TF_TYPE_CONDITION_ROW, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE,
                0);
  g_signal_new ("removed", TF_TYPE_CONDITION_ROW, G_SIGNAL_RUN_LAST, 0, NULL, NULL, NULL, G_TYPE_NONE,
                0);
}

static void
tf_condition_row_init (TfConditionRow *self)
{
  self->filling = TRUE;
  self->box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);
  self->told = GTK_LABEL (gtk_label_new (NULL));
  gtk_label_set_xalign (self->told, 0);
  gtk_label_set_wrap (self->told, TRUE);
  gtk_widget_add_css_class (GTK_WIDGET (self->told), "caption");
  gtk_box_append (GTK_BOX (self->box), new_upper (self));
  gtk_box_append (GTK_BOX (self->box), new_lower (self));
  gtk_box_append (GTK_BOX (self->box), GTK_WIDGET (self->told));
  gtk_widget_set_parent (self->box, GTK_WIDGET (self));
  tell (self, "", FALSE);
}

GtkWidget *
tf_condition_row_new (const TfCondition *condition)
{
  TfConditionRow *self = g_object_new (TF_TYPE_CONDITION_ROW, NULL);
  if (condition != NULL)
    fill (self, condition);
  else
    {
      gtk_drop_down_set_selected (self->column, (guint)(tf_column_find ("separation_deg") - tf_columns));
      suit_column (self);
      self->filling = FALSE;
      tell (self, lack_of (self), TRUE);
    }
  return GTK_WIDGET (self);
}
