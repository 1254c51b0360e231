/** What slices of work need of their host: the time, and a way to let others run in between. */
export interface Pacing {
  /** Milliseconds from any start. */
  now(): number;
  /** Calls back once whatever else waits has had its turn: events, timers, drawing. */
  yield(resume: () => void): void;
}

interface TaskScheduler {
  yield?(): Promise<unknown>;
  postTask?(task: () => void): Promise<unknown>;
}

interface Host {
  scheduler?: TaskScheduler;
  setImmediate?(task: () => void): unknown;
}

/** A message to oneself: no timer, so that nothing delays it to a whole second in the background or to 4 ms when repeated. */
function postToSelf(resume: () => void): void {
  const { port1, port2 } = new MessageChannel();
  const heard = (): void => {
    port1.close();
    resume();
  };
  port1.addEventListener("message", heard, { once: true });
  port1.start();
  port2.postMessage(undefined);
}

/**
 * The way to yield that the host has, the best first: `scheduler.yield` and `scheduler.postTask` (browsers, made for this), `setImmediate` (Node), a
 * message to oneself (other browsers). None of them is throttled as timers are. Where there is none of them, timers: right, and slow in the background.
 */
function yielderOf({ scheduler, setImmediate }: Host): Pacing["yield"] {
  // What a task inherits from the one that it continues may be aborted or not: the work goes on either way.
  if (typeof scheduler?.yield === "function") return (resume) => void scheduler.yield!().then(resume, resume);
  if (typeof scheduler?.postTask === "function") return (resume) => void scheduler.postTask!(resume).catch(() => undefined);
  if (typeof setImmediate === "function") return (resume) => void setImmediate(resume);
  if (typeof MessageChannel === "function") return postToSelf;
  return (resume) => void setTimeout(resume, 0);
}

/** The pacing of the host that the code runs on, or of the globals that are given. */
export function hostPacing(host: object = globalThis): Pacing {
  return { now: () => performance.now(), yield: yielderOf(host) };
}
