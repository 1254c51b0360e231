/**
 * Runs in a fresh process or page, by itself: from the import of the built package to the tenth run of a filter. Plain JavaScript, so
 * that Node and a page load this very file.
 */
const side = 512;
const taps = Array.from({ length: 5 }, (_, j) => Array.from({ length: 5 }, (_unused, i) => 1 + ((i * j * 7 + i + 3 * j) % 11)));
const weight = taps.flat().reduce((sum, tap) => sum + tap, 0);
const kinds = { u8: { channels: 4, Samples: Uint8Array, full: 255 }, f32: { channels: 1, Samples: Float32Array, full: 1 } };

/** Notes when the engine calls the host's compiler and linker, and when they answer. */
function watchLoading() {
  const times = {};
  for (const name of ["compile", "instantiate"]) {
    const original = WebAssembly[name];
    WebAssembly[name] = async (...parameters) => {
      times[`${name}Start`] = performance.now();
      const result = await original.apply(WebAssembly, parameters);
      times[`${name}End`] = performance.now();
      return result;
    };
  }
  return times;
}

/** The largest difference from the sum over all taps, at a thousand places inside the image. */
function largestDifference(source, result, channels) {
  let largest = 0;
  for (let place = 0; place < 1000; place++) {
    const [r, c, channel] = [2 + ((place * 389) % (side - 4)), 2 + ((place * 257) % (side - 4)), place % channels];
    let sum = 0;
    for (let j = 0; j < 5; j++) {
      for (let i = 0; i < 5; i++) sum += (taps[j][i] / weight) * source[((r + 2 - j) * side + c + 2 - i) * channels + channel];
    }
    largest = Math.max(largest, Math.abs(sum - result[(r * side + c) * channels + channel]));
  }
  return largest;
}

/** Milliseconds of each part, and what the first result is off in parts of the full value. */
export async function measureColdStart(address, sample) {
  const { channels, Samples, full } = kinds[sample];
  const data = new Samples(side * side * channels);
  for (let k = 0; k < data.length; k++) data[k] = sample === "u8" ? (k * 7919) % 256 : ((k * 7919) % 1000) / 1000;
  const layout = { width: side, height: side, channels };
  const image = { ...layout, data };
  // Written to once, so that no run waits for the operating system to hand out its memory.
  const target = { ...image, data: new Samples(data.length).fill(1) };
  const times = watchLoading();
  const start = performance.now();
  const { createEngine, kernel } = await import(address);
  const imported = performance.now();
  const engine = await createEngine();
  const created = performance.now();
  const filter = engine.prepare(kernel(taps.map((row) => row.map((tap) => tap / weight))), { ...layout, sample }, { alpha: "none" });
  const prepared = performance.now();
  const runs = [];
  for (let run = 0; run < 10; run++) {
    const begin = performance.now();
    filter.run(image, target);
    runs.push(performance.now() - begin);
  }
  return {
    import: imported - start,
    decode: times.compileStart - imported,
    compile: times.compileEnd - times.compileStart,
    link: times.instantiateEnd - times.compileEnd,
    selfTest: created - times.instantiateEnd,
    plan: prepared - created,
    firstRun: runs[0],
    tenthRun: runs[9],
    firstResult: prepared - start + runs[0],
    method: filter.explanation.method,
    difference: largestDifference(data, target.data, channels) / full,
  };
}
