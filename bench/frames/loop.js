/**
 * Frames through a prepared filter and a control loop of equal length, in turns. Plain JavaScript that runs as it is in Node and in pages.
 *
 * The control does arithmetic on a typed array of its own: what disturbs it (the system, the collector, other threads) is not the filter's doing.
 */

/** Steps of the control loop per round: small enough to fit its length to a frame's. */
const controlSamples = 16384;
const planeCount = 3;
/** Small frames go the ways of large ones in the library: after so many the host's compilers have nothing left to do there, which takes memory too. */
const smallFrames = 20_000;

/** Everything that the frames need, made before the first one: nothing below allocates, but for the new rasters of the way that is called so. */
export async function prepareFrames(library, work) {
  const small = prepareStage(library, await library.createEngine(), { ...work, width: 48, height: 48, frames: smallFrames });
  return { ...prepareStage(library, await library.createEngine(), work), small };
}

function prepareStage(library, engine, { width, height, taps, way, frames }) {
  const layout = { width, height, channels: 4, sample: "u8" };
  const filter = engine.prepare(library.gaussian({ sigma: taps / 6, radius: (taps - 1) / 2 }), layout, { alpha: "none" });
  const planes = Array.from({ length: planeCount }, (_, seed) => ({ ...layout, data: noise(width * height * 4, seed + 1) }));
  const target = { data: new Uint8Array(width * height * 4), width, height, channels: 4 };
  const { method, arithmetic } = filter.explanation;
  if (way === "views") filter.source.data.set(planes[0].data);
  const times = { frames: new Float64Array(frames), control: new Float64Array(frames) };
  const filterFrame = waysOfFiltering[way];
  return { engine, filter, filterFrame, planes, target, times, control: new Float32Array(controlSamples), controlRounds: 1, method, arithmetic };
}

/** Bytes from the linear congruential generator of the ISO C standard's example `rand`. */
function noise(count, seed) {
  const bytes = new Uint8Array(count);
  let state = seed;
  for (let index = 0; index < count; index++) {
    state = (Math.imul(1103515245, state) + 12345) & 0x7fffffff;
    bytes[index] = state >>> 16;
  }
  return bytes;
}

const waysOfFiltering = {
  "the same rasters": ({ filter, planes, target }, frame) => filter.run(planes[frame % planeCount], target),
  "new rasters"({ filter, planes, target: { data, width, height } }, frame) {
    return filter.run({ data: planes[frame % planeCount].data, width, height }, { data, width, height });
  },
  views: ({ filter }) => filter.run(),
};

const filterFrame = (stage, frame) => stage.filterFrame(stage, frame);

function runControl({ control, controlRounds }) {
  for (let round = 0; round < controlRounds; round++) for (let index = 0; index < controlSamples; index++) control[index] = control[index] * 0.5 + index;
}

const median = (times) => times.slice().sort()[times.length >> 1];

function timed(stage, work, count) {
  const times = new Float64Array(count);
  for (let turn = 0; turn < count; turn++) {
    const begun = performance.now();
    work(stage, turn);
    times[turn] = performance.now() - begun;
  }
  return median(times);
}

/** Warms the library and both loops, and makes a control round as long as a frame. */
export function warmUp(stage, frames) {
  runAll(stage.small, smallFrames);
  for (let pass = 0; pass < 3; pass++) {
    const frame = timed(stage, filterFrame, frames);
    const control = timed(stage, runControl, frames);
    stage.controlRounds = Math.max(1, Math.round((stage.controlRounds * frame) / control));
  }
  runAll(stage, frames);
}

/** Frame, control, frame, control … */
export function runAll(stage, count) {
  const { frames, control } = stage.times;
  for (let frame = 0; frame < count; frame++) {
    const begun = performance.now();
    filterFrame(stage, frame);
    const between = performance.now();
    runControl(stage);
    control[frame] = performance.now() - between;
    frames[frame] = between - begun;
  }
}

/** The result for the first image, to be compared with the definition. */
export function firstResult(stage) {
  return filterFrame(stage, 0).data;
}

/** Bytes of engine memory, as a view of it tells. */
export const engineBytes = ({ filter }) => filter.source.data.buffer.byteLength;

function base64(bytes) {
  let characters = "";
  for (const byte of bytes) characters += String.fromCharCode(byte);
  return btoa(characters);
}

/** The first image and its result, for what carries text only. */
export const firstInBase64 = (stage) => ({ image: base64(stage.planes[0].data), result: base64(firstResult(stage)) });
