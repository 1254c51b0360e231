import type { Method } from "../index.js";

/** How a method is called: beside a line or over a column, and in a sentence, with the verb that follows. */
interface MethodName {
  short: string;
  inSentence: string;
  verb: "is" | "are";
}

const names: Record<Method, MethodName> = {
  "direct": { short: "direct", inSentence: "direct sums", verb: "are" },
  "separable": { short: "separable", inSentence: "separable passes", verb: "are" },
  "running-sum": { short: "running sums", inSentence: "running sums", verb: "are" },
  "fft": { short: "FFT", inSentence: "the FFT", verb: "is" },
};

/** Every method, in the order in which lines are drawn and columns stand. */
export const methodOrder: readonly Method[] = ["direct", "separable", "running-sum", "fft"];

/** One or two words, for the end of a line or the head of a column: "FFT". */
export function shortName(method: Method): string {
  return names[method].short;
}

/** As the subject or object of a sentence: "the FFT", "separable passes". */
export function nameInSentence(method: Method): string {
  return names[method].inSentence;
}

/** The same with its verb: "the FFT is", "separable passes are". */
export function nameAndVerb(method: Method): string {
  return `${names[method].inSentence} ${names[method].verb}`;
}

/** A sentence with a capital at its beginning. */
export function capitalised(sentence: string): string {
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}
