/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-list.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-sheet-words.h"

/* -- one row in words --------------------------------------------------------------------------- */

#define TF_TYPE_LISTED (tf_listed_get_type ())
G_DECLARE_FINAL_TYPE (TfListed, tf_listed, TF, LISTED, GObject)

struct _TfListed
{
  GObject parent;
  char *heading; /* NULL: the group goes on */
  char *name;
  char *lines; /* a line each */
  gboolean stands_out; /* new, or not found */
  gint64 mark;
  gboolean is_hint;
};

G_DEFINE_FINAL_TYPE (TfListed, tf_listed, G_TYPE_OBJECT)

static void
listed_finalize (GObject *object)
{
  TfListed *self = TF_LISTED (object);
  g_free (self->heading);
  g_free (self->name);
  g_free (self->lines);
  G_OBJECT_CLASS (tf_listed_parent_class)->finalize (object);
}

static void
tf_listed_class_init (TfListedClass *klass)
{
  G_OBJECT_CLASS (klass)->finalize = listed_finalize;
}

static void
tf_listed_init (TfListed *self)
{
}

static void
add (GString *text, const char *line)
{
  if (line != NULL && *line != '\0')
    g_string_append_printf (text, "%s%s", text->len > 0 ? "\n" : "", line);
}

static void
add_seen (GString *text, const TfShiftRow *row, TfTime now)
{
  g_autofree char *age = tf_shift_dup_age (
      now.s - (row->seen == TF_SEEN_DUE ? row->crosses.s
               : row->seen == TF_SEEN_NOT ? row->flux_mx.now_time.s
                                          : row->first.s));
  g_autofree char *line = NULL;
  if (row->seen == TF_SEEN_DUE)
    line = g_strdup_printf (_ ("at the east limb %s"), age);
  else if (row->seen == TF_SEEN_NOT)
    line = g_strdup_printf (_ ("not found; last seen %s"), age);
  else if (row->seen == TF_SEEN_HINT && row->region != 0)
    line = g_strdup (_ ("recognised: a hint lies there"));
  else if (row->seen == TF_SEEN_HINT && !row->is_new && row->first.s < now.s)
    line = g_strdup_printf (_ ("unmarked, first seen %s"), age);
  add (text, line);
}

static void
add_change (GString *text, const TfShiftRow *row, TfUnits units)
{
  g_autofree char *flux = tf_sheet_dup_change (&row->flux_mx), *area = tf_sheet_dup_change (&row->area_msh);
  g_autofree char *line = NULL;
  if (row->floors_differ)
    line = g_strdup (_ ("flux not compared: other floor"));
  else if (*flux != '\0')
    line = g_strdup_printf (_ ("flux %s, area %s"), flux, area);
  else if (isfinite (row->flux_mx.now))
    line = tf_units_dup_flux (units, row->flux_mx.now);
  add (text, line);
}

static void
add_others (GString *text, const TfShiftRow *row)
{
  g_autofree char *said = tf_sheet_dup_others (row->others);
  add (text, said);
  for (guint k = 0; k < row->proposed->len; k++)
    {
      const TfOthers *others = g_ptr_array_index (row->proposed, k);
      g_autofree char *what = tf_sheet_dup_others (others);
      g_autofree char *line = g_strdup_printf (
          others->sharing > 1 ? _ ("one of several here? %s, %.1f° apart") : _ ("is it %s? %.1f° apart"), what,
          others->apart_deg);
      add (text, line);
    }
}

static void
add_notes (GString *text, const TfShiftRow *row, TfTime since)
{
  static const char *const states[] = { N_ ("note"), N_ ("carried over"), N_ ("settled") };
  for (guint k = 0; k < row->notes->len; k++)
    {
      const TfRegionNote *note = g_ptr_array_index (row->notes, k);
      g_autofree char *line
          = g_strdup_printf ("%s (%s): %s", _ (states[tf_shift_note_state (note, since)]), note->person, note->text);
      add (text, line);
    }
}

