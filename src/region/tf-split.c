/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Pieces are parted in all ways there are (there are few), the ways ordered by what they cost, and
 * the first one that a straight line can carry out is taken. All in the gnomonic plane about the
 * outline's centre, where great circles are straight.
 *
 * Cost of a group: opposite fluxes pair off, nearest first; a pair costs its flux times its distance,
 * and flux that finds no partner costs the greatest distance between any two pieces. */

#include "tf-split.h"

#include <math.h>
#include <string.h>

#include "tf-constants.h"
#include "tf-measure-private.h"

enum
{
  MOST_PIECES = 8, /* the strongest; at the default share there are six at the most */
  ANGLES = 90,
  BINS = 128,
  REACH = 12, /* bins: how far from the line flux still counts as near */
  STEPS = 600 /* along the line, to find where it leaves the outline */
};
static const double misplaced_most = 0.12; /* of the weaker group's flux */
static const double group_least = 0.05;    /* of all pieces' flux */
static const double near_share = 0.1;      /* what flux near the line counts against flux misplaced */

typedef struct
{
  double u, v, flux; /* flux unsigned */
  guint piece;       /* index into the strong pieces */
  guint group;
} Spot;

typedef struct
{
  int sign;
  double flux, u, v;
} Strong;

typedef struct
{
  double centre[3], east[3], north[3];
  guint n;
  Strong strong[MOST_PIECES];
  GArray *spots; /* Spot: the strong pieces' cells */
  double flux;
  const TfOutline *outline;
} Plane;

/* How the pieces are parted: a bit a piece; @shared is parted itself, -1: none. */
typedef struct
{
  guint mask;
  int shared;
  double cost;
} Parting;

/* -- the plane ------------------------------------------------------------------------------- */

