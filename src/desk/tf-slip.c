/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-dial-view.h"
#include "tf-joy.h"
#include "tf-how.h"
#include "tf-slip-frame.h"
#include "tf-slip-how.h"
#include "tf-slip-row.h"
#include "tf-slip-spots.h"
#include "tf-slip-words.h"

struct _TfSlip
{
  GtkWidget parent;
  GtkStack *stack;
  GtkLabel *title, *place, *origin, *longitude, *saved, *problem, *verdict, *verdict_why, *cautions, *also,
      *joins, *proposal;
  TfHow *place_how, *verdict_how, *class_how, *cautions_how, *joins_how, *proposal_how;
  TfDialView *dial;
  TfVerdictSign *sign;
  GtkWidget *numbers, *keep_box, *keep, *drop, *withdraw, *discard, *judged, *class_box, *joins_box, *proposal_box;
  GtkCheckButton *replaces;
  GtkBox *page, *rows, *more_rows;
  TfSlipRow *row[TF_N_LINES], *spots;
  GtkToggleButton *class_alpha, *class_beta, *class_beta_gamma, *class_gamma, *class_delta;
  GtkTextView *note;
  GtkEntry *label_entry, *external_entry;
  TfSlipFrame *frame_page;
  TfSession *session;
  TfRegionItem *noted; /* whose note stands in the entry */
  char *note_given;    /* what was already given to be kept for it, or NULL */
  char *label_given, *external_given;
  gboolean setting;
  char *joy_name; /* under the dial */
};

G_DEFINE_FINAL_TYPE (TfSlip, tf_slip, GTK_TYPE_WIDGET)

static void
set_label (GtkLabel *label, const char *text)
{
  gtk_widget_set_visible (GTK_WIDGET (label), text != NULL && text[0] != '\0');
  if (g_strcmp0 (gtk_label_get_label (label), text) != 0)
    gtk_label_set_label (label, text != NULL ? text : "");
}

/* -- the head -------------------------------------------------------------------------------- */

/* A label inside a button goes with its button. */
static void
set_how (TfHow *button, GtkLabel *label, const char *name, const char *value, char *how)
{
  set_label (label, value);
  gtk_widget_set_visible (GTK_WIDGET (button), value != NULL && value[0] != '\0');
  if (value != NULL)
    tf_how_set (button, name, value, how);
  g_free (how);
}

static void
show_joins (TfSlip *self)
{
  const char *number = tf_session_get_joins (self->session),
             *other = tf_session_get_other_joins (self->session);
  g_autofree char *text = NULL;
  if (number != NULL && other != NULL)
    text = g_strdup_printf (_ ("joins %s, its other half %s"), number, other);
  else if (number != NULL)
    text = g_strdup_printf (_ ("joins %s"), number);
  else if (other != NULL)
    text = g_strdup_printf (_ ("its other half joins %s"), other);
  gtk_widget_set_visible (self->joins_box, text != NULL);
  if (text != NULL)
    set_how (self->joins_how, self->joins, _ ("region"), text, tf_how_dup_joins ());
}

/* Before it is judged the proposal matters more than the numbers of the whole; a mark's class and
 * note stay where they are. */
static void
place_proposal (TfSlip *self, gboolean mark)
{
  GtkBox *into = mark ? self->page : GTK_BOX (self->numbers);
  GtkWidget *now = gtk_widget_get_parent (self->proposal_box);
  if (now == GTK_WIDGET (into))
    return;
  g_object_ref (self->proposal_box);
  gtk_box_remove (GTK_BOX (now), self->proposal_box);
  gtk_box_insert_child_after (into, self->proposal_box,
                              mark ? self->judged : GTK_WIDGET (self->verdict_how));
  g_object_unref (self->proposal_box);
}

