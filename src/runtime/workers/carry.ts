import type { EngineMemory } from "../memory.js";
import type { Outlet, RowSpan } from "../program.js";
import type { Plane } from "../rowTraffic.js";
import type { Place } from "./protocol.js";

/** Copies source rows first … end − 1 to where they wait, row `from` of the source being the first that does. */
export function stageRows(memory: EngineMemory, { data, stride }: Plane, waiting: Place, from: number, first: number, end: number): void {
  const rowBytes = waiting.stride * data.BYTES_PER_ELEMENT;
  if (stride === waiting.stride) return memory.stage(data.subarray((from + first) * stride, (from + end) * stride), waiting.address + first * rowBytes);
  for (let row = first; row < end; row++) {
    const start = (from + row) * stride;
    memory.stage(data.subarray(start, start + waiting.stride), waiting.address + row * rowBytes);
  }
}

/** Copies result rows that wait to the target: the part of them that a program writes. */
export function takeRows(memory: EngineMemory, waiting: Place, { firstRow, firstSample, rowSamples }: Outlet, rows: RowSpan, { data, stride }: Plane): void {
  const first = firstRow + rows.first;
  const whole = stride === rowSamples && waiting.stride === rowSamples;
  const count = whole ? rowSamples * rows.count : rowSamples;
  for (let row = first; row < first + (whole ? 1 : rows.count); row++) {
    const address = waiting.address + (row * waiting.stride + firstSample) * data.BYTES_PER_ELEMENT;
    data.set(memory.window(data, address, count), row * stride + firstSample);
  }
}
