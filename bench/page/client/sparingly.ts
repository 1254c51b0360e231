/** Of the time, what drawing may take while something is timed: on one processor both share it. */
const drawingShare = 0.08;

/** Draws seldom enough to disturb little, however slow the device: after a drawing that took long, the next one waits longer. Not at all while nobody sees the page. */
export class Sparingly {
  #waitsUntil = -Infinity;

  /** Draws now or not at all; what is not drawn is in the next drawing. */
  draw(action: () => void): void {
    const begun = performance.now();
    if (begun < this.#waitsUntil || document.hidden) return;
    this.#waitsUntil = Infinity;
    action();
    // The message comes behind the frame, so that layout and painting count as well.
    requestAnimationFrame(() => {
      const { port1, port2 } = new MessageChannel();
      port1.addEventListener("message", () => {
        const now = performance.now();
        this.#waitsUntil = now + (now - begun) * (1 / drawingShare - 1);
        port1.close();
      });
      port1.start();
      port2.postMessage(undefined);
    });
  }
}