static void
show_proposal (TfSlip *self, gboolean mark)
{
  place_proposal (self, mark);
  const TfProposal *proposal = tf_session_get_proposal (self->session);
  TfUnits units = tf_session_get_units (self->session);
  gtk_widget_set_visible (self->proposal_box, proposal != NULL);
  if (proposal == NULL)
    return;
  g_autofree char *first = tf_words_dup_half (&proposal->half[0], units),
                  *second = tf_words_dup_half (&proposal->half[1], units);
  g_autofree char *text
      = g_strdup_printf (_ ("Not one bipole? A split is proposed:\n• %s\n• %s"), first, second);
  set_how (self->proposal_how, self->proposal, _ ("proposed split"), text,
           tf_how_dup_proposal (proposal, units));
}

static void
show_replaces (TfSlip *self)
{
  TfRegionItem *replaced = tf_session_get_draft (self->session) != NULL
                               ? tf_session_get_replaced (self->session)
                               : NULL;
  gtk_widget_set_visible (GTK_WIDGET (self->replaces), replaced != NULL);
  if (replaced == NULL)
    return;
  gboolean hint = tf_region_item_get_row (replaced)->is_hint;
  g_autofree char *text
      = g_strdup_printf (hint ? _ ("in place of the %s inside it") : _ ("in place of %s"),
                         tf_region_item_get_label (replaced));
  gtk_check_button_set_label (self->replaces, text);
  gtk_check_button_set_active (self->replaces, tf_session_get_replaces (self->session));
}

/* Of the ledger's own English names. */
static const char *
origin_words (const char *origin)
{
  static const char *const names[]
      = { N_ ("kept as hinted"), N_ ("changed"), N_ ("drawn new"), N_ ("outside") };
  for (guint k = 0; k < G_N_ELEMENTS (names); k++)
    if (strcmp (names[k], origin) == 0)
      return _ (names[k]);
  return origin;
}

static const char *
draft_title (TfSlip *self)
{
  switch (tf_session_get_tool (self->session))
    {
    case TF_TOOL_OUTLINE:
      return _ ("Drawing");
    case TF_TOOL_POLYGON:
      return _ ("Polygon");
    case TF_TOOL_NONE:
    default:
      return _ ("Draft");
    }
}

static char *
dup_hint_origin (TfRegionItem *region)
{
  const TfRow *row = tf_region_item_get_row (region);
  if (tf_region_item_is_carried (region))
    return g_strdup (_ ("carried from a frame before · nobody has judged it"));
  return g_strdup (row->unipolar ? _ ("a hint of one polarity · nobody has judged it")
                                 : _ ("a hint · nobody has judged it"));
}

/* What goes with it: the other half of a split, others chosen, a pinned pole. */
static void
show_also (TfSlip *self, gboolean drawing)
{
  GString *text = g_string_new (NULL);
  const TfMeasure *half = drawing ? tf_session_get_other_measure (self->session) : NULL;
  TfOutline *base = tf_session_get_base (self->session);
  guint n = tf_session_get_n_chosen (self->session);
  if (half != NULL)
    {
      g_autofree char *words = tf_words_dup_half (half, tf_session_get_units (self->session));
      g_string_append_printf (text, _ ("Other half: %s\n"), words);
    }
  if (!drawing && n > 1)
    g_string_append_printf (
        text, _ ("%u chosen: Keep, Drop, Withdraw and the class are for all of them\n"), n);
  for (guint k = 0; base != NULL && k < tf_outline_get_n_pins (base); k++)
    {
      const TfPinnedPole *pin = tf_outline_get_pin (base, k);
      g_string_append_printf (text, pin->polarity > 0 ? _ ("Positive pole pinned: %s (%s)\n")
                                                      : _ ("Negative pole pinned: %s (%s)\n"),
                              pin->reason != NULL ? pin->reason : "—",
                              pin->person != NULL ? pin->person : "—");
    }
  set_label (self->also, g_strchomp (text->str));
  g_string_free (text, TRUE);
}

