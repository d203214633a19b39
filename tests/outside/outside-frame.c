/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Prints, for every file named, where its pixels lie, as CSV, for frame.py to compare with other
 * people's libraries.
 * Headers as text end in .header or .hdr; celestial ones of the WCS papers are read as if they
 * were of the Sun. */

#include <glib.h>
#include <math.h>
#include <stdio.h>
#include <string.h>

#include "tf-frame.h"

enum
{
  ACROSS = 9
};

/* RA/DEC to helioprojective or Carrington words, so that the same projections are read; oblique
 * maps, which are refused,
 * are made straight. */
static void
of_the_sun (TfHeader *header)
{
  const char *type = tf_header_get (header, "CTYPE1");
  if (type == NULL || !g_str_has_prefix (type, "RA---"))
    return;
  gboolean map = g_str_has_suffix (type, "CEA") || g_str_has_suffix (type, "CAR");
  g_autofree char *lon = g_strconcat (map ? "CRLN-" : "HPLN-", type + 5, NULL);
  g_autofree char *lat = g_strconcat (map ? "CRLT-" : "HPLT-", type + 5, NULL);
  tf_header_set (header, "CTYPE1", lon);
  tf_header_set (header, "CTYPE2", lat);
  if (map)
    {
      tf_header_set_number (header, "CRVAL2", 0);
      tf_header_remove (header, "LONPOLE");
      tf_header_remove (header, "LATPOLE");
    }
  tf_header_set (header, "CUNIT1", "deg");
  tf_header_set (header, "CUNIT2", "deg");
  tf_header_set (header, "DATE-AVG", "2013-10-12T06:00:00");
}

static TfFrameInfo *
read_text (const char *path)
{
  g_autofree char *text = NULL;
  gsize n = 0;
  if (!g_file_get_contents (path, &text, &n, NULL))
    return NULL;
  g_autoptr (TfHeader) header = tf_header_read (text, (gssize)n);
  of_the_sun (header);
  return tf_frame_info_read (header, (guint)tf_header_int (header, "NAXIS1", 0),
                             (guint)tf_header_int (header, "NAXIS2", 0));
}

static void
print (const char *name, const TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  if (g->projection == TF_PROJECTION_NONE)
    return;
  for (int k = 0; k < ACROSS * ACROSS; k++)
    {
      double x = 1 + (g->width - 1.0) * (k % ACROSS) / (ACROSS - 1.0),
             y = 1 + (g->height - 1.0) * (k / ACROSS) / (ACROSS - 1.0);
      double tx = NAN, ty = NAN;
      TfPlace p;
      if (!tf_geometry_is_map (g))
        tf_geometry_pixel_to_projective (g, x, y, &tx, &ty);
      tf_geometry_pixel_to_sun (g, x, y, &p);
      printf ("%s,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g,%.17g\n", name, x, y, tx, ty,
              p.stonyhurst_lon_deg, p.carrington_lon_deg, p.lat_deg, p.mu);
    }
}

int
main (int argc, char **argv)
{
  puts ("name,x,y,tx,ty,stonyhurst,carrington,lat,mu");
  for (int k = 1; k < argc; k++)
    {
      gboolean text = g_str_has_suffix (argv[k], ".header") || g_str_has_suffix (argv[k], ".hdr");
      g_autoptr (TfFrameInfo) info
          = text ? read_text (argv[k]) : tf_frame_look (argv[k], NULL, NULL, NULL);
      g_autofree char *name = g_path_get_basename (argv[k]);
      if (info != NULL)
        print (name, info);
    }
  return 0;
}
