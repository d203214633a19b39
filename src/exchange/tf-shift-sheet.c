/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* A shift in words, onto its sheet. */

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-export-private.h"
#include "tf-json.h"
#include "tf-sheet.h"
#include "tf-sheet-words.h"

/* -- words -------------------------------------------------------------------------------------- */

char *
tf_sheet_dup_time (TfTime time)
{
  int year, month, day, hour, minute;
  double second;
  if (!tf_time_calendar (tf_time_add (time, 30.0), &year, &month, &day, &hour, &minute, &second))
    return g_strdup ("—");
  return g_strdup_printf ("%04d-%02d-%02d %02d:%02d UTC", year, month, day, hour, minute);
}

char *
tf_sheet_dup_change (const TfShiftValue *value)
{
  double share = tf_shift_share (value);
  if (!isfinite (share))
    return g_strdup ("");
  return g_strdup_printf ("%s%.0f %%", share < -0.005 ? "−" : share < 0.005 ? "±" : "+", 100.0 * fabs (share));
}

char *
tf_sheet_dup_r (const TfShiftRow *row, TfTime now)
{
  if (!isfinite (row->r_mx.now))
    return g_strdup (_ ("not measured"));
  g_autofree char *age = tf_shift_dup_age (now.s - row->r_mx.now_time.s);
  g_autofree char *r
      = row->r_mx.now > 0.0 ? g_strdup_printf ("%.2f", log10 (row->r_mx.now)) : g_strdup ("R 0");
  return g_strdup_printf ("%s, %s", r, age);
}

char *
tf_sheet_dup_class (const TfShiftRow *row)
{
  const char *now = *row->class_now != '\0' ? row->class_now : "—";
  if (*row->class_before == '\0')
    return g_strdup (now);
  return g_strdup_printf (_ ("%s (yesterday %s)"), now, row->class_before);
}

/* The number of our own, theirs, or what it is. */
char *
tf_sheet_dup_name (const TfShiftRow *row)
{
  const char *own = *row->number != '\0' ? row->number : row->is_new ? _ ("new") : _ ("hint");
  g_autofree char *label
      = *row->label != '\0' ? g_strdup_printf (" “%s”", row->label) : g_strdup ("");
  if (*row->external == '\0')
    return g_strconcat (own, label, NULL);
  return g_strdup_printf ("%s%s\n%s", own, label, row->external);
}

/* What others say of it, or of what may be it. */
static char *
dup_others_or_proposed (const TfShiftRow *row)
{
  if (row->others != NULL)
    return tf_sheet_dup_others (row->others);
  GString *text = g_string_new (NULL);
  for (guint k = 0; k < row->proposed->len; k++)
    {
      const TfOthers *others = g_ptr_array_index (row->proposed, k);
      g_autofree char *said = tf_sheet_dup_others (others);
      g_string_append_printf (text, _ ("%s%s? (%.1f° apart)"), k > 0 ? "\n" : "", said, others->apart_deg);
    }
  return g_string_free (text, FALSE);
}

char *
tf_sheet_dup_others (const TfOthers *others)
{
  if (others == NULL)
    return g_strdup ("");
  GString *text = g_string_new (others->number);
  if (*others->mw_class != '\0')
    g_string_append_printf (text, " %s", others->mw_class);
  if (isfinite (others->area_msh))
    g_string_append_printf (text, _ (", spots %.0f msh"), others->area_msh);
  return g_string_free (text, FALSE);
}

char *
tf_sheet_dup_note (const TfRegionNote *note, TfTime since)
{
  static const char *const states[] = { N_ ("new"), N_ ("carried over"), N_ ("settled") };
  g_autofree char *written = tf_sheet_dup_time (note->written);
  TfNoteState state = tf_shift_note_state (note, since);
  return g_strdup_printf ("%s · %s · %s · %s: %s", note->number, note->person,
                          written, _ (states[state]), note->text);
}

GPtrArray *
tf_sheet_dup_cautions (const TfNotes *cautions)
{
  GPtrArray *texts = g_ptr_array_new_with_free_func (g_free);
  for (guint k = 0; k < tf_notes_get_n (cautions); k++)
    g_ptr_array_add (texts, tf_note_dup_text (tf_notes_get (cautions, k), FALSE));
  g_ptr_array_add (texts, NULL);
  return texts;
}

