/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-dipole-table.h"

#include <math.h>
#include <glib/gi18n-lib.h>

#include "tf-number.h"

static void
put (GtkGrid *grid, int column, int row, const char *text, gboolean head)
{
  GtkWidget *label = gtk_label_new (text);
  gtk_label_set_xalign (GTK_LABEL (label), column == 0 ? 0 : 1);
  gtk_widget_set_hexpand (label, column == 0);
  gtk_widget_add_css_class (label, head ? "dim-label" : "numeric");
  gtk_widget_add_css_class (label, "caption");
  gtk_grid_attach (grid, label, column, row, 1, 1);
}

static char *
dup_group (const TfDipoleSum *sum)
{
  const char *verdict = sum->verdict < 0 ? _ ("all") : _ (tf_verdict_name ((TfVerdictKind)sum->verdict));
  const char *side = sum->hemisphere > 0   ? C_ ("north", "N")
                     : sum->hemisphere < 0 ? C_ ("south", "S")
                                           : _ ("both");
  return g_strdup_printf ("%d %s, %s", sum->cycle, side, verdict);
}

static char *
dup_sum (double gauss, double sigma)
{
  g_autofree char *sum = tf_number_dup_form (gauss, "+.4f", TRUE);
  g_autofree char *error = isfinite (sigma) ? tf_number_dup_form (sigma, ".4f", TRUE) : NULL;
  return error != NULL ? g_strdup_printf ("%s ± %s", sum, error) : g_steal_pointer (&sum);
}

/* Of a whole cycle alone. */
static gboolean
put_costliest (GtkGrid *grid, int row, const TfDipoleSum *sum, const TfFindings *findings)
{
  if (sum->hemisphere != 0 || sum->verdict >= 0 || sum->costliest < 0 || findings->marks == NULL
      || findings->marks[sum->costliest] == 0)
    return FALSE;
  gint64 mark = findings->marks[sum->costliest];
  g_autofree char *words = g_strdup_printf (_ ("Open what works most against cycle %d (%+.4f G)"),
                                            sum->cycle, sum->costliest_gauss);
  GtkWidget *button = gtk_button_new_with_label (words);
  GtkWidget *label = gtk_button_get_child (GTK_BUTTON (button));
  gtk_label_set_wrap (GTK_LABEL (label), TRUE);
  gtk_widget_add_css_class (button, "slip-button");
  gtk_actionable_set_action_name (GTK_ACTIONABLE (button), "win.open-mark");
  gtk_actionable_set_action_target (GTK_ACTIONABLE (button), "(xb)", mark < 0 ? -mark : mark, mark < 0);
  gtk_grid_attach (grid, button, 0, row, 3, 1);
  return TRUE;
}

void
tf_dipole_table_fill (GtkGrid *grid, const TfFindings *findings)
{
  g_return_if_fail (GTK_IS_GRID (grid));
  int row = 0;
  for (GtkWidget *child = gtk_widget_get_first_child (GTK_WIDGET (grid)); child != NULL;
       child = gtk_widget_get_first_child (GTK_WIDGET (grid)))
    gtk_grid_remove (grid, child);
  if (findings == NULL || findings->dipoles == NULL)
    return;
  put (grid, 0, row, _ ("cycle, side, verdict"), TRUE);
  put (grid, 1, row, "n", TRUE);
  put (grid, 2, row++, _ ("sum, G"), TRUE);
  for (guint k = 0; k < findings->dipoles->len; k++)
    {
      const TfDipoleSum *sum = &g_array_index (findings->dipoles, TfDipoleSum, k);
      if (sum->regions == 0)
        continue;
      g_autofree char *group = dup_group (sum), *n = g_strdup_printf ("%u", sum->regions),
                      *gauss = dup_sum (sum->sum_gauss, sum->sigma_gauss);
      put (grid, 0, row, group, FALSE);
      put (grid, 1, row, n, FALSE);
      put (grid, 2, row++, gauss, FALSE);
      row += put_costliest (grid, row, sum, findings);
    }
}
