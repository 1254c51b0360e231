/** Rasters that were accepted once are remembered by their arrays: what changed since then must be seen all the same. */
import { expect, test } from "vitest";
import { createEngine, gaussian, type Raster } from "../../src/index.js";

const layout = { width: 8, height: 6, channels: 2, sample: "u8" } as const;
const count = 8 * 6 * 2;

async function acceptedImage(data = new Uint8Array(count)) {
  const filter = (await createEngine()).prepare(gaussian(1), layout);
  const image: Raster = { data, width: 8, height: 6 };
  const target: Raster = { data: new Uint8Array(count), width: 8, height: 6 };
  filter.run(image, target);
  return { filter, image, target };
}

test.each<[string, Partial<Raster>, string]>([
  ["sides that change places", { width: 6, height: 8 }, "layout-mismatch"],
  ["half the width, twice the channels", { width: 4 }, "layout-mismatch"],
  ["more rows than there are", { height: 7 }, "invalid-raster"],
  ["fewer rows than there are", { height: 5, channels: 2 }, "invalid-raster"],
  ["a side that is a string of the same number", { width: "8" as unknown as number }, "invalid-raster"],
  ["channels that are too few", { channels: 1 }, "invalid-raster"],
  ["channels of the wrong kind", { channels: "2" as unknown as 2 }, "invalid-raster"],
  ["rows farther apart", { stride: 17 }, "invalid-raster"],
  ["rows too near", { stride: 15 }, "invalid-raster"],
])("the array of an accepted image with %s", async (_, changed, code) => {
  const { filter, image, target } = await acceptedImage();
  const refused = expect.objectContaining({ code });
  expect(() => filter.run({ ...image, ...changed }, target)).toThrow(refused);
  expect(() => filter.run(Object.assign(image, changed), target)).toThrow(refused);
});

test("an accepted image or target that was transferred since then", async () => {
  const { filter, image, target } = await acceptedImage();
  structuredClone(target.data, { transfer: [target.data.buffer as ArrayBuffer] });
  expect(() => filter.run(image, target)).toThrow(expect.objectContaining({ code: "detached-samples" }));
  structuredClone(image.data, { transfer: [image.data.buffer as ArrayBuffer] });
  expect(() => filter.run(image)).toThrow(expect.objectContaining({ code: "detached-samples" }));
});

test("an accepted image whose buffer was made shorter or longer since then", async () => {
  const buffer = new (ArrayBuffer as unknown as new (byteLength: number, options: object) => ArrayBuffer & { resize(byteLength: number): void })(count, {
    maxByteLength: 2 * count,
  });
  const { filter, image, target } = await acceptedImage(new Uint8Array(buffer));
  for (const byteLength of [count - 1, count + 1, 2 * count]) {
    buffer.resize(byteLength);
    expect(() => filter.run(image, target)).toThrow(expect.objectContaining({ code: byteLength === 2 * count ? "layout-mismatch" : "invalid-raster" }));
  }
  buffer.resize(count);
  expect(filter.run(image, target)).toBe(target);
});

test("an accepted target that is the image of the next run", async () => {
  const { filter, image, target } = await acceptedImage();
  filter.run(target, image);
  expect(() => filter.run(target, target)).toThrow(expect.objectContaining({ code: "overlapping-target" }));
});

test("the colour space is that of the image at hand", async () => {
  const { filter, image } = await acceptedImage();
  const spaces = ["srgb", undefined, "display-p3"].map(
    (colorSpace) => filter.run({ ...image, ...(colorSpace === undefined ? {} : { colorSpace }) }).colorSpace,
  );
  expect(spaces).toEqual(["srgb", undefined, "display-p3"]);
});

test("views are one object, which nobody can change, until the memory grows", async () => {
  const engine = await createEngine();
  const filter = engine.prepare(gaussian(1), layout);
  const { result } = filter;
  expect(filter.run()).toBe(result);
  expect(() => (result.width = 3)).toThrow(TypeError);
  engine.prepare(gaussian(1), { width: 2000, height: 2000, channels: 4 }).source.data.fill(1);
  expect(result.data).toHaveLength(0);
  expect(Object.is(filter.run(), result)).toBe(false);
  expect(filter.result.data).toHaveLength(count);
});
