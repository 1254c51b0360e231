/*
 * The definition as plain loops over a padded copy, in the three orders that one would write:
 *
 *     result[r, c] = sum over j, i of taps[j, i] * padded[r + j, c + i]
 */
#define TAP_COUNT ((size_t)TAP_COLUMNS * TAP_ROWS)
#include "yardstick.h"

/* Sample by sample. */
static void by_samples(const Job job, float *restrict result, const float *restrict padded, const float *restrict taps) {
  for (int r = 0; r < job.rows; r++)
    for (int c = 0; c < job.columns; c++) {
      float sum = 0;
      for (int j = 0; j < TAP_ROWS; j++)
        for (int i = 0; i < TAP_COLUMNS; i++) sum += taps[j * TAP_COLUMNS + i] * padded[(size_t)(r + j) * job.padded_columns + c + i];
      result[(size_t)r * job.columns + c] = sum;
    }
}

/* Tap by tap over a result row. */
static void by_taps(const Job job, float *restrict result, const float *restrict padded, const float *restrict taps) {
  for (int r = 0; r < job.rows; r++) {
    float *restrict out = result + (size_t)r * job.columns;
    memset(out, 0, sizeof(float) * (size_t)job.columns);
    for (int j = 0; j < TAP_ROWS; j++)
      for (int i = 0; i < TAP_COLUMNS; i++) {
        const float *restrict in = padded + (size_t)(r + j) * job.padded_columns + i;
        const float tap = taps[j * TAP_COLUMNS + i];
        for (int c = 0; c < job.columns; c++) out[c] += tap * in[c];
      }
  }
}

/* Row of taps by row of taps over a result row. */
static void by_tap_rows(const Job job, float *restrict result, const float *restrict padded, const float *restrict taps) {
  for (int r = 0; r < job.rows; r++) {
    float *restrict out = result + (size_t)r * job.columns;
    memset(out, 0, sizeof(float) * (size_t)job.columns);
    for (int j = 0; j < TAP_ROWS; j++) {
      const float *restrict in = padded + (size_t)(r + j) * job.padded_columns;
      const float *restrict row = taps + j * TAP_COLUMNS;
      for (int c = 0; c < job.columns; c++) {
        float sum = out[c];
        for (int i = 0; i < TAP_COLUMNS; i++) sum += row[i] * in[c + i];
        out[c] = sum;
      }
    }
  }
}

static int filter(const char *form, Job job) {
  if (strcmp(form, "samples") == 0) by_samples(job, job.result, job.padded, job.taps);
  else if (strcmp(form, "taps") == 0) by_taps(job, job.result, job.padded, job.taps);
  else if (strcmp(form, "tap-rows") == 0) by_tap_rows(job, job.result, job.padded, job.taps);
  else return 0;
  return 1;
}
