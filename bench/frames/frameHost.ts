import type { InspectorSession } from "./session.js";

/** How a frame comes and goes: rasters that are made once, new ones of the same arrays for each frame, or the filter's own views. */
export const ways = ["the same rasters", "new rasters", "views"] as const;

/** What is filtered: one size, one kernel. */
export interface FrameWork {
  width: number;
  height: number;
  taps: number;
  way: (typeof ways)[number];
  frames: number;
}

/** Where frames are filtered: calls of bench/frames/loop.js, and the inspector of the place. */
export interface FrameHost {
  /** Node 20.20.2, Chromium 156.0 … */
  name: string;
  session: InspectorSession;
  prepare(work: FrameWork): Promise<{ method: string; arithmetic: string }>;
  warmUp(frames: number): Promise<void>;
  run(frames: number): Promise<void>;
  times(): Promise<{ frames: number[]; control: number[] }>;
  engineBytes(): Promise<number>;
  /** The result for the first image, and that image. */
  firstResult(): Promise<{ image: Uint8Array; result: Uint8Array }>;
  close(): Promise<void>;
}

export interface Stage {
  method: string;
  arithmetic: string;
  planes: { data: Uint8Array }[];
  times: { frames: Float64Array; control: Float64Array };
}

/** bench/frames/loop.js */
export interface Loop {
  prepareFrames(library: unknown, work: FrameWork): Promise<Stage>;
  warmUp(stage: Stage, frames: number): void;
  runAll(stage: Stage, frames: number): void;
  engineBytes(stage: Stage): number;
  firstResult(stage: Stage): Uint8Array;
  firstInBase64(stage: Stage): { image: string; result: string };
}
