/** Offers an object as a JSON file. The address is given back late: some browsers read it after the click. */
export function download(content: unknown, fileName: string): void {
  const address = URL.createObjectURL(new Blob([`${JSON.stringify(content, undefined, 2)}\n`], { type: "application/json" }));
  const link = document.createElement("a");
  link.href = address;
  link.download = fileName;
  link.click();
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}

/** tapwise-results-2026-12-01-1920x1080.json: local date, so that it is the day that the person remembers. */
export function fileName(kind: "results" | "profile", date: string, detail?: string): string {
  const day = new Date(date);
  const parts = [day.getFullYear(), day.getMonth() + 1, day.getDate()].map((part) => String(part).padStart(2, "0"));
  return ["tapwise", kind, ...parts, ...(detail === undefined ? [] : [detail])].join("-").concat(".json");
}
