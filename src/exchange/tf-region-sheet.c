/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* One region in words and pictures, onto its sheet: un-projected close look with outline, axis and
 * inversion lines, dial, figures with their uncertainties, floors and method. */

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-joy.h"
#include "tf-number.h"
#include "tf-overlay.h"
#include "tf-picture.h"
#include "tf-sheet.h"
#include "tf-sheet-words.h"

#define PICTURE_PIXELS 900
#define RANGE_GAUSS    500.0
#define LEAST_DEG      6.0 /* half the picture's side at least */

typedef struct
{
  const TfRegionPage *page;
  TfView view;
  TfOutline *outline; /* at the frame's time */
  TfComplexity complexity;
  GArray *lines;      /* TfOverlayLine with owned points */
  GPtrArray *texts;   /* owned */
} Sheet;

/* -- the picture ------------------------------------------------------------------------------- */

static gboolean
project (double lon_deg, double lat_deg, double *x, double *y, gpointer data)
{
  const Sheet *sheet = data;
  return tf_view_from_sun (&sheet->view, tf_frame_get_geometry (sheet->page->frame), lon_deg, lat_deg,
                           x, y);
}

static void
paint_field (cairo_t *cr, const Sheet *sheet, TfArea area)
{
  cairo_surface_t *surface
      = cairo_image_surface_create (CAIRO_FORMAT_RGB24, PICTURE_PIXELS, PICTURE_PIXELS);
  TfView view = sheet->view;
  double scale = PICTURE_PIXELS / area.width;
  view.width = view.height = PICTURE_PIXELS;
  view.zoom *= scale;
  TfPaint paint = { .range_gauss = sheet->page->range_gauss > 0.0 ? sheet->page->range_gauss : RANGE_GAUSS,
                    .palette = TF_PALETTE_GREY,
                    .ground = 0xff17191d };
  tf_picture_render (sheet->page->frame, &view, &paint,
                     (guint32 *)(gpointer)cairo_image_surface_get_data (surface),
                     (guint)cairo_image_surface_get_stride (surface) / 4, NULL);
  cairo_surface_mark_dirty (surface);
  cairo_save (cr);
  cairo_translate (cr, area.x, area.y);
  cairo_scale (cr, 1 / scale, 1 / scale);
  cairo_set_source_surface (cr, surface, 0, 0);
  cairo_paint (cr);
  cairo_restore (cr);
  cairo_surface_destroy (surface);
}

static void
draw_overlay (cairo_t *cr, const TfChartStyle *style, const Sheet *sheet, TfArea area)
{
  const TfMeasure *m = &sheet->page->row->measure;
  gboolean two = m->leading_polarity != 0;
  const TfOverlayItem item = { .outline = sheet->outline,
                               .stroke = sheet->page->row->is_hint ? TF_STROKE_HINT : TF_STROKE_MARK,
                               .chosen = TRUE,
                               .positive = { two ? m->positive.carrington_lon_deg : NAN, m->positive.lat_deg },
                               .negative = { two ? m->negative.carrington_lon_deg : NAN, m->negative.lat_deg },
                               .verdict = -1 };
  const TfOverlay overlay = { .project = project,
                              .data = (gpointer)sheet,
                              .central_carrington_deg
                              = tf_geometry_central_carrington (tf_frame_get_geometry (sheet->page->frame)),
                              .step_deg = 10,
                              .graticule = TRUE,
                              .outlines = TRUE,
                              .axes = TRUE,
                              .items = &item,
                              .n_items = 1,
                              .lines = (const TfOverlayLine *)(const void *)sheet->lines->data,
                              .n_lines = sheet->lines->len,
                              .limb_rx = NAN,
                              .on_dark = TRUE };
  TfChartStyle on_dark = tf_chart_style (TRUE, FALSE, style->text_pt);
  cairo_save (cr);
  cairo_translate (cr, area.x, area.y);
  tf_overlay_draw (cr, &overlay, &on_dark, (TfArea){ 0, 0, area.width, area.height });
  cairo_restore (cr);
}

