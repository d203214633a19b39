/* SPDX-License-Identifier: GPL-3.0-or-later
 * SPDX-FileCopyrightText: The Tiltfield developers
 */
#include "tf-pool.h"

#include <malloc.h>
#include <stdlib.h>
#include <sys/mman.h>

enum
{
  HUGE_PAGE = 2 << 20,
  KEEP = 4, /* idle buffers kept by a pool */
  HEAP_MOST = 16 << 20, /* larger room is asked of the system and given back to it */
  HEAP_AHEAD = 64 << 20,
  HEAP_KEPT = 96 << 20,
};

struct _TfPool
{
  GMutex mutex;
  GPtrArray *idle; /* of Block, guarded by mutex */
};

typedef struct
{
  void *memory;
  gsize bytes;
} Block;

struct _TfPixels
{
  TfPool *pool; /* owned, nullable */
  Block *block;
  gsize n;
};

static void
block_free (Block *block)
{
  free (block->memory);
  g_free (block);
}

static Block *
block_new (gsize bytes)
{
  void *memory = NULL;
  gsize align = bytes >= HUGE_PAGE ? HUGE_PAGE : 64;
  bytes = (bytes + align - 1) / align * align;
  if (posix_memalign (&memory, align, bytes) != 0)
    return NULL;
  if (bytes >= HUGE_PAGE)
    madvise (memory, bytes, MADV_HUGEPAGE); /* advice: a refusal only costs speed */
  Block *block = g_new (Block, 1);
  *block = (Block){ memory, bytes };
  return block;
}

static void
pool_clear (gpointer data)
{
  TfPool *pool = data;
  g_ptr_array_unref (pool->idle);
  g_mutex_clear (&pool->mutex);
}

TfPool *
tf_pool_new (void)
{
  TfPool *pool = g_atomic_rc_box_new0 (TfPool);
  g_mutex_init (&pool->mutex);
  pool->idle = g_ptr_array_new_with_free_func ((GDestroyNotify)block_free);
  return pool;
}

TfPool *
tf_pool_ref (TfPool *pool)
{
  return g_atomic_rc_box_acquire (pool);
}

void
tf_pool_unref (TfPool *pool)
{
  if (pool != NULL)
    g_atomic_rc_box_release_full (pool, pool_clear);
}

/* The smallest idle block that holds @bytes and is not more than twice as large. */
static Block *
pool_take (TfPool *pool, gsize bytes)
{
  g_mutex_lock (&pool->mutex);
  guint best = G_MAXUINT;
  for (guint k = 0; k < pool->idle->len; k++)
    {
      Block *block = g_ptr_array_index (pool->idle, k);
      if (block->bytes < bytes || block->bytes / 2 > bytes)
        continue;
      if (best == G_MAXUINT || block->bytes < ((Block *)g_ptr_array_index (pool->idle, best))->bytes)
        best = k;
    }
  Block *found = best != G_MAXUINT ? g_ptr_array_steal_index (pool->idle, best) : NULL;
  g_mutex_unlock (&pool->mutex);
  return found;
}

static void
pool_give (TfPool *pool, Block *block)
{
  g_mutex_lock (&pool->mutex);
  g_ptr_array_insert (pool->idle, 0, block);
  if (pool->idle->len > KEEP)
    g_ptr_array_remove_index (pool->idle, pool->idle->len - 1);
  g_mutex_unlock (&pool->mutex);
}

TfPixels *
tf_pixels_new (TfPool *pool, gsize n)
{
  g_return_val_if_fail (n > 0 && n < G_MAXSIZE / sizeof (float) - HUGE_PAGE, NULL);
  gsize bytes = n * sizeof (float);
  Block *block = pool != NULL ? pool_take (pool, bytes) : NULL;
  if (block == NULL)
    block = block_new (bytes);
  if (block == NULL)
    return NULL;
  TfPixels *pixels = g_atomic_rc_box_new0 (TfPixels);
  pixels->pool = pool != NULL ? tf_pool_ref (pool) : NULL;
  pixels->block = block;
  pixels->n = n;
  return pixels;
}

static void
pixels_clear (gpointer data)
{
  TfPixels *pixels = data;
  if (pixels->pool != NULL)
    pool_give (pixels->pool, pixels->block);
  else
    block_free (pixels->block);
  tf_pool_unref (pixels->pool);
}

TfPixels *
tf_pixels_ref (TfPixels *pixels)
{
  return g_atomic_rc_box_acquire (pixels);
}

void
tf_pixels_unref (TfPixels *pixels)
{
  if (pixels != NULL)
    g_atomic_rc_box_release_full (pixels, pixels_clear);
}

float *
tf_pixels_get (const TfPixels *pixels)
{
  return pixels->block->memory;
}

gsize
tf_pixels_get_n (const TfPixels *pixels)
{
  return pixels->n;
}

/* The heap grows by as much as it will need, so that the kernel can be asked for huge pages there. */
static void
grow_heap (void)
{
  mallopt (M_MMAP_THRESHOLD, 2 * HEAP_AHEAD);
  char *room = malloc (HEAP_AHEAD);
  guintptr first = ((guintptr)room + HUGE_PAGE - 1) / HUGE_PAGE * HUGE_PAGE;
  if (room != NULL)
    madvise ((void *)first, HEAP_AHEAD - HUGE_PAGE, MADV_HUGEPAGE);
  free (room);
}

void
tf_heap_keep (void)
{
#ifdef M_ARENA_MAX
  mallopt (M_ARENA_MAX, 1); /* what one thread gives back another can use */
#endif
  mallopt (M_TRIM_THRESHOLD, HEAP_KEPT);
  grow_heap ();
  mallopt (M_MMAP_THRESHOLD, HEAP_MOST);
}
