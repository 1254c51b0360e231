/* One block and the two sweeps over it: rows in a ring, rows in place. */
#define NAME(what, rows) JOIN(what, BLOCK_ROWS, BLOCK_VECTORS, rows, TAP_KIND)
#define PRAGMA(text) _Pragma(#text)
#define UNROLL(times) PRAGMA(GCC unroll times)

/* Result rows first ... last meet row j of the extended image. Bounds are constants once this is inlined. */
static inline __attribute__((always_inline)) void NAME(row, _)(
    Vector (*sums)[BLOCK_VECTORS], const float *from, const TAP_TYPE *taps, int j, int first, int last) {
  UNROLL(UNROLLED)
  for (int i = 0; i < TAP_COLUMNS; i++) {
    Vector x[BLOCK_VECTORS];
    UNROLL(8) for (int v = 0; v < BLOCK_VECTORS; v++) x[v] = load(from + i * CHANNELS + 4 * v);
    UNROLL(4) for (int k = first; k <= last; k++) {
      const Vector tap = TAP((j - k) * TAP_COLUMNS + i);
      UNROLL(8) for (int v = 0; v < BLOCK_VECTORS; v++) sums[k][v] += tap * x[v];
    }
  }
}

static inline __attribute__((always_inline)) void NAME(block, _)(float *out, size_t row_samples, const float *const *rows, size_t x, const TAP_TYPE *taps) {
  Vector sums[BLOCK_ROWS][BLOCK_VECTORS];
  UNROLL(4) for (int k = 0; k < BLOCK_ROWS; k++)
    UNROLL(8) for (int v = 0; v < BLOCK_VECTORS; v++) sums[k][v] = splat(0);
  UNROLL(4) for (int j = 0; j < BLOCK_ROWS - 1; j++) NAME(row, _)(sums, rows[j] + x, taps, j, j < TAP_ROWS ? 0 : j - TAP_ROWS + 1, j);
  UNROLL(1) for (int j = BLOCK_ROWS - 1; j < TAP_ROWS; j++) NAME(row, _)(sums, rows[j] + x, taps, j, 0, BLOCK_ROWS - 1);
  UNROLL(4) for (int k = 1; k < BLOCK_ROWS; k++) {
    const int j = TAP_ROWS - 1 + k;
    if (j >= BLOCK_ROWS - 1) NAME(row, _)(sums, rows[j] + x, taps, j, k, BLOCK_ROWS - 1);
  }
  UNROLL(4) for (int k = 0; k < BLOCK_ROWS; k++)
    UNROLL(8) for (int v = 0; v < BLOCK_VECTORS; v++) store(out + k * row_samples + x + 4 * v, sums[k][v]);
}

static void NAME(form, c)(const Job *job) {
  const float *rows[RING];
  int entered = -BEFORE_ROWS;
  for (int r = 0; r < job->rows; r += BLOCK_ROWS) {
    if (r + BLOCK_ROWS > job->rows) r = job->rows - BLOCK_ROWS;
    for (; entered < r + BLOCK_ROWS + AFTER_ROWS; entered++)
      extend_row(ring + (size_t)((entered + BEFORE_ROWS) % RING) * stride, job->image + clamped(entered, job->rows) * job->row_samples, job->columns, 0,
                 job->columns + TAP_COLUMNS - 1);
    for (int j = 0; j < TAP_ROWS + BLOCK_ROWS - 1; j++) rows[j] = ring + (size_t)((r + j) % RING) * stride;
    float *out = job->result + r * job->row_samples;
    size_t x = 0;
    for (; x + 4 * BLOCK_VECTORS <= job->row_samples; x += 4 * BLOCK_VECTORS) NAME(block, _)(out, job->row_samples, rows, x, TAPS);
    if (x < job->row_samples) NAME(block, _)(out, job->row_samples, rows, job->row_samples - 4 * BLOCK_VECTORS, TAPS);
  }
}

static void NAME(form, p)(const Job *job) {
  const float *rows[RING], *left[RING], *right[RING];
  const int left_columns = LEFT / CHANNELS + TAP_COLUMNS - 1, right_columns = RIGHT / CHANNELS + TAP_COLUMNS - 1;
  const size_t middle_end = job->row_samples - RIGHT;
  int entered = -BEFORE_ROWS;
  for (int r = 0; r < job->rows; r += BLOCK_ROWS) {
    if (r + BLOCK_ROWS > job->rows) r = job->rows - BLOCK_ROWS;
    for (; entered < r + BLOCK_ROWS + AFTER_ROWS; entered++) {
      const float *row = job->image + clamped(entered, job->rows) * job->row_samples;
      const size_t place = (size_t)((entered + BEFORE_ROWS) % RING) * end_stride;
      extend_row(left_ends + place, row, job->columns, 0, left_columns);
      extend_row(right_ends + place, row, job->columns, job->columns - RIGHT / CHANNELS, right_columns);
    }
    for (int j = 0; j < TAP_ROWS + BLOCK_ROWS - 1; j++) {
      const size_t place = (size_t)((r + j) % RING) * end_stride;
      rows[j] = job->image + clamped(r + j - BEFORE_ROWS, job->rows) * job->row_samples - BEFORE_COLUMNS * CHANNELS;
      left[j] = left_ends + place;
      right[j] = right_ends + place;
    }
    float *out = job->result + r * job->row_samples;
    for (size_t x = 0; x < LEFT; x += 4) one_vector(out, job->row_samples, left, x, job->taps, BLOCK_ROWS);
    for (size_t x = 0; x < RIGHT; x += 4) one_vector(out + middle_end, job->row_samples, right, x, job->taps, BLOCK_ROWS);
    size_t x = LEFT;
    for (; x + 4 * BLOCK_VECTORS <= middle_end; x += 4 * BLOCK_VECTORS) NAME(block, _)(out, job->row_samples, rows, x, TAPS);
    if (x < middle_end) NAME(block, _)(out, job->row_samples, rows, middle_end - 4 * BLOCK_VECTORS, TAPS);
  }
}
#undef NAME
#undef PRAGMA
#undef UNROLL