static void
draw_picture (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  Sheet *sheet = data;
  double lon, lat, radius;
  tf_outline_get_cap (sheet->outline, &lon, &lat, &radius);
  sheet->view = (TfView){ .look = TF_LOOK_CLOSE,
                          .width = area.width,
                          .height = area.height,
                          .zoom = area.width / (2.0 * fmax (1.25 * radius, LEAST_DEG)),
                          .centre_lon_deg = lon,
                          .centre_lat_deg = lat };
  cairo_save (cr);
  cairo_rectangle (cr, area.x, area.y, area.width, area.height);
  cairo_clip (cr);
  paint_field (cr, sheet, area);
  draw_overlay (cr, style, sheet, area);
  cairo_restore (cr);
}

/* -- the figures -------------------------------------------------------------------------------- */

static const char *
keep_text (Sheet *sheet, char *text)
{
  g_ptr_array_add (sheet->texts, text);
  return text;
}

static char *
dup_number (double value, const char *form)
{
  return isfinite (value) ? tf_number_dup_form (value, form, TRUE) : g_strdup ("—");
}

static void
add (GArray *figures, const char *label, const char *value, const char *how)
{
  const TfSheetFigure figure = { label, value, how };
  g_array_append_val (figures, figure);
}

static const char *
with_sigma (Sheet *sheet, double value, double sigma, const char *form, const char *unit)
{
  g_autofree char *v = dup_number (value, form), *s = dup_number (sigma, form);
  return keep_text (sheet, g_strdup_printf ("%s ± %s%s", v, s, unit));
}

static const char *
flux_text (Sheet *sheet, double flux, double sigma)
{
  g_autofree char *v = tf_chart_dup_flux (flux), *s = tf_chart_dup_flux (sigma);
  return keep_text (sheet, g_strdup_printf ("%s ± %s", v, s));
}

static const char *
how_floor (Sheet *sheet, const TfMeasure *m)
{
  g_autofree char *floor = dup_number (m->floor_gauss, ".0f"), *noise = dup_number (m->noise_gauss, ".1f");
  return keep_text (sheet, g_strdup_printf (m->floor_kind == TF_FLOOR_EVEN ? _ ("even floor %s G, noise %s G, field %s")
                                                                          : _ ("local floor %s G, noise %s G, field %s"),
                                            floor, noise, tf_field_used_name (m->field_used)));
}

static void
add_measure (Sheet *sheet, GArray *figures)
{
  const TfMeasure *m = &sheet->page->row->measure;
  const TfShiftRow *s = sheet->page->shift;
  g_autofree char *change = s != NULL ? tf_sheet_dup_change (&s->flux_mx) : g_strdup ("");
  g_autofree char *noise = dup_number (m->tilt_terms.noise, ".2f"), *outline = dup_number (m->tilt_terms.outline, ".2f"),
                  *floor = dup_number (m->tilt_terms.floor, ".2f"), *mu = dup_number (m->mu, ".2f");
  add (figures, _ ("Flux, both polarities"),
       flux_text (sheet, m->flux_unsigned_mx, hypot (m->positive.flux_sigma_mx, m->negative.flux_sigma_mx)),
       *change != '\0' ? keep_text (sheet, g_strdup_printf (_ ("%s since yesterday"), change)) : how_floor (sheet, m));
  add (figures, _ ("Positive flux"), flux_text (sheet, m->positive.flux_mx, m->positive.flux_sigma_mx), how_floor (sheet, m));
  add (figures, _ ("Negative flux"), flux_text (sheet, m->negative.flux_mx, m->negative.flux_sigma_mx),
       keep_text (sheet, g_strdup_printf (_ ("at μ %s; the uncertainty holds noise, outline and floor"), mu)));
  add (figures, _ ("Axis tilt"), with_sigma (sheet, m->axis_tilt_deg, m->tilt_terms.total, ".1f", "°"),
       keep_text (sheet, g_strdup_printf (_ ("noise %s°, outline %s°, floor %s°; positive: the leader is equatorward"), noise, outline, floor)));
  add (figures, _ ("Separation"), with_sigma (sheet, m->separation_deg, m->separation_sigma_deg, ".2f", "°"),
       keep_text (sheet, g_strdup_printf (_ ("%.0f Mm"), m->separation_mm)));
}

