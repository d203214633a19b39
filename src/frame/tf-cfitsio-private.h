/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#pragma once

/* CFITSIO, loaded when first needed. It brings the libraries of its network drivers along, 34 of
 * them, and loading these takes as long as a third of reading a frame; a frame that is packed row
 * by row, as the archives give them, is read without (tf-fits-rows.c).
 *
 * A call reads cfitsio ()->fits_read_key (...): the names in the table are turned into those of
 * the library by CFITSIO's own header, as its calls are. */

#include <fitsio.h>
#include <glib.h>

#define TF_CFITSIO_CALLS(CALL)                                                                     \
  CALL (fits_clear_errmsg)                                                                         \
  CALL (fits_close_file)                                                                           \
  CALL (fits_create_diskfile)                                                                      \
  CALL (fits_create_img)                                                                           \
  CALL (fits_encode_chksum)                                                                        \
  CALL (fits_flush_file)                                                                           \
  CALL (fits_free_memory)                                                                          \
  CALL (fits_get_chksum)                                                                           \
  CALL (fits_get_colnum)                                                                           \
  CALL (fits_get_errstatus)                                                                        \
  CALL (fits_get_hdu_type)                                                                         \
  CALL (fits_get_hduaddrll)                                                                        \
  CALL (fits_get_img_paramll)                                                                      \
  CALL (fits_hdr2str)                                                                              \
  CALL (fits_is_compressed_image)                                                                  \
  CALL (fits_is_reentrant)                                                                         \
  CALL (fits_modify_key_str)                                                                       \
  CALL (fits_movabs_hdu)                                                                           \
  CALL (fits_open_diskfile)                                                                        \
  CALL (fits_read_col)                                                                             \
  CALL (fits_read_descriptll)                                                                      \
  CALL (fits_read_key)                                                                             \
  CALL (fits_read_pixll)                                                                           \
  CALL (fits_set_bscale)                                                                           \
  CALL (fits_set_compression_type)                                                                 \
  CALL (fits_set_tile_dim)                                                                         \
  CALL (fits_update_key_str)                                                                       \
  CALL (fits_write_date)                                                                           \
  CALL (fits_write_img)                                                                            \
  CALL (fits_write_key)                                                                            \
  CALL (fits_write_key_longstr)                                                                    \
  CALL (fits_write_key_longwarn)                                                                   \
  CALL (fits_write_record)

typedef struct
{
#define TF_FIELD(name) __typeof__ (name) *name;
  TF_CFITSIO_CALLS (TF_FIELD)
#undef TF_FIELD
} TfCfitsio;

/** tf_cfitsio_load: FALSE where the library is not there; @why: (out) (nullable): in the loader's
 * words. May be called from any thread. */
gboolean tf_cfitsio_load (const char **why);

/** cfitsio: its calls; only after tf_cfitsio_load said TRUE. */
const TfCfitsio *cfitsio (void);
