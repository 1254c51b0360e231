import type { Method } from "../../index.js";

/** How a method is told from the others: a colour for light and dark surroundings, and a shape for those who do not see it. */
export interface Sign {
  light: string;
  dark: string;
  symbol: "square" | "circle" | "triangle" | "diamond";
}

/** At least 4.5:1 on white, or on near-black, and apart from each other with any of the three kinds of dichromacy: test/report/colours. */
export const signs: Record<Method, Sign> = {
  "direct": { light: "#b84a00", dark: "#ff9a52", symbol: "square" },
  "separable": { light: "#00745a", dark: "#52d6ae", symbol: "circle" },
  "running-sum": { light: "#9a3f80", dark: "#e79bd0", symbol: "triangle" },
  "fft": { light: "#0a4f9e", dark: "#6fabff", symbol: "diamond" },
};

/** The method's colour as a page may set it; without a style sheet, the one for light surroundings. */
export function strokeOf(method: Method): string {
  return `var(--tapwise-${method}, ${signs[method].light})`;
}

const declarations = (kind: "light" | "dark"): string =>
  Object.entries(signs)
    .map(([method, sign]) => `--tapwise-${method}: ${sign[kind]};`)
    .join(" ");

/**
 * Style of charts: colours for light and dark surroundings and for paper; everything else is in the drawing's attributes, so that charts
 * appear under any content security policy that lets this sheet in.
 */
export const chartStyle = `
:root { ${declarations("light")} }
@media screen and (prefers-color-scheme: dark) { :root { ${declarations("dark")} } }
.tapwise-chart { display: block; max-width: 100%; height: auto; overflow: visible; font-variant-numeric: tabular-nums; }
`;
