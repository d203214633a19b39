/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Somebody's table as outside regions. Nothing is guessed: a column is taken when it is named as in
 * our own export or when a map names it; all others are listed with the reason. A row with a bad
 * value is left out and told with its line; the rest is taken.
 *
 * Regions: by a `region` column; without one, or with "none", rows are linked from day to day on
 * their place: two rows 0.4 to 1.6 days apart are of one region when each is the other's nearest
 * within 5 degrees, the earlier one's longitude carried along by the rotation law. Without any
 * longitude, or when asked, every row stands alone. Each linked or lone row is a pick of its own
 * (its own passage); intervals cluster by region.
 */

#include "tf-column-map.h"
#include "tf-ledger-outside.h"
#include "tf-cells.h"

G_BEGIN_DECLS

typedef struct
{
  const char *source, *licence; /* nullable */
  gboolean rows_alone;
  TfLedger *ledger; /* nullable: rows whose mark it holds already are left out */
} TfBringParams;

typedef struct
{
  TfOutsideTable *table;
  GArray *entries;      /* TfOutsideEntry */
  GArray *faults;       /* TfFault: rows left out */
  GPtrArray *taken;     /* "lat_deg = LAT (rad)" */
  GPtrArray *not_taken; /* "AREA: ..." with the reason */
  GPtrArray *said;      /* sentences: how rows were linked, folded tilts ... */
  guint n_own;          /* rows that are marks or hints of the ledger itself */
  guint n_regions;
} TfBrought;
void tf_brought_free (TfBrought *brought);

/** tf_bring: @table with the columns that @map names (NULL: those named as ours); @name and
 * @checksum of its file. Fails when time or latitude is not there, or no row can be taken. */
TfBrought *tf_bring (const TfCells *table, const TfColumnMap *map, const TfBringParams *params,
                     const char *name, const char *checksum, GError **error);

/** tf_bring_file: reads @path (tf_cells_read) and the map @map_path (NULL: none), then tf_bring. */
TfBrought *tf_bring_file (const char *path, const char *map_path, const TfBringParams *params,
                          GError **error);

/** tf_bring_link: for each entry, which must be in order of time, the index of the first of its
 * region; lon: Carrington when @carrington, else from the central meridian; NaN links to none. */
void tf_bring_link (guint n, const TfTime *times, const double *lats, const double *lons,
                    gboolean carrington, guint *groups);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfBrought, tf_brought_free)

G_END_DECLS
