/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-follow-film.h"

#include <errno.h>
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>

static const int width = 640, height = 440;
static const double text_size = 18;
enum
{
  LOOK_US = 40 * 1000, /* between two looks at an encoder at work */
  MOST_ARGUMENTS = 24
};

/* -- numbered pictures ----------------------------------------------------------------------- */

static cairo_status_t
write_picture (const TfFilm *film, guint at, const char *file)
{
  cairo_surface_t *surface = cairo_image_surface_create (CAIRO_FORMAT_RGB24, width, height);
  TfChartStyle style = tf_chart_style (TRUE, FALSE, text_size);
  cairo_t *cr = cairo_create (surface);
  tf_chart_set (cr, style.ground);
  cairo_paint (cr);
  tf_strip_draw_look (cr, &film->looks[at], &style,
                      (TfArea){ 0, 0, width, height - text_size * 1.4 }, TRUE);
  tf_chart_text (cr, &style, 8, height - 4, 0, 1, style.faint, film->title);
  cairo_destroy (cr);
  cairo_status_t status = cairo_surface_write_to_png (surface, file);
  cairo_surface_destroy (surface);
  return status;
}

static char *
dup_picture_path (const char *folder, guint at)
{
  return g_strdup_printf ("%s/%04u.png", folder, at + 1);
}

static void
remove_pictures (const char *folder, guint n)
{
  for (guint k = 0; k < n; k++)
    {
      g_autofree char *file = dup_picture_path (folder, k);
      g_unlink (file);
    }
  g_rmdir (folder); /* stays when something else is in it */
}

static void
fail_stopped (GError **error, const char *path)
{
  g_set_error (error, G_IO_ERROR, G_IO_ERROR_CANCELLED, _ ("%s was not written: cancelled"), path);
}

static gboolean
write_pictures (const TfFilm *film, const char *folder, TfSaving *saving, GError **error)
{
  for (guint k = 0; k < film->n; k++)
    {
      g_autofree char *file = dup_picture_path (folder, k);
      cairo_status_t status = write_picture (film, k, file);
      gboolean stopped = tf_saving_is_stopped (saving);
      tf_saving_tell (saving, k + 1, film->n);
      if (status == CAIRO_STATUS_SUCCESS && !stopped)
        continue;
      remove_pictures (folder, k + 1);
      if (stopped)
        fail_stopped (error, folder);
      else
        g_set_error (error, G_IO_ERROR, G_IO_ERROR_FAILED, _ ("%s cannot be written: %s."), file,
                     cairo_status_to_string (status));
      return FALSE;
    }
  return TRUE;
}

/* -- encoders: what is installed does it ------------------------------------------------------ */

/* RATE, PAUSE (hundredths of a second), FRAMES (a pattern for printf), WILD (one for the shell's
 * kind) and OUT are filled in. */
typedef struct
{
  const char *ending, *program, *words;
} Encoder;
static const Encoder encoders[] = {
  { ".webm", "ffmpeg", "-y -framerate RATE -i FRAMES -pix_fmt yuv420p OUT" },
  { ".webm", "gst-launch-1.0",
    "-q multifilesrc location=FRAMES index=1 caps=image/png,framerate=RATE/1 ! pngdec ! videoconvert ! "
    "vp8enc ! webmmux ! filesink location=OUT" },
  { ".gif", "ffmpeg",
    "-y -framerate RATE -i FRAMES -filter_complex split[a][b];[a]palettegen[p];[b][p]paletteuse OUT" },
  { ".gif", "convert", "-delay PAUSE -loop 0 WILD OUT" },
};

static const Encoder *
find_encoder (const char *path)
{
  for (guint k = 0; k < G_N_ELEMENTS (encoders); k++)
    {
      g_autofree char *program = g_find_program_in_path (encoders[k].program);
      if (g_str_has_suffix (path, encoders[k].ending) && program != NULL)
        return &encoders[k];
    }
  return NULL;
}

gboolean
tf_follow_film_has_encoder (const char *ending)
{
  return find_encoder (ending) != NULL;
}

static gboolean
has_ending (const char *path)
{
  for (guint k = 0; k < G_N_ELEMENTS (encoders); k++)
    if (g_str_has_suffix (path, encoders[k].ending))
      return TRUE;
  return FALSE;
}

