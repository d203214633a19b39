/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "made-disk.h"

#include <math.h>

#include "tf-constants.h"

enum
{
  NETWORK = 25000,
  TRIES = 400,
  FRAGMENTS_MOST = 120,
};
static const double NETWORK_MX = 1e19;
static const double SAMPLE_MM = 3.0;
static const double OVERLAP = 0.65;
static const double ELIGIBLE_MX = 1e21, ELIGIBLE_MU = 0.4;
static const double HALF = 0.5, FALSE_SHARE = 0.28, SHARED = 0.2, JOINED = 0.25;
static const double TELL_TILT = 3.0;

static TfTime
disk_time (void)
{
  return tf_time_read ("2014-02-03T04:05:06Z");
}

static double
gaussian (GRand *rand)
{
  return sqrt (-2.0 * log (1.0 - g_rand_double (rand))) * cos (2.0 * TF_PI * g_rand_double (rand));
}

/* -- sources ----------------------------------------------------------------------------------------------- */

typedef struct
{
  double lat, cmd, l0; /* of the middle */
  double separation, tilt;
  int leading;
  double flux[2], radius[2]; /* leading, following; flux of each, Mx */
  guint fragments[2];
} Plan;

/* One pole as fragments about its middle, each on the sun and in @blobs. */
static void
add_pole (GArray *blobs, const Plan *plan, guint pole, GRand *rand)
{
  double side = pole == 0 ? 0.5 : -0.5, h = plan->lat < 0.0 ? -1.0 : 1.0;
  double dx = side * plan->separation * cos (plan->tilt * TF_DEG) / cos (plan->lat * TF_DEG);
  double dy = -h * side * plan->separation * sin (plan->tilt * TF_DEG);
  double lon = plan->l0 + plan->cmd + dx, lat = plan->lat + dy, weight[FRAGMENTS_MOST], sum = 0.0;
  guint n = plan->fragments[pole];
  for (guint k = 0; k < n; k++)
    sum += weight[k] = 0.3 + g_rand_double (rand);
  for (guint k = 0; k < n; k++)
    {
      double spread = n > 1 ? plan->radius[pole] : 0.0, x = spread * gaussian (rand), y = spread * gaussian (rand);
      TfBlob blob = { CLAMP (lat + y, -85.0, 85.0), tf_wrap_360 (lon + x / cos (lat * TF_DEG)),
                      n > 1 ? MAX (0.3, 0.25 * plan->radius[pole]) : plan->radius[pole],
                      (pole == 0 ? 1.0 : -1.0) * plan->leading * plan->flux[pole] * weight[k] / sum };
      g_array_append_val (blobs, blob);
    }
}

static double
blob_field (const GArray *blobs, const double (*centres)[3], const double unit[3])
{
  double field = 0.0;
  for (guint k = 0; k < blobs->len; k++)
    {
      const TfBlob *blob = &g_array_index (blobs, TfBlob, k);
      double s = blob->radius_deg * TF_DEG, r = TF_RADIUS_MM * 1e8;
      double c = unit[0] * centres[k][0] + unit[1] * centres[k][1] + unit[2] * centres[k][2];
      if ((1.0 - c) / (s * s) < 12.5)
        field += blob->flux_mx / (2.0 * TF_PI * s * s * r * r) * exp (-(1.0 - c) / (s * s));
    }
  return field;
}

