/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-contour-private.h"
#include "tf-inversion-private.h"
#include "tf-limb-shape-private.h"
#include "tf-measure-private.h"

/* A delta's umbrae are nearer than this, deg (Kuenzel 1960, from memory). */
static const double DELTA_DEG = 2.0;
/* Fewer quiet nodes about the outline than this are too few. */
enum
{
  LEAST_QUIET = 50
};
/* A share of nodes above this where the pixels are too coarse for the resolution is said. */
static const double COARSE_SAID = 0.1;
/* A share of the outline above this without a value is said. */
static const double MISSING_SAID = 0.02;
/* Opposite polarity that a lone spot is compared with, G; a spot on less is doubted. */
static const double WEAK_GAUSS = 150.0;

typedef struct
{
  const TfTraced *field; /* of the magnetogram, on the same nodes */
  TfPatch *patch;        /* of the intensity */
  double *level;         /* intensity over the quiet Sun's; 1 where not seen */
  gint32 *spot;          /* number of the spot a node belongs to; -1 none, -2 one too small */
  guint8 *umbra;
  double msh;    /* of a node */
  GArray *found; /* TfSpot, by number */
} Sight;

/* Sums over nodes of one kind. */
typedef struct
{
  double n, field;
  double sum[3];
} Tally;

void
tf_spots_clear (TfSpots *spots)
{
  for (guint k = 0; k < spots->n_contours; k++)
    g_free (spots->contours[k].points);
  g_free (spots->contours);
  g_free (spots->spots);
  g_clear_pointer (&spots->refusal, tf_note_free);
  g_clear_pointer (&spots->notes, g_ptr_array_unref);
  memset (spots, 0, sizeof *spots);
}

static void
node_unit (const Sight *s, gsize k, double unit[3])
{
  double x, y;
  tf_patch_node (s->patch, k, &x, &y);
  tf_patch_unit (s->patch, x, y, unit);
}

static void
tally_add (Tally *tally, const Sight *s, gsize k, double weight)
{
  double unit[3];
  node_unit (s, k, unit);
  tally->n += weight;
  tally->field += weight * s->field->field[k];
  for (guint i = 0; i < 3; i++)
    tally->sum[i] += weight * unit[i];
}

/* The nodes connected with @start, by sides and corners, for which @kind is not 0, become @nodes
 * and get number @number in @numbers, where they had -1. */
static void
flood (const Sight *s, const guint8 *kind, gint32 *numbers, gsize start, gint32 number,
       GArray *nodes)
{
  const TfPatch *p = s->patch;
  g_array_set_size (nodes, 0);
  g_array_append_val (nodes, start);
  numbers[start] = number;
  for (guint at = 0; at < nodes->len; at++)
    {
      gsize k = g_array_index (nodes, gsize, at);
      guint x = (guint)(k % p->width), y = (guint)(k / p->width);
      for (guint j = y > 0 ? y - 1 : 0; j <= MIN (y + 1, p->height - 1); j++)
        for (guint i = x > 0 ? x - 1 : 0; i <= MIN (x + 1, p->width - 1); i++)
          {
            gsize next = (gsize)j * p->width + i;
            if (!kind[next] || numbers[next] != -1)
              continue;
            numbers[next] = number;
            g_array_append_val (nodes, next);
          }
    }
}

/* -- umbrae of one spot ------------------------------------------------------------------------ */

static gboolean
is_near (const Sight *s, gsize a, gsize b)
{
  double u[3], v[3], chord2 = 0.0;
  node_unit (s, a, u);
  node_unit (s, b, v);
  for (guint i = 0; i < 3; i++)
    chord2 += (u[i] - v[i]) * (u[i] - v[i]);
  return 2.0 * asin (0.5 * sqrt (chord2)) < DELTA_DEG * TF_DEG;
}

