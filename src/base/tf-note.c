/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-note.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-json.h"
#include "tf-number.h"

enum { MAX_ARGS = 6 };

typedef struct
{
  char type;    /* 's', 'd' or 'i' */
  char *text;   /* 's' */
  double value; /* 'd', 'i' */
} Arg;

struct _TfNote
{
  const TfNoteKind *kind; /* NULL for a code of a newer version */
  char *code;
  guint n_args;
  Arg args[MAX_ARGS];
};

static const TfNoteKind *
find_kind (const char *code)
{
  const TfNoteKind *const tables[] = { tf_note_kinds_frame, tf_note_kinds_region,
                                       tf_note_kinds_laws, tf_note_kinds_ledger };
  for (guint t = 0; t < G_N_ELEMENTS (tables); t++)
    for (const TfNoteKind *k = tables[t]; k->code != NULL; k++)
      if (strcmp (k->code, code) == 0)
        return k;
  return NULL;
}

static TfNote *
note_new_bare (const char *code)
{
  TfNote *note = g_new0 (TfNote, 1);
  note->kind = find_kind (code);
  note->code = g_strdup (code);
  return note;
}

static TfNote *
note_new_va (const char *code, const char *types, va_list ap)
{
  TfNote *note = note_new_bare (code);
  if (note->kind == NULL)
    g_critical ("the note code '%s' stands in no table", code);
  for (const char *t = types; *t != '\0' && note->n_args < MAX_ARGS; t++)
    {
      Arg *arg = &note->args[note->n_args++];
      arg->type = *t;
      if (*t == 's')
        arg->text = g_strdup (va_arg (ap, const char *));
      else if (*t == 'i')
        arg->value = va_arg (ap, int);
      else
        arg->value = va_arg (ap, double);
    }
  return note;
}

TfNote *
tf_note_new (const char *code, const char *types, ...)
{
  g_return_val_if_fail (code != NULL && types != NULL, NULL);
  va_list ap;
  va_start (ap, types);
  TfNote *note = note_new_va (code, types, ap);
  va_end (ap);
  return note;
}

TfNote *
tf_note_copy (const TfNote *note)
{
  g_return_val_if_fail (note != NULL, NULL);
  TfNote *copy = g_memdup2 (note, sizeof *note);
  copy->code = g_strdup (note->code);
  for (guint k = 0; k < copy->n_args; k++)
    copy->args[k].text = g_strdup (note->args[k].text);
  return copy;
}

void
tf_note_free (TfNote *note)
{
  if (note == NULL)
    return;
  for (guint k = 0; k < note->n_args; k++)
    g_free (note->args[k].text);
  g_free (note->code);
  g_free (note);
}

const char *
tf_note_get_code (const TfNote *note)
{
  g_return_val_if_fail (note != NULL, NULL);
  return note->code;
}

TfNoteLevel
tf_note_get_level (const TfNote *note)
{
  g_return_val_if_fail (note != NULL, TF_NOTE_INFO);
  return note->kind != NULL ? note->kind->level : TF_NOTE_CAUTION;
}

double
tf_note_get_number (const TfNote *note, guint k)
{
  g_return_val_if_fail (note != NULL, NAN);
  return k < note->n_args && note->args[k].type != 's' ? note->args[k].value : NAN;
}

/* Prints argument @arg by the form found after ':' in the template ("" or ".2f", "+.1f", ".0f", ".3g"). */
static void
print_arg (GString *out, const Arg *arg, const char *form, gboolean english)
{
  if (arg->type == 's')
    {
      g_string_append (out, arg->text != NULL ? arg->text : "?");
      return;
    }
  if (!isfinite (arg->value))
    {
      g_string_append (out, english ? "unknown" : _ ("unknown"));
      return;
    }
  g_autofree char *number = tf_number_dup_form (arg->value, form, !english);
  g_string_append (out, number);
}

char *
tf_note_dup_text (const TfNote *note, gboolean english)
{
  g_return_val_if_fail (note != NULL, NULL);
  if (note->kind == NULL)
    return g_strdup (note->code);
  const char *text = english ? note->kind->text : _ (note->kind->text);
  GString *out = g_string_new (NULL);
  for (const char *p = text; *p != '\0'; p++)
    {
      const char *end = *p == '{' ? strchr (p, '}') : NULL;
      guint k = end != NULL && g_ascii_isdigit (p[1]) ? (guint)(p[1] - '0') : MAX_ARGS;
      if (k >= MAX_ARGS)
        {
          g_string_append_c (out, *p);
          continue;
        }
      g_autofree char *form = p[2] == ':' ? g_strndup (p + 3, (gsize)(end - p - 3)) : g_strdup ("");
      if (k < note->n_args)
        print_arg (out, &note->args[k], form, english);
      p = end;
    }
  return g_string_free (out, FALSE);
}

TfNotes *
tf_notes_new (void)
{
  return g_ptr_array_new_with_free_func ((GDestroyNotify)tf_note_free);
}

