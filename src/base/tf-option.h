/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* Options once: beside each method stand a plain struct of its parameters and one const TfOption
 * table. The table makes the command's options, the preference rows, the help text, the JSON, and
 * the canonical text that keys the method in the ledger.
 *
 * The struct's members are double (TF_OPTION_NUMBER), int (TF_OPTION_INT, TF_OPTION_CHOICE: index
 * into choices) or gboolean (TF_OPTION_BOOL). A table ends with name NULL.
 */

#include <glib.h>
#include <json-glib/json-glib.h>

G_BEGIN_DECLS

#define TF_OPTION_ERROR (tf_option_error_quark ())
GQuark tf_option_error_quark (void);
typedef enum
{
  TF_OPTION_ERROR_UNKNOWN, /* no option of that name */
  TF_OPTION_ERROR_VALUE,   /* not a value, or out of range; the message says the range */
} TfOptionError;

typedef enum
{
  TF_OPTION_NUMBER,
  TF_OPTION_INT,
  TF_OPTION_BOOL,
  TF_OPTION_CHOICE,
} TfOptionType;

typedef struct
{
  const char *name; /* as on the command line, without dashes: "floor-sigma" */
  TfOptionType type;
  const char *unit;           /* "G", "deg", "Mm", "" */
  double fallback;            /* default; NaN = "not given", allowed only for numbers */
  double min, max;            /* range, both included */
  const char *const *choices; /* TF_OPTION_CHOICE: NULL-ended names */
  const char *sentence;       /* N_("...") what it does */
  size_t offset;              /* offsetof (params, member) */
} TfOption;

/** tf_options_reset: sets every member named in @table to its default. */
void tf_options_reset (const TfOption *table, void *params);
/** tf_options_set: reads @text (C locale) into the option @name; errors name the option, the range and the unit. */
gboolean tf_options_set (const TfOption *table, void *params, const char *name, const char *text, GError **error);
/** tf_options_dup_value: the value as tf_options_set would read it ("" for a number that is NaN). */
char *tf_options_dup_value (const TfOption *option, const void *params);
/** tf_options_dup_canonical: "METHOD name=value name=value ..." in table order: equal params give equal text. */
char *tf_options_dup_canonical (const TfOption *table, const void *params, const char *method);
/** tf_options_read_canonical: the inverse: defaults, then what @text names. FALSE when it is not that method's text. */
gboolean tf_options_read_canonical (const TfOption *table, void *params, const char *method, const char *text);
/** tf_options_build_json: the builder's next value: an object name -> value, in table order. */
void tf_options_build_json (const TfOption *table, const void *params, JsonBuilder *builder);
/** tf_options_read_json: sets what @object names; unknown names and bad values are errors. */
gboolean tf_options_read_json (const TfOption *table, void *params, JsonObject *object, GError **error);
/**
 * tf_options_new_group:
 * @title: N_() heading of the help
 * Returns: (transfer full): a GLib option group that writes into @params, which must outlive it.
 */
GOptionGroup *tf_options_new_group (const TfOption *table, void *params, const char *name, const char *title);

G_END_DECLS