/* Whether umbrae of both signs come near each other; @umbrae numbers the nodes of @dark. */
static gboolean
has_delta (const Sight *s, const GArray *dark, const gint32 *umbrae, const GArray *tallies)
{
  for (guint i = 0; i < dark->len; i++)
    for (guint j = i + 1; j < dark->len; j++)
      {
        gsize a = g_array_index (dark, gsize, i), b = g_array_index (dark, gsize, j);
        if (g_array_index (tallies, Tally, umbrae[a]).field
                    * g_array_index (tallies, Tally, umbrae[b]).field
                < 0.0
            && is_near (s, a, b))
          return TRUE;
      }
  return FALSE;
}

static void
find_umbrae (TfSpot *spot, const Sight *s, const GArray *nodes, gint32 *umbrae)
{
  g_autoptr (GArray) tallies = g_array_new (FALSE, TRUE, sizeof (Tally));
  g_autoptr (GArray) dark = g_array_new (FALSE, FALSE, sizeof (gsize));
  g_autoptr (GArray) one = g_array_new (FALSE, FALSE, sizeof (gsize));
  for (guint at = 0; at < nodes->len; at++)
    {
      gsize k = g_array_index (nodes, gsize, at);
      if (!s->umbra[k])
        continue;
      if (umbrae[k] == -1)
        {
          flood (s, s->umbra, umbrae, k, (gint32)tallies->len, one);
          g_array_set_size (tallies, tallies->len + 1);
        }
      tally_add (&g_array_index (tallies, Tally, umbrae[k]), s, k, 1.0);
      g_array_append_val (dark, k);
    }
  spot->umbrae = tallies->len;
  spot->delta = spot->umbrae > 1 && has_delta (s, dark, umbrae, tallies);
}

static void
describe (TfSpot *spot, const Sight *s, const GArray *nodes)
{
  Tally whole = { 0 }, umbra = { 0 };
  for (guint at = 0; at < nodes->len; at++)
    {
      gsize k = g_array_index (nodes, gsize, at);
      tally_add (&whole, s, k, 1.0);
      if (s->umbra[k])
        tally_add (&umbra, s, k, 1.0);
    }
  const Tally *of = umbra.n > 0.0 ? &umbra : &whole;
  tf_sphere_lonlat (whole.sum, &spot->lon_deg, &spot->lat_deg);
  spot->area_msh = whole.n * s->msh;
  spot->umbra_msh = umbra.n * s->msh;
  spot->field_gauss = of->field / of->n;
  spot->polarity = spot->field_gauss >= 0.0 ? 1 : -1;
}

static void
find_spots (Sight *s, const TfCompanionParams *params)
{
  g_autoptr (GArray) nodes = g_array_new (FALSE, FALSE, sizeof (gsize));
  g_autofree guint8 *dark = g_new0 (guint8, s->patch->n);
  g_autofree gint32 *umbrae = g_new (gint32, s->patch->n);
  memset (umbrae, 0xff, s->patch->n * sizeof *umbrae);
  for (gsize k = 0; k < s->patch->n; k++)
    {
      dark[k] = s->field->inside[k] && s->patch->seen[k] && s->level[k] < params->penumbra;
      s->umbra[k] = dark[k] && s->level[k] < params->umbra;
    }
  for (gsize k = 0; k < s->patch->n; k++)
    {
      TfSpot spot = { 0 };
      if (!dark[k] || s->spot[k] != -1)
        continue;
      flood (s, dark, s->spot, k, (gint32)s->found->len, nodes);
      if (nodes->len * s->msh >= params->smallest_msh)
        {
          describe (&spot, s, nodes);
          find_umbrae (&spot, s, nodes, umbrae);
          g_array_append_val (s->found, spot);
          continue;
        }
      for (guint at = 0; at < nodes->len; at++)
        s->spot[g_array_index (nodes, gsize, at)] = -2;
    }
}

/* -- what the spots tell ----------------------------------------------------------------------- */

