/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "made-rows.h"

/* outside-tables FOLDER: the rows of tests/exchange in the four formats, and empty tables. */

static gboolean
write_all (const char *folder, const char *name, const GArray *rows, const TfStudy *study,
           GError **error)
{
  static const char *const endings[] = { ".csv", ".vot", ".fits", ".json" };
  for (guint k = 0; k < G_N_ELEMENTS (endings); k++)
    {
      g_autofree char *file = g_strconcat (name, endings[k], NULL),
                      *path = g_build_filename (folder, file, NULL);
      if (!tf_export_write (path, rows, study, "tests/outside", error))
        return FALSE;
    }
  return TRUE;
}

int
main (int argc, char **argv)
{
  g_autoptr (GPtrArray) keep = NULL;
  g_autoptr (GArray) rows = made_rows_new (&keep),
                     none = g_array_new (FALSE, TRUE, sizeof (TfExportRow));
  g_autoptr (TfStudy) study = tf_study_new_default ();
  g_autoptr (GError) error = NULL;
  if (argc == 2 && write_all (argv[1], "rows", rows, study, &error)
      && write_all (argv[1], "none", none, study, &error))
    return 0;
  g_printerr ("%s\n", error != NULL ? error->message : "outside-tables FOLDER");
  return 1;
}
