/** What the inspector's protocol is spoken through: Node's own inspector, or a page's. */
export interface InspectorSession {
  send(method: string, parameters?: Record<string, unknown>): Promise<unknown>;
}

/** A node of a sampling heap profile: https://chromedevtools.github.io/devtools-protocol/tot/HeapProfiler/ */
interface ProfileNode {
  callFrame: { functionName: string; url: string; lineNumber: number };
  selfSize: number;
  children: ProfileNode[];
}

/** Bytes that a function allocated, estimated from the samples. */
export interface Allocation {
  name: string;
  url: string;
  byteLength: number;
}

/** On average one sample for so many bytes: a few bytes a frame would show. */
const samplingInterval = 2048;

/** Live bytes of the JavaScript heap, once what is garbage is gone. */
export async function liveHeap(session: InspectorSession): Promise<number> {
  for (let round = 0; round < 3; round += 1) await session.send("HeapProfiler.collectGarbage");
  return ((await session.send("Runtime.getHeapUsage")) as { usedSize: number }).usedSize;
}

/** Samples allocations while `work` runs, those that are collected meanwhile included. */
export async function allocationsDuring(session: InspectorSession, work: () => unknown): Promise<Allocation[]> {
  await session.send("HeapProfiler.startSampling", { samplingInterval, includeObjectsCollectedByMajorGC: true, includeObjectsCollectedByMinorGC: true });
  await work();
  const { profile } = (await session.send("HeapProfiler.stopSampling")) as { profile: { head: ProfileNode } };
  return allocationsOf(profile.head);
}

function allocationsOf({ callFrame, selfSize, children }: ProfileNode): Allocation[] {
  const own = selfSize > 0 ? [{ name: callFrame.functionName || "(anonymous)", url: placeOf(callFrame.url), byteLength: selfSize }] : [];
  return [...own, ...children.flatMap(allocationsOf)];
}

/** Folder and file of a script; the rest of its address belongs to the machine. */
const placeOf = (url: string): string => url.split("/").slice(-2).join("/");

/** Frames of the library itself. */
export const ofTheLibrary = ({ url }: Allocation): boolean => url.startsWith("dist/");
