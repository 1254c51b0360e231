import { spawn, type ChildProcess } from "node:child_process";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import { afterEach, describe, expect, test } from "vitest";
import { networkAddresses } from "../../bench/page/addresses.js";

const root = fileURLToPath(new URL("../../", import.meta.url));
const started: ChildProcess[] = [];

/** The command of `npm run page --`, its core being there. */
function startPage(...parameters: string[]) {
  const child = spawn(process.execPath, [join(root, "node_modules/tsx/dist/cli.mjs"), join(root, "bench/page.ts"), ...parameters], { cwd: root });
  started.push(child);
  const said = { out: "", wrong: "" };
  child.stdout.on("data", (text) => (said.out += text));
  child.stderr.on("data", (text) => (said.wrong += text));
  const ended = new Promise<number | null>((resolve) => child.once("close", resolve));
  const serving = new Promise<string>((resolve, reject) => {
    child.stdout.on("data", () => said.out.includes("Ctrl+C") && resolve(said.out));
    void ended.then(() => reject(new Error(`It ended: ${said.out}${said.wrong}`)));
  });
  serving.catch(() => {});
  return { child, said, ended, serving };
}

afterEach(() => {
  for (const child of started.splice(0)) child.kill("SIGKILL");
});

const addressIn = (text: string): string => /http:\/\/localhost:\d+\//.exec(text)![0];

describe("npm run page", () => {
  test("serves one page on this machine alone, isolated, and ends when it is told to", async () => {
    const { child, ended, serving } = startPage("--port", "0");
    const said = await serving;
    expect(said.match(/http:/g)).toHaveLength(1);
    expect(said).toContain("npm run page -- --host");
    const response = await fetch(addressIn(said));
    expect(response.headers.get("Cross-Origin-Opener-Policy")).toBe("same-origin");
    expect(response.headers.get("Cross-Origin-Embedder-Policy")).toBe("require-corp");
    const page = await response.text();
    expect(page).toContain("<h1>Measure this device</h1>");
    expect(page).not.toMatch(/(src|href)="(?!data:)/);
    expect((await fetch(`${addressIn(said)}favicon.ico`)).status).toBe(404);
    child.kill("SIGINT");
    expect(await ended).toBe(0);
  });

  test("--host prints the machine's addresses on the network, and what such a page lacks", async () => {
    const { serving } = startPage("--host", "--port", "0");
    const said = await serving;
    const port = new URL(addressIn(said)).port;
    for (const address of networkAddresses()) expect(said).toContain(`http://${address}:${port}/`);
    if (networkAddresses().length === 0) expect(said).toContain("on no network");
    else expect(said).toMatch(/one thread, and its clock is coarser/);
    for (const address of networkAddresses()) expect((await fetch(`http://${address}:${port}/`)).status).toBe(200);
  });

  test("a port that is taken is told of in a sentence", async () => {
    const other = createServer().listen(0, "127.0.0.1");
    await new Promise((resolve) => other.once("listening", resolve));
    const { port } = other.address() as AddressInfo;
    const { ended, said } = startPage("--port", String(port));
    expect(await ended).toBe(1);
    expect(said.wrong).toBe(`Port ${port} is taken by another program. Name a free one with --port, or 0 for any.\n`);
    other.close();
  });

  test.each([["--port", "many"], ["--port", "65536"], ["--port", "-1"], ["--hots"], ["photo.png"]])(
    "refuses %s %s and names the help",
    async (...parameters) => {
      const { ended, said } = startPage(...parameters);
      expect(await ended).not.toBe(0);
      expect(said.wrong).toContain("--help");
      expect(said.wrong).not.toContain("    at ");
    },
  );

  test("--help", async () => {
    const { ended, said } = startPage("--help");
    expect(await ended).toBe(0);
    for (const word of ["--host", "--port", "8321"]) expect(said.out).toContain(word);
  });
});

describe("addresses on the network", () => {
  const at = (address: string, more = {}) => ({ address, family: "IPv4" as const, internal: false, netmask: "", mac: "", cidr: null, ...more });

  test("private ones first, those of this machine alone not at all, self-assigned ones where there is no other", () => {
    expect(
      networkAddresses({
        lo: [at("127.0.0.1", { internal: true })],
        cable: [at("203.0.113.9"), at("10.1.2.3"), { ...at("fe80::1"), family: "IPv6", scopeid: 1 }],
        radio: [at("192.168.0.20"), at("169.254.7.7"), at("172.20.0.1")],
      }),
    ).toEqual(["192.168.0.20", "10.1.2.3", "172.20.0.1", "203.0.113.9"]);
    expect(networkAddresses({ radio: [at("169.254.7.7")] })).toEqual(["169.254.7.7"]);
    expect(networkAddresses({})).toEqual([]);
  });
});
