import { kernel, outer, scaled } from "../../../src/kernels/index.js";
import { floatCase, type PublishedCase } from "../../support/publishedCase.js";

/** Source   SciPy reference, scipy.ndimage.convolve, the examples of its documentation. Even sizes have another centre there; these are odd. */
const scipyA = [
  [1, 2, 0, 0],
  [5, 3, 0, 4],
  [0, 0, 0, 7],
  [9, 3, 0, 0],
];
const scipyK = kernel([
  [1, 1, 1],
  [1, 1, 0],
  [1, 0, 0],
]);
const scipyB = [
  [2, 0, 0],
  [1, 0, 0],
  [0, 0, 0],
];
export const scipyDocumentation: PublishedCase[] = [
  floatCase("constant 0", scipyA, scipyK, { border: { constant: 0 } }, [
    [11, 10, 7, 4],
    [10, 3, 11, 11],
    [15, 12, 14, 7],
    [12, 3, 7, 0],
  ]),
  floatCase("constant 1", scipyA, scipyK, { border: { constant: 1 } }, [
    [13, 11, 8, 7],
    [11, 3, 11, 14],
    [16, 12, 14, 10],
    [15, 6, 10, 5],
  ]),
  floatCase(
    "reflect (half-sample), a column",
    scipyB,
    kernel([
      [0, 1, 0],
      [0, 1, 0],
      [0, 1, 0],
    ]),
    { border: "half-sample-symmetric" },
    [
      [5, 0, 0],
      [3, 0, 0],
      [1, 0, 0],
    ],
  ),
  floatCase(
    "reflect (half-sample), corners",
    scipyB,
    kernel([
      [1, 0, 0],
      [0, 1, 0],
      [0, 0, 1],
    ]),
    { border: "half-sample-symmetric" },
    [
      [4, 2, 0],
      [3, 2, 0],
      [1, 1, 0],
    ],
  ),
  floatCase(
    "nearest (replicate), 5 × 3",
    [
      [2, 0, 1],
      [1, 0, 0],
      [0, 0, 0],
    ],
    outer([1, 1, 1, 1, 1], [0, 1, 0]),
    { border: "replicate" },
    [
      [7, 0, 3],
      [5, 0, 2],
      [3, 0, 1],
    ],
  ),
];

/**
 * Source   The help page of the two-dimensional convolution of matrix languages (full and valid shapes; a 10 × 10 raised square and a
 *          Sobel mask), and a magic square, in exact integers.
 */
const raised = Array.from({ length: 10 }, (_, r) => Array.from({ length: 10 }, (_, c) => (r >= 2 && r < 7 && c >= 2 && c < 7 ? 1 : 0)));
const edge = [0, 0, 1, 3, 4, 4, 4, 3, 1, 0, 0, 0];
const nothing = edge.map(() => 0);
const turnedEdge = edge.map((value) => 0 - value);
const magic = [
  [8, 1, 6],
  [3, 5, 7],
  [4, 9, 2],
];
const twoByTwo = kernel([
  [1, 2],
  [3, 4],
]);
export const matrixLanguages: PublishedCase[] = [
  floatCase(
    "raised square, full",
    raised,
    kernel([
      [1, 2, 1],
      [0, 0, 0],
      [-1, -2, -1],
    ]),
    { border: "zero", extent: "full" },
    [nothing, nothing, edge, edge, nothing, nothing, nothing, turnedEdge, turnedEdge, nothing, nothing, nothing],
  ),
  floatCase("magic square, full", magic, twoByTwo, { border: "zero", extent: "full" }, [
    [8, 17, 8, 12],
    [27, 46, 39, 38],
    [13, 44, 61, 32],
    [12, 43, 42, 8],
  ]),
  floatCase("magic square, valid", magic, twoByTwo, { extent: "valid" }, [
    [46, 39],
    [44, 61],
  ]),
  // The centre of an even kernel as numpy.convolve, scipy.signal and feConvolveMatrix place it: ⌊(n − 1) / 2⌋.
  floatCase("impulse and two taps", [[0, 0, 0, 1, 0, 0, 0]], kernel([[1, 2]]), { border: "zero" }, [[0, 0, 0, 1, 2, 0, 0]]),
  floatCase("impulse and four taps", [[0, 0, 0, 1, 0, 0, 0]], kernel([[1, 2, 3, 4]]), { border: "zero" }, [[0, 0, 1, 2, 3, 4, 0]]),
  // Where ⌊n / 2⌋ is the centre (scipy.ndimage, the matrix languages' "same"), the origin is given.
  floatCase("impulse and two taps, centre ⌊n/2⌋", [[0, 0, 0, 1, 0, 0, 0]], kernel([[1, 2]], { origin: { x: 1, y: 0 } }), { border: "zero" }, [
    [0, 0, 1, 2, 0, 0, 0],
  ]),
];

