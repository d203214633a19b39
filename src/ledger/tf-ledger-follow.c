/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */

/* Following what changed. Whether two sightings are linked depends only on what lies between them in
 * time (tf-follow.h), so that links are made again only where a sighting is new or gone, or a cut
 * was made or taken back, between their ends; all others stay. Passages are then put together anew
 * from all links, which is quick. The result is that of doing everything again. */

#include "tf-ledger-follow-private.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"

enum
{
  TRIES = 5 /* how often to begin again when another program wrote meanwhile */
};

typedef struct
{
  TfSightings *all;
  GArray *times; /* double: instants at which something changed, sorted */
  GArray *links; /* TfLink: those that stay, then the new ones */
  guint fresh;
} Run;

static void
run_clear (Run *run)
{
  g_clear_pointer (&run->all, tf_sightings_free);
  g_clear_pointer (&run->times, g_array_unref);
  g_clear_pointer (&run->links, g_array_unref);
}
G_DEFINE_AUTO_CLEANUP_CLEAR_FUNC (Run, run_clear)

/* -- what changed --------------------------------------------------------------------------- */
static void
add_time (Run *run, double time_s)
{
  if (!isnan (time_s))
    g_array_append_val (run->times, time_s);
}

/* Sightings that were not there, and members that are not there any more. */
static gboolean
find_changed (TfLedger *ledger, Run *run, gboolean everything, GError **error)
{
  g_autofree gboolean *known = g_new0 (gboolean, run->all->sights->len + 1);
  g_autoptr (sqlite3_stmt) query
      = tf_query (ledger, error, "SELECT hint, mark, time FROM member", "");
  int more = -1;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    {
      TfSight sight = { sqlite3_column_int64 (query, 1), sqlite3_column_int (query, 0) != 0 };
      int k = tf_sightings_find (run->all, sight);
      if (k < 0)
        add_time (run, tf_column_double (query, 2));
      else
        known[k] = TRUE;
    }
  for (guint k = 0; k < run->all->sights->len; k++)
    {
      run->fresh += !known[k];
      if (!known[k] || everything)
        add_time (run, g_array_index (run->all->sightings, TfSighting, k).time.s);
    }
  return more == 0;
}

#define TIES_SQL                                                                                   \
  "SELECT lower (hex (a)), lower (hex (b)) FROM (SELECT * FROM (SELECT a, b, cut FROM tie EXCEPT " \
  "SELECT a, b, cut FROM tied) UNION ALL "                                                         \
  "SELECT * FROM (SELECT a, b, cut FROM tied EXCEPT SELECT a, b, cut FROM tie))"

static void
add_tie_end (TfLedger *ledger, Run *run, const char *id)
{
  TfSight sight;
  int k = tf_tie_find (ledger, id, &sight) ? tf_sightings_find (run->all, sight) : -1;
  if (k >= 0)
    add_time (run, g_array_index (run->all->sightings, TfSighting, k).time.s);
}

static gboolean
find_changed_ties (TfLedger *ledger, Run *run, guint *n, GError **error)
{
  g_autoptr (GPtrArray) ids = g_ptr_array_new_with_free_func (g_free);
  {
    g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, TIES_SQL, "");
    int more = -1;
    while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
      for (int end = 0; end < 2; end++)
        g_ptr_array_add (ids, g_strdup (tf_column_text (query, end)));
    if (more != 0)
      return FALSE;
  }
  for (guint k = 0; k < ids->len; k++)
    add_tie_end (ledger, run, g_ptr_array_index (ids, k));
  *n = ids->len / 2;
  return TRUE;
}

static int
compare_doubles (gconstpointer a, gconstpointer b)
{
  double p = *(const double *)a, q = *(const double *)b;
  return (p > q) - (p < q);
}

/* Whether something changed at a time from @from to @to, both included. */
static gboolean
changed_between (const Run *run, double from, double to)
{
  guint low = 0, high = run->times->len;
  while (low < high)
    {
      guint middle = (low + high) / 2;
      if (g_array_index (run->times, double, middle) < from)
        low = middle + 1;
      else
        high = middle;
    }
  return low < run->times->len && g_array_index (run->times, double, low) <= to;
}

