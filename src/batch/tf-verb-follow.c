/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <stdio.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-json.h"
#include "tf-ledger-follow.h"

/* follow: passages made anew, what may have come round the Sun offered. */

typedef struct
{
  TfLedger *ledger;
  GPtrArray *passages; /* TfPassageRow: those to be listed */
  GHashTable *by_id;   /* local key -> TfPassageRow, of all */
  GPtrArray *all;
  GArray *returns; /* TfReturnOffer */
  TfFollowSum sum;
} Found;

static void
found_clear (Found *found)
{
  g_clear_pointer (&found->passages, g_ptr_array_unref);
  g_clear_pointer (&found->by_id, g_hash_table_unref);
  g_clear_pointer (&found->all, g_ptr_array_unref);
  g_clear_pointer (&found->returns, g_array_unref);
  g_clear_pointer (&found->ledger, tf_ledger_close);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Found, found_clear)

static const TfPassageRow *
passage_of (const Found *found, gint64 id)
{
  return g_hash_table_lookup (found->by_id, GSIZE_TO_POINTER (id));
}

static gboolean
read_found (Found *found, gboolean with_hints, GError **error)
{
  found->all = tf_ledger_passages (found->ledger, error);
  found->returns = found->all != NULL ? tf_ledger_returns (found->ledger, 0, error) : NULL;
  if (found->returns == NULL)
    return FALSE;
  found->by_id = g_hash_table_new (g_direct_hash, g_direct_equal);
  found->passages = g_ptr_array_new ();
  for (guint k = 0; k < found->all->len; k++)
    {
      TfPassageRow *row = g_ptr_array_index (found->all, k);
      g_hash_table_insert (found->by_id, GSIZE_TO_POINTER (row->id), row);
      if (with_hints || row->n_marks > 0)
        g_ptr_array_add (found->passages, row);
    }
  return TRUE;
}

/* -- text ----------------------------------------------------------------------------------- */
/* A passage as people call it: its region's number, else the first digits of its id. */
static char *
dup_name (const TfPassageRow *row)
{
  return *row->number != '\0' ? g_strdup (row->number) : g_strndup (row->content_id, 10);
}

static char *
dup_times (const TfPassageRow *row)
{
  g_autofree char *first = tf_time_dup_iso (row->first_time, 0);
  g_autofree char *last = tf_time_dup_iso (row->last_time, 0);
  if (first == NULL || last == NULL)
    return g_strdup (_ ("time unknown"));
  return g_strdup_printf ("%.16sZ – %.16sZ", first, last);
}

static void
print_passage (const Found *found, const TfPassageRow *row)
{
  g_autofree char *name = dup_name (row), *times = dup_times (row);
  printf (_ ("%-11s %-7s %s  %3u frames, %u marks, %u hints; born: %s; ended: %s"), name,
          row->vantage, times, row->n_frames, row->n_marks, row->n_hints,
          _ (tf_end_name (row->born)), _ (tf_end_name (row->ended)));
  const TfPassageRow *from = passage_of (found, row->split_from),
                     *into = passage_of (found, row->merged_into),
                     *same = passage_of (found, row->same);
  g_autofree char *from_name = from != NULL ? dup_name (from) : NULL,
                  *into_name = into != NULL ? dup_name (into) : NULL,
                  *same_name = same != NULL && same != row ? dup_name (same) : NULL;
  if (from_name != NULL)
    printf (_ ("; out of %s"), from_name);
  if (into_name != NULL)
    printf (_ ("; into %s"), into_name);
  if (same_name != NULL)
    printf (_ ("; one region with %s"), same_name);
  if (row->n_regions > 1)
    printf (_ ("; marked under %u numbers"), row->n_regions);
  printf ("\n");
}

static void
print_returns (const Found *found)
{
  for (guint k = 0; k < found->returns->len; k++)
    {
      const TfReturnOffer *r = &g_array_index (found->returns, TfReturnOffer, k);
      const TfPassageRow *earlier = passage_of (found, r->earlier),
                         *later = passage_of (found, r->later);
      if (earlier == NULL || later == NULL)
        continue;
      g_autofree char *one = dup_name (earlier), *other = dup_name (later);
      printf (k == 0 ? _ ("\nPerhaps come round the Sun (offered; a person says whether):\n") : "");
      printf (_ ("  %s may be the return of %s after %.1f days, %+.1f° in longitude and %+.1f° in "
                 "latitude from its carried place\n"),
              other, one, (later->first_time.s - earlier->last_time.s) / 86400.0, r->lon_deg,
              r->lat_deg);
    }
}

static void
print_text (const Found *found, const char *path)
{
  const TfFollowSum *s = &found->sum;
  printf (_ ("%s: %u marks and hints in %u passages of %u regions; %u passages have hints only\n"),
          path, s->sightings, s->passages, s->regions, s->hint_passages);
  printf (_ ("%u new; %u passages split off, %u merged; %u may have come round; %u links and cuts "
             "by hand\n"),
          s->fresh, s->splits, s->mergers, s->returns, s->ties);
  if (s->ties_lost > 0)
    printf (_ ("%u links or cuts by hand name marks that are not there any more\n"), s->ties_lost);
  if (found->passages->len > 0)
    printf ("\n");
  for (guint k = 0; k < found->passages->len; k++)
    print_passage (found, g_ptr_array_index (found->passages, k));
  if (found->passages->len < found->all->len)
    printf (_ ("Passages that have hints only are listed with --with-hints.\n"));
  print_returns (found);
}