static void
show_head (TfSlip *self, gboolean drawing, TfRegionItem *region, const TfMeasure *measure)
{
  const TfRow *row = !drawing && region != NULL ? tf_region_item_get_row (region) : NULL;
  g_autofree char *place = measure != NULL ? tf_words_dup_place (measure) : NULL;
  g_autofree char *longitude = measure != NULL ? tf_words_dup_longitude (measure) : NULL;
  g_autofree char *origin = NULL;
  if (row == NULL)
    origin = g_strdup (tf_session_get_draft (self->session) != NULL
                           ? _ ("not kept yet")
                           : _ ("close the line to make a draft"));
  else if (row->is_hint)
    origin = dup_hint_origin (region);
  else
    origin = g_strdup_printf ("%s · %s", origin_words (row->origin), row->person);
  set_label (self->title, row == NULL    ? draft_title (self)
                          : row->region[0] == '\0' ? _ ("Hint")
                                                   : row->region);
  gtk_widget_set_visible (GTK_WIDGET (self->place_how), measure != NULL);
  set_label (self->place, place);
  set_label (self->longitude, longitude);
  set_label (self->origin, origin);
  gtk_widget_set_visible (self->keep_box, drawing || (row != NULL && row->is_hint));
  gtk_widget_set_visible (self->drop, row != NULL && row->is_hint);
  gtk_widget_set_visible (self->discard, drawing);
  gtk_widget_set_visible (self->withdraw, row != NULL && !row->is_hint);
  show_joins (self);
  show_replaces (self);
  show_also (self, drawing);
  show_proposal (self, row != NULL && !row->is_hint);
}

/* -- dial, verdict, numbers ------------------------------------------------------------------ */

static void
show_dial (TfSlip *self, const TfMeasure *m, const TfVerdict *verdict)
{
  TfDial dial = { .bearing_deg = m->axis_bearing_deg,
                  .sigma_deg = m->tilt_terms.total,
                  .lat_deg = m->lat_deg,
                  .leading_polarity = m->leading_polarity,
                  .expected = verdict->expected };
  tf_joy_expected (m->lat_deg, m->separation_deg, &dial.joy_deg, &dial.joy_scatter_deg);
  dial.joy_name = self->joy_name;
  memcpy (dial.witnesses, m->witnesses, sizeof dial.witnesses);
  tf_dial_view_set (self->dial, &dial);
}

static void
show_verdict (TfSlip *self, const TfReading *reading)
{
  const TfVerdict *verdict = reading->verdict;
  static const TfDiamond signs[] = { [TF_VERDICT_CANNOT_SAY] = TF_DIAMOND_HOLLOW,
                                     [TF_VERDICT_KEEPS] = TF_DIAMOND_PLAIN,
                                     [TF_VERDICT_BREAKS] = TF_DIAMOND_STRUCK };
  g_autofree char *sentence
      = tf_verdict_dup_text (verdict, tf_session_get_sample (self->session), FALSE);
  tf_verdict_sign_set (self->sign, signs[verdict->kind]);
  g_autofree char *said = NULL, *why = NULL;
  tf_words_split_verdict (sentence, &said, &why);
  set_label (self->verdict, said);
  set_label (self->verdict_why, why);
  g_autofree char *how = tf_how_dup_verdict (reading, tf_session_get_judge (self->session));
  tf_how_set (self->verdict_how, _ ("verdict"), sentence, how);
  gtk_widget_remove_css_class (GTK_WIDGET (self->verdict), "breaks");
  if (verdict->kind == TF_VERDICT_BREAKS)
    gtk_widget_add_css_class (GTK_WIDGET (self->verdict), "breaks");
}

static void
show_cautions (TfSlip *self, const TfReading *reading)
{
  const TfMeasure *m = reading->measure;
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < tf_notes_get_n (m->cautions); k++)
    {
      g_autofree char *sentence = tf_note_dup_text (tf_notes_get (m->cautions, k), FALSE);
      g_string_append_printf (text, "%s%s", k > 0 ? "\n\n" : "", sentence);
    }
  set_how (self->cautions_how, self->cautions, _ ("cautions"), text->str,
           tf_how_dup_cautions (reading));
  g_string_free (text, TRUE);
}

