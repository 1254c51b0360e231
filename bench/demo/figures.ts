/** Milliseconds with three figures, as seconds from 1000 on. */
export function duration(milliseconds: number): string {
  return milliseconds < 1000 ? `${threeFigures(milliseconds)} ms` : `${threeFigures(milliseconds / 1000)} s`;
}

/** Three significant figures without an exponent. */
export function threeFigures(value: number): string {
  if (value === 0) return "0";
  const whole = Math.floor(Math.log10(Math.abs(value))) + 1;
  return value.toFixed(Math.min(8, Math.max(0, 3 - whole)));
}

/** A small number: 0, or two figures, with a power of ten where it is below a thousandth. */
export function small(value: number): string {
  if (value === 0) return "0";
  if (Math.abs(value) >= 0.001) return String(Number(value.toPrecision(2)));
  const [digits, exponent] = value.toExponential(1).split("e");
  return `${digits}·10${[...exponent.replace("+", "")].map((sign) => superscripts[sign]).join("")}`;
}

const superscripts: Readonly<Record<string, string>> = {
  "-": "⁻",
  "0": "⁰",
  "1": "¹",
  "2": "²",
  "3": "³",
  "4": "⁴",
  "5": "⁵",
  "6": "⁶",
  "7": "⁷",
  "8": "⁸",
  "9": "⁹",
};

export function byteCount(bytes: number): string {
  return bytes < 1e6 ? `${threeFigures(bytes / 1e3)} kB` : `${threeFigures(bytes / 1e6)} MB`;
}

/** A share with its sign: 0.043 is "+4 %". */
export function percent(share: number): string {
  const rounded = Math.round(100 * share);
  return `${rounded > 0 ? "+" : rounded < 0 ? "−" : "±"}${Math.abs(rounded)} %`;
}