static char *
dup_lines (const TfShiftRow *row, const TfShift *shift, TfUnits units)
{
  GString *text = g_string_new (NULL);
  g_autofree char *mw = tf_sheet_dup_class (row), *r = tf_sheet_dup_r (row, shift->time);
  gboolean due = row->seen == TF_SEEN_DUE;
  if (*row->class_now != '\0' || *row->class_before != '\0')
    add (text, mw);
  g_autofree char *tangle = isfinite (row->r_mx.now) ? g_strdup_printf (row->r_mx.now > 0 ? _ ("log R %s") : "%s", r)
                                                     : g_strdup (_ ("R not measured at μ ≥ 0.7"));
  if (!due)
    add (text, tangle);
  if (row->delta_candidate)
    add (text, _ ("δ candidate"));
  add_change (text, row, units);
  add_seen (text, row, shift->time);
  add_others (text, row);
  add_notes (text, row, shift->since);
  return g_string_free (text, FALSE);
}

static TfListed *
listed_new (const TfShiftRow *row, const TfShift *shift, gboolean first, TfUnits units)
{
  TfListed *item = g_object_new (TF_TYPE_LISTED, NULL);
  g_autofree char *place = isfinite (row->cmd_deg) ? tf_chart_dup_place (row->lat_deg, row->cmd_deg) : g_strdup ("");
  const char *dash = strrchr (row->number, '-');
  const char *name = *row->number == '\0' ? (row->is_new ? _ ("new") : _ ("hint")) : dash != NULL ? dash + 1 : row->number;
  item->heading = first ? g_strdup (tf_shift_group_title (row->group)) : NULL;
  item->name = g_strdup_printf ("%s  %s", name, place);
  item->lines = dup_lines (row, shift, units);
  item->stands_out = row->is_new || row->seen == TF_SEEN_NOT;
  item->mark = row->mark;
  item->is_hint = row->is_hint;
  return item;
}

/* -- the widget --------------------------------------------------------------------------------- */

struct _TfList
{
  GtkWidget parent;
  GtkLabel *head, *empty;
  GtkStack *stack;
  GtkListBox *box;
  TfSession *session;
  GListStore *rows;
  gboolean following; /* the selection is being set from the session */
};

G_DEFINE_FINAL_TYPE (TfList, tf_list, GTK_TYPE_WIDGET)

static GtkWidget *
label_new (const char *text, const char *css)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), 0);
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_label_set_wrap_mode (GTK_LABEL (label), PANGO_WRAP_WORD_CHAR);
  gtk_label_set_width_chars (GTK_LABEL (label), 12);
  gtk_label_set_max_width_chars (GTK_LABEL (label), 12);
  gtk_widget_add_css_class (label, css);
  return label;
}

static GtkWidget *
make_row (gpointer item, gpointer list)
{
  const TfListed *listed = item;
  GtkWidget *box = gtk_box_new (GTK_ORIENTATION_VERTICAL, 2);
  if (listed->heading != NULL)
    gtk_box_append (GTK_BOX (box), label_new (listed->heading, "roll-day"));
  GtkWidget *name = label_new (listed->name, "heading");
  if (listed->stands_out)
    gtk_widget_add_css_class (name, "needs-attention");
  gtk_box_append (GTK_BOX (box), name);
  GtkWidget *lines = label_new (listed->lines, "caption");
  gtk_widget_add_css_class (lines, "dim-label");
  gtk_box_append (GTK_BOX (box), lines);
  gtk_widget_add_css_class (box, "listed");
  GtkWidget *row = gtk_list_box_row_new ();
  gtk_list_box_row_set_child (GTK_LIST_BOX_ROW (row), box);
  g_autofree char *said = g_strdup_printf ("%s. %s", listed->name, listed->lines);
  gtk_accessible_update_property (GTK_ACCESSIBLE (row), GTK_ACCESSIBLE_PROPERTY_LABEL, said, -1);
  return row;
}

static TfListed *
get_listed (TfList *self, int k)
{
  TfListed *item = k >= 0 ? g_list_model_get_item (G_LIST_MODEL (self->rows), (guint)k) : NULL;
  if (item != NULL)
    g_object_unref (item); /* the list holds it */
  return item;
}

static void
choice_changed (TfList *self)
{
  const TfShiftRow *row = tf_session_get_shift_row (self->session);
  const TfShift *shift = tf_session_get_shift (self->session);
  GtkListBoxRow *found = NULL;
  for (guint k = 0; row != NULL && k < shift->rows->len; k++)
    if (g_ptr_array_index (shift->rows, k) == row)
      found = gtk_list_box_get_row_at_index (self->box, (int)k);
  self->following = TRUE;
  if (found != NULL)
    gtk_list_box_select_row (self->box, found);
  else
    gtk_list_box_unselect_all (self->box);
  self->following = FALSE;
}

