/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-figure.h"

#include <errno.h>
#include <math.h>
#include <string.h>
#include <unistd.h>
#include <cairo-pdf.h>
#include <cairo-svg.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>

G_DEFINE_QUARK (tf - chart - error - quark, tf_chart_error)

#define POINTS_A_MM (72 / 25.4)
#define PNG_SCALE   (600 / 72.0) /* 600 pixels an inch */
#define COLUMN_MM   88.0
#define TEXT_MM     2.3

typedef enum
{
  FORM_NONE,
  FORM_PDF,
  FORM_SVG,
  FORM_PNG,
} Form;

static Form
form_of (const char *path)
{
  static const struct
  {
    const char *ending;
    Form form;
  } forms[] = { { ".pdf", FORM_PDF }, { ".svg", FORM_SVG }, { ".png", FORM_PNG } };
  g_autofree char *lower = g_ascii_strdown (path, -1);
  for (guint k = 0; k < G_N_ELEMENTS (forms); k++)
    if (g_str_has_suffix (lower, forms[k].ending))
      return forms[k].form;
  return FORM_NONE;
}

typedef struct
{
  GByteArray *bytes;
  const TfCancel *cancel;
} Into;

static cairo_status_t
take_bytes (void *data, const unsigned char *bytes, unsigned int n)
{
  const Into *into = data;
  if (tf_cancel_is_raised (into->cancel))
    return CAIRO_STATUS_WRITE_ERROR;
  g_byte_array_append (into->bytes, bytes, n);
  return CAIRO_STATUS_SUCCESS;
}

static void
set_properties (cairo_surface_t *surface, const TfFigurePage *page)
{
  if (page->title != NULL)
    cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_TITLE, page->title);
  if (page->subject != NULL)
    cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_SUBJECT, page->subject);
  /* no time of writing: equal charts are equal files */
  cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_CREATE_DATE, "");
  cairo_pdf_surface_set_metadata (surface, CAIRO_PDF_METADATA_CREATOR, "Tiltfield " TF_VERSION);
}

static cairo_surface_t *
new_surface (Form form, const TfFigurePage *page, double width, double height, Into *into)
{
  cairo_surface_t *surface;
  switch (form)
    {
    case FORM_PDF:
      surface = cairo_pdf_surface_create_for_stream (take_bytes, into, width, height);
      set_properties (surface, page);
      return surface;
    case FORM_SVG:
      surface = cairo_svg_surface_create_for_stream (take_bytes, into, width, height);
      cairo_svg_surface_set_document_unit (surface, CAIRO_SVG_UNIT_PT);
      return surface;
    case FORM_PNG:
    case FORM_NONE:
    default:
      return cairo_image_surface_create (CAIRO_FORMAT_RGB24, (int)lround (width * PNG_SCALE),
                                         (int)lround (height * PNG_SCALE));
    }
}

static TfChartStyle
print_style (const TfFigurePage *page)
{
  TfChartStyle style = tf_chart_style (FALSE, FALSE, page->text_mm * POINTS_A_MM);
  style.ground = (TfColour){ 1, 1, 1, 1 };
  return style;
}

static cairo_status_t
draw_page (Form form, const TfFigurePage *page, TfFigureFunc draw, gpointer data, Into *into)
{
  double width = page->width_mm * POINTS_A_MM, height = page->height_mm * POINTS_A_MM;
  TfChartStyle style = print_style (page);
  cairo_surface_t *surface = new_surface (form, page, width, height, into);
  cairo_t *cr = cairo_create (surface);
  if (form == FORM_PNG)
    {
      tf_chart_set (cr, style.ground);
      cairo_paint (cr);
      cairo_scale (cr, PNG_SCALE, PNG_SCALE);
    }
  draw (cr, &style, (TfArea){ 0, 0, width, height }, data);
  cairo_status_t status = cairo_status (cr);
  cairo_destroy (cr);
  if (status == CAIRO_STATUS_SUCCESS && form == FORM_PNG)
    status = cairo_surface_write_to_png_stream (surface, take_bytes, into);
  cairo_surface_finish (surface);
  if (status == CAIRO_STATUS_SUCCESS)
    status = cairo_surface_status (surface);
  cairo_surface_destroy (surface);
  return status;
}

