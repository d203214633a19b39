/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-slip-spots.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-slip-words.h"

char *
tf_spots_dup_value (const TfSpots *spots)
{
  g_autofree char *tilt = tf_words_dup_signed (spots->axis_tilt_deg, 1);
  gboolean leads = spots->leading_polarity == 1 || spots->leading_polarity == -1;
  const char *leader = spots->leading_polarity > 0 ? "+" : "−";
  if (!spots->matched || spots->n == 0)
    return g_strdup ("—");
  if (isfinite (spots->axis_tilt_deg) && leads)
    return g_strdup_printf (_ ("tilt %s° · %s leads"), tilt, leader);
  return leads ? g_strdup_printf (_ ("%s leads"), leader) : g_strdup (_ ("no leader"));
}

static void
add_note (GString *text, const TfNote *note)
{
  g_autofree char *sentence = tf_note_dup_text (note, FALSE);
  g_string_append_printf (text, "%s%s", text->len > 0 ? "\n" : "", sentence);
}

char *
tf_spots_dup_under (const TfSpots *spots)
{
  GString *text = g_string_new (NULL);
  if (spots->n > 0)
    g_string_append_printf (
        text, ngettext ("%u spot, %.0f msh · umbra %.0f", "%u spots, %.0f msh · umbra %.0f", spots->n),
        spots->n, spots->area_msh, spots->umbra_msh);
  if (spots->delta)
    g_string_append (text, _ ("\ndelta: umbrae of both polarities in one penumbra"));
  if (spots->refusal != NULL)
    add_note (text, spots->refusal);
  for (guint k = 0; k < tf_notes_get_n (spots->notes); k++)
    add_note (text, tf_notes_get (spots->notes, k));
  return g_string_free (text, FALSE);
}

char *
tf_spots_dup_how (const TfSpots *spots, const TfFrameRow *companion)
{
  TfCompanionParams params;
  tf_companion_params_init (&params);
  g_autofree char *name
      = companion != NULL ? g_path_get_basename (companion->path) : g_strdup ("—");
  g_autofree char *found = tf_spots_dup_text (spots, &params);
  return g_strdup_printf (
      _ ("Intensity frame: %s\n\n%s\nLimb darkening is taken out and the quiet Sun about the outline is 1; "
         "levels of spot and umbra after Mathew and others 2007. A spot’s polarity is the magnetogram’s over "
         "its umbra; of the largest spots of the two polarities the western leads. The spots’ tilt is that of "
         "the middles of the two polarities by area; the tilt at the top is the flux’s."),
      name, found);
}
