/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* What follow takes out of a ledger, and what it puts back. */

#include "tf-ledger-follow.h"
#include "tf-ledger-private.h"

G_BEGIN_DECLS

/* -- tf-ledger-ties.c */
/* The live mark or open hint that an id in a tie means now; FALSE when there is none. */
gboolean tf_tie_find (TfLedger *ledger, const char *id, TfSight *sight);

/* -- tf-ledger-sightings.c: everything that follow looks at. Index k of @sightings, @sights and @frames is one sighting; outlines are
 * read when they are asked for. */
typedef struct
{
  char *a, *b; /* ids, hex */
  gboolean cut;
} TfSaid;

typedef struct
{
  GStringChunk *texts;
  GArray *sightings;   /* TfSighting; outline NULL until read */
  GArray *sights;      /* TfSight */
  GArray *roots;       /* const char *: id of the hint or first mark a sighting comes from */
  GHashTable *index;   /* TfSight -> index + 1 */
  GHashTable *frames;  /* local key -> TfLookout */
  GArray *lookouts;    /* TfLookout: frames on which a rule looked for regions */
  GArray *said;        /* TfSaid, in order of ids */
  GArray *ties;        /* TfTie: those of @said whose ends are there */
  GPtrArray *outlines; /* owned */
} TfSightings;
TfSightings *tf_sightings_load (TfLedger *ledger, GError **error);
void tf_sightings_free (TfSightings *all);
gboolean tf_sightings_read_outline (TfSightings *all, TfLedger *ledger, guint k, GError **error);
guint tf_sight_hash (gconstpointer sight);
gboolean tf_sight_equal (gconstpointer a, gconstpointer b);
/* -1: not there. */
int tf_sightings_find (const TfSightings *all, TfSight sight);
/* Time at the Sun of what an observer saw: the light's travel taken off. */
TfTime tf_time_at_sun (TfTime time, const TfFrameInfo *info);

/* -- tf-ledger-follow-store.c: what follow made last time, and writing what it makes now. */
typedef struct
{
  TfSight a, b;
  TfLinkKind kind;
  double overlap;
} TfStoredLink;
/* (element-type TfStoredLink) */
GArray *tf_follow_read_links (TfLedger *ledger, GError **error);
/* Ids of passages, the same in every ledger; NULL-ended. */
char **tf_follow_content_ids (const TfSightings *all, const TfPassages *found, const char *method);
/* Inside a transaction. Only what differs is written. */
gboolean
tf_follow_store (TfLedger *ledger, const TfSightings *all, const GArray *links,
                 const TfPassages *found, const char *method, gboolean *changed, GError **error);

/* -- tf-ledger-follow.c: whether the passages are those that follow would make of the same marks and hints; nothing is said while
 * follow is due. */
gboolean tf_follow_check (TfLedger *ledger, TfNotes *findings, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfSightings, tf_sightings_free)

G_END_DECLS
