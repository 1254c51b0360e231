import { blend, colour, dimmed } from "./colour.js";
import { leafPiece, type Leaf } from "./leaf.js";
import { layeredNoise, valueNoise } from "./noise.js";
import { lay, type Plate } from "./plate.js";
import { randomFrom, type Random } from "./random.js";
import { smoothLine, strokePiece, type Point } from "./stroke.js";
import { tapePiece } from "./tape.js";

const bark = colour(0x6a4a2f);
const barkDark = colour(0x3f2b1c);

/** A woody line: bark along it, darker at the edges. */
function layTwig(plate: Plate, points: readonly Point[], from: number, to: number): void {
  lay(
    plate,
    strokePiece({
      points,
      halfWidth: (along) => from + (to - from) * along + 0.5 * valueNoise(along * 60, 2, 13) * from * 0.3,
      colour: (along, across, x, y) =>
        dimmed(
          blend(bark, barkDark, 0.75 * across * across + 0.5 * (layeredNoise(x / 3, y / 9, 3, 17) - 0.3)),
          0.85 + 0.3 * valueNoise(along * 140, across, 19),
        ),
      relief: from * 0.9,
      shadow: { right: 2.5, down: 3.5, softness: 2.2, strength: 0.45 },
    }),
  );
}

/** Where a line is at a share of its points, and which way it runs there. */
function onLine(line: readonly Point[], share: number): Point & { angle: number } {
  const index = Math.min(line.length - 2, Math.floor(share * (line.length - 1)));
  const [from, to] = [line[index], line[index + 1]];
  return { x: from.x, y: from.y, angle: Math.atan2(to.y - from.y, to.x - from.x) };
}

function serrateLeaf(random: Random, place: Point & { angle: number }, length: number): Leaf {
  return {
    ...place,
    length,
    breadth: length * random.between(0.235, 0.275),
    bend: random.between(-0.035, 0.035),
    widestAt: random.between(0.4, 0.46),
    veinPairs: Math.round(length / 24),
    teeth: 3,
    toothDepth: 0.055,
    lobeDepth: 0,
    browning: random.between(0.28, 0.62),
    underside: false,
    startValue: Math.floor(random.between(1, 9000)),
  };
}

/** Specimen a: a twig with alternate serrate leaves. */
export function layLeafyTwig(plate: Plate): void {
  const random = randomFrom(318);
  const stem = smoothLine(
    [
      { x: 372, y: 1118 },
      { x: 398, y: 900 },
      { x: 372, y: 650 },
      { x: 402, y: 420 },
      { x: 386, y: 268 },
    ],
    24,
  );
  layTwig(plate, stem, 7.5, 3);
  const shares = [0.16, 0.27, 0.4, 0.52, 0.65, 0.77, 0.89];
  shares.forEach((share, index) => {
    const side = index % 2 === 0 ? 1 : -1;
    const node = onLine(stem, share);
    const angle = node.angle + side * random.between(0.82, 1.02);
    layStalkedLeaf(plate, random, node, angle, 300 - 16 * index + random.between(-12, 12), 30);
  });
  layStalkedLeaf(plate, random, onLine(stem, 1), -Math.PI / 2 + 0.08, 196, 12);
  lay(plate, tapePiece({ x: 385, y: 1062, length: 92, width: 17, angle: 0.09, startValue: 5 }));
  lay(plate, tapePiece({ x: 379, y: 700, length: 70, width: 15, angle: -0.07, startValue: 6 }));
  lay(plate, tapePiece({ x: 394, y: 352, length: 62, width: 14, angle: 0.05, startValue: 7 }));
}

function layStalkedLeaf(plate: Plate, random: Random, node: Point, angle: number, length: number, stalk: number): void {
  const end = { x: node.x + stalk * Math.cos(angle), y: node.y + stalk * Math.sin(angle), angle };
  const middle = { x: (node.x + end.x) / 2 + 2, y: (node.y + end.y) / 2 + 2 };
  lay(plate, leafPiece(serrateLeaf(random, { ...end, x: end.x - 3 * Math.cos(angle), y: end.y - 3 * Math.sin(angle) }, length)));
  layTwig(plate, smoothLine([node, middle, end], 6), 3.2, 2);
}

/** Specimen b: one lobed leaf that shows its lower side. */
export function layLobedLeaf(plate: Plate): void {
  const tip = -Math.PI / 2 + 0.1;
  layTwig(
    plate,
    smoothLine(
      [
        { x: 866, y: 826 },
        { x: 858, y: 780 },
        { x: 864, y: 728 },
      ],
      10,
    ),
    4.6,
    3.6,
  );
  lay(
    plate,
    leafPiece({
      x: 864,
      y: 736,
      angle: tip,
      length: 590,
      breadth: 188,
      bend: 0.03,
      widestAt: 0.55,
      veinPairs: 6,
      teeth: 0,
      toothDepth: 0,
      lobeDepth: 0.4,
      browning: 0.5,
      underside: true,
      startValue: 771,
    }),
  );
  lay(plate, tapePiece({ x: 862, y: 778, length: 66, width: 15, angle: -0.12, startValue: 8 }));
  lay(plate, tapePiece({ x: 922, y: 172, length: 60, width: 15, angle: 0.25, startValue: 9 }));
}

/** Specimen c: a frond with paired leaflets. */
export function layFrond(plate: Plate): void {
  const random = randomFrom(2718);
  const rachis = smoothLine(
    [
      { x: 1180, y: 792 },
      { x: 1236, y: 640 },
      { x: 1300, y: 450 },
      { x: 1336, y: 270 },
      { x: 1332, y: 148 },
    ],
    24,
  );
  const pairs = 17;
  for (let pair = 0; pair < pairs; pair += 1) {
    for (const side of [-1, 1]) {
      const share = 0.17 + (0.8 * (pair + (side < 0 ? 0.4 : 0))) / pairs;
      const node = onLine(rachis, share);
      const length = 168 * Math.sin(Math.PI * (0.16 + 0.8 * (1 - share) ** 0.8)) ** 1.1 * random.between(0.93, 1.05) + 8;
      const angle = node.angle + side * (1.22 - 0.45 * share + random.between(-0.05, 0.05));
      const leaflet = serrateLeaf(random, { x: node.x, y: node.y, angle }, length);
      lay(
        plate,
        leafPiece({
          ...leaflet,
          breadth: length * 0.1 + 2.5,
          widestAt: 0.3,
          veinPairs: 9,
          teeth: 2,
          toothDepth: 0.12,
          bend: -0.05 * side,
          browning: random.between(0.1, 0.4),
        }),
      );
    }
  }
  const end = onLine(rachis, 1);
  const terminal = serrateLeaf(random, { ...end, y: end.y + 24, angle: -Math.PI / 2 - 0.05 }, 92);
  lay(plate, leafPiece({ ...terminal, breadth: 15, widestAt: 0.35, veinPairs: 8, teeth: 2, toothDepth: 0.12, browning: 0.3 }));
  layTwig(plate, rachis, 4, 1.6);
  lay(plate, tapePiece({ x: 1196, y: 748, length: 60, width: 15, angle: 0.3, startValue: 10 }));
  lay(plate, tapePiece({ x: 1318, y: 388, length: 56, width: 13, angle: 0.12, startValue: 11 }));
}
