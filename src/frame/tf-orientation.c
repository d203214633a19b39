/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include <math.h>

#include "tf-constants.h"
#include "tf-rotation.h"
#include "tf-witness.h"

/* Four readings of the same pixels: as given, turned by 180 deg, east and west exchanged, north
 * and south exchanged. Under each, the field of the earlier frame is carried by the Sun's
 * rotation to the time of the later one and correlated with it on a grid of one degree. Right
 * or north-south exchanged, features move west; turned or east-west exchanged, east. The two of
 * a pair differ by the curvature of the paths alone, which needs |B0| > 3 deg. */

enum
{
  READINGS = 4,
  LON_REACH = 60,
  LAT_REACH = 50,
};

#define CLEAR     0.10 /* a reading must win by this much in correlation */
#define SHAPE     0.03 /* and within its pair by this much */
#define LEAST     0.25 /* correlation that is a match at all */
#define CAP_GAUSS 300.0

/* The value at a place under a reading; NaN off the disk or without a value. */
static double
value_at (const TfFrame *frame, int reading, guint level, double lon, double lat)
{
  static const double sign[READINGS][2] = { { 1, 1 }, { -1, -1 }, { -1, 1 }, { 1, -1 } };
  const TfGeometry *g = tf_frame_get_geometry (frame);
  double x, y, tx, ty;
  guint width, height;
  const float *data = tf_frame_get_level (frame, level, &width, &height);
  if (data == NULL || !tf_geometry_sun_to_pixel (g, lon, lat, &x, &y, NULL))
    return NAN;
  tf_geometry_pixel_to_projective (g, x, y, &tx, &ty);
  if (!tf_geometry_projective_to_pixel (g, sign[reading][0] * tx, sign[reading][1] * ty, &x, &y))
    return NAN;
  double u = floor ((x - 0.5) / (1u << level)), v = floor ((y - 0.5) / (1u << level));
  if (!(u >= 0 && v >= 0 && u < width && v < height))
    return NAN;
  double value = (double)data[(gsize)v * width + (gsize)u];
  return CLAMP (value, -CAP_GAUSS, CAP_GAUSS);
}

/* The level whose pixels are about a degree at the centre of the disk. */
static guint
level_of_a_degree (const TfFrame *frame)
{
  double size = tf_geometry_disk_radius (tf_frame_get_geometry (frame)) * TF_DEG;
  guint level = 0;
  while (size > 1.42 && level < tf_frame_get_n_levels (frame))
    {
      size /= 2;
      level++;
    }
  return level;
}

static double
correlate (const TfFrame *earlier, const TfFrame *later, int reading)
{
  const TfGeometry *g = tf_frame_get_geometry (earlier), *h = tf_frame_get_geometry (later);
  guint level_a = level_of_a_degree (earlier), level_b = level_of_a_degree (later), n = 0;
  double seconds = tf_frame_get_info (later)->time.s - tf_frame_get_info (earlier)->time.s;
  double centre = tf_geometry_central_carrington (g),
         later_centre = tf_geometry_central_carrington (h);
  double ab = 0, aa = 0, bb = 0;
  for (int lat = -LAT_REACH; lat <= LAT_REACH; lat++)
    for (int cmd = -LON_REACH; cmd <= LON_REACH; cmd++)
      {
        double lon = centre + cmd, moved = lon + tf_rotation_carry (0, lat, seconds);
        if (fabs (tf_wrap_180 (moved - later_centre)) > LON_REACH)
          continue;
        double a = value_at (earlier, reading, level_a, lon, lat),
               b = value_at (later, reading, level_b, moved, lat);
        if (isnan (a) || isnan (b))
          continue;
        ab += a * b;
        aa += a * a;
        bb += b * b;
        n++;
      }
  return n > 500 && aa > 0 && bb > 0 ? ab / sqrt (aa * bb) : NAN;
}

static gboolean
is_apart (double hours)
{
  return hours >= 3 && hours <= 120;
}

