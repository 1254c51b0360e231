import { ConvolutionError } from "../../errors.js";
import type { EngineMemory } from "../../runtime/memory.js";
import type { SampleType } from "../../types.js";
import { samplesOverlap } from "../claims.js";
import { checkedRaster, type CheckedRaster } from "./raster.js";
import type { ImageShape } from "./request.js";

const shapeOf = ({ width, height, channels, sample }: ImageShape): string => `${width}×${height}×${channels} ${sample}`;

/**
 * An image for a prepared filter.
 *
 * @throws ConvolutionError `layout-mismatch`, and those of a raster
 */
export function checkedSource(where: string, image: unknown, layout: ImageShape): CheckedRaster {
  const source = checkedRaster(where, "image", image);
  const same = source.width === layout.width && source.height === layout.height && source.channels === layout.channels && source.sample === layout.sample;
  if (same) return source;
  const message = `${where}: the image is ${shapeOf(source)}, the filter was prepared for ${shapeOf(layout)}. Prepare a filter for this layout.`;
  throw new ConvolutionError("layout-mismatch", message, { expected: shapeOf(layout), received: shapeOf(source) });
}

/**
 * A target for results.
 *
 * @throws ConvolutionError `invalid-target`, `overlapping-target`, and those of a raster
 */
export function checkedTarget(
  where: string,
  target: unknown,
  source: CheckedRaster,
  memory: EngineMemory,
  result: { width: number; height: number; channels: 1 | 2 | 3 | 4; sample: SampleType },
): CheckedRaster {
  const checked = checkedRaster(where, "target", target);
  const same = checked.width === result.width && checked.height === result.height && checked.channels === result.channels && checked.sample === result.sample;
  if (!same) {
    const message = `${where}: the target is ${shapeOf(checked)}, the result is ${shapeOf(result)}. Give a target of that shape, or none to get a new raster.`;
    throw new ConvolutionError("invalid-target", message, { expected: shapeOf(result), received: shapeOf(checked) });
  }
  if (samplesOverlap(checked.data, source.data, memory)) {
    const message = `${where}: target and image lie in the same stretch of memory, where results could be read as samples. Give a target of its own.`;
    throw new ConvolutionError("overlapping-target", message, { expected: "memory apart from the image", received: "overlapping memory" });
  }
  return checked;
}
