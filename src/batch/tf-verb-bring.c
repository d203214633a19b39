/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-tables.h"
#include "tf-bring.h"
#include "tf-json.h"

/* bring: an outside table into a ledger; what was taken, what was not and why. --list and
 * --take-out for the tables that are there. */

enum
{
  MOST_FAULTS = 20 /* told on a terminal; --json has all */
};

typedef struct
{
  gboolean json, look, rows_alone, list;
  char *columns, *source, *licence, *take_out;
} Words;

static void
say_list (const char *title, const GPtrArray *texts)
{
  if (texts->len > 0)
    tf_batch_say (title);
  for (guint k = 0; k < texts->len; k++)
    {
      g_autofree char *line = g_strconcat ("  ", g_ptr_array_index (texts, k), NULL);
      tf_batch_say (line);
    }
}

static void
say_faults (const GArray *faults, gboolean by_line)
{
  for (guint k = 0; k < MIN (faults->len, MOST_FAULTS); k++)
    {
      const TfFault *f = &g_array_index (faults, TfFault, k);
      g_autofree char *where = g_strdup_printf (by_line ? _ ("line %u") : _ ("row %u"), f->place);
      g_autofree char *line
          = *f->column != '\0'
                ? g_strdup_printf (_ ("  %s left out: %s “%s”: %s"), where, f->column, f->value, f->reason)
                : g_strdup_printf (_ ("  %s left out: %s"), where, f->reason);
      tf_batch_say (line);
    }
  if (faults->len <= MOST_FAULTS)
    return;
  g_autofree char *more = g_strdup_printf (_ ("  and %u more; --json lists all"), faults->len - MOST_FAULTS);
  tf_batch_say (more);
}

static void
say (const TfBrought *b, gboolean there, gboolean look)
{
  say_list (_ ("Columns taken:"), b->taken);
  say_list (_ ("Columns not taken:"), b->not_taken);
  say_faults (b->faults, g_strcmp0 (b->table->format, "csv") == 0);
  for (guint k = 0; k < b->said->len; k++)
    tf_batch_say (g_ptr_array_index (b->said, k));
  g_autofree char *sum = g_strdup_printf (
      look    ? _ ("%s: %u of %u rows would be taken; nothing was written.")
      : there ? _ ("%s: is in this ledger already (%u of %u rows); nothing was changed.")
              : _ ("%s: %u of %u rows taken as outside regions."),
      b->table->name, b->entries->len, b->table->n_rows);
  tf_batch_say (sum);
  if (*b->table->source == '\0' && !there)
    tf_batch_say (_ ("Say where it is from with --source, and under which licence with --licence."));
}

static void
build_table (JsonBuilder *builder, const TfOutsideTable *t)
{
  tf_json_string (builder, "name", t->name);
  tf_json_string (builder, "checksum", t->checksum);
  tf_json_string (builder, "format", t->format);
  tf_json_string (builder, "source", t->source);
  tf_json_string (builder, "licence", t->licence);
  tf_json_string (builder, "columns", t->columns);
  tf_json_string (builder, "linking", t->linking);
  tf_json_int (builder, "rows", t->n_rows);
  tf_json_int (builder, "left_out", t->n_left);
}

static void
print_json (const TfBrought *b, gboolean there)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  build_table (builder, b->table);
  tf_json_int (builder, "taken", b->entries->len);
  tf_json_int (builder, "regions", b->n_regions);
  tf_json_int (builder, "own_rows", b->n_own);
  tf_json_bool (builder, "there_already", there);
  tf_batch_build_texts (builder, "columns_taken", b->taken);
  tf_batch_build_texts (builder, "columns_not_taken", b->not_taken);
  tf_batch_build_texts (builder, "said", b->said);
  json_builder_set_member_name (builder, "bad_rows");
  json_builder_begin_array (builder);
  for (guint k = 0; k < b->faults->len; k++)
    {
      const TfFault *f = &g_array_index (b->faults, TfFault, k);
      json_builder_begin_object (builder);
      tf_json_int (builder, "place", f->place);
      tf_json_string (builder, "column", f->column);
      tf_json_string (builder, "value", f->value);
      tf_json_string (builder, "reason", f->reason);
      json_builder_end_object (builder);
    }
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  tf_batch_print_json (builder);
}

static int
fail (const GError *error)
{
  tf_batch_say_error (error);
  return TF_EXIT_NOTHING;
}

