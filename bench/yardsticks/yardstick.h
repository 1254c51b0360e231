/*
 * What the plain C yardsticks share: they read planes and taps of 32-bit floats, then answer one line of JSON to each line read:
 *
 *     <form> <plane>    filters that plane with that form of the loops  →  {"milliseconds": whole, "loopMilliseconds": loops alone}
 *     save              writes the last result to the result file       →  {"saved": 1}
 *
 * The whole is the padded copy and the loops. TAP_COLUMNS and TAP_ROWS are compile-time constants, which lets the compiler unroll.
 * Times are processor time: what other processes take meanwhile does not count.
 */
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

typedef struct {
  int columns, rows;              /* of the image and of the result */
  int padded_columns;             /* columns + TAP_COLUMNS - 1; rows + TAP_ROWS - 1 of them */
  const float *taps, *row_taps, *column_taps;  /* correlation order; TAP_ROWS x TAP_COLUMNS, or TAP_COLUMNS then TAP_ROWS */
  const float *padded;
  float *between;                 /* row results of the separable loops: rows + TAP_ROWS - 1 of them */
  float *result;
} Job;

/* Processor time of this process. */
static double milliseconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return 1e3 * (double)now.tv_sec + 1e-6 * (double)now.tv_nsec;
}

static void *allocate(size_t floats) {
  void *memory = aligned_alloc(64, (floats * sizeof(float) + 63) / 64 * 64);
  if (memory == NULL) exit(1);
  memset(memory, 0, (floats * sizeof(float) + 63) / 64 * 64);
  return memory;
}

static float *read_floats(const char *path, size_t count) {
  FILE *file = fopen(path, "rb");
  float *values = allocate(count);
  if (file == NULL || fread(values, sizeof(float), count, file) != count) exit(1);
  fclose(file);
  return values;
}

static void write_floats(const char *path, const float *values, size_t count) {
  FILE *file = fopen(path, "wb");
  if (file == NULL || fwrite(values, sizeof(float), count, file) != count) exit(1);
  fclose(file);
}

/* padded[r, c] = image[clamp(r - above), clamp(c - left)]: replicate, with the origin in the middle. */
static void pad(float *padded, const float *image, int columns, int rows) {
  const int after = (TAP_COLUMNS - 1) / 2, left = TAP_COLUMNS - 1 - after;
  const int below = (TAP_ROWS - 1) / 2, above = TAP_ROWS - 1 - below;
  const int padded_columns = columns + TAP_COLUMNS - 1;
  for (int r = 0; r < rows + TAP_ROWS - 1; r++) {
    int from = r - above;
    from = from < 0 ? 0 : from >= rows ? rows - 1 : from;
    const float *source = image + (size_t)from * columns;
    float *target = padded + (size_t)r * padded_columns;
    for (int c = 0; c < left; c++) target[c] = source[0];
    memcpy(target + left, source, sizeof(float) * (size_t)columns);
    for (int c = 0; c < after; c++) target[left + columns + c] = source[columns - 1];
  }
}

/* Runs one form of the loops; 0 where there is no such form. */
static int filter(const char *form, Job job);

int main(int count, char **words) {
  if (count != 7) return 2;
  const int columns = atoi(words[1]), rows = atoi(words[2]), planes = atoi(words[3]);
  const size_t samples = (size_t)columns * rows;
  const float *images = read_floats(words[4], samples * planes);
  const float *taps = read_floats(words[5], TAP_COUNT);
  const int padded_columns = columns + TAP_COLUMNS - 1, padded_rows = rows + TAP_ROWS - 1;
  float *padded = allocate((size_t)padded_columns * padded_rows);
  Job job = {columns, rows, padded_columns, taps, taps, taps + TAP_COLUMNS, padded, allocate((size_t)columns * padded_rows), allocate(samples)};
  char line[64], form[32];
  while (fgets(line, sizeof line, stdin) != NULL) {
    int plane = 0;
    if (sscanf(line, "%31s %d", form, &plane) < 1) return 2;
    if (strcmp(form, "save") == 0) {
      write_floats(words[6], job.result, samples);
      printf("{\"saved\": 1}\n");
    } else {
      if (plane < 0 || plane >= planes) return 2;
      const double begun = milliseconds();
      pad(padded, images + samples * plane, columns, rows);
      const double padding_done = milliseconds();
      if (!filter(form, job)) return 2;
      const double done = milliseconds();
      printf("{\"milliseconds\": %.6f, \"loopMilliseconds\": %.6f}\n", done - begun, done - padding_done);
    }
    fflush(stdout);
  }
  return 0;
}
