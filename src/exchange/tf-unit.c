/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-unit.h"

#include <math.h>
#include <string.h>

typedef enum
{
  KIND_NONE,
  KIND_ANGLE,  /* deg */
  KIND_FLUX,   /* Mx */
  KIND_FIELD,  /* G */
  KIND_LENGTH, /* Mm */
} Kind;

static const struct
{
  const char *name;
  Kind kind;
  double factor;
} units[] = {
  { "", KIND_NONE, 1 },           { "%", KIND_NONE, 0.01 },
  { "deg", KIND_ANGLE, 1 },       { "degree", KIND_ANGLE, 1 },    { "degrees", KIND_ANGLE, 1 },
  { "rad", KIND_ANGLE, 180 / G_PI }, { "arcmin", KIND_ANGLE, 1 / 60.0 },
  { "arcsec", KIND_ANGLE, 1 / 3600.0 },
  { "Mx", KIND_FLUX, 1 },         { "maxwell", KIND_FLUX, 1 },    { "Wb", KIND_FLUX, 1e8 },
  { "G", KIND_FIELD, 1 },         { "gauss", KIND_FIELD, 1 },     { "Gauss", KIND_FIELD, 1 },
  { "kG", KIND_FIELD, 1000 },     { "T", KIND_FIELD, 1e4 },       { "mT", KIND_FIELD, 10 },
  { "Mm", KIND_LENGTH, 1 },       { "km", KIND_LENGTH, 1e-3 },    { "m", KIND_LENGTH, 1e-6 },
};

/* "10**20 Mx": the number before the name, 1 when none; *text behind it. */
static double
read_scale (const char **text)
{
  const char *p = *text;
  char *end;
  double scale = 1;
  if (g_str_has_prefix (p, "10**") || g_str_has_prefix (p, "10^"))
    {
      p += p[2] == '*' ? 4 : 3;
      gboolean bracket = *p == '(';
      long power = strtol (p + bracket, &end, 10);
      if (end == p + bracket || power > 300 || power < -300)
        return NAN;
      scale = pow (10, (double)power);
      p = bracket && *end == ')' ? end + 1 : end;
    }
  else if (g_ascii_isdigit (*p))
    {
      scale = g_ascii_strtod (p, &end);
      p = end;
    }
  while (*p == ' ' || *p == '.' || *p == '*')
    p++;
  *text = p;
  return scale;
}

static gboolean
read_unit (const char *text, Kind *kind, double *factor)
{
  double scale = read_scale (&text);
  for (guint k = 0; k < G_N_ELEMENTS (units); k++)
    if (strcmp (text, units[k].name) == 0)
      {
        *kind = units[k].kind;
        *factor = scale * units[k].factor;
        return isfinite (*factor) && *factor > 0;
      }
  return FALSE;
}

double
tf_unit_factor (const char *from, const char *to)
{
  Kind a, b;
  double f, g;
  if (strcmp (from, to) == 0)
    return 1;
  if (!read_unit (from, &a, &f) || !read_unit (to, &b, &g) || a != b)
    return NAN;
  double factor = f / g;
  double whole = round (log10 (factor));
  /* 1e-8 Wb to Mx is 1, not 1.0000000000000002 */
  return fabs (factor / pow (10, whole) - 1) < 1e-12 ? pow (10, whole) : factor;
}
