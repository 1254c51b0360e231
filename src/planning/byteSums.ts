/** How sums of bytes become bytes: see the core's bytes/sums. */
export interface ByteSums {
  /** What sums start from. */
  bias: number;
  scale: number;
  /** ⌊(bias + sum) ÷ divisor⌋ is the result; 0 where the integer nearest to scale · (bias + sum) is, for every sum there may be. */
  divisor: number;
}

/** More rows than this, and two column sums may differ by more than a signed 16-bit integer holds. */
const mostShortRows = 128;
const floatLimit = 16_777_216;
const integerLimit = 2_147_483_648;
const integerStep = 8_388_608;

/** Floats next to a reciprocal that are tried as its scale: exact ties must end above ½, nothing else may. */
const scalesTried = 8;

const following = new Float32Array(1);
const bits = new Int32Array(following.buffer);

function nextFloat(value: number): number {
  following[0] = value;
  bits[0]!++;
  return following[0];
}

/** What the core computes, rounding for rounding. */
function nearestInteger(sum: number, scale: number): number {
  return Math.fround(Math.fround(Math.fround(sum) * scale) + integerStep) - integerStep;
}

/** The least sum whose result ⌊slope · sum + offset + ½⌋ is `level`, with slope 1 ÷ divisor where that is an integer. */
function leastSum(level: number, slope: number, offset: number, divisor: number): number {
  const above = level - 0.5 - offset;
  return Math.ceil(divisor ? above * divisor : above / slope);
}

/**
 * True where the nearest integer is the right one for every sum 0 … most: it never falls while sums rise, so it is enough to look at the
 * sums where results change, and at those just below.
 */
function rightThroughout(scale: number, bias: number, most: number, levels: readonly { level: number; least: number }[]): boolean {
  const last = levels.at(-1)?.level ?? 0;
  if (nearestInteger(bias + most, scale) !== last) return false;
  return levels.every(({ level, least }) => nearestInteger(bias + least, scale) >= level && (least === 0 || nearestInteger(bias + least - 1, scale) < level));
}

/**
 * The cheapest exact way from sums of `columns` × `rows` bytes to ⌊slope · sum + offset + ½⌋; nothing where there is none, or where
 * results would leave 0 … 255.
 */
export function byteSums(columns: number, rows: number, slope: number, offset: number): ByteSums | undefined {
  const most = 255 * columns * rows;
  const reciprocal = Math.round(1 / slope);
  const divisor = 1 / reciprocal === slope ? reciprocal : 0;
  const highest = Math.floor(divisor ? (most + divisor * (offset + 0.5)) / divisor : slope * most + offset + 0.5);
  if (!(slope > 0) || offset < 0 || highest > 255 || most >= integerLimit) return undefined;
  const bias = Math.round(offset / slope);
  if (rows <= mostShortRows && bias + most < floatLimit) {
    const levels = Array.from({ length: highest }, (_, k) => ({ level: k + 1, least: Math.max(0, leastSum(k + 1, slope, offset, divisor)) }));
    let scale = Math.fround(slope);
    for (let tried = 0; tried < scalesTried; tried++, scale = nextFloat(scale))
      if (rightThroughout(scale, bias, most, levels)) return { bias, scale, divisor: 0 };
  }
  const wholeBias = Math.floor(divisor * (offset + 0.5));
  return divisor && wholeBias + most < integerLimit ? { bias: wholeBias, scale: Math.fround(slope), divisor } : undefined;
}
