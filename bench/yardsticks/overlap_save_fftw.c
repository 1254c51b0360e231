/*
 * Overlap-save over FFTW: tiles of the image are transformed (real to half-complex), multiplied by the kernel's spectrum and
 * transformed back; what wrapped around is left out. Zero outside the image, as SciPy has it. Single precision, FFTW_MEASURE.
 *
 *     result[r, c] = sum over j, i of taps[j, i] * image[r + j - BEFORE_ROWS, c + i - BEFORE_COLUMNS]
 *
 * Forms are named <tile columns>x<tile rows>; a form is planned when it is first asked for. Those worth trying are up to the caller.
 */
#include <fftw3.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

typedef struct {
  int columns, rows, bins;    /* bins: columns / 2 + 1 */
  int padded;                 /* floats of a row in place: 2 * bins */
  float *tile;
  fftwf_complex *spectrum;
  fftwf_plan forward, backward;
} Tile;

static Tile tiles[64];
static int tile_count;
static int image_columns, image_rows, tap_columns, tap_rows;
static const float *taps;
static const char *wisdom;        /* what FFTW has measured so far: read at the start, written after each plan */

static double milliseconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return 1e3 * (double)now.tv_sec + 1e-6 * (double)now.tv_nsec;
}

static float *read_floats(const char *path, size_t count) {
  FILE *file = fopen(path, "rb");
  float *values = fftwf_alloc_real(count);
  if (file == NULL || fread(values, sizeof(float), count, file) != count) exit(1);
  fclose(file);
  return values;
}

/* The spectrum of the taps, conjugated (taps as they stand: correlation) and scaled for the unscaled inverse. */
static Tile *tile_of(int columns, int rows) {
  for (int k = 0; k < tile_count; k++)
    if (tiles[k].columns == columns && tiles[k].rows == rows) return &tiles[k];
  if (tile_count == 64 || columns < tap_columns || rows < tap_rows) exit(1);
  Tile *one = &tiles[tile_count++];
  one->columns = columns, one->rows = rows, one->bins = columns / 2 + 1, one->padded = 2 * one->bins;
  const size_t floats = (size_t)one->padded * rows;
  one->tile = fftwf_alloc_real(floats);
  one->spectrum = fftwf_alloc_complex(floats / 2);
  one->forward = fftwf_plan_dft_r2c_2d(rows, columns, one->tile, (fftwf_complex *)one->tile, FFTW_MEASURE);
  one->backward = fftwf_plan_dft_c2r_2d(rows, columns, (fftwf_complex *)one->tile, one->tile, FFTW_MEASURE);
  if (one->forward == NULL || one->backward == NULL || !fftwf_export_wisdom_to_filename(wisdom)) exit(1);
  memset(one->tile, 0, floats * sizeof(float));
  for (int j = 0; j < tap_rows; j++) memcpy(one->tile + (size_t)j * one->padded, taps + (size_t)j * tap_columns, tap_columns * sizeof(float));
  fftwf_execute(one->forward);
  const float scale = 1.0f / ((float)columns * (float)rows);
  for (size_t k = 0; k < floats / 2; k++) {
    one->spectrum[k][0] = scale * one->tile[2 * k];
    one->spectrum[k][1] = -scale * one->tile[2 * k + 1];
  }
  return one;
}

/* Image rows top ..., columns left ... into the tile; zero outside. */
static void gather(const Tile *one, const float *image, int left, int top) {
  const int from = left < 0 ? -left : 0;
  int to = image_columns - left;
  if (to > one->columns) to = one->columns;
  for (int r = 0; r < one->rows; r++) {
    float *out = one->tile + (size_t)r * one->padded;
    if (top + r < 0 || top + r >= image_rows || to <= from) {
      memset(out, 0, one->columns * sizeof(float));
      continue;
    }
    memset(out, 0, from * sizeof(float));
    memcpy(out + from, image + (size_t)(top + r) * image_columns + left + from, (to - from) * sizeof(float));
    memset(out + to, 0, (one->columns - to) * sizeof(float));
  }
}

static void multiply(const Tile *one) {
  float *restrict values = one->tile;
  const float *restrict by = (const float *)one->spectrum;
  const size_t floats = (size_t)one->padded * one->rows;
  for (size_t k = 0; k < floats; k += 2) {
    const float re = values[k], im = values[k + 1];
    values[k] = re * by[k] - im * by[k + 1];
    values[k + 1] = re * by[k + 1] + im * by[k];
  }
}

static void filter(const Tile *one, const float *image, float *result) {
  const int before_columns = tap_columns - 1 - (tap_columns - 1) / 2, before_rows = tap_rows - 1 - (tap_rows - 1) / 2;
  const int step_columns = one->columns - tap_columns + 1, step_rows = one->rows - tap_rows + 1;
  for (int r = 0; r < image_rows; r += step_rows)
    for (int c = 0; c < image_columns; c += step_columns) {
      gather(one, image, c - before_columns, r - before_rows);
      fftwf_execute(one->forward);
      multiply(one);
      fftwf_execute(one->backward);
      const int rows = image_rows - r < step_rows ? image_rows - r : step_rows;
      const int columns = image_columns - c < step_columns ? image_columns - c : step_columns;
      for (int k = 0; k < rows; k++) memcpy(result + (size_t)(r + k) * image_columns + c, one->tile + (size_t)k * one->padded, columns * sizeof(float));
    }
}

int main(int count, char **words) {
  if (count != 10) return 2;
  wisdom = words[8];
  fftwf_import_wisdom_from_filename(wisdom);
  image_columns = atoi(words[1]), image_rows = atoi(words[2]);
  const int planes = atoi(words[3]);
  tap_columns = atoi(words[5]), tap_rows = atoi(words[6]);
  const size_t samples = (size_t)image_columns * image_rows;
  const float *images = read_floats(words[4], samples * planes);
  taps = read_floats(words[7], (size_t)tap_columns * tap_rows);
  float *result = fftwf_alloc_real(samples);
  memset(result, 0, samples * sizeof(float));
  char line[64];
  while (fgets(line, sizeof line, stdin) != NULL) {
    int columns, rows, plane;
    if (strcmp(line, "save\n") == 0) {
      FILE *file = fopen(words[9], "wb");
      if (file == NULL || fwrite(result, sizeof(float), samples, file) != samples) exit(1);
      fclose(file);
      printf("{\"saved\": 1}\n");
    } else if (sscanf(line, "%dx%d %d", &columns, &rows, &plane) == 3 && plane >= 0 && plane < planes) {
      const Tile *one = tile_of(columns, rows);
      const double begun = milliseconds();
      filter(one, images + samples * plane, result);
      printf("{\"milliseconds\": %.6f}\n", milliseconds() - begun);
    } else return 2;
    fflush(stdout);
  }
  return 0;
}
