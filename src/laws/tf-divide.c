/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-divide.h"

#include <math.h>
#include <string.h>
#include <glib/gi18n-lib.h>

#include "tf-constants.h"

#define MONTH_S (365.25 * TF_DAY_S / 12.0)
/* The early and late wings: the year before the divide begins to act and the year after it ends. */
#define WING_MONTHS 12.0

#define O(member) offsetof (TfDivideParams, member)
const TfOption tf_divide_options[] = {
  { "divide-before", TF_OPTION_INT, "months", 24, 0, 48, NULL,
    N_ ("how long before a minimum the divide acts"), O (before_months) },
  { "divide-after", TF_OPTION_INT, "months", 18, 0, 36, NULL,
    N_ ("how long after a minimum the divide acts"), O (after_months) },
  { "divide-band", TF_OPTION_NUMBER, "deg", 4, 0, 20, NULL,
    N_ ("within this of the divide the cycle is unsure"), O (band_deg) },
  { "divide-far-lat", TF_OPTION_NUMBER, "deg", 22, 0, 90, NULL,
    N_ ("in the year before the divide acts, unsure from this latitude up"), O (far_lat_deg) },
  { "divide-near-lat", TF_OPTION_NUMBER, "deg", 6, 0, 90, NULL,
    N_ ("in the year after the divide acts, unsure below this latitude"), O (near_lat_deg) },
  { "divide-late", TF_OPTION_NUMBER, "months", 48, 0, 120, NULL,
    N_ ("time after the last maximum from which an unlisted next minimum makes high latitudes "
        "unsure"),
    O (late_months) },
  { "divide-late-lat", TF_OPTION_NUMBER, "deg", 18, 0, 90, NULL,
    N_ ("the latitude above which that is so"), O (late_lat_deg) },
  { "cycle-by-date", TF_OPTION_BOOL, "", 0, 0, 1, NULL, N_ ("tell the cycle by the date alone"),
    O (by_date_only) },
  { "next-minimum", TF_OPTION_NUMBER, "year", NAN, 2025, 2100, NULL,
    N_ ("a provisional next minimum, decimal year; every result that leans on it says so"),
    O (provisional_year) },
  { NULL },
};
#undef O

/* A divide that a person drew: |lat| linear between points, the end points' latitudes held beyond
 * them. */
typedef struct
{
  int cycle, hemisphere;
  guint n;
  double *times, *lats; /* s of TT; deg */
} Moved;

struct _TfDivides
{
  TfDivideParams params;
  int last;      /* the last cycle with a minimum, provisional one included */
  double late_s; /* from here on high latitudes may belong to a cycle with no listed minimum;
                    infinite when one is given */
  double
      leans_s; /* from here on a sure call leans on the provisional minimum; infinite without one */
  double *minima; /* minima[n]: beginning of cycle n, s of TT; [0] unused */
  GArray *moved;  /* of Moved */
};

static void
moved_clear (gpointer data)
{
  Moved *moved = data;
  g_free (moved->times);
  g_free (moved->lats);
}

TfDivides *
tf_divides_new (const TfDivideParams *params)
{
  TfDivides *divides = g_atomic_rc_box_new0 (TfDivides);
  divides->params = *params;
  divides->moved = g_array_new (FALSE, FALSE, sizeof (Moved));
  g_array_set_clear_func (divides->moved, moved_clear);
  for (const TfCycle *c = tf_cycles; c->number != 0; c++)
    divides->last = c->number;
  divides->minima = g_new0 (double, divides->last + 2);
  for (int n = 1; n <= divides->last; n++)
    divides->minima[n] = tf_cycle_minimum (n).s;
  double maximum = tf_cycle_maximum (divides->last).s;
  divides->late_s = maximum + params->late_months * MONTH_S;
  divides->leans_s = INFINITY;
  double provisional
      = isnan (params->provisional_year) ? NAN : tf_time_from_year (params->provisional_year).s;
  if (provisional > maximum)
    {
      divides->minima[++divides->last] = provisional;
      divides->leans_s
          = fmin (divides->late_s, provisional - (params->before_months + WING_MONTHS) * MONTH_S);
      divides->late_s = INFINITY;
    }
  return divides;
}

