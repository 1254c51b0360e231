/*
 * The definition on bytes in fixed point: taps are rounded to 16 bits at the largest shift, rows are interleaved once into pairs, and
 * every pair of rows that is loaded meets the pairs of taps of both result rows of a block:
 *
 *     result[r, c] = held((sum over j, i of tap[j, i] * extended[r + j, c + i] + half) >> shift),   tap = round(taps * 2^shift)
 *
 * Result rows r and r + 1, r even, meet row pairs (r, r + 1), (r + 2, r + 3) ...: with taps (h0, h1), (h2, 0) and (0, h0), (h1, h2) where there are three.
 * Forms are named <R>x<V><u>: V vectors of four samples at a time; u: the taps of a row written out, else in a loop.
 */
#define SAMPLE uint8_t
#define TAP_COUNT ((size_t)TAP_COLUMNS * TAP_ROWS)
#include "job.h"
#include "bytes.h"

enum { PAIRS = TAP_ROWS / 2 + 1, RING = PAIRS };

static __m128i pairs_of[2][PAIRS][TAP_COLUMNS];
static int shift;
static int16_t *ring;
static uint8_t *upper, *lower;
static size_t stride;

static void prepare(const Job *job) {
  int taps[TAP_ROWS][TAP_COLUMNS];
  shift = largest_shift(job->taps, TAP_ROWS * TAP_COLUMNS, 255, 20);
  for (int j = 0; j < TAP_ROWS; j++)
    for (int i = 0; i < TAP_COLUMNS; i++) taps[j][i] = rounded((double)job->taps[j * TAP_COLUMNS + i] * (1 << shift));
  for (int k = 0; k < 2; k++)
    for (int p = 0; p < PAIRS; p++)
      for (int i = 0; i < TAP_COLUMNS; i++) {
        const int first = 2 * p - k, second = first + 1;
        pairs_of[k][p][i] = tap_pair(first >= 0 && first < TAP_ROWS ? taps[first][i] : 0, second >= 0 && second < TAP_ROWS ? taps[second][i] : 0);
      }
  const size_t extended = job->row_samples + (TAP_COLUMNS - 1) * CHANNELS;
  stride = ring_stride(2 * (extended + 16), sizeof(int16_t));
  ring = allocate(RING * stride * sizeof(int16_t));
  upper = allocate(extended + 16);
  lower = allocate(extended + 16);
}

typedef void Block(uint8_t *out, size_t out_stride, const int16_t *const *rows, size_t x, int both);

/* Rows 2p - BEFORE_ROWS and the next one, extended and interleaved. */
static void enter(const Job *job, int p) {
  const size_t samples = job->row_samples + (TAP_COLUMNS - 1) * CHANNELS;
  int16_t *out = ring + (size_t)(p % RING) * stride;
  const int r = 2 * p - BEFORE_ROWS;
  extend_row(upper, job->image + clamped(r, job->rows) * job->row_samples, job->columns, 0, job->columns + TAP_COLUMNS - 1);
  extend_row(lower, job->image + clamped(r + 1, job->rows) * job->row_samples, job->columns, 0, job->columns + TAP_COLUMNS - 1);
  for (size_t x = 0; x < samples; x += 16) interleave_bytes(out + 2 * x, load(upper + x), load(lower + x));
}

static inline __attribute__((always_inline)) void sweep(const Job *job, Block *block, size_t samples) {
  const int16_t *rows[PAIRS];
  int entered = 0;
  for (int r = 0; r < job->rows; r += 2) {
    for (; entered < r / 2 + PAIRS; entered++) enter(job, entered);
    for (int p = 0; p < PAIRS; p++) rows[p] = ring + (size_t)((r / 2 + p) % RING) * stride;
    uint8_t *out = job->result + r * job->row_samples;
    const int both = r + 1 < job->rows;
    size_t x = 0;
    for (; x + samples <= job->row_samples; x += samples) block(out, job->row_samples, rows, x, both);
    if (x < job->row_samples) block(out, job->row_samples, rows, job->row_samples - samples, both);
  }
}

#define BLOCK(V, kind, TIMES) \
  static inline __attribute__((always_inline)) void block2x##V##kind(uint8_t *out, size_t out_stride, const int16_t *const *rows, size_t x, int both) { \
    __m128i sums[2][V]; \
    const __m128i half = _mm_set1_epi32(1 << (shift - 1)); \
    UNROLL(2) for (int k = 0; k < 2; k++) UNROLL(8) for (int v = 0; v < V; v++) sums[k][v] = half; \
    UNROLL(1) for (int p = 0; p < PAIRS; p++) { \
      const int16_t *from = rows[p] + 2 * x; \
      UNROLL(TIMES) for (int i = 0; i < TAP_COLUMNS; i++) \
        UNROLL(8) for (int v = 0; v < V; v++) { \
          const __m128i s = load(from + 2 * (i * CHANNELS + 4 * v)); \
          ADD_PRODUCT(sums[0][v], s, pairs_of[0][p][i]); \
          ADD_PRODUCT(sums[1][v], s, pairs_of[1][p][i]); \
        } \
    } \
    UNROLL(2) for (int v = 0; v < V; v += 4) { \
      leave_bytes(out + x + 4 * v, sums[0] + v, shift); \
      if (both) leave_bytes(out + out_stride + x + 4 * v, sums[1] + v, shift); \
    } \
  } \
  static void form2x##V##kind(const Job *job) { sweep(job, block2x##V##kind, 4 * V); }

BLOCK(4, , 1)
BLOCK(4, u, TAP_COLUMNS)
BLOCK(8, u, TAP_COLUMNS)

const Form forms[] = {{"2x4", form2x4}, {"2x4u", form2x4u}, {"2x8u", form2x8u}, {NULL, NULL}};
