/**
 * Milliseconds of processor time that this process has used, to a microsecond. Everything that is compared runs on one thread,
 * so that this is what a run takes on a processor of its own: what other processes take meanwhile does not count.
 */
export function processorMilliseconds(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
}
