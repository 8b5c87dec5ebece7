/** A small seeded generator (Mulberry32, public domain): the same mutations in every run. */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = Math.imul(state ^ (state >>> 15), state | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

const NASTY_VALUES = [
  '-1',
  '0',
  '1',
  '2147483648',
  '9007199254740993',
  '1E308',
  '-1E-308',
  "'X'",
  "''",
  'T',
  'NAN',
  '1.5',
  '999999999999999999999',
];
const NASTY_BYTES = [...new TextEncoder().encode(',;\t\n\r"\'#%|0123456789.eE+-[]() '), 0, 0xff, 0xc3];
const CARD = 80;

type Random = () => number;
const below = (random: Random, n: number) => Math.floor(random() * n);
const pick = <T>(random: Random, list: readonly T[]): T => list[below(random, list.length)]!;

function withBytes(bytes: Uint8Array, random: Random, count: number, within: number, value: () => number): Uint8Array {
  const out = bytes.slice();
  for (let k = 0; k < count; k++) out[below(random, Math.min(within, out.length))] = value();
  return out;
}

function spliced(bytes: Uint8Array, at: number, remove: number, insert: Uint8Array): Uint8Array {
  const tail = bytes.subarray(Math.min(bytes.length, at + remove));
  const out = new Uint8Array(at + insert.length + tail.length);
  out.set(bytes.subarray(0, at));
  out.set(insert, at);
  out.set(tail, at + insert.length);
  return out;
}

/** One mutation of a FITS file: of bytes, of the value of a card, of its cards' order, or of its length. */
export function mutateFits(bytes: Uint8Array, random: Random): Uint8Array {
  const byte = () => below(random, 256);
  const card = () => CARD * below(random, Math.max(1, Math.floor(Math.min(bytes.length, 11520) / CARD)));
  switch (below(random, 7)) {
    case 0:
      return withBytes(bytes, random, 1 + below(random, 8), bytes.length, byte);
    case 1:
      return withBytes(bytes, random, 1 + below(random, 4), 11520, byte);
    case 2:
    case 3: {
      const value = new TextEncoder().encode(`= ${pick(random, NASTY_VALUES)}`.padEnd(CARD - 8));
      return spliced(bytes, Math.min(bytes.length, card() + 8), value.length, value);
    }
    case 4:
      return bytes.slice(0, below(random, bytes.length));
    case 5:
      return spliced(bytes, card(), CARD, new Uint8Array(0));
    default: {
      const from = card();
      return spliced(bytes, card(), 0, bytes.slice(from, from + CARD));
    }
  }
}

/** One mutation of a text table. */
export function mutateText(bytes: Uint8Array, random: Random): Uint8Array {
  const at = below(random, bytes.length);
  const length = 1 + below(random, 200);
  switch (below(random, 5)) {
    case 0:
      return withBytes(bytes, random, 1 + below(random, 6), bytes.length, () => pick(random, NASTY_BYTES));
    case 1:
      return bytes.slice(0, at);
    case 2:
      return spliced(bytes, at, length, new Uint8Array(0));
    case 3:
      return spliced(bytes, at, 0, bytes.slice(0, length));
    default:
      return spliced(bytes, at, 0, new Uint8Array(length).fill(pick(random, NASTY_BYTES)));
  }
}
