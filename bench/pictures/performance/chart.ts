import { axisY, dot, gridX, gridY, line, plot, text } from "@observablehq/plot";
import { parseHTML } from "linkedom";
import type { CurvePoint } from "../../curve.js";

/** The best of somebody else's at one size. */
export interface Yardstick {
  maker: "C" | "FFTW" | "SciPy";
  method: string;
  taps: number;
  milliseconds: number;
}

/** Told apart by their lightness too, for those who do not see the colours. */
const colours: Record<string, string> = { "direct": "#b3541e", "separable": "#1f6f54", "running-sum": "#7a4fa3", "fft": "#20508f" };
const shapes: Record<Yardstick["maker"], "circle" | "diamond" | "square"> = { C: "circle", FFTW: "diamond", SciPy: "square" };
const makers: Record<Yardstick["maker"], string> = {
  C: "● C in its best of several blockings, one core",
  FFTW: "◆ overlap-save in C over FFTW",
  SciPy: "■ SciPy's best",
};

const sizeTicks = [3, 5, 9, 15, 31, 63, 127, 255];
const timeTicks = [1, 2, 5, 10, 20, 50, 100, 200];

/** Milliseconds against taps on each axis, both logarithmic: one line a method, yardsticks as marks in the method's colour. */
export function drawChart(points: readonly CurvePoint[], yardsticks: readonly Yardstick[], caption: string): string {
  const { document } = parseHTML("<!doctype html><html><body></body></html>");
  const ours = points.map(({ method, taps, milliseconds }) => ({ method, taps, milliseconds: milliseconds.median }));
  const lastOf = Object.keys(colours).flatMap((method) => ours.filter((point) => point.method === method).slice(-1));
  const colour = ({ method }: { method: string }): string => colours[method]!;
  const times = [...ours, ...yardsticks].map(({ milliseconds }) => milliseconds);
  const ticks = timeTicks.filter((tick) => tick < Math.max(...times));
  const svg = plot({
    document: document as unknown as Document,
    width: 860,
    height: 500,
    marginLeft: 64,
    marginRight: 96,
    marginTop: 28,
    marginBottom: 76,
    style: { fontSize: "13px", background: "#ffffff", color: "#222222", fontFamily: "system-ui, sans-serif" },
    x: { type: "log", domain: [2.8, 280], axis: null, label: null },
    y: { type: "log", domain: [Math.min(...times) / 1.2, Math.max(...times) * 1.2] },
    marks: [
      gridX(sizeTicks, { strokeOpacity: 0.12 }),
      gridY(ticks, { strokeOpacity: 0.12 }),
      // An axis leaves out some labels of a logarithmic scale.
      text(sizeTicks, { x: (taps: number) => taps, text: (taps: number) => `${taps}×${taps}`, frameAnchor: "bottom", dy: 20 }),
      axisY(ticks, { tickFormat: (time: number) => `${time} ms`, label: "one 1920×1080 plane of floats", tickSize: 0 }),
      line(ours, { x: "taps", y: "milliseconds", z: "method", stroke: colour, strokeWidth: 2.5 }),
      text(lastOf, { x: "taps", y: "milliseconds", text: "method", dx: 8, textAnchor: "start", fill: colour, fontWeight: 600 }),
      dot(yardsticks, { x: "taps", y: "milliseconds", fill: colour, fillOpacity: 0.55, symbol: ({ maker }: Yardstick) => shapes[maker], r: 5 }),
      text([Object.values(makers).join("    ")], { frameAnchor: "bottom-left", dy: 46, text: (words: string) => words, textAnchor: "start" }),
      text([caption], { frameAnchor: "bottom-left", dy: 66, text: (words: string) => words, textAnchor: "start", fillOpacity: 0.7 }),
    ],
  });
  return svg.outerHTML.replace("<svg ", '<svg xmlns="http://www.w3.org/2000/svg" ');
}
