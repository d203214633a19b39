/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <errno.h>
#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>
#include <glib/gstdio.h>

#include "tf-constants.h"
#include "tf-export-private.h"
#include "tf-frame-write.h"
#include "tf-stamp.h"
#include "tf-study-again.h"

/* Stamps of a study's picks as FITS files. */

#define MARGIN_DEG 2.0

void
tf_stamps_sum_clear (TfStampsSum *sum)
{
  g_clear_pointer (&sum->failed, g_ptr_array_unref);
}

/* -- one file ---------------------------------------------------------------------------------- */

static void
take (TfHeader *header, const char *keyword, char *text)
{
  if (text != NULL && *text != '\0')
    {
      g_autofree char *ascii = g_str_to_ascii (text, "C");
      tf_header_set (header, keyword, ascii);
    }
  g_free (text);
}

static void
set_grid (TfHeader *header, const TfStamp *s)
{
  tf_header_set_number (header, "WCSAXES", 2);
  tf_header_set (header, "CTYPE1", "CRLN-CEA");
  tf_header_set (header, "CTYPE2", "CRLT-CEA");
  tf_header_set (header, "CUNIT1", "deg");
  tf_header_set (header, "CUNIT2", "deg");
  tf_header_set_number (header, "CRPIX1", 0.5 * (s->width + 1.0));
  tf_header_set_number (header, "CRPIX2", 0.5 - s->first_row); /* the equator */
  tf_header_set_number (header, "CRVAL1", s->centre_deg);
  tf_header_set_number (header, "CRVAL2", 0);
  tf_header_set_number (header, "CDELT1", s->step_deg);
  tf_header_set_number (header, "CDELT2", s->step_deg);
  tf_header_set_number (header, "PV2_1", 1);
}

static void
set_frame (TfHeader *header, const TfFrame *frame)
{
  const TfFrameInfo *info = tf_frame_get_info (frame);
  const TfGeometry *g = tf_frame_get_geometry (frame);
  if (tf_time_is_known (info->time))
    {
      char *iso = tf_time_dup_iso (info->time, 3);
      iso[strlen (iso) - 1] = '\0'; /* a FITS time ends without the Z */
      tf_header_set (header, "DATE-AVG", iso);
      take (header, "DATE-OBS", iso);
      tf_header_set (header, "TIMESYS", "UTC");
    }
  tf_header_set_number (header, "RSUN_REF", g->radius_mm * 1e6);
  tf_header_set (header, "INSTRUME", info->instrument);
  if (info->simulated)
    tf_header_set (header, "SIMULATD", "T");
  if (tf_geometry_is_map (g))
    return;
  tf_header_set_number (header, "DSUN_OBS", g->observer.distance_m);
  tf_header_set_number (header, "HGLN_OBS", g->observer.stonyhurst_lon_deg);
  tf_header_set_number (header, "HGLT_OBS", g->observer.b0_deg);
  tf_header_set_number (header, "CRLN_OBS", g->observer.carrington_lon_deg);
}

static TfHeader *
make_header (const TfStamp *stamp, const TfFrame *frame, const TfRow *row)
{
  TfHeader *header = tf_header_new ();
  tf_header_set (header, "BUNIT", "Gauss");
  tf_header_set (header, "CONTENT", "radial magnetic field, flux conserved, equal-area cells");
  set_grid (header, stamp);
  set_frame (header, frame);
  tf_header_set (header, "CREATOR", "Tiltfield " TF_VERSION);
  take (header, "REGION", g_strdup (row->region));
  take (header, "PASSAGE", g_strdup (row->passage));
  take (header, "MARK", g_strdup (row->mark_id));
  take (header, "PERSON", g_strdup (row->person));
  take (header, "ORIGFILE", g_path_get_basename (row->frame_path));
  take (header, "ORIGSUM", g_strdup (row->frame_checksum));
  tf_header_set_number (header, "FLUXPOS", stamp->flux_mx[0]);
  tf_header_set_number (header, "FLUXNEG", stamp->flux_mx[1]);
  return header;
}

static char *
dup_name (const TfRow *row)
{
  g_autofree char *id = g_strndup (row->mark_id, 12);
  g_autofree char *who = *row->region != '\0' ? g_strdup (row->region) : g_strconcat ("hint-", id, NULL);
  g_autofree char *iso = tf_time_dup_iso (row->measure.time, 0);
  g_autoptr (GString) when = g_string_new (NULL);
  for (const char *p = iso != NULL ? iso : "0000-00-00T00:00"; *p != '\0' && when->len < 13; p++)
    if (g_ascii_isalnum (*p))
      g_string_append_c (when, *p);
  g_strdelimit (who, "/\\:* ", '_');
  return g_strdup_printf ("%s-%s.fits", who, when->str);
}

