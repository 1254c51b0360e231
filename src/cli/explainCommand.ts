import { type Channels, ConvolutionError, type Layout } from "../index.js";
import { type PlanArguments, prepareOptionsOf } from "./arguments.js";
import { makeEngine } from "./engineArguments.js";
import { readInput } from "./files.js";
import { kernelOf } from "./kernelArgument.js";
import { formName, readLayout } from "./png.js";
import type { Report } from "./report.js";

export interface ExplainArguments extends PlanArguments {
  size?: { width: number; height: number };
  channels?: "1" | "2" | "3" | "4";
  sample?: "u8" | "u16" | "f32";
}

/** Says which method would be chosen for an image and why; computes no pixel. */
export async function explainPlan(input: string | undefined, options: ExplainArguments): Promise<Report> {
  const { kernel, notes } = await kernelOf(options);
  const layout = await layoutOf(input, options);
  const { engine, notes: engineNotes } = await makeEngine(options, options.profile);
  try {
    const explanation = engine.explain(kernel, layout, prepareOptionsOf(options));
    const { width, height, origin, sum } = kernel;
    const heading = `Kernel ${width}×${height}, origin (${origin.x}, ${origin.y}), sum ${Number(sum.toPrecision(12))}, on ${layout.width}×${layout.height} ${formName(layout)}`;
    return {
      text: `${heading}\n\n${String(explanation).trimEnd()}\n`,
      notes: [...notes, ...engineNotes],
      data: { ...explanation, kernel: { width, height, origin, sum }, layout, notes: [...notes, ...engineNotes] },
    };
  } finally {
    engine.dispose();
  }
}

async function layoutOf(input: string | undefined, { size, channels, sample }: ExplainArguments): Promise<Required<Layout>> {
  const form = "either a PNG, or --size with --channels and --sample";
  if (input !== undefined) {
    if (size !== undefined || channels !== undefined || sample !== undefined)
      throw new ConvolutionError("usage", `${input} already tells size, channels and sample type. Give ${form}.`, { expected: form, received: "both" });
    return readLayout(await readInput(input), input);
  }
  if (size === undefined)
    throw new ConvolutionError("usage", `The image to explain for is missing. Give ${form}: --size 1920x1080 --channels 4 --sample u8.`, {
      expected: form,
      received: "neither",
    });
  return { ...size, channels: Number(channels ?? 1) as Channels, sample: sample ?? "u8" };
}
