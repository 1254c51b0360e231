/* All forms of one block, BLOCK_ROWS x BLOCK_VECTORS: included once for each block. */
#define TAP_KIND b
#define TAP(k) splat(taps[k])
#define TAP_TYPE float
#define TAPS job->taps
#define UNROLLED 1
#include "direct_sweep.h"
#undef UNROLLED
#undef TAP_KIND
#if WRITTEN_OUT
#define TAP_KIND bu
#define UNROLLED TAP_COLUMNS
#include "direct_sweep.h"
#undef UNROLLED
#undef TAP_KIND
#endif
#undef TAP
#undef TAP_TYPE
#undef TAPS
#define TAP_KIND s
#define TAP(k) taps[k]
#define TAP_TYPE Vector
#define TAPS splatted
#define UNROLLED 1
#include "direct_sweep.h"
#undef UNROLLED
#undef TAP_KIND
#if WRITTEN_OUT
#define TAP_KIND su
#define UNROLLED TAP_COLUMNS
#include "direct_sweep.h"
#undef UNROLLED
#undef TAP_KIND
#endif
#undef TAP
#undef TAP_TYPE
#undef TAPS
#undef BLOCK_ROWS
#undef BLOCK_VECTORS
