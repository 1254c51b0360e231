/*
 * Batches of complex transforms by FFTW, single precision, planned with FFTW_MEASURE. One line of JSON to each line read:
 *
 *     <layout> <place> <direction> <points> <batch>    one batch, from fresh numbers   →  {"milliseconds": of processor time}
 *     error  <layout> <place> <direction> <points> <batch>    largest difference from the definition, at some places, over the root mean square of all results
 *     plan   <layout> <place> <direction> <points> <batch>    →  {"plan": "what FFTW prints of its plan"}
 *
 * layout      columns: point r of transform c lies at r · batch + c; rows: at c · points + r
 * place       in: the results take the place of the points; out: they have an array of their own
 * direction   forward: X[k] = Σ x[r] · e^(−2πi·kr/N); backward: the same with the other sign
 */
#include <complex.h>
#include <fftw3.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>

typedef struct {
  int columns, in_place, sign, points, batch;
  fftwf_complex *from, *to;
  fftwf_plan plan;
} Transform;

static Transform known[256];
static int known_count;

static double milliseconds(void) {
  struct timespec now;
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
  return 1e3 * (double)now.tv_sec + 1e-6 * (double)now.tv_nsec;
}

/* Numbers within the unit square that depend on the place alone. */
static float number(size_t place) {
  return (float)((unsigned)((place * 2654435761u) >> 8 & 0xffff) / 32768.0 - 1);
}

static void fill(const Transform *one) {
  float *numbers = (float *)one->from;
  for (size_t k = 0; k < 2 * (size_t)one->points * one->batch; k++) numbers[k] = number(k);
}

static Transform *transform_of(const char *layout, const char *place, const char *direction, int points, int batch) {
  const Transform wanted = {strcmp(layout, "columns") == 0, strcmp(place, "in") == 0, strcmp(direction, "forward") == 0 ? FFTW_FORWARD : FFTW_BACKWARD, points, batch, NULL, NULL, NULL};
  for (int k = 0; k < known_count; k++) {
    Transform *one = &known[k];
    if (one->columns == wanted.columns && one->in_place == wanted.in_place && one->sign == wanted.sign && one->points == points && one->batch == batch) return one;
  }
  if (known_count == 256) exit(1);
  Transform *one = &known[known_count++];
  *one = wanted;
  one->from = fftwf_alloc_complex((size_t)points * batch);
  one->to = one->in_place ? one->from : fftwf_alloc_complex((size_t)points * batch);
  const int stride = one->columns ? batch : 1, apart = one->columns ? 1 : points;
  one->plan = fftwf_plan_many_dft(1, &points, batch, one->from, NULL, stride, apart, one->to, NULL, stride, apart, one->sign, FFTW_MEASURE);
  if (one->plan == NULL) exit(1);
  fill(one);
  return one;
}

static double error_of(const Transform *one) {
  double worst = 0;
  fill(one);
  fftwf_execute(one->plan);
  for (int c = 0; c < one->batch; c += one->batch / 3 + 1)
    for (int k = 0; k < one->points; k += one->points / 7 + 1) {
      double complex sum = 0;
      double squares = 0;
      for (int r = 0; r < one->points; r++) {
        const size_t at = one->columns ? (size_t)r * one->batch + c : (size_t)c * one->points + r;
        const double angle = one->sign * 2 * M_PI * (double)((long)k * r % one->points) / one->points;
        const double complex x = number(2 * at) + I * number(2 * at + 1);
        sum += x * (cos(angle) + I * sin(angle));
        squares += creal(x) * creal(x) + cimag(x) * cimag(x);
      }
      const fftwf_complex *got = &one->to[one->columns ? (size_t)k * one->batch + c : (size_t)c * one->points + k];
      worst = fmax(worst, cabs(sum - *got) / sqrt(squares)); /* Parseval: the mean square of N results is the sum of squares of N points */
    }
  return worst;
}

static void print_plan(const Transform *one) {
  char *text = fftwf_sprint_plan(one->plan);
  printf("{\"plan\": \"");
  for (const char *at = text; *at != 0; at++) putchar(*at == '"' || *at == '\\' || *at == '\n' ? ' ' : *at);
  printf("\"}\n");
  free(text);
}

int main(void) {
  char line[128], what[16], layout[16], place[16], direction[16];
  while (fgets(line, sizeof line, stdin) != NULL) {
    int points, batch;
    what[0] = 0;
    if (sscanf(line, "%15s %15s %15s %15s %d %d", what, layout, place, direction, &points, &batch) != 6 &&
        (what[0] = 0, sscanf(line, "%15s %15s %15s %d %d", layout, place, direction, &points, &batch)) != 5) return 2;
    Transform *one = transform_of(layout, place, direction, points, batch);
    if (strcmp(what, "plan") == 0) print_plan(one);
    else if (strcmp(what, "error") == 0) printf("{\"error\": %.3e}\n", error_of(one));
    else {
      fill(one);
      const double begun = milliseconds();
      fftwf_execute(one->plan);
      printf("{\"milliseconds\": %.6f}\n", milliseconds() - begun);
    }
    fflush(stdout);
  }
  return 0;
}