static const Moved *
find_moved (const TfDivides *divides, int cycle, int hemisphere)
{
  for (guint k = 0; k < divides->moved->len; k++)
    {
      const Moved *moved = &g_array_index (divides->moved, Moved, k);
      if (moved->cycle == cycle && moved->hemisphere == hemisphere)
        return moved;
    }
  return NULL;
}

static void
add_moved (TfDivides *divides, int cycle, int hemisphere, const double *times, const double *lats,
           guint n)
{
  Moved moved = { cycle, hemisphere, n, g_memdup2 (times, n * sizeof *times),
                  g_memdup2 (lats, n * sizeof *lats) };
  g_array_append_val (divides->moved, moved);
}

TfDivides *
tf_divides_with (const TfDivides *divides, int cycle, int hemisphere, const TfTime *times,
                 const double *lats, guint n)
{
  g_return_val_if_fail (divides != NULL && (n == 0 || (times != NULL && lats != NULL)), NULL);
  TfDivides *result = tf_divides_new (&divides->params);
  int side = hemisphere < 0 ? -1 : 1;
  for (guint k = 0; k < divides->moved->len; k++)
    {
      const Moved *old = &g_array_index (divides->moved, Moved, k);
      if (old->cycle != cycle || old->hemisphere != side)
        add_moved (result, old->cycle, old->hemisphere, old->times, old->lats, old->n);
    }
  if (n == 0)
    return result;
  g_autofree double *seconds = g_new (double, n);
  for (guint k = 0; k < n; k++)
    seconds[k] = times[k].s;
  add_moved (result, cycle, side, seconds, lats, n);
  return result;
}

TfDivides *
tf_divides_with_params (const TfDivides *divides, const TfDivideParams *params)
{
  TfDivides *result = tf_divides_new (params);
  for (guint k = 0; k < divides->moved->len; k++)
    {
      const Moved *moved = &g_array_index (divides->moved, Moved, k);
      add_moved (result, moved->cycle, moved->hemisphere, moved->times, moved->lats, moved->n);
    }
  return result;
}

TfDivides *
tf_divides_ref (TfDivides *divides)
{
  return g_atomic_rc_box_acquire (divides);
}

static void
divides_clear (gpointer data)
{
  TfDivides *divides = data;
  g_free (divides->minima);
  g_array_unref (divides->moved);
}

void
tf_divides_unref (TfDivides *divides)
{
  if (divides != NULL)
    g_atomic_rc_box_release_full (divides, divides_clear);
}

const TfDivideParams *
tf_divides_get_params (const TfDivides *divides)
{
  return &divides->params;
}

int
tf_divides_get_last (const TfDivides *divides)
{
  return divides->last;
}

TfTime
tf_divides_get_minimum (const TfDivides *divides, int number)
{
  gboolean known = number >= 1 && number <= divides->last;
  return known ? (TfTime){ divides->minima[number] } : TF_TIME_UNKNOWN;
}

guint
tf_divides_get_moved (const TfDivides *divides, int cycle, int hemisphere, const double **times,
                      const double **lats)
{
  const Moved *moved = find_moved (divides, cycle, hemisphere < 0 ? -1 : 1);
  *times = moved != NULL ? moved->times : NULL;
  *lats = moved != NULL ? moved->lats : NULL;
  return moved != NULL ? moved->n : 0;
}

gboolean
tf_divides_is_moved (const TfDivides *divides, int cycle, int hemisphere)
{
  return find_moved (divides, cycle, hemisphere < 0 ? -1 : 1) != NULL;
}

