/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Pieces: connected parts of one polarity. They are looked for on cells of about 1.5 Mm, so
 * that a pole that a fine frame resolves into grains is one piece on every frame. A cell
 * belongs to a polarity when that polarity's net flux above the floor is at least half of what
 * the whole cell would hold at the floor; cells touch by sides and corners. */

#include <math.h>
#include <string.h>

#include "tf-measure-private.h"

static const double CELL_MM = 1.5;
/* A runner-up this strong that tells otherwise leaves the third witness undecided. */
static const double RIVAL_SHARE = 0.8;

typedef TfPieceCell Cell;
typedef TfPiece Piece;
typedef TfPieceField Field;

static guint
cell_pixels (const TfRegionSamples *samples)
{
  double area = 0.0;
  for (guint k = 0; k < samples->n; k++)
    area += samples->pixels[k].area_mm2 * samples->pixels[k].mu;
  double pitch = sqrt (area / samples->n);
  return (guint)MAX (1.0, floor (CELL_MM / pitch + 0.5));
}

static void
fill_cells (Field *field, const TfRegionSamples *samples)
{
  guint x0, y0, width, height, n = cell_pixels (samples);
  tf_mask_get_box (samples->mask, &x0, &y0, &width, &height);
  field->width = (width + n - 1) / n;
  field->height = (height + n - 1) / n;
  field->cells = g_new0 (Cell, (gsize)field->width * field->height);
  g_autofree guint *column = g_new (guint, MAX (width, 1));
  for (guint x = 0; x < width; x++)
    column[x] = x / n;
  guint y = G_MAXUINT;
  Cell *row = NULL;
  for (guint k = 0; k < samples->n; k++)
    {
      const TfMaskPixel *pixel = &samples->pixels[k];
      const TfSampled *s = &samples->samples[k];
      if (pixel->y != y)
        {
          y = pixel->y;
          row = field->cells + (gsize)((y - y0) / n) * field->width;
        }
      Cell *cell = &row[column[pixel->x - x0]];
      cell->floor_flux += (double)s->floor * s->weight;
      if (fabsf (s->field) < s->floor)
        continue;
      double flux = (double)s->field * s->weight;
      cell->flux += flux;
      for (guint i = 0; i < 3; i++)
        cell->sum[i] += flux * pixel->unit[i];
    }
  for (gsize k = 0; k < (gsize)field->width * field->height; k++)
    {
      Cell *cell = &field->cells[k];
      if (fabs (cell->flux) >= 0.5 * cell->floor_flux && fabs (cell->flux) > 0.0)
        cell->sign = cell->flux > 0.0 ? 1 : -1;
    }
}

/* Takes the cell and all that touches it, by a stack of cells to look at; visited cells get
 * sign 0 and the number of their piece. */
static void
flood (Field *field, guint start, GArray *stack)
{
  Piece piece = { .sign = field->cells[start].sign };
  g_array_set_size (stack, 0);
  g_array_append_val (stack, start);
  field->cells[start].sign = 0;
  while (stack->len > 0)
    {
      guint at = g_array_index (stack, guint, stack->len - 1);
      guint x = at % field->width, y = at / field->width;
      g_array_set_size (stack, stack->len - 1);
      field->cells[at].piece = field->pieces->len + 1;
      piece.flux += fabs (field->cells[at].flux);
      for (guint i = 0; i < 3; i++)
        piece.sum[i] += piece.sign * field->cells[at].sum[i];
      for (guint ny = y > 0 ? y - 1 : 0; ny <= MIN (y + 1, field->height - 1); ny++)
        for (guint nx = x > 0 ? x - 1 : 0; nx <= MIN (x + 1, field->width - 1); nx++)
          {
            guint next = ny * field->width + nx;
            if (field->cells[next].sign != piece.sign)
              continue;
            field->cells[next].sign = 0;
            g_array_append_val (stack, next);
          }
    }
  g_array_append_val (field->pieces, piece);
}

static gint
by_flux (gconstpointer a, gconstpointer b)
{
  double fa = ((const Piece *)a)->flux, fb = ((const Piece *)b)->flux;
  return (fa < fb) - (fa > fb);
}

/* Which polarity leads of a positive and a negative piece. */
static int
western (const Piece *positive, const Piece *negative)
{
  double lon[2], lat;
  tf_sphere_lonlat (positive->sum, &lon[0], &lat);
  tf_sphere_lonlat (negative->sum, &lon[1], &lat);
  double d = tf_wrap_180 (lon[0] - lon[1]);
  return (d > 0.0) - (d < 0.0);
}

/* Strongest and second of each sign, from pieces in order. */
static int
find_witness (const GArray *pieces)
{
  const Piece *best[2][2] = { { NULL } };
  for (guint k = 0; k < pieces->len; k++)
    {
      const Piece *piece = &g_array_index (pieces, Piece, k);
      const Piece **of = best[piece->sign > 0 ? TF_POSITIVE : TF_NEGATIVE];
      if (of[0] == NULL)
        of[0] = piece;
      else if (of[1] == NULL && piece->flux >= RIVAL_SHARE * of[0]->flux)
        of[1] = piece;
    }
  if (best[0][0] == NULL || best[1][0] == NULL)
    return TF_WITNESS_ABSENT;
  int first = western (best[0][0], best[1][0]);
  for (guint i = 0; i < 2; i++)
    for (guint j = 0; j < 2; j++)
      if (best[0][i] != NULL && best[1][j] != NULL && western (best[0][i], best[1][j]) != first)
        return 0;
  return first;
}

void
tf_region_find_pieces (const TfRegionSamples *samples, TfPieceField *field)
{
  *field = (TfPieceField){ .pieces = g_array_new (FALSE, TRUE, sizeof (TfPiece)) };
  g_autoptr (GArray) stack = g_array_new (FALSE, FALSE, sizeof (guint));
  fill_cells (field, samples);
  for (guint k = 0; k < field->width * field->height; k++)
    if (field->cells[k].sign != 0)
      flood (field, k, stack);
}

void
tf_piece_field_clear (TfPieceField *field)
{
  g_clear_pointer (&field->pieces, g_array_unref);
  g_clear_pointer (&field->cells, g_free);
}

void
tf_region_pieces (const TfRegionSamples *samples, double flux_unsigned, TfPieces *pieces)
{
  g_auto (TfPieceField) field = { 0 };
  tf_region_find_pieces (samples, &field);
  g_array_sort (field.pieces, by_flux);
  pieces->n = 0;
  for (guint k = 0; k < field.pieces->len; k++)
    pieces->n += g_array_index (field.pieces, Piece, k).flux
                 >= samples->params->piece_share * flux_unsigned;
  pieces->witness = find_witness (field.pieces);
}

int
tf_axis_witness (const TfAxis *axis, double least)
{
  if (axis->west < 0)
    return TF_WITNESS_ABSENT;
  if (!(axis->dx > least))
    return 0;
  return axis->west == TF_POSITIVE ? 1 : -1;
}
