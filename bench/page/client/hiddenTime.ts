/** How long the page was hidden since this began: browsers slow pages down that nobody sees. */
export class HiddenTime {
  readonly #listening = new AbortController();
  #since: number | undefined;
  #milliseconds = 0;

  constructor() {
    this.#look();
    document.addEventListener("visibilitychange", () => this.#look(), { signal: this.#listening.signal });
  }

  #look(): void {
    const now = performance.now();
    if (this.#since !== undefined) this.#milliseconds += now - this.#since;
    this.#since = document.visibilityState === "hidden" ? now : undefined;
  }

  /** Ends, and tells what to note; nothing where the page was in sight. */
  end(): string | undefined {
    this.#look();
    this.#listening.abort();
    if (this.#milliseconds === 0) return undefined;
    return `The page was hidden for ${(this.#milliseconds / 1000).toFixed(1)} s while it measured. Browsers slow hidden pages down, so measure again with the page in sight before you rely on this.`;
  }
}
