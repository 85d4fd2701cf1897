/**
 * Keys must never lead nowhere: where what had the focus is gone from the page, or can no longer have
 * it, and nothing else took it, the focus goes to the place that is shown. Gives back what ends it.
 */
export function keepFocus(home: () => HTMLElement | null): () => void {
  // Dialogs give the focus back, and places take it to what is being worked on, a moment later.
  const patience = 300;
  let last: Element | null = null;
  let waiting: ReturnType<typeof setTimeout> | undefined;

  const isLost = (): boolean => {
    const { activeElement, body } = document;
    return last !== null && (activeElement === null || activeElement === body);
  };
  const look = (): void => {
    if (!isLost()) return;
    clearTimeout(waiting);
    waiting = setTimeout(() => {
      const gone = last !== null && (!last.isConnected || last.matches(':disabled'));
      if (isLost() && gone) home()?.focus({ preventScroll: true });
    }, patience);
  };
  const remember = (event: FocusEvent): void => {
    last = event.target instanceof Element ? event.target : null;
  };
  const changes = new MutationObserver(look);
  document.addEventListener('focusin', remember);
  changes.observe(document.body, {
    childList: true,
    subtree: true,
    attributes: true,
    attributeFilter: ['disabled'],
  });
  return () => {
    clearTimeout(waiting);
    changes.disconnect();
    document.removeEventListener('focusin', remember);
  };
}
