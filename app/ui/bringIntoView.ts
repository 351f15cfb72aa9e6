/** Takes eyes and keyboard to a part of the page, without the ride for whoever wants none. */
export function bringIntoView(element: HTMLElement | null): void {
  if (!element) return;
  const still = window.matchMedia('(prefers-reduced-motion: reduce)').matches;
  element.focus({ preventScroll: true });
  element.scrollIntoView({ block: 'nearest', behavior: still ? 'auto' : 'smooth' });
}
