/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-widget-style.h"

#include <adwaita.h>
#include <string.h>

double
tf_widget_text_size (GtkWidget *widget)
{
  PangoContext *context = gtk_widget_get_pango_context (widget);
  const PangoFontDescription *font = pango_context_get_font_description (context);
  double size = (double)pango_font_description_get_size (font) / PANGO_SCALE;
  if (!pango_font_description_get_size_is_absolute (font))
    size *= pango_cairo_context_get_resolution (context) / 72.0;
  return size > 0 ? size : 14;
}

/* libadwaita's own setting, or GTK's theme of that name asked for in the environment. */
static gboolean
wants_contrast (AdwStyleManager *manager)
{
  const char *theme = g_getenv ("GTK_THEME");
  return adw_style_manager_get_high_contrast (manager)
         || (theme != NULL && strstr (theme, ":hc") != NULL);
}

TfChartStyle
tf_widget_chart_style (GtkWidget *widget, double share)
{
  AdwStyleManager *manager = adw_style_manager_get_default ();
  return tf_chart_style (adw_style_manager_get_dark (manager), wants_contrast (manager),
                         tf_widget_text_size (widget) * share);
}

void
tf_widget_describe (GtkWidget *widget, char *text)
{
  const char *before = g_object_get_data (G_OBJECT (widget), "tf-description");
  if (g_strcmp0 (before, text) == 0)
    {
      g_free (text);
      return;
    }
  gtk_accessible_update_property (GTK_ACCESSIBLE (widget), GTK_ACCESSIBLE_PROPERTY_DESCRIPTION,
                                  text, -1);
  g_object_set_data_full (G_OBJECT (widget), "tf-description", text, g_free);
}

gboolean
tf_widget_paints_textures (GtkWidget *widget)
{
  GtkNative *native = gtk_widget_get_native (widget);
  GskRenderer *renderer = native != NULL ? gtk_native_get_renderer (native) : NULL;
  return renderer != NULL && g_strcmp0 (G_OBJECT_TYPE_NAME (renderer), "GskCairoRenderer") != 0;
}

static GdkTexture *
texture_of (cairo_surface_t *surface)
{
  cairo_surface_flush (surface);
  gsize stride = (gsize)cairo_image_surface_get_stride (surface);
  int height = cairo_image_surface_get_height (surface);
  g_autoptr (GBytes) bytes = g_bytes_new_with_free_func (
      cairo_image_surface_get_data (surface), stride * (gsize)height,
      (GDestroyNotify)cairo_surface_destroy, cairo_surface_reference (surface));
  return gdk_memory_texture_new (cairo_image_surface_get_width (surface), height,
                                 GDK_MEMORY_DEFAULT, bytes, stride);
}

void
tf_surface_append (GtkSnapshot *snapshot, GtkWidget *widget, cairo_surface_t *surface, double x,
                   double y, double scale)
{
  float width = (float)(cairo_image_surface_get_width (surface) / scale);
  float height = (float)(cairo_image_surface_get_height (surface) / scale);
  graphene_rect_t area = GRAPHENE_RECT_INIT ((float)x, (float)y, width, height);
  if (tf_widget_paints_textures (widget))
    {
      g_autoptr (GdkTexture) texture = texture_of (surface);
      gtk_snapshot_append_texture (snapshot, texture, &area);
      return;
    }
  cairo_t *cr = gtk_snapshot_append_cairo (snapshot, &area);
  cairo_translate (cr, x, y);
  cairo_scale (cr, 1 / scale, 1 / scale);
  cairo_set_source_surface (cr, surface, 0, 0);
  cairo_pattern_set_filter (cairo_get_source (cr), CAIRO_FILTER_NEAREST);
  cairo_paint (cr);
  cairo_destroy (cr);
}

void
tf_widget_name_inside (GtkWidget *widget, const char *name)
{
  for (GtkWidget *child = gtk_widget_get_first_child (widget); child != NULL;
       child = gtk_widget_get_next_sibling (child))
    {
      if (GTK_IS_POPOVER (child))
        continue; /* its rows have their own */
      if (gtk_widget_get_focusable (child))
        gtk_accessible_update_property (GTK_ACCESSIBLE (child), GTK_ACCESSIBLE_PROPERTY_LABEL, name,
                                        -1);
      tf_widget_name_inside (child, name);
    }
}

void
tf_widget_focus_when_open (GtkWidget *expander, GtkWidget *child)
{
  g_object_bind_property (expander, "expanded", child, "can-focus", G_BINDING_SYNC_CREATE);
}