/* The source's field on a grid about it, as if it were alone. */
static void
sample_source (MadeSource *source, const GArray *blobs, double l0)
{
  double (*centres)[3] = g_malloc_n (blobs->len, sizeof *centres);
  double step = SAMPLE_MM / TF_RADIUS_MM / TF_DEG, reach = 2.2 * source->half_deg + 2.0;
  double place[2][3] = { { 0 } };
  for (guint k = 0; k < blobs->len; k++)
    tf_sphere_unit (g_array_index (blobs, TfBlob, k).carrington_lon_deg, g_array_index (blobs, TfBlob, k).lat_deg, centres[k]);
  for (double lat = source->lat_deg - reach; lat <= source->lat_deg + reach; lat += step)
    for (double x = -reach; x <= reach; x += step)
      {
        MadePoint point;
        double mm = TF_RADIUS_MM * TF_DEG * step;
        tf_sphere_unit (l0 + source->cmd_deg + x / cos (lat * TF_DEG), lat, point.unit);
        point.flux = blob_field (blobs, (const double (*)[3])centres, point.unit) * mm * mm * 1e16;
        if (fabs (point.flux) < 1e15)
          continue;
        g_array_append_val (source->points, point);
        source->flux += fabs (point.flux);
        for (guint k = 0; k < 3; k++)
          place[point.flux > 0.0 ? 0 : 1][k] += point.flux * point.unit[k];
      }
  double lon[2], lat[2], tilt;
  for (guint k = 0; k < 3; k++)
    place[1][k] = -place[1][k];
  tf_sphere_lonlat (place[0], &lon[0], &lat[0]);
  tf_sphere_lonlat (place[1], &lon[1], &lat[1]);
  guint west = remainder (lon[0] - lon[1], 360.0) > 0.0 ? 0 : 1;
  source->leading = west == 0 ? 1 : -1;
  tf_tilt (lon[west], lat[west], lon[1 - west], lat[1 - west], FALSE, &source->bearing, &tilt);
  g_free (centres);
}

static void
add_source (MadeDisk *disk, const Plan *plan, MadeSource source, GRand *rand)
{
  g_autoptr (GArray) blobs = g_array_new (FALSE, FALSE, sizeof (TfBlob));
  source.points = g_array_new (FALSE, FALSE, sizeof (MadePoint));
  for (guint pole = 0; pole < 2; pole++)
    add_pole (blobs, plan, pole, rand);
  for (guint k = 0; k < blobs->len; k++)
    {
      g_autofree char *name = g_strdup_printf ("%u.%u", disk->sources->len, k);
      tf_sun_add_blob (disk->sun, name, source.plage ? "plage" : "bipole part", &g_array_index (blobs, TfBlob, k));
    }
  sample_source (&source, blobs, plan->l0);
  g_array_append_val (disk->sources, source);
}

/* How near the nearest bipole is, in sums of half lengths. */
static double
closeness (const MadeDisk *disk, const MadeSource *source, MadeSource **neighbour)
{
  double least = INFINITY;
  for (guint k = 0; k < disk->sources->len; k++)
    {
      MadeSource *other = &g_array_index (disk->sources, MadeSource, k);
      double d = tf_sphere_distance (source->cmd_deg, source->lat_deg, other->cmd_deg, other->lat_deg)
                 / (source->half_deg + other->half_deg);
      if (other->plage || d >= least)
        continue;
      least = d;
      *neighbour = other;
    }
  return least;
}

static void
draw_place (MadeSource *source, const MadeDisk *disk, gboolean gathered, GRand *rand)
{
  double h = g_rand_boolean (rand) ? 1.0 : -1.0;
  source->lat_deg = h * g_rand_double_range (rand, 5.0, 35.0);
  source->cmd_deg = g_rand_double_range (rand, -72.0, 72.0);
  if (!gathered || disk->sources->len < 3)
    return;
  const MadeSource *near = &g_array_index (disk->sources, MadeSource, g_rand_int_range (rand, 0, (gint32)disk->sources->len));
  source->lat_deg = CLAMP (near->lat_deg + 7.0 * gaussian (rand), -40.0, 40.0);
  source->cmd_deg = CLAMP (near->cmd_deg + 9.0 * gaussian (rand), -72.0, 72.0);
}