/* Beside the flux's tilt and leader, where an intensity frame of the same time is there. */
static void
show_spots (TfSlip *self)
{
  const TfSpots *spots = tf_session_get_spots (self->session);
  gtk_widget_set_visible (GTK_WIDGET (self->spots), spots != NULL);
  if (spots == NULL)
    return;
  g_autofree char *value = tf_spots_dup_value (spots), *under = tf_spots_dup_under (spots),
                  *how = tf_spots_dup_how (spots, tf_session_find_companion (self->session));
  tf_slip_row_set (self->spots, _ ("spots"), value, under, how);
}

static void
show_numbers (TfSlip *self, const TfMeasure *m, const char *method)
{
  TfVerdict verdict = tf_session_get_verdict (self->session);
  TfReading reading = { .measure = m,
                        .verdict = &verdict,
                        .row = tf_session_get_sample (self->session),
                        .method = method,
                        .at_rest = tf_session_is_at_rest (self->session),
                        .units = tf_session_get_units (self->session) };
  for (guint k = 0; k < TF_N_LINES; k++)
    {
      g_autofree char *value = tf_line_dup_value (k, &reading),
                      *under = tf_line_dup_under (k, &reading);
      g_autofree char *how = tf_line_dup_how (k, &reading);
      tf_slip_row_set (self->row[k], tf_line_name (k), value, under, how);
    }
  show_dial (self, m, &verdict);
  show_verdict (self, &reading);
  show_cautions (self, &reading);
  g_autofree char *where = tf_how_dup_place (&reading, self->session);
  tf_how_set (self->place_how, _ ("place"), gtk_label_get_label (self->place), where);
}

/* -- class and note -------------------------------------------------------------------------- */

static void
show_class (TfSlip *self, const char *text)
{
  gboolean delta = strstr (text, "δ") != NULL;
  g_autofree char *base = g_strdup (text);
  if (delta)
    *strstr (base, "δ") = '\0';
  gtk_toggle_button_set_active (self->class_alpha, strcmp (base, "α") == 0);
  gtk_toggle_button_set_active (self->class_beta, strcmp (base, "β") == 0);
  gtk_toggle_button_set_active (self->class_beta_gamma, strcmp (base, "βγ") == 0);
  gtk_toggle_button_set_active (self->class_gamma, strcmp (base, "γ") == 0);
  gtk_toggle_button_set_active (self->class_delta, delta);
}

static char *
dup_note (TfSlip *self)
{
  GtkTextBuffer *buffer = gtk_text_view_get_buffer (self->note);
  GtkTextIter start, end;
  gtk_text_buffer_get_bounds (buffer, &start, &end);
  return gtk_text_buffer_get_text (buffer, &start, &end, FALSE);
}

/* What stands in the note is kept for the region it was written for, also when another region, or
 * none, is chosen first; once, however often the entry is left before it is in the ledger. */
static void
leave_note (TfSlip *self)
{
  if (self->noted == NULL || self->session == NULL)
    return;
  g_autofree char *text = g_strstrip (dup_note (self));
  if (g_strcmp0 (text, self->note_given) == 0)
    return;
  if (tf_session_set_note_of (self->session, self->noted, text))
    {
      g_free (self->note_given);
      self->note_given = g_steal_pointer (&text);
    }
}

/* -- label and external number ---------------------------------------------------------------- */

static char *
dup_entry (GtkEntry *entry)
{
  return g_strstrip (g_strdup (gtk_editable_get_text (GTK_EDITABLE (entry))));
}

