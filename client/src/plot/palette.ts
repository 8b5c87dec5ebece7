import { useSyncExternalStore } from 'react';

const NAMES = [
  'ground', 'raise', 'sink', 'select', 'hover', 'line', 'line-2', 'control', 'ink', 'ink-2', 'ink-3', 'curve', 'cont', 'fit',
  'stellar', 'interstellar', 'nebular', 'telluric', 'unidentified', 'hatch', 'hatch-ink',
] as const; // prettier-ignore
export type InkName = (typeof NAMES)[number];

/** The theme's colours as a canvas needs them: resolved, because a canvas cannot read CSS variables. */
export interface Palette extends Record<InkName, string> {
  readonly scheme: 'light' | 'dark';
}

export function readPalette(scheme: 'light' | 'dark'): Palette {
  const style = getComputedStyle(document.documentElement);
  const colours = Object.fromEntries(NAMES.map((name) => [name, style.getPropertyValue(`--${name}`).trim() || '#808080']));
  return { ...(colours as Record<InkName, string>), scheme };
}

let current: Palette | null = null;
const themeOf = () => (document.documentElement.dataset.mantineColorScheme === 'dark' ? 'dark' : 'light');
const snapshot = (): Palette => (current ??= readPalette(themeOf()));

function subscribe(changed: () => void) {
  const observer = new MutationObserver(() => {
    current = null;
    changed();
  });
  observer.observe(document.documentElement, { attributes: true, attributeFilter: ['data-mantine-color-scheme', 'data-theme', 'class'] });
  return () => observer.disconnect();
}

/** Follows the theme; a new object, so a redraw, whenever it changes. */
export const usePalette = (): Palette => useSyncExternalStore(subscribe, snapshot);

/** '#RRGGBB' to three components, 0 to 255. */
export const hexComponents = (hex: string): [number, number, number] => {
  const n = Number.parseInt(hex.slice(1), 16);
  return [(n >> 16) & 255, (n >> 8) & 255, n & 255];
};
