/*
 * Rows, then columns, in one sweep with a ring of row results:
 *
 *     between[r, c] = sum over i of row_taps[i] * extended[r, c + i]
 *     result[r, c]  = sum over j of column_taps[j] * between[r + j, c]
 *
 * Forms are named <R>x<V><taps><U>[@S]:
 *   R x V   result rows x vectors of a column block whose sums stay in registers; every row result that is loaded meets the taps of R rows
 *   taps    b: each is broadcast where it is used; s: they lie in memory four times over
 *   U       vectors of a row block
 *   @S      strips of S floats, swept one after the other, so that the ring stays in a nearer cache; else whole rows
 */
#define SAMPLE float
#define TAP_COUNT ((size_t)TAP_COLUMNS + TAP_ROWS)
#include "job.h"
#include "vectors.h"

enum {
  MOST_ROWS = 4,
  RING = TAP_ROWS + MOST_ROWS - 1,
  /* Floats of a result row that need the ends of a row: whole vectors. */
  LEFT = (BEFORE_COLUMNS * CHANNELS + 3) / 4 * 4,
  RIGHT = (AFTER_COLUMNS * CHANNELS + 3) / 4 * 4,
};

static Vector row_splatted[TAP_COLUMNS], column_splatted[TAP_ROWS];
static float *ring, *end;
static size_t stride;

static void prepare(const Job *job) {
  for (int i = 0; i < TAP_COLUMNS; i++) row_splatted[i] = splat(job->taps[i]);
  for (int j = 0; j < TAP_ROWS; j++) column_splatted[j] = splat(job->taps[TAP_COLUMNS + j]);
  ring = allocate(RING * ring_stride(job->row_samples, sizeof(float)) * sizeof(float));
  end = allocate((LEFT + RIGHT + TAP_COLUMNS * CHANNELS + 4) * sizeof(float));
}

/* One row of row results: `count` floats, a multiple of four. */
typedef void RowPass(float *out, const float *in, size_t count);
/* R result rows, `out_stride` floats apart, of `count` floats. */
typedef void ColumnPass(float *out, size_t out_stride, const float *const *rows, const float *taps, size_t count);

#define PRAGMA(text) _Pragma(#text)
#define UNROLL(times) PRAGMA(GCC unroll times)

#define ROW_PASS(U) \
  static inline __attribute__((always_inline)) void row_block##U(float *out, const float *in, int vectors) { \
    Vector sums[U]; \
    UNROLL(8) for (int v = 0; v < vectors; v++) sums[v] = splat(0); \
    UNROLL(1) for (int i = 0; i < TAP_COLUMNS; i++) { \
      UNROLL(8) for (int v = 0; v < vectors; v++) sums[v] += row_splatted[i] * load(in + i * CHANNELS + 4 * v); \
    } \
    UNROLL(8) for (int v = 0; v < vectors; v++) store(out + 4 * v, sums[v]); \
  } \
  static void row_pass##U(float *out, const float *in, size_t count) { \
    size_t x = 0; \
    for (; x + 4 * U <= count; x += 4 * U) row_block##U(out + x, in + x, U); \
    for (; x < count; x += 4) row_block##U(out + x, in + x, 1); \
  }

ROW_PASS(4)
ROW_PASS(6)
ROW_PASS(8)

#define B_TAP(j) splat(taps[j])
#define S_TAP(j) column_splatted[j]
#define COLUMN_PASS(R, V, kind, TAP) \
  static inline __attribute__((always_inline)) void column_row##R##x##V##kind(Vector (*sums)[V], const float *from, const float *taps, int j, int first, int last, int vectors) { \
    (void)taps; \
    Vector x[V]; \
    UNROLL(8) for (int v = 0; v < vectors; v++) x[v] = load(from + 4 * v); \
    UNROLL(4) for (int k = first; k <= last; k++) { \
      const Vector tap = TAP(j - k); \
      UNROLL(8) for (int v = 0; v < vectors; v++) sums[k][v] += tap * x[v]; \
    } \
  } \
  static inline __attribute__((always_inline)) void column_block##R##x##V##kind(float *out, size_t out_stride, const float *const *rows, size_t at, const float *taps, int vectors) { \
    Vector sums[R][V]; \
    UNROLL(4) for (int k = 0; k < R; k++) UNROLL(8) for (int v = 0; v < vectors; v++) sums[k][v] = splat(0); \
    UNROLL(4) for (int j = 0; j < R - 1; j++) column_row##R##x##V##kind(sums, rows[j] + at, taps, j, 0, j, vectors); \
    UNROLL(1) for (int j = R - 1; j < TAP_ROWS; j++) column_row##R##x##V##kind(sums, rows[j] + at, taps, j, 0, R - 1, vectors); \
    UNROLL(4) for (int k = 1; k < R; k++) column_row##R##x##V##kind(sums, rows[TAP_ROWS - 1 + k] + at, taps, TAP_ROWS - 1 + k, k, R - 1, vectors); \
    UNROLL(4) for (int k = 0; k < R; k++) UNROLL(8) for (int v = 0; v < vectors; v++) store(out + k * out_stride + at + 4 * v, sums[k][v]); \
  } \
  static void column_pass##R##x##V##kind(float *out, size_t out_stride, const float *const *rows, const float *taps, size_t count) { \
    size_t x = 0; \
    for (; x + 4 * V <= count; x += 4 * V) column_block##R##x##V##kind(out, out_stride, rows, x, taps, V); \
    for (; x < count; x += 4) column_block##R##x##V##kind(out, out_stride, rows, x, taps, 1); \
  }

