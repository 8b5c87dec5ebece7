/** What a key does while the curve or the table has the focus. */
export type Command =
  | { do: 'cursor'; pixels: number }
  | { do: 'feature'; direction: 1 | -1 }
  | { do: 'staff'; direction: 1 | -1 }
  | { do: 'undecided'; direction: 1 | -1 }
  | { do: 'choose'; candidate: number | 'unidentified' }
  | { do: 'act'; action: 'accept' | 'reject' | 'propose' | 'reopen' }
  | { do: 'remark' }
  | { do: 'zoom'; factor: number }
  | { do: 'whole' }
  | { do: 'history'; direction: 1 | -1 }
  | { do: 'open' }
  | { do: 'edge'; which: 'start' | 'end' }
  | { do: 'steer' }
  | { do: 'leave' };

export interface Key {
  readonly key: string;
  readonly shiftKey: boolean;
  readonly ctrlKey: boolean;
  readonly metaKey: boolean;
  readonly altKey: boolean;
}

const PLAIN: Record<string, Command> = {
  ArrowUp: { do: 'staff', direction: -1 },
  ArrowDown: { do: 'staff', direction: 1 },
  n: { do: 'undecided', direction: 1 },
  p: { do: 'undecided', direction: -1 },
  u: { do: 'choose', candidate: 'unidentified' },
  a: { do: 'act', action: 'accept' },
  x: { do: 'act', action: 'reject' },
  o: { do: 'act', action: 'propose' },
  b: { do: 'act', action: 'reopen' },
  r: { do: 'remark' },
  s: { do: 'edge', which: 'start' },
  e: { do: 'edge', which: 'end' },
  g: { do: 'steer' },
  '+': { do: 'zoom', factor: 0.5 },
  '=': { do: 'zoom', factor: 0.5 },
  '-': { do: 'zoom', factor: 2 },
  '0': { do: 'whole' },
  '[': { do: 'history', direction: -1 },
  ']': { do: 'history', direction: 1 },
  Enter: { do: 'open' },
  Escape: { do: 'leave' },
};

/** null: the key means nothing here and is left to the browser. */
export function commandFor({ key, shiftKey, ctrlKey, metaKey, altKey }: Key): Command | null {
  if (altKey || metaKey) return null;
  if (key === 'ArrowLeft' || key === 'ArrowRight') {
    const direction = key === 'ArrowRight' ? 1 : -1;
    if (ctrlKey) return { do: 'feature', direction };
    return { do: 'cursor', pixels: direction * (shiftKey ? 10 : 1) };
  }
  if (ctrlKey) return null;
  if (/^[1-9]$/.test(key)) return { do: 'choose', candidate: Number(key) };
  return PLAIN[key] ?? null;
}