/** Source   A. V. Oppenheim, R. W. Schafer, Discrete-Time Signal Processing, ch. 8: circular convolution is the product of the transforms. */
export const circular: PublishedCase[] = [
  floatCase(
    "2 × 2",
    [
      [1, 2],
      [3, 4],
    ],
    kernel([
      [1, 0],
      [2, -1],
    ]),
    { border: "periodic" },
    [
      [3, 7],
      [3, 7],
    ],
  ),
  floatCase(
    "1 … 16 as 4 × 4",
    [0, 1, 2, 3].map((r) => [1, 2, 3, 4].map((c) => 4 * r + c)),
    twoByTwo,
    { border: "periodic" },
    [
      [112, 98, 108, 118],
      [40, 26, 36, 46],
      [80, 66, 76, 86],
      [120, 106, 116, 126],
    ],
  ),
  floatCase("1 … 10 by [1 2 3], every block of overlap-save", [[1, 2, 3, 4, 5, 6, 7, 8, 9, 10]], kernel([[1, 2, 3]]), { border: "zero", extent: "full" }, [
    [1, 4, 10, 16, 22, 28, 34, 40, 46, 52, 47, 30],
  ]),
];

/** Source   F. C. Crow, Summed-area tables for texture mapping, SIGGRAPH 1984 (the method); sums in exact integers. */
const doubling = [[10, 20, 40, 80, 160]];
export const boxes: PublishedCase[] = [
  floatCase("box of 3", doubling, kernel([[1, 1, 1]]), {}, [[40, 70, 140, 280, 400]]),
  floatCase("box of 5", doubling, kernel([[1, 1, 1, 1, 1]]), {}, [[90, 160, 310, 460, 600]]),
];

/** Source   ISO/IEC 15444-1 (JPEG 2000) Annex F, the reversible 5/3 filters (taps from memory, results recomputed exactly). */
const signal = [10, 12, 15, 20, 25, 25, 20, 10, 5];
const low = [9.75, 11.25, 14.875, 20.375, 25.625, 26.25, 20, 9.375, 3.75];
const high = [-2, -0.5, -1, 0, 2.5, 2.5, 2.5, -2.5, -5];
export const jpeg2000: PublishedCase[] = [
  floatCase("5/3 low-pass", [signal], scaled(kernel([[-1, 2, 6, 2, -1]]), 1 / 8), { border: "whole-sample-symmetric" }, [low]),
  floatCase("5/3 high-pass", [signal], scaled(kernel([[-1, 2, -1]]), 1 / 2), { border: "whole-sample-symmetric" }, [high]),
  floatCase("5/3 low-pass of a ramp", [[1, 2, 3, 4, 5, 6, 7, 8]], scaled(kernel([[-1, 2, 6, 2, -1]]), 1 / 8), { border: "whole-sample-symmetric" }, [
    [1, 1.75, 3, 4, 5, 6, 7.25, 8],
  ]),
  floatCase("5/3 high-pass of a ramp", [[1, 2, 3, 4, 5, 6, 7, 8]], scaled(kernel([[-1, 2, -1]]), 1 / 2), { border: "whole-sample-symmetric" }, [
    [-1, 0, 0, 0, 0, 0, 0, 1],
  ]),
];
