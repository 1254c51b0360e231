/**
 * The job record: where the core finds everything about one filter. Byte offsets of 32-bit fields; pointers are byte addresses.
 * The host writes it while planning, the routines only read it. This file is plain constants: host and core share it.
 */

// ---- enter: source samples → extended rows of working floats ----
/** 0 u8, 1 u16, 2 f32 */
export const SOURCE_KIND = 0;
/** Samples per pixel. */
export const CHANNELS = 4;
/** Channels that are colours: decoded and premultiplied where asked for. */
export const COLOURS = 8;
/** 1: colours become a · colour, with a = alpha ÷ full. */
export const PREMULTIPLY = 12;
/** 1: colours are decoded from the sRGB curve. */
export const DECODE = 16;
/** Table of floats by code, for integer samples that are decoded. */
export const CURVE = 20;
/** i32 a row of the extended image: below 0 where the constant row stands for it. */
export const ROW_MAP = 24;
/** Staged source rows, one after the other, and the bytes from one to the next. */
export const STAGING = 28;
export const STAGING_STRIDE = 32;
/** Where source rows are read in place instead of STAGING (else 0): source row 0's first staged column, and the bytes from row to row. */
export const SOURCE_ROWS = 304;
export const SOURCE_ROW_STRIDE = 308;
/** The longest stretch of extended columns that are neighbours in the source: first staged column, first extended column, columns. */
export const RUN_SOURCE = 36;
export const RUN_COLUMN = 40;
export const RUN_COUNT = 44;
/** Pairs of i32 for all other columns: extended column; where from: ≥ 0 an extended column of the stretch, −1 the constant, −2 − k staged column k. */
export const HALO = 48;
export const HALO_COUNT = 52;
/** Two pixels in source samples (outside by row, outside by column) and what becomes of them: an extended row and one pixel of working floats. */
export const CONSTANT_PIXELS = 56;
export const CONSTANT_ROW = 60;
export const CONSTANT_COLUMN = 76;
/** Columns of the extended image. */
export const EXTENDED_COLUMNS = 64;
/** Rows of the extended image. */
export const EXTENDED_ROWS = 68;
/** f32: the source type's full value. */
export const SOURCE_FULL = 72;
/** f32: what the full value is among working floats: 1 where colours are decoded, else SOURCE_FULL. Alpha is held in the same unit. */
export const WORKING_FULL = 292;

// ---- method ----
/** f32 taps in correlation order, row by row (direct); row vectors, one term after the other (separable); the one tap (running sums). */
export const TAPS = 80;
/** f32 column vectors, one term after the other. */
export const COLUMN_TAPS = 84;
export const KERNEL_COLUMNS = 88;
export const KERNEL_ROWS = 92;
export const TERMS = 96;
/** Pointer tables of the ring: 2 · RING_ROWS entries a term, so that any RING_ROWS neighbours lie side by side. */
export const ROW_TABLE = 100;
export const RING_ROWS = 104;
/** An extended row on its way into a ring or the planes; running sums of floats keep suffix sums ENTERED_STRIDE bytes behind it. */
export const ENTERED = 108;
export const ENTERED_STRIDE = 112;
/** Two result rows of working floats, and the bytes from one to the next. */
export const RESULT = 116;
export const RESULT_STRIDE = 120;
/** Floats of a result row that are computed: columns · channels, rounded up to four. */
export const RESULT_FLOATS = 124;
/** Position of the first extended column and row inside a block of running sums. */
export const COLUMN_PHASE = 128;
export const ROW_PHASE = 132;
/** One row of sums: columns · channels floats, or RAW_SAMPLES integers. */
export const SUMS = 136;
/** Integer sums: samples of a raw row (staged columns and one pixel), rounded up to 16; the raw row that stands outside by row. */
export const RAW_SAMPLES = 140;
export const RAW_CONSTANT = 296;

