import { checkedProfile } from "../api/validate/profile.js";
import { ConvolutionError } from "../errors.js";
import type { Engine, HardwareProfile } from "../types.js";

/** As much of a page's `localStorage` as keeping takes. */
export interface ProfileStore {
  getItem(key: string): string | null;
  setItem(key: string, value: string): void;
  removeItem(key: string): void;
}

/** Longer texts were not kept by us. */
const mostLetters = 1_000_000;

/** A profile is for a build and a number of threads; versions of the format do not meet. */
const keyOf = ({ build, threads }: Pick<Engine, "build" | "threads">): string => `tapwise profile 2, ${build}, ${threads}`;

/** The page's own store. Browsers may refuse even to name it. */
function storeOf(call: string, given: ProfileStore | undefined): ProfileStore {
  if (given) return given;
  try {
    const { localStorage } = globalThis as { localStorage?: ProfileStore };
    if (localStorage) return localStorage;
  } catch (cause) {
    throw nowhere(call, cause);
  }
  throw nowhere(call, undefined);
}

const nowhere = (call: string, cause: unknown): ConvolutionError =>
  new ConvolutionError(
    "not-supported",
    `${call}: this host has no localStorage, or does not let pages use it. Give a store of your own with getItem, setItem and removeItem.`,
    {
      expected: "localStorage, or a store",
      received: "none",
      cause,
    },
  );

/**
 * Keeps a profile in the browser until the next visit, beside those of other builds and thread counts.
 *
 * @param store where to keep it. @defaultValue the page's `localStorage`
 * @throws ConvolutionError `invalid-profile`; `not-supported` where there is no store, or it is full
 * @example
 * keepProfile(await measureProfile(engine, { milliseconds: 300 }), store); // in a page without the store
 * const profile = keptProfile(engine, store);
 * const next = await createEngine(profile ? { profile } : {});
 */
export function keepProfile(profile: HardwareProfile, store?: ProfileStore): void {
  const checked = checkedProfile(profile);
  const place = storeOf("keepProfile", store);
  try {
    place.setItem(keyOf(checked), JSON.stringify(checked));
  } catch (cause) {
    const message = "keepProfile: the browser's store did not take the profile: it is full, or not to be used. Nothing was kept.";
    throw new ConvolutionError("not-supported", message, { expected: "a store with room", received: String(cause), cause });
  }
}

/**
 * The profile that was kept for an engine's build and number of threads; nothing where there is none. One that is damaged or of an older version
 * is thrown away.
 *
 * @param engine an engine, or its `build` and `threads`
 * @param store where it was kept. @defaultValue the page's `localStorage`
 * @throws ConvolutionError `not-supported` where there is no store
 */
export function keptProfile(engine: Pick<Engine, "build" | "threads">, store?: ProfileStore): HardwareProfile | undefined {
  const place = storeOf("keptProfile", store);
  const key = keyOf(engine);
  try {
    const text = place.getItem(key);
    if (text === null) return undefined;
    const profile = profileIn(text);
    if (profile && keyOf(profile) === key) return profile;
    place.removeItem(key);
    return undefined;
  } catch (cause) {
    throw nowhere("keptProfile", cause);
  }
}

/** What is no profile is of no use to anybody. */
function profileIn(text: string): HardwareProfile | undefined {
  try {
    return checkedProfile(text.length > mostLetters ? undefined : JSON.parse(text));
  } catch {
    return undefined;
  }
}