/* Kept for the region they were written for. */
static void
leave_facts (TfSlip *self)
{
  if (self->noted == NULL || self->session == NULL || self->setting)
    return;
  g_autofree char *label = dup_entry (self->label_entry), *number = dup_entry (self->external_entry);
  if (g_strcmp0 (label, self->label_given) != 0)
    {
      tf_session_set_label_of (self->session, self->noted, label);
      g_free (self->label_given);
      self->label_given = g_steal_pointer (&label);
    }
  if (g_strcmp0 (number, self->external_given) != 0)
    {
      tf_session_set_external_of (self->session, self->noted, number);
      g_free (self->external_given);
      self->external_given = g_steal_pointer (&number);
    }
}

static void
show_fact (GtkEntry *entry, char **given, const char *text, gboolean same)
{
  GtkWidget *inner = GTK_WIDGET (gtk_editable_get_delegate (GTK_EDITABLE (entry)));
  if (same && inner != NULL && gtk_widget_has_focus (inner))
    return; /* someone is writing */
  g_free (*given);
  *given = g_strdup (text);
  if (g_strcmp0 (gtk_editable_get_text (GTK_EDITABLE (entry)), text) != 0)
    gtk_editable_set_text (GTK_EDITABLE (entry), text);
}

static void
facts_left (TfSlip *self)
{
  leave_facts (self);
}

/* With Return: the keys are the plate's again. */
static void
facts_entered (TfSlip *self)
{
  leave_facts (self);
  gtk_widget_activate_action (GTK_WIDGET (self), "win.focus-plate", NULL);
}

static void
show_note (TfSlip *self, TfRegionItem *region)
{
  const TfRow *row = tf_region_item_get_row (region);
  gboolean same = self->noted != NULL && tf_region_item_is (self->noted, row->mark, row->is_hint);
  self->setting = FALSE;
  if (!same)
    {
      leave_note (self);
      leave_facts (self);
    }
  self->setting = TRUE;
  g_set_object (&self->noted, region);
  show_fact (self->label_entry, &self->label_given, row->label, same);
  show_fact (self->external_entry, &self->external_given, row->external, same);
  if (same && gtk_widget_has_focus (GTK_WIDGET (self->note)))
    return; /* someone is writing */
  g_clear_pointer (&self->note_given, g_free);
  g_autofree char *now = dup_note (self);
  if (strcmp (now, row->note) != 0)
    gtk_text_buffer_set_text (gtk_text_view_get_buffer (self->note), row->note, -1);
}

static void
forget_note (TfSlip *self)
{
  leave_note (self);
  leave_facts (self);
  g_clear_object (&self->noted);
  g_clear_pointer (&self->note_given, g_free);
}

static void
show_judged (TfSlip *self, TfRegionItem *region, gboolean drawing)
{
  gboolean mark = !drawing && region != NULL && !tf_region_item_get_row (region)->is_hint;
  gtk_widget_set_visible (self->judged, mark);
  if (!mark)
    {
      forget_note (self);
      return;
    }
  const TfRow *row = tf_region_item_get_row (region);
  self->setting = TRUE;
  g_autofree char *how = tf_how_dup_class (row);
  tf_how_set (self->class_how, _ ("class"), row->mw_class[0] != '\0' ? row->mw_class : _ ("none"), how);
  show_class (self, row->mw_class);
  show_note (self, region);
  self->setting = FALSE;
}

/* -- all of it ------------------------------------------------------------------------------- */

static void
choice_changed (TfSlip *self)
{
  const TfVertex *line;
  guint n;
  tf_session_get_line (self->session, &line, &n);
  gboolean drawing = n > 0 || tf_session_get_draft (self->session) != NULL;
  TfRegionItem *region = tf_session_get_region (self->session);
  if (!drawing && region == NULL)
    {
      forget_note (self);
      gtk_stack_set_visible_child_name (self->stack, "frame");
      return;
    }
  const TfMeasure *m = tf_session_get_measure (self->session);
  const char *method
      = drawing ? tf_session_get_method (self->session) : tf_region_item_get_row (region)->method;
  gtk_stack_set_visible_child_name (self->stack, "region");
  show_head (self, drawing, region, m);
  gtk_widget_set_visible (self->numbers, m != NULL);
  gtk_widget_set_visible (GTK_WIDGET (self->more_rows), m != NULL);
  if (m == NULL)
    set_how (self->cautions_how, self->cautions, "", NULL, NULL);
  set_label (self->problem, m == NULL ? tf_session_get_measure_problem (self->session) : NULL);
  if (m != NULL)
    show_numbers (self, m, method);
  show_spots (self);
  show_judged (self, region, drawing);
}

