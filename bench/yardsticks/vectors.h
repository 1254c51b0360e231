/* Four floats, anywhere in memory or on a multiple of sixteen bytes. Written with the compiler's vector types: lanes as in SSE. */
typedef float Vector __attribute__((vector_size(16)));
typedef float LooseVector __attribute__((vector_size(16), aligned(4)));

static inline Vector load(const float *from) { return (Vector) * (const LooseVector *)from; }
static inline void store(float *to, Vector value) { *(LooseVector *)to = (LooseVector)value; }
static inline Vector splat(float value) { return (Vector){value, value, value, value}; }
