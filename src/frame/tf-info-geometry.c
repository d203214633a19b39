/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-constants.h"
#include "tf-info-private.h"

#include <math.h>
#include <string.h>
#include <wcslib/wcs.h>
#include <wcslib/wcshdr.h>

/* The standard step: the repaired header's WCS words of the first two axes through wcslib
 * (Papers I and II), which knows the precedence of PC, CD and CROTA, the units and the
 * defaults. */

static const char *const wcs_words[] = {
  "CTYPE1", "CTYPE2", "CUNIT1", "CUNIT2",  "CRPIX1",  "CRPIX2", "CRVAL1", "CRVAL2",
  "CDELT1", "CDELT2", "PC1_1",  "PC1_2",   "PC2_1",   "PC2_2",  "CD1_1",  "CD1_2",
  "CD2_1",  "CD2_2",  "CROTA2", "LONPOLE", "LATPOLE", "PV2_1",  "PV1_3",  "PV1_4",
};

static TfHeader *
wcs_header (const TfHeader *header)
{
  TfHeader *words = tf_header_new ();
  tf_header_set_number (words, "WCSAXES", 2);
  for (guint k = 0; k < G_N_ELEMENTS (wcs_words); k++)
    {
      const char *text = tf_header_get (header, wcs_words[k]);
      double number = tf_header_number (header, wcs_words[k]);
      if (text == NULL)
        continue;
      if (wcs_words[k][0] == 'C' && (wcs_words[k][1] == 'T' || wcs_words[k][1] == 'U'))
        tf_header_set (words, wcs_words[k], text);
      else if (isfinite (number))
        tf_header_set_number (words, wcs_words[k], number);
    }
  return words;
}

typedef struct
{
  struct wcsprm *list;
  int n;
} Wcs;

static void
wcs_clear (Wcs *wcs)
{
  if (wcs->list != NULL)
    wcsvfree (&wcs->n, &wcs->list);
}

G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Wcs, wcs_clear)

/* The first representation, set up; NULL when wcslib cannot. */
static struct wcsprm *
parse (const TfHeader *header, Wcs *wcs)
{
  guint n_cards = 0;
  int rejected = 0;
  g_autoptr (TfHeader) words = wcs_header (header);
  g_autofree char *cards = tf_header_dup_cards (words, &n_cards);
  if (wcspih (cards, (int)n_cards, WCSHDR_all, 0, &rejected, &wcs->n, &wcs->list) != 0
      || wcs->n < 1)
    return NULL;
  return wcsset (wcs->list) == 0 && wcs->list->naxis == 2 ? wcs->list : NULL;
}

static TfProjection
projection_of (const TfHeader *header)
{
  const char *lon = tf_header_get (header, "CTYPE1"), *lat = tf_header_get (header, "CTYPE2");
  if (lon == NULL || lat == NULL)
    return TF_PROJECTION_NONE;
  if (strcmp (lon, "HPLN-TAN") == 0 && strcmp (lat, "HPLT-TAN") == 0)
    return TF_PROJECTION_TAN;
  if (strcmp (lon, "CRLN-CEA") == 0 && strcmp (lat, "CRLT-CEA") == 0)
    return TF_PROJECTION_CEA;
  if (strcmp (lon, "CRLN-CAR") == 0 && strcmp (lat, "CRLT-CAR") == 0)
    return TF_PROJECTION_CAR;
  return TF_PROJECTION_NONE;
}

static void
copy_wcs (const struct wcsprm *wcs, TfGeometry *g)
{
  double lambda = 1;
  for (int k = 0; k < wcs->npv; k++)
    if (wcs->pv[k].i == 2 && wcs->pv[k].m == 1)
      lambda = wcs->pv[k].value;
  for (int i = 0; i < 2; i++)
    {
      g->crpix[i] = wcs->crpix[i];
      g->crval_deg[i] = wcs->crval[i];
      for (int j = 0; j < 2; j++)
        g->cd[i][j] = wcs->cdelt[i] * wcs->pc[2 * i + j];
    }
  g->lonpole_deg = isfinite (wcs->lonpole) && fabs (wcs->lonpole) <= 360 ? wcs->lonpole : 180;
  if (g->projection == TF_PROJECTION_CEA)
    {
      g->cd[1][1] *= TF_DEG * lambda; /* Paper II eq. 79: y = (180/pi) sin (lat) / lambda */
      g->cd[1][0] *= TF_DEG * lambda;
    }
}

