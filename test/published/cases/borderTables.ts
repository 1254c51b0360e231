/**
 * Source   The index maps of the border rules as SciPy's manual (scipy.ndimage, modes) and NumPy's (numpy.pad) draw them;
 *          each table was made with both, in exact integers. The whole-sample rule is the symmetric extension of JPEG 2000.
 */
import { kernel } from "../../../src/kernels/index.js";
import type { BorderRule } from "../../../src/types.js";
import { floatCase, type PublishedCase } from "../../support/publishedCase.js";

const inLine: [rule: BorderRule, convolved: number[], correlated: number[]][] = [
  ["zero", [40, 120, 240, 480, 640], [100, 210, 420, 840, 400]],
  [{ constant: 7 }, [68, 120, 240, 480, 647], [107, 210, 420, 840, 428]],
  ["replicate", [80, 120, 240, 480, 800], [110, 210, 420, 840, 1040]],
  ["half-sample-symmetric", [80, 120, 240, 480, 800], [110, 210, 420, 840, 1040]],
  ["periodic", [680, 120, 240, 480, 650], [260, 210, 420, 840, 440]],
  ["whole-sample-symmetric", [120, 120, 240, 480, 720], [120, 210, 420, 840, 720]],
];

/** 15 taps on three samples. */
const kernelLongerThanImage: [rule: BorderRule, convolved: number[]][] = [
  ["zero", [40, 46, 52]],
  ["replicate", [169, 184, 201]],
  ["periodic", [245, 230, 245]],
  ["half-sample-symmetric", [223, 238, 255]],
  ["whole-sample-symmetric", [248, 248, 232]],
];

const square = [
  [1, 2, 3],
  [4, 5, 6],
  [7, 8, 9],
];
const squareKernel = kernel([
  [1, 2, 0],
  [0, -1, 3],
  [4, 0, -2],
]);
const inSquare: [rule: BorderRule, convolved: number[][], correlated: number[][]][] = [
  [
    "zero",
    [
      [12, 17, 15],
      [26, 42, 23],
      [13, 29, 5],
    ],
    [
      [-5, 11, 17],
      [-3, 28, 34],
      [25, 33, 8],
    ],
  ],
  [
    "replicate",
    [
      [21, 27, 29],
      [36, 42, 44],
      [48, 54, 56],
    ],
    [
      [14, 16, 22],
      [26, 28, 34],
      [41, 43, 49],
    ],
  ],
  [
    "periodic",
    [
      [35, 39, 31],
      [38, 42, 34],
      [32, 36, 28],
    ],
    [
      [42, 34, 38],
      [36, 28, 32],
      [39, 31, 35],
    ],
  ],
  [
    "whole-sample-symmetric",
    [
      [28, 33, 30],
      [37, 42, 39],
      [40, 45, 42],
    ],
    [
      [28, 25, 30],
      [31, 28, 33],
      [40, 37, 42],
    ],
  ],
];

/** [1 2 3 4] as each rule continues it by five samples: read by shifting with a single tap. */
const padded: [rule: BorderRule, before: number[], after: number[]][] = [
  ["zero", [0, 0, 0, 0, 0], [0, 0, 0, 0, 0]],
  ["replicate", [1, 1, 1, 1, 1], [4, 4, 4, 4, 4]],
  ["periodic", [4, 1, 2, 3, 4], [1, 2, 3, 4, 1]],
  ["half-sample-symmetric", [4, 4, 3, 2, 1], [4, 3, 2, 1, 1]],
  ["whole-sample-symmetric", [2, 3, 4, 3, 2], [3, 2, 1, 2, 3]],
];

const spell = (rule: BorderRule): string => (typeof rule === "string" ? rule : JSON.stringify(rule));
const oneTo15 = kernel([Array.from({ length: 15 }, (_, i) => i + 1)]);
const column = (values: number[]): number[][] => values.map((value) => [value]);

export const borderTables: PublishedCase[] = [
  ...inLine.flatMap(([border, convolved, correlated]) => [
    floatCase(`${spell(border)}: [1 2 4] convolved along a row`, [[10, 20, 40, 80, 160]], kernel([[1, 2, 4]]), { border }, [convolved]),
    floatCase(`${spell(border)}: [1 2 4] correlated along a row`, [[10, 20, 40, 80, 160]], kernel([[1, 2, 4]]), { border }, [correlated], true),
    floatCase(`${spell(border)}: [1 2 4] convolved down a column`, column([10, 20, 40, 80, 160]), kernel([[1], [2], [4]]), { border }, column(convolved)),
  ]),
  ...kernelLongerThanImage.map(([border, convolved]) => floatCase(`${spell(border)}: 15 taps on 3 samples`, [[1, 2, 3]], oneTo15, { border }, [convolved])),
  ...inSquare.flatMap(([border, convolved, correlated]) => [
    floatCase(`${spell(border)}: 3 × 3 convolved`, square, squareKernel, { border }, convolved),
    floatCase(`${spell(border)}: 3 × 3 correlated`, square, squareKernel, { border }, correlated, true),
  ]),
  floatCase("3 × 3 convolved, full", square, squareKernel, { border: "zero", extent: "full" }, [
    [1, 4, 7, 6, 0],
    [4, 12, 17, 15, 9],
    [11, 26, 42, 23, 12],
    [16, 13, 29, 5, 15],
    [28, 32, 22, -16, -18],
  ]),
  floatCase("3 × 3 convolved, valid", square, squareKernel, { extent: "valid" }, [[42]]),
  ...padded.flatMap(([border, before, after]) => [
    floatCase(`${spell(border)}: continued to the left`, [[1, 2, 3, 4]], kernel([[0, 0, 0, 0, 0, 1]], { origin: { x: 0, y: 0 } }), { border }, [
      [...before, 1, 2, 3, 4].slice(0, 4),
    ]),
    floatCase(`${spell(border)}: continued to the right`, [[1, 2, 3, 4]], kernel([[1, 0, 0, 0, 0, 0]], { origin: { x: 5, y: 0 } }), { border }, [
      [1, 2, 3, 4, ...after].slice(5),
    ]),
  ]),
];
