/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The passage in hand as files: strip and charts for print, the series as a table, the looks as a
 * film. */

#include <errno.h>
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>

#include "tf-actions-follow.h"
#include "tf-export.h"
#include "tf-figure.h"
#include "tf-follow-facts.h"
#include "tf-followed-private.h"
#include "tf-series-view.h"
#include "tf-strip.h"

static const double page_mm = 170, look_mm = 31, chart_mm = 125, text_mm = 2.3, points_a_mm = 72 / 25.4;
static const int film_width = 640, film_height = 440;
static const double film_text = 18;

char *
tf_follow_dup_file_name (TfFollowed *followed, const char *what)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  g_autofree char *name = content != NULL ? tf_passage_dup_name (content->passage)
                                          : g_strdup (_ ("passage"));
  g_strdelimit (name, " /", '-');
  const char *ending = strcmp (what, "figure") == 0   ? ".pdf"
                       : strcmp (what, "series") == 0 ? ".csv"
                                                      : "-film";
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

static GArray *
looks_of (GListModel *looks)
{
  GArray *all = g_array_new (FALSE, FALSE, sizeof (TfStripLook));
  guint n = g_list_model_get_n_items (looks);
  for (guint k = 0; k < n; k++)
    {
      g_autoptr (TfLookItem) item = g_list_model_get_item (looks, k);
      g_array_append_vals (all, tf_look_item_get_look (item), 1); /* the list keeps what it names */
    }
  return all;
}

/* -- strip and charts for print -------------------------------------------------------------- */

typedef struct
{
  TfFollowed *followed;
  GArray *looks;
  char *title, *under;
} Figure;

static double
strip_height (GArray *looks, const TfChartStyle *style, double width)
{
  return tf_strip_draw (NULL, (const TfStripLook *)(gconstpointer)looks->data, looks->len, style,
                        (TfArea){ 0, 0, width, 0 }, look_mm * points_a_mm,
                        (double)TF_LOOK_WIDTH / TF_LOOK_HEIGHT);
}

static void
draw_figure (cairo_t *cr, const TfChartStyle *style, TfArea area, gpointer data)
{
  const Figure *figure = data;
  TfSeriesChart chart = tf_followed_chart (figure->followed);
  double head = style->text_pt * 3.4;
  tf_chart_text (cr, style, area.x, area.y, 0, 0, style->ink, figure->title);
  tf_chart_text (cr, style, area.x, area.y + style->text_pt * 1.4, 0, 0, style->faint, figure->under);
  TfArea strip = { area.x, area.y + head, area.width, area.height };
  double used = tf_strip_draw (cr, (const TfStripLook *)(gconstpointer)figure->looks->data,
                               figure->looks->len, style, strip, look_mm * points_a_mm,
                               (double)TF_LOOK_WIDTH / TF_LOOK_HEIGHT);
  TfArea rest = { area.x, strip.y + used, area.width, area.height - head - used };
  chart.now = -1;
  tf_series_chart_draw (cr, &chart, style, rest);
}

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
dup_under (TfFollowed *followed)
{
  int diamond;
  g_autofree char *verdict = tf_follow_dup_verdict (followed, &diamond);
  return g_strdup_printf (_ ("field ± %.0f G · looks %.1f° high, north up, west right · %s"),
                          followed->range, 2 * tf_followed_get_content (followed)->half_deg, verdict);
}

static char *
save_figure (TfFollowed *followed, const char *path)
{
  g_autoptr (GArray) looks = looks_of (tf_followed_get_looks (followed));
  g_autofree char *title = dup_title (followed), *under = dup_under (followed);
  Figure figure = { followed, looks, title, under };
  TfChartStyle style = tf_chart_style (FALSE, FALSE, text_mm * points_a_mm);
  double strip = strip_height (looks, &style, page_mm * points_a_mm) / points_a_mm;
  TfFigurePage page = { .width_mm = page_mm,
                        .height_mm = strip + chart_mm + text_mm * 4,
                        .text_mm = text_mm,
                        .title = title,
                        .subject = under };
  g_autoptr (GError) error = NULL;
  if (!tf_figure_write (path, &page, draw_figure, &figure, &error))
    return g_strdup (error->message);
  return g_strdup_printf (_ ("Saved: %s"), path);
}

/* -- the series as a table ------------------------------------------------------------------- */

static char *
save_series (TfFollowed *followed, const char *path)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GArray) rows = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  for (guint k = 0; k < content->rows->len; k++)
    {
      TfExportRow out = { .row = g_ptr_array_index (content->rows, k),
                          .verdict = content->verdicts[k] };
      tf_study_row (out.row, &out.sample);
      g_array_append_val (rows, out);
    }
  g_autoptr (GError) error = NULL;
  g_autofree char *title = dup_title (followed);
  if (!tf_export_write (path, rows, study, title, &error))
    return g_strdup (error->message);
  return g_strdup_printf (_ ("Saved: %s"), path);
}

/* -- the film -------------------------------------------------------------------------------- */

static cairo_surface_t *
film_frame (const TfStripLook *look, const char *title)
{
  cairo_surface_t *surface
      = cairo_image_surface_create (CAIRO_FORMAT_RGB24, film_width, film_height);
  TfChartStyle style = tf_chart_style (TRUE, FALSE, film_text);
  cairo_t *cr = cairo_create (surface);
  tf_chart_set (cr, style.ground);
  cairo_paint (cr);
  tf_strip_draw_look (cr, look, &style, (TfArea){ 0, 0, film_width, film_height - film_text * 0.6 },
                      TRUE);
  tf_chart_text (cr, &style, 8, film_height - 4, 0, 1, style.faint, title);
  cairo_destroy (cr);
  return surface;
}

