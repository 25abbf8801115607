import { vi } from 'vitest';

/** Every part of it is there and does nothing: enough to ask for the keys of a bench or a round. */
export function anything(): unknown {
  const part: object = new Proxy(() => undefined, { get: (_, name) => (name === 'value' ? true : part) });
  return part;
}

/** What the page does at a key, and does not here. */
export const idlePage = {
  showKeys: vi.fn(),
  nextColours: vi.fn(),
  otherView: vi.fn(),
  editNote: vi.fn(),
  showSteps: vi.fn(),
  showTable: vi.fn(),
  copyLink: vi.fn(),
  say: vi.fn(),
  chooseClass: vi.fn(),
};
