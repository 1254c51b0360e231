#!/usr/bin/env node
import { run } from "./run.js";

// A reader that has seen enough (`tapwise explain … | head -1`) is no error.
process.stdout.on("error", (error: NodeJS.ErrnoException) => process.exit(error.code === "EPIPE" ? 0 : 1));
process.exitCode = await run(process.argv.slice(2), process);
