/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
/* The charts of the Laws bench as files. */

#include <string.h>
#include <adwaita.h>
#include <glib/gi18n-lib.h>

#include "tf-actions-laws.h"
#include "tf-figure.h"
#include "tf-laws-bench.h"
#include "tf-power-plot.h"
#include "tf-save-as.h"
#include "tf-session-studies.h"
#include "tf-window-private.h"

static TfSession *
session_of (gpointer window)
{
  return tf_window_get_session (TF_WINDOW (window));
}

#define ACTION(name) static void name (GSimpleAction *action, GVariant *value, gpointer window)

/* -- one chart ---------------------------------------------------------------------------------------- */

typedef struct
{
  const TfLawsChart *chart;
  TfLawsAnswer *answer;
} Figure;

static void
figure_free (gpointer data)
{
  tf_laws_answer_unref (((Figure *)data)->answer);
  g_free (data);
}

static char *
write_figure (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const Figure *figure = job;
  return tf_laws_chart_write (figure->chart, figure->answer->charts, path, figure->answer->words,
                              tf_saving_get_cancel (saving), error)
             ? g_strdup_printf (_ ("Saved: %s"), path)
             : NULL;
}

static void
chart_chosen (TfWindow *window, const char *name, const char *path)
{
  TfLawsAnswer *answer = tf_session_get_laws (session_of (window));
  const TfLawsChart *chart = tf_laws_chart_find (name);
  if (chart == NULL || answer == NULL || answer->charts == NULL)
    {
      tf_window_say (window, _ ("There is no chart to save yet."));
      return;
    }
  Figure *figure = g_new (Figure, 1);
  *figure = (Figure){ chart, tf_laws_answer_ref (answer) };
  tf_save_as (session_of (window), path, write_figure, figure, figure_free);
}

ACTION (save_chart)
{
  const char *name, *path;
  g_variant_get (value, "(&s&s)", &name, &path);
  g_autofree char *file = g_strconcat (name, ".pdf", NULL);
  if (*path == '\0')
    tf_save_as_ask (window, _ ("Save the chart (PDF, SVG or PNG)"), file, name, chart_chosen);
  else
    chart_chosen (window, name, path);
}

/* -- the power curve ------------------------------------------------------------------------------------ */

typedef struct
{
  TfPowerCurve *curve;
  double wanted;
} Power;

static void
power_free (gpointer data)
{
  tf_power_curve_free (((Power *)data)->curve);
  g_free (data);
}

static char *
write_power (TfSaving *saving, gpointer job, const char *path, GError **error)
{
  const Power *power = job;
  return tf_power_plot_write (power->curve, power->wanted, path, error)
             ? g_strdup_printf (_ ("Saved: %s"), path)
             : NULL;
}

static void
power_chosen (TfWindow *window, const char *what, const char *path)
{
  Power power;
  power.curve = tf_window_dup_power (window, &power.wanted);
  if (power.curve == NULL)
    tf_window_say (window, _ ("There is no chart to save yet."));
  else
    tf_save_as (session_of (window), path, write_power, g_memdup2 (&power, sizeof power), power_free);
}

ACTION (save_power)
{
  const char *path = g_variant_get_string (value, NULL);
  if (*path == '\0')
    tf_save_as_ask (window, _ ("Save the chart (PDF, SVG or PNG)"), "power.pdf", "", power_chosen);
  else
    power_chosen (window, "", path);
}

void
tf_window_add_chart_actions (TfWindow *self)
{
  static const GActionEntry entries[] = {
    { "save-chart", save_chart, "(ss)", NULL, NULL },
    { "save-power", save_power, "s", NULL, NULL },
  };
  g_action_map_add_action_entries (G_ACTION_MAP (self), entries, G_N_ELEMENTS (entries), self);
}
