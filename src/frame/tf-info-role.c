/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-info-private.h"

#include <math.h>
#include <string.h>

/* What a header says its pixels are: a field, an intensity, or something that must be refused,
 * with the reason. The words that describe the content are asked one after the other; the first
 * that says anything decides. Without any, the unit decides. */

typedef struct
{
  const char *pattern; /* upper case; with blanks about it: a whole word */
  TfRole role;
  TfFieldKind field;
  const char *refusal; /* note code */
} Rule;

/* In this order: the more special first ("radial field" before "field", "azimuth of the field"
 * before both). */
static const Rule rules[] = {
  { "AZIMUTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "azimuth" },
  { " BAZI ", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "azimuth" },
  { "INCLINATION", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "inclination" },
  { " BINC ", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "inclination" },
  { "DOPPLER", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "velocity" },
  { "VELOCITY", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "velocity" },
  { " VLOS ", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "velocity" },
  { "H-ALPHA", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha" },
  { "HALPHA", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha" },
  { "H ALPHA", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "h-alpha" },
  { "EQUIVALENT WIDTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "helium-line" },
  { " NM EW ", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "helium-line" },
  { "10830", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "helium-line" },
  { "LINE WIDTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "line-shape" },
  { "LINEWIDTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "line-shape" },
  { "LINE DEPTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "line-shape" },
  { "LINEDEPTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "line-shape" },
  { "LOS MAGNETIC FIELD", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { " BMAG ", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "unsigned-field" },
  { "FIELD STRENGTH", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "unsigned-field" },
  { "TRANSVERSE", TF_ROLE_REFUSED, TF_FIELD_UNKNOWN, "transverse-field" },
  { " BLOS ", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { " BRAD ", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
  { " BR ", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
  { " MR ", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
  { "RADIAL", TF_ROLE_FIELD, TF_FIELD_RADIAL, NULL },
  { " ML ", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { "LINE-OF-SIGHT", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { "LINE OF SIGHT", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { "LONGITUDINAL", TF_ROLE_FIELD, TF_FIELD_LOS, NULL },
  { "MAGNETO", TF_ROLE_FIELD, TF_FIELD_UNKNOWN, NULL },
  { "MAGNETIC", TF_ROLE_FIELD, TF_FIELD_UNKNOWN, NULL },
  { " MAGNI ", TF_ROLE_FIELD, TF_FIELD_UNKNOWN, NULL },
  { " MAG ", TF_ROLE_FIELD, TF_FIELD_UNKNOWN, NULL },
  { " V/I ", TF_ROLE_FIELD, TF_FIELD_LOS, "stokes-sign" },
  { "INTENSITY", TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN, "intensity" },
  { "CONTINUUM", TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN, "intensity" },
  { " ICNT ", TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN, "intensity" },
  { "WHITE LIGHT", TF_ROLE_INTENSITY, TF_FIELD_UNKNOWN, "intensity" },
};

/* Words that say what the pixels are, the plainest first. */
static const char *const content_words[] = {
  "BTYPE",    "CONTENT",  "IMTYPE",   "DATA-TYP", "IMGTYP01", "OBS_TYPE",
  "DPC_OBSR", "OBS_MODE", "OBS-MODE", "MAPPARAM", "DATATYPE", "DETECTOR",
};

/* @text in upper case between blanks, brackets and underscores being blanks. */
static char *
words_of (const char *text)
{
  g_autofree char *upper = g_ascii_strup (text, -1);
  g_strdelimit (upper, "()[]_,;", ' ');
  return g_strdup_printf (" %s ", upper);
}

static const Rule *
rule_for (const TfHeader *header, const char **word)
{
  for (guint w = 0; w < G_N_ELEMENTS (content_words); w++)
    {
      const char *text = tf_header_get (header, content_words[w]);
      g_autofree char *words = text != NULL ? words_of (text) : NULL;
      for (guint k = 0; words != NULL && k < G_N_ELEMENTS (rules); k++)
        if (strstr (words, rules[k].pattern) != NULL)
          {
            *word = content_words[w];
            return &rules[k];
          }
    }
  return NULL;
}

double
tf_unit_to_gauss (const char *unit)
{
  static const struct
  {
    const char *name;
    double factor;
  } units[] = {
    { "g", 1 },
    { "gauss", 1 },
    { "gs", 1 },
    { "kg", 1000 },
    { "kgauss", 1000 },
    { "kilogauss", 1000 },
    { "mg", 1e-3 },
    { "mgauss", 1e-3 },
    { "milligauss", 1e-3 },
    { "t", 1e4 },
    { "tesla", 1e4 },
    { "mt", 10 },
    { "mtesla", 10 },
    { "millitesla", 10 },
    { "ut", 1e-2 },
    { "microtesla", 1e-2 },
    { "nt", 1e-5 },
    { "nanotesla", 1e-5 },
    { "mx/cm2", 1 },
    { "mxcm-2", 1 },
    { "maxwell/cm2", 1 },
    { "maxwellcm-2", 1 },
    { "wb/m2", 1e4 },
    { "wbm-2", 1e4 },
    { "1e-4t", 1 },
    { "10-4t", 1 },
    { "0.1mt", 1 },
  };
  if (unit == NULL)
    return 0;
  g_autoptr (GString) plain = g_string_new (NULL);
  for (const char *s = unit; *s != '\0'; s++)
    if (strchr (" ^*._()", *s) == NULL || (*s == '.' && g_ascii_isdigit (s[1])))
      g_string_append_c (plain, g_ascii_tolower (*s));
  for (guint k = 0; k < G_N_ELEMENTS (units); k++)
    if (strcmp (plain->str, units[k].name) == 0)
      return units[k].factor;
  return 0;
}

typedef enum
{
  UNIT_MISSING,
  UNIT_FIELD,
  UNIT_INTENSITY,
  UNIT_VELOCITY,
  UNIT_ANGLE,
  UNIT_OTHER,
} UnitKind;

static UnitKind
unit_kind (const char *unit)
{
  g_autofree char *lower = g_ascii_strdown (unit, -1);
  if (*g_strstrip (lower) == '\0' || strcmp (lower, "none") == 0 || strcmp (lower, "unknown") == 0)
    return UNIT_MISSING;
  if (tf_unit_to_gauss (unit) > 0)
    return UNIT_FIELD;
  if (g_str_has_prefix (lower, "dn") || g_str_has_prefix (lower, "count")
      || g_str_has_prefix (lower, "adu") || strstr (lower, "intensity") != NULL
      || g_str_has_prefix (lower, "electron"))
    return UNIT_INTENSITY;
  if (strcmp (lower, "m/s") == 0 || strcmp (lower, "km/s") == 0 || strcmp (lower, "cm/s") == 0
      || strcmp (lower, "m s-1") == 0)
    return UNIT_VELOCITY;
  if (g_str_has_prefix (lower, "deg") || g_str_has_prefix (lower, "rad"))
    return UNIT_ANGLE;
  return UNIT_OTHER;
}

static void
refuse (TfFrameInfo *info, TfRole role, TfNote *refusal)
{
  info->role = role;
  tf_note_free (info->refusal);
  info->refusal = refusal;
}

static void
apply_rule (const TfHeader *header, const Rule *rule, const char *word, TfFrameInfo *info)
{
  info->role = rule->role;
  info->field = rule->field;
  if (rule->role != TF_ROLE_FIELD)
    refuse (info, rule->role,
            tf_note_new (rule->refusal, "ss", word, tf_header_get (header, word)));
  else if (rule->refusal != NULL)
    tf_notes_add (info->cautions, rule->refusal, "ss", word, tf_header_get (header, word));
}

static void
apply_unit (TfFrameInfo *info, gboolean told)
{
  switch (unit_kind (info->unit))
    {
    case UNIT_FIELD:
      info->to_gauss = tf_unit_to_gauss (info->unit);
      return;
    case UNIT_MISSING:
      tf_notes_add (info->cautions, "unit-missing", "");
      if (!told)
        tf_notes_add (info->cautions, "content-unknown", "");
      return;
    case UNIT_INTENSITY:
      refuse (info, TF_ROLE_INTENSITY, tf_note_new ("intensity", "ss", "BUNIT", info->unit));
      return;
    case UNIT_VELOCITY:
      refuse (info, TF_ROLE_REFUSED, tf_note_new ("velocity", "ss", "BUNIT", info->unit));
      return;
    case UNIT_ANGLE:
      refuse (info, TF_ROLE_REFUSED, tf_note_new ("azimuth", "ss", "BUNIT", info->unit));
      return;
    case UNIT_OTHER:
    default:
      refuse (info, TF_ROLE_REFUSED, tf_note_new ("unit-not-field", "s", info->unit));
      return;
    }
}

/* Hydrogen alpha by its wavelength, in Angstrom or nm. */
static gboolean
is_h_alpha (const TfHeader *header)
{
  double w = tf_header_number (header, "WAVELNTH");
  return (w > 6550 && w < 6575) || (w > 655 && w < 657.5);
}

void
tf_info_read_role (const TfHeader *header, TfFrameInfo *info)
{
  const char *word = NULL, *unit = tf_header_get (header, "BUNIT");
  const Rule *rule = rule_for (header, &word);
  info->role = TF_ROLE_FIELD;
  info->to_gauss = 1;
  info->unit = g_strdup (unit != NULL ? unit : "");
  if (rule != NULL)
    apply_rule (header, rule, word, info);
  else if (is_h_alpha (header))
    refuse (info, TF_ROLE_REFUSED,
            tf_note_new ("h-alpha", "ss", "WAVELNTH", tf_header_get (header, "WAVELNTH")));
  if (info->role == TF_ROLE_FIELD)
    apply_unit (info, rule != NULL);
  if (info->role == TF_ROLE_FIELD && info->field == TF_FIELD_UNKNOWN && !tf_header_is_map (header))
    info->field = TF_FIELD_LOS;
}

/* -- instrument ------------------------------------------------------------------------------ */

static const char *
word_text (const TfHeader *header, const char *word)
{
  const char *text = tf_header_get (header, word);
  return text != NULL && *text != '\0' && !g_ascii_isdigit (*text) ? text : NULL;
}

static gboolean
has_name (const char *text)
{
  guint run = 0;
  for (; *text != '\0' && run < 3; text++)
    run = g_ascii_isalpha (*text) ? run + 1 : 0;
  return run >= 3;
}

/* TELESCOP; with INSTRUME or CAMERA unless it names both already ("SDO/HMI"); ORIGIN before it
 * when it is only a size; the model's name where there is no telescope. */
char *
tf_info_read_instrument (const TfHeader *header)
{
  const char *telescope = tf_header_get (header, "TELESCOP"),
             *origin = word_text (header, "ORIGIN");
  const char *instrument = word_text (header, "INSTRUME");
  const char *model = word_text (header, "MODEL"), *camera = word_text (header, "CAMERA");
  if (instrument == NULL && camera != NULL && strchr (camera, ' ') == NULL)
    instrument = camera;
  if (telescope == NULL || *telescope == '\0')
    return g_strdup (instrument != NULL ? instrument
                     : origin != NULL   ? origin
                     : model != NULL    ? model
                                        : "unknown");
  if (!has_name (telescope) && instrument == NULL && origin != NULL)
    return g_strdup_printf ("%s %s", origin, telescope);
  if (strchr (telescope, '/') != NULL || instrument == NULL
      || strstr (telescope, instrument) != NULL)
    return g_strdup (telescope);
  return g_strdup_printf ("%s %s", telescope, instrument);
}
