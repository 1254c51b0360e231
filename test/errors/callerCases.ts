import {
  createEngine,
  kernel,
  box,
  outer,
  reversed,
  type ConvolveOptions,
  type ErrorCode,
  type Kernel,
  type Layout,
  type PrepareOptions,
  type Raster,
} from "../../src/index.js";
import { encodePng } from "../../src/cli/encodePng.js";
import type { Bench } from "./bench.js";
import { untyped, type ErrorCase } from "./errorCase.js";
import { noiseKernel } from "../support/kernels.js";

const convolve = (options: object) => (bench: Bench) => bench.engine.convolve(bench.image, bench.kernel, untyped<ConvolveOptions>(options));
const prepare = (layout: object) => (bench: Bench) => bench.engine.prepare(bench.kernel, untyped<Layout>(layout));
const filterImage = (change: object) => (bench: Bench) => bench.engine.convolve(untyped<Raster>({ ...bench.image, ...change }), bench.kernel);

export const namesAndNumbers: Pick<Record<ErrorCode, ErrorCase[]>, "unknown-option" | "unknown-value" | "invalid-number" | "not-supported"> = {
  "unknown-option": [
    { title: "an option of convolve", act: convolve({ bordr: "zero" }), says: ["bordr", "border"] },
    {
      title: "an option of prepare",
      act: ({ engine, kernel: taps }) => engine.prepare(taps, { width: 3, height: 3 }, untyped<PrepareOptions>({ corelate: true })),
      says: ["corelate", "correlate"],
    },
    {
      title: "an option of explain",
      act: ({ engine, kernel: taps }) => engine.explain(taps, { width: 3, height: 3 }, untyped({ tolerence: 1 })),
      says: ["tolerance"],
    },
    { title: "correlate is no option of convolve", act: convolve({ correlate: true }), says: ["correlate"] },
    { title: "a part of output", act: convolve({ output: { sampel: "f32" } }), says: ["sampel", "sample"] },
    { title: "an axis of border", act: convolve({ border: { row: "zero" } }), says: ["row", "rows"] },
    { title: "a part of region", act: convolve({ region: { x: 0, y: 0, width: 1, heigth: 1 } }), says: ["height"] },
    { title: "a part of layout", act: prepare({ width: 3, height: 3, chanels: 1 }), says: ["chanels", "channels"] },
    { title: "an option of createEngine", act: () => createEngine(untyped({ biuld: "simd" })), says: ["biuld", "build"] },
    { title: "an option of a kernel", act: () => kernel([[1]], untyped({ orign: { x: 0, y: 0 } })), says: ["orign", "origin"] },
  ],
  "unknown-value": [
    {
      title: "a createWorker that is no function",
      act: () => createEngine(untyped({ threads: 2, createWorker: "worker.js" })),
      says: ["createWorker", "string"],
    },
    { title: "a border rule", act: convolve({ border: "replicat" }), says: ["replicat", '"replicate"'] },
    { title: "a border rule of one axis", act: convolve({ border: { rows: "periodical" } }), says: ['"periodic"'] },
    { title: "an extent", act: convolve({ extent: "ful" }), says: ['"full"'] },
    { title: "a method", act: convolve({ method: "ftt" }), says: ['"fft"'] },
    { title: "an alpha mode", act: convolve({ alpha: "straigth" }), says: ['"straight"'] },
    { title: "a light", act: convolve({ light: "liner" }), says: ['"linear"'] },
    { title: "a sample type of the output", act: convolve({ output: { sample: "u9" } }), says: ["u9"] },
    { title: "a sample type of a layout", act: prepare({ width: 3, height: 3, sample: "f16" }), says: ["f16"] },
    { title: "a build", act: () => createEngine(untyped({ build: "smid" })), says: ["smid"] },
    { title: "options that are no object", act: ({ engine, image, kernel: taps }) => engine.convolve(image, taps, untyped<ConvolveOptions>(5)) },
    { title: "a border that is no rule", act: convolve({ border: 7 }), says: ["7"] },
  ],
  "invalid-number": [
    { title: "a negative tolerance", act: convolve({ tolerance: -0.5 }), says: ["tolerance", "-0.5"] },
    { title: "a tolerance that is no number", act: convolve({ tolerance: Number.NaN }), says: ["NaN"] },
    { title: "an infinite gain", act: convolve({ output: { gain: Infinity } }), says: ["gain", "Infinity"] },
    { title: "an offset in words", act: convolve({ output: { offset: "128" } }), says: ["offset", "128"] },
    { title: "a memory limit below zero", act: () => createEngine({ memoryLimit: -1 }), says: ["-1"] },
    { title: "a memory limit that is no number", act: () => createEngine({ memoryLimit: Number.NaN }), says: ["NaN"] },
    ...[0, -1, 1.5, 1e9, Number.NaN, Infinity, "2", 65].map((threads) => ({
      title: `${typeof threads === "string" ? `"${threads}"` : threads} threads`,
      act: () => createEngine(untyped({ threads })),
      says: ["threads", String(threads), "1…64"],
    })),
  ],
  "not-supported": [
    {
      title: "floats in a PNG",
      act: () => encodePng({ data: new Float32Array(1), width: 1, height: 1, channels: 1 }, []),
      says: ["--output-sample u8 or u16"],
    },
  ],
};

