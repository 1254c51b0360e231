/** The rules for one axis that fill the outside with samples of the image, by name; "outside" stands for all others alike. */
export type IndexRule = "replicate" | "periodic" | "half-sample-symmetric" | "whole-sample-symmetric" | "outside";

/** i mod count in 0 … count − 1, for any integer i. */
function modulo(i: number, count: number): number {
  return ((i % count) + count) % count;
}

/**
 * The sample that stands at index i of an axis of `count` samples, or −1 where none does.
 *
 *     replicate                a a a | a b c d | d d d      periodic                 b c d | a b c d | a b c
 *     half-sample-symmetric    c b a | a b c d | d c b      whole-sample-symmetric   d c b | a b c d | c b a
 *
 * Source  Martucci, Symmetric convolution and the discrete sine and cosine transforms, IEEE Trans. Signal Processing 42(5), 1994 (names)
 */
const indexAt: Record<IndexRule, (i: number, count: number) => number> = {
  replicate: (i, count) => Math.max(0, Math.min(count - 1, i)),
  periodic: modulo,
  "half-sample-symmetric": (i, count) => {
    const p = modulo(i, 2 * count);
    return p < count ? p : 2 * count - 1 - p;
  },
  "whole-sample-symmetric": (i, count) => {
    if (count === 1) return 0;
    const p = modulo(i, 2 * count - 2);
    return p < count ? p : 2 * count - 2 - p;
  },
  outside: (i, count) => (i >= 0 && i < count ? i : -1),
};

/** Names of the rules that callers may give. */
export const indexRuleNames = (Object.keys(indexAt) as IndexRule[]).filter((name) => name !== "outside");

/**
 * Index map of an axis: entry k is the sample at index first + k, or −1 where nothing but the constant stands.
 *
 * @param first index of the first entry, any integer
 * @param length entries
 * @param count samples of the axis, at least 1
 */
export function indexMap(rule: IndexRule, first: number, length: number, count: number): Int32Array<ArrayBuffer> {
  const at = indexAt[rule];
  const map = new Int32Array(length);
  for (let k = 0; k < length; k++) {
    const i = first + k;
    map[k] = i >= 0 && i < count ? i : at(i, count);
  }
  return map;
}
