/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-plate-pane.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-widget-style.h"

struct _TfPlatePane
{
  GtkWidget parent;
  TfPlate *plate;
  GtkLabel *readout, *trouble, *tool_words;
  GtkWidget *tools, *over_progress, *trouble_box, *lies_box, *find_moved;
  GtkLabel *lies;
  gint64 left; /* frame whose header may lie: the person has seen it and left it */
  GtkBox *foot;
  GtkLabel *progress_words;
  GtkProgressBar *progress;
  GtkButton *as_stored;
  GtkMenuButton *range_button;
  GtkScale *range;
  GtkLabel *range_words;
  TfSession *session;
  gboolean setting;
  guint delay; /* until the progress is shown */
};

G_DEFINE_FINAL_TYPE (TfPlatePane, tf_plate_pane, GTK_TYPE_WIDGET)

enum
{
  QUIET_MS = 400
};
static const double large_text = 19; /* px */

static char *
dup_range (TfPlatePane *self, double gauss)
{
  TfUnits units = self->session != NULL ? tf_session_get_units (self->session) : (TfUnits){ { 0 } };
  g_autofree char *field = tf_units_dup_field (units, gauss, 0);
  return g_strconcat ("± ", field, NULL);
}

static void
view_changed (TfPlatePane *self)
{
  double gauss = tf_session_get_range (self->session);
  g_autofree char *text = dup_range (self, gauss);
  gtk_label_set_label (self->range_words, text);
  self->setting = TRUE;
  gtk_range_set_value (GTK_RANGE (self->range), log10 (gauss));
  self->setting = FALSE;
}

static void
range_moved (TfPlatePane *self)
{
  if (!self->setting && self->session != NULL)
    tf_session_set_range (self->session, pow (10, gtk_range_get_value (GTK_RANGE (self->range))));
}

static char *
format_range (GtkScale *scale, double value, TfPlatePane *self)
{
  return dup_range (self, pow (10, value));
}

static void
readout_changed (TfPlatePane *self)
{
  gtk_label_set_label (self->readout, tf_plate_get_readout (self->plate));
}

static gboolean
show_progress (gpointer data)
{
  TfPlatePane *self = data;
  self->delay = 0;
  gtk_widget_set_visible (self->over_progress, TRUE);
  return G_SOURCE_REMOVE;
}

/* Work shorter than half a second says nothing. */
static void
status_changed (TfPlatePane *self)
{
  double share;
  const char *words = tf_session_get_progress (self->session, &share);
  if (words == NULL)
    {
      g_clear_handle_id (&self->delay, g_source_remove);
      gtk_widget_set_visible (self->over_progress, FALSE);
      return;
    }
  gtk_label_set_label (self->progress_words, words);
  if (share >= 0)
    gtk_progress_bar_set_fraction (self->progress, share);
  gtk_widget_set_visible (GTK_WIDGET (self->progress), share >= 0);
  if (!gtk_widget_get_visible (self->over_progress) && self->delay == 0)
    self->delay = g_timeout_add (QUIET_MS, show_progress, self);
}

/* The person is asked where the pixels and the header part by more than a frame can be used with. */
static void
show_lie (TfPlatePane *self)
{
  static const char *const codes[] = { "header-lies", "header-of-another-size" };
  TfFrame *frame = tf_session_get_frame (self->session);
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  TfCorrection own = tf_session_get_correction (self->session),
               tried = tf_session_get_preview (self->session);
  const TfNote *lie = NULL;
  for (guint k = 0; frame != NULL && k < G_N_ELEMENTS (codes) && lie == NULL; k++)
    lie = tf_notes_find (tf_frame_get_cautions (frame), codes[k]);
  gboolean ask = lie != NULL && item != NULL && !tf_correction_is_set (&own)
                 && tf_frame_item_get_row (item)->id != self->left
                 && tf_session_can_correct (self->session) && !tf_correction_is_set (&tried);
  gtk_widget_set_visible (self->lies_box, ask);
  if (!ask)
    return;
  g_autofree char *text = tf_note_dup_text (lie, FALSE);
  gtk_label_set_label (self->lies, text);
}

static void
leave_lie (TfPlatePane *self)
{
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  self->left = item != NULL ? tf_frame_item_get_row (item)->id : 0;
  show_lie (self);
}

static void
frame_changed (TfPlatePane *self)
{
  show_lie (self);
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  const char *problem = tf_session_get_frame_problem (self->session);
  if (item != NULL && problem != NULL && tf_frame_item_get_row (item)->refusal != NULL)
    problem = tf_frame_item_get_row (item)->refusal; /* without the path */
  const char *text
      = item == NULL ? _ ("Choose a frame in the roll, or drop frames here.") : problem;
  gboolean open = tf_session_get_frame (self->session) != NULL;
  gtk_widget_set_visible (self->trouble_box,
                          text != NULL && !open && !tf_session_is_loading (self->session));
  gtk_label_set_label (self->trouble, text != NULL ? text : "");
  gtk_widget_set_visible (self->find_moved, tf_session_is_file_missing (self->session));
  gtk_widget_set_visible (self->tools, open);
  gboolean map = open && tf_geometry_is_map (tf_frame_get_geometry (tf_session_get_frame (self->session)));
  gtk_button_set_label (self->as_stored, map ? _ ("map") : _ ("disk"));
  gtk_widget_set_tooltip_text (GTK_WIDGET (self->as_stored),
                               map ? _ ("The map as stored") : _ ("As observed"));
  status_changed (self);
}