/* Places of a delta spot go by their own sign, all others by their spot's. */
static void
weigh_polarities (TfSpots *spots, const Sight *s)
{
  Tally side[2] = { 0 };
  TfAxis axis = { 0 };
  for (gsize k = 0; k < s->patch->n; k++)
    if (s->spot[k] >= 0)
      {
        const TfSpot *spot = &g_array_index (s->found, TfSpot, s->spot[k]);
        gboolean plus = spot->delta ? s->field->field[k] >= 0.0 : spot->polarity > 0;
        tally_add (&side[plus ? TF_POSITIVE : TF_NEGATIVE], s, k, 1.0);
      }
  TfSum sums[2] = { 0 };
  for (guint i = 0; i < 2; i++)
    {
      sums[i].flux = side[i].n;
      sums[i].n = (guint)side[i].n;
      sums[i].area = side[i].n * s->patch->step_mm * s->patch->step_mm;
      memcpy (sums[i].sum, side[i].sum, sizeof sums[i].sum);
    }
  tf_axis_from_sums (&axis, sums, NULL, s->patch->radius_mm, FALSE);
  spots->axis_bearing_deg = axis.bearing;
  spots->axis_tilt_deg = axis.tilt;
  spots->separation_deg = axis.separation;
  if (axis.west < 0)
    return;
  spots->leading_lon_deg = axis.lon[axis.west];
  spots->leading_lat_deg = axis.lat[axis.west];
  spots->following_lon_deg = axis.lon[1 - axis.west];
  spots->following_lat_deg = axis.lat[1 - axis.west];
}

/* Longitude of the flux of that sign inside the outline; NaN without any. */
static double
flux_longitude (const Sight *s, int sign)
{
  Tally tally = { 0 };
  double lon, lat;
  for (gsize k = 0; k < s->patch->n; k++)
    if (s->field->inside[k] && sign * s->field->field[k] >= WEAK_GAUSS)
      tally_add (&tally, s, k, fabs (s->field->field[k]));
  if (!(tally.n > 0.0))
    return NAN;
  tf_sphere_lonlat (tally.sum, &lon, &lat);
  return lon;
}

/* The western of the largest spots of the two polarities leads; a lone polarity is compared with
 * the other's flux. */
static int
find_leader (const Sight *s)
{
  const TfSpot *largest[2] = { NULL };
  double lon[2];
  if (s->found->len == 0)
    return TF_WITNESS_ABSENT;
  for (guint k = 0; k < s->found->len; k++)
    {
      const TfSpot *spot = &g_array_index (s->found, TfSpot, k),
                   **best = &largest[spot->polarity > 0 ? TF_POSITIVE : TF_NEGATIVE];
      if (*best == NULL || spot->area_msh > (*best)->area_msh)
        *best = spot;
    }
  for (guint i = 0; i < 2; i++)
    lon[i]
        = largest[i] != NULL ? largest[i]->lon_deg : flux_longitude (s, i == TF_POSITIVE ? 1 : -1);
  double west = tf_wrap_180 (lon[TF_POSITIVE] - lon[TF_NEGATIVE]);
  return isnan (west) ? 0 : (west > 0.0) - (west < 0.0);
}

static void
add_contours (GArray *out, const Sight *s, double level, gboolean umbra)
{
  const TfPatch *p = s->patch;
  g_autoptr (GPtrArray) lines
      = tf_contours (s->level, s->field->inside, p->width, p->height, level);
  for (guint k = 0; k < lines->len; k++)
    {
      const GArray *line = lines->pdata[k];
      TfSpotContour contour = { line->len, g_new (TfVertex, line->len), umbra };
      for (guint i = 0; i < line->len; i++)
        {
          const TfContourPoint *at = &g_array_index (line, TfContourPoint, i);
          double unit[3];
          TfVertex *v = &contour.points[i];
          tf_patch_unit (p, p->x0 + p->step_mm * at->x, p->y0 + p->step_mm * at->y, unit);
          tf_sphere_lonlat (unit, &v->lon_deg, &v->lat_deg);
          if (i > 0)
            v->lon_deg = v[-1].lon_deg + tf_wrap_180 (v->lon_deg - v[-1].lon_deg);
        }
      g_array_append_val (out, contour);
    }
}