/* -- links ---------------------------------------------------------------------------------- */
static gboolean
link_changed (const Run *run, const TfLink *link)
{
  double a = g_array_index (run->all->sightings, TfSighting, link->a).time.s;
  double b = g_array_index (run->all->sightings, TfSighting, link->b).time.s;
  return changed_between (run, fmin (a, b), fmax (a, b));
}

static gboolean
keep_links (TfLedger *ledger, Run *run, GError **error)
{
  g_autoptr (GArray) stored = tf_follow_read_links (ledger, error);
  for (guint k = 0; stored != NULL && k < stored->len; k++)
    {
      const TfStoredLink *s = &g_array_index (stored, TfStoredLink, k);
      int a = tf_sightings_find (run->all, s->a), b = tf_sightings_find (run->all, s->b);
      TfLink link = { (guint)a, (guint)b, s->kind, s->overlap };
      if (a >= 0 && b >= 0 && !link_changed (run, &link))
        g_array_append_val (run->links, link);
    }
  return stored != NULL;
}

/* The sightings that a new link may depend on, with their outlines, as an array of their own. */
static GArray *
list_near (TfLedger *ledger, Run *run, const TfFollowParams *params, const TfWork *work,
           GError **error)
{
  double reach = fmax (params->gap_days * TF_DAY_S, params->across_hours * 3600.0);
  g_autoptr (GArray) near_ones = g_array_new (FALSE, FALSE, sizeof (guint));
  for (guint k = 0; k < run->all->sightings->len; k++)
    {
      double time = g_array_index (run->all->sightings, TfSighting, k).time.s;
      if (isnan (time) || !changed_between (run, time - reach, time + reach))
        continue;
      if (work != NULL && tf_cancel_is_raised (work->cancel))
        {
          g_set_error_literal (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_STATE,
                               _ ("stopped; passages are as they were"));
          return NULL;
        }
      if (!tf_sightings_read_outline (run->all, ledger, k, error))
        return NULL;
      g_array_append_val (near_ones, k);
    }
  return g_steal_pointer (&near_ones);
}

static void
add_links (Run *run, const GArray *near_ones, const TfFollowParams *params)
{
  g_autoptr (GArray) sightings = g_array_new (FALSE, FALSE, sizeof (TfSighting));
  g_autofree int *place = g_new (int, run->all->sightings->len + 1);
  memset (place, 0xff, (run->all->sightings->len + 1) * sizeof *place);
  for (guint k = 0; k < near_ones->len; k++)
    {
      guint from = g_array_index (near_ones, guint, k);
      place[from] = (int)k;
      g_array_append_val (sightings, g_array_index (run->all->sightings, TfSighting, from));
    }
  g_autoptr (GArray) ties = g_array_new (FALSE, FALSE, sizeof (TfTie));
  for (guint k = 0; k < run->all->ties->len; k++)
    {
      TfTie tie = g_array_index (run->all->ties, TfTie, k);
      int a = place[tie.a], b = place[tie.b];
      tie.a = (guint)a, tie.b = (guint)b;
      if (a >= 0 && b >= 0)
        g_array_append_val (ties, tie);
    }
  g_autoptr (GArray) made
      = tf_follow_links ((const TfSighting *)(void *)sightings->data, sightings->len,
                         (const TfTie *)(void *)ties->data, ties->len, params);
  for (guint k = 0; k < made->len; k++)
    {
      TfLink link = g_array_index (made, TfLink, k);
      link.a = g_array_index (near_ones, guint, link.a);
      link.b = g_array_index (near_ones, guint, link.b);
      if (link_changed (run, &link))
        g_array_append_val (run->links, link);
    }
}

