/** A file to be saved. */
export interface SavedFile {
  name: string;
  mediaType: "application/json" | "text/html";
  text: string;
}

/** Offers a file. Its address is given back late: some browsers read it after the click. */
export function download({ name, mediaType, text }: SavedFile): void {
  const address = URL.createObjectURL(new Blob([text], { type: mediaType }));
  const link = document.createElement("a");
  link.href = address;
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}

export function jsonFile(name: string, content: unknown): SavedFile {
  return { name: `${name}.json`, mediaType: "application/json", text: `${JSON.stringify(content, undefined, 2)}\n` };
}

/** tapwise-results-2026-12-01-1920x1080x4-u8: local date, so that it is the day that the person remembers. */
export function nameOf(kind: "results" | "profile" | "report", date: string, detail?: string): string {
  const day = new Date(date);
  const parts = [day.getFullYear(), day.getMonth() + 1, day.getDate()].map((part) => String(part).padStart(2, "0"));
  return ["tapwise", kind, ...parts, ...(detail === undefined ? [] : [detail])].join("-");
}
