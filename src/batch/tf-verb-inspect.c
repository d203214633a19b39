/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>
#include <stdio.h>
#include <glib/gi18n-lib.h>

#include "tf-batch.h"
#include "tf-constants.h"
#include "tf-json.h"
#include "tf-number.h"
#include "tf-witness.h"

/* inspect: what a frame is. A frame refused is an answer; only a file that cannot be read is a failure. */

static void
build_observer (JsonBuilder *builder, const TfObserver *observer)
{
  json_builder_set_member_name (builder, "observer");
  json_builder_begin_object (builder);
  tf_json_number (builder, "distance_m", observer->distance_m);
  tf_json_number (builder, "b0_deg", observer->b0_deg);
  tf_json_number (builder, "stonyhurst_lon_deg", observer->stonyhurst_lon_deg);
  tf_json_number (builder, "carrington_lon_deg", observer->carrington_lon_deg);
  tf_json_string (builder, "source", tf_observer_source_name (observer->source));
  json_builder_end_object (builder);
}

/* @frame is NULL when only the header could be used. */
static void
build_noise (JsonBuilder *builder, const TfFrame *frame)
{
  guint n = 0;
  const TfNoiseRing *rings = frame != NULL ? tf_frame_get_noise (frame, &n) : NULL;
  gboolean map = frame != NULL && tf_geometry_is_map (tf_frame_get_geometry (frame));
  tf_json_number (builder, "noise_gauss", frame != NULL ? tf_frame_noise_at (frame, map ? 0.0 : 1.0) : NAN);
  json_builder_set_member_name (builder, "noise_rings");
  json_builder_begin_array (builder);
  for (guint k = 0; k < n; k++)
    tf_json_numbers (builder, NULL, (const double[]){ rings[k].mu, rings[k].gauss }, 2);
  json_builder_end_array (builder);
}

static void
build_geometry (JsonBuilder *builder, const TfFrameInfo *info)
{
  const TfGeometry *g = &info->geometry;
  gboolean known = g->projection != TF_PROJECTION_NONE;
  tf_json_number (builder, "radius_mm", known ? g->radius_mm : NAN);
  tf_json_number (builder, "radius_arcsec", known ? tf_geometry_radius_arcsec (g) : NAN);
  tf_json_number (builder, "scale_arcsec", known ? tf_geometry_scale_arcsec (g) : NAN);
  tf_json_number (builder, "north_angle_deg", known ? tf_geometry_north_angle (g) : NAN);
  tf_json_string (builder, "projection", known ? tf_projection_name (g->projection) : NULL);
}

/* What the orientation witness said of a frame and another of the call. */
typedef struct
{
  const char *against; /* NULL: no frame of the call can be held against it */
  TfTime time;         /* of that frame */
  TfOrientation answer;
  double score[4];
  TfNote *reason;
} Witness;

static void
build_witness (JsonBuilder *builder, const Witness *witness)
{
  json_builder_set_member_name (builder, "orientation");
  if (witness->against == NULL)
    {
      json_builder_add_null_value (builder);
      return;
    }
  json_builder_begin_object (builder);
  tf_json_string (builder, "against", witness->against);
  tf_json_string (builder, "answer", tf_orientation_name (witness->answer));
  tf_json_numbers (builder, "scores", witness->score, 4);
  json_builder_set_member_name (builder, "reason");
  tf_note_build_json (witness->reason, builder);
  json_builder_end_object (builder);
}

static void
build_info (JsonBuilder *builder, const char *path, int hdu, const TfFrameInfo *info, const TfFrame *frame,
            const Witness *witness)
{
  g_autofree char *time = tf_time_dup_iso (info->time, 3);
  json_builder_begin_object (builder);
  tf_json_string (builder, "file", path);
  tf_json_int (builder, "hdu", hdu);
  tf_json_int (builder, "width", info->geometry.width);
  tf_json_int (builder, "height", info->geometry.height);
  tf_json_string (builder, "kind", tf_kind_name (info->kind));
  tf_json_string (builder, "role", tf_role_name (info->role));
  tf_json_bool (builder, "ok", info->role == TF_ROLE_FIELD);
  json_builder_set_member_name (builder, "refusal");
  tf_note_build_json (info->refusal, builder);
  tf_json_string (builder, "time", time);
  tf_json_string (builder, "time_source", info->time_source);
  tf_json_number (builder, "time_span", info->time_span_s);
  build_observer (builder, &info->geometry.observer);
  tf_json_string (builder, "instrument", info->instrument);
  tf_json_null (builder, "scale");
  build_geometry (builder, info);
  tf_json_string (builder, "unit", info->unit);
  tf_json_string (builder, "field", tf_field_name (info->field));
  build_noise (builder, frame);
  json_builder_set_member_name (builder, "repairs");
  tf_notes_build_json (info->repairs, builder);
  json_builder_set_member_name (builder, "cautions");
  tf_notes_build_json (frame != NULL ? tf_frame_get_cautions (frame) : info->cautions, builder);
  build_witness (builder, witness);
  json_builder_end_object (builder);
}

