/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-cfitsio-private.h"

#include <dlfcn.h>

typedef struct
{
  TfCfitsio calls;
  char *why; /* NULL: loaded */
} Library;

/* The library is never unloaded. */
static gpointer
load (gpointer unused)
{
  Library *library = g_new0 (Library, 1);
  void *handle = dlopen ("libcfitsio.so." G_STRINGIFY (CFITSIO_SONAME), RTLD_LAZY | RTLD_LOCAL);
  gboolean whole = handle != NULL;
#define TF_TAKE(name)                                                                              \
  whole = whole                                                                                    \
          && (library->calls.name = (__typeof__ (name) *)dlsym (handle, G_STRINGIFY (name)))       \
                 != NULL;
  TF_CFITSIO_CALLS (TF_TAKE)
#undef TF_TAKE
  if (!whole)
    {
      const char *said = dlerror ();
      library->why = g_strdup (said != NULL ? said : "");
    }
  return library;
}

static const Library *
library (void)
{
  static GOnce once = G_ONCE_INIT;
  return g_once (&once, load, NULL);
}

gboolean
tf_cfitsio_load (const char **why)
{
  if (why != NULL)
    *why = library ()->why;
  return library ()->why == NULL;
}

const TfCfitsio *
cfitsio (void)
{
  return &library ()->calls;
}