static char *
write_frames (TfFollowed *followed, const char *folder, guint *written)
{
  g_autoptr (GArray) looks = looks_of (tf_followed_get_looks (followed));
  g_autofree char *name = tf_passage_dup_name (tf_followed_get_content (followed)->passage);
  *written = 0;
  if (g_mkdir_with_parents (folder, 0777) != 0)
    return g_strdup_printf (_ ("The folder %s cannot be made: %s."), folder, g_strerror (errno));
  for (guint k = 0; k < looks->len; k++)
    {
      const TfStripLook *look = &g_array_index (looks, TfStripLook, k);
      g_autofree char *file = g_strdup_printf ("%s/%04u.png", folder, k + 1);
      cairo_surface_t *surface = film_frame (look, name);
      cairo_status_t status = cairo_surface_write_to_png (surface, file);
      cairo_surface_destroy (surface);
      if (status != CAIRO_STATUS_SUCCESS)
        return g_strdup_printf (_ ("%s cannot be written: %s."), file,
                                cairo_status_to_string (status));
      ++*written;
    }
  return NULL;
}

static void
remove_frames (const char *folder, guint n)
{
  for (guint k = 1; k <= n; k++)
    {
      g_autofree char *file = g_strdup_printf ("%s/%04u.png", folder, k);
      g_unlink (file);
    }
  g_rmdir (folder);
}

typedef struct
{
  TfWindow *window;
  char *path, *folder;
  guint n;
} Film;

static void
encoded (GObject *source, GAsyncResult *result, gpointer data)
{
  Film *film = data;
  g_autoptr (GError) error = NULL;
  gboolean done = g_subprocess_wait_check_finish (G_SUBPROCESS (source), result, &error);
  g_autofree char *text
      = done ? g_strdup_printf (_ ("Saved: %s"), film->path)
             : g_strdup_printf (_ ("The encoder failed (%s). Save the film as a folder of PNG instead."),
                                error->message);
  tf_window_say (film->window, text);
  remove_frames (film->folder, film->n);
  g_object_unref (film->window);
  g_free (film->path);
  g_free (film->folder);
  g_free (film);
}

static GSubprocess *
start_encoder (TfFollowed *followed, const char *folder, const char *path, GError **error)
{
  g_autofree char *rate = g_strdup_printf ("%d", (int)fmax (1, lround (followed->speed))),
                  *delay = g_strdup_printf ("%d", (int)lround (100 / followed->speed)),
                  *frames = g_strdup_printf ("%s/%%04d.png", folder),
                  *wild = g_strdup_printf ("%s/*.png", folder);
  g_autofree char *ffmpeg = g_find_program_in_path ("ffmpeg"),
                  *convert = g_find_program_in_path ("convert");
  GSubprocessFlags quiet
      = G_SUBPROCESS_FLAGS_STDOUT_SILENCE | G_SUBPROCESS_FLAGS_STDERR_SILENCE;
  if (ffmpeg != NULL)
    return g_subprocess_new (quiet, error, ffmpeg, "-y", "-framerate", rate, "-i", frames, path, NULL);
  if (convert != NULL && g_str_has_suffix (path, ".gif"))
    return g_subprocess_new (quiet, error, convert, "-delay", delay, "-loop", "0", wild, path, NULL);
  g_set_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND,
               _ ("No encoder is installed for %s (ffmpeg, or for .gif ImageMagick): name a folder "
                  "without an ending, and numbered PNG are put into it."),
               path);
  return NULL;
}

static char *
save_film (TfWindow *window, TfFollowed *followed, const char *path)
{
  gboolean encode = g_str_has_suffix (path, ".webm") || g_str_has_suffix (path, ".gif");
  g_autoptr (GError) error = NULL;
  guint n;
  g_autofree char *folder
      = encode ? g_dir_make_tmp ("tiltfield-film-XXXXXX", &error) : g_strdup (path);
  if (folder == NULL)
    return g_strdup (error->message);
  char *problem = write_frames (followed, folder, &n);
  if (problem != NULL || !encode)
    return problem != NULL
               ? problem
               : g_strdup_printf (ngettext ("Saved: %u picture in %s", "Saved: %u pictures in %s", n),
                                  n, folder);
  g_autoptr (GSubprocess) encoder = start_encoder (followed, folder, path, &error);
  if (encoder == NULL)
    {
      remove_frames (folder, n);
      return g_strdup (error->message);
    }
  Film *film = g_new0 (Film, 1);
  *film = (Film){ g_object_ref (window), g_strdup (path), g_steal_pointer (&folder), n };
  g_subprocess_wait_check_async (encoder, NULL, encoded, film);
  return NULL;
}

char *
tf_follow_save (TfWindow *window, TfFollowed *followed, const char *what, const char *path)
{
  const TfPassageContent *content = tf_followed_get_content (followed);
  if (content == NULL || content->rows->len == 0)
    return g_strdup (_ ("No passage is chosen: there is nothing to save."));
  guint waiting = count_waiting (tf_followed_get_looks (followed));
  if (waiting > 0 && strcmp (what, "series") != 0)
    return g_strdup_printf (
        ngettext ("%u look is still being read: save again in a moment.",
                  "%u looks are still being read: save again in a moment.", waiting),
        waiting);
  if (strcmp (what, "figure") == 0)
    return save_figure (followed, path);
  if (strcmp (what, "series") == 0)
    return save_series (followed, path);
  return save_film (window, followed, path);
}
