/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* The daily solar region summary: the plain text in which the US services (and others after them)
 * list the numbered regions of a day: I regions with sunspots, IA plages without, II regions due to
 * return. Places hold for 24:00 UT of the day named in its headings; longitudes are from the
 * central meridian seen from the Earth, and Carrington ("Lo").
 *
 * Letters may be of either case, columns be parted by any blanks. A line that cannot be read is a
 * fault and the rest goes on. Since June 2002 the text prints the last four digits of a number: 10,000
 * is added (from memory). Its area is that of the spots in white light, not of the field.
 */

#include "tf-ledger-outside.h"

G_BEGIN_DECLS

#define TF_DAILY_SUMMARY_FORMAT "daily-region-summary"

/** tf_daily_summary_is: whether a text is one, by its first lines. */
gboolean tf_daily_summary_is (const char *bytes, gsize n);

typedef enum
{
  TF_LISTED_SPOTS,
  TF_LISTED_PLAGE,
  TF_LISTED_DUE, /* no longitude from the central meridian */
} TfListed;

typedef struct
{
  guint place; /* line, from 1 */
  TfListed listed;
  int number;  /* whole: 12246 */
  double lat_deg, cmd_deg, carrington_lon_deg; /* NaN: not told */
  double spot_area_msh, extent_deg;            /* NaN: not told */
  int spots;                                   /* -1: not told */
  char *mw_class, *z;                          /* "βγδ"; three letters of the Z column; "" */
} TfListedRegion;

/** TfListedFault: a line that could not be read. */
typedef struct
{
  guint place;
  char *line;
} TfListedFault;

typedef struct
{
  TfTime time;      /* 24:00 UT of its day */
  char *about;      /* its own headings */
  GArray *regions;  /* TfListedRegion */
  GArray *faults;   /* TfListedFault */
} TfDailySummary;
void tf_daily_summary_free (TfDailySummary *summary);

/** tf_daily_summary_read: TF_EXCHANGE_ERROR_FORMAT when it is no summary or its day cannot be told. @name: for messages. */
TfDailySummary *tf_daily_summary_read (const char *bytes, gsize n, const char *name, GError **error);
/** tf_daily_summary_bring: puts it into the ledger as an outside table, each file once. Returns its local key, 0 on error. */
gint64 tf_daily_summary_bring (const TfDailySummary *summary, TfLedger *ledger, const char *name, const char *checksum,
                               const char *source, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfDailySummary, tf_daily_summary_free)

G_END_DECLS