/* An integer comes back from the store as a number and is the same argument still. */
static gboolean
same_arg (const Arg *a, const Arg *b)
{
  if ((a->type == 's') != (b->type == 's'))
    return FALSE;
  if (a->type == 's')
    return g_strcmp0 (a->text, b->text) == 0;
  if (isnan (a->value) || isnan (b->value))
    return isnan (a->value) && isnan (b->value);
  return !(a->value < b->value) && !(a->value > b->value);
}

static gboolean
note_equal (const TfNote *a, const TfNote *b)
{
  if (strcmp (a->code, b->code) != 0 || a->n_args != b->n_args)
    return FALSE;
  for (guint k = 0; k < a->n_args; k++)
    if (!same_arg (&a->args[k], &b->args[k]))
      return FALSE;
  return TRUE;
}

static void
notes_take (TfNotes *notes, TfNote *note)
{
  for (guint k = 0; k < notes->len; k++)
    if (note_equal (g_ptr_array_index (notes, k), note))
      {
        tf_note_free (note);
        return;
      }
  g_ptr_array_add (notes, note);
}

void
tf_notes_add (TfNotes *notes, const char *code, const char *types, ...)
{
  g_return_if_fail (notes != NULL && code != NULL && types != NULL);
  va_list ap;
  va_start (ap, types);
  notes_take (notes, note_new_va (code, types, ap));
  va_end (ap);
}

void
tf_notes_add_copy (TfNotes *notes, const TfNote *note)
{
  g_return_if_fail (notes != NULL && note != NULL);
  notes_take (notes, tf_note_copy (note));
}

const TfNote *
tf_notes_find (const TfNotes *notes, const char *code)
{
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    if (strcmp (tf_notes_get (notes, k)->code, code) == 0)
      return tf_notes_get (notes, k);
  return NULL;
}

guint
tf_notes_get_n (const TfNotes *notes)
{
  return notes != NULL ? notes->len : 0;
}

const TfNote *
tf_notes_get (const TfNotes *notes, guint k)
{
  g_return_val_if_fail (k < tf_notes_get_n (notes), NULL);
  return g_ptr_array_index (notes, k);
}

char *
tf_notes_dup_codes (const TfNotes *notes)
{
  g_autoptr (GPtrArray) codes = g_ptr_array_new ();
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    {
      const char *code = tf_notes_get (notes, k)->code;
      if (!g_ptr_array_find_with_equal_func (codes, code, g_str_equal, NULL))
        g_ptr_array_add (codes, (gpointer)code);
    }
  g_ptr_array_add (codes, NULL);
  return g_strjoinv (" ", (char **)codes->pdata);
}

char *
tf_notes_dup_store (const TfNotes *notes)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_array (builder);
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    {
      const TfNote *note = tf_notes_get (notes, k);
      json_builder_begin_array (builder);
      json_builder_add_string_value (builder, note->code);
      for (guint a = 0; a < note->n_args; a++)
        if (note->args[a].type == 's')
          json_builder_add_string_value (builder, note->args[a].text);
        else
          json_builder_add_double_value (builder, note->args[a].value);
      json_builder_end_array (builder);
    }
  json_builder_end_array (builder);
  return tf_json_dup_text (builder, FALSE);
}

static TfNote *
note_from_array (JsonArray *array)
{
  if (json_array_get_length (array) == 0 || tf_json_element_string (array, 0) == NULL)
    return NULL;
  TfNote *note = note_new_bare (tf_json_element_string (array, 0));
  for (guint k = 1; k < MIN (json_array_get_length (array), (guint)MAX_ARGS + 1); k++)
    {
      Arg *arg = &note->args[note->n_args++];
      const char *text = tf_json_element_string (array, k);
      arg->type = text != NULL ? 's' : 'd';
      arg->text = g_strdup (text);
      arg->value = text != NULL ? NAN : tf_json_element_number (array, k);
    }
  return note;
}

TfNotes *
tf_notes_from_store (const char *text, gboolean *ok)
{
  TfNotes *notes = tf_notes_new ();
  g_autoptr (JsonNode) root = text != NULL ? json_from_string (text, NULL) : NULL;
  gboolean good = root != NULL && JSON_NODE_HOLDS_ARRAY (root);
  JsonArray *array = good ? json_node_get_array (root) : NULL;
  for (guint k = 0; good && k < json_array_get_length (array); k++)
    {
      JsonNode *element = json_array_get_element (array, k);
      TfNote *note = JSON_NODE_HOLDS_ARRAY (element) ? note_from_array (json_node_get_array (element)) : NULL;
      if (note != NULL)
        g_ptr_array_add (notes, note);
      else
        good = FALSE;
    }
  if (ok != NULL)
    *ok = good;
  return notes;
}

void
tf_note_build_json (const TfNote *note, JsonBuilder *builder)
{
  if (note == NULL)
    {
      json_builder_add_null_value (builder);
      return;
    }
  g_autofree char *text = tf_note_dup_text (note, TRUE);
  json_builder_begin_object (builder);
  tf_json_string (builder, "code", note->code);
  tf_json_string (builder, "text", text);
  json_builder_end_object (builder);
}

void
tf_notes_build_json (const TfNotes *notes, JsonBuilder *builder)
{
  json_builder_begin_array (builder);
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    tf_note_build_json (tf_notes_get (notes, k), builder);
  json_builder_end_array (builder);
}
