/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Studies and editions as deeds. A study is known by its name; every time it is kept is a new
 * version, and the last one stands. An edition is a study's state with its figures under a name of
 * its own and is never changed. What their texts hold is for `study` to say: JSON here, no more.
 */

#include "tf-ledger.h"

G_BEGIN_DECLS

typedef struct
{
  char *name;
  guint version;    /* of the study */
  char *study;      /* editions: the study's name; else NULL */
  char *checksum;   /* BLAKE2b of the text, hex */
  char *text;       /* JSON */
  char *person;
  TfTime wall;      /* when it was kept, by that machine's clock */
} TfNamed;
void tf_named_free (TfNamed *named);

/** tf_ledger_keep_study: a new version of the study @name; nothing when the last one has that text.
 * An empty text puts the study away: no version stands. Returns its version, 0 on error. */
guint tf_ledger_keep_study (TfLedger *ledger, const char *name, const char *text, gint64 person,
                            GError **error);
/** tf_ledger_study: the version that stands; NULL without error when there is none. */
TfNamed *tf_ledger_study (TfLedger *ledger, const char *name, GError **error);
/** tf_ledger_studies: (element-type TfNamed) those that stand, by name, texts included. */
GPtrArray *tf_ledger_studies (TfLedger *ledger, GError **error);

/** tf_ledger_keep_edition: STATE when an edition of that name stands. */
gboolean tf_ledger_keep_edition (TfLedger *ledger, const char *name, const char *study,
                                 guint study_version, const char *text, gint64 person,
                                 GError **error);
TfNamed *tf_ledger_edition (TfLedger *ledger, const char *name, GError **error);
/** tf_ledger_editions: (element-type TfNamed) that stand, in the order they were kept. */
GPtrArray *tf_ledger_editions (TfLedger *ledger, GError **error);
/** tf_ledger_edition_names: the same without their texts, which may be long. */
GPtrArray *tf_ledger_edition_names (TfLedger *ledger, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfNamed, tf_named_free)

G_END_DECLS