/* -- JSON ----------------------------------------------------------------------------------- */
static void
build_id (JsonBuilder *builder, const char *key, const TfPassageRow *row)
{
  tf_json_string (builder, key, row != NULL ? row->content_id : NULL);
}

static void
build_passage (JsonBuilder *builder, const Found *found, const TfPassageRow *row)
{
  g_autofree char *first = tf_time_dup_iso (row->first_time, 3),
                  *last = tf_time_dup_iso (row->last_time, 3);
  json_builder_begin_object (builder);
  tf_json_string (builder, "passage", row->content_id);
  tf_json_string (builder, "region", *row->number != '\0' ? row->number : NULL);
  tf_json_string (builder, "vantage", row->vantage);
  tf_json_string (builder, "first_time", first);
  tf_json_string (builder, "last_time", last);
  tf_json_int (builder, "frames", row->n_frames);
  tf_json_int (builder, "marks", row->n_marks);
  tf_json_int (builder, "hints", row->n_hints);
  tf_json_string (builder, "born", tf_end_name (row->born));
  tf_json_string (builder, "ended", tf_end_name (row->ended));
  build_id (builder, "split_from", passage_of (found, row->split_from));
  build_id (builder, "merged_into", passage_of (found, row->merged_into));
  build_id (builder, "first_passage_of_region", passage_of (found, row->same));
  tf_json_int (builder, "numbers", row->n_regions);
  json_builder_set_member_name (builder, "members");
  json_builder_begin_array (builder);
  g_autoptr (GPtrArray) rows = tf_ledger_passage_rows (found->ledger, row->id, FALSE, FALSE, NULL);
  for (guint k = 0; rows != NULL && k < rows->len; k++)
    json_builder_add_string_value (builder, ((TfRow *)g_ptr_array_index (rows, k))->mark_id);
  json_builder_end_array (builder);
  json_builder_end_object (builder);
}

static void
build_return (JsonBuilder *builder, const Found *found, const TfReturnOffer *r)
{
  const TfPassageRow *earlier = passage_of (found, r->earlier),
                     *later = passage_of (found, r->later);
  json_builder_begin_object (builder);
  build_id (builder, "earlier", earlier);
  build_id (builder, "later", later);
  tf_json_number (builder, "days", (later->first_time.s - earlier->last_time.s) / 86400.0);
  tf_json_number (builder, "lon_off_deg", r->lon_deg);
  tf_json_number (builder, "lat_off_deg", r->lat_deg);
  json_builder_end_object (builder);
}

static void
build_sum (JsonBuilder *builder, const TfFollowSum *s)
{
  tf_json_int (builder, "sightings", s->sightings);
  tf_json_int (builder, "fresh", s->fresh);
  tf_json_int (builder, "n_passages", s->passages);
  tf_json_int (builder, "n_hint_passages", s->hint_passages);
  tf_json_int (builder, "n_regions", s->regions);
  tf_json_int (builder, "splits", s->splits);
  tf_json_int (builder, "mergers", s->mergers);
  tf_json_int (builder, "links_and_cuts", s->ties);
  tf_json_int (builder, "links_and_cuts_lost", s->ties_lost);
  tf_json_bool (builder, "changed", s->changed);
}

static void
print_json (const Found *found, const TfFollowParams *params)
{
  g_autoptr (JsonBuilder) builder = json_builder_new ();
  json_builder_begin_object (builder);
  tf_json_string (builder, "ledger", tf_ledger_get_path (found->ledger));
  tf_json_string (builder, "method", TF_FOLLOW_METHOD);
  json_builder_set_member_name (builder, "options");
  tf_options_build_json (tf_follow_options, params, builder);
  build_sum (builder, &found->sum);
  json_builder_set_member_name (builder, "passages");
  json_builder_begin_array (builder);
  for (guint k = 0; k < found->passages->len; k++)
    build_passage (builder, found, g_ptr_array_index (found->passages, k));
  json_builder_end_array (builder);
  json_builder_set_member_name (builder, "returns");
  json_builder_begin_array (builder);
  for (guint k = 0; k < found->returns->len; k++)
    build_return (builder, found, &g_array_index (found->returns, TfReturnOffer, k));
  json_builder_end_array (builder);
  json_builder_end_object (builder);
  tf_batch_print_json (builder);
}

int
tf_verb_follow (int argc, char **argv)
{
  gboolean json = FALSE, with_hints = FALSE;
  TfFollowParams params;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { "with-hints", 0, 0, G_OPTION_ARG_NONE, &with_hints,
      N_ ("list passages that have hints only, too"), NULL },
    { NULL },
  };
  tf_follow_params_init (&params);
  GOptionContext *context = tf_batch_context ("follow");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  g_option_context_add_group (
      context, tf_options_new_group (tf_follow_options, &params, "method", N_ ("the method")));
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc != 2)
    return tf_batch_usage ("follow", _ ("Name one ledger."));

  g_autoptr (GError) error = NULL;
  g_autoptr (TfWork) work = tf_batch_work_new (1);
  g_auto (Found) found = { .ledger = tf_ledger_open (argv[1], &error) };
  if (found.ledger == NULL || !tf_ledger_follow (found.ledger, &params, work, &found.sum, &error)
      || !read_found (&found, with_hints, &error))
    {
      tf_batch_say_error (error);
      return TF_EXIT_NOTHING;
    }
  if (json)
    print_json (&found, &params);
  else
    print_text (&found, argv[1]);
  if (found.sum.sightings == 0)
    tf_batch_say (_ ("There is nothing to follow yet; fill the ledger with frames first."));
  return TF_EXIT_DONE;
}
