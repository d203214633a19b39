/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-frame.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-how.h"
#include "tf-slip-words.h"

struct _TfSlipFrame
{
  GtkWidget parent;
  GtkLabel *title, *facts, *next, *cautions, *repairs, *geometry, *elsewhere, *witness;
  TfHow *facts_how;
  GtkWidget *repairs_box, *cautions_box, *geometry_box, *again;
  TfSession *session;
};

G_DEFINE_FINAL_TYPE (TfSlipFrame, tf_slip_frame, GTK_TYPE_WIDGET)

static char *
dup_sentences (const TfNotes *notes)
{
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    {
      g_autofree char *sentence = tf_note_dup_text (tf_notes_get (notes, k), FALSE);
      g_string_append_printf (text, "%s%s", k > 0 ? "\n\n" : "", sentence);
    }
  return g_string_free (text, FALSE);
}

static void
append_noise (GString *text, TfFrame *frame, TfUnits units)
{
  guint n;
  if (frame == NULL || tf_frame_get_noise (frame, &n) == NULL || n == 0)
    return;
  gboolean map = tf_geometry_is_map (tf_frame_get_geometry (frame));
  g_autofree char *noise = tf_units_dup_field (units, tf_frame_noise_at (frame, map ? 0 : 1), 1);
  g_string_append_printf (
      text, map ? _ ("\nnoise %s at the equator") : _ ("\nnoise %s at the disk’s centre"),
      noise);
}

static char *
dup_facts (const TfFrameRow *row, TfFrame *frame, TfUnits units)
{
  const TfFrameInfo *info = row->info;
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, "%s · %s", tf_kind_name (info->kind),
                          info->instrument != NULL ? info->instrument : "");
  if (info->geometry.width > 0)
    g_string_append_printf (text, _ ("\n%u × %u pixels"), info->geometry.width,
                            info->geometry.height);
  if (isfinite (info->geometry.observer.b0_deg) && !tf_geometry_is_map (&info->geometry))
    {
      g_autofree char *code = tf_observer_dup_vantage (&info->geometry.observer);
      const char *vantage = strcmp (code, "earth") == 0 ? _ ("the Earth") : code;
      g_autofree char *b0 = tf_words_dup_signed (info->geometry.observer.b0_deg, 2);
      g_autofree char *l0 = tf_words_dup_number (info->geometry.observer.carrington_lon_deg, 1);
      g_string_append_printf (text, _ ("\nseen from %s · B0 %s° · L0 %s°"), vantage, b0, l0);
    }
  static const char *const fields[]
      = { N_ ("field of unknown direction"), N_ ("line-of-sight field"), N_ ("radial field") };
  if (info->role == TF_ROLE_FIELD)
    g_string_append_printf (text, "\n%s", _ (fields[info->field]));
  append_noise (text, frame, units);
  if (info->simulated)
    g_string_append (text, _ ("\nsimulated: an invented Sun"));
  return g_string_free (text, FALSE);
}

/* How time, observer and noise were got. */
static char *
dup_how (const TfFrameInfo *info)
{
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("time: from %s"), info->time_source);
  if (!tf_geometry_is_map (&info->geometry))
    g_string_append_printf (text, _ ("\nobserver, B0, L0: %s; an observer the header gives is never "
                                     "replaced by the Earth"),
                            tf_observer_source_name (info->geometry.observer.source));
  if (info->role == TF_ROLE_FIELD)
    g_string_append (text, _ ("\nnoise: 1.4826 × the median absolute deviation of weak pixels, by "
                              "rings of μ (on maps by bands of latitude), without the wide edges of "
                              "plage; the header’s figure is not used"));
  return g_string_free (text, FALSE);
}

static const char *
next_step (TfSlipFrame *self)
{
  GListModel *regions = tf_session_get_regions (self->session);
  guint n = g_list_model_get_n_items (regions);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfRegionItem) item = g_list_model_get_item (regions, k);
      if (tf_region_item_get_row (item)->is_hint)
        return _ ("Press . for the next hint, then K to keep it or X to drop it. Press O and draw "
                  "round a region to mark it yourself.");
    }
  return n > 0 ? _ ("Click a region to see what is known of it. Press O and draw round another to "
                    "mark it.")
               : _ ("Press O and draw round a region, or P and click its corners. Its numbers "
                    "stand here while you draw.");
}

static void
set_section (GtkWidget *box, GtkLabel *label, char *text)
{
  gtk_label_set_label (label, text);
  gtk_widget_set_visible (box, text[0] != '\0');
  g_free (text);
}

static void
append_persons (GString *text, const TfFrameRow *row, const char *own)
{
  for (guint k = 0; row->geometries != NULL && k < row->geometries->len; k++)
    {
      const TfPersonGeometry *geometry = g_ptr_array_index (row->geometries, k);
      g_string_append_c (text, '\n');
      if (g_strcmp0 (geometry->person, own) == 0)
        g_string_append (text, _ ("corrected by you"));
      else
        g_string_append_printf (text, _ ("%s has a correction of their own"), geometry->person);
    }
}