/* Row results of floats from ... to - 1 of a row: read in place, but for its ends. */
static void row_results(const Job *job, RowPass *pass, const float *row, size_t from, size_t to, float *out) {
  const size_t middle_end = job->row_samples - RIGHT;
  size_t x = from;
  if (x < LEFT) {
    extend_row(end, row, job->columns, 0, LEFT / CHANNELS + TAP_COLUMNS - 1);
    pass(out, end, LEFT);
    x = LEFT;
  }
  const size_t middle = to < middle_end ? to : middle_end;
  if (x < middle) pass(out + x - from, row + x - BEFORE_COLUMNS * CHANNELS, middle - x);
  if (to > middle_end) {
    extend_row(end, row, job->columns, (int)(middle_end / CHANNELS), RIGHT / CHANNELS + TAP_COLUMNS - 1);
    pass(out + middle_end - from, end, to - middle_end);
  }
}

/* Results of floats from ... to - 1 of every row. */
static void sweep(const Job *job, RowPass *row_pass, ColumnPass *column_pass, int block_rows, size_t from, size_t to) {
  const float *rows[RING];
  int entered = -BEFORE_ROWS;
  for (int r = 0; r < job->rows; r += block_rows) {
    if (r + block_rows > job->rows) r = job->rows - block_rows;
    for (; entered < r + block_rows + AFTER_ROWS; entered++)
      row_results(job, row_pass, job->image + clamped(entered, job->rows) * job->row_samples, from, to, ring + (size_t)((entered + BEFORE_ROWS) % RING) * stride);
    for (int j = 0; j < TAP_ROWS + block_rows - 1; j++) rows[j] = ring + (size_t)((r + j) % RING) * stride;
    column_pass(job->result + r * job->row_samples + from, job->row_samples, rows, job->taps + TAP_COLUMNS, to - from);
  }
}

static void strips(const Job *job, RowPass *row_pass, ColumnPass *column_pass, int block_rows, size_t width) {
  stride = ring_stride(width, sizeof(float));
  const size_t all = job->row_samples;
  size_t from = 0;
  while (from < all) {
    /* A last strip that would hardly hold more than the right end joins the one before it. */
    const size_t to = all - from < width + RIGHT + 4 ? all : from + width;
    if (to - from > width) stride = ring_stride(to - from, sizeof(float));
    sweep(job, row_pass, column_pass, block_rows, from, to);
    from = to;
  }
}

#define FORMS_OF(R, V, kind, U) \
  static void form##R##x##V##kind##U(const Job *job) { strips(job, row_pass##U, column_pass##R##x##V##kind, R, job->row_samples); } \
  static void form##R##x##V##kind##U##at480(const Job *job) { strips(job, row_pass##U, column_pass##R##x##V##kind, R, 480); } \
  static void form##R##x##V##kind##U##at960(const Job *job) { strips(job, row_pass##U, column_pass##R##x##V##kind, R, 960); } \
  static void form##R##x##V##kind##U##at1920(const Job *job) { strips(job, row_pass##U, column_pass##R##x##V##kind, R, 1920); }
#define LISTED_OF(R, V, kind, U) \
  {#R "x" #V #kind #U, form##R##x##V##kind##U}, {#R "x" #V #kind #U "@480", form##R##x##V##kind##U##at480}, \
  {#R "x" #V #kind #U "@960", form##R##x##V##kind##U##at960}, {#R "x" #V #kind #U "@1920", form##R##x##V##kind##U##at1920}
#define BLOCK(R, V) \
  COLUMN_PASS(R, V, b, B_TAP) \
  COLUMN_PASS(R, V, s, S_TAP) \
  FORMS_OF(R, V, b, 8) FORMS_OF(R, V, s, 8) FORMS_OF(R, V, s, 4) FORMS_OF(R, V, s, 6)
#define LISTED(R, V) LISTED_OF(R, V, b, 8), LISTED_OF(R, V, s, 8), LISTED_OF(R, V, s, 4), LISTED_OF(R, V, s, 6)

BLOCK(1, 8)
BLOCK(2, 3)
BLOCK(2, 4)
BLOCK(3, 2)
BLOCK(3, 3)
BLOCK(4, 2)
BLOCK(4, 3)

const Form forms[] = {LISTED(1, 8), LISTED(2, 3), LISTED(2, 4), LISTED(3, 2), LISTED(3, 3), LISTED(4, 2), LISTED(4, 3), {NULL, NULL}};