gboolean
tf_figure_write (const char *path, const TfFigurePage *page, TfFigureFunc draw, gpointer data,
                 GError **error)
{
  g_return_val_if_fail (path != NULL && page != NULL && draw != NULL, FALSE);
  Form form = form_of (path);
  if (form == FORM_NONE)
    {
      g_set_error (error, TF_CHART_ERROR, TF_CHART_ERROR_ENDING,
                   _ ("%s: a figure's file must end in .pdf, .svg or .png"), path);
      return FALSE;
    }
  g_autoptr (GByteArray) bytes = g_byte_array_new ();
  Into into = { bytes, page->cancel };
  cairo_status_t status = draw_page (form, page, draw, data, &into);
  g_autoptr (GError) problem = NULL;
  if (tf_cancel_is_raised (page->cancel))
    {
      g_set_error (error, TF_CHART_ERROR, TF_CHART_ERROR_STOPPED, _ ("%s was not written: cancelled"),
                   path);
      return FALSE;
    }
  if (status == CAIRO_STATUS_SUCCESS
      && g_file_set_contents (path, (const char *)bytes->data, (gssize)bytes->len, &problem))
    return TRUE;
  g_set_error (error, TF_CHART_ERROR, TF_CHART_ERROR_WRITE, _ ("%s cannot be written: %s"), path,
               problem != NULL ? problem->message : cairo_status_to_string (status));
  return FALSE;
}

/* -- the charts of a study ------------------------------------------------------------------- */

typedef struct
{
  const TfLawsCharts *charts;
  const TfLawsChart *chart;
} One;

static void
draw_one (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  const One *one = data;
  one->chart->draw (cr, one->charts, style, area);
}

static gboolean
write_one (const One *one, const char *path, const char *subject, TfCancel *cancel, GError **error)
{
  TfFigurePage page = { .width_mm = COLUMN_MM,
                        .text_mm = TEXT_MM,
                        .title = _ (one->chart->title),
                        .subject = subject,
                        .cancel = cancel };
  TfChartStyle style = print_style (&page);
  page.height_mm
      = one->chart->height (one->charts, &style, page.width_mm * POINTS_A_MM) / POINTS_A_MM;
  return tf_figure_write (path, &page, draw_one, (gpointer)one, error);
}

gboolean
tf_laws_chart_write (const TfLawsChart *chart, const TfLawsCharts *charts, const char *path,
                     const char *subject, TfCancel *cancel, GError **error)
{
  g_return_val_if_fail (chart != NULL && charts != NULL && path != NULL, FALSE);
  const One one = { charts, chart };
  return write_one (&one, path, subject, cancel, error);
}

GPtrArray *
tf_laws_charts_write (const TfLawsCharts *charts, const char *folder, const char *ending,
                      const char *subject, GError **error)
{
  g_return_val_if_fail (charts != NULL && folder != NULL && ending != NULL, NULL);
  g_autoptr (GPtrArray) written = g_ptr_array_new_with_free_func (g_free);
  if (g_mkdir_with_parents (folder, 0777) != 0)
    {
      g_set_error (error, TF_CHART_ERROR, TF_CHART_ERROR_WRITE,
                   _ ("the folder %s cannot be made: %s"), folder, g_strerror (errno));
      return NULL;
    }
  for (const TfLawsChart *chart = tf_laws_chart_table; chart->name != NULL; chart++)
    {
      if (!chart->has (charts))
        continue;
      One one = { charts, chart };
      g_autofree char *name = g_strdup_printf ("%s.%s", chart->name, ending);
      char *path = g_build_filename (folder, name, NULL);
      g_ptr_array_add (written, path);
      if (!write_one (&one, path, subject, NULL, error))
        return NULL;
    }
  return g_steal_pointer (&written);
}
