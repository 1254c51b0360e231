/** Prints columns side by side: the first to the left, the others to the right. */
export function printTable(heads: readonly string[], rows: readonly (readonly string[])[]): void {
  const widths = heads.map((head, column) => Math.max(head.length, ...rows.map((row) => row[column]!.length)));
  const line = (cells: readonly string[]): string =>
    cells
      .map((cell, column) => (column === 0 ? cell.padEnd(widths[column]!) : cell.padStart(widths[column]!)))
      .join("  ")
      .trimEnd();
  console.log(line(heads));
  console.log(widths.map((width) => "─".repeat(width)).join("──"));
  for (const row of rows) console.log(line(row));
}

/** Three significant digits, without an exponent. */
export function digits(value: number): string {
  const decimals = value === 0 || !Number.isFinite(value) ? 0 : Math.max(0, 2 - Math.floor(Math.log10(Math.abs(value))));
  return value.toFixed(Math.min(decimals, 6));
}
