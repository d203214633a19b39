/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What the files of the hints share.
 *
 * The working grid is a square of cells in the Lambert azimuthal equal-area plane about the disk's centre: x west, y north, cell
 * (n/2, n/2) at the centre; a round kernel stays nearly round and a cell's flux is its value times its area. Row-major, y * n + x.
 */

#include <glib.h>

#include "tf-hint.h"

G_BEGIN_DECLS

typedef struct
{
  guint n;           /* cells a side */
  double cell_mm;
  double radius_mm;  /* of the Sun */
  double edge_mu;    /* nothing farther out */
  double centre[3], west[3], north[3]; /* Carrington frame */
  float *field;      /* smoothed radial field, G; NaN: nothing there, or too near the limb */
  float *mu;
  float *low, *high; /* levels, G */
  gboolean active;   /* sigma is from a frame that is mostly active */
} TfHintGrid;

/* A connected hill of one polarity, or what was joined of several. */
typedef struct
{
  double flux[2];      /* Mx */
  double place[2][3];  /* sum of flux * unit vector */
  double area_mm2;
  int into;            /* index of the cluster it was joined to; itself while it stands alone */
} TfHintCluster;

typedef struct
{
  guint a, b;       /* clusters */
  double gap_mm;
  double score;
} TfHintPair;

typedef struct
{
  const TfHintGrid *grid;
  const TfHintParams *params;
  gint32 *piece;    /* of each cell: index of its cluster, or -1; -2 - k: in the k-th faint hill */
  gint32 *nearest;  /* of each cell: the nearest piece, or -1 */
  float *distance;  /* Mm to it */
  GArray *clusters; /* TfHintCluster */
  GArray *hills;    /* TfHintCluster: the same before any was joined */
  GArray *touching; /* TfHintPair: of hills */
  GArray *faint;    /* TfHintCluster: hills that nowhere reach the high level */
  GArray *pairs;    /* TfHintPair */
} TfHintPieces;

/* tf-hint-grid.c */
TfHintGrid *tf_hint_grid_new (const TfFrame *frame, const TfHintParams *params, double scale, const TfWork *work);
void tf_hint_grid_free (TfHintGrid *grid);
/** tf_hint_grid_free_levels: mu, low and high, which only the pieces are made from. */
void tf_hint_grid_free_levels (TfHintGrid *grid);
/** tf_hint_grid_unit: direction of a point of the plane, in cells. */
void tf_hint_grid_unit (const TfHintGrid *grid, double x, double y, double unit[3]);
/** tf_hint_blur: Gaussian of @sigma cells over n x n values, in place; @room as large. Beyond the border is nothing. */
void tf_hint_blur (float *values, float *room, guint width, guint height, double sigma);

/* tf-hint-pieces.c: levels, hills, nearest pieces, neighbours */
TfHintPieces *tf_hint_pieces_new (const TfHintGrid *grid, const TfHintParams *params, const TfWork *work);
void tf_hint_pieces_free (TfHintPieces *pieces);
double tf_hint_total (const TfHintCluster *cluster);
double tf_hint_weaker (const TfHintCluster *cluster); /* share of the weaker polarity */
guint tf_hint_root (const TfHintPieces *pieces, guint k);

/* tf-hint-distance.c: exact Euclidean distance, separable; Felzenszwalb & Huttenlocher 2012, Theory of Computing 8, 415 */
/** tf_hint_nearest: of each cell the label >= 0 nearest to it and the distance in cells. */
void tf_hint_nearest (const gint32 *label, guint width, guint height, gint32 *nearest, float *distance);

/* tf-hint-join.c */
void tf_hint_join (TfHintPieces *pieces);
/** tf_hint_score: of joining two clusters across a gap; 0: never. */
double tf_hint_score (const TfHintPieces *pieces, const TfHintCluster *a, const TfHintCluster *b, double gap_mm);
TfHintCluster tf_hint_sum (const TfHintCluster *a, const TfHintCluster *b);
/** tf_hint_length: longest plausible distance of the poles, Mm. */
double tf_hint_length (double total_mx, const TfHintParams *params);
/** tf_hint_separation: of the two poles, Mm; 0 for one-signed ones. */
double tf_hint_separation (const TfHintCluster *cluster, double radius_mm);
/** tf_hint_centre: unit vector of the flux's centre. */
void tf_hint_centre (const TfHintCluster *cluster, double unit[3]);

/* tf-hint-part.c */
/** tf_hint_part: small regions that were joined to a large one stand for themselves again; FALSE: there were none. */
gboolean tf_hint_part (TfHintPieces *pieces);

/* tf-hint-partner.c */
/** tf_hint_partners: poles alone take their faint partners. */
void tf_hint_partners (TfHintPieces *pieces);

/* tf-hint-outline.c */
/** tf_hint_outline: (transfer full) (nullable): of the cluster with root @k. @edge: (out): touches cells without a value. */
TfOutline *tf_hint_outline (const TfHintPieces *pieces, guint k, TfTime time, gboolean *edge);
/* tf-hint-contour.c */
/** tf_hint_contour: the longest closed line value = 0.5 through @values; points in cells, x then y; NULL when there is none. */
GArray *tf_hint_contour (const float *values, guint width, guint height);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfHintGrid, tf_hint_grid_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfHintPieces, tf_hint_pieces_free)

G_END_DECLS
