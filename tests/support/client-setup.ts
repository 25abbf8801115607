import { vi } from 'vitest';

/** What the component library asks of a browser and the test document does not have. */
class IdleResizeObserver {
  observe(): void {}
  unobserve(): void {}
  disconnect(): void {}
}

vi.stubGlobal('ResizeObserver', IdleResizeObserver);

if (typeof window.matchMedia !== 'function') {
  vi.stubGlobal('matchMedia', (media: string) => ({
    media,
    matches: false,
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
    addListener: () => undefined,
    removeListener: () => undefined,
  }));
}