/* Cylindrical maps are read with their rows along the Sun's parallels only: Paper II makes
 * others oblique. */
static gboolean
is_oblique (const TfGeometry *g)
{
  double turned = fabs (g->cd[0][1] / g->cd[0][0]) + fabs (g->cd[1][0] / g->cd[1][1]);
  return (g->projection == TF_PROJECTION_CEA || g->projection == TF_PROJECTION_CAR)
         && (fabs (g->crval_deg[1]) > 1e-6 || !(turned < 1e-6));
}

/* Share of the limb that falls on the picture. */
static double
limb_share (const TfGeometry *g)
{
  double x, y, r = tf_geometry_disk_radius (g);
  guint inside = 0;
  if (!tf_geometry_disk_centre (g, &x, &y) || !(r > 0))
    return 0;
  for (int k = 0; k < 360; k++)
    {
      double u = x + r * cos (k * TF_DEG), v = y + r * sin (k * TF_DEG);
      inside += u > 0.5 - 0.01 * r && u < g->width + 0.5 + 0.01 * r && v > 0.5 - 0.01 * r
                && v < g->height + 0.5 + 0.01 * r;
    }
  return inside / 360.0;
}

static TfKind
kind_of (const TfHeader *header, const TfGeometry *g)
{
  if (!tf_geometry_is_map (g))
    return limb_share (g) >= 0.75 ? TF_KIND_DISK : TF_KIND_CUT_OUT;
  return tf_header_has (header, "MODEL") || tf_header_has (header, "MODELDA") ? TF_KIND_MODEL_MAP
                                                                              : TF_KIND_MAP;
}

/* FOVX and FOVY (arcsec) belong to a picture of another size: CRPIX is then of that picture too. */
static void
check_field_of_view (const TfHeader *header, TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  double fov_x = tf_header_number (header, "FOVX"), fov_y = tf_header_number (header, "FOVY");
  double scale = tf_geometry_scale_arcsec (g);
  double told_x = fov_x / scale, told_y = fov_y / scale;
  gboolean differs = fabs (told_x / g->width - 1) > 0.02 || fabs (told_y / g->height - 1) > 0.02;
  if (differs && (g->crpix[0] > g->width || g->crpix[1] > g->height))
    tf_notes_add (info->cautions, "header-of-another-size", "iidd", (int)g->width, (int)g->height,
                  told_x, told_y);
}

gboolean
tf_info_read_geometry (const TfHeader *header, TfFrameInfo *info)
{
  TfGeometry *g = &info->geometry;
  TfProjection projection = projection_of (header);
  g_auto (Wcs) wcs = { NULL, 0 };
  const struct wcsprm *set = projection != TF_PROJECTION_NONE ? parse (header, &wcs) : NULL;
  if (set == NULL)
    return FALSE;
  g->projection = projection;
  copy_wcs (set, g);
  if (is_oblique (g))
    {
      info->role = TF_ROLE_REFUSED;
      g_clear_pointer (&info->refusal, tf_note_free);
      info->refusal = tf_note_new ("oblique-map", "d", g->crval_deg[1]);
      return FALSE;
    }
  if (!tf_geometry_make (g))
    return FALSE;
  info->kind = kind_of (header, g);
  if (projection == TF_PROJECTION_TAN)
    {
      if (!tf_header_has (header, "PC1_1") && !tf_header_has (header, "PC1_2")
          && !tf_header_has (header, "CD1_1") && !tf_header_has (header, "CROTA2"))
        tf_notes_add (info->cautions, "north-taken-up", "");
      check_field_of_view (header, info);
    }
  return TRUE;
}