static const char *
words_of (TfTool tool)
{
  switch (tool)
    {
    case TF_TOOL_OUTLINE:
      return _ ("Draw round the region with the button held. Esc puts the tool away.");
    case TF_TOOL_POLYGON:
      return _ ("Click the corners, or move with the arrow keys and press Space. Enter closes, "
                "Ctrl+Z takes the last one back.");
    case TF_TOOL_BRUSH_IN:
      return _ ("Brush in with the button held, or Space at the cross. [ and ], or Ctrl and the wheel, change its size.");
    case TF_TOOL_BRUSH_OUT:
      return _ ("Brush out with the button held, or Space at the cross. [ and ], or Ctrl and the wheel, change its size.");
    case TF_TOOL_SPLIT:
      return _ ("Draw a line right across, or click its two ends.");
    case TF_TOOL_LEAVE_OUT:
      return _ ("Draw round what is to be left out, or click its corners and press Enter.");
    case TF_TOOL_CORNERS:
      return _ ("Drag a corner; click an edge to put one in, Delete takes one away. Keys: . and , "
                "choose, arrows move.");
    case TF_TOOL_PIN:
      return _ ("Click where the pole is, or go there with the arrow keys and press Space.");
    case TF_TOOL_JOIN:
      return _ ("Choose the one to join with: click it, or . for hints, U for marks.");
    case TF_TOOL_NONE:
    default:
      return NULL;
    }
}

static void
choice_changed (TfPlatePane *self)
{
  const char *words = words_of (tf_session_get_tool (self->session));
  if (words == NULL && tf_session_get_other_half (self->session) != NULL)
    words = _ ("Two halves: K keeps both, Ctrl+Z or Esc takes the split back.");
  else if (words == NULL && tf_session_get_draft (self->session) != NULL)
    words = _ ("A draft: K keeps it as a mark, Esc discards it.");
  gtk_widget_set_visible (GTK_WIDGET (self->tool_words), words != NULL);
  gtk_label_set_label (self->tool_words, words != NULL ? words : "");
}

void
tf_plate_pane_set_session (TfPlatePane *self, TfSession *session)
{
  g_return_if_fail (TF_IS_PLATE_PANE (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  tf_plate_set_session (self->plate, session);
  g_signal_connect_object (session, "view-changed", G_CALLBACK (view_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "status-changed", G_CALLBACK (status_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (frame_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (choice_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (show_lie), self,
                           G_CONNECT_SWAPPED);
  view_changed (self);
  frame_changed (self);
  choice_changed (self);
}

TfPlate *
tf_plate_pane_get_plate (TfPlatePane *self)
{
  return self->plate;
}

static void
dispose (GObject *object)
{
  TfPlatePane *self = TF_PLATE_PANE (object);
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (self));
  g_clear_handle_id (&self->delay, g_source_remove);
  g_clear_object (&self->session);
  g_clear_pointer (&child, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_plate_pane_parent_class)->dispose (object);
}

static void
tf_plate_pane_class_init (TfPlatePaneClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  g_type_ensure (TF_TYPE_PLATE);
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/plate-pane.ui");
  gtk_widget_class_bind_template_child (widget, TfPlatePane, plate);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, readout);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, foot);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, tools);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, tool_words);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, trouble_box);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, trouble);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, over_progress);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, progress_words);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, progress);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, range_button);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, as_stored);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, lies_box);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, find_moved);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, lies);
  gtk_widget_class_bind_template_callback (widget, leave_lie);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, range_words);
  gtk_widget_class_bind_template_child (widget, TfPlatePane, range);
  gtk_widget_class_bind_template_callback (widget, range_moved);
}

/* With large text the read-out stands over the controls. */
static void
text_changed (TfPlatePane *self)
{
  gboolean large = tf_widget_text_size (GTK_WIDGET (self)) > large_text;
  gtk_orientable_set_orientation (GTK_ORIENTABLE (self->foot),
                                  large ? GTK_ORIENTATION_VERTICAL : GTK_ORIENTATION_HORIZONTAL);
  gtk_label_set_single_line_mode (self->readout, !large);
  gtk_label_set_wrap (self->readout, large);
  gtk_label_set_lines (self->readout, large ? 2 : -1);
}

static void
tf_plate_pane_init (TfPlatePane *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
  GtkSettings *settings = gtk_widget_get_settings (GTK_WIDGET (self));
  g_signal_connect_object (settings, "notify::gtk-xft-dpi", G_CALLBACK (text_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (settings, "notify::gtk-font-name", G_CALLBACK (text_changed), self,
                           G_CONNECT_SWAPPED);
  text_changed (self);
  gtk_scale_set_format_value_func (
      self->range, (GtkScaleFormatValueFunc)(void (*) (void))format_range, self, NULL);
  g_signal_connect_object (self->plate, "notify::readout", G_CALLBACK (readout_changed), self,
                           G_CONNECT_SWAPPED);
  readout_changed (self);
  gtk_accessible_update_property (GTK_ACCESSIBLE (self), GTK_ACCESSIBLE_PROPERTY_LABEL,
                                  _ ("Plate with its tools"), -1);
}
