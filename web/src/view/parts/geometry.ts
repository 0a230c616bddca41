/** From places that Rust names to places on the screen. */

/** A place between two ends, in pixels of the picture. */
export type Place = (at: number) => number;

/** What lies from `low` to `high` is drawn from `from` to `to`. */
export function between(low: number, high: number, from: number, to: number): Place {
  return (at) => from + ((at - low) / (high - low)) * (to - from);
}

/** Every how many of `count` labels there is room for one of `labelWidth` in `width`. */
export function labelledEvery(count: number, labelWidth: number, width: number): number {
  return Math.max(1, Math.ceil((count * labelWidth) / width));
}

/** Where in an element something happened sideways: −1 at its left edge, 1 at its right. */
export function sideways(event: { readonly clientX: number }, element: Element): number {
  const box = element.getBoundingClientRect();
  return ((event.clientX - box.left) / box.width) * 2 - 1;
}
