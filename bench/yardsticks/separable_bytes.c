/*
 * Columns, then rows, on bytes in fixed point, in one sweep with a ring of row pairs:
 *
 *     between[r, c] = (sum over j of column_tap[j] * extended[r + j, c] + half) >> column_shift        16-bit integers
 *     result[r, c]  = held((sum over i of row_tap[i] * between[r, c + i] + half) >> row_shift)
 *
 * Rows are interleaved into pairs as they enter; result rows r and r + 1, r even, use the same pairs, each with taps of its own. Words
 * are interleaved with their neighbours one pixel on, so that a step along the row takes two taps.
 *
 * Forms are named 2x<V><U>[u][@S]: V vectors of a column block, U of a row block (u: its taps written out), @S: strips of S samples.
 */
#define SAMPLE uint8_t
#define TAP_COUNT ((size_t)TAP_COLUMNS + TAP_ROWS)
#include "job.h"
#include "bytes.h"

enum { PAIRS = TAP_ROWS / 2 + 1, ROW_PAIRS = (TAP_COLUMNS + 1) / 2, RING = PAIRS, HALO = (TAP_COLUMNS - 1) * CHANNELS };

static __m128i column_pairs[2][PAIRS], row_pairs[ROW_PAIRS];
static int column_shift, row_shift;
static int16_t *ring, *words[2], *neighbours;
static uint8_t *upper, *lower;
static size_t stride;

static int fixed(float tap, int shift) { return rounded((double)tap * (1 << shift)); }

static void prepare(const Job *job) {
  const float *row = job->taps, *column = job->taps + TAP_COLUMNS;
  double sum = 0;
  int spare = 0;
  column_shift = largest_shift(column, TAP_ROWS, 255, 20);
  for (int j = 0; j < TAP_ROWS; j++) sum += column[j] < 0 ? -column[j] : column[j];
  while (255 * sum * (2 << spare) < 32700) spare++;
  row_shift = largest_shift(row, TAP_COLUMNS, 255 * sum * (1 << spare), 20);
  for (int k = 0; k < 2; k++)
    for (int p = 0; p < PAIRS; p++) {
      const int first = 2 * p - k, second = first + 1;
      column_pairs[k][p] = tap_pair(first >= 0 && first < TAP_ROWS ? fixed(column[first], column_shift) : 0,
                                    second >= 0 && second < TAP_ROWS ? fixed(column[second], column_shift) : 0);
    }
  for (int q = 0; q < ROW_PAIRS; q++)
    row_pairs[q] = tap_pair(fixed(row[2 * q], row_shift), 2 * q + 1 < TAP_COLUMNS ? fixed(row[2 * q + 1], row_shift) : 0);
  column_shift -= spare;
  row_shift += spare;
  const size_t extended = job->row_samples + HALO + 64;
  ring = allocate(RING * ring_stride(2 * extended, sizeof(int16_t)) * sizeof(int16_t));
  for (int k = 0; k < 2; k++) words[k] = allocate(extended * sizeof(int16_t));
  neighbours = allocate(2 * extended * sizeof(int16_t));
  upper = allocate(extended);
  lower = allocate(extended);
}

/* Pair p of extended rows, samples from ... on. */
static void enter(const Job *job, int p, int first_column, int columns) {
  int16_t *out = ring + (size_t)(p % RING) * stride;
  const int r = 2 * p - BEFORE_ROWS;
  extend_row(upper, job->image + clamped(r, job->rows) * job->row_samples, job->columns, first_column, columns);
  extend_row(lower, job->image + clamped(r + 1, job->rows) * job->row_samples, job->columns, first_column, columns);
  for (size_t x = 0; x < (size_t)columns * CHANNELS; x += 16) interleave_bytes(out + 2 * x, load(upper + x), load(lower + x));
}

typedef void Columns(const int16_t *const *rows, size_t count);
typedef void Rows(uint8_t *out, size_t count);

#define COLUMNS(V) \
  static void columns##V(const int16_t *const *rows, size_t count) { \
    const __m128i half = _mm_set1_epi32(1 << (column_shift - 1)), by = _mm_cvtsi32_si128(column_shift); \
    for (size_t x = 0; x < count; x += 4 * V) { \
      __m128i sums[2][V]; \
      UNROLL(2) for (int k = 0; k < 2; k++) UNROLL(8) for (int v = 0; v < V; v++) sums[k][v] = half; \
      UNROLL(1) for (int p = 0; p < PAIRS; p++) { \
        const int16_t *from = rows[p] + 2 * x; \
        UNROLL(8) for (int v = 0; v < V; v++) { \
          const __m128i s = load(from + 8 * v); \
          ADD_PRODUCT(sums[0][v], s, column_pairs[0][p]); \
          ADD_PRODUCT(sums[1][v], s, column_pairs[1][p]); \
        } \
      } \
      UNROLL(2) for (int k = 0; k < 2; k++) UNROLL(4) for (int v = 0; v < V; v += 2) \
        store(words[k] + x + 4 * v, _mm_packs_epi32(_mm_sra_epi32(sums[k][v], by), _mm_sra_epi32(sums[k][v + 1], by))); \
    } \
  }