/* -- one run -------------------------------------------------------------------------------- */
static void
sum_up (const Run *run, const TfPassages *found, TfFollowSum *sum)
{
  g_autofree guint8 *marked = g_new0 (guint8, found->passages->len + 1);
  for (guint k = 0; k < run->all->sights->len; k++)
    if (!g_array_index (run->all->sights, TfSight, k).is_hint)
      marked[found->passage[k]] = 1;
  *sum = (TfFollowSum){ .sightings = run->all->sights->len,
                        .fresh = run->fresh,
                        .passages = found->passages->len,
                        .returns = found->returns->len,
                        .ties = run->all->said->len,
                        .ties_lost = run->all->said->len - run->all->ties->len };
  for (guint k = 0; k < found->passages->len; k++)
    {
      const TfPassage *p = &g_array_index (found->passages, TfPassage, k);
      sum->hint_passages += !marked[k];
      sum->regions += p->region == k;
      sum->splits += p->split_from >= 0;
      sum->mergers += p->merged_into >= 0;
    }
}

static TfPassages *
assemble (Run *run, const TfFollowParams *params)
{
  return tf_follow_passages (
      (const TfSighting *)(void *)run->all->sightings->data, run->all->sightings->len,
      (const TfLink *)(void *)run->links->data, run->links->len,
      (const TfTie *)(void *)run->all->ties->data, run->all->ties->len,
      (const TfLookout *)(void *)run->all->lookouts->data, run->all->lookouts->len, params);
}

/* Everything but the writing; NULL on error. */
static TfPassages *
work_out (TfLedger *ledger, Run *run, const TfFollowParams *params, gboolean everything,
          const TfWork *work, GError **error)
{
  guint n_ties;
  run->all = tf_sightings_load (ledger, error);
  run->times = g_array_new (FALSE, FALSE, sizeof (double));
  run->links = g_array_new (FALSE, FALSE, sizeof (TfLink));
  if (run->all == NULL || !find_changed (ledger, run, everything, error)
      || !find_changed_ties (ledger, run, &n_ties, error))
    return NULL;
  g_array_sort (run->times, compare_doubles);
  g_autoptr (GArray) near_ones = list_near (ledger, run, params, work, error);
  if (near_ones == NULL || !keep_links (ledger, run, error))
    return NULL;
  add_links (run, near_ones, params);
  return assemble (run, params);
}

static char *
last_method (TfLedger *ledger)
{
  return tf_text_value (ledger, NULL, "SELECT value FROM setting WHERE key = 'followed'", "");
}

/* 1: done; 0: somebody wrote meanwhile; -1: error. */
static int
try_follow (TfLedger *ledger, const TfFollowParams *params, const TfWork *work, TfFollowSum *sum,
            GError **error)
{
  g_auto (Run) run = { 0 };
  g_autofree char *method = tf_options_dup_canonical (tf_follow_options, params, TF_FOLLOW_METHOD);
  g_autofree char *last = last_method (ledger);
  gint64 version = tf_ledger_get_version (ledger);
  g_autoptr (TfPassages) found
      = work_out (ledger, &run, params, g_strcmp0 (last, method) != 0, work, error);
  if (found == NULL || !tf_ledger_begin (ledger, error))
    return -1;
  if (tf_ledger_get_version (ledger) != version)
    {
      tf_ledger_rollback (ledger);
      return 0;
    }
  gboolean changed = FALSE;
  if (!tf_follow_store (ledger, run.all, run.links, found, method, &changed, error))
    {
      tf_ledger_rollback (ledger);
      return -1;
    }
  if (!tf_ledger_commit (ledger, error))
    return -1;
  sum_up (&run, found, sum);
  sum->changed = changed;
  return 1;
}

gboolean
tf_ledger_follow (TfLedger *ledger, const TfFollowParams *params, const TfWork *work,
                  TfFollowSum *sum, GError **error)
{
  g_return_val_if_fail (ledger != NULL && params != NULL, FALSE);
  TfFollowSum own;
  for (int k = 0; k < TRIES; k++)
    {
      int done = try_follow (ledger, params, work, sum != NULL ? sum : &own, error);
      if (done != 0)
        return done > 0;
    }
  g_set_error (error, TF_LEDGER_ERROR, TF_LEDGER_ERROR_BUSY,
               _ ("%s is being written to all the time; follow again when the filling is done"),
               ledger->path);
  return FALSE;
}