static void
status_changed (TfSlip *self)
{
  set_label (self->saved, tf_session_get_saved (self->session));
}

static void
replaces_toggled (TfSlip *self)
{
  tf_session_set_replaces (self->session, gtk_check_button_get_active (self->replaces));
}

static void
note_left (TfSlip *self)
{
  if (!self->setting)
    leave_note (self);
}

static gboolean
note_key (GtkEventControllerKey *controller, guint key, guint code, GdkModifierType state,
          TfSlip *self)
{
  if (key != GDK_KEY_Escape && (key != GDK_KEY_Return || (state & GDK_CONTROL_MASK) == 0))
    return FALSE;
  leave_note (self);
  if (key == GDK_KEY_Escape) /* out of the note; a second Escape unchooses the region */
    gtk_root_set_focus (gtk_widget_get_root (GTK_WIDGET (self)), NULL);
  return TRUE;
}

void
tf_slip_set_session (TfSlip *self, TfSession *session)
{
  g_return_if_fail (TF_IS_SLIP (self) && TF_IS_SESSION (session) && self->session == NULL);
  self->session = g_object_ref (session);
  tf_slip_frame_set_session (self->frame_page, session);
  g_signal_connect_object (session, "choice-changed", G_CALLBACK (choice_changed), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "overlays-changed", G_CALLBACK (show_spots), self,
                           G_CONNECT_SWAPPED);
  g_signal_connect_object (session, "status-changed", G_CALLBACK (status_changed), self,
                           G_CONNECT_SWAPPED);
  choice_changed (self);
  status_changed (self);
}

static void
dispose (GObject *object)
{
  TfSlip *self = TF_SLIP (object);
  GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (self));
  g_clear_object (&self->noted);
  g_clear_object (&self->session);
  g_clear_pointer (&child, gtk_widget_unparent);
  G_OBJECT_CLASS (tf_slip_parent_class)->dispose (object);
}

static void
finalize (GObject *object)
{
  g_free (TF_SLIP (object)->joy_name);
  g_free (TF_SLIP (object)->note_given);
  g_free (TF_SLIP (object)->label_given);
  g_free (TF_SLIP (object)->external_given);
  G_OBJECT_CLASS (tf_slip_parent_class)->finalize (object);
}