static TfNote *
why_not (const TfFrame *earlier, const TfFrame *later)
{
  const TfFrameInfo *a = tf_frame_get_info (earlier), *b = tf_frame_get_info (later);
  double hours = (b->time.s - a->time.s) / 3600;
  if (a->kind != TF_KIND_DISK || b->kind != TF_KIND_DISK)
    return tf_note_new ("witness-kind", "");
  if (g_strcmp0 (a->instrument, b->instrument) != 0)
    return tf_note_new ("witness-companions", "");
  if (!is_apart (hours))
    return tf_note_new ("witness-time", "d", hours);
  return NULL;
}

static TfOrientation
decide (const double score[READINGS], double b0, TfNote **reason)
{
  double west = MAX (score[0], score[3]), east = MAX (score[1], score[2]);
  gboolean given = west > east;
  double best = MAX (west, east), other = MIN (west, east);
  if (!(best >= LEAST))
    *reason = tf_note_new ("witness-empty", "");
  else if (!(best - other >= CLEAR))
    *reason = tf_note_new ("witness-unclear", "dd", score[0], given ? east : west);
  if (*reason != NULL)
    return TF_WITNESS_CANNOT_SAY;
  double shape = given ? score[0] - score[3] : score[1] - score[2];
  if (fabs (b0) > 3 && shape < -SHAPE)
    return TF_WITNESS_MIRRORED;
  return given ? TF_WITNESS_AGREES : TF_WITNESS_TURNED;
}

TfOrientation
tf_orientation_witness (const TfFrame *earlier, const TfFrame *later, double score[4],
                        TfNote **reason)
{
  double own_score[READINGS] = { NAN, NAN, NAN, NAN };
  g_autoptr (TfNote) why = why_not (earlier, later);
  TfOrientation answer = TF_WITNESS_CANNOT_SAY;
  if (why == NULL)
    {
      for (int k = 0; k < READINGS; k++)
        own_score[k] = correlate (earlier, later, k);
      answer = decide (own_score, tf_frame_get_geometry (earlier)->observer.b0_deg, &why);
    }
  for (int k = 0; k < READINGS && score != NULL; k++)
    score[k] = own_score[k];
  if (reason != NULL)
    *reason = g_steal_pointer (&why);
  return answer;
}

gboolean
tf_orientation_fits (const TfFrameInfo *one, const TfFrameInfo *other)
{
  g_return_val_if_fail (one != NULL && other != NULL, FALSE);
  return one->kind == TF_KIND_DISK && other->kind == TF_KIND_DISK
         && one->role == TF_ROLE_FIELD && other->role == TF_ROLE_FIELD
         && g_strcmp0 (one->instrument, other->instrument) == 0
         && is_apart (fabs (one->time.s - other->time.s) / 3600);
}

const char *
tf_orientation_name (TfOrientation answer)
{
  static const char *const names[] = { [TF_WITNESS_CANNOT_SAY] = "cannot say",
                                       [TF_WITNESS_AGREES] = "agrees",
                                       [TF_WITNESS_TURNED] = "turned",
                                       [TF_WITNESS_MIRRORED] = "mirrored" };
  return names[answer];
}

TfNote *
tf_orientation_note (TfOrientation answer, const TfNote *reason, TfTime other)
{
  g_autofree char *time = tf_time_dup_iso (other, 0);
  const char *when = time != NULL ? time : "?";
  switch (answer)
    {
    case TF_WITNESS_AGREES:
      return tf_note_new ("orientation-agrees", "s", when);
    case TF_WITNESS_TURNED:
      return tf_note_new ("orientation-turned", "s", when);
    case TF_WITNESS_MIRRORED:
      return tf_note_new ("orientation-mirrored", "s", when);
    case TF_WITNESS_CANNOT_SAY:
    default:
      return reason != NULL ? tf_note_copy (reason) : tf_note_new ("witness-empty", "");
    }
}
