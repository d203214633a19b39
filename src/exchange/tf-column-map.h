/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfColumnMap: which column of somebody's table is which of ours, in which unit and by which
 * convention. A map file is plain text, one column a line, # begins a remark:
 *
 *   time_year      = YEAR
 *   lat_deg        = LAT ; unit rad
 *   axis_tilt_deg  = TILT ; positive poleward ; missing -999
 *   polarity_tilt_deg = GAMMA ; range 180
 *   cmd_deg        = CMD ; positive east
 *   flux_unsigned_mx = FLUX ; unit 10**21 Mx
 *   region         = none
 *
 * Ours are the flat columns that are not judged, and time_jd and time_year. Said of a column:
 * "unit U"; "missing V" (a value that stands for none); of longitudes "positive west" or "positive
 * east"; of a tilt where its sign is positive: "equatorward" (leader nearer the equator; ours),
 * "poleward", "north", "south" (leader north or south of the follower); of polarity_tilt_deg
 * "range 180": it is folded to the axis tilt, and which pole leads is not taken from it.
 */

#include <glib.h>

#include "tf-cells.h"

G_BEGIN_DECLS

typedef enum
{
  TF_SIGN_OURS,  /* west, equatorward */
  TF_SIGN_OTHER, /* east, poleward */
  TF_SIGN_NORTH,
  TF_SIGN_SOUTH,
} TfSignRule;

typedef struct
{
  char *name;    /* ours */
  char *column;  /* theirs */
  char *unit;    /* NULL: that of the table, else ours */
  char *missing; /* NULL */
  TfSignRule sign;
  guint line;
} TfColumnRule;

typedef struct
{
  GArray *rules;        /* TfColumnRule */
  gboolean no_region;   /* region = none */
} TfColumnMap;

void tf_column_map_free (TfColumnMap *map);
/** tf_column_map_read: @name for messages, which tell line, what is wrong and what can stand there. */
TfColumnMap *tf_column_map_read (const char *text, const char *name, GError **error);
/** tf_column_map_own: of a table whose columns are named as ours. */
TfColumnMap *tf_column_map_own (const TfCells *table);
/** tf_column_map_dup_text: canonical: equal maps give equal texts; reads back the same. */
char *tf_column_map_dup_text (const TfColumnMap *map);
/** tf_column_map_find: the rule of one of our columns; NULL. */
const TfColumnRule *tf_column_map_find (const TfColumnMap *map, const char *name);
/** tf_column_is_brought: whether a flat column (or time_jd, time_year) can be brought in. */
gboolean tf_column_is_brought (const char *name);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfColumnMap, tf_column_map_free)

G_END_DECLS