const target = (change: object) => (bench: Bench) =>
  bench.filter().run(bench.image, untyped<Raster>({ data: bench.watch(new Uint8Array(30)), width: 6, height: 5, channels: 1, ...change }));

const sides: [name: "width" | "height", value: unknown][] = [0, -3, 2.5, Number.NaN, Infinity, 2 ** 40, "6"].flatMap((value) => [
  ["width", value],
  ["height", value],
]);

export const images: Pick<Record<ErrorCode, ErrorCase[]>, "invalid-raster" | "unsupported-samples" | "detached-samples" | "layout-mismatch"> = {
  "invalid-raster": [
    ...sides.map(([name, value]): ErrorCase => ({ title: `${name} ${String(value)}`, act: filterImage({ [name]: value }), says: [name, String(value)] })),
    ...sides.map(([name, value]): ErrorCase => ({
      title: `layout with ${name} ${String(value)}`,
      act: prepare({ width: 6, height: 5, [name]: value }),
      says: [name, String(value)],
    })),
    ...[0, -1, 5, 1.5, Number.NaN].map((channels): ErrorCase => ({
      title: `channels ${channels}`,
      act: filterImage({ channels }),
      says: ["channels", String(channels)],
    })),
    {
      title: "one sample too few",
      act: ({ engine, image, kernel: taps }) => engine.convolve({ ...image, data: image.data.subarray(0, 29) }, taps),
      says: ["29", "30"],
    },
    {
      title: "samples that make no whole number of channels",
      act: ({ engine, kernel: taps, watch }) => engine.convolve({ data: watch(new Uint8Array(40)), width: 6, height: 5 }, taps),
      says: ["40", "6", "5"],
    },
    {
      title: "one sample too many without a stride",
      act: ({ engine, kernel: taps, watch }) => engine.convolve({ data: watch(new Uint8Array(31)), width: 6, height: 5 }, taps),
      says: ["31"],
    },
    { title: "a stride shorter than a row", act: filterImage({ stride: 5 }), says: ["stride", "5", "6"] },
    { title: "a stride that is too long for the data", act: filterImage({ stride: 7 }), says: ["30", "34"] },
    ...[-6, 6.5, Number.NaN].map((stride): ErrorCase => ({ title: `stride ${stride}`, act: filterImage({ stride }), says: ["stride", String(stride)] })),
    { title: "a target with too few samples", act: target({ data: new Uint8Array(20) }), says: ["20", "30"] },
    { title: "no target but a number", act: ({ filter, image }) => filter().run(image, untyped<Raster>(5)) },
    { title: "no image at all", act: ({ engine, kernel: taps }) => engine.convolve(untyped<Raster>(undefined), taps) },
    { title: "a number in place of an image", act: ({ engine, kernel: taps }) => engine.convolve(untyped<Raster>(5), taps) },
  ],
  "unsupported-samples": [
    { title: "doubles", act: filterImage({ data: new Float64Array(30) }), says: ["Float64Array"] },
    { title: "a plain array", act: filterImage({ data: Array.from({ length: 30 }, () => 0) }), says: [/array/i] },
    { title: "signed 16-bit integers", act: filterImage({ data: new Int16Array(30) }), says: ["Int16Array"] },
    {
      title: "half-precision floats",
      act: filterImage({ data: Object.defineProperty(new Uint16Array(30), Symbol.toStringTag, { value: "Float16Array" }) }),
      says: ["Float16", "Float32Array"],
    },
    { title: "an array buffer", act: filterImage({ data: new ArrayBuffer(30) }), says: ["ArrayBuffer"] },
    { title: "a target of a plain array", act: target({ data: Array.from({ length: 30 }, () => 0) }), says: [/array/i] },
    { title: "no data", act: filterImage({ data: undefined }) },
  ],
  "detached-samples": [
    {
      title: "an image whose buffer was given away",
      act: ({ engine, kernel: taps }) => {
        const data = new Uint8Array(30);
        structuredClone(data, { transfer: [data.buffer] });
        return engine.convolve({ data, width: 6, height: 5, channels: 1 }, taps);
      },
      says: [/detached/i],
    },
    {
      title: "a target whose buffer was given away",
      act: ({ filter, image }) => {
        const data = new Uint8Array(30);
        structuredClone(data, { transfer: [data.buffer] });
        return filter().run(image, { data, width: 6, height: 5, channels: 1 });
      },
      says: [/detached/i],
    },
  ],
  "layout-mismatch": [
    { title: "another width", act: ({ filter, raster }) => filter().run(raster(Uint8Array, 7, 5)), says: ["7", "6"] },
    { title: "another height", act: ({ filter, raster }) => filter().run(raster(Uint8Array, 6, 4)), says: ["4", "5"] },
    { title: "other channels", act: ({ filter, raster }) => filter().run(raster(Uint8Array, 6, 5, 3)), says: ["3", "1"] },
    { title: "another sample type", act: ({ filter, raster }) => filter().run(raster(Float32Array, 6, 5)), says: ["f32", "u8"] },
  ],
};

