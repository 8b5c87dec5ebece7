/** Builds small FITS files by hand after the FITS Standard 4.0, so that the reader is checked against code of another hand. */
export type CardValue = string | number | boolean | bigint;
/** [keyword, value], or a whole card as text */
export type Card = readonly [string, CardValue] | string;

const CARD = 80;
const BLOCK = 2880;

function cardText(card: Card): string {
  if (typeof card === 'string') return card.padEnd(CARD).slice(0, CARD);
  const [keyword, value] = card;
  const text =
    typeof value === 'string'
      ? `'${value.replaceAll("'", "''").padEnd(8)}'`
      : typeof value === 'boolean'
        ? (value ? 'T' : 'F').padStart(20)
        : String(value).padStart(20);
  return `${keyword.padEnd(8)}= ${text}`.padEnd(CARD).slice(0, CARD);
}

const ascii = (text: string): Uint8Array => Uint8Array.from(text, (character) => character.charCodeAt(0));

export function concat(...parts: readonly Uint8Array[]): Uint8Array {
  const out = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  parts.reduce((at, part) => (out.set(part, at), at + part.length), 0);
  return out;
}

const padded = (bytes: Uint8Array, fill: number): Uint8Array =>
  concat(bytes, new Uint8Array((BLOCK - (bytes.length % BLOCK)) % BLOCK).fill(fill));

export const header = (cards: readonly Card[]): Uint8Array => padded(ascii([...cards, 'END'].map(cardText).join('')), 0x20);

export const primary = (cards: readonly Card[] = []): Uint8Array =>
  header([['SIMPLE', true], ['BITPIX', 8], ['NAXIS', 0], ['EXTEND', true], ...cards]);

export const unit = (cards: readonly Card[], data: Uint8Array): Uint8Array => concat(header(cards), padded(data, 0));

type Writer = (view: DataView, at: number, value: CardValue) => void;
const WRITERS: Record<string, [number, Writer]> = {
  D: [8, (view, at, value) => view.setFloat64(at, Number(value))],
  E: [4, (view, at, value) => view.setFloat32(at, Number(value))],
  K: [8, (view, at, value) => view.setBigInt64(at, BigInt(value))],
  J: [4, (view, at, value) => view.setInt32(at, Number(value))],
  I: [2, (view, at, value) => view.setInt16(at, Number(value))],
  B: [1, (view, at, value) => view.setUint8(at, Number(value))],
  L: [1, (view, at, value) => view.setUint8(at, value === true ? 0x54 : value === false ? 0x46 : 0)],
  A: [1, (view, at, value) => view.setUint8(at, String(value).charCodeAt(0))],
};

/** Elements of one code, big-endian. */
export function elements(code: string, values: readonly CardValue[]): Uint8Array {
  const [size, write] = WRITERS[code]!;
  const bytes = new Uint8Array(size * values.length);
  const view = new DataView(bytes.buffer);
  values.forEach((value, i) => write(view, i * size, value));
  return bytes;
}

export interface Column {
  name?: string;
  /** 'D', '400E', 'PD(20)', 'QE(20)', '11X' */
  form: string;
  /** one entry a row: a value, or a list for vectors and variable-length arrays */
  rows: readonly (CardValue | readonly CardValue[])[];
  cards?: readonly Card[];
}

/** A binary table extension; variable-length arrays go to the heap in the order of columns and rows. */
export function binaryTable(columns: readonly Column[], cards: readonly Card[] = []): Uint8Array {
  const rows = columns[0]!.rows.length;
  const heap: Uint8Array[] = [];
  let heapBytes = 0;
  const fields = columns.map(({ form, rows: values }) => {
    const match = /^(\d*)([A-Z])([A-Z]?)/.exec(form)!;
    return values.map((value) => {
      const list = Array.isArray(value) ? (value as CardValue[]) : [value as CardValue];
      if (match[2] === 'X') return elements('B', list);
      if (match[2] !== 'P' && match[2] !== 'Q') return elements(match[2]!, list);
      const bytes = elements(match[3]!, list);
      heap.push(bytes);
      heapBytes += bytes.length;
      return elements(match[2] === 'P' ? 'J' : 'K', [list.length, heapBytes - bytes.length]);
    });
  });
  const rowBytes = fields.reduce((sum, field) => sum + field[0]!.length, 0);
  const data = concat(...Array.from({ length: rows }, (_, row) => concat(...fields.map((field) => field[row]!))), ...heap);
  const described = columns.flatMap(({ name, form, cards: own = [] }, i): Card[] => [
    ...(name === undefined ? [] : [[`TTYPE${i + 1}`, name] as const]),
    [`TFORM${i + 1}`, form],
    ...own.map((card): Card => (typeof card === 'string' ? card : [`${card[0]}${i + 1}`, card[1]])),
  ]);
  const fixed: Card[] = [
    ['XTENSION', 'BINTABLE'],
    ['BITPIX', 8],
    ['NAXIS', 2],
    ['NAXIS1', rowBytes],
    ['NAXIS2', rows],
    ['PCOUNT', heapBytes],
    ['GCOUNT', 1],
    ['TFIELDS', columns.length],
  ];
  return unit([...fixed, ...described, ...cards], data);
}

/** A primary image of doubles. */
export function image(values: readonly number[], cards: readonly Card[], axes: readonly number[] = [values.length]): Uint8Array {
  const shape = axes.map((length, i): Card => [`NAXIS${i + 1}`, length]);
  return unit([['SIMPLE', true], ['BITPIX', -64], ['NAXIS', axes.length], ...shape, ...cards], elements('D', values));
}
