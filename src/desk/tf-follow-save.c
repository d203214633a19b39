/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The passage in hand as files: strip and charts for print, the series as a table, the looks as a
 * film. What is saved is taken once in the main thread; the rest is a thread's. */

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-follow.h"
#include "tf-export-series.h"
#include "tf-figure.h"
#include "tf-follow-facts.h"
#include "tf-follow-film.h"
#include "tf-followed-private.h"
#include "tf-series-view.h"
#include "tf-session-private.h"

static const double page_mm = 170, look_mm = 31, chart_mm = 125, text_mm = 2.3, points_a_mm = 72 / 25.4;
enum
{
  MOST_LOOKS = 30 /* on a page: six rows of five */
};

/* TfKept: the passage as it was when it was to be saved. */
typedef struct
{
  TfPassageContent *content;
  GArray *looks; /* TfStripLook, copies */
  TfSeriesChart chart;
  char *title, *under;
  double speed;
  guint every; /* looks of the strip: each first of so many */
  TfSaving *saving;
} TfKept;

static void
kept_free (gpointer data)
{
  TfKept *kept = data;
  tf_passage_content_unref (kept->content);
  g_array_unref (kept->looks);
  g_free (kept->title);
  g_free (kept->under);
  g_free (kept);
}

char *
tf_follow_dup_file_name (TfFollowed *followed, const char *what)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  g_autofree char *name = content != NULL ? tf_passage_dup_name (content->passage)
                                          : g_strdup (_ ("passage"));
  g_strdelimit (name, " /", '-');
  const char *film = tf_follow_film_has_encoder (".webm")  ? ".webm"
                     : tf_follow_film_has_encoder (".gif") ? ".gif"
                                                           : "-film";
  const char *ending = strcmp (what, "figure") == 0   ? ".pdf"
                       : strcmp (what, "series") == 0 ? ".csv"
                                                      : film;
  return g_strconcat (name, ending, NULL);
}

static guint
count_waiting (GListModel *looks)
{
  guint waiting = 0, n = g_list_model_get_n_items (looks);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item = g_list_model_get_item (looks, k);
      waiting += tf_look_item_is_waiting (item);
    }
  return waiting;
}

/* Every so many of them. */
static GArray *
copy_looks (GListModel *looks, guint every)
{
  GArray *all = g_array_new (FALSE, FALSE, sizeof (TfStripLook));
  g_array_set_clear_func (all, (GDestroyNotify)tf_look_copy_clear);
  guint n = g_list_model_get_n_items (looks);
  for (guint k = 0; k < n; k += every)
    {
      TfStripLook look;
      g_autoptr (TfLookItem) item = g_list_model_get_item (looks, k);
      tf_look_item_copy_look (item, &look);
      g_array_append_val (all, look);
    }
  return all;
}

/* -- words ----------------------------------------------------------------------------------- */

static char *
dup_title (TfFollowed *followed)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  g_autofree char *name = tf_passage_dup_name (content->passage),
                  *first = tf_time_dup_iso (content->passage->first_time, 0),
                  *last = tf_time_dup_iso (content->passage->last_time, 0);
  const TfRow *row = g_ptr_array_index (content->rows, 0);
  return g_strdup_printf ("%s · %s – %s · %s%s", name, first, last, row->instrument,
                          row->simulated ? _ (" · simulated") : "");
}

static char *
dup_under (TfFollowed *followed, guint every)
{
  int diamond;
  g_autofree char *verdict = tf_follow_dup_verdict (followed, &diamond);
  GString *text = g_string_new (NULL);
  g_string_append_printf (text, _ ("field ± %.0f G · looks %.1f° high, north up, west right · %s"),
                          followed->range, 2 * tf_followed_get_content (followed)->half_deg, verdict);
  if (every > 1)
    g_string_append_printf (text, _ (" · one look in %u"), every);
  return g_string_free (text, FALSE);
}

/* -- strip and charts for print -------------------------------------------------------------- */

static double
draw_strip (cairo_t *cr, const TfKept *kept, const TfChartStyle *style, TfArea area)
{
  return tf_strip_draw (cr, (const TfStripLook *)(gconstpointer)kept->looks->data,
                        kept->looks->len, style, area, look_mm * points_a_mm,
                        (double)TF_LOOK_WIDTH / TF_LOOK_HEIGHT);
}

