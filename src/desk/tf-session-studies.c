/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* Named studies: what the ledger has of them, and which one is in view. Editions:
 * tf-session-editions.c. */

#include "tf-session-studies.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-session-laws-private.h"
#include "tf-study-task.h"

static const char default_name[] = "default";

/* -- what is kept ------------------------------------------------------------------------------ */

/* A study as a text to be compared: without its version, its floor and its divides. */
static char *
dup_plain_text (const TfStudy *study)
{
  g_autoptr (TfStudy) plain = tf_study_copy (study);
  plain->version = 0;
  plain->even_floor_gauss = NAN;
  g_clear_pointer (&plain->divides, tf_divides_unref);
  g_clear_pointer (&plain->divides_shown, g_free);
  return tf_study_dup_text (plain);
}

static const TfNamed *
find_kept (TfSession *self, const char *name)
{
  const GPtrArray *studies = self->laws->studies;
  for (guint k = 0; studies != NULL && k < studies->len; k++)
    {
      const TfNamed *named = g_ptr_array_index (studies, k);
      if (strcmp (named->name, name) == 0)
        return named;
    }
  return NULL;
}

static TfStudy *
dup_kept (const TfNamed *named, GError **error)
{
  TfStudy *study = tf_study_read_text (named->text, named->name, error);
  if (study == NULL)
    return NULL;
  g_free (study->name); /* the ledger's names are what studies are known by */
  study->name = g_strdup (named->name);
  study->version = named->version;
  return study;
}

static char *
dup_kept_text (TfSession *self, const char *name)
{
  const TfNamed *named = find_kept (self, name);
  g_autoptr (TfStudy) study = named != NULL ? dup_kept (named, NULL) : NULL;
  if (study == NULL && strcmp (name, default_name) == 0)
    study = tf_study_new_default ();
  return study != NULL ? dup_plain_text (study) : NULL;
}

const GPtrArray *
tf_session_get_studies (TfSession *self)
{
  return self->laws->studies;
}

const GPtrArray *
tf_session_get_editions (TfSession *self)
{
  return self->laws->editions;
}

guint
tf_session_get_kept_version (TfSession *self)
{
  const TfNamed *named = find_kept (self, self->laws->study->name);
  return named != NULL ? named->version : 0;
}

gboolean
tf_session_is_study_changed (TfSession *self)
{
  const TfSessionLaws *laws = self->laws;
  g_autofree char *now = dup_plain_text (laws->study);
  return g_strcmp0 (laws->kept_text, now) != 0;
}

/* -- choosing ---------------------------------------------------------------------------------- */

/* The divides of what is in view come with the next reading of the ledger. */
static void
show_study (TfSession *self, TfStudy *study)
{
  TfSessionLaws *laws = self->laws;
  tf_session_choose_divide (self, 0, 0, 0);
  g_free (laws->kept_text);
  laws->kept_text = dup_kept_text (self, study->name);
  tf_session_take_study (self, study);
}

static TfStudy *
dup_standing (TfSession *self, const char *name)
{
  const TfNamed *named = find_kept (self, name);
  g_autoptr (GError) error = NULL;
  TfStudy *study = named != NULL ? dup_kept (named, &error) : NULL;
  if (error != NULL)
    tf_session_say (self, error->message);
  return named == NULL && strcmp (name, default_name) == 0 ? tf_study_new_default () : study;
}

/* What is changed and not kept is there again when its name is chosen again. */
static void
set_aside (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  if (laws->set_aside == NULL)
    laws->set_aside = g_hash_table_new_full (g_str_hash, g_str_equal, g_free,
                                             (GDestroyNotify)tf_study_free);
  if (tf_session_is_study_changed (self))
    g_hash_table_insert (laws->set_aside, g_strdup (laws->study->name), tf_study_copy (laws->study));
  else
    g_hash_table_remove (laws->set_aside, laws->study->name);
}

void
tf_session_choose_study (TfSession *self, const char *name)
{
  g_return_if_fail (TF_IS_SESSION (self) && name != NULL);
  TfSessionLaws *laws = self->laws;
  if (strcmp (name, laws->study->name) == 0)
    return;
  set_aside (self);
  const TfStudy *aside = g_hash_table_lookup (laws->set_aside, name);
  TfStudy *study = aside != NULL ? tf_study_copy (aside) : dup_standing (self, name);
  if (study != NULL)
    show_study (self, study);
}

void
tf_session_revert_study (TfSession *self)
{
  g_return_if_fail (TF_IS_SESSION (self));
  TfStudy *study = dup_standing (self, self->laws->study->name);
  if (study != NULL)
    show_study (self, study);
}

