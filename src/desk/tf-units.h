/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfUnits: in which units the window shows fluxes, fields and lengths. Of the window alone: files,
 * sheets and the ledger keep Mx, G, Mm. 1 Mx = 1e-8 Wb, 1 G = 0.1 mT (SI Brochure, from memory). */

#include <glib.h>

G_BEGIN_DECLS

typedef enum
{
  TF_UNIT_FLUX,   /* "Mx", "Wb" */
  TF_UNIT_FIELD,  /* "G", "mT" */
  TF_UNIT_LENGTH, /* "degrees", "Mm": which of the two stands first */
  TF_N_UNITS
} TfUnitKind;

typedef struct
{
  guint choice[TF_N_UNITS]; /* 0 the first, 1 the second */
} TfUnits;

/** tf_unit_name: "flux", "field", "length": of the preference and the action */
const char *tf_unit_name (TfUnitKind kind);
/** tf_unit_choice: "Mx", ...: of the action's state */
const char *tf_unit_choice (TfUnitKind kind, guint choice);

/** tf_units_dup_flux: "6.1·10²¹ Mx". tf_units_dup_flux_bare: without its unit. */
char *tf_units_dup_flux (TfUnits units, double mx);
char *tf_units_dup_flux_bare (TfUnits units, double mx);
/** tf_units_dup_field: "12.5 G", "1.25 mT": @decimals of the gauss. tf_units_dup_signed_field: "+12.5 G" */
char *tf_units_dup_field (TfUnits units, double gauss, guint decimals);
char *tf_units_dup_signed_field (TfUnits units, double gauss, guint decimals);
/** tf_units_dup_length: "5.1° · 62 Mm", or the other way round */
char *tf_units_dup_length (TfUnits units, double deg, guint deg_decimals, double mm, guint mm_decimals);

G_END_DECLS
