/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* JSON as this project writes it: built and read with json-glib, printed here, so that a number that
 * is not finite is null, numbers have the fewest digits that read back the same, and the text is the
 * same in every locale.
 */

#include <json-glib/json-glib.h>

G_BEGIN_DECLS

/* Members of the object being built. NULL strings and non-finite numbers become null. */
void tf_json_string (JsonBuilder *builder, const char *key, const char *value);
void tf_json_number (JsonBuilder *builder, const char *key, double value);
void tf_json_int (JsonBuilder *builder, const char *key, gint64 value);
void tf_json_bool (JsonBuilder *builder, const char *key, gboolean value);
void tf_json_null (JsonBuilder *builder, const char *key);
/** tf_json_numbers: an array of @n numbers as member @key, or as an element when @key is NULL. */
void tf_json_numbers (JsonBuilder *builder, const char *key, const double *values, guint n);

/** tf_json_dup_text: (transfer full): what was built, indented by two spaces when @pretty. The
 * builder's root must be complete. */
char *tf_json_dup_text (JsonBuilder *builder, gboolean pretty);
char *tf_json_node_dup_text (JsonNode *node, gboolean pretty);

/* Reading: an absent member, null or a wrong type gives NaN / NULL / the fallback, never a warning. */
double tf_json_member_number (JsonObject *object, const char *key);
gint64 tf_json_member_int (JsonObject *object, const char *key, gint64 fallback);
gboolean tf_json_member_bool (JsonObject *object, const char *key, gboolean fallback);
const char *tf_json_member_string (JsonObject *object, const char *key);
JsonArray *tf_json_member_array (JsonObject *object, const char *key);
JsonObject *tf_json_member_object (JsonObject *object, const char *key);
double tf_json_element_number (JsonArray *array, guint k);
const char *tf_json_element_string (JsonArray *array, guint k);

G_END_DECLS