static void
build_failure (JsonBuilder *builder, const char *path, const GError *error)
{
  json_builder_begin_object (builder);
  tf_json_string (builder, "file", path);
  tf_json_bool (builder, "ok", FALSE);
  json_builder_set_member_name (builder, "refusal");
  json_builder_begin_object (builder);
  tf_json_string (builder, "code", "unreadable");
  tf_json_string (builder, "text", error->message);
  json_builder_end_object (builder);
  json_builder_end_object (builder);
}

static void
print_notes (const char *heading, const TfNotes *notes)
{
  for (guint k = 0; k < tf_notes_get_n (notes); k++)
    {
      g_autofree char *text = tf_note_dup_text (tf_notes_get (notes, k), FALSE);
      printf ("  %s: %s\n", heading, text);
    }
}

static void
print_disk (const TfGeometry *g)
{
  const TfObserver *o = &g->observer;
  printf (_ ("  observer: B0 %+.3f°, Stonyhurst %+.3f°, Carrington %.3f°, %.4f au (%s)\n"), o->b0_deg, o->stonyhurst_lon_deg,
          o->carrington_lon_deg, o->distance_m / TF_AU_M, tf_observer_source_name (o->source));
  double north = tf_geometry_north_angle (g);
  printf (_ ("  disk: radius %.2f″ = %.1f pixels, %.4f″ a pixel, solar north %+.2f° from up\n"), tf_geometry_radius_arcsec (g),
          tf_geometry_disk_radius (g), tf_geometry_scale_arcsec (g), fabs (north) < 0.005 ? 0.0 : north);
}

static void
print_info (const char *path, const TfFrameInfo *info, const TfFrame *frame, const Witness *witness)
{
  const TfGeometry *g = &info->geometry;
  g_autofree char *time = tf_time_dup_iso (info->time, 0);
  printf ("%s\n", path);
  printf (_ ("  %s, %s, %u × %u pixels, %s\n"), tf_kind_name (info->kind), tf_role_name (info->role), g->width, g->height,
          info->instrument);
  printf (_ ("  time: %s (from %s)\n"), time != NULL ? time : _ ("unknown"), info->time_source);
  if (info->refusal != NULL)
    {
      g_autofree char *why = tf_note_dup_text (info->refusal, FALSE);
      printf (_ ("  refused: %s\n"), why);
    }
  if (g->projection == TF_PROJECTION_TAN)
    print_disk (g);
  if (frame != NULL)
    {
      gboolean map = tf_geometry_is_map (g);
      printf (_ ("  field: %s, unit %s; noise %.1f G %s\n"), tf_field_name (info->field),
              *info->unit != '\0' ? info->unit : _ ("not said"),
              tf_frame_noise_at (frame, map ? 0.0 : 1.0), map ? _ ("at the equator") : _ ("at disk centre"));
    }
  print_notes (_ ("repair"), info->repairs);
  print_notes (_ ("caution"), frame != NULL ? tf_frame_get_cautions (frame) : info->cautions);
  if (witness->against == NULL)
    return;
  g_autoptr (TfNote) note = tf_orientation_note (witness->answer, witness->reason, witness->time);
  g_autofree char *said = tf_note_dup_text (note, FALSE);
  printf (_ ("  orientation: %s\n"), said);
}

/* -- frames held against each other ---------------------------------------------------------- */

typedef struct
{
  char **paths;
  guint n;
  TfFrameInfo **infos; /* by their headers; NULL where there is none */
  const TfFrameSpec *spec;
  const TfWork *work;
  guint last;          /* the frame opened last, which is often the next one's */
  TfFrame *last_frame; /* NULL */
} Call;

static void
look_at_all (Call *call)
{
  call->infos = g_new0 (TfFrameInfo *, call->n);
  for (guint k = 0; k < call->n && call->n > 1; k++)
    call->infos[k] = tf_frame_look (call->paths[k], call->spec, NULL, NULL);
}

