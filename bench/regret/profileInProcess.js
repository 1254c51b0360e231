/** `node profileInProcess.js <address of the bundle>`: measures a profile in a process of its own, as JSON on standard output. */
const { freshProfile } = await import(process.argv[2]);
process.stdout.write(JSON.stringify(await freshProfile()));
