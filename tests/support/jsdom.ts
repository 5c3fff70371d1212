import '@testing-library/jest-dom/vitest';
import { cleanup, configure } from '@testing-library/react';
import { afterEach, vi } from 'vitest';

// Pages load their parts when first gone to; on a busy machine that takes a while.
configure({ asyncUtilTimeout: 4_000 });

afterEach(() => {
  cleanup();
  window.localStorage.clear();
});

// What jsdom lacks and the components' libraries ask for. None of it measures anything here.
class UnmeasuredObserver implements ResizeObserver {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
}
class IdentityMatrix {
  readonly m22 = 1;
}
vi.stubGlobal('ResizeObserver', UnmeasuredObserver);
vi.stubGlobal('DOMMatrixReadOnly', IdentityMatrix);
Element.prototype.scrollIntoView = () => undefined;
Element.prototype.hasPointerCapture = () => false;
Element.prototype.setPointerCapture = () => undefined;
Element.prototype.releasePointerCapture = () => undefined;
window.matchMedia = (media) => ({
  media,
  matches: false,
  onchange: null,
  addEventListener: () => undefined,
  removeEventListener: () => undefined,
  addListener: () => undefined,
  removeListener: () => undefined,
  dispatchEvent: () => false,
});