// ---- leave: result rows → samples ----
/** 0 u8, 1 u16, 2 f32 */
export const OUTPUT_KIND = 144;
export const OUTPUT_COLUMNS = 148;
export const OUTPUT_ROWS = 152;
/** Staged output rows, and the bytes from one to the next. */
export const OUTPUT = 156;
export const OUTPUT_STRIDE = 160;
/** Where result rows are written in place instead of OUTPUT (else 0): result row 0, and the bytes from row to row. */
export const RESULT_ROWS = 312;
export const RESULT_ROW_STRIDE = 316;
/** f32 */
export const GAIN = 164;
export const OFFSET = 168;
/** f32: the output type's full value. */
export const OUTPUT_FULL = 172;
/** 1: exact results are integers; take what the error added away before anything else. */
export const ROUND = 176;
/** 0 none, 1 straight, 2 premultiplied, 3 keep */
export const ALPHA = 180;
/** f32: h∗a of an opaque image, Σh · WORKING_FULL, and how far the computed h∗a may be from it and still stand for it. */
export const OPAQUE_SUM = 184;
export const ALPHA_BOUND = 188;
/** f32: where the computed h∗a is no larger, it is noise and the result transparent. */
export const ALPHA_NOISE = 300;
/** Renormalised border: i32 a row, i32 a column, floats [row pattern][column pattern], floats a row pattern; 0 where there is none. */
export const WEIGHT_ROWS = 192;
export const WEIGHT_COLUMNS = 196;
export const WEIGHTS = 200;
export const WEIGHT_STRIDE = 204;
/** `keep`: where in the extended image result (0, 0) lies, and an extended row to read alpha from. */
export const ANCHOR_COLUMN = 208;
export const ANCHOR_ROW = 212;
export const KEEP_STAGING = 216;
export const KEEP_ROW = 220;

// ---- fft ----
/** Plan of the column and of the row transforms: see fft/transform.ts. */
export const COLUMN_PLAN = 224;
export const ROW_PLAN = 228;
/** Complex planes: re then im; bytes from row to row, from re to im, from pair to pair; pairs. */
export const PLANES = 232;
export const PLANE_STRIDE = 236;
export const PLANE_BYTES = 240;
export const PAIRS = 244;
/** Rows and columns of a tile, and the columns that one tile gives. */
export const TILE_ROWS = 248;
export const TILE_COLUMNS = 252;
export const TILE_STEP = 256;
/** The kernel's spectrum: [row ÷ lanes][column][re lanes, im lanes]. */
export const SPECTRUM = 260;
/** Scratch of one group of rows: [column][lanes] re, then im. */
export const ROW_SCRATCH = 264;
/** Result rows that one strip gives. */
export const STRIP_ROWS = 268;
/** Bits of non-finite samples: bytes from row to row of the strip, rows; a count a row; one row of bits to gather in. 0 where they cannot occur. */
export const MARKS = 272;
export const MARK_STRIDE = 276;
export const MARK_COUNTS = 280;
export const MARK_ROW = 284;
/** f32. FFT: 1 ÷ (tile rows · tile columns). Running sums of floats: the power of two that keeps sums over the window finite. */
export const SCALE = 288;

// ---- fixed point ----
/** i32: what the sums start from (the offset and half a unit, so that shifting rounds), and by how many bits they are shifted at the end. */
export const SUM_BIAS = 336;
export const SUM_SHIFT = 340;
/** The same for the column sums of the separable method, which end as 16-bit integers. */
export const COLUMN_BIAS = 344;
export const COLUMN_SHIFT = 348;
/** i32: what running sums of bytes are divided by where scaling in floats could miss the right integer; 0 where it cannot. */
export const DIVISOR = 352;

/** Entries of a sparse kernel at TAPS instead of all its taps (direct): see sparse.ts and bytes/sparse.ts. 0: all taps. */
export const TAP_ENTRIES = 356;

export const RECORD_BYTES = 384;
