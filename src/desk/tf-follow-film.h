/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Close looks as a film: numbered PNG in a folder, or WebM or GIF where an encoder is installed. */

#include "tf-save-as.h"
#include "tf-strip.h"

G_BEGIN_DECLS

typedef struct
{
  const TfStripLook *looks; /* in order of time */
  guint n;
  const char *title; /* at the foot of every picture */
  double speed;      /* pictures a second */
} TfFilm;

/**
 * tf_follow_film_write: in a thread. @path ending in .webm or .gif: a film of that kind, else a folder
 * (made when it is not there) for 0001.png, 0002.png …. When it fails or is stopped nothing of it is
 * left. Returns: (transfer full): what was made, in words; NULL with an error.
 */
char *tf_follow_film_write (const TfFilm *film, const char *path, TfSaving *saving, GError **error);
/** tf_follow_film_has_encoder: whether something is installed that makes files of @ending (".webm", ".gif"). */
gboolean tf_follow_film_has_encoder (const char *ending);

G_END_DECLS
