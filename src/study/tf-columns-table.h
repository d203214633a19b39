/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* For the files that hold a const table of TfColumn: rows of it, units in FITS and VOUnit spelling,
 * and getters, whose expression sees the row as r, of the type TF_COLUMNS_ROW. */

#include "tf-columns.h"

#define GETTER(type, name, expression)                                                             \
  static type name (gconstpointer row)                                                             \
  {                                                                                                \
    const TF_COLUMNS_ROW *r = row;                                                                 \
    return expression;                                                                             \
  }
#define TAKE(name, expression)   GETTER (char *, name, expression)
#define NUMBER(name, expression) GETTER (double, name, expression)
#define TIME(name, time)         TAKE (name, tf_time_is_known (time) ? tf_time_dup_iso (time, 3) : g_strdup (""))

#define NONE      "", ""
#define DEG       "deg", "deg"
#define ARCSEC    "arcsec", "arcsec"
#define MX        "10**-8 Wb", "1e-8Wb"
#define MSH       "10**-6", "1e-6"
#define MEGAMETRE "Mm", "Mm"
#define GAUSS     "10**-4 T", "1e-4T"
#define SECOND    "s", "s"
#define AS_TEXT(name, ucd, description, text) { name, TF_COLUMN_TEXT, NONE, ucd, description, 1.0, NULL, text }
#define AS_NUMBER(name, units, ucd, description, number) { name, TF_COLUMN_NUMBER, units, ucd, description, 1.0, number, NULL }
#define AS_INT(name, ucd, description, number) { name, TF_COLUMN_INT, NONE, ucd, description, 1.0, number, NULL }
#define AS_BOOL(name, ucd, description, number) { name, TF_COLUMN_BOOL, NONE, ucd, description, 1.0, number, NULL }