static void
add_bipole (MadeDisk *disk, const MadePlan *how, double l0, GRand *rand)
{
  double total = 5e20 * pow (60.0, g_rand_double (rand)); /* 5e20 to 3e22 */
  Plan plan = { .l0 = l0, .leading = g_rand_boolean (rand) ? 1 : -1 };
  MadeSource source = { .plage = FALSE }, *neighbour = NULL;
  plan.separation = 4.5 * pow (total / 1e22, 0.3) * exp (0.2 * gaussian (rand));
  plan.tilt = 20.0 * gaussian (rand);
  plan.radius[0] = 0.2 * plan.separation;
  plan.radius[1] = 0.3 * plan.separation;
  plan.flux[0] = plan.flux[1] = 0.5 * total;
  plan.fragments[0] = 1;
  plan.fragments[1] = (guint)g_rand_int_range (rand, 6, FRAGMENTS_MOST + 1);
  source.half_deg = 0.5 * plan.separation + plan.radius[0] + plan.radius[1];
  for (guint k = 0; k < TRIES; k++)
    {
      draw_place (&source, disk, how->gathered, rand);
      double d = closeness (disk, &source, &neighbour);
      guint shared = 0;
      for (guint j = 0; j < disk->sources->len; j++)
        shared += g_array_index (disk->sources, MadeSource, j).overlaps > 0;
      gboolean may = shared + 2 <= how->may_share * how->bipoles && d > 0.5 * how->closest;
      if (d < how->closest && !may)
        continue;
      if (d < OVERLAP)
        {
          source.overlaps++;
          neighbour->overlaps++;
        }
      plan.lat = source.lat_deg;
      plan.cmd = source.cmd_deg;
      add_source (disk, &plan, source, rand);
      return;
    }
}

/* Old wide fields, some nearly of one sign; on the free disks they keep off the bipoles' middles. */
static void
add_plage (MadeDisk *disk, const MadePlan *how, double l0, GRand *rand)
{
  double total = 1e21 * pow (8.0, g_rand_double (rand));
  Plan plan = { .l0 = l0, .leading = g_rand_boolean (rand) ? 1 : -1, .fragments = { 60, 60 } };
  MadeSource source = { .plage = TRUE }, *neighbour = NULL;
  double weaker = g_rand_double (rand);
  plan.separation = g_rand_double_range (rand, 5.0, 9.0);
  plan.tilt = 25.0 * gaussian (rand);
  plan.radius[0] = plan.radius[1] = g_rand_double_range (rand, 2.0, 4.0);
  plan.flux[0] = total / (1.0 + weaker);
  plan.flux[1] = total - plan.flux[0];
  source.half_deg = 0.5 * plan.separation + 2.0 * plan.radius[0];
  for (guint k = 0; k < TRIES; k++)
    {
      draw_place (&source, disk, FALSE, rand);
      if (!how->gathered && closeness (disk, &source, &neighbour) < 1.0)
        continue;
      plan.lat = source.lat_deg;
      plan.cmd = source.cmd_deg;
      add_source (disk, &plan, source, rand);
      return;
    }
}

static void
clear_source (gpointer data)
{
  g_array_unref (((MadeSource *)data)->points);
}

MadeDisk *
made_disk_new (const MadePlan *plan, guint32 seed)
{
  MadeDisk *disk = g_new0 (MadeDisk, 1);
  g_autoptr (GRand) rand = g_rand_new_with_seed (seed);
  double l0 = tf_observer_earth (disk_time ()).carrington_lon_deg;
  disk->sun = tf_sun_new (disk_time (), seed);
  disk->sources = g_array_new (FALSE, TRUE, sizeof (MadeSource));
  g_array_set_clear_func (disk->sources, clear_source);
  for (guint k = 0; k < plan->bipoles; k++)
    add_bipole (disk, plan, l0, rand);
  for (guint k = 0; k < plan->plages; k++)
    add_plage (disk, plan, l0, rand);
  if (!plan->bare)
    tf_sun_add_network (disk->sun, NETWORK, NETWORK_MX);
  return disk;
}

void
made_disk_free (MadeDisk *disk)
{
  if (disk == NULL)
    return;
  tf_sun_free (disk->sun);
  g_array_unref (disk->sources);
  g_free (disk);
}

TfFrame *
made_disk_shoot (const MadeDisk *disk, double scale_arcsec, guint size, double noise_gauss, guint32 seed, const TfWork *work)
{
  TfShot shot;
  g_autoptr (GError) error = NULL;
  tf_shot_init (&shot);
  shot.size = size != 0 ? size : (guint)ceil (2048.0 / scale_arcsec);
  shot.scale_arcsec = scale_arcsec;
  shot.noise_gauss = noise_gauss;
  shot.quantum_gauss = 0.0;
  shot.psf_arcsec = 1.5 * scale_arcsec;
  shot.supersample = scale_arcsec < 1.0 ? 1 : scale_arcsec < 4.0 ? 2 : 3;
  TfFrame *frame = tf_sun_shoot (disk->sun, disk_time (), &shot, seed, work, &error);
  g_assert_no_error (error);
  return frame;
}