export const targets: Pick<Record<ErrorCode, ErrorCase[]>, "invalid-target" | "overlapping-target"> = {
  "invalid-target": [
    { title: "another type of array", act: target({ data: new Float32Array(30) }), says: ["f32", "u8"] },
    { title: "another width", act: target({ width: 5, data: new Uint8Array(25) }), says: ["5", "6"] },
    { title: "another height", act: target({ height: 6, data: new Uint8Array(36) }), says: ["6", "5"] },
    { title: "other channels", act: target({ channels: 3, data: new Uint8Array(90) }), says: ["3", "1"] },
  ],
  "overlapping-target": [
    { title: "the image itself", act: ({ filter, image }) => filter().run(image, image) },
    {
      title: "a view that begins inside the image",
      act: ({ filter, watch }) => {
        const both = watch(Uint8Array.from({ length: 50 }, (_, index) => index));
        return filter().run({ data: both.subarray(0, 30), width: 6, height: 5 }, { data: both.subarray(20, 50), width: 6, height: 5 });
      },
    },
  ],
};

const wide: Raster<Uint8Array> = { data: new Uint8Array(24), width: 2, height: 4, channels: 3 };
const rgba: Raster<Uint8Array> = { data: new Uint8Array(32), width: 2, height: 4, channels: 4 };
const sobel = outer([1, 2, 1], [1, 0, -1]);

export const kernelsAndBorders: Pick<
  Record<ErrorCode, ErrorCase[]>,
  | "invalid-kernel"
  | "invalid-origin"
  | "border-without-use"
  | "border-not-applicable"
  | "invalid-constant"
  | "empty-result"
  | "invalid-region"
  | "alpha-not-applicable"
  | "method-not-applicable"
