/**
 * Source   Khronos Group, The OpenVX Specification 1.3.1: Gaussian 3×3, box 3×3, Sobel 3×3, Gaussian pyramid and custom
 *          convolution, REPLICATE and CONSTANT borders. Sums of the printed masks on the example image of W3C Filter
 *          Effects, by exact integer arithmetic. The conformance suite truncates; these are the sums before division.
 */
import { kernel, outer } from "../../../src/kernels/index.js";
import { floatCase, type PublishedCase } from "../../support/publishedCase.js";
import { exampleImage } from "./w3cFilterEffects.js";

const five = (value: number): number[] => Array.from({ length: 5 }, () => value);
const gaussian = outer([1, 2, 1], [1, 2, 1]);
const ramp = (slope: number): number[][] => Array.from({ length: 5 }, () => [0, 1, 2, 3, 4].map((x) => slope * x));
const inside = (value: number): number[][] => Array.from({ length: 3 }, () => [value, value, value]);
const customExample = kernel([
  [3, 0, -3],
  [10, 0, -10],
  [3, 0, -3],
]);

export const openVx: PublishedCase[] = [
  floatCase("Gaussian 3×3 sums, replicate", exampleImage, gaussian, {}, [
    [480, 720, 1640, 3080, 3760],
    [1680, 1920, 2540, 3380, 3760],
    [3080, 3260, 3525, 3755, 3840],
    [3880, 3940, 3995, 4005, 4000],
    five(4080),
  ]),
  floatCase("Gaussian 3×3 sums, constant 0", exampleImage, gaussian, { border: { constant: 0 } }, [
    [360, 640, 1305, 2335, 2115],
    [1280, 1920, 2540, 3380, 2820],
    [2325, 3260, 3525, 3755, 2880],
    [2915, 3940, 3995, 4005, 3000],
    [2295, 3060, 3060, 3060, 2295],
  ]),
  floatCase("box 3×3 sums, replicate", exampleImage, outer([1, 1, 1], [1, 1, 1]), {}, [
    [360, 480, 1085, 1630, 2115],
    [960, 1080, 1485, 1830, 2115],
    [1705, 1785, 1955, 2085, 2175],
    [2150, 2190, 2225, 2240, 2235],
    five(2295),
  ]),
  floatCase(
    "Sobel 3×3 across, laid on the image as printed",
    exampleImage,
    kernel([
      [-1, 0, 1],
      [-2, 0, 2],
      [-1, 0, 1],
    ]),
    {},
    [[80, 160, 760, 680, 0], [80, 160, 460, 380, 0], [60, 120, 145, 85, 0], [20, 40, 15, -5, 0], five(0)],
    true,
  ),
  floatCase(
    "Sobel 3×3 down, laid on the image as printed",
    exampleImage,
    kernel([
      [-1, -2, -1],
      [0, 0, 0],
      [1, 2, 1],
    ]),
    {},
    [[400, 400, 300, 100, 0], [800, 800, 600, 200, 0], [600, 540, 385, 175, 80], [200, 140, 85, 75, 80], five(0)],
    true,
  ),
  floatCase("Gaussian pyramid 5×5 sums, replicate", exampleImage, outer([1, 4, 6, 4, 1], [1, 4, 6, 4, 1]), {}, [
    [11520, 17240, 30520, 47240, 57640],
    [28280, 32805, 41905, 52555, 58955],
    [47320, 50065, 54445, 58815, 61215],
    [59880, 60955, 62255, 63205, 63605],
    [64520, 64715, 64895, 64965, 64965],
  ]),
  floatCase("custom convolution, printed example on I = x: 32", ramp(1), customExample, { extent: "valid" }, inside(32)),
  floatCase("custom convolution, printed example on I = 10 x: 320", ramp(10), customExample, { extent: "valid" }, inside(320)),
  floatCase(
    "Sobel on the ramp I = x laid on the image: +8",
    ramp(1),
    kernel([
      [-1, 0, 1],
      [-2, 0, 2],
      [-1, 0, 1],
    ]),
    { extent: "valid" },
    inside(8),
    true,
  ),
  floatCase(
    "Sobel on the ramp I = x convolved as printed: −8",
    ramp(1),
    kernel([
      [-1, 0, 1],
      [-2, 0, 2],
      [-1, 0, 1],
    ]),
    { extent: "valid" },
    inside(-8),
  ),
];