static void
call_clear (Call *call)
{
  for (guint k = 0; k < call->n; k++)
    tf_frame_info_free (call->infos[k]);
  g_free (call->infos);
  g_clear_pointer (&call->last_frame, tf_frame_unref);
}

/* The one nearest in time that the witness can use; the number of frames when there is none. */
static guint
partner_of (const Call *call, guint at)
{
  guint best = call->n;
  double least = INFINITY;
  for (guint k = 0; k < call->n && call->infos[at] != NULL; k++)
    {
      if (k == at || call->infos[k] == NULL || !tf_orientation_fits (call->infos[at], call->infos[k]))
        continue;
      double apart = fabs (call->infos[k]->time.s - call->infos[at]->time.s);
      if (apart < least)
        best = k;
      least = fmin (apart, least);
    }
  return best;
}

static TfFrame *
open_partner (Call *call, guint k)
{
  if (call->last_frame != NULL && call->last == k)
    return tf_frame_ref (call->last_frame);
  return tf_frame_open (call->paths[k], call->spec, call->work, NULL); /* its own turn says why not */
}

static void
hear_witness (Call *call, guint at, TfFrame *frame, Witness *witness)
{
  guint k = partner_of (call, at);
  g_autoptr (TfFrame) other = k < call->n ? open_partner (call, k) : NULL;
  if (other == NULL)
    return;
  gboolean before = call->infos[k]->time.s < call->infos[at]->time.s;
  witness->against = call->paths[k];
  witness->time = call->infos[k]->time;
  witness->answer = tf_orientation_witness (before ? other : frame, before ? frame : other, witness->score,
                                            &witness->reason);
}

/* FALSE when the file could not be read at all. */
static gboolean
inspect_one (Call *call, guint at, JsonBuilder *builder)
{
  const char *path = call->paths[at];
  g_autoptr (GError) error = NULL;
  int hdu = 0;
  Witness witness = { 0 };
  g_autoptr (TfFrameInfo) info = tf_frame_look (path, call->spec, &hdu, &error);
  g_autoptr (TfFrame) frame = NULL;
  if (info != NULL && info->role == TF_ROLE_FIELD)
    frame = tf_frame_open (path, call->spec, call->work, &error);
  if (error != NULL && !g_error_matches (error, TF_FRAME_ERROR, TF_FRAME_ERROR_REFUSED))
    {
      if (builder != NULL)
        build_failure (builder, path, error);
      tf_batch_say_error (error);
      return FALSE;
    }
  const TfFrameInfo *shown = frame != NULL ? tf_frame_get_info (frame) : info;
  if (frame != NULL)
    hear_witness (call, at, frame, &witness);
  if (builder != NULL)
    build_info (builder, path, hdu, shown, frame, &witness);
  else
    print_info (path, shown, frame, &witness);
  tf_note_free (witness.reason);
  g_clear_pointer (&call->last_frame, tf_frame_unref);
  call->last_frame = g_steal_pointer (&frame);
  call->last = at;
  return TRUE;
}

int
tf_verb_inspect (int argc, char **argv)
{
  gboolean json = FALSE;
  TfFrameWords words;
  const GOptionEntry entries[] = {
    { "json", 0, 0, G_OPTION_ARG_NONE, &json, N_ ("print one JSON document"), NULL },
    { NULL },
  };
  GOptionContext *context = tf_batch_context ("inspect");
  g_option_context_add_main_entries (context, entries, GETTEXT_PACKAGE);
  tf_batch_add_frame_words (context, &words);
  if (!tf_batch_parse (context, &argc, &argv))
    return TF_EXIT_CALL;
  if (argc < 2)
    return tf_batch_usage ("inspect", _ ("Name at least one frame."));

  g_autoptr (TfWork) work = tf_batch_work_new (0);
  g_autoptr (JsonBuilder) builder = json ? json_builder_new () : NULL;
  int failed = 0;
  if (json)
    json_builder_begin_array (builder);
  Call call = { .paths = argv + 1, .n = (guint)argc - 1, .spec = &words.spec, .work = work };
  look_at_all (&call);
  for (guint k = 0; k < call.n && !tf_cancel_is_raised (work->cancel); k++)
    failed += !inspect_one (&call, k, builder);
  call_clear (&call);
  if (json)
    {
      json_builder_end_array (builder);
      tf_batch_print_json (builder);
    }
  return failed == 0 ? TF_EXIT_DONE : failed == argc - 1 ? TF_EXIT_NOTHING : TF_EXIT_PART;
}