/* -- the table ---------------------------------------------------------------------------------- */

enum
{
  ORDER,
  REGION,
  PLACE,
  CLASS,
  TANGLE,
  FLUX,
  AREA,
  OTHERS,
  SEEN
};

static const double widths[TF_SHEET_COLUMNS] = { 3, 12, 9, 13, 14, 21, 15, 15, 15 };

static char *
dup_place (const TfShiftRow *row)
{
  if (!isfinite (row->lat_deg) || !isfinite (row->cmd_deg))
    return g_strdup ("—");
  return tf_chart_dup_place (row->lat_deg, row->cmd_deg);
}

static char *
dup_flux (const TfShiftRow *row)
{
  if (!isfinite (row->flux_mx.now))
    return g_strdup ("—");
  g_autofree char *flux = tf_chart_dup_flux (row->flux_mx.now);
  g_autofree char *change = tf_sheet_dup_change (&row->flux_mx);
  g_autofree char *sigma = isfinite (row->flux_sigma_mx)
                               ? g_strdup_printf (" ± %.0f %%", 100.0 * row->flux_sigma_mx / row->flux_mx.now)
                               : g_strdup ("");
  return g_strdup_printf ("%s%s; %s", flux, sigma, row->floors_differ ? _ ("other floor") : *change != '\0' ? change : "—");
}

static char *
dup_area (const TfShiftRow *row)
{
  if (!isfinite (row->area_msh.now))
    return g_strdup ("—");
  g_autofree char *change = tf_sheet_dup_change (&row->area_msh);
  return g_strdup_printf (_ ("%.0f msh; %s"), row->area_msh.now, *change != '\0' ? change : "—");
}

static char *
dup_seen (const TfShiftRow *row, TfTime now)
{
  if (row->seen == TF_SEEN_DUE)
    {
      g_autofree char *at = tf_sheet_dup_time (row->crosses);
      g_autofree char *age = tf_shift_dup_age (now.s - row->crosses.s);
      return g_strdup_printf (_ ("at the limb %s (%s)"), at, age);
    }
  if (row->seen == TF_SEEN_NOT)
    {
      g_autofree char *age = tf_shift_dup_age (now.s - row->flux_mx.now_time.s);
      return g_strdup_printf (_ ("not found; last seen %s"), age);
    }
  if (row->seen == TF_SEEN_MARK)
    return g_strdup (_ ("marked"));
  if (row->is_new)
    return g_strdup (_ ("hint, new"));
  g_autofree char *age = tf_shift_dup_age (now.s - row->first.s);
  return g_strdup_printf (_ ("hint, first seen %s"), age);
}

static void
add_row (GArray *lines, GPtrArray *texts, const TfShiftRow *row, guint order, TfTime now)
{
  gboolean due = row->seen == TF_SEEN_DUE;
  char *made[TF_SHEET_COLUMNS] = {
    [ORDER] = g_strdup_printf ("%u", order),
    [REGION] = tf_sheet_dup_name (row),
    [PLACE] = dup_place (row),
    [CLASS] = tf_sheet_dup_class (row),
    [TANGLE] = due ? g_strdup ("") : tf_sheet_dup_r (row, now),
    [FLUX] = dup_flux (row),
    [AREA] = dup_area (row),
    [OTHERS] = dup_others_or_proposed (row),
    [SEEN] = dup_seen (row, now),
  };
  TfSheetLine line = { NULL };
  for (guint k = 0; k < TF_SHEET_COLUMNS; k++)
    {
      g_ptr_array_add (texts, made[k]);
      line.cells[k] = made[k];
    }
  g_array_append_val (lines, line);
}

static GArray *
make_lines (const TfShift *shift, GPtrArray *texts)
{
  GArray *lines = g_array_new (FALSE, TRUE, sizeof (TfSheetLine));
  TfShiftGroup group = TF_SHIFT_N_GROUPS;
  for (guint k = 0; k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      const TfSheetLine heading = { tf_shift_group_title (row->group), { NULL } };
      if (row->group != group)
        g_array_append_val (lines, heading);
      group = row->group;
      add_row (lines, texts, row, k + 1, shift->time);
    }
  return lines;
}