> = {
  "invalid-kernel": [
    { title: "no rows", act: () => kernel([]) },
    { title: "no taps in a row", act: () => kernel([[]]) },
    { title: "ragged rows", act: () => kernel([[1, 2], [3]]), says: ["1", "2"] },
    { title: "a tap that is no number", act: () => kernel([[1, Number.NaN]]), says: ["NaN"] },
    { title: "an infinite tap", act: () => kernel([[-Infinity]]), says: ["Infinity"] },
    { title: "a tap beyond single precision", act: () => kernel([[1e39]]), says: ["1e+39"] },
    { title: "something else in place of a kernel", act: ({ engine, image }) => engine.convolve(image, untyped<Kernel>([[1]])) },
    { title: "nothing in place of a kernel", act: ({ engine, image }) => engine.convolve(image, untyped<Kernel>(undefined)) },
    { title: "the same to turn", act: () => reversed(untyped<Kernel>({})) },
  ],
  "invalid-origin": [
    { title: "right of the kernel", act: () => kernel([[1, 2]], { origin: { x: 2, y: 0 } }), says: ["2"] },
    { title: "above the kernel", act: () => kernel([[1, 2]], { origin: { x: 0, y: -1 } }), says: ["-1"] },
    { title: "between taps", act: () => kernel([[1, 2]], { origin: { x: 0.5, y: 0 } }), says: ["0.5"] },
  ],
  "border-without-use": [{ title: "a border with valid", act: convolve({ border: "zero", extent: "valid" }), says: ["valid", "border"] }],
  "border-not-applicable": [
    {
      title: "renormalised with a negative tap",
      act: ({ engine, image }) => engine.convolve(image, sobel, { border: "renormalised" }),
      says: ["renormalised", "-"],
    },
    {
      title: "renormalised on one axis",
      act: ({ engine, image }) => engine.convolve(image, kernel([[-1, 3]]), { border: { columns: "renormalised" } }),
      says: ["renormalised", "-1"],
    },
    { title: "renormalised with no weight", act: ({ engine, image }) => engine.convolve(image, kernel([[0, 0]]), { border: "renormalised" }), says: ["0"] },
  ],
  "invalid-constant": [
    ...[256, -1, 1.5, Number.NaN, "7"].map((constant): ErrorCase => ({
      title: `${constant} for bytes`,
      act: convolve({ border: { constant } }),
      says: [String(constant), "255"],
    })),
    {
      title: "65536 for 16-bit samples",
      act: ({ engine, kernel: taps, raster }) => engine.convolve(raster(Uint16Array, 3, 3), taps, { border: { constant: 65536 } }),
      says: ["65536", "65535"],
    },
    {
      title: "infinity for floats",
      act: ({ engine, kernel: taps, raster }) => engine.convolve(raster(Float32Array, 3, 3), taps, { border: { constant: Infinity } }),
      says: ["Infinity"],
    },
    {
      title: "beyond single precision for floats",
      act: ({ engine, kernel: taps, raster }) => engine.convolve(raster(Float32Array, 3, 3), taps, { border: { constant: 1e39 } }),
      says: ["1e+39"],
    },
    {
      title: "two constants for three channels",
      act: ({ engine, kernel: taps }) => engine.convolve(wide, taps, { border: { constant: [1, 2] } }),
      says: ["2", "3"],
    },
    {
      title: "one of three out of range",
      act: ({ engine, kernel: taps }) => engine.convolve(wide, taps, { border: { rows: { constant: [1, 300, 2] } } }),
      says: ["300"],
    },
  ],
  "empty-result": [
    {
      title: "a kernel wider than the image",
      act: ({ engine, image }) => engine.convolve(image, box({ width: 7, height: 2 }), { extent: "valid" }),
      says: ["7×2", "6×5", "valid"],
    },
    {
      title: "a kernel higher than the image",
      act: ({ engine, image }) => engine.convolve(image, box({ width: 1, height: 6 }), { extent: "valid" }),
      says: ["1×6", "6×5"],
    },
  ],
  "invalid-region": [
    { title: "beyond the right edge", act: convolve({ region: { x: 4, y: 0, width: 3, height: 1 } }), says: ["4", "3", "6"] },
    { title: "above the image", act: convolve({ region: { x: 0, y: -1, width: 1, height: 1 } }), says: ["-1"] },
    { title: "without samples", act: convolve({ region: { x: 0, y: 0, width: 0, height: 1 } }), says: ["0"] },
    { title: "between samples", act: convolve({ region: { x: 0.5, y: 0, width: 1, height: 1 } }), says: ["0.5"] },
    { title: "no number", act: convolve({ region: { x: 0, y: 0, width: Number.NaN, height: 1 } }), says: ["NaN"] },
    { title: "outside the valid part", act: convolve({ extent: "valid", region: { x: 0, y: 0, width: 5, height: 1 } }), says: ["5", "4"] },
    { title: "a missing part", act: convolve({ region: { x: 0, y: 0, width: 1 } }), says: ["height"] },
  ],
  "alpha-not-applicable": [
    { title: "straight with one channel", act: convolve({ alpha: "straight" }), says: ["straight", "1"] },
    {
      title: "premultiplied with three channels",
      act: ({ engine, kernel: taps }) => engine.convolve(wide, taps, { alpha: "premultiplied" }),
      says: ["premultiplied", "3"],
    },
    { title: "keep with one channel", act: convolve({ alpha: "keep" }), says: ["keep", "1"] },
    { title: "straight with taps that sum to nothing", act: ({ engine }) => engine.convolve(rgba, sobel, { alpha: "straight" }), says: ["straight", "0"] },
  ],
  "method-not-applicable": [
    { title: "a running sum of unequal taps", act: convolve({ method: "running-sum" }) },
    {
      title: "short passes of a kernel that is no product",
      act: ({ engine, raster }) => engine.convolve(raster(Float32Array, 20, 20), noiseKernel(19, 21, 3), { method: "separable" }),
    },
  ],
};
