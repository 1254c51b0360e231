import type { Method } from "../../index.js";
import type { Crossover } from "../../measure/types.js";
import { methodOrder } from "../methodNames.js";

/** One time of one method. */
export interface Point {
  size: number;
  milliseconds: number;
}

/** A measured one, with the quartiles about it. */
export interface MeasuredPoint extends Point {
  low: number;
  high: number;
}

/** What there is to draw of a method, by size. */
export interface Series {
  method: Method;
  measured: MeasuredPoint[];
  predicted: Point[];
}

/** One series for each method that has a time; what a logarithmic axis has no place for is left out. */
export function seriesOf({ rows }: Crossover): Series[] {
  const bySize = rows.filter(({ size }) => isDrawable(size)).toSorted((a, b) => a.size - b.size);
  return methodOrder
    .map((method) => ({
      method,
      measured: bySize.flatMap(({ size, milliseconds, quartiles }) => {
        const time = milliseconds[method];
        if (!isDrawable(time)) return [];
        const [low, high] = quartiles[method] ?? [time, time];
        return [{ size, milliseconds: time, low: isDrawable(low) ? low : time, high: isDrawable(high) ? high : time }];
      }),
      predicted: bySize.flatMap(({ size, predicted }) => {
        const time = predicted[method];
        return isDrawable(time) ? [{ size, milliseconds: time }] : [];
      }),
    }))
    .filter(({ measured, predicted }) => measured.length + predicted.length > 0);
}

function isDrawable(value: number | undefined): value is number {
  return value !== undefined && Number.isFinite(value) && value > 0;
}