/* -- score ------------------------------------------------------------------------------------------------- */

void
made_plan_of (MadePlan *plan, guint k, gboolean crowded)
{
  guint activity = crowded ? 9 : k % 10;
  *plan = (MadePlan){ .bipoles = activity == 0 ? 0 : 1 + activity * 3 / 2, .plages = (activity + 1) / 2, .closest = 1.0,
                      .may_share = 0.2 };
  if (crowded)
    *plan = (MadePlan){ .bipoles = 16, .plages = 4, .closest = OVERLAP, .may_share = 0.0, .gathered = TRUE };
}

double
made_noise_of (guint k)
{
  const double noise[] = { 5.0, 10.0, 20.0, 30.0 };
  return noise[k % G_N_ELEMENTS (noise)];
}

void
made_score_init (MadeScore *score)
{
  *score = (MadeScore){ .least_hints = G_MAXUINT, .tilt_errors = g_array_new (FALSE, FALSE, sizeof (double)) };
}

void
made_score_clear (MadeScore *score)
{
  g_clear_pointer (&score->tilt_errors, g_array_unref);
}

/* Unsigned flux of a source inside an outline, Mx. */
static double
flux_inside (const MadeSource *source, const TfHint *hint, double l0)
{
  double lon, lat, radius, flux = 0.0;
  tf_outline_get_cap (hint->outline, &lon, &lat, &radius);
  if (tf_sphere_distance (lon, lat, l0 + source->cmd_deg, source->lat_deg) > radius + 2.5 * source->half_deg + 3.0)
    return 0.0;
  for (guint k = 0; k < source->points->len; k++)
    {
      const MadePoint *point = &g_array_index (source->points, MadePoint, k);
      if (tf_outline_contains (hint->outline, point->unit))
        flux += fabs (point->flux);
    }
  return flux;
}

/* Whole on the frame, and far enough from the limb. */
static gboolean
is_eligible (const MadeSource *source, const TfFrame *frame)
{
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double l0 = tf_geometry_central_carrington (g), x, y, mu;
  double margin = source->half_deg * TF_DEG * TF_RADIUS_MM / (g->distance_mm - TF_RADIUS_MM) / TF_ARCSEC
                  / tf_geometry_scale_arcsec (g);
  if (source->plage || !(source->flux > ELIGIBLE_MX)
      || !tf_geometry_sun_to_pixel (g, l0 + source->cmd_deg, source->lat_deg, &x, &y, &mu))
    return FALSE;
  return mu > ELIGIBLE_MU && x > margin && y > margin && x < g->width - margin && y < g->height - margin;
}

static void
score_found (MadeScore *score, const MadeSource *source, const TfHint *hint)
{
  double error = fabs (remainder (hint->measure.axis_bearing_deg - source->bearing, 180.0));
  score->found++;
  if (error > TELL_TILT)
    g_test_message ("  tilt off by %.1f: N%+.1f W%+.1f flux %.2e (measured %.2e, imbalance %+.2f) separation %.0f Mm, tilt's own "
                    "uncertainty %.1f",
                    error, source->lat_deg, source->cmd_deg, source->flux, hint->measure.flux_unsigned_mx,
                    hint->measure.imbalance, hint->measure.separation_mm, hint->measure.tilt_terms.total);
  score->wrong_polarity += hint->measure.leading_polarity != source->leading;
  g_array_append_val (score->tilt_errors, error);
}

