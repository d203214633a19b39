/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfPassageContent: all that the Follow bench shows of one passage but the pictures, read in one go
 * off the main thread. Measures are with the passage's one even floor (the one that export uses) where they are there. */

#include "tf-ledger-follow.h"
#include "tf-look-item.h"
#include "tf-series-chart.h"
#include "tf-series.h"

G_BEGIN_DECLS

enum
{
  TF_LOOK_WIDTH = 320, /* of a close look's picture; shown smaller on the strip */
  TF_LOOK_HEIGHT = 200
};

typedef struct
{
  TfPassageRow *passage;
  TfStudy *study;    /* default, with the divides that people moved */
  TfSeries *series;  /* rows judged under the study, and what is derived from them */
  GPtrArray *rows;   /* TfRow, with outlines, in time order: the series' own */
  GArray *points;    /* TfSeriesMoment, one a row */
  GPtrArray *looks;  /* TfLookSpec: rows, frames without one between them, gaps; in time order.
                        Taken by who makes items of them */
  GArray *links;     /* TfPassageLink */
  GArray *returns;   /* TfReturnOffer */
  GPtrArray *others; /* TfPassageRow: the other passages of the region, and those of the offers */
  double half_deg;     /* half the height of a look */
} TfPassageContent;

/** tf_passage_content_read: NULL with an error. */
TfPassageContent *tf_passage_content_read (TfLedger *ledger, gint64 passage, GError **error);
/** tf_passage_content_ref: nothing of it changes once it is taken; threads may share it. */
TfPassageContent *tf_passage_content_ref (TfPassageContent *content);
void tf_passage_content_unref (TfPassageContent *content);
/** tf_passage_content_find: index of the row of that mark or hint, -1 */
int tf_passage_content_find (const TfPassageContent *content, TfSight sight);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfPassageContent, tf_passage_content_unref)

G_END_DECLS
