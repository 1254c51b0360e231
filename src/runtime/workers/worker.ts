/** The script of a worker: it is told of filters and helps with their jobs. It imports the core's runtime alone. */
import { EngineMemory, mostBytes } from "../memory.js";
import { link, type Routines } from "../routines.js";
import { ownPort, type Port } from "./ports.js";
import type { FromWorker, ToWorker } from "./protocol.js";
import { SharedWork } from "./sharedWork.js";
import { BandKeeper } from "./bandKeeper.js";

const reply = (port: Port, message: FromWorker): void => port.postMessage(message);

class Station {
  readonly #port: Port;
  #sharedWork: SharedWork | undefined;
  #bands: BandKeeper | undefined;

  constructor(port: Port) {
    this.#port = port;
  }

  async #start({ module, memory }: { module: WebAssembly.Module; memory?: WebAssembly.Memory }): Promise<void> {
    const mine = memory ? new EngineMemory(mostBytes, memory) : new EngineMemory(mostBytes);
    const linked = await link(module, mine.memory);
    if ("missing" in linked) return reply(this.#port, { kind: "failed", reason: linked.missing });
    this.#sharedWork = new SharedWork(mine, linked as Routines);
    this.#bands = new BandKeeper(mine, linked as Routines);
    reply(this.#port, { kind: "ready" });
  }

  take(message: ToWorker): void {
    if (message.kind === "start") void this.#start(message).catch((cause) => reply(this.#port, { kind: "failed", reason: String(cause) }));
    else if (message.kind === "keep") this.#sharedWork!.keep(message.assignment);
    else if (message.kind === "help") this.#sharedWork!.help(message);
    else if (message.kind === "keepBand") this.#bands!.keep(message);
    else if (message.kind === "band") {
      const { source, result } = message;
      this.#bands!.filter(message);
      this.#port.postMessage({ ...message, source, result } satisfies FromWorker, [source.buffer, result.buffer] as Transferable[]);
    } else {
      this.#sharedWork!.drop(message.id);
      this.#bands!.drop(message.id);
    }
  }
}

const port = ownPort();
const station = new Station(port);
port.listen((message) => station.take(message as ToWorker));
