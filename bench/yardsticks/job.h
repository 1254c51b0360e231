/*
 * What the C yardsticks of filters share. They read images and taps, then answer one line of JSON to each line read:
 *
 *     <form> <plane>    filters that image with that form of the loops  →  {"milliseconds": of processor time}
 *     save              writes the last result to the result file       →  {"saved": 1}
 *     forms             →  {"forms": [every name]}
 *
 * An image array comes in, a result array of the same shape goes out; nothing about the image is prepared between runs.
 * TAP_COLUMNS, TAP_ROWS and CHANNELS are compile-time constants; SAMPLE is the type of a sample. Origin: the middle.
 * A source lists every way to do the work as `forms`; its `prepare` makes of the taps, once, whatever they want.
 */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

enum {
  BEFORE_COLUMNS = TAP_COLUMNS - 1 - (TAP_COLUMNS - 1) / 2, AFTER_COLUMNS = (TAP_COLUMNS - 1) / 2,
  BEFORE_ROWS = TAP_ROWS - 1 - (TAP_ROWS - 1) / 2, AFTER_ROWS = (TAP_ROWS - 1) / 2,
};

typedef struct {
  int columns, rows;
  size_t row_samples;        /* columns * CHANNELS */
  const float *taps;         /* correlation order: TAP_ROWS x TAP_COLUMNS, or row taps then column taps */
  const SAMPLE *image;
  SAMPLE *result;
} Job;

typedef struct {
  const char *name;
  void (*run)(const Job *job);
} Form;

extern const Form forms[];
static void prepare(const Job *job);

/* Processor time of this process: what others take meanwhile does not count. */
static double milliseconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return 1e3 * (double)now.tv_sec + 1e-6 * (double)now.tv_nsec;
}

static void *allocate(size_t bytes) {
  bytes = (bytes + 127) / 64 * 64;
  void *memory = aligned_alloc(64, bytes);
  if (memory == NULL) exit(1);
  memset(memory, 0, bytes);
  return memory;
}

static void *read_whole(const char *path, size_t bytes) {
  FILE *file = fopen(path, "rb");
  void *values = allocate(bytes);
  if (file == NULL || fread(values, 1, bytes, file) != bytes) exit(1);
  fclose(file);
  return values;
}

static void write_whole(const char *path, const void *values, size_t bytes) {
  FILE *file = fopen(path, "wb");
  if (file == NULL || fwrite(values, 1, bytes, file) != bytes) exit(1);
  fclose(file);
}

static inline int clamped(int index, int count) {
  return index < 0 ? 0 : index >= count ? count - 1 : index;
}

/* Samples from one row of a ring to the next: an odd number of cache lines, so that rows do not fall on each other in the cache. */
static inline size_t ring_stride(size_t samples, size_t sample_bytes) {
  const size_t lines = (samples * sample_bytes + 64 + 63) / 64;
  return (lines | 1) * 64 / sample_bytes;
}

/* Samples first ... first + count - 1 (pixels) of a row that goes on as its end pixels on both sides; `first` counts from BEFORE_COLUMNS before the row. */
static inline void extend_row(SAMPLE *out, const SAMPLE *row, int columns, int first, int count) {
  int x = first - BEFORE_COLUMNS;
  const int end = x + count;
  for (; x < 0 && x < end; x++, out += CHANNELS) memcpy(out, row, CHANNELS * sizeof(SAMPLE));
  const int inside = (end < columns ? end : columns) - x;
  if (inside > 0) {
    memcpy(out, row + (size_t)x * CHANNELS, (size_t)inside * CHANNELS * sizeof(SAMPLE));
    x += inside;
    out += (size_t)inside * CHANNELS;
  }
  for (; x < end; x++, out += CHANNELS) memcpy(out, row + (size_t)(columns - 1) * CHANNELS, CHANNELS * sizeof(SAMPLE));
}

int main(int count, char **words) {
  if (count != 7) return 2;
  const int columns = atoi(words[1]), rows = atoi(words[2]), planes = atoi(words[3]);
  const size_t samples = (size_t)columns * rows * CHANNELS;
  SAMPLE *images = read_whole(words[4], samples * planes * sizeof(SAMPLE));
  Job job = {columns, rows, (size_t)columns * CHANNELS, read_whole(words[5], TAP_COUNT * sizeof(float)), images, allocate(samples * sizeof(SAMPLE))};
  char line[64], name[32];
  prepare(&job);
  while (fgets(line, sizeof line, stdin) != NULL) {
    int plane = 0;
    if (sscanf(line, "%31s %d", name, &plane) < 1) return 2;
    if (strcmp(name, "save") == 0) {
      write_whole(words[6], job.result, samples * sizeof(SAMPLE));
      printf("{\"saved\": 1}\n");
    } else if (strcmp(name, "forms") == 0) {
      printf("{\"forms\": [");
      for (const Form *form = forms; form->name != NULL; form++) printf("%s\"%s\"", form == forms ? "" : ", ", form->name);
      printf("]}\n");
    } else {
      const Form *form = forms;
      while (form->name != NULL && strcmp(form->name, name) != 0) form++;
      if (form->name == NULL || plane < 0 || plane >= planes) return 2;
      job.image = images + samples * plane;
      const double begun = milliseconds();
      form->run(&job);
      printf("{\"milliseconds\": %.6f}\n", milliseconds() - begun);
    }
    fflush(stdout);
  }
  return 0;
}