/* Dark places that are too small to be spots are brightened, so that they have no contours. */
static void
set_contours (TfSpots *spots, Sight *s, const TfCompanionParams *params)
{
  GArray *contours = g_array_new (FALSE, FALSE, sizeof (TfSpotContour));
  for (gsize k = 0; k < s->patch->n; k++)
    if (s->spot[k] == -2)
      s->level[k] = 1.0;
  add_contours (contours, s, params->penumbra, FALSE);
  add_contours (contours, s, params->umbra, TRUE);
  spots->n_contours = contours->len;
  spots->contours = (TfSpotContour *)(void *)g_array_free (contours, FALSE);
}

static void
tell (TfSpots *spots, const Sight *s)
{
  for (guint k = 0; k < s->found->len; k++)
    {
      const TfSpot *spot = &g_array_index (s->found, TfSpot, k);
      spots->area_msh += spot->area_msh;
      spots->umbra_msh += spot->umbra_msh;
      spots->delta |= spot->delta;
    }
  spots->leading_polarity = find_leader (s);
  if (s->found->len == 0)
    tf_notes_add (spots->notes, "companion-no-spots", "");
  weigh_polarities (spots, s);
}

/* What makes the spots less than they seem. @s: its spots largest first. */
static void
add_cautions (TfSpots *spots, const Sight *s, const TfFrameInfo *intensity,
              const TfCompanionParams *params)
{
  gsize inside = 0, blind = 0;
  for (gsize k = 0; k < s->patch->n; k++)
    {
      inside += s->field->inside[k];
      blind += s->field->inside[k] && !s->patch->seen[k];
    }
  if ((double)blind > MISSING_SAID * (double)inside)
    tf_notes_add (spots->notes, "companion-missing-data", "d", 100.0 * (double)blind / (double)inside);
  if (s->patch->coarse > COARSE_SAID)
    tf_notes_add (spots->notes, "companion-coarse", "d", params->spot_fwhm_mm);
  const TfNote *off = tf_notes_find (intensity->cautions, "limb-off");
  if (off != NULL)
    tf_notes_add (spots->notes, "limb-off", "dd", tf_note_get_number (off, 0),
                  tf_note_get_number (off, 1));
  for (guint k = 0; k < s->found->len; k++)
    {
      const TfSpot *spot = &g_array_index (s->found, TfSpot, k);
      if (spot->delta || fabs (spot->field_gauss) >= WEAK_GAUSS)
        continue;
      tf_notes_add (spots->notes, "companion-weak-field", "dd", fabs (spot->field_gauss),
                    spot->area_msh);
      return;
    }
}

static gint
by_area (gconstpointer a, gconstpointer b)
{
  double x = ((const TfSpot *)a)->area_msh, y = ((const TfSpot *)b)->area_msh;
  return (x < y) - (x > y);
}

/* -- the whole --------------------------------------------------------------------------------- */

static void
sight_clear (Sight *s)
{
  tf_patch_free (s->patch);
  g_free (s->level);
  g_free (s->spot);
  g_free (s->umbra);
  g_array_unref (s->found);
}

/* The intensity on the very nodes of the field's patch. */
static void
sight_open (Sight *s, const TfTraced *field, const TfFrame *intensity, const TfLimbShape *shape,
            const TfPatchSpec *spec)
{
  s->field = field;
  s->patch = tf_patch_new (intensity, spec);
  gsize n = s->patch->n;
  s->level = g_new (double, n);
  s->spot = g_new (gint32, n);
  s->umbra = g_new0 (guint8, n);
  s->found = g_array_new (FALSE, TRUE, sizeof (TfSpot));
  s->msh = 1e6 * spec->step_mm * spec->step_mm
           / (2.0 * TF_PI * s->patch->radius_mm * s->patch->radius_mm);
  memset (s->spot, 0xff, n * sizeof *s->spot);
  double side = 1 << s->patch->level;
  for (gsize k = 0; k < n; k++)
    {
      double x = s->patch->u[k] * side + 0.5 * (side + 1.0),
             y = s->patch->v[k] * side + 0.5 * (side + 1.0);
      s->level[k] = s->patch->seen[k]
                        ? s->patch->value[k] / tf_limb_shape_quiet (shape, s->patch->mu[k], x, y)
                        : 1.0;
    }
}

