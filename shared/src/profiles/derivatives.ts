import type { Component } from './component.js';
import { DAMPED_COLUMNS, dampedInto, dampedTable } from './damped.js';

/** Parameters of a fixed shape: amplitude, centre in scales, ln scale. */
export const SIMPLE = 3;
/** Those, and ln tau and ln a. */
export const DAMPED = 5;

/**
 * phi, and the derivatives of amplitude * phi by centre (in scales), ln scale and, for damped profiles, ln tau and ln a, at samples
 * offset + [from, to). Row q of sample i goes to out[row + q * stride + i]; row 0 holds phi, the derivative by amplitude.
 */
export function derivativesInto(
  out: Float64Array,
  c: Component,
  wavelength: Float64Array,
  offset: number,
  from: number,
  to: number,
  row: number,
  stride: number,
): void {
  if (c.damped) dampedRows(out, c, wavelength, offset, from, to, row, stride);
  else fixedRows(out, c, wavelength, offset, from, to, row, stride);
}

type Rows = typeof derivativesInto;

const fixedRows: Rows = (out, { core, centre, scale, amplitude }, wavelength, offset, from, to, row, stride) => {
  const { value, slope, perUnit } = core;
  const inverse = 1 / scale;
  const last = value.length - 2;
  for (let i = from; i < to; i++) {
    const dx = (wavelength[offset + i]! - centre) * inverse;
    const u = dx < 0 ? -dx : dx;
    const t = u * perUnit;
    const k = t | 0;
    if (k >= last) {
      out[row + i] = out[row + stride + i] = out[row + 2 * stride + i] = 0;
      continue;
    }
    const w = t - k;
    const s = amplitude * (slope[k]! + w * (slope[k + 1]! - slope[k]!));
    out[row + i] = value[k]! + w * (value[k + 1]! - value[k]!);
    out[row + stride + i] = dx < 0 ? s : -s;
    out[row + 2 * stride + i] = -s * u;
  }
};

const held = new Float64Array(DAMPED_COLUMNS);

const dampedRows: Rows = (out, { damped, centre, scale, amplitude }, wavelength, offset, from, to, row, stride) => {
  const table = dampedTable(damped!);
  const inverse = 1 / scale;
  for (let i = from; i < to; i++) {
    const dx = (wavelength[offset + i]! - centre) * inverse;
    dampedInto(held, table, dx < 0 ? -dx : dx);
    const at = row + i;
    out[at] = held[0]!;
    out[at + stride] = dx < 0 ? amplitude * held[1]! : -amplitude * held[1]!;
    out[at + 2 * stride] = amplitude * held[4]!;
    out[at + 3 * stride] = amplitude * held[2]!;
    out[at + 4 * stride] = amplitude * held[3]!;
  }
};
