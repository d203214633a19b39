/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Fields of a VOTable and its binary serialisations (IVOA VOTable 1.4, sections 2.1 and 5.4). */

#include "tf-cells.h"

typedef struct
{
  char code;         /* B boolean, b bit, u unsignedByte, h short, i int, l long, c char, U unicodeChar,
                        f float, d double, F floatComplex, D doubleComplex */
  guint size;        /* bytes of one element; 0 for bits */
  gboolean variable; /* the length stands before the elements */
  guint count;       /* elements when not variable */
  char *null;        /* nullable */
} TfVotableField;

/** tf_votable_field_read: FALSE for a type that is not known. */
gboolean tf_votable_field_read (TfVotableField *field, const char *datatype, const char *arraysize);
/** tf_votable_is_null: whether a cell's text is the field's null. */
gboolean tf_votable_is_null (const TfVotableField *field, const char *cell);
/** tf_votable_take_stream: rows of a base64 stream into @table; NULL, or (transfer full) why not. */
char *tf_votable_take_stream (TfCells *table, const GArray *fields, const char *base64,
                              gboolean binary2);