static double
dot (const double a[3], const double b[3])
{
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

static void
plane_basis (Plane *plane)
{
  double lon, lat, radius;
  tf_outline_get_cap (plane->outline, &lon, &lat, &radius);
  tf_sphere_unit (lon, lat, plane->centre);
  tf_sphere_unit (lon + 90.0, 0.0, plane->east);
  const double *c = plane->centre, *e = plane->east;
  plane->north[0] = c[1] * e[2] - c[2] * e[1];
  plane->north[1] = c[2] * e[0] - c[0] * e[2];
  plane->north[2] = c[0] * e[1] - c[1] * e[0];
}

static gboolean
to_plane (const Plane *plane, const double direction[3], double *u, double *v)
{
  double depth = dot (plane->centre, direction);
  *u = dot (plane->east, direction) / depth;
  *v = dot (plane->north, direction) / depth;
  return depth > 0.0 && isfinite (*u) && isfinite (*v);
}

static void
to_unit (const Plane *plane, double u, double v, double unit[3])
{
  double length = sqrt (1.0 + u * u + v * v);
  for (guint i = 0; i < 3; i++)
    unit[i] = (plane->centre[i] + u * plane->east[i] + v * plane->north[i]) / length;
}

static gint
by_flux (gconstpointer a, gconstpointer b, gpointer data)
{
  const TfPiece *pieces = data;
  double fa = pieces[*(const guint *)a].flux, fb = pieces[*(const guint *)b].flux;
  return (fa < fb) - (fa > fb);
}

/* The strong pieces in order of flux; @number: of each piece among them, or MOST_PIECES. */
static void
choose_strong (Plane *plane, const TfPieceField *field, double least, guint *number)
{
  guint n = field->pieces->len;
  const TfPiece *pieces = (const TfPiece *)(gconstpointer)field->pieces->data;
  g_autofree guint *order = g_new (guint, MAX (n, 1));
  for (guint k = 0; k < n; k++)
    {
      order[k] = k;
      number[k] = MOST_PIECES;
    }
  g_qsort_with_data (order, (gint)n, sizeof *order, by_flux, (gpointer)pieces);
  for (guint k = 0; k < n && plane->n < MOST_PIECES; k++)
    {
      const TfPiece *piece = &pieces[order[k]];
      Strong strong = { .sign = piece->sign, .flux = piece->flux };
      if (piece->flux < least || !to_plane (plane, piece->sum, &strong.u, &strong.v))
        continue;
      number[order[k]] = plane->n;
      plane->strong[plane->n++] = strong;
      plane->flux += strong.flux;
    }
}

static void
fill_plane (Plane *plane, const TfRegionSamples *samples)
{
  g_auto (TfPieceField) field = { 0 };
  double all = 0.0;
  tf_region_find_pieces (samples, &field);
  for (guint k = 0; k < field.pieces->len; k++)
    all += g_array_index (field.pieces, TfPiece, k).flux;
  g_autofree guint *number = g_new (guint, MAX (field.pieces->len, 1));
  choose_strong (plane, &field, samples->params->piece_share * all, number);
  for (gsize k = 0; k < (gsize)field.width * field.height; k++)
    {
      const TfPieceCell *cell = &field.cells[k];
      guint piece = cell->piece > 0 ? number[cell->piece - 1] : MOST_PIECES;
      if (piece >= MOST_PIECES)
        continue;
      double direction[3];
      for (guint i = 0; i < 3; i++)
        direction[i] = plane->strong[piece].sign * cell->sum[i];
      Spot spot = { .flux = fabs (cell->flux), .piece = piece };
      if (to_plane (plane, direction, &spot.u, &spot.v))
        g_array_append_val (plane->spots, spot);
    }
}

/* -- partings -------------------------------------------------------------------------------- */

static double
apart (const Strong *a, const Strong *b)
{
  return hypot (a->u - b->u, a->v - b->v);
}

/* Opposite fluxes of one group pair off, nearest first. */
static double
group_cost (const Strong *members, guint n, double reach)
{
  double left[2 * MOST_PIECES], cost = 0.0;
  for (guint k = 0; k < n; k++)
    left[k] = members[k].flux;
  for (;;)
    {
      double best = INFINITY;
      guint a = 0, b = 0;
      for (guint j = 0; j < n; j++)
        for (guint k = j + 1; k < n; k++)
          if (members[j].sign != members[k].sign && left[j] > 0.0 && left[k] > 0.0
              && apart (&members[j], &members[k]) < best)
            {
              best = apart (&members[j], &members[k]);
              a = j;
              b = k;
            }
      if (!isfinite (best))
        break;
      double paired = fmin (left[a], left[b]);
      cost += paired * best;
      left[a] -= paired;
      left[b] -= paired;
    }
  for (guint k = 0; k < n; k++)
    cost += left[k] * reach;
  return cost;
}

static gint
by_lean (gconstpointer a, gconstpointer b, gpointer data)
{
  const double *lean = data;
  double la = lean[*(const guint *)a], lb = lean[*(const guint *)b];
  return (la > lb) - (la < lb);
}

/* Distance from a spot to the nearest partner in a group. */
static double
nearest (const Plane *plane, const Spot *spot, guint mask, guint group, int sign)
{
  double least = INFINITY;
  for (guint k = 0; k < plane->n; k++)
    if ((mask >> k & 1u) == group && plane->strong[k].sign != sign)
      least = fmin (least, hypot (plane->strong[k].u - spot->u, plane->strong[k].v - spot->v));
  return least;
}

static double
group_flux (const Plane *plane, guint mask, guint group, int sign)
{
  double flux = 0.0;
  for (guint k = 0; k < plane->n; k++)
    if ((mask >> k & 1u) == group && plane->strong[k].sign == sign)
      flux += plane->strong[k].flux;
  return flux;
}

/* The shared piece's cells go to the group whose partners are nearer, each group as large a part as
 * its partners' flux is of all. */
static void
share_out (const Plane *plane, const Parting *parting)
{
  guint shared = (guint)parting->shared, n = 0;
  int sign = plane->strong[shared].sign;
  double first = group_flux (plane, parting->mask, 0, -sign),
         second = group_flux (plane, parting->mask, 1, -sign),
         wanted = plane->strong[shared].flux * first / (first + second), so_far = 0.0;
  g_autofree double *lean = g_new0 (double, MAX (plane->spots->len, 1));
  g_autofree guint *order = g_new (guint, MAX (plane->spots->len, 1));
  for (guint k = 0; k < plane->spots->len; k++)
    {
      const Spot *spot = &g_array_index (plane->spots, Spot, k);
      if (spot->piece != shared)
        continue;
      lean[k] = nearest (plane, spot, parting->mask, 0, sign)
                - nearest (plane, spot, parting->mask, 1, sign);
      order[n++] = k;
    }
  g_qsort_with_data (order, (gint)n, sizeof *order, by_lean, lean);
  for (guint k = 0; k < n; k++)
    {
      Spot *spot = &g_array_index (plane->spots, Spot, order[k]);
      spot->group = so_far + 0.5 * spot->flux < wanted ? 0 : 1;
      so_far += spot->flux;
    }
}

static void
set_groups (const Plane *plane, const Parting *parting)
{
  for (guint k = 0; k < plane->spots->len; k++)
    {
      Spot *spot = &g_array_index (plane->spots, Spot, k);
      spot->group = parting->mask >> spot->piece & 1u;
    }
  if (parting->shared >= 0)
    share_out (plane, parting);
}

static double
parting_cost (const Plane *plane, const Parting *parting, double reach)
{
  double cost = 0.0;
  set_groups (plane, parting);
  for (guint group = 0; group < 2; group++)
    {
      Strong members[MOST_PIECES + 1];
      guint n = 0;
      for (guint k = 0; k < plane->n; k++)
        if ((int)k != parting->shared && (parting->mask >> k & 1u) == group)
          members[n++] = plane->strong[k];
      if (parting->shared >= 0)
        {
          Strong part = { .sign = plane->strong[parting->shared].sign };
          for (guint k = 0; k < plane->spots->len; k++)
            {
              const Spot *spot = &g_array_index (plane->spots, Spot, k);
              if ((int)spot->piece != parting->shared || spot->group != group)
                continue;
              part.flux += spot->flux;
              part.u += spot->flux * spot->u;
              part.v += spot->flux * spot->v;
            }
          part.u /= fmax (part.flux, 1.0);
          part.v /= fmax (part.flux, 1.0);
          members[n++] = part;
        }
      cost += group_cost (members, n, reach);
    }
  return cost;
}

/* The one strong piece of its polarity, when the other has several; else -1. */
static int
find_single (const Plane *plane)
{
  for (int sign = -1; sign <= 1; sign += 2)
    {
      int single = -1;
      guint n = 0;
      for (guint k = 0; k < plane->n; k++)
        if (plane->strong[k].sign == sign)
          {
            single = (int)k;
            n++;
          }
      if (n == 1 && plane->n > 2)
        return single;
    }
  return -1;
}

static gint
by_cost (gconstpointer a, gconstpointer b)
{
  double ca = ((const Parting *)a)->cost, cb = ((const Parting *)b)->cost;
  return (ca > cb) - (ca < cb);
}

static void
add_parting (const Plane *plane, GArray *list, guint mask, int shared, double reach)
{
  Parting parting = { .mask = mask, .shared = shared };
  parting.cost = parting_cost (plane, &parting, reach);
  g_array_append_val (list, parting);
}

static GArray *
list_partings (const Plane *plane)
{
  GArray *list = g_array_new (FALSE, FALSE, sizeof (Parting));
  guint all = (1u << plane->n) - 1;
  int single = find_single (plane);
  double reach = 0.0;
  for (guint j = 0; j < plane->n; j++)
    for (guint k = 0; k < j; k++)
      reach = fmax (reach, apart (&plane->strong[j], &plane->strong[k]));
  for (guint mask = 1; mask < all; mask++)
    {
      if ((mask & 1u) == 0) /* the strongest is in group 1: each parting once */
        continue;
      add_parting (plane, list, mask, -1, reach);
      guint others = single >= 0 ? all & ~(1u << single) : 0;
      if (single > 0 && (mask & others) != others && (mask >> single & 1u) == 0)
        add_parting (plane, list, mask, single, reach);
    }
  if (single == 0) /* the strongest is the shared one: the others in all ways */
    for (guint mask = 2; mask < all - 1; mask += 2)
      if ((mask & 2u) != 0)
        add_parting (plane, list, mask, 0, reach);
  g_array_sort (list, by_cost);
  return list;
}

/* -- the line -------------------------------------------------------------------------------- */

typedef struct
{
  double angle, offset, misplaced, score;
} Line;

/* The flux of each group along a direction. */
typedef struct
{
  double least, step;
  double flux[2][BINS];
} Profile;

static void
cast_profile (const Plane *plane, double angle, Profile *profile)
{
  double c = cos (angle), s = sin (angle), least = INFINITY, most = -INFINITY;
  for (guint k = 0; k < plane->spots->len; k++)
    {
      const Spot *spot = &g_array_index (plane->spots, Spot, k);
      least = fmin (least, spot->u * c + spot->v * s);
      most = fmax (most, spot->u * c + spot->v * s);
    }
  *profile = (Profile){ .least = least, .step = fmax ((most - least) / (BINS - 1), 1e-9) };
  for (guint k = 0; k < plane->spots->len; k++)
    {
      const Spot *spot = &g_array_index (plane->spots, Spot, k);
      double bin = (spot->u * c + spot->v * s - least) / profile->step;
      profile->flux[spot->group][MIN ((guint)(bin + 0.5), BINS - 1)] += spot->flux;
    }
}

/* Flux near the line between bins k and k + 1, less the further away. */
static double
flux_near (const Profile *profile, guint k)
{
  double flux = 0.0;
  for (guint d = 0; d < REACH; d++)
    {
      double share = 1.0 - (d + 0.5) / REACH;
      for (guint group = 0; group < 2; group++)
        flux += share * ((k >= d ? profile->flux[group][k - d] : 0.0)
                         + (k + 1 + d < BINS ? profile->flux[group][k + 1 + d] : 0.0));
    }
  return flux;
}

static void
try_angle (const Plane *plane, double angle, const double group[2], Line *best)
{
  Profile profile;
  double below[2] = { 0.0, 0.0 };
  cast_profile (plane, angle, &profile);
  for (guint k = 0; k + 1 < BINS; k++)
    {
      below[0] += profile.flux[0][k];
      below[1] += profile.flux[1][k];
      double first = below[1] + group[0] - below[0], second = below[0] + group[1] - below[1];
      Line line = { .angle = angle,
                    .offset = profile.least + (k + 0.5) * profile.step,
                    .misplaced = fmin (first, second) };
      line.score = line.misplaced + near_share * flux_near (&profile, k);
      if (line.score < best->score)
        *best = line;
    }
}

static gboolean
find_line (const Plane *plane, Line *line)
{
  double group[2] = { 0.0, 0.0 };
  for (guint k = 0; k < plane->spots->len; k++)
    group[g_array_index (plane->spots, Spot, k).group] += g_array_index (plane->spots, Spot, k).flux;
  double weaker = fmin (group[0], group[1]);
  if (weaker < group_least * (group[0] + group[1]))
    return FALSE;
  *line = (Line){ .misplaced = INFINITY, .score = INFINITY };
  for (guint k = 0; k < ANGLES; k++)
    try_angle (plane, k * TF_PI / ANGLES, group, line);
  return line->misplaced <= misplaced_most * weaker;
}

/* From where it enters the outline to where it leaves it, and a little over. */
static gboolean
clip (const Plane *plane, const Line *line, TfSplitLine *out)
{
  double lon, lat, radius, first = NAN, last = NAN, unit[3];
  tf_outline_get_cap (plane->outline, &lon, &lat, &radius);
  double far = tan (fmin (1.2 * radius + 0.5, 80.0) * TF_PI / 180.0), step = 2.0 * far / STEPS;
  double c = cos (line->angle), s = sin (line->angle);
  for (guint k = 0; k <= STEPS; k++)
    {
      double at = -far + k * step;
      to_unit (plane, line->offset * c - at * s, line->offset * s + at * c, unit);
      if (!tf_outline_contains_rings (plane->outline, unit))
        continue;
      first = isnan (first) ? at : first;
      last = at;
    }
  if (isnan (first))
    return FALSE;
  double over = 2.0 * step + 0.04 * (last - first);
  TfVertex *ends[] = { &out->a, &out->b };
  for (guint k = 0; k < 2; k++)
    {
      double at = k == 0 ? first - over : last + over;
      to_unit (plane, line->offset * c - at * s, line->offset * s + at * c, unit);
      tf_sphere_lonlat (unit, &ends[k]->lon_deg, &ends[k]->lat_deg);
      ends[k]->lon_deg = lon + tf_wrap_180 (ends[k]->lon_deg - lon);
    }
  return TRUE;
}

static gboolean
carry_out (const Plane *plane, const Parting *parting, TfSplitLine *out)
{
  Line line;
  g_autoptr (TfOutline) one = NULL, other = NULL;
  set_groups (plane, parting);
  if (!find_line (plane, &line) || !clip (plane, &line, out)
      || !tf_outline_split (plane->outline, out->a, out->b, &one, &other, NULL))
    return FALSE;
  out->misplaced = fmax (line.misplaced / plane->flux, 0.0); /* of differences of sums */
  return TRUE;
}

gboolean
tf_split_propose (TfSplitLine *line, const TfFrame *frame, const TfOutline *outline,
                  const TfMeasureParams *params)
{
  g_return_val_if_fail (line != NULL && frame != NULL && outline != NULL && params != NULL, FALSE);
  g_autoptr (TfOutline) here = tf_mask_outline (frame, outline, (guint)params->law);
  g_autoptr (TfMask) mask = tf_mask_new (frame, outline, params->mu_min, (guint)params->law);
  if (here == NULL || tf_mask_get_n (mask) == 0)
    return FALSE;
  g_autoptr (TfRegionSamples) samples = tf_region_samples_new (frame, mask, params, NULL);
  g_autoptr (GArray) spots = g_array_new (FALSE, FALSE, sizeof (Spot));
  Plane plane = { .spots = spots, .outline = here };
  plane_basis (&plane);
  fill_plane (&plane, samples);
  if (plane.n < 3)
    return FALSE;
  g_autoptr (GArray) partings = list_partings (&plane);
  for (guint k = 0; k < partings->len; k++)
    if (carry_out (&plane, &g_array_index (partings, Parting, k), line))
      return TRUE;
  return FALSE;
}