/* @inside: the source's flux in every hint. */
static void
score_source (MadeScore *score, const MadeDisk *disk, guint k, const GPtrArray *hints, const double *inside)
{
  const MadeSource *source = &g_array_index (disk->sources, MadeSource, k);
  const double *mine = inside + (gsize)k * hints->len;
  guint best = 0, parts = 0;
  double other = 0.0;
  score->eligible++;
  for (guint j = 0; j < hints->len; j++)
    {
      best = mine[j] > mine[best] ? j : best;
      parts += mine[j] >= SHARED * source->flux;
    }
  const TfHint *hint = hints->len > 0 ? g_ptr_array_index (hints, best) : NULL;
  if (hint != NULL && mine[best] >= HALF * source->flux && mine[best] >= HALF * hint->measure.flux_unsigned_mx)
    {
      if (!hint->unipolar)
        score_found (score, source, hint);
      else
        score->unipolar++;
      return;
    }
  for (guint s = 0; s < disk->sources->len && hint != NULL; s++)
    other = MAX (other, s != k ? inside[(gsize)s * hints->len + best] : 0.0);
  gboolean joined = hint != NULL && mine[best] >= HALF * source->flux && other >= JOINED * mine[best];
  gboolean split = !joined && parts >= 2;
  score->joined += joined;
  score->split += split;
  score->missed += !joined && !split;
  g_test_message ("  %s: N%+.1f W%+.1f flux %.2e half length %.1f overlaps %u: %.2f of it in its best hint of %.2e, most of another "
                  "there %.2e, parts %u",
                  joined ? "joined" : split ? "split" : "missed", source->lat_deg, source->cmd_deg, source->flux,
                  source->half_deg, source->overlaps,
                  hint != NULL ? mine[best] / source->flux : 0.0, hint != NULL ? hint->measure.flux_unsigned_mx : 0.0, other,
                  parts);
}

static gboolean
is_false (const TfHint *hint, const double *inside, guint j, guint sources, guint n_hints)
{
  double most = 0.0;
  for (guint k = 0; k < sources; k++)
    most = MAX (most, inside[(gsize)k * n_hints + j]);
  return !hint->unipolar && most < FALSE_SHARE * hint->measure.flux_unsigned_mx;
}

void
made_score_add (MadeScore *score, const MadeDisk *disk, const TfFrame *frame, const GPtrArray *hints)
{
  guint sources = disk->sources->len;
  double l0 = tf_geometry_central_carrington (tf_frame_get_geometry (frame));
  g_autofree double *inside = g_new0 (double, (gsize)sources * hints->len + 1);
  for (guint k = 0; k < sources; k++)
    for (guint j = 0; j < hints->len; j++)
      inside[(gsize)k * hints->len + j]
          = flux_inside (&g_array_index (disk->sources, MadeSource, k), g_ptr_array_index (hints, j), l0);
  score->disks++;
  score->hints += hints->len;
  score->least_hints = MIN (score->least_hints, hints->len);
  score->most_hints = MAX (score->most_hints, hints->len);
  for (guint j = 0; j < hints->len; j++)
    {
      const TfHint *hint = g_ptr_array_index (hints, j);
      score->bipole_hints += !hint->unipolar;
      score->false_hints += is_false (hint, inside, j, sources, hints->len);
    }
  for (guint k = 0; k < sources; k++)
    if (is_eligible (&g_array_index (disk->sources, MadeSource, k), frame))
      score_source (score, disk, k, hints, inside);
}

static gint
by_size (gconstpointer a, gconstpointer b)
{
  double x = *(const double *)a, y = *(const double *)b;
  return (x > y) - (x < y);
}

double
made_score_tilt (const MadeScore *score, double share)
{
  guint n = score->tilt_errors->len;
  if (n == 0)
    return NAN;
  g_array_sort (score->tilt_errors, by_size);
  return g_array_index (score->tilt_errors, double, MIN (n - 1, (guint)(share * n)));
}

char *
made_score_dup_text (const MadeScore *score)
{
  return g_strdup_printf ("%u disks, %u to %u hints; of %u bipoles found %u (%.1f %%), missed %u, split %u, joined %u, unipolar "
                          "%u; wrong polarity %u; false %u of %u bipole hints; tilt error median %.2f, 90 %% within %.2f deg",
                          score->disks, score->least_hints, score->most_hints, score->eligible, score->found,
                          100.0 * score->found / MAX (score->eligible, 1), score->missed, score->split, score->joined,
                          score->unipolar, score->wrong_polarity, score->false_hints, score->bipole_hints,
                          made_score_tilt (score, 0.5), made_score_tilt (score, 0.9));
}
