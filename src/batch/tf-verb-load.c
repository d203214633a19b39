/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-batch.h"

#include <dlfcn.h>

/* The verbs that need tables and drawings stand in a module: the libraries for these, 33 with all
 * that they need, take longer to load than all else that a program needs as it starts. */

#define MODULE "tiltfield-tables.so"

/* Beside the program, as in a build, or where it was installed. */
static void *
open_module (void)
{
  g_autofree char *program = g_file_read_link ("/proc/self/exe", NULL);
  g_autofree char *folder = program != NULL ? g_path_get_dirname (program) : NULL;
  g_autofree char *beside = g_build_filename (folder != NULL ? folder : ".", MODULE, NULL);
  return dlopen (folder != NULL && g_file_test (beside, G_FILE_TEST_EXISTS) ? beside : TF_MODULE_DIR "/" MODULE,
                 RTLD_NOW | RTLD_LOCAL);
}

TfVerbFunc
tf_verb_load (const char *verb, char **why)
{
  g_autofree char *symbol = g_strconcat ("tf_verb_", verb, NULL);
  void *module = open_module (); /* stays: the verb is all that the program does */
  TfVerbFunc run = module != NULL ? (TfVerbFunc)dlsym (module, symbol) : NULL;
  const char *said = run == NULL ? dlerror () : NULL;
  if (run == NULL)
    *why = g_strdup (said != NULL ? said : symbol);
  return run;
}
