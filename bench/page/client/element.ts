/** An element of the page that is known to be there. */
export function element<K extends keyof HTMLElementTagNameMap>(id: string, tag: K): HTMLElementTagNameMap[K];
export function element(id: string): HTMLElement;
export function element(id: string): HTMLElement {
  const found = document.getElementById(id);
  if (found === null) throw new Error(`The page has no element "${id}".`);
  return found;
}

/** Shows an element or hides it. */
export function show(shown: HTMLElement, visible = true): void {
  shown.hidden = !visible;
}

/** Writes text, and hides the element where there is none. */
export function say(words: string | undefined, where: HTMLElement): void {
  where.textContent = words ?? "";
  show(where, words !== undefined);
}