static void
add_complexity (Sheet *sheet, GArray *figures)
{
  const TfComplexity *c = &sheet->complexity;
  if (!c->given)
    {
      add (figures, _ ("Complexity"), _ ("not given"), keep_text (sheet, tf_note_dup_text (c->refusal, FALSE)));
      return;
    }
  add (figures, _ ("Schrijver's R"),
       keep_text (sheet, c->r_mx > 0.0 ? g_strdup_printf (_ ("%.3g Mx (log %.2f)"), c->r_mx, c->r_log10) : g_strdup (_ ("0 Mx"))),
       keep_text (sheet, g_strdup_printf (_ ("Schrijver 2007; field brought to %.1f Mm, nodes %.1f Mm apart, μ %.2f"), c->fwhm_mm, c->step_mm, c->mu)));
  add (figures, _ ("Strong-gradient length"), keep_text (sheet, g_strdup_printf (_ ("%.0f Mm"), c->strong_gradient_length_mm)),
       keep_text (sheet, g_strdup_printf (_ ("after Falconer, Moore & Gary; all inversion lines %.0f Mm, steepest %.0f G/Mm"), c->length_mm,
                                          fmax (c->max_gradient_gauss_mm, 0.0))));
  add (figures, _ ("Flux near the line"), keep_text (sheet, tf_chart_dup_flux (c->flux_near_mx)),
       keep_text (sheet, tf_note_dup_text (c->delta_reason, FALSE)));
}

static void
add_class (Sheet *sheet, GArray *figures)
{
  const TfShiftRow *s = sheet->page->shift;
  if (s == NULL)
    return;
  g_autofree char *iso = tf_sheet_dup_time (s->class_time);
  add (figures, _ ("Class"), keep_text (sheet, tf_sheet_dup_class (s)),
       *s->class_person != '\0' ? keep_text (sheet, g_strdup_printf (_ ("Mount Wilson; %s, on the frame of %s"), s->class_person, iso))
                                : _ ("nobody has given one"));
  if (s->others != NULL)
    add (figures, _ ("Others say"), keep_text (sheet, tf_sheet_dup_others (s->others)), s->others->source);
}

static void
add_verdict (Sheet *sheet, GArray *figures, TfVerdict *verdict)
{
  TfSampleRow sample;
  const TfMeasure *m = &sheet->page->row->measure;
  *verdict = tf_study_judge_measure (sheet->page->study, m);
  tf_study_measure_row (m, &sample);
  add (figures, _ ("Hale's law"), keep_text (sheet, tf_verdict_dup_text (verdict, &sample, FALSE)),
       m->leading_sure ? _ ("leading polarity sure") : _ ("leading polarity not sure"));
}

static TfDial
dial_of (const TfMeasure *m, const TfVerdict *verdict)
{
  TfDial dial = { .bearing_deg = m->axis_bearing_deg,
                  .sigma_deg = m->tilt_terms.total,
                  .lat_deg = m->lat_deg,
                  .leading_polarity = m->leading_polarity,
                  .expected = verdict->expected };
  tf_joy_expected (m->lat_deg, m->separation_deg, &dial.joy_deg, &dial.joy_scatter_deg);
  dial.joy_name = tf_joy_relations[0].name;
  memcpy (dial.witnesses, m->witnesses, sizeof dial.witnesses);
  return dial;
}

/* -- the page ----------------------------------------------------------------------------------- */

static void
line_clear (gpointer data)
{
  g_free ((gpointer)((TfOverlayLine *)data)->points);
}

static void
trace (Sheet *sheet)
{
  TfComplexityParams params;
  tf_complexity_params_init (&params);
  tf_complexity_region (&sheet->complexity, sheet->page->frame, sheet->page->row->outline, &sheet->page->measure, &params);
  const TfInversion *inversion = &sheet->complexity.inversion;
  for (guint k = 0; k < inversion->n; k++)
    {
      const TfInversionLine *from = &inversion->lines[k];
      TfVertex *points = g_new (TfVertex, MAX (from->n, 1));
      for (guint j = 0; j < from->n; j++)
        points[j] = (TfVertex){ from->points[j].lon_deg, from->points[j].lat_deg };
      const TfOverlayLine line = { TF_LINE_INVERSION, points, from->n };
      g_array_append_val (sheet->lines, line);
    }
}

static GPtrArray *
dup_notes (const TfRegionPage *page)
{
  GPtrArray *notes = g_ptr_array_new_with_free_func (g_free);
  for (guint k = 0; page->shift != NULL && k < page->shift->notes->len; k++)
    g_ptr_array_add (notes, tf_sheet_dup_note (g_ptr_array_index (page->shift->notes, k), page->since));
  g_ptr_array_add (notes, NULL);
  return notes;
}