/* An alarm stands out; that all is well, or that nothing can be said, is quiet. */
static void
show_witness (TfSlipFrame *self)
{
  const TfNote *note = tf_session_get_witness (self->session);
  gtk_widget_set_visible (GTK_WIDGET (self->witness), note != NULL);
  if (note == NULL)
    return;
  gboolean alarm = tf_note_get_level (note) == TF_NOTE_STRONG;
  g_autofree char *text = tf_note_dup_text (note, FALSE);
  gtk_label_set_label (self->witness, text);
  gtk_widget_remove_css_class (GTK_WIDGET (self->witness), alarm ? "dim-label" : "caution");
  gtk_widget_add_css_class (GTK_WIDGET (self->witness), alarm ? "caution" : "dim-label");
}

static void
show_geometry (TfSlipFrame *self, const TfFrameRow *row, TfFrame *frame)
{
  TfCorrection c = frame != NULL ? tf_correction_of (tf_frame_get_geometry (frame))
                                 : tf_correction_none ();
  gtk_widget_set_visible (self->geometry_box, tf_correction_is_set (&c));
  if (!tf_correction_is_set (&c))
    return;
  g_autofree char *x = tf_words_dup_number (c.centre_x, 1), *y = tf_words_dup_number (c.centre_y, 1),
                  *r = tf_words_dup_number (c.radius_px, 1),
                  *n = tf_words_dup_signed (c.north_angle_deg, 1);
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("centre %s, %s · radius %s pixels\nsolar north %s° from up"), x, y,
                          r, n);
  append_persons (text, row, tf_session_get_person (self->session));
  gtk_label_set_label (self->geometry, text->str);
  g_string_free (text, TRUE);
  guint k = tf_session_count_elsewhere (self->session);
  g_autofree char *words = g_strdup_printf (
      ngettext ("%u mark of yours was measured with another geometry than the one shown.",
                "%u marks of yours were measured with another geometry than the one shown.", k),
      k);
  gtk_label_set_label (self->elsewhere, words);
  gtk_widget_set_visible (GTK_WIDGET (self->elsewhere), k > 0);
  gtk_widget_set_visible (self->again, k > 0);
}

static void
show (TfSlipFrame *self)
{
  TfFrameItem *item = tf_session_get_frame_item (self->session);
  TfFrame *frame = tf_session_get_frame (self->session);
  gtk_widget_set_sensitive (GTK_WIDGET (self->facts_how), item != NULL);
  if (item == NULL)
    {
      gtk_label_set_label (self->title, _ ("No frame"));
      gtk_label_set_label (self->facts, _ ("Choose a frame in the roll, or add frames."));
      gtk_label_set_label (self->next, "");
      gtk_widget_set_visible (self->cautions_box, FALSE);
      gtk_widget_set_visible (self->repairs_box, FALSE);
      gtk_widget_set_visible (self->geometry_box, FALSE);
      return;
    }
  const TfFrameRow *row = tf_frame_item_get_row (item);
  g_autofree char *time = tf_time_dup_iso (row->info->time, 0);
  g_autofree char *facts = dup_facts (row, frame, tf_session_get_units (self->session));
  gtk_label_set_label (self->title, time != NULL ? time : _ ("time unknown"));
  gtk_label_set_label (self->facts, facts);
  g_autofree char *how = dup_how (row->info);
  tf_how_set (self->facts_how, _ ("frame"), facts, how);
  gtk_label_set_label (self->next, row->refusal != NULL ? row->refusal
                                   : frame != NULL      ? next_step (self)
                                                        : "");
  show_geometry (self, row, frame);
  show_witness (self);
  set_section (self->cautions_box, self->cautions,
               dup_sentences (frame != NULL ? tf_frame_get_cautions (frame) : row->info->cautions));
  set_section (self->repairs_box, self->repairs, dup_sentences (row->info->repairs));
}

void
tf_slip_frame_set_session (TfSlipFrame *self, TfSession *session)
{
  g_return_if_fail (TF_IS_SLIP_FRAME (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  g_signal_connect_object (session, "frame-changed", G_CALLBACK (show), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "regions-changed", G_CALLBACK (show), self, G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (show_witness), self,
                           G_CONNECT_SWAPPED);
  show (self);
}

static void
dispose (GObject *object)
{
  TfSlipFrame *self = TF_SLIP_FRAME (object);
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (self));
  g_clear_object (&self->session);
  g_clear_pointer (&child, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_slip_frame_parent_class)->dispose (object);
}

static void
tf_slip_frame_class_init (TfSlipFrameClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  g_type_ensure (TF_TYPE_HOW);
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/slip-frame.ui");
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, title);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, facts);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, facts_how);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, next);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, geometry);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, witness);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, geometry_box);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, elsewhere);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, again);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, cautions);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, cautions_box);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, repairs);
  gtk_widget_class_bind_template_child (widget, TfSlipFrame, repairs_box);
}

static void
tf_slip_frame_init (TfSlipFrame *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
}