static int
bring (const char *path, const char *table, const Words *words)
{
  int code = tf_batch_bring_summary (path, table, words->source, words->look, words->json);
  if (code >= 0)
    return code;
  g_autoptr (GError) error = NULL;
  gboolean exists = g_file_test (path, G_FILE_TEST_EXISTS);
  g_autoptr (TfLedger) ledger = exists ? tf_ledger_open (path, &error) : NULL;
  if (exists && ledger == NULL)
    return fail (error);
  TfBringParams params = { words->source, words->licence, words->rows_alone, ledger };
  g_autoptr (TfBrought) brought = tf_bring_file (table, words->columns, &params, &error);
  if (brought == NULL)
    return fail (error);
  const TfOutsideTable *t = brought->table;
  g_autofree char *cid = tf_ledger_outside_cid (t->checksum, t->columns, t->linking);
  gboolean there = ledger != NULL && tf_ledger_find_outside (ledger, cid) != 0;
  if (!words->look && ledger == NULL
      && (ledger = tf_ledger_open_or_create (path, 'T', &error)) == NULL)
    return fail (error);
  if (!words->look && tf_ledger_add_outside (ledger, t, brought->entries, &error) == 0)
    return fail (error);
  if (words->json)
    print_json (brought, there);
  else
    say (brought, there, words->look);
  return brought->faults->len > 0 ? TF_EXIT_PART : TF_EXIT_DONE;
}

static int
list (const char *path, gboolean json)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, &error);
  g_autoptr (GPtrArray) tables = ledger != NULL ? tf_ledger_outside_tables (ledger, &error) : NULL;
  if (tables == NULL)
    return fail (error);
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_array (builder);
  for (guint k = 0; k < tables->len; k++)
    {
      const TfOutsideTable *t = g_ptr_array_index (tables, k);
      json_builder_begin_object (builder);
      build_table (builder, t);
      tf_json_int (builder, "taken", t->n_taken);
      tf_json_string (builder, "about", t->about);
      json_builder_end_object (builder);
      if (!json)
        printf (_ ("%s: %u of %u rows; source: %s; licence: %s\n"), t->name, t->n_taken, t->n_rows,
                *t->source != '\0' ? t->source : _ ("not told"), *t->licence != '\0' ? t->licence : _ ("not told"));
    }
  json_builder_end_array (builder);
  if (json)
    tf_batch_print_json (builder);
  return TF_EXIT_DONE;
}

static int
take_out (const char *path, const char *name)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfLedger) ledger = tf_ledger_open (path, &error);
  if (ledger == NULL)
    return fail (error);
  gint64 id = tf_ledger_find_outside (ledger, name);
  g_autofree char *line
      = id == 0 ? g_strdup_printf (_ ("%s has no outside table “%s”; --list names them."), path, name)
                : g_strdup_printf (_ ("%s: the table “%s” and its rows are taken out; it can be brought again."), path, name);
  if (id != 0 && !tf_ledger_remove_outside (ledger, id, &error))
    return fail (error);
  tf_batch_say (line);
  return id != 0 ? TF_EXIT_DONE : TF_EXIT_NOTHING;
}

static int
run (int argc, char **argv, Words *words)
{
  const GOptionEntry entries[] = {
    { "columns", 0, 0, G_OPTION_ARG_FILENAME, &words->columns, N_ ("which of their columns is which of ours; a line reads “lat_deg = LAT ; unit deg”"), "FILE" },
    { "source", 0, 0, G_OPTION_ARG_STRING, &words->source, N_ ("where the table is from; kept with it"), "TEXT" },
    { "licence", 0, 0, G_OPTION_ARG_STRING, &words->licence, N_ ("its licence; kept with it"), "TEXT" },
    { "rows-alone", 0, 0, G_OPTION_ARG_NONE, &words->rows_alone, N_ ("every row is a region of its own"), NULL },
    { "look", 0, 0, G_OPTION_ARG_NONE, &words->look, N_ ("say what would be taken; write nothing"), NULL },
    { "list", 0, 0, G_OPTION_ARG_NONE, &words->list, N_ ("name the outside tables of the ledger"), NULL },
    { "take-out", 0, 0, G_OPTION_ARG_STRING, &words->take_out, N_ ("take a table and its rows out again"), "NAME" },
    { "json", 0, 0, G_OPTION_ARG_NONE, &words->json, N_ ("print one JSON document"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("bring");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  gboolean other = words->list || words->take_out != NULL;
  if (argc != (other ? 2 : 3))
    return tf_batch_usage ("bring", other ? _ ("Name one ledger.") : _ ("Name a ledger and a table."));
  if (words->list)
    return list (argv[1], words->json);
  return words->take_out != NULL ? take_out (argv[1], words->take_out) : bring (argv[1], argv[2], words);
}

int
tf_verb_bring (int argc, char **argv)
{
  Words words = { 0 };
  int code = run (argc, argv, &words);
  g_free (words.columns);
  g_free (words.source);
  g_free (words.licence);
  g_free (words.take_out);
  return code;
}