static double
moved_latitude (const Moved *moved, double s)
{
  guint after = 0;
  while (after < moved->n && moved->times[after] <= s)
    after++;
  if (after == 0)
    return moved->lats[0];
  if (after == moved->n)
    return moved->lats[moved->n - 1];
  double span = moved->times[after] - moved->times[after - 1];
  double part = (s - moved->times[after - 1]) / span;
  return moved->lats[after - 1] + part * (moved->lats[after] - moved->lats[after - 1]);
}

double
tf_divides_latitude (const TfDivides *divides, int cycle, int hemisphere, TfTime time)
{
  if (cycle < 2 || cycle > divides->last)
    return NAN;
  double months = (time.s - divides->minima[cycle]) / MONTH_S;
  if (!(months >= -divides->params.before_months && months <= divides->params.after_months))
    return NAN;
  const Moved *moved = find_moved (divides, cycle, hemisphere < 0 ? -1 : 1);
  if (moved != NULL)
    return moved_latitude (moved, time.s);
  double old_months = (time.s - divides->minima[cycle - 1]) / MONTH_S;
  return 0.5 * (tf_cycle_latitude (old_months) + tf_cycle_latitude (months));
}

static TfCycleCall
sure_call (const TfDivides *divides, int number, double s, const char *reason)
{
  return (TfCycleCall){ number, 0, TRUE, s >= divides->leans_s ? "cycle-provisional" : reason };
}

static TfCycleCall
unsure_call (int number, int other, const char *reason)
{
  return (TfCycleCall){ number, other, FALSE, reason };
}

/* The call where the divide of the minimum beginning @young acts. */
static TfCycleCall
call_by_divide (const TfDivides *divides, int young, double s, double lat_deg)
{
  int hemisphere = lat_deg < 0.0 ? -1 : 1;
  double above = fabs (lat_deg) - tf_divides_latitude (divides, young, hemisphere, (TfTime){ s });
  int likely = above > 0.0 ? young : young - 1;
  if (!(fabs (above) > divides->params.band_deg))
    return unsure_call (likely, likely == young ? young - 1 : young, "cycle-near-divide");
  return sure_call (divides, likely, s, "cycle-by-divide");
}

/* The cycle whose minimum is the last at or before @s; 0 before the first. */
static int
number_by_date (const TfDivides *divides, double s)
{
  int number = 0;
  while (number < divides->last && divides->minima[number + 1] <= s)
    number++;
  return number;
}

TfCycleCall
tf_divides_call (const TfDivides *divides, TfTime time, double lat_deg)
{
  const TfDivideParams *p = &divides->params;
  if (!tf_time_is_known (time))
    return unsure_call (0, 0, "cycle-no-time");
  int number = number_by_date (divides, time.s);
  if (number == 0)
    return unsure_call (0, 0, "cycle-before-table");
  double since = number > 1 ? (time.s - divides->minima[number]) / MONTH_S : INFINITY;
  double until
      = number < divides->last ? (divides->minima[number + 1] - time.s) / MONTH_S : INFINITY;
  gboolean late = number == divides->last && time.s > divides->late_s;
  gboolean near
      = since < p->after_months + WING_MONTHS || until < p->before_months + WING_MONTHS || late;
  if (p->by_date_only || !near)
    return sure_call (divides, number, time.s, "cycle-by-date");
  if (isnan (lat_deg))
    return unsure_call (number, 0, "cycle-no-latitude");
  if (since <= p->after_months)
    return call_by_divide (divides, number, time.s, lat_deg);
  if (until <= p->before_months)
    return call_by_divide (divides, number + 1, time.s, lat_deg);
  if (since < p->after_months + WING_MONTHS && fabs (lat_deg) < p->near_lat_deg)
    return unsure_call (number, number - 1, "cycle-late-wing");
  if (until < p->before_months + WING_MONTHS && fabs (lat_deg) >= p->far_lat_deg)
    return unsure_call (number, number + 1, "cycle-early-wing");
  if (late && fabs (lat_deg) > p->late_lat_deg)
    return unsure_call (number, number + 1, "cycle-next-minimum-unknown");
  return sure_call (divides, number, time.s, "cycle-by-date");
}
