import { Session } from "node:inspector/promises";
import type { FrameHost, Loop, Stage } from "./frameHost.js";

/** Frames in this process. */
export async function openNode(): Promise<FrameHost> {
  const session = new Session();
  session.connect();
  const [loop, library] = (await Promise.all(["./loop.js", "../../dist/index.js"].map((path) => import(new URL(path, import.meta.url).href)))) as [
    Loop,
    unknown,
  ];
  let stage: Stage;
  return {
    name: `Node ${process.versions.node}`,
    session: { send: (method, parameters) => (session.post as (...all: unknown[]) => Promise<unknown>).call(session, method, parameters) },
    async prepare(work) {
      stage = await loop.prepareFrames(library, work);
      return stage;
    },
    warmUp: async (frames) => loop.warmUp(stage, frames),
    run: async (frames) => loop.runAll(stage, frames),
    times: async () => ({ frames: [...stage.times.frames], control: [...stage.times.control] }),
    engineBytes: async () => loop.engineBytes(stage),
    firstResult: async () => ({ image: stage.planes[0]!.data, result: loop.firstResult(stage) }),
    close: async () => session.disconnect(),
  };
}
