import { describe, expect, it } from "vitest";
import { labelBox } from "../../bench/demo/sheet/label.js";
import { drawSheet, sheetHeight, sheetWidth, type Sheet } from "../../bench/demo/sheet/sheet.js";

interface Box {
  left: number;
  top: number;
  right: number;
  bottom: number;
}

/** Share of the pixels in a rectangle, in units of the drawing, for which a condition on red, green and blue holds. */
function shareWhere(sheet: Sheet, box: Box, holds: (red: number, green: number, blue: number) => boolean): number {
  const scale = sheet.width / 1600;
  let found = 0;
  let pixels = 0;
  for (let row = Math.round(box.top * scale); row < Math.round(box.bottom * scale); row++) {
    for (let column = Math.round(box.left * scale); column < Math.round(box.right * scale); column++) {
      const index = 3 * (row * sheet.width + column);
      pixels++;
      if (holds(sheet.data[index], sheet.data[index + 1], sheet.data[index + 2])) found++;
    }
  }
  return found / pixels;
}

const isInk = (red: number, green: number, blue: number): boolean => red + green + blue < 360;
const isTick = (red: number, green: number, blue: number): boolean => red + green + blue < 600;
const isLeaf = (red: number, green: number, blue: number): boolean => green > blue + 25 && red < 150;

describe("the drawn herbarium sheet", () => {
  const sheet = drawSheet();

  it("is 1600 × 1200 RGB bytes", () => {
    expect([sheet.width, sheet.height, sheet.channels]).toEqual([sheetWidth, sheetHeight, 3]);
    expect(sheet.width).toBeGreaterThanOrEqual(1600);
    expect(sheet.height).toBeGreaterThanOrEqual(1200);
    expect(sheet.data).toHaveLength(sheet.width * sheet.height * 3);
  });

  it("has ink in each line of the label, and paper between the lines", () => {
    const { left, right, top } = labelBox;
    const inkBetween = (above: number, below: number): number =>
      shareWhere(sheet, { left: left + 20, right: right - 20, top: top + above, bottom: top + below }, isInk);
    const lines = [[22, 39], [52, 62], ...[0, 1, 2, 3, 4].map((line) => [85 + 33.5 * line, 100 + 33.5 * line])];
    for (const [above, below] of lines) expect(inkBetween(above, below), `from ${above} to ${below}`).toBeGreaterThan(0.02);
    expect(inkBetween(43, 50)).toBe(0);
  });

  it("has leaves where the three specimens are, and bare paper between them", () => {
    const specimens = {
      twig: { left: 400, top: 550, right: 560, bottom: 730 },
      lobed: { left: 840, top: 300, right: 1000, bottom: 500 },
      frond: { left: 1230, top: 200, right: 1400, bottom: 450 },
    };
    for (const [name, box] of Object.entries(specimens)) expect(shareWhere(sheet, box, isLeaf), name).toBeGreaterThan(0.4);
    expect(shareWhere(sheet, { left: 720, top: 850, right: 1000, bottom: 1000 }, isLeaf)).toBe(0);
  });

  it("has a tick on the scale bar at each centimetre", () => {
    for (let centimetre = 0; centimetre <= 10; centimetre++) {
      const x = 590 + 40 * centimetre;
      expect(shareWhere(sheet, { left: x - 1, right: x + 1, top: 1050, bottom: 1058 }, isTick), `${centimetre} cm`).toBeGreaterThan(0.4);
    }
    expect(shareWhere(sheet, { left: 602, right: 608, top: 1050, bottom: 1058 }, isTick)).toBe(0);
  });

  it("is the same bytes each time it is drawn", () => {
    expect(Buffer.compare(drawSheet(480).data, drawSheet(480).data)).toBe(0);
  });
});
