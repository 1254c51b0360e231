/*
 * Boxes of bytes by running sums of integers, whatever their size:
 *
 *     down[c]       = sum over j of extended[r + j, c]        from row to row: plus the row that comes, less the row that goes
 *     along[c]      = sum over i of down[c + i]               from pixel to pixel likewise
 *     result[r, c]  = along / (TAP_COLUMNS * TAP_ROWS), rounded
 *
 * The taps are not read: a box of unit gain. Forms: "words", column sums in 16 bits (at most 257 rows) or "integers", in 32;
 * with "2", two result rows are worked on side by side.
 */
#define SAMPLE uint8_t
#define TAP_COUNT ((size_t)TAP_COLUMNS + TAP_ROWS)
#include "job.h"
#include "bytes.h"

static uint16_t *down_words[2];
static int32_t *down_integers[2];

static void prepare(const Job *job) {
  const size_t extended = job->row_samples + TAP_COLUMNS * CHANNELS + 64;
  for (int k = 0; k < 2; k++) down_words[k] = allocate(extended * sizeof(uint16_t)), down_integers[k] = allocate(extended * sizeof(int32_t));
}

static const uint8_t *row_of(const Job *job, int r) { return job->image + clamped(r, job->rows) * job->row_samples; }

/* The pixels beyond both ends repeat the end pixels; sums lie behind BEFORE_COLUMNS pixels of room. */
#define EXTEND(type, sums) \
  do { \
    type *first = (sums) + BEFORE_COLUMNS * CHANNELS, *last = first + job->row_samples - CHANNELS; \
    for (int x = 0; x < BEFORE_COLUMNS; x++) memcpy((sums) + x * CHANNELS, first, CHANNELS * sizeof(type)); \
    for (int x = 1; x <= AFTER_COLUMNS; x++) memcpy(last + x * CHANNELS, last, CHANNELS * sizeof(type)); \
  } while (0)

/* out = in + coming - going, by words. */
static void next_words(uint16_t *out, const uint16_t *in, const uint8_t *coming, const uint8_t *going, size_t count) {
  const __m128i zero = _mm_setzero_si128();
  for (size_t x = 0; x < count; x += 16) {
    const __m128i a = load(coming + x), b = load(going + x);
    store(out + x, _mm_add_epi16(load(in + x), _mm_sub_epi16(_mm_unpacklo_epi8(a, zero), _mm_unpacklo_epi8(b, zero))));
    store(out + x + 8, _mm_add_epi16(load(in + x + 8), _mm_sub_epi16(_mm_unpackhi_epi8(a, zero), _mm_unpackhi_epi8(b, zero))));
  }
}

static void next_integers(int32_t *out, const int32_t *in, const uint8_t *coming, const uint8_t *going, size_t count) {
  for (size_t x = 0; x < count; x += 4) {
    int a, b;
    memcpy(&a, coming + x, 4), memcpy(&b, going + x, 4);
    store(out + x, _mm_add_epi32(load(in + x), _mm_sub_epi32(_mm_cvtepu8_epi32(_mm_cvtsi32_si128(a)), _mm_cvtepu8_epi32(_mm_cvtsi32_si128(b)))));
  }
}

static inline __m128i word_pixel(const uint16_t *from) { return _mm_cvtepu16_epi32(_mm_loadl_epi64((const __m128i *)from)); }
static inline __m128i integer_pixel(const int32_t *from) { return load(from); }

/* Four pixels of four channels at a time. The quotient is a product in single precision: a byte may differ from the exact one on a tie. */
#define ALONG(name, type, PIXEL) \
  static void name(const Job *job, uint8_t *const *out, const type *const *sums, int rows) { \
    const __m128 share = _mm_set1_ps(1.0f / ((float)TAP_COLUMNS * TAP_ROWS)); \
    __m128i window[2]; \
    for (int k = 0; k < rows; k++) { \
      window[k] = _mm_setzero_si128(); \
      for (int i = 0; i < TAP_COLUMNS - 1; i++) window[k] = _mm_add_epi32(window[k], PIXEL(sums[k] + i * CHANNELS)); \
    } \
    for (int x = 0; x < job->columns; x += 4) \
      UNROLL(2) for (int k = 0; k < rows; k++) { \
        const type *from = sums[k] + x * CHANNELS; \
        __m128i pixels[4]; \
        UNROLL(4) for (int v = 0; v < 4; v++) { \
          const __m128i whole = _mm_add_epi32(window[k], PIXEL(from + (TAP_COLUMNS - 1 + v) * CHANNELS)); \
          pixels[v] = _mm_cvtps_epi32(_mm_mul_ps(_mm_cvtepi32_ps(whole), share)); \
          window[k] = _mm_sub_epi32(whole, PIXEL(from + v * CHANNELS)); \
        } \
        store(out[k] + x * CHANNELS, _mm_packus_epi16(_mm_packs_epi32(pixels[0], pixels[1]), _mm_packs_epi32(pixels[2], pixels[3]))); \
      } \
  }
ALONG(along_words, uint16_t, word_pixel)
ALONG(along_integers, int32_t, integer_pixel)

#define FORM(name, type, sums, NEXT, along, ROWS) \
  static void name(const Job *job) { \
    const size_t before = BEFORE_COLUMNS * CHANNELS; \
    type *last = sums[(ROWS - 1)] + before; \
    memset(last, 0, job->row_samples * sizeof(type)); \
    for (int j = -BEFORE_ROWS - 1; j < AFTER_ROWS; j++) \
      for (size_t x = 0; x < job->row_samples; x++) last[x] = (type)(last[x] + row_of(job, j)[x]); \
    for (int r = 0; r < job->rows; r += ROWS) { \
      uint8_t *out[2]; \
      const type *in[2]; \
      for (int k = 0; k < ROWS; k++) { \
        type *here = sums[k] + before; \
        NEXT(here, k == 0 ? last : sums[k - 1] + before, row_of(job, r + k + AFTER_ROWS), row_of(job, r + k - BEFORE_ROWS - 1), job->row_samples); \
        EXTEND(type, sums[k]); \
        out[k] = job->result + (r + k) * job->row_samples; \
        in[k] = sums[k]; \
      } \
      along(job, out, in, ROWS); \
    } \
  }
FORM(words1, uint16_t, down_words, next_words, along_words, 1)
FORM(words2, uint16_t, down_words, next_words, along_words, 2)
FORM(integers1, int32_t, down_integers, next_integers, along_integers, 1)
FORM(integers2, int32_t, down_integers, next_integers, along_integers, 2)

const Form forms[] = {{"words", words1}, {"words2", words2}, {"integers", integers1}, {"integers2", integers2}, {NULL, NULL}};
