import type { HardwareProfile } from "../../../src/index.js";
import { keepProfile, keptProfile, type ProfileStore } from "../../../src/measure/index.js";
import { dateInWords } from "../../../src/report/figures.js";
import { element, say } from "./element.js";

const prefix = "measured on the page: ";

/** The browser's store under names of this page's own, so that all of them can be forgotten at once. */
const store: ProfileStore = {
  getItem: (key) => localStorage.getItem(prefix + key),
  setItem: (key, value) => localStorage.setItem(prefix + key, value),
  removeItem: (key) => localStorage.removeItem(prefix + key),
};

/** Throws where the browser keeps nothing for this page. */
const ownKeys = (): string[] => Object.keys(localStorage).filter((key) => key.startsWith(prefix));

function isUsable(): boolean {
  try {
    ownKeys();
    return true;
  } catch {
    return false;
  }
}

/** Profiles between visits, as long as the box is ticked. */
export class Remembered {
  readonly #box = element("remember", "input");
  readonly #usable = isUsable();
  /** The last one that was measured in this visit. */
  #measured: HardwareProfile | undefined;

  constructor() {
    this.#box.disabled = !this.#usable;
    this.#box.checked = this.#usable && ownKeys().length > 0;
    this.#box.addEventListener("change", () => {
      if (this.#box.checked) this.#keep();
      else this.#forget();
    });
    this.#tell();
  }

  /** A profile from before, for either build that an engine may choose by itself. */
  profileFor(threads: number): HardwareProfile | undefined {
    if (!this.#usable || !this.#box.checked) return undefined;
    return keptProfile({ build: "simd", threads }, store) ?? keptProfile({ build: "scalar", threads }, store);
  }

  /** Takes note of a profile, and keeps it where that is wished. */
  measured(profile: HardwareProfile): void {
    this.#measured = profile;
    if (this.#box.checked) this.#keep();
  }

  #keep(): void {
    try {
      if (this.#measured !== undefined) keepProfile(this.#measured, store);
      this.#tell();
    } catch {
      this.#box.checked = false;
      this.#tell("This browser has no room for it: nothing is kept.");
    }
  }

  #forget(): void {
    for (const key of ownKeys()) localStorage.removeItem(key);
    this.#tell();
  }

  #tell(words = this.#words): void {
    say(words, element("remembered"));
  }

  get #words(): string {
    if (!this.#usable) return "This browser keeps nothing for this page.";
    if (!this.#box.checked) return "Next time the first step is skipped.";
    const kept = this.#measured ?? this.profileFor(1);
    return kept === undefined ? "It is kept as soon as it is measured." : `Kept: measured on ${dateInWords(kept.date)}. Untick to measure anew.`;
  }
}
