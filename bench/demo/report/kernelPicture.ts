import type { Kernel } from "../../../src/index.js";
import { small } from "../figures.js";
import { escaped } from "./markup.js";
import { picture } from "./pictures.js";

/** Kernels up to this many taps across are shown as numbers, larger ones as pictures. */
const widestInNumbers = 7;

/** A kernel to look at: a table of coloured taps, or a grey map with its scale. */
export function kernelFigure(kernel: Kernel, name: string): string {
  const shown = kernel.width <= widestInNumbers ? tapTable(kernel, name) : greyMap(kernel, name);
  const scaleNote = kernel.width <= widestInNumbers ? "" : " Grey is the square root of the tap, so that faint taps show.";
  return `<figure class="kernel">${shown}<figcaption>${escaped(name.charAt(0).toUpperCase() + name.slice(1))}: ${kernel.width} × ${kernel.height} taps, sum ${small(kernel.sum)}.${scaleNote}</figcaption></figure>`;
}

/** Positive taps in one colour, negative ones in the other, stronger for larger ones; the numbers say it too. */
function tapTable(kernel: Kernel, name: string): string {
  const taps = kernel.taps;
  const largest = Math.max(...taps.map(Math.abs));
  const cell = (tap: number): string => {
    const strength = Math.round((62 * Math.abs(tap)) / largest);
    return `<td style="background:color-mix(in srgb,var(--${tap < 0 ? "negative" : "positive"}) ${strength}%,var(--paper))">${String(Number(tap.toPrecision(4))).replace("-", "−")}</td>`;
  };
  const rows = Array.from(
    { length: kernel.height },
    (_, row) => `<tr>${[...taps.subarray(row * kernel.width, (row + 1) * kernel.width)].map(cell).join("")}</tr>`,
  );
  return `<table class="taps" aria-label="Taps of ${escaped(name)}"><tbody>${rows.join("")}</tbody></table>${scale("diverging", `−${small(largest)}`, "0", small(largest))}`;
}

/** Grey is the square root of the tap over the largest. */
function greyMap(kernel: Kernel, name: string): string {
  const { taps, width, height } = kernel;
  const largest = taps.reduce((most, tap) => Math.max(most, tap), 0);
  const data = Uint8Array.from(taps, (tap) => Math.round(255 * Math.sqrt(Math.max(0, tap) / largest)));
  const image = picture({ data, width, height, channels: 1 }, `Taps of ${name}: black is 0, white the largest, ${small(largest)}.`, "map");
  return `${image}${scale("grey", "0", small(largest / 4), small(largest))}`;
}

function scale(kind: "diverging" | "grey", low: string, middle: string, high: string): string {
  return `<div class="scale" aria-hidden="true"><div class="${kind}"></div><span>${low}</span><span>${middle}</span><span>${high}</span></div>`;
}
