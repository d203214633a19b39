/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* TfFrame: one magnetogram: pixels in gauss, geometry, noise, float pyramid.
 *
 * Immutable once open and reference counted, so that threads may share it. Pixels are row-major
 * floats, index (y-1)*width + (x-1) for FITS pixel (x, y); NaN is "no value" (BLANK, fill, off
 * the disk, missing). The field is as observed (line of sight or radial, info->field) and in
 * gauss, not scaled between instruments.
 */

#include <glib.h>

#include "tf-bands.h"
#include "tf-frame-info.h"

G_BEGIN_DECLS

#define TF_FRAME_ERROR (tf_frame_error_quark ())
GQuark tf_frame_error_quark (void);
typedef enum
{
  TF_FRAME_ERROR_READ,    /* not there, not FITS, cut short, damaged: see the message */
  TF_FRAME_ERROR_REFUSED, /* good FITS, not a usable field; message: the refusal's sentence */
  TF_FRAME_ERROR_CANCELLED,
  TF_FRAME_ERROR_WRITE,
  TF_FRAME_ERROR_MEMORY,
} TfFrameError;

typedef struct _TfFrame TfFrame;

/** TfFrameSpec: which picture of the file; zero-initialise for the defaults. */
typedef struct
{
  int hdu;   /* 1-based as FITS counts (1 = primary); 0: the first with a usable picture */
  int plane; /* 1-based plane of a cube; 0: 1 */
} TfFrameSpec;

/** tf_frame_look: header only. (transfer full); NULL and READ only when no picture's header can
 * be read. Cheap: no pixels.
 * @hdu_used: (out) (nullable) */
TfFrameInfo *
tf_frame_look (const char *path, const TfFrameSpec *spec, int *hdu_used, GError **error);
/**
 * tf_frame_open: everything: pixels to gauss, fill to NaN, noise, pyramid, cautions of the
 * pixels (limb fit, missing data). The size a header claims is checked against the file before
 * memory is asked for. Rows are read in parallel, one CFITSIO handle a thread, when @work has
 * workers.
 * Returns: NULL with an error; REFUSED when info->role is not FIELD.
 */
TfFrame *
tf_frame_open (const char *path, const TfFrameSpec *spec, const TfWork *work, GError **error);
/** tf_frame_open_companion: the same for role INTENSITY (values as stored, no noise). */
TfFrame *tf_frame_open_companion (const char *path, const TfFrameSpec *spec, const TfWork *work,
                                  GError **error);
/** tf_frame_new: from memory (simulator, tests): takes @info; @pixels width*height floats in G,
 * copied. Noise and pyramid are made. */
TfFrame *tf_frame_new (TfFrameInfo *info, const float *pixels, const TfWork *work);
/** tf_frame_with_geometry: the same pixels under a corrected geometry (a person's correction);
 * noise is made anew, the limb is judged anew, and a note says so. */
TfFrame *
tf_frame_with_geometry (const TfFrame *frame, const TfGeometry *geometry, const TfWork *work);
TfFrame *tf_frame_ref (TfFrame *frame);
void tf_frame_unref (TfFrame *frame);

const TfFrameInfo *tf_frame_get_info (const TfFrame *frame);
const TfGeometry *tf_frame_get_geometry (const TfFrame *frame);
const char *tf_frame_get_path (const TfFrame *frame); /* "" for memory */
int tf_frame_get_hdu (const TfFrame *frame);
guint tf_frame_get_width (const TfFrame *frame);
guint tf_frame_get_height (const TfFrame *frame);
const float *tf_frame_get_pixels (const TfFrame *frame);
/** tf_frame_value: G at the pixel nearest to FITS (x, y); NaN outside. */
double tf_frame_value (const TfFrame *frame, double x, double y);
/** tf_frame_get_cautions: the header's and the pixels' together. */
const TfNotes *tf_frame_get_cautions (const TfFrame *frame);

/* -- noise: 1.4826 MAD of weak pixels by rings of mu (maps: by latitude), iterated, interpolated  */
typedef struct
{
  double mu;    /* middle of the ring; maps: |latitude|, deg */
  double gauss; /* one-sigma of a pixel, as observed */
} TfNoiseRing;
const TfNoiseRing *tf_frame_get_noise (const TfFrame *frame, guint *n);
/** tf_frame_noise_at: sigma(mu), G, of the field as observed; linear between rings, held at the
 * ends. Maps: pass |latitude|. */
double tf_frame_noise_at (const TfFrame *frame, double mu);
/** tf_frame_noise_correlation: factor by which the variance of a sum of neighbouring pixels
 * exceeds that of independent ones (>= 1), measured from the weak pixels' autocorrelation. */
double tf_frame_noise_correlation (const TfFrame *frame);

/* -- pyramid --------------------------------------------------------------------------------- */
/** tf_frame_get_n_levels: of the last level. */
guint tf_frame_get_n_levels (const TfFrame *frame);
/** tf_frame_get_level: box means (NaN-aware) of 2^level pixels a side; level 0 is the frame.
 * NULL past the last. Level 1 is made by whoever asks for it first: a pass over the pixels. */
const float *tf_frame_get_level (const TfFrame *frame, guint level, guint *width, guint *height);

/* -- checksum -------------------------------------------------------------------------------- */
/** tf_frame_file_checksum: SHA-256 of the file's bytes, hex. */
char *tf_frame_file_checksum (const char *path, const TfCancel *cancel, GError **error);

G_DEFINE_AUTOPTR_CLEANUP_FUNC (TfFrame, tf_frame_unref)

G_END_DECLS