/* NULL, or (transfer full) why there is no stamp. */
static char *
write_one (const char *folder, TfFrame *frame, const TfRow *row)
{
  static const TfFrameWrite how = { .bitpix = -32, .no_date = TRUE };
  TfMeasureParams params;
  TfCorrection correction;
  g_auto (TfStamp) stamp = { 0 };
  g_autoptr (GError) error = NULL;
  g_autofree char *name = dup_name (row), *path = g_build_filename (folder, name, NULL);
  if (!tf_measure_read_method (row->method, &params, &correction))
    return g_strdup_printf (_ ("%s: it was measured by a method that this program does not know"), name);
  g_autoptr (TfFrame) seen = tf_frame_corrected (frame, &correction, NULL);
  if (seen == NULL
      || !tf_stamp_cut (&stamp, seen, row->outline, (guint)params.law, params.mu_min, MARGIN_DEG))
    return g_strdup_printf (_ ("%s: nothing of its outline lies on the frame"), name);
  g_autoptr (TfHeader) header = make_header (&stamp, seen, row);
  if (tf_frame_write (path, header, stamp.field, (guint)stamp.width, (guint)stamp.height, &how, &error))
    return NULL;
  return g_strdup (error->message);
}

/* -- all of them ------------------------------------------------------------------------------- */

static int
compare_frames (gconstpointer a, gconstpointer b)
{
  const TfRow *p = *(TfRow *const *)a, *q = *(TfRow *const *)b;
  return p->frame != q->frame ? (p->frame > q->frame) - (p->frame < q->frame)
                              : (p->mark > q->mark) - (p->mark < q->mark);
}

/* The picks with their outlines, those of one frame together. */
static GPtrArray *
read_picks (TfLedger *ledger, const TfStudy *study, TfStampsSum *sum, GError **error)
{
  const TfStretch all = { NAN, NAN, NAN, NAN };
  g_autoptr (TfStudyTaken) taken = tf_study_take (study, ledger, error);
  if (taken == NULL)
    return NULL;
  g_autoptr (TfFindings) findings
      = tf_study_again (taken, study, &all, TF_FINDINGS_QUICK, NULL, NULL, NULL);
  g_autoptr (GPtrArray) picks = g_ptr_array_new_with_free_func ((GDestroyNotify)tf_row_free);
  for (guint k = 0; k < tf_sample_get_n (findings->sample); k++)
    {
      gint64 mark = findings->marks[k]; /* of a hint negative; 0: in no frame here */
      TfRow *whole = mark != 0 ? tf_ledger_row (ledger, ABS (mark), mark < 0, error) : NULL;
      sum->n_outside += mark == 0;
      if (whole != NULL)
        g_ptr_array_add (picks, whole);
      else if (mark != 0)
        return NULL;
    }
  g_ptr_array_sort (picks, compare_frames);
  return g_steal_pointer (&picks);
}

/* The frame as it was read; NULL with a sentence when its file is gone or another. */
static TfFrame *
open_frame (TfLedger *ledger, gint64 id, char **why)
{
  g_autoptr (GError) error = NULL;
  g_autoptr (TfFrameRow) its = tf_ledger_frame (ledger, id, &error);
  g_autofree char *sum = its != NULL ? tf_frame_file_checksum (its->path, NULL, &error) : NULL;
  if (sum != NULL && strcmp (sum, its->checksum) != 0)
    {
      *why = g_strdup_printf (_ ("%s: it is not the file that was measured; fill the ledger from where that one is"), its->path);
      return NULL;
    }
  const TfFrameSpec spec = its != NULL ? (TfFrameSpec){ its->hdu, its->plane } : (TfFrameSpec){ 0 };
  TfFrame *frame = sum != NULL ? tf_frame_open (its->path, &spec, NULL, &error) : NULL;
  if (frame == NULL)
    *why = g_strdup (error->message);
  return frame;
}

/* The stamps of one frame, from @first on; returns how many picks it has. */
static guint
write_frame (const char *folder, TfLedger *ledger, const GPtrArray *picks, guint first,
             TfStampsSum *sum)
{
  gint64 id = ((TfRow *)g_ptr_array_index (picks, first))->frame;
  char *why = NULL;
  g_autoptr (TfFrame) frame = open_frame (ledger, id, &why);
  guint k = first;
  if (why != NULL)
    g_ptr_array_add (sum->failed, why);
  for (; k < picks->len && ((TfRow *)g_ptr_array_index (picks, k))->frame == id; k++)
    {
      if (frame == NULL)
        continue;
      char *wrong = write_one (folder, frame, g_ptr_array_index (picks, k));
      if (wrong != NULL)
        g_ptr_array_add (sum->failed, wrong);
      sum->n_written += wrong == NULL;
    }
  return k - first;
}

gboolean
tf_stamps_write (const char *folder, TfLedger *ledger, const TfStudy *study, TfStampsSum *sum,
                 GError **error)
{
  g_return_val_if_fail (folder != NULL && ledger != NULL && study != NULL && sum != NULL, FALSE);
  *sum = (TfStampsSum){ .failed = g_ptr_array_new_with_free_func (g_free) };
  g_autoptr (GPtrArray) picks = read_picks (ledger, study, sum, error);
  if (picks == NULL)
    return FALSE;
  if (g_mkdir_with_parents (folder, 0777) != 0)
    {
      tf_export_set_error (error, folder, g_strerror (errno));
      return FALSE;
    }
  for (guint k = 0; k < picks->len;)
    k += write_frame (folder, ledger, picks, k, sum);
  return TRUE;
}