/* -- reading ------------------------------------------------------------------------------------ */

typedef struct
{
  GPtrArray *studies, *editions;
} Names;

static void
names_free (gpointer data)
{
  Names *names = data;
  g_clear_pointer (&names->studies, g_ptr_array_unref);
  g_clear_pointer (&names->editions, g_ptr_array_unref);
  g_free (names);
}

static gpointer
read_names (TfLedger *ledger, gpointer data, GError **error)
{
  Names *names = g_new0 (Names, 1);
  names->studies = tf_ledger_studies (ledger, error);
  names->editions = names->studies != NULL ? tf_ledger_edition_names (ledger, error) : NULL;
  if (names->editions == NULL)
    g_clear_pointer (&names, names_free);
  return names;
}

static void
take_moved_options (TfDivideParams *divide, const TfDivideParams *moved)
{
  divide->before_months = moved->before_months;
  divide->after_months = moved->after_months;
  divide->band_deg = moved->band_deg;
  divide->provisional_year = moved->provisional_year;
}

/* A study with changes of its own follows in what is moved on the wings alone. */
static void
follow_divides (TfSession *self, const char *before)
{
  g_autoptr (TfStudy) was = before != NULL ? tf_study_read_text (before, "", NULL) : NULL;
  g_autoptr (TfStudy) is = dup_standing (self, self->laws->study->name);
  g_autoptr (TfStudy) study = tf_study_copy (self->laws->study);
  if (was == NULL || is == NULL || !tf_session_is_same_reach (&was->divide, &study->divide)
      || tf_session_is_same_reach (&is->divide, &study->divide))
    return;
  take_moved_options (&study->divide, &is->divide);
  tf_session_set_study (self, study);
}

/* A study in view that was as kept follows what is kept: an undo, or another window's keeping. */
static void
follow (TfSession *self, gboolean was_kept)
{
  TfSessionLaws *laws = self->laws;
  g_autofree char *before = g_steal_pointer (&laws->kept_text);
  laws->kept_text = dup_kept_text (self, laws->study->name);
  if (laws->kept_text == NULL || g_strcmp0 (before, laws->kept_text) == 0)
    return;
  if (!was_kept)
    {
      follow_divides (self, before);
      return;
    }
  TfStudy *study = dup_standing (self, laws->study->name);
  if (study == NULL)
    return;
  study->divides = laws->study->divides != NULL
                       ? tf_divides_with_params (laws->study->divides, &study->divide)
                       : NULL;
  tf_session_take_study (self, study);
}

static void
names_read (GObject *source, GAsyncResult *result, gpointer data)
{
  TfSession *self = TF_SESSION (source);
  Names *names = tf_lane_finish (result, NULL);
  if (names == NULL)
    return;
  TfSessionLaws *laws = self->laws;
  if (g_task_get_cancellable (G_TASK (result)) == self->reading && laws->keeping == 0)
    {
      gboolean was_kept = laws->kept_text != NULL && !tf_session_is_study_changed (self);
      g_clear_pointer (&laws->studies, g_ptr_array_unref);
      g_clear_pointer (&laws->editions, g_ptr_array_unref);
      laws->studies = g_steal_pointer (&names->studies);
      laws->editions = g_steal_pointer (&names->editions);
      follow (self, was_kept);
      tf_session_emit (self, TF_SIGNAL_LAWS);
    }
  names_free (names);
}

void
tf_session_read_studies (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  if (laws->kept_text == NULL && laws->studies == NULL)
    laws->kept_text = dup_kept_text (self, laws->study->name);
  if (laws->shown && self->open && self->reader != NULL)
    tf_lane_push (self->reader, self, self->reading, read_names, NULL, NULL, names_free, names_read,
                  NULL);
}

void
tf_session_studies_close (TfSession *self)
{
  TfSessionLaws *laws = self->laws;
  tf_session_stop_study_task (self);
  g_clear_pointer (&laws->studies, g_ptr_array_unref);
  g_clear_pointer (&laws->editions, g_ptr_array_unref);
  g_clear_pointer (&laws->kept_text, g_free);
  g_clear_pointer (&laws->set_aside, g_hash_table_unref);
}

/* -- keeping ------------------------------------------------------------------------------------ */

static gboolean
may_keep (TfSession *self)
{
  if (!tf_session_is_writable (self) || self->laws->hold.in_hand)
    return FALSE;
  if (self->person == NULL)
    tf_session_emit (self, TF_SIGNAL_PERSON_NEEDED);
  return self->person != NULL;
}

