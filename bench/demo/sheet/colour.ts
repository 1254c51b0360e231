/** A colour in linear light, 0…1 each. */
export type Colour = readonly [red: number, green: number, blue: number];

/** sRGB curve, encoded to linear (IEC 61966-2-1). */
export function decoded(encoded: number): number {
  return encoded <= 0.04045 ? encoded / 12.92 : ((encoded + 0.055) / 1.055) ** 2.4;
}

/** sRGB curve, linear to encoded. */
export function encoded(linear: number): number {
  return linear <= 0.0031308 ? linear * 12.92 : 1.055 * linear ** (1 / 2.4) - 0.055;
}

/** Linear light of an sRGB colour written as 0xRRGGBB. */
export function colour(code: number): Colour {
  return [decoded((code >> 16) / 255), decoded(((code >> 8) & 255) / 255), decoded((code & 255) / 255)];
}

export function blend(from: Colour, to: Colour, share: number): Colour {
  return [from[0] + (to[0] - from[0]) * share, from[1] + (to[1] - from[1]) * share, from[2] + (to[2] - from[2]) * share];
}

export function dimmed(of: Colour, factor: number): Colour {
  return [of[0] * factor, of[1] * factor, of[2] * factor];
}
