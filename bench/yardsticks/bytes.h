/*
 * Fixed-point arithmetic of bytes in 128-bit vectors: pairs of 16-bit integers meet pairs of 16-bit taps, sums are 32-bit integers
 * (_mm_madd_epi16).
 */
#include <immintrin.h>

static inline __m128i load(const void *from) { return _mm_loadu_si128((const __m128i *)from); }
static inline void store(void *to, __m128i value) { _mm_storeu_si128((__m128i *)to, value); }

/*
 * sum + (pairs of samples . pairs of taps). The empty instruction keeps the compiler from putting the products of many taps before
 * their sums, as it otherwise does with integers: they would not fit into registers.
 */
#define ADD_PRODUCT(sum, samples, taps) \
  do { \
    (sum) = _mm_add_epi32(sum, _mm_madd_epi16(samples, taps)); \
    __asm__("" : "+x"(sum)); \
  } while (0)

/* Two taps side by side, four times over. */
static inline __m128i tap_pair(int first, int second) { return _mm_set1_epi32((int)((uint32_t)(second & 0xffff) << 16 | (uint32_t)(first & 0xffff))); }

/* The largest shift at which rounded taps and the sums of any bytes fit: |tap| below 2^15, 255 times the sum of |taps| below 2^31. */
static inline int largest_shift(const float *taps, int count, double largest_sample, int most) {
  double largest = 0, sum = 0;
  for (int k = 0; k < count; k++) {
    const double size = taps[k] < 0 ? -(double)taps[k] : taps[k];
    sum += size;
    if (size > largest) largest = size;
  }
  int shift = most;
  while (shift > 0 && (largest * (1 << shift) >= 32767 || largest_sample * (sum * (1 << shift) + count) >= 2147483647.0 - (1 << shift))) shift--;
  return shift;
}

static inline int rounded(double value) { return (int)(value < 0 ? value - 0.5 : value + 0.5); }

/* Sixteen bytes of each of two rows as pairs (upper, lower) of 16-bit integers. */
static inline void interleave_bytes(int16_t *out, __m128i upper, __m128i lower) {
  const __m128i zero = _mm_setzero_si128();
  const __m128i low = _mm_unpacklo_epi8(upper, lower), high = _mm_unpackhi_epi8(upper, lower);
  store(out, _mm_unpacklo_epi8(low, zero));
  store(out + 8, _mm_unpackhi_epi8(low, zero));
  store(out + 16, _mm_unpacklo_epi8(high, zero));
  store(out + 24, _mm_unpackhi_epi8(high, zero));
}

#define PRAGMA(text) _Pragma(#text)
#define UNROLL(times) PRAGMA(GCC unroll times)

/* Four vectors of sums become sixteen bytes. */
static inline void leave_bytes(uint8_t *out, const __m128i *sums, int shift) {
  const __m128i by = _mm_cvtsi32_si128(shift);
  __m128i x[4];
  UNROLL(4) for (int v = 0; v < 4; v++) x[v] = _mm_sra_epi32(sums[v], by);
  store(out, _mm_packus_epi16(_mm_packs_epi32(x[0], x[1]), _mm_packs_epi32(x[2], x[3])));
}
