/** What a page without a bundler does: imports the built files by their address, filters, and shows the outcome as JSON. */
import { ConvolutionError, createEngine, kernel } from "./dist/index.js";

const taps = [
  [1, 2, 3],
  [4, 5, 6],
  [7, 8, 9],
];

/** A single 1 in the middle of zeros gives the taps back. */
function impulse() {
  const data = new Float32Array(25);
  data[12] = 1;
  return { data, width: 5, height: 5 };
}

async function outcome() {
  try {
    const engine = await createEngine();
    const spread = (method) => Array.from(engine.convolve(impulse(), kernel(taps), { method, border: "zero" }).data);
    const photo = new ImageData(
      Uint8ClampedArray.from({ length: 8 * 6 * 4 }, (_, k) => (k % 4 === 3 ? 255 : 200)),
      8,
      6,
    );
    const blurred = engine.convolve(photo, kernel([[1, 1, 1]].map((row) => row.map((tap) => tap / 3))));
    const drawable = new ImageData(blurred.data, blurred.width, blurred.height);
    return { build: engine.build, direct: spread("direct"), fft: spread("fft"), drawable: [...new Set(drawable.data)] };
  } catch (error) {
    return { isConvolutionError: error instanceof ConvolutionError, code: error.code, fault: error.fault, message: error.message };
  }
}

document.querySelector("output").textContent = JSON.stringify(await outcome());
