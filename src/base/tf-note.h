/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* A note is what the core has to say to a person: a code and typed arguments, never a sentence.
 *
 * Codes are lower case with hyphens and are kept in the ledger and in files; they are never
 * renamed. The sentence is made when it is shown, by tf_note_dup_text(), in the current language or
 * in English. What each code means stands in one const table a subject (tf-note-frame.c, ...).
 * A code that this version does not know (from a newer ledger) is kept and shown as itself.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

G_BEGIN_DECLS

typedef enum
{
  TF_NOTE_INFO,    /* worth knowing, changes nothing */
  TF_NOTE_REPAIR,  /* a header was turned into what it means; says what was done */
  TF_NOTE_CAUTION, /* the number is given, a person should look */
  TF_NOTE_STRONG,  /* the number is given, do not lean on it */
  TF_NOTE_REFUSAL, /* why something was not done, and what to do */
  TF_NOTE_REASON,  /* why a verdict is "cannot say" */
} TfNoteLevel;

/** TfNoteKind: one row of a note table. */
typedef struct
{
  const char *code;
  TfNoteLevel level;
  const char *text; /* N_("... {0} ... {1:.2f} ..."): {k} is argument k, a printf form may follow ':' */
} TfNoteKind;

extern const TfNoteKind tf_note_kinds_frame[];  /* frames, headers, geometry; ends with code NULL */
extern const TfNoteKind tf_note_kinds_region[]; /* outlines, hints, measurement */
extern const TfNoteKind tf_note_kinds_laws[];   /* cycles, verdicts, samples */
extern const TfNoteKind tf_note_kinds_ledger[]; /* ledger, intake, exchange */

typedef struct _TfNote TfNote;

/** TfNotes: an ordered list of notes, reference counted through GPtrArray; NULL is an empty list
 * for every function that reads. */
typedef GPtrArray TfNotes;

/**
 * tf_note_new:
 * @code: one of the tables' codes
 * @types: one letter an argument, at most 6: 's' (const char *, copied), 'd' (double), 'i' (int)
 * Returns: (transfer full): the note. A code in no table is a programmer's mistake (g_critical).
 */
TfNote *tf_note_new (const char *code, const char *types, ...);
TfNote *tf_note_copy (const TfNote *note);
void tf_note_free (TfNote *note);
const char *tf_note_get_code (const TfNote *note);
TfNoteLevel tf_note_get_level (const TfNote *note);
/** tf_note_get_number: argument @k as a number; NaN where there is none. */
double tf_note_get_number (const TfNote *note, guint k);

/** tf_note_dup_text: the sentence, in English when @english, else in the current language. */
char *tf_note_dup_text (const TfNote *note, gboolean english);

TfNotes *tf_notes_new (void);
/** tf_notes_add: appends tf_note_new (...); a note with the same code and arguments is not doubled. */
void tf_notes_add (TfNotes *notes, const char *code, const char *types, ...);
void tf_notes_add_copy (TfNotes *notes, const TfNote *note);
/** tf_notes_find: (nullable): the first note of that code, borrowed. */
const TfNote *tf_notes_find (const TfNotes *notes, const char *code);
guint tf_notes_get_n (const TfNotes *notes);
const TfNote *tf_notes_get (const TfNotes *notes, guint k);
/** tf_notes_dup_codes: the codes parted by spaces, as tables have them; "" when empty. */
char *tf_notes_dup_codes (const TfNotes *notes);

/** tf_notes_dup_store: compact JSON of codes and arguments, [["near-limb",0.42],...]: the stored form. */
char *tf_notes_dup_store (const TfNotes *notes);
/** tf_notes_from_store: (transfer full): reads the stored form; on damage an empty list and FALSE in @ok. */
TfNotes *tf_notes_from_store (const char *text, gboolean *ok);

/** tf_notes_build_json: adds an array of {code, text} (English) as the builder's next value. */
void tf_notes_build_json (const TfNotes *notes, JsonBuilder *builder);
/** tf_note_build_json: {code, text} of one note, or null for NULL. */
void tf_note_build_json (const TfNote *note, JsonBuilder *builder);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfNote, tf_note_free)
G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfNotes, g_ptr_array_unref)

G_END_DECLS
