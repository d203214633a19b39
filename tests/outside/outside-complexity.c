/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Prints, as CSV, what inversion lines and complexity are worked out from and what comes out, for
 * complexity.py to work out with scipy. Arguments: which table, and which case: "pixels", "grid",
 * "lines", "figures". */

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "../region/region-builder.h"
#include "tf-complexity-private.h"
#include "tf-constants.h"

typedef struct
{
  BuilderFrame how;
  double radius_deg;
  guint n;
  BuilderPole poles[5];
} Case;

/* Disk centre, a radial product, upright; off centre on the equator, upright; turned, with noise; a
 * tangle, with noise. */
static const Case cases[] = {
  { { .scale_arcsec = 1.0,
      .distance_au = 1.0,
      .half_deg = 8.0,
      .fine = 3,
      .seed = 1,
      .radial = TRUE },
    5.0,
    2,
    { { 1.3, -0.4, 0.9, 1.4e22 }, { -1.2, 0.5, 0.8, -1.1e22 } } },
  { { .scale_arcsec = 1.0, .distance_au = 1.0, .lon = 40.0, .half_deg = 7.0, .fine = 3, .seed = 2 },
    4.5,
    2,
    { { 41.2, 0.3, 0.8, 1.2e22 }, { 38.9, -0.3, 0.7, -1.2e22 } } },
  { { .scale_arcsec = 2.0,
      .turn_deg = 31.0,
      .b0_deg = -5.0,
      .distance_au = 0.99,
      .lon = -25.0,
      .lat = 12.0,
      .half_deg = 8.0,
      .noise = 10.0,
      .fine = 3,
      .seed = 3 },
    5.0,
    3,
    { { -23.9, 11.5, 0.7, 9e21 }, { -26.3, 12.4, 0.9, -1.2e22 }, { -25.0, 13.6, 0.5, 3e21 } } },
  { { .scale_arcsec = 2.0,
      .turn_deg = 180.2,
      .b0_deg = 6.0,
      .distance_au = 1.01,
      .lon = 15.0,
      .lat = -18.0,
      .half_deg = 9.0,
      .noise = 15.0,
      .fine = 3,
      .seed = 4 },
    6.0,
    5,
    { { 16.9, -18.6, 0.7, 1e22 },
      { 13.1, -17.5, 0.8, -1e22 },
      { 15.2, -16.9, 0.5, 5e21 },
      { 15.0, -19.2, 0.6, -6e21 },
      { 18.1, -17.2, 0.5, -2.5e21 } } },
};

typedef struct
{
  TfFrame *frame;
  TfOutline *outline;
  TfMeasureParams measure;
  TfComplexityParams params;
} Made;

static void
make (Made *m, const Case *c)
{
  m->frame = builder_frame (&c->how, c->poles, c->n);
  m->outline = builder_cap (c->how.lon, c->how.lat, c->radius_deg);
  tf_measure_params_init (&m->measure);
  tf_complexity_params_init (&m->params);
}

static void
print_pixels (const Made *m)
{
  guint w = tf_frame_get_width (m->frame), h = tf_frame_get_height (m->frame);
  const float *pixels = tf_frame_get_pixels (m->frame);
  puts ("x,y,field");
  for (guint k = 0; k < w * h; k++)
    printf ("%u,%u,%.9g\n", k % w, k / w, (double)pixels[k]);
}

/* Four grids half a step apart; the first with the transverse field. Pixel places are 0-based, by
 * the frame's own geometry. */
static void
print_grid (const Made *m)
{
  const TfGeometry *g = tf_frame_get_geometry (m->frame);
  puts ("grid,column,row,x_mm,y_mm,pixel_x,pixel_y,value,field,mu,inside,transverse");
  for (guint s = 0; s < 4; s++)
    {
      g_autoptr (TfTraced) t = tf_traced_new (m->frame, m->outline, &m->measure, &m->params,
                                              0.5 * (s % 2), 0.5 * (s / 2), s == 0);
      for (gsize k = 0; k < t->patch->n; k++)
        {
          double x, y, unit[3], lon, lat, px, py, mu;
          tf_patch_node (t->patch, k, &x, &y);
          tf_patch_unit (t->patch, x, y, unit);
          tf_sphere_lonlat (unit, &lon, &lat);
          tf_geometry_sun_to_pixel (g, lon, lat, &px, &py, &mu);
          printf ("%u,%u,%u,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%u,%.12g\n", s,
                  (guint)(k % t->patch->width), (guint)(k / t->patch->width), x, y, px - 1.0,
                  py - 1.0, t->patch->value[k], t->field[k], mu, t->inside[k],
                  t->transverse != NULL ? t->transverse[k] : 0.0);
        }
    }
}

static void
print_lines (const Made *m)
{
  g_auto (TfInversion) inversion = { 0 };
  g_autoptr (TfTraced) t
      = tf_traced_new (m->frame, m->outline, &m->measure, &m->params, 0.0, 0.0, TRUE);
  tf_inversion_trace (&inversion, t, &m->params);
  puts ("line,x_mm,y_mm,lon_deg,lat_deg,gradient,transverse,length_mm,mean_gradient");
  for (guint k = 0; k < inversion.n; k++)
    for (guint i = 0; i < inversion.lines[k].n; i++)
      {
        const TfInversionPoint *p = &inversion.lines[k].points[i];
        double unit[3], x, y;
        tf_sphere_unit (p->lon_deg, p->lat_deg, unit);
        tf_patch_plane (t->patch, unit, &x, &y);
        printf ("%u,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g\n", k, x, y, p->lon_deg,
                p->lat_deg, p->gradient_gauss_mm, p->transverse_gauss, inversion.lines[k].length_mm,
                inversion.lines[k].mean_gradient_gauss_mm);
      }
}

static void
print_figures (const Made *m)
{
  g_auto (TfComplexity) c = { 0 };
  tf_complexity_region (&c, m->frame, m->outline, &m->measure, &m->params);
  const TfGeometry *g = tf_frame_get_geometry (m->frame);
  puts ("r_mx,length_mm,strong_field_mm,strong_gradient_mm,weighted_gauss,max_gradient,flux_near_"
        "mx,pieces,radius_mm,pixel_arcsec,distance_mm");
  printf ("%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%.12g,%u,%.12g,%.12g,%.12g\n", c.r_mx, c.length_mm,
          c.strong_field_length_mm, c.strong_gradient_length_mm, c.gradient_weighted_gauss,
          c.max_gradient_gauss_mm, c.flux_near_mx, c.pieces, g->radius_mm,
          tf_geometry_scale_arcsec (g), g->distance_mm);
}

static const struct
{
  const char *name;
  void (*print) (const Made *m);
} tables[] = { { "pixels", print_pixels },
               { "grid", print_grid },
               { "lines", print_lines },
               { "figures", print_figures } };

int
main (int argc, char **argv)
{
  guint k = argc == 3 ? (guint)atoi (argv[2]) : G_MAXUINT;
  if (k >= G_N_ELEMENTS (cases))
    {
      fprintf (stderr, "outside-complexity TABLE CASE, cases 0 to %u\n",
               (guint)G_N_ELEMENTS (cases) - 1);
      return 2;
    }
  Made made;
  make (&made, &cases[k]);
  for (guint t = 0; t < G_N_ELEMENTS (tables); t++)
    if (strcmp (argv[1], tables[t].name) == 0)
      tables[t].print (&made);
  tf_frame_unref (made.frame);
  tf_outline_unref (made.outline);
  return 0;
}