static GPtrArray *
make_notes (const TfShift *shift)
{
  GPtrArray *notes = g_ptr_array_new_with_free_func (g_free);
  for (guint k = 0; k < shift->rows->len; k++)
    {
      const TfShiftRow *row = g_ptr_array_index (shift->rows, k);
      for (guint n = 0; n < row->notes->len; n++)
        g_ptr_array_add (notes, tf_sheet_dup_note (g_ptr_array_index (row->notes, n), shift->since));
    }
  for (guint n = 0; n < shift->unmatched->len; n++)
    {
      g_autofree char *said = tf_sheet_dup_others (g_ptr_array_index (shift->unmatched, n));
      g_ptr_array_add (notes, g_strdup_printf (_ ("listed by others, nothing of ours within 5°: %s"), said));
    }
  for (guint n = 0; n < shift->loose->len; n++)
    g_ptr_array_add (notes, tf_sheet_dup_note (g_ptr_array_index (shift->loose, n), shift->since));
  g_ptr_array_add (notes, NULL);
  return notes;
}

static char *
dup_subtitle (const TfShift *shift)
{
  g_autofree char *file = shift->frame_path != NULL ? g_path_get_basename (shift->frame_path) : g_strdup ("—");
  g_autofree char *since = tf_time_is_known (shift->since) ? tf_sheet_dup_time (shift->since) : NULL;
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("frame %s · "), file);
  g_string_append_printf (text, ngettext ("%u region · ", "%u regions · ", shift->rows->len), shift->rows->len);
  if (shift->compared)
    g_string_append_printf (text, _ ("%u new · "), shift->n_new);
  else
    g_string_append (text, _ ("no frame of the three days before: nothing can be called new · "));
  if (since != NULL)
    g_string_append_printf (text, _ ("since the hand-over of %s at %s"), shift->since_person, since);
  else
    g_string_append (text, _ ("no hand-over is recorded before"));
  return g_string_free (text, FALSE);
}

static void
draw (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  tf_shift_sheet_draw (cr, data, style, area);
}

static gboolean
write_page (const char *path, const TfShift *shift, const char *who, GError **error)
{
  g_autoptr (GPtrArray) texts = g_ptr_array_new_with_free_func (g_free), notes = make_notes (shift),
                        cautions = tf_sheet_dup_cautions (shift->cautions);
  g_autoptr (GArray) lines = make_lines (shift, texts);
  g_autofree char *iso = tf_sheet_dup_time (shift->time), *subtitle = dup_subtitle (shift);
  g_autofree char *title = who != NULL && *who != '\0'
                               ? g_strdup_printf (_ ("Shift sheet of %s, disk of %s"), who, iso)
                               : g_strdup_printf (_ ("Shift sheet, disk of %s"), iso);
  TfShiftSheet sheet = { .title = title,
                         .subtitle = subtitle,
                         .columns = { "", _ ("Region"), _ ("Place"), _ ("Class"), _ ("log R, age"), _ ("Flux ± σ; change"),
                                      _ ("Field area; change"), _ ("Others say"), _ ("On the frame") },
                         .lines = (const TfSheetLine *)(const void *)lines->data,
                         .n_lines = lines->len,
                         .notes_title = _ ("Notes"),
                         .notes = (const char *const *)notes->pdata,
                         .cautions = (const char *const *)cautions->pdata };
  memcpy (sheet.widths, widths, sizeof widths);
  const TfFigurePage page = { .width_mm = 297, .height_mm = 210, .text_mm = 3.0, .title = title, .subject = subtitle };
  return tf_figure_write (path, &page, draw, &sheet, error);
}

gboolean
tf_shift_write (const char *path, const TfShift *shift, const char *who, GError **error)
{
  g_return_val_if_fail (path != NULL && shift != NULL, FALSE);
  g_autofree char *lower = g_ascii_strdown (path, -1);
  if (!g_str_has_suffix (lower, ".json"))
    return write_page (path, shift, who, error);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  tf_shift_build_json (shift, who, builder);
  g_autofree char *text = tf_json_dup_text (builder, TRUE);
  return tf_export_save (path, text, -1, error);
}
