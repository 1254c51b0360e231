import { parseHTML } from "linkedom";

/** An empty document for drawing where there is no browser. */
export function nodeDocument(): Document {
  return parseHTML("<!doctype html><html><body></body></html>").document as unknown as Document;
}