#define ROWS(U, kind, TIMES) \
  static inline __attribute__((always_inline)) void row_block##U##kind(uint8_t *out, const int16_t *from, int vectors) { \
    __m128i sums[U]; \
    UNROLL(8) for (int v = 0; v < vectors; v++) sums[v] = _mm_set1_epi32(1 << (row_shift - 1)); \
    UNROLL(TIMES) for (int q = 0; q < ROW_PAIRS; q++) \
      UNROLL(8) for (int v = 0; v < vectors; v++) ADD_PRODUCT(sums[v], load(from + 2 * (2 * q * CHANNELS + 4 * v)), row_pairs[q]); \
    UNROLL(2) for (int v = 0; v < vectors; v += 4) leave_bytes(out + 4 * v, sums + v, row_shift); \
  } \
  static void rows##U##kind(uint8_t *out, size_t count) { \
    size_t x = 0; \
    for (; x + 4 * U <= count; x += 4 * U) row_block##U##kind(out + x, neighbours + 2 * x, U); \
    for (; x + 16 <= count; x += 16) row_block##U##kind(out + x, neighbours + 2 * x, 4); \
    if (x < count) row_block##U##kind(out + count - 16, neighbours + 2 * (count - 16), 4); \
  }

/* Results of samples from ... to - 1 of every row. */
static void sweep(const Job *job, Columns *columns, Rows *rows_of, size_t from, size_t to) {
  const size_t extended = to - from + HALO;
  const int16_t *rows[PAIRS];
  int entered = 0;
  stride = ring_stride(2 * (extended + 64), sizeof(int16_t));
  for (int r = 0; r < job->rows; r += 2) {
    for (; entered < r / 2 + PAIRS; entered++) enter(job, entered, (int)(from / CHANNELS), (int)(extended / CHANNELS));
    for (int p = 0; p < PAIRS; p++) rows[p] = ring + (size_t)((r / 2 + p) % RING) * stride;
    columns(rows, extended);
    for (int k = 0; k < 2 && r + k < job->rows; k++) {
      for (size_t x = 0; x < extended; x += 8) {
        const __m128i here = load(words[k] + x), next = load(words[k] + x + CHANNELS);
        store(neighbours + 2 * x, _mm_unpacklo_epi16(here, next));
        store(neighbours + 2 * x + 8, _mm_unpackhi_epi16(here, next));
      }
      rows_of(job->result + (r + k) * job->row_samples + from, to - from);
    }
  }
}

static void strips(const Job *job, Columns *columns, Rows *rows_of, size_t width) {
  for (size_t from = 0; from < job->row_samples; from += width) {
    const size_t to = from + width < job->row_samples ? from + width : job->row_samples;
    sweep(job, columns, rows_of, from, to);
  }
}

COLUMNS(2)
COLUMNS(4)
ROWS(4, , 1)
ROWS(8, , 1)
ROWS(8, u, ROW_PAIRS)

#define FORM(V, U) \
  static void form2x##V##U(const Job *job) { strips(job, columns##V, rows##U, job->row_samples); } \
  static void form2x##V##U##at640(const Job *job) { strips(job, columns##V, rows##U, 640); } \
  static void form2x##V##U##at1280(const Job *job) { strips(job, columns##V, rows##U, 1280); } \
  static void form2x##V##U##at2560(const Job *job) { strips(job, columns##V, rows##U, 2560); }
#define LISTED(V, U) \
  {"2x" #V #U, form2x##V##U}, {"2x" #V #U "@640", form2x##V##U##at640}, {"2x" #V #U "@1280", form2x##V##U##at1280}, {"2x" #V #U "@2560", form2x##V##U##at2560}

FORM(2, 8)
FORM(4, 4)
FORM(4, 8)
FORM(4, 8u)

const Form forms[] = {LISTED(2, 8), LISTED(4, 4), LISTED(4, 8), LISTED(4, 8u), {NULL, NULL}};
