const reachable = 'a[href], button:not(:disabled), input:not(:disabled), select, textarea, [tabindex="0"]';
// Longer than any answer that a press waits for.
const patienceMs = 20_000;

/**
 * Lets the focus go on from a control that its own press takes away: to the nearest control after it that is still there,
 * else the nearest before it, else the page's content. Whoever has moved on meanwhile is left alone.
 */
export const focusWhenGone = (control: Element): void => {
  const main = document.getElementById('main');
  const all = [...(main ?? document.body).querySelectorAll<HTMLElement>(reachable)];
  const isAfter = (element: Element): boolean =>
    (control.compareDocumentPosition(element) & Node.DOCUMENT_POSITION_FOLLOWING) !== 0;
  const next = [...all.filter(isAfter), ...all.filter((element) => !isAfter(element)).reverse()];
  const observer = new MutationObserver(() => {
    if (control.isConnected) return;
    stop();
    if (document.activeElement !== null && document.activeElement !== document.body) return;
    const near = next.find((element) => element.isConnected) ?? main;
    near?.focus();
  });
  const timer = setTimeout(() => observer.disconnect(), patienceMs);
  const stop = (): void => {
    observer.disconnect();
    clearTimeout(timer);
  };
  observer.observe(document.body, { childList: true, subtree: true });
};