void
tf_ledger_follow_params (TfLedger *ledger, TfFollowParams *params)
{
  g_return_if_fail (ledger != NULL && params != NULL);
  g_autofree char *last = last_method (ledger);
  if (last == NULL
      || !tf_options_read_canonical (tf_follow_options, params, TF_FOLLOW_METHOD, last))
    tf_follow_params_init (params);
}

#define DUE_SQL                                                                                    \
  "SELECT EXISTS (SELECT 1 FROM point q WHERE q.hint < 2 AND NOT EXISTS (SELECT 1 FROM member b "  \
  "WHERE b.hint = q.hint AND b.mark = q.mark)) "                                                   \
  "OR EXISTS (SELECT 1 FROM member b WHERE NOT EXISTS (SELECT 1 FROM point q WHERE b.hint = "      \
  "q.hint AND b.mark = q.mark)) OR EXISTS ("                                                       \
  "SELECT a, b, cut FROM tie EXCEPT SELECT a, b, cut FROM tied) OR EXISTS (SELECT a, b, cut FROM " \
  "tied EXCEPT SELECT a, b, cut FROM tie)"

gboolean
tf_ledger_follow_is_due (TfLedger *ledger)
{
  g_return_val_if_fail (ledger != NULL, FALSE);
  return tf_value (ledger, NULL, 0, DUE_SQL, "") != 0;
}

/* -- check ---------------------------------------------------------------------------------- */
#define STORED_SQL                                                                                 \
  "SELECT b.hint, b.mark, lower (hex (q.cid)), q.born, q.ended, lower (hex (s.cid)), "             \
  "q.first_hint, q.first_mark FROM member b LEFT JOIN "                                            \
  "passage q ON q.id = b.passage LEFT JOIN passage s ON s.id = q.same"

static gboolean
is_as_stored (const Run *run, const TfPassages *found, char *const *ids, sqlite3_stmt *query)
{
  TfSight sight = { sqlite3_column_int64 (query, 1), sqlite3_column_int (query, 0) != 0 };
  TfSight first = { sqlite3_column_int64 (query, 7), sqlite3_column_int (query, 6) != 0 };
  int k = tf_sightings_find (run->all, sight);
  if (k < 0)
    return FALSE;
  guint number = found->passage[k];
  const TfPassage *p = &g_array_index (found->passages, TfPassage, number);
  return strcmp (tf_column_text (query, 2), ids[number]) == 0
         && sqlite3_column_int (query, 3) == (int)p->born
         && sqlite3_column_int (query, 4) == (int)p->ended
         && strcmp (tf_column_text (query, 5), ids[p->region]) == 0
         && tf_sight_equal (&first, &g_array_index (run->all->sights, TfSight, p->first));
}

gboolean
tf_follow_check (TfLedger *ledger, TfNotes *findings, GError **error)
{
  g_auto (Run) run = { 0 };
  TfFollowParams params;
  g_autofree char *method = last_method (ledger);
  if (method == NULL
      || !tf_options_read_canonical (tf_follow_options, &params, TF_FOLLOW_METHOD, method)
      || tf_ledger_follow_is_due (ledger))
    return TRUE;
  g_autoptr (TfPassages) found = work_out (ledger, &run, &params, TRUE, NULL, error);
  if (found == NULL)
    return FALSE;
  g_auto (GStrv) ids = tf_follow_content_ids (run.all, found, method);
  g_autoptr (sqlite3_stmt) query = tf_query (ledger, error, STORED_SQL, "");
  int more = -1, wrong = 0;
  while (query != NULL && (more = tf_query_step (ledger, query, error)) > 0)
    wrong += !is_as_stored (&run, found, ids, query);
  if (wrong > 0)
    tf_notes_add (findings, "check-passages", "si", ledger->path, wrong);
  return more == 0;
}