static GPtrArray *
dup_cautions (const Sheet *sheet)
{
  g_autoptr (TfNotes) all = tf_notes_new ();
  const TfNotes *lists[] = { sheet->page->row->measure.cautions, sheet->complexity.notes };
  for (guint n = 0; n < G_N_ELEMENTS (lists); n++)
    for (guint k = 0; k < tf_notes_get_n (lists[n]); k++)
      tf_notes_add_copy (all, tf_notes_get (lists[n], k));
  tf_notes_add (all, "complexity-describes", "");
  tf_notes_add (all, "decisions-elsewhere", "");
  return tf_sheet_dup_cautions (all);
}

static char *
dup_subtitle (const TfRegionPage *page)
{
  g_autofree char *iso = tf_sheet_dup_time (page->row->measure.time);
  g_autofree char *file = g_path_get_basename (page->row->frame_path);
  return g_strdup_printf (_ ("%s · %s · %s · outline: %s%s%s · %s"), iso, file, page->row->instrument, page->row->origin,
                          *page->row->person != '\0' ? ", " : "", page->row->person, page->row->method);
}

static void
draw_page (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  tf_region_sheet_draw (cr, data, style, area);
}

static gboolean
write_sheet (const char *path, Sheet *sheet, GError **error)
{
  const TfRegionPage *page = sheet->page;
  const TfMeasure *m = &page->row->measure;
  TfVerdict verdict;
  g_autoptr (GArray) figures = g_array_new (FALSE, FALSE, sizeof (TfSheetFigure));
  add_class (sheet, figures);
  add_measure (sheet, figures);
  add_complexity (sheet, figures);
  add_verdict (sheet, figures, &verdict);
  const TfDial dial = dial_of (m, &verdict);
  g_autoptr (GPtrArray) notes = dup_notes (page), cautions = dup_cautions (sheet);
  g_autofree char *subtitle = dup_subtitle (page);
  g_autofree char *place = isfinite (m->cmd_deg) ? tf_chart_dup_place (m->lat_deg, m->cmd_deg) : g_strdup ("");
  g_autofree char *title = g_strdup_printf ("%s  %s", *page->row->region != '\0' ? page->row->region : _ ("hint"), place);
  g_autofree char *words = g_strdup_printf (
      _ ("Un-projected, north up, west at the right, field ± %.0f G (white positive), graticule 10°; dashed: inversion lines. %s%s"),
      page->range_gauss > 0.0 ? page->range_gauss : RANGE_GAUSS, page->who != NULL ? _ ("Sheet by ") : "", page->who != NULL ? page->who : "");
  const TfRegionSheet drawn = { .title = title,
                                .subtitle = subtitle,
                                .picture = draw_picture,
                                .picture_data = sheet,
                                .picture_words = words,
                                .dial = &dial,
                                .figures = (const TfSheetFigure *)(const void *)figures->data,
                                .n_figures = figures->len,
                                .notes = (const char *const *)notes->pdata,
                                .cautions = (const char *const *)cautions->pdata };
  const TfFigurePage paper = { 210, 297, 3.0, title, subtitle };
  return tf_figure_write (path, &paper, draw_page, (gpointer)&drawn, error);
}

gboolean
tf_region_page_write (const char *path, const TfRegionPage *page, GError **error)
{
  g_return_val_if_fail (path != NULL && page != NULL && page->frame != NULL && page->row != NULL && page->row->outline != NULL, FALSE);
  Sheet sheet = { .page = page,
                  .lines = g_array_new (FALSE, FALSE, sizeof (TfOverlayLine)),
                  .texts = g_ptr_array_new_with_free_func (g_free),
                  .outline = tf_outline_carry (page->row->outline, tf_frame_get_info (page->frame)->time,
                                               (guint)page->measure.law) };
  g_array_set_clear_func (sheet.lines, line_clear);
  if (sheet.outline == NULL)
    sheet.outline = tf_outline_ref (page->row->outline);
  trace (&sheet);
  gboolean done = write_sheet (path, &sheet, error);
  tf_outline_unref (sheet.outline);
  tf_complexity_clear (&sheet.complexity);
  g_array_unref (sheet.lines);
  g_ptr_array_unref (sheet.texts);
  return done;
}
