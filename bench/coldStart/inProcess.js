/** `node inProcess.js <address of the package> <sample type>`: one cold start, as JSON on standard output. */
import { measureColdStart } from "./parts.js";

process.stdout.write(JSON.stringify(await measureColdStart(process.argv[2], process.argv[3])));
