/*
 * Rows, then columns, as plain loops over a padded copy:
 *
 *     between[r, c] = sum over i of row_taps[i] * padded[r, c + i]        rows + TAP_ROWS - 1 rows
 *     result[r, c]  = sum over j of column_taps[j] * between[r + j, c]
 */
#define TAP_COUNT ((size_t)TAP_COLUMNS + TAP_ROWS)
#include "yardstick.h"

/* Sample by sample. */
static void by_samples(const Job job, float *restrict result, float *restrict between, const float *restrict padded) {
  for (int r = 0; r < job.rows + TAP_ROWS - 1; r++)
    for (int c = 0; c < job.columns; c++) {
      float sum = 0;
      for (int i = 0; i < TAP_COLUMNS; i++) sum += job.row_taps[i] * padded[(size_t)r * job.padded_columns + c + i];
      between[(size_t)r * job.columns + c] = sum;
    }
  for (int r = 0; r < job.rows; r++)
    for (int c = 0; c < job.columns; c++) {
      float sum = 0;
      for (int j = 0; j < TAP_ROWS; j++) sum += job.column_taps[j] * between[(size_t)(r + j) * job.columns + c];
      result[(size_t)r * job.columns + c] = sum;
    }
}

/* Tap by tap over a row of results. */
static void by_taps(const Job job, float *restrict result, float *restrict between, const float *restrict padded) {
  for (int r = 0; r < job.rows + TAP_ROWS - 1; r++) {
    float *restrict out = between + (size_t)r * job.columns;
    memset(out, 0, sizeof(float) * (size_t)job.columns);
    for (int i = 0; i < TAP_COLUMNS; i++) {
      const float *restrict in = padded + (size_t)r * job.padded_columns + i;
      for (int c = 0; c < job.columns; c++) out[c] += job.row_taps[i] * in[c];
    }
  }
  for (int r = 0; r < job.rows; r++) {
    float *restrict out = result + (size_t)r * job.columns;
    memset(out, 0, sizeof(float) * (size_t)job.columns);
    for (int j = 0; j < TAP_ROWS; j++) {
      const float *restrict in = between + (size_t)(r + j) * job.columns;
      for (int c = 0; c < job.columns; c++) out[c] += job.column_taps[j] * in[c];
    }
  }
}

static int filter(const char *form, Job job) {
  if (strcmp(form, "samples") == 0) by_samples(job, job.result, job.between, job.padded);
  else if (strcmp(form, "taps") == 0) by_taps(job, job.result, job.between, job.padded);
  else return 0;
  return 1;
}
