import '@testing-library/jest-dom/vitest';
import { cleanup } from '@testing-library/react';
import { afterEach } from 'vitest';

// jsdom has no layout and no media queries; components only ask whether one matches. Set outright, so that a test which
// takes its own stubs back doesn't take these with them.
Object.assign(globalThis, {
  matchMedia: (query: string) => ({
    matches: false,
    media: query,
    addEventListener: () => undefined,
    removeEventListener: () => undefined,
  }),
  ResizeObserver: class {
    observe() {}
    unobserve() {}
    disconnect() {}
  },
});

afterEach(() => {
  cleanup();
  localStorage.clear();
});