static void
draw_figure (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  const TfKept *kept = data;
  double head = style->text_pt * 3.4;
  tf_chart_text (cr, style, area.x, area.y, 0, 0, style->ink, kept->title);
  tf_chart_text (cr, style, area.x, area.y + style->text_pt * 1.4, 0, 0, style->faint, kept->under);
  double used = draw_strip (cr, kept, style,
                            (TfArea){ area.x, area.y + head, area.width, area.height });
  if (tf_saving_is_stopped (kept->saving))
    return;
  tf_series_chart_draw (
      cr, &kept->chart, style,
      (TfArea){ area.x, area.y + head + used, area.width, area.height - head - used });
}

static char *
save_figure (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  TfKept *kept = job;
  TfChartStyle style = tf_chart_style (FALSE, FALSE, text_mm * points_a_mm);
  double strip = draw_strip (NULL, kept, &style, (TfArea){ 0, 0, page_mm * points_a_mm, 0 })
                 / points_a_mm;
  TfFigurePage page = { .width_mm = page_mm,
                        .height_mm = strip + chart_mm + text_mm * 4,
                        .text_mm = text_mm,
                        .title = kept->title,
                        .subject = kept->under,
                        .cancel = tf_saving_get_cancel (saving) };
  kept->saving = saving;
  return tf_figure_write (path, &page, draw_figure, kept, error)
             ? g_strdup_printf (_ ("Saved: %s"), path)
             : NULL;
}

/* -- the series as a table, as tiltfield-run export writes it --------------------------------- */

static char *
save_series (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const TfKept *kept = job;
  g_autoptr (GPtrArray) series = g_ptr_array_new ();
  g_ptr_array_add (series, kept->content->series);
  if (!tf_export_series (path, series, kept->content->study, kept->title, error))
    return NULL;
  return g_strdup_printf (ngettext ("Saved: %s, %u row", "Saved: %s, %u rows", kept->content->rows->len),
                          path, kept->content->rows->len);
}

static char *
save_film (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const TfKept *kept = job;
  g_autofree char *name = tf_passage_dup_name (kept->content->passage);
  const TfRow *first = g_ptr_array_index (kept->content->rows, 0);
  g_autofree char *title = g_strconcat (name, first->simulated ? _ (" · simulated") : "", NULL);
  const TfFilm film = { .looks = (const TfStripLook *)(gconstpointer)kept->looks->data,
                        .n = kept->looks->len,
                        .title = title,
                        .speed = kept->speed };
  return tf_follow_film_write (&film, path, saving, error);
}

/* -- which ----------------------------------------------------------------------------------- */

static TfKept *
keep (TfFollowed *followed, gboolean page)
{
  GListModel *looks = tf_followed_get_looks (followed);
  guint n = g_list_model_get_n_items (looks);
  TfKept *kept = g_new0 (TfKept, 1);
  kept->every = page ? (n + MOST_LOOKS - 1) / MOST_LOOKS : 1;
  kept->content = tf_passage_content_ref ((TfPassageContent *)tf_followed_get_content (followed));
  kept->looks = copy_looks (looks, MAX (kept->every, 1));
  kept->chart = tf_followed_chart (followed); /* its points are the content's */
  kept->chart.now = -1;
  kept->title = dup_title (followed);
  kept->under = dup_under (followed, kept->every);
  kept->speed = tf_followed_get_speed (followed);
  return kept;
}

void
tf_follow_save (TfFollowed *followed, const char *what, const char *path)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  gboolean table = strcmp (what, "series") == 0, page = strcmp (what, "figure") == 0;
  guint waiting = table ? 0 : count_waiting (tf_followed_get_looks (followed));
  g_autofree char *wait = g_strdup_printf (
      ngettext ("%u look is still being read: save again in a moment.",
                "%u looks are still being read: save again in a moment.", waiting),
      waiting);
  if (content == NULL || content->rows->len == 0)
    tf_session_say (followed->session, _ ("No passage is chosen: there is nothing to save."));
  else if (waiting > 0)
    tf_session_say (followed->session, wait);
  else
    tf_save_as (followed->session, path, table ? save_series : page ? save_figure : save_film,
                keep (followed, page), kept_free);
}
