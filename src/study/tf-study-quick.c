/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-study-quick.h"

#include <math.h>
#include <string.h>

#include "tf-distinct.h"
#include "tf-joy-slope.h"
#include "tf-many.h"
#include "tf-sort.h"

enum
{
  OPEN = 1,    /* nothing but cycle, equator zone and steepness stands against a verdict */
  TILTED = 2,  /* of the line's sample but for its verdict and steepness */
  CHANGES = 4, /* its passage does */
  LEADS = 8,   /* positive */
  NORTH = 16,
  LEANING = 0x80, /* of a call: on a provisional minimum; below it the sure cycle, 0: none */
  MIN_ROWS = 3
};

typedef struct
{
  double time_s, lat_deg, steep_deg; /* steep: the size of the tilt or bearing */
  guint region;                      /* numbered from 0 */
  guint8 flags, call;                /* call: under the study's own divides */
} Row;

/* A row of the line's sample, in the order of tilt over latitude. */
typedef struct
{
  double ratio, weight;
  guint place;
} Ratio;

struct _TfStudyQuick
{
  const TfStudy *study;
  const TfSample *all;
  guint n_regions, n_ratios;
  Row *rows;     /* one a row of all */
  Ratio *ratios;
};

/* -- making ------------------------------------------------------------------------------------- */

typedef struct
{
  TfStudyQuick *quick;
  const TfDivides *divides;
  TfVerdictParams verdict;
  TfJoyParams joy;
  GHashTable *changing; /* NULL: none does */
} Making;

static guint8
pack_call (const TfCycleCall *call)
{
  guint8 leaning = g_strcmp0 (call->reason, "cycle-provisional") == 0 ? LEANING : 0;
  return call->sure ? (guint8)call->number | leaning : 0;
}

static gboolean
is_open (const TfVerdict *verdict)
{
  return verdict->kind != TF_VERDICT_CANNOT_SAY || strcmp (verdict->reason, "hale-no-cycle") == 0
         || strcmp (verdict->reason, "hale-cycle-unsure") == 0;
}

static void
make_rows (guint band, guint first, guint n, guint worker, gpointer data)
{
  const Making *making = data;
  const TfVerdict keeps = { .kind = TF_VERDICT_KEEPS };
  for (guint k = first; k < first + n; k++)
    {
      const TfSampleRow *row = tf_sample_get (making->quick->all, k);
      TfVerdict verdict = tf_verdict_judge (row, making->divides, &making->verdict);
      gboolean changes = making->changing != NULL
                         && g_hash_table_contains (making->changing, GUINT_TO_POINTER (row->passage));
      making->quick->rows[k] = (Row){
        .time_s = row->time.s,
        .lat_deg = row->lat_deg,
        .steep_deg = fabs (isnan (row->axis_tilt_deg) ? row->axis_bearing_deg : row->axis_tilt_deg),
        .flags = (is_open (&verdict) ? OPEN : 0)
                 | (tf_joy_uses (row, &keeps, &making->joy) ? TILTED : 0) | (changes ? CHANGES : 0)
                 | (row->leading_polarity > 0 ? LEADS : 0) | (row->lat_deg > 0.0 ? NORTH : 0),
        .call = pack_call (&verdict.cycle),
      };
    }
}

static void
number_regions (TfStudyQuick *quick)
{
  guint n = tf_sample_get_n (quick->all);
  g_autoptr (TfDistinct) regions = tf_distinct_new (n);
  for (guint k = 0; k < n; k++)
    quick->rows[k].region = tf_distinct_add (regions, tf_sample_get (quick->all, k)->region);
  quick->n_regions = tf_distinct_get_n (regions);
}

static void
order_ratios (TfStudyQuick *quick)
{
  guint n = tf_sample_get_n (quick->all), m = 0;
  int form = quick->study->joy.form;
  g_autofree double *keys = tf_new_many (double, n + 1);
  g_autofree Ratio *ratios = tf_new_many (Ratio, n + 1);
  for (guint k = 0; k < n; k++)
    {
      const TfSampleRow *row = tf_sample_get (quick->all, k);
      double x = quick->rows[k].flags & TILTED ? tf_joy_x (form, fabs (row->lat_deg)) : 0.0;
      if (!(x > 0.0))
        continue;
      keys[m] = tf_joy_y (form, row->axis_tilt_deg) / x;
      ratios[m] = (Ratio){ keys[m], x, k };
      m++;
    }
  g_autofree guint *order = tf_sort_order (keys, m);
  quick->ratios = tf_new_many (Ratio, m + 1);
  quick->n_ratios = m;
  for (guint j = 0; j < m; j++)
    quick->ratios[j] = ratios[order[j]];
}

TfStudyQuick *
tf_study_quick_new (const TfStudy *study, const TfFindings *findings, const TfSample *all,
                    TfWorkers *workers)
{
  if (study->joy.estimator != TF_JOY_ROBUST || study->joy.form == TF_JOY_LINEAR_FREE)
    return NULL;
  guint n = tf_sample_get_n (all);
  TfStudyQuick *quick = g_new0 (TfStudyQuick, 1);
  *quick = (TfStudyQuick){ .study = study, .all = all, .rows = tf_new_many (Row, n + 1) };
  g_autoptr (TfDivides) divides = tf_study_dup_divides (study);
  gboolean any = g_hash_table_size (findings->changing) > 0;
  Making making = { quick, divides, study->verdict, study->joy, any ? findings->changing : NULL };
  making.verdict.equator_deg = 0.0;
  making.verdict.steep_deg = making.joy.steep_max_deg = INFINITY;
  const TfWork work = { .workers = workers };
  tf_bands_run (&work, n, make_rows, &making);
  number_regions (quick);
  order_ratios (quick);
  return quick;
}