static void
bind_children (GtkWidgetClass *widget)
{
  gtk_widget_class_bind_template_child (widget, TfSlip, stack);
  gtk_widget_class_bind_template_child (widget, TfSlip, title);
  gtk_widget_class_bind_template_child (widget, TfSlip, place);
  gtk_widget_class_bind_template_child (widget, TfSlip, origin);
  gtk_widget_class_bind_template_child (widget, TfSlip, longitude);
  gtk_widget_class_bind_template_child (widget, TfSlip, saved);
  gtk_widget_class_bind_template_child (widget, TfSlip, problem);
  gtk_widget_class_bind_template_child (widget, TfSlip, keep_box);
  gtk_widget_class_bind_template_child (widget, TfSlip, keep);
  gtk_widget_class_bind_template_child (widget, TfSlip, drop);
  gtk_widget_class_bind_template_child (widget, TfSlip, withdraw);
  gtk_widget_class_bind_template_child (widget, TfSlip, discard);
  gtk_widget_class_bind_template_child (widget, TfSlip, replaces);
  gtk_widget_class_bind_template_child (widget, TfSlip, numbers);
  gtk_widget_class_bind_template_child (widget, TfSlip, dial);
  gtk_widget_class_bind_template_child (widget, TfSlip, sign);
  gtk_widget_class_bind_template_child (widget, TfSlip, verdict);
  gtk_widget_class_bind_template_child (widget, TfSlip, verdict_why);
  gtk_widget_class_bind_template_child (widget, TfSlip, rows);
  gtk_widget_class_bind_template_child (widget, TfSlip, more_rows);
  gtk_widget_class_bind_template_child (widget, TfSlip, cautions);
  gtk_widget_class_bind_template_child (widget, TfSlip, judged);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_box);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_alpha);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_beta);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_beta_gamma);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_gamma);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_delta);
  gtk_widget_class_bind_template_child (widget, TfSlip, note);
  gtk_widget_class_bind_template_child (widget, TfSlip, also);
  gtk_widget_class_bind_template_child (widget, TfSlip, label_entry);
  gtk_widget_class_bind_template_child (widget, TfSlip, external_entry);
  gtk_widget_class_bind_template_child (widget, TfSlip, frame_page);
  gtk_widget_class_bind_template_child (widget, TfSlip, joins);
  gtk_widget_class_bind_template_child (widget, TfSlip, page);
  gtk_widget_class_bind_template_child (widget, TfSlip, joins_box);
  gtk_widget_class_bind_template_child (widget, TfSlip, proposal);
  gtk_widget_class_bind_template_child (widget, TfSlip, proposal_box);
  gtk_widget_class_bind_template_child (widget, TfSlip, place_how);
  gtk_widget_class_bind_template_child (widget, TfSlip, verdict_how);
  gtk_widget_class_bind_template_child (widget, TfSlip, class_how);
  gtk_widget_class_bind_template_child (widget, TfSlip, cautions_how);
  gtk_widget_class_bind_template_child (widget, TfSlip, joins_how);
  gtk_widget_class_bind_template_child (widget, TfSlip, proposal_how);
}

static void
tf_slip_class_init (TfSlipClass *klass)
{
  GtkWidgetClass *widget = GTK_WIDGET_CLASS (klass);
  G_OBJECT_CLASS (klass)->dispose = dispose;
  G_OBJECT_CLASS (klass)->finalize = finalize;
  g_type_ensure (TF_TYPE_DIAL_VIEW);
  g_type_ensure (TF_TYPE_VERDICT_SIGN);
  g_type_ensure (TF_TYPE_SLIP_FRAME);
  g_type_ensure (TF_TYPE_HOW);
  gtk_widget_class_set_layout_manager_type (widget, GTK_TYPE_BIN_LAYOUT);
  gtk_widget_class_set_css_name (widget, "slip");
  gtk_widget_class_set_template_from_resource (widget, "/io/tiltfield/Tiltfield/slip.ui");
  bind_children (widget);
  gtk_widget_class_bind_template_callback (widget, replaces_toggled);
  gtk_widget_class_bind_template_callback (widget, note_left);
  gtk_widget_class_bind_template_callback (widget, facts_left);
  gtk_widget_class_bind_template_callback (widget, facts_entered);
  gtk_widget_class_bind_template_callback (widget, note_key);
}

static void
tf_slip_init (TfSlip *self)
{
  gtk_widget_init_template (GTK_WIDGET (self));
  self->joy_name = tf_words_dup_short_source (tf_joy_relations[0].name);
  for (guint k = 0; k < TF_N_LINES; k++)
    {
      self->row[k] = g_object_new (TF_TYPE_SLIP_ROW, NULL);
      gtk_box_append (k < TF_LINE_SHAPE ? self->rows : self->more_rows, GTK_WIDGET (self->row[k]));
    }
  self->spots = g_object_new (TF_TYPE_SLIP_ROW, "visible", FALSE, NULL);
  gtk_box_append (self->rows, GTK_WIDGET (self->spots));
}
