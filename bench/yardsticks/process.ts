import { spawn, type ChildProcess } from "node:child_process";
import { readFileSync } from "node:fs";
import { createInterface, type Interface } from "node:readline";
import type { Contender } from "../contender.js";

interface Answer {
  milliseconds: number;
  loopMilliseconds?: number;
}

/** A yardstick: a process that answers one line of JSON to each line it is sent (the protocols are in yardstick.h and job.h). */
export class YardstickProcess {
  readonly #child: ChildProcess;
  readonly #lines: AsyncIterator<string>;
  readonly #interface: Interface;
  readonly #resultFile: string | undefined;

  /** @param resultFile the last parameter, where the process saves results to; none where it saves nothing */
  constructor(command: string, parameters: readonly string[], resultFile?: string, environment: Record<string, string> = {}) {
    this.#child = spawn(command, [...parameters, ...(resultFile === undefined ? [] : [resultFile])], {
      stdio: ["pipe", "pipe", "inherit"],
      env: { ...process.env, ...environment },
    });
    this.#interface = createInterface({ input: this.#child.stdout! });
    this.#lines = this.#interface[Symbol.asyncIterator]();
    this.#resultFile = resultFile;
  }

  /** One of the process's ways to do the work, as a contender; `part` picks what is counted. */
  contender(name: string, form: string, part: keyof Answer = "milliseconds"): Contender {
    return { name, run: async (plane) => (await this.ask<Answer>(`${form} ${plane}`))[part]! };
  }

  /** The names of every form, where the process tells them. */
  async forms(): Promise<string[]> {
    return (await this.ask<{ forms: string[] }>("forms")).forms;
  }

  /** The last result, as 32-bit floats. */
  async result(): Promise<Float32Array> {
    return new Float32Array((await this.resultBytes()).buffer);
  }

  /** The last result, byte by byte, in memory of its own. */
  async resultBytes(): Promise<Uint8Array<ArrayBuffer>> {
    await this.ask("save");
    return Uint8Array.from(readFileSync(this.#resultFile!));
  }

  async end(): Promise<void> {
    const exited = new Promise((resolve) => this.#child.once("exit", resolve));
    this.#child.stdin!.end();
    this.#interface.close();
    await exited;
  }

  /** Sends a line and waits for what comes back. */
  async ask<T>(line: string): Promise<T> {
    this.#child.stdin!.write(`${line}\n`);
    const { value, done } = await this.#lines.next();
    if (done === true) throw new Error(`the yardstick ended when it was asked for "${line}"`);
    return JSON.parse(value) as T;
  }
}