void
tf_study_quick_free (TfStudyQuick *quick)
{
  if (quick == NULL)
    return;
  g_free (quick->rows);
  g_free (quick->ratios);
  g_free (quick);
}

/* -- one choice --------------------------------------------------------------------------------- */

/* The value at which half of the members' weight is passed; NaN where rounding might decide. */
static double
find_median (const TfStudyQuick *quick, const guint8 *member)
{
  const double doubt = 1e-9;
  const Ratio *ratios = quick->ratios;
  double total = 0.0, sum = 0.0;
  for (guint j = 0; j < quick->n_ratios; j++)
    total += member[ratios[j].place] ? ratios[j].weight : 0.0;
  for (guint j = 0; j < quick->n_ratios;)
    {
      double value = ratios[j].ratio, less = sum;
      for (; j < quick->n_ratios && !(ratios[j].ratio > value); j++)
        sum += member[ratios[j].place] ? ratios[j].weight : 0.0;
      if (sum >= 0.5 * total * (1.0 - doubt))
        return less < 0.5 * total * (1.0 - doubt) && sum > 0.5 * total * (1.0 + doubt) ? value : NAN;
    }
  return NAN;
}

/* The limits of a choice, and its divides where they are not the study's own. */
typedef struct
{
  const TfDivides *divides; /* NULL: the study's own */
  double later_s, equator_deg, steep_deg;
  gboolean hold;
} Limits;

static TfVerdictKind
judge (const Row *row, const Limits *limits, gboolean *leaning)
{
  if (!(row->flags & OPEN) || fabs (row->lat_deg) < limits->equator_deg
      || row->steep_deg > limits->steep_deg || (limits->hold && (row->flags & CHANGES)))
    return TF_VERDICT_CANNOT_SAY;
  guint8 call = row->call;
  if (limits->divides != NULL)
    {
      TfTime time = tf_time_add ((TfTime){ row->time_s }, -limits->later_s);
      TfCycleCall own = tf_divides_call (limits->divides, time, row->lat_deg);
      call = pack_call (&own);
    }
  int expected = tf_hale_expected (call & ~LEANING, row->flags & NORTH ? 1 : -1);
  *leaning = (call & LEANING) != 0;
  if (expected == 0)
    return TF_VERDICT_CANNOT_SAY;
  return ((row->flags & LEADS) != 0) == (expected > 0) ? TF_VERDICT_KEEPS : TF_VERDICT_BREAKS;
}

/* Marks the members of the line and counts the rest. */
static void
take_rows (const TfStudyQuick *quick, const TfJoyParams *joy, const TfSample *sample,
           const Limits *limits, guint8 *member, TfWhatIf *out)
{
  const guint *places = tf_sample_get_places (sample);
  g_autofree guint8 *seen = g_new0 (guint8, quick->n_regions / 8 + 1);
  for (guint k = 0; k < tf_sample_get_n (sample); k++)
    {
      const Row *row = &quick->rows[places[k]];
      gboolean leaning = FALSE;
      TfVerdictKind kind = judge (row, limits, &leaning);
      gboolean joins = (row->flags & TILTED) && row->steep_deg <= joy->steep_max_deg
                       && (kind != TF_VERDICT_BREAKS || joy->with_breaks);
      member[places[k]] = (guint8)joins;
      out->n_tilts += joins != FALSE;
      if (kind == TF_VERDICT_CANNOT_SAY)
        continue;
      guint8 bit = (guint8)(1u << (row->region % 8));
      out->n++;
      out->breaks += kind == TF_VERDICT_BREAKS;
      out->leaning += leaning != FALSE;
      out->regions += (seen[row->region / 8] & bit) == 0;
      seen[row->region / 8] |= bit;
    }
}

static gboolean
has_own_divides (const TfStudyQuick *quick, const TfStudy *variant, double later_s)
{
  return !(fabs (later_s) > 0.0)
         && memcmp (&variant->divide, &quick->study->divide, sizeof variant->divide) == 0;
}

gboolean
tf_study_quick_fill (const TfStudyQuick *quick, const TfStudy *variant, const TfSample *sample,
                     double later_s, TfWhatIf *row)
{
  if (variant->joy.estimator != TF_JOY_ROBUST || tf_sample_get_root (sample) != quick->all)
    return FALSE;
  g_autoptr (TfDivides) divides
      = has_own_divides (quick, variant, later_s) ? NULL : tf_study_dup_divides (variant);
  const Limits limits = { divides, later_s, variant->verdict.equator_deg, variant->verdict.steep_deg,
                          variant->sampling.rule != TF_SAMPLING_EVERY };
  g_autofree guint8 *member = g_new0 (guint8, tf_sample_get_n (quick->all) + 1);
  TfWhatIf found = *row;
  take_rows (quick, &variant->joy, sample, &limits, member, &found);
  found.slope = find_median (quick, member);
  found.share = found.n > 0 ? (double)found.breaks / found.n : NAN;
  if (isnan (found.slope) || found.n_tilts < MIN_ROWS)
    return FALSE;
  *row = found;
  return TRUE;
}