/* (transfer full): one word with its part filled in */
static char *
fill_in (const char *word, const char *folder, double speed, const char *out)
{
  g_autofree char *rate = g_strdup_printf ("%d", (int)fmax (1, lround (speed))),
                  *pause = g_strdup_printf ("%d", (int)lround (100 / speed)),
                  *frames = g_strdup_printf ("%s/%%04d.png", folder),
                  *wild = g_strdup_printf ("%s/*.png", folder);
  const char *const parts[][2] = {
    { "RATE", rate }, { "PAUSE", pause }, { "FRAMES", frames }, { "WILD", wild }, { "OUT", out }
  };
  for (guint k = 0; k < G_N_ELEMENTS (parts); k++)
    {
      const char *at = strstr (word, parts[k][0]);
      if (at != NULL)
        return g_strdup_printf ("%.*s%s%s", (int)(at - word), word, parts[k][1],
                                at + strlen (parts[k][0]));
    }
  return g_strdup (word);
}

static GSubprocess *
start (const Encoder *encoder, const char *folder, double speed, const char *out, GError **error)
{
  g_auto (GStrv) words = g_strsplit (encoder->words, " ", MOST_ARGUMENTS);
  g_autoptr (GPtrArray) call = g_ptr_array_new_with_free_func (g_free);
  g_ptr_array_add (call, g_find_program_in_path (encoder->program));
  for (guint k = 0; words[k] != NULL; k++)
    g_ptr_array_add (call, fill_in (words[k], folder, speed, out));
  g_ptr_array_add (call, NULL);
  return g_subprocess_newv ((const char *const *)call->pdata,
                            G_SUBPROCESS_FLAGS_STDOUT_SILENCE | G_SUBPROCESS_FLAGS_STDERR_SILENCE,
                            error);
}

static gpointer
wait_in_thread (gpointer data)
{
  GSubprocess *encoder = data;
  return GINT_TO_POINTER (g_subprocess_wait_check (encoder, NULL, NULL) ? 1 : 2);
}

/* Waits for it, and ends it when a person stops the saving. */
static gboolean
wait_for (GSubprocess *encoder, TfSaving *saving)
{
  GThread *waiting = g_thread_new ("encoder", wait_in_thread, encoder);
  while (g_subprocess_get_identifier (encoder) != NULL)
    {
      if (tf_saving_is_stopped (saving))
        g_subprocess_force_exit (encoder);
      g_usleep (LOOK_US);
    }
  return GPOINTER_TO_INT (g_thread_join (waiting)) == 1;
}

static gboolean
encode (const Encoder *encoder, const TfFilm *film, const char *folder, const char *path,
        TfSaving *saving, GError **error)
{
  g_autofree char *out = g_strconcat (folder, "/film", encoder->ending, NULL);
  g_autoptr (GFile) from = g_file_new_for_path (out), to = g_file_new_for_path (path);
  g_autoptr (GSubprocess) process = start (encoder, folder, film->speed, out, error);
  gboolean good = process != NULL && wait_for (process, saving);
  if (tf_saving_is_stopped (saving))
    {
      g_clear_error (error);
      fail_stopped (error, path);
      good = FALSE;
    }
  else if (process != NULL && !good)
    g_set_error (error, G_IO_ERROR, G_IO_ERROR_FAILED,
                 _ ("The encoder %s failed. Name a folder without an ending, and numbered PNG are put "
                    "into it."),
                 encoder->program);
  good = good && g_file_move (from, to, G_FILE_COPY_OVERWRITE, NULL, NULL, NULL, error);
  g_unlink (out);
  return good;
}

static char *
write_film (const TfFilm *film, const char *path, TfSaving *saving, GError **error)
{
  const Encoder *encoder = find_encoder (path);
  if (encoder == NULL)
    {
      g_set_error (error, G_IO_ERROR, G_IO_ERROR_NOT_FOUND,
                   _ ("No encoder is installed for %s (ffmpeg; else gst-launch-1.0 for .webm, ImageMagick "
                      "for .gif). Name a folder without an ending, and numbered PNG are put into it."),
                   path);
      return NULL;
    }
  g_autofree char *folder = g_dir_make_tmp ("tiltfield-film-XXXXXX", error);
  if (folder == NULL || !write_pictures (film, folder, saving, error))
    return NULL;
  gboolean good = encode (encoder, film, folder, path, saving, error);
  remove_pictures (folder, film->n);
  return good ? g_strdup_printf (_ ("Saved: %s"), path) : NULL;
}

char *
tf_follow_film_write (const TfFilm *film, const char *path, TfSaving *saving, GError **error)
{
  g_return_val_if_fail (film != NULL && path != NULL, NULL);
  if (has_ending (path))
    return write_film (film, path, saving, error);
  if (g_mkdir_with_parents (path, 0777) != 0)
    {
      g_set_error (error, G_IO_ERROR, g_io_error_from_errno (errno),
                   _ ("The folder %s cannot be made: %s."), path, g_strerror (errno));
      return NULL;
    }
  if (!write_pictures (film, path, saving, error))
    return NULL;
  return g_strdup_printf (ngettext ("Saved: %u picture in %s", "Saved: %u pictures in %s", film->n),
                          film->n, path);
}
