import { spawn, type ChildProcess } from "node:child_process";
import { readFileSync } from "node:fs";
import { createInterface, type Interface } from "node:readline";
import type { Contender } from "../contender.js";

interface Answer {
  milliseconds: number;
  loopMilliseconds?: number;
}

/** A yardstick: a process that answers one line of JSON to each line it is sent (the protocol is in yardstick.h). */
export class YardstickProcess {
  readonly #child: ChildProcess;
  readonly #lines: AsyncIterator<string>;
  readonly #interface: Interface;
  readonly #resultFile: string;

  constructor(command: string, parameters: readonly string[], resultFile: string, environment: Record<string, string> = {}) {
    this.#child = spawn(command, [...parameters, resultFile], { stdio: ["pipe", "pipe", "inherit"], env: { ...process.env, ...environment } });
    this.#interface = createInterface({ input: this.#child.stdout! });
    this.#lines = this.#interface[Symbol.asyncIterator]();
    this.#resultFile = resultFile;
  }

  /** One of the process's ways to do the work, as a contender; `part` picks what is counted. */
  contender(name: string, form: string, part: keyof Answer = "milliseconds"): Contender {
    return { name, run: async (plane) => (await this.#ask(`${form} ${plane}`))[part]! };
  }

  /** The last result. */
  async result(): Promise<Float32Array> {
    await this.#ask("save");
    const bytes = readFileSync(this.#resultFile);
    return new Float32Array(bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength));
  }

  async end(): Promise<void> {
    const exited = new Promise((resolve) => this.#child.once("exit", resolve));
    this.#child.stdin!.end();
    this.#interface.close();
    await exited;
  }

  async #ask(line: string): Promise<Answer> {
    this.#child.stdin!.write(`${line}\n`);
    const { value, done } = await this.#lines.next();
    if (done === true) throw new Error(`the yardstick ended when it was asked for "${line}"`);
    return JSON.parse(value) as Answer;
  }
}
