/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-units.h"

#include <glib/gi18n-lib.h>

#include "tf-chart.h"
#include "tf-slip-words.h"

static const double weber = 1e-8;    /* a maxwell */
static const double millitesla = 0.1; /* a gauss */

static const char *const names[TF_N_UNITS] = { "flux", "field", "length" };
static const char *const choices[TF_N_UNITS][2] = { { "Mx", "Wb" }, { "G", "mT" }, { "degrees", "Mm" } };

const char *
tf_unit_name (TfUnitKind kind)
{
  return names[kind];
}

const char *
tf_unit_choice (TfUnitKind kind, guint choice)
{
  return choices[kind][MIN (choice, 1)];
}

char *
tf_units_dup_flux_bare (TfUnits units, double mx)
{
  char *text = tf_chart_dup_flux (units.choice[TF_UNIT_FLUX] ? mx * weber : mx);
  char *unit = g_strrstr (text, " Mx");
  if (unit != NULL)
    *unit = '\0';
  return text;
}

char *
tf_units_dup_flux (TfUnits units, double mx)
{
  if (units.choice[TF_UNIT_FLUX] == 0)
    return tf_chart_dup_flux (mx);
  g_autofree char *number = tf_units_dup_flux_bare (units, mx);
  return g_strcmp0 (number, "—") == 0 ? g_steal_pointer (&number) : g_strconcat (number, " Wb", NULL);
}

static char *
dup_field (TfUnits units, double gauss, guint decimals, char *(*number) (double, guint))
{
  gboolean si = units.choice[TF_UNIT_FIELD] != 0;
  g_autofree char *text = si ? number (gauss * millitesla, decimals + 1) : number (gauss, decimals);
  return g_strconcat (text, si ? " mT" : " G", NULL);
}

char *
tf_units_dup_field (TfUnits units, double gauss, guint decimals)
{
  return dup_field (units, gauss, decimals, tf_words_dup_number);
}

char *
tf_units_dup_signed_field (TfUnits units, double gauss, guint decimals)
{
  return dup_field (units, gauss, decimals, tf_words_dup_signed);
}

char *
tf_units_dup_length (TfUnits units, double deg, guint deg_decimals, double mm, guint mm_decimals)
{
  g_autofree char *d = tf_words_dup_number (deg, deg_decimals), *m = tf_words_dup_number (mm, mm_decimals);
  return units.choice[TF_UNIT_LENGTH] ? g_strdup_printf (_ ("%s Mm · %s°"), m, d)
                                      : g_strdup_printf (_ ("%s° · %s Mm"), d, m);
}