static void
show_head (TfList *self, const TfShift *shift)
{
  g_autofree char *iso = tf_sheet_dup_time (shift->time);
  g_autofree char *news
      = shift->compared ? g_strdup_printf (_ ("%u new"), shift->n_new) : g_strdup (_ ("no frame of the days before to compare with"));
  g_autofree char *beside
      = shift->unmatched->len > 0
            ? g_strdup_printf (ngettext ("\n%u listed by others is not here", "\n%u listed by others are not here", shift->unmatched->len),
                               shift->unmatched->len)
            : g_strdup ("");
  g_autofree char *text = g_strdup_printf ("%s\n%s%s", iso, news, beside);
  gtk_label_set_label (self->head, text);
}

static void
shift_changed (TfList *self)
{
  const TfShift *shift = tf_session_get_shift (self->session);
  self->following = TRUE;
  g_list_store_remove_all (self->rows);
  for (guint k = 0; shift != NULL && k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      const TfShiftRow *before = k > 0 ? g_ptr_array_index (shift->rows, k - 1) : NULL;
      g_autoptr (TfListed) item = listed_new (row, shift, before == NULL || before->group != row->group,
                                              tf_session_get_units (self->session));
      g_list_store_append (self->rows, item);
    }
  self->following = FALSE;
  gtk_widget_set_visible (GTK_WIDGET (self->head), shift != NULL);
  if (shift != NULL)
    show_head (self, shift);
  gtk_stack_set_visible_child_name (self->stack, shift != NULL && shift->rows->len > 0 ? "list" : "empty");
  gtk_label_set_label (self->empty, shift != NULL ? _ ("No region is known or suggested on this frame.")
                                                  : _ ("The list is made of a ledger and a frame of the disk."));
  choice_changed (self);
}

static void
selected (GtkListBox *box, GtkListBoxRow *row, TfList *self)
{
  TfListed *item = row != NULL ? get_listed (self, gtk_list_box_row_get_index (row)) : NULL;
  if (!self->following && item != NULL)
    tf_session_choose_mark (self->session, item->mark, item->is_hint);
}

static void
activated (GtkListBox *box, GtkListBoxRow *row, TfList *self)
{
  TfListed *item = get_listed (self, gtk_list_box_row_get_index (row));
  if (item != NULL && tf_session_choose_mark (self->session, item->mark, item->is_hint))
    gtk_widget_activate_action (GTK_WIDGET (self), "win.close-look", NULL);
}

char *
tf_list_dup_row_text (TfList *self, guint k)
{
  TfListed *item = get_listed (self, (int)k);
  return item != NULL ? g_strdup_printf ("%s%s%s\n%s", item->heading != NULL ? item->heading : "",
                                         item->heading != NULL ? "\n" : "", item->name, item->lines)
                      : NULL;
}

void
tf_list_set_session (TfList *self, TfSession *session)
{
  g_return_if_fail (TF_IS_LIST (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  g_signal_connect_object (session, "shift-changed", G_CALLBACK (shift_changed), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (choice_changed), self, G_CONNECT_SWAPPED);
  shift_changed (self);
}

static void
dispose (GObject *object)
{
  TfList *self = TF_LIST (object);
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (self));
  g_clear_pointer (&child, gtk_widget_unparent);
  g_clear_object (&self->rows);
  g_clear_object (&self->session);
  G_OBJECT_CLASS (tf_list_parent_class)->dispose (object);
}

static void
tf_list_class_init (TfListClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_css_name (widget, "regions");
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/list.ui");
  gtk_widget_class_bind_template_child (widget, TfList, head);
  gtk_widget_class_bind_template_child (widget, TfList, empty);
  gtk_widget_class_bind_template_child (widget, TfList, stack);
  gtk_widget_class_bind_template_child (widget, TfList, box);
}

static void
tf_list_init (TfList *self)
{
  self->rows = g_list_store_new (TF_TYPE_LISTED);
  gtk_widget_init_template (GTK_WIDGET (self));
  gtk_list_box_bind_model (self->box, G_LIST_MODEL (self->rows), make_row, self, NULL);
  g_signal_connect (self->box, "row-selected", G_CALLBACK (selected), self);
  g_signal_connect (self->box, "row-activated", G_CALLBACK (activated), self);
}