static TfDeed *
study_deed (TfSession *self, const TfStudy *study, double floor_gauss)
{
  g_autoptr (TfStudy) kept = tf_study_copy (study);
  kept->version = 0; /* the ledger numbers versions; equal texts are one */
  kept->even_floor_gauss = floor_gauss;
  TfDeed *deed = tf_deed_new (TF_DEED_STUDY, self->person);
  deed->study = g_strdup (study->name);
  deed->text = tf_study_dup_text (kept);
  return deed;
}

/* With the floor that its numbers were worked out with. */
TfDeed *
tf_session_study_deed (TfSession *self, const TfStudy *study)
{
  const TfLawsAnswer *answer = self->laws->answer;
  gboolean known = answer != NULL && answer->findings != NULL;
  return study_deed (self, study,
                     known ? answer->findings->even_floor_gauss : study->even_floor_gauss);
}

/* Only the divides' options change: a study that has no floor of its own still has the ledger's. */
TfDeed *
tf_session_divide_options_deed (TfSession *self, const TfDivideParams *params)
{
  g_autoptr (TfStudy) kept = dup_standing (self, self->laws->study->name);
  if (kept == NULL)
    kept = tf_study_copy (self->laws->study);
  take_moved_options (&kept->divide, params);
  g_free (self->laws->kept_text);
  self->laws->kept_text = dup_plain_text (kept);
  return study_deed (self, kept, kept->even_floor_gauss);
}

/* The divides of a study that has another name in the ledger, or none. */
static void
add_divides (TfDeed *all, const TfStudy *study)
{
  for (const TfCycle *c = tf_cycles; study->divides != NULL && c->number != 0; c++)
    for (int side = 1; side >= -1; side -= 2)
      {
        const double *times, *lats;
        guint n = tf_divides_get_moved (study->divides, c->number, side, &times, &lats);
        if (n == 0)
          continue;
        g_autofree char *name = g_strdup_printf ("%d %s", c->number, side > 0 ? "N" : "S");
        TfDeed *deed = tf_deed_new (TF_DEED_DIVIDE, all->person);
        deed->study = g_strdup (study->name);
        deed->divide = g_new0 (TfMovedDivide, 1);
        *deed->divide = (TfMovedDivide){ .cycle = c->number,
                                         .hemisphere = side,
                                         .n = n,
                                         .times = g_new (TfTime, n),
                                         .lats = g_memdup2 (lats, n * sizeof *lats),
                                         .shown = study->divides_shown != NULL
                                                  && strstr (study->divides_shown, name) != NULL };
        for (guint k = 0; k < n; k++)
          deed->divide->times[k] = (TfTime){ times[k] };
        tf_deed_add (all, deed);
      }
}

/* One deed; until it is in the ledger what the window has is newer. */
void
tf_session_push_study (TfSession *self, TfDeed *deed)
{
  self->laws->keeping++;
  tf_session_push_deed (self, deed);
}

static TfDeed *
deed_of_copy (TfSession *self, const char *as, const TfStudy *study)
{
  TfDeed *all = tf_deed_new_together (as, self->person);
  tf_deed_add (all, tf_session_study_deed (self, study));
  add_divides (all, study);
  return all;
}

static char *
dup_name (const char *name)
{
  return g_strstrip (g_strdup (name != NULL ? name : ""));
}

/* The study in view goes on under another name. */
static void
go_on_as (TfSession *self, const char *name)
{
  TfSessionLaws *laws = self->laws;
  if (laws->set_aside != NULL)
    {
      g_hash_table_remove (laws->set_aside, laws->study->name);
      g_hash_table_remove (laws->set_aside, name);
    }
  g_free (laws->study->name);
  laws->study->name = g_strdup (name);
}

static void
is_kept_now (TfSession *self)
{
  g_free (self->laws->kept_text);
  self->laws->kept_text = dup_plain_text (self->laws->study);
  tf_session_ask_laws (self);
  tf_session_emit (self, TF_SIGNAL_LAWS);
}

gboolean
tf_session_keep_study (TfSession *self, const char *name)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfStudy *study = self->laws->study;
  g_autofree char *own = dup_name (name);
  gboolean copy = *own != '\0' && strcmp (own, study->name) != 0;
  if (!may_keep (self))
    return FALSE;
  if (copy)
    go_on_as (self, own);
  tf_session_push_study (self, copy ? deed_of_copy (self, "study", study)
                                    : tf_session_study_deed (self, study));
  is_kept_now (self);
  return TRUE;
}