static gint
by_number (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

/* Flat fields of real frames leave some per cent after limb darkening: the median about the outline
 * becomes 1. */
static double
level_out (Sight *s)
{
  g_autoptr (GArray) quiet = g_array_new (FALSE, FALSE, sizeof (double));
  for (guint round = 0; round < 2 && quiet->len < LEAST_QUIET; round++)
    for (gsize k = 0; k < s->patch->n; k++)
      if (s->patch->seen[k] && (round == 1 || !s->field->inside[k]))
        g_array_append_val (quiet, s->level[k]);
  if (quiet->len == 0)
    return NAN;
  g_array_sort (quiet, by_number);
  double middle = g_array_index (quiet, double, quiet->len / 2);
  for (gsize k = 0; k < s->patch->n; k++)
    if (s->patch->seen[k])
      s->level[k] /= middle;
  return middle;
}

static void
set_nothing (TfSpots *spots)
{
  memset (spots, 0, sizeof *spots);
  spots->notes = tf_notes_new ();
  spots->leading_polarity = TF_WITNESS_ABSENT;
  spots->leading_lon_deg = spots->leading_lat_deg = spots->following_lon_deg
      = spots->following_lat_deg = NAN;
  spots->axis_bearing_deg = spots->axis_tilt_deg = spots->separation_deg = spots->quiet_scatter
      = spots->quiet_here = spots->apart_min = NAN;
}

static void
look (TfSpots *spots, const TfFrame *field, const TfFrame *intensity, const TfOutline *here,
      const TfMeasureParams *measure, const TfCompanionParams *params, const TfLimbShape *shape)
{
  TfComplexityParams grid;
  TfPatchSpec spec;
  Sight s = { 0 };
  tf_complexity_params_init (&grid);
  grid.fwhm_mm = params->spot_fwhm_mm;
  grid.step_mm = params->spot_step_mm;
  tf_traced_spec (&spec, field, here, &grid, 0.0, 0.0);
  g_autoptr (TfTraced) traced = tf_traced_new (field, here, measure, &grid, 0.0, 0.0, FALSE);
  sight_open (&s, traced, intensity, shape, &spec);
  spots->quiet_here = level_out (&s);
  find_spots (&s, params);
  tell (spots, &s);
  set_contours (spots, &s, params);
  g_array_sort (s.found, by_area);
  add_cautions (spots, &s, tf_frame_get_info (intensity), params);
  spots->n = s.found->len;
  spots->spots = g_memdup2 (s.found->data, s.found->len * sizeof (TfSpot));
  sight_clear (&s);
}

void
tf_spots_find (TfSpots *spots, const TfFrame *field, const TfFrame *intensity,
               const TfOutline *outline, const TfMeasureParams *measure,
               const TfCompanionParams *params)
{
  g_return_if_fail (spots != NULL && field != NULL && intensity != NULL && outline != NULL
                    && measure != NULL && params != NULL);
  set_nothing (spots);
  TfLimbShape shape;
  g_autoptr (TfOutline) here = tf_mask_outline (field, outline, (guint)measure->law);
  spots->matched = tf_companion_matches (tf_frame_get_info (field), tf_frame_get_info (intensity),
                                         here, params, &spots->refusal);
  if (!spots->matched)
    return;
  if (!tf_limb_shape_fit (&shape, intensity, (TfLimbMethod)params->limb))
    {
      spots->matched = FALSE;
      spots->refusal = tf_note_new ("companion-no-values", "");
      return;
    }
  if (shape.method == TF_LIMB_PUBLISHED && params->limb == TF_LIMB_OWN)
    tf_notes_add (spots->notes, "companion-limb-published", "");
  spots->apart_min
      = fabs (tf_frame_get_info (field)->time.s - tf_frame_get_info (intensity)->time.s) / 60.0;
  spots->limb = shape.method;
  spots->quiet_scatter = shape.scatter;
  look (spots, field, intensity, here, measure, params, &shape);
}
