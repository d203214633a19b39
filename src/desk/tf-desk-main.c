/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <glib/gi18n-lib.h>
#include <locale.h>

#include "tf-application.h"
#include "tf-desk-resources.h"

int
main (int argc, char **argv)
{
  setlocale (LC_ALL, "");
  bindtextdomain (GETTEXT_PACKAGE, TF_LOCALE_DIR);
  bind_textdomain_codeset (GETTEXT_PACKAGE, "UTF-8");
  textdomain (GETTEXT_PACKAGE);
  g_resources_register (tf_desk_get_resource ());
  g_set_prgname ("tiltfield");
  g_autoptr (TfApplication) application = tf_application_new ();
  return g_application_run (G_APPLICATION (application), argc, argv);
}
