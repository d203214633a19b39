/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFrameInfo: what a header says a frame is, after its dialect was repaired.
 *
 * Two steps: repair (a const table of small named functions, tf_dialects, each turning one old
 * or local habit into standard keywords and adding a note that says what it did), then standard
 * (FITS WCS Papers I-II by wcslib; Thompson 2006). Nothing is read from pixels here, so that a
 * header text alone can be judged. A refusal is an answer, not an error.
 */

#include <glib.h>

#include "tf-geometry.h"
#include "tf-header.h"
#include "tf-note.h"

G_BEGIN_DECLS

typedef enum
{
  TF_KIND_UNKNOWN,
  TF_KIND_DISK,
  TF_KIND_CUT_OUT,
  TF_KIND_MAP,
  TF_KIND_MODEL_MAP,
} TfKind;

typedef enum
{
  TF_ROLE_REFUSED,
  TF_ROLE_FIELD,
  TF_ROLE_INTENSITY, /* refused as field, welcome as companion */
} TfRole;

typedef enum
{
  TF_FIELD_UNKNOWN,
  TF_FIELD_LOS,
  TF_FIELD_RADIAL,
} TfFieldKind;

typedef struct _TfFrameInfo TfFrameInfo;
struct _TfFrameInfo
{
  TfKind kind;
  TfRole role;
  TfNote *refusal;         /* why it cannot be used as a field; NULL when it can */
  TfTime time;             /* middle of exposure, at the observer */
  const char *time_source; /* the keyword used, or "unknown"; owned by the struct's string pool */
  double time_span_s;      /* exposure; NaN unknown */
  TfGeometry geometry;     /* projection NONE when there is none; holds observer, radius, size */
  char *instrument;        /* origin of the frame, from the header; "unknown" */
  char *unit;              /* BUNIT as it stands, after repair; "" */
  double to_gauss;         /* stored value * to_gauss = G; 1 when the unit is unknown */
  TfFieldKind field;
  double distance_given_m; /* as the header has it, before the angular radius ruled; NaN */
  double rotation_number;  /* maps: Carrington rotation; NaN */
  double fill_value;       /* off-disk fill to be made NaN; NaN: none */
  guint n_planes;          /* of a cube; 1 */
  gboolean simulated;      /* SIMULATD = T */
  TfNotes *repairs;        /* what was turned into what */
  TfNotes *cautions;
};

/**
 * tf_frame_info_read:
 * @header: as in the file; not changed
 * @width, @height: NAXIS1, NAXIS2 (Z-keywords of a compressed HDU already mapped)
 * Returns: (transfer full): never NULL; role REFUSED with a refusal when nothing can be made of
 * it.
 */
TfFrameInfo *tf_frame_info_read (const TfHeader *header, guint width, guint height);
TfFrameInfo *tf_frame_info_copy (const TfFrameInfo *info);
void tf_frame_info_free (TfFrameInfo *info);

/**
 * tf_frame_info_column_time: on a map every column has its own time: the passage of its
 * longitude over the Earth's central meridian in the map's rotation; longitudes run on over the
 * seam, so the two edges are a rotation apart.
 * @x: FITS pixel
 * Returns: unknown off the map and without a rotation number; the frame's own time on model
 * maps and pictures of the disk.
 */
TfTime tf_frame_info_column_time (const TfFrameInfo *info, double x);

const char *tf_kind_name (TfKind kind); /* "disk" "cut-out" "map" "model map" "unknown" */
TfKind tf_kind_from_name (const char *name);
const char *tf_role_name (TfRole role);        /* "field" "intensity" "refused" */
const char *tf_field_name (TfFieldKind field); /* "los" "radial" "unknown" */

/** TfDialect: one habit of headers. */
typedef struct
{
  const char *name;                                        /* "centre-and-radius-in-pixels" */
  gboolean (*applies) (const TfHeader *header);            /* NULL: always asked, repair decides */
  gboolean (*repair) (TfHeader *header, TfNotes *repairs); /* TRUE: changed and noted something */
} TfDialect;
/** tf_dialects: in the order in which they are tried; ends with name NULL. */
extern const TfDialect tf_dialects[];

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFrameInfo, tf_frame_info_free)

G_END_DECLS