static TfDeed *
deed_of_putting_away (TfSession *self, const char *name)
{
  TfDeed *deed = tf_deed_new (TF_DEED_STUDY, self->person);
  deed->study = g_strdup (name);
  deed->text = g_strdup ("");
  return deed;
}

gboolean
tf_session_rename_study (TfSession *self, const char *name)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  TfStudy *study = self->laws->study;
  g_autofree char *own = dup_name (name), *before = g_strdup (study->name);
  gboolean other = *own != '\0' && strcmp (own, before) != 0 && find_kept (self, own) == NULL;
  if (!other || !may_keep (self))
    return FALSE;
  go_on_as (self, own);
  TfDeed *all = deed_of_copy (self, "rename", study);
  if (find_kept (self, before) != NULL)
    tf_deed_add (all, deed_of_putting_away (self, before));
  tf_session_push_study (self, all);
  is_kept_now (self);
  return TRUE;
}

gboolean
tf_session_put_away_study (TfSession *self)
{
  g_return_val_if_fail (TF_IS_SESSION (self), FALSE);
  g_autofree char *name = g_strdup (self->laws->study->name);
  if (find_kept (self, name) == NULL || !may_keep (self))
    return FALSE;
  tf_session_push_study (self, deed_of_putting_away (self, name));
  if (strcmp (name, default_name) != 0)
    show_study (self, tf_study_new_default ());
  return TRUE;
}

gboolean
tf_session_keep_scale (TfSession *self, const TfKeptScale *scale)
{
  g_return_val_if_fail (TF_IS_SESSION (self) && scale != NULL, FALSE);
  if (!may_keep (self))
    return FALSE;
  TfDeed *deed = tf_deed_new (TF_DEED_SCALE, self->person);
  deed->scale = tf_kept_scale_copy (scale);
  tf_session_push_deed (self, deed);
  return TRUE;
}

/* -- files -------------------------------------------------------------------------------------- */

static void
loaded (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  g_autofree char *text = NULL, *name = g_file_get_basename (G_FILE (source));
  g_autoptr (GError) error = NULL;
  g_autoptr (TfStudy) study = NULL;
  if (g_file_load_contents_finish (G_FILE (source), result, &text, NULL, NULL, &error))
    study = tf_study_read_text (text, name, &error);
  if (study == NULL)
    tf_session_say (self, error->message);
  else
    tf_session_take_study_of (self, study);
}

void
tf_session_take_study_of (TfSession *self, const TfStudy *given)
{
  g_return_if_fail (TF_IS_SESSION (self) && given != NULL);
  if (!may_keep (self))
    tf_session_say (self, _ ("A study from a file is kept in the ledger, which needs a name and a "
                             "ledger that can be written to. Open it again then."));
  else
    {
      TfStudy *study = tf_study_copy (given);
      set_aside (self);
      tf_session_choose_divide (self, 0, 0, 0);
      tf_session_push_study (self, deed_of_copy (self, "study", study));
      study->version = 0;
      tf_session_take_study (self, study);
      is_kept_now (self);
    }
}

void
tf_session_open_study (TfSession *self, GFile *file)
{
  g_return_if_fail (TF_IS_SESSION (self) && G_IS_FILE (file));
  g_file_load_contents_async (file, NULL, loaded, g_object_ref (self));
}

static void
written (GObject *source, GAsyncResult *result, gpointer data)
{
  g_autoptr (TfSession) self = data;
  g_autoptr (GError) error = NULL;
  g_autofree char *name = g_file_get_basename (G_FILE (source));
  g_autofree char *text
      = g_file_replace_contents_finish (G_FILE (source), result, NULL, &error)
            ? g_strdup_printf (_ ("Saved: %s"), name)
            : g_strdup (error->message);
  tf_session_say (self, text);
}

void
tf_session_save_study (TfSession *self, GFile *file)
{
  g_return_if_fail (TF_IS_SESSION (self) && G_IS_FILE (file));
  g_autoptr (TfStudy) study = tf_study_copy (self->laws->study);
  study->version = tf_session_is_study_changed (self) ? 0 : tf_session_get_kept_version (self);
  g_autofree char *text = tf_study_dup_text (study);
  g_autoptr (GBytes) bytes = g_bytes_new (text, strlen (text));
  g_file_replace_contents_bytes_async (file, bytes, NULL, FALSE, G_FILE_CREATE_NONE, NULL, written,
                                       g_object_ref (self));
}
