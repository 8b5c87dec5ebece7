import { elementBytes } from './tform.js';

/** physical = zero + scale * stored, and the stored integer that stands for no value. */
export interface Scaling {
  readonly scale: number;
  readonly zero: number;
  readonly blank: number | null;
}

/** Where the elements lie: groups (rows) of `perGroup` neighbours, `groupStride` bytes apart. */
export interface ElementLayout {
  /** code of a binary table column; images use B I J K E D as well */
  readonly code: string;
  /** X: how many bits a field has */
  readonly bits: number;
  readonly start: number;
  readonly groups: number;
  readonly groupStride: number;
  readonly perGroup: number;
}

const TWO_63 = 2 ** 63;
const TWO_32 = 2 ** 32;

/** Big-endian elements into `out` from `at` on, scaled; null integers and undefined logicals become NaN. */
export function decode(bytes: Uint8Array, layout: ElementLayout, scaling: Scaling, out: Float64Array, at: number): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const { code, start, groups, groupStride, perGroup } = layout;
  // the only offset that a double cannot undo afterwards: unsigned 64-bit integers
  const unsigned64 = code === 'K' && scaling.zero === TWO_63 && scaling.scale === 1;
  const element = unsigned64 ? unsignedElement(view, scaling.blank) : elementReader(view, code, layout.bits, scaling.blank);
  const size = code === 'X' ? 0 : elementBytes(code);
  if (code === 'D' && perGroup === 1) {
    for (let g = 0, p = start; g < groups; g++, p += groupStride) out[at + g] = view.getFloat64(p);
  } else if (code === 'E' && perGroup === 1) {
    for (let g = 0, p = start; g < groups; g++, p += groupStride) out[at + g] = view.getFloat32(p);
  } else {
    let n = at;
    for (let g = 0; g < groups; g++) for (let k = 0, p = start + g * groupStride; k < perGroup; k++, p += size) out[n++] = element(p);
  }
  if (unsigned64 || code === 'L' || code === 'X' || (scaling.scale === 1 && scaling.zero === 0)) return;
  const end = at + groups * perGroup;
  for (let i = at; i < end; i++) out[i] = out[i]! * scaling.scale + scaling.zero;
}

function elementReader(view: DataView, code: string, bits: number, blank: number | null): (p: number) => number {
  const unlessBlank = (value: number) => (value === blank ? NaN : value);
  switch (code) {
    case 'D':
      return (p) => view.getFloat64(p);
    case 'E':
      return (p) => view.getFloat32(p);
    case 'B':
      return (p) => unlessBlank(view.getUint8(p));
    case 'I':
      return (p) => unlessBlank(view.getInt16(p));
    case 'J':
      return (p) => unlessBlank(view.getInt32(p));
    case 'K':
      return (p) => (blank !== null && isBlank64(view, p, blank) ? NaN : view.getInt32(p) * TWO_32 + view.getUint32(p + 4));
    case 'L':
      return (p) => (view.getUint8(p) === 0x54 ? 1 : view.getUint8(p) === 0x46 ? 0 : NaN);
    case 'X':
      return (p) => (anyBit(view, p, bits) ? 1 : 0);
    default:
      return () => NaN;
  }
}

/** Compared as stored: doubles near 2^63 would take many integers for one. */
const isBlank64 = (view: DataView, p: number, blank: number): boolean => Number.isInteger(blank) && view.getBigInt64(p) === BigInt(blank);

const unsignedElement = (view: DataView, blank: number | null) => (p: number) =>
  blank !== null && isBlank64(view, p, blank) ? NaN : (view.getInt32(p) + 0x80000000) * TWO_32 + view.getUint32(p + 4);

function anyBit(view: DataView, p: number, bits: number): boolean {
  for (let byte = 0; byte * 8 < bits; byte++) {
    const used = Math.min(8, bits - byte * 8);
    if (view.getUint8(p + byte) >> (8 - used)) return true;
  }
  return false;
}
