import '@testing-library/jest-dom/vitest';
import { cleanup } from '@testing-library/react';
import { afterEach, vi } from 'vitest';

afterEach(cleanup);

// What Mantine asks of the browser and jsdom lacks.
Object.defineProperty(window, 'matchMedia', {
  writable: true,
  value: (query: string) => ({
    matches: false,
    media: query,
    onchange: null,
    addListener: vi.fn(),
    removeListener: vi.fn(),
    addEventListener: vi.fn(),
    removeEventListener: vi.fn(),
    dispatchEvent: vi.fn(),
  }),
});
class NoResize {
  observe() {}
  unobserve() {}
  disconnect() {}
}
window.ResizeObserver = NoResize as unknown as typeof ResizeObserver;
window.HTMLElement.prototype.scrollIntoView = () => {};
Object.defineProperty(document, 'fonts', { value: { addEventListener: vi.fn(), removeEventListener: vi.fn(), ready: Promise.resolve() } });
// strips and curves are drawn on canvases; jsdom has none, and what they show is tested without a screen
window.HTMLCanvasElement.prototype.getContext = () => null;
