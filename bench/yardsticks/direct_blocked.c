/*
 * The definition in blocks of R result rows x V vectors whose sums stay in registers; every sample that is loaded meets the taps of
 * all R rows:
 *
 *     result[r, c] = sum over j, i of taps[j, i] * extended[r + j, c + i]
 *
 * Forms are named <R>x<V><rows><taps>:
 *   rows   c: extended rows are copied into a ring that stays in the cache; p: they are read in place, but for the two ends of a row
 *   taps   b: each is broadcast where it is used; s: they lie in memory four times over. Both with the taps of a row in a loop or,
 *          for short rows, written out (u)
 */
#define SAMPLE float
#define TAP_COUNT ((size_t)TAP_COLUMNS * TAP_ROWS)
/* Longer rows of taps gain nothing by it and take the compiler minutes. */
#define WRITTEN_OUT (TAP_COLUMNS <= 3)
#include "job.h"
#include "vectors.h"

static Vector splatted[TAP_ROWS * TAP_COLUMNS];
static float *ring, *left_ends, *right_ends;
static size_t stride, end_stride;

enum {
  MOST_ROWS = 4,
  RING = TAP_ROWS + MOST_ROWS - 1,
  /* Floats of a result row that need the ends of a row: whole vectors. */
  LEFT = (BEFORE_COLUMNS * CHANNELS + 3) / 4 * 4 + 4,
  RIGHT = (AFTER_COLUMNS * CHANNELS + 3) / 4 * 4 + 4,
};

static void prepare(const Job *job) {
  for (int k = 0; k < TAP_ROWS * TAP_COLUMNS; k++) splatted[k] = splat(job->taps[k]);
  stride = ring_stride(job->row_samples + (TAP_COLUMNS - 1) * CHANNELS, sizeof(float));
  end_stride = ring_stride(LEFT + RIGHT + (TAP_COLUMNS - 1) * CHANNELS, sizeof(float));
  ring = allocate(RING * stride * sizeof(float));
  left_ends = allocate(RING * end_stride * sizeof(float));
  right_ends = allocate(RING * end_stride * sizeof(float));
}

/* One vector of each row, for the ends of rows. */
static void one_vector(float *out, size_t row_samples, const float *const *rows, size_t x, const float *taps, int count) {
  for (int k = 0; k < count; k++) {
    Vector sum = splat(0);
    for (int j = 0; j < TAP_ROWS; j++)
      for (int i = 0; i < TAP_COLUMNS; i++) sum += splat(taps[j * TAP_COLUMNS + i]) * load(rows[k + j] + x + i * CHANNELS);
    store(out + k * row_samples + x, sum);
  }
}

#define JOINED(a, b, c, d, e) a##b##x##c##d##e
#define JOIN(a, b, c, d, e) JOINED(a, b, c, d, e)
#define LOOPED(r, v) {#r "x" #v "cb", form##r##x##v##cb}, {#r "x" #v "cs", form##r##x##v##cs}, {#r "x" #v "pb", form##r##x##v##pb}, {#r "x" #v "ps", form##r##x##v##ps}
#if WRITTEN_OUT
#define LISTED(r, v) \
  LOOPED(r, v), {#r "x" #v "cbu", form##r##x##v##cbu}, {#r "x" #v "csu", form##r##x##v##csu}, {#r "x" #v "pbu", form##r##x##v##pbu}, {#r "x" #v "psu", form##r##x##v##psu}
#else
#define LISTED LOOPED
#endif

#define BLOCK_ROWS 1
#define BLOCK_VECTORS 6
#include "direct_block.h"
#define BLOCK_ROWS 1
#define BLOCK_VECTORS 8
#include "direct_block.h"
#define BLOCK_ROWS 2
#define BLOCK_VECTORS 3
#include "direct_block.h"
#define BLOCK_ROWS 2
#define BLOCK_VECTORS 4
#include "direct_block.h"
#define BLOCK_ROWS 3
#define BLOCK_VECTORS 3
#include "direct_block.h"
#define BLOCK_ROWS 4
#define BLOCK_VECTORS 2
#include "direct_block.h"

#if WRITTEN_OUT
#define BLOCK_ROWS 2
#define BLOCK_VECTORS 2
#include "direct_block.h"
#define SMALL_BLOCKS LISTED(2, 2),
#else
#define SMALL_BLOCKS
#endif

const Form forms[] = {SMALL_BLOCKS LISTED(1, 6), LISTED(1, 8), LISTED(2, 3), LISTED(2, 4), LISTED(3, 3), LISTED(4, 2), {NULL, NULL}};
