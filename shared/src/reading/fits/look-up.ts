import { settleAxis } from '../columns/axis.js';
import { stated } from '../columns/medium.js';
import type { ReadContext } from '../context.js';
import { quoted, refuse } from '../refusal.js';
import { binaryTable } from './binary-table.js';
import type { Hdu } from './hdu.js';
import type { AxisPlace, ImageAxis } from './axis-place.js';

/** An axis from a look-up table, -TAB of Greisen et al. 2006 section 6, one-dimensional. */
export function lookUpAxis({ hdu, k, length }: AxisPlace, hdus: readonly Hdu[], context: ReadContext): ImageAxis {
  const { header } = hdu;
  const ctype = header.text(`CTYPE${k}`)!.toUpperCase();
  const name = header.text(`PS${k}_0`);
  const valueColumn = header.text(`PS${k}_1`);
  const indexColumn = header.text(`PS${k}_2`);
  const tableHdu = hdus.find(
    (other) =>
      other.kind === 'binary_table' &&
      other.header.text('EXTNAME') === name &&
      (other.header.number('EXTVER') ?? 1) === (header.number(`PV${k}_1`) ?? 1),
  );
  if (!tableHdu || valueColumn === null)
    refuse(
      'no_look_up_table',
      `The spectral axis in ${hdu.place} is a look-up table, but its table ${quoted(name ?? '(no name)')} is missing.`,
      { card: `PS${k}_0` },
    );
  const table = binaryTable(tableHdu, context);
  const column = (wanted: string) => {
    const index = table.infos.findIndex((info) => info.name.toUpperCase() === wanted.toUpperCase());
    if (index < 0 || table.rows < 1)
      refuse('no_look_up_table', `The look-up table ${tableHdu.place} has no column ${quoted(wanted)}.`, { column: wanted });
    const { values, lengths } = table.read(index);
    return { values: lengths ? values.subarray(0, lengths[0]) : values, unit: table.infos[index]!.unit, card: `TUNIT${index + 1}` };
  };
  const coordinates = column(valueColumn);
  const index = indexColumn === null ? null : column(indexColumn).values;
  const nodes = coordinates.values.length;
  if (nodes < 2 || (index && index.length !== nodes))
    refuse('no_look_up_table', `The look-up table ${tableHdu.place} has too few entries.`);
  const perPixel = header.number(`CD${k}_${k}`) ?? (header.number(`CDELT${k}`) ?? 1) * (header.number(`PC${k}_${k}`) ?? 1);
  const out = new Float64Array(length);
  for (let i = 0; i < length; i++) {
    const psi = (header.number(`CRVAL${k}`) ?? 0) + (i + 1 - (header.number(`CRPIX${k}`) ?? 0)) * perPixel;
    out[i] = interpolated(coordinates.values, index ? positionIn(index, psi) : psi - 1);
  }
  const unit = header.text(`CUNIT${k}`) ?? coordinates.unit;
  const where = header.text(`CUNIT${k}`) ? `CUNIT${k}` : coordinates.card;
  const axis = settleAxis(out, { name: ctype, quantity: ctype.startsWith('FREQ') ? 'frequency' : 'length', unit, where }, context);
  const medium = ctype.startsWith('WAVE')
    ? stated('vacuum' as const, `CTYPE${k}`)
    : ctype.startsWith('AWAV')
      ? stated('air' as const, `CTYPE${k}`)
      : null;
  return { name: ctype, axis, medium };
}

/** Where `psi` lies between the entries of an ascending or descending index, counted from 0. */
function positionIn(index: Float64Array, psi: number): number {
  const descending = index[index.length - 1]! < index[0]!;
  for (let i = 0; i + 1 < index.length; i++) {
    const [a, b] = [index[i]!, index[i + 1]!];
    if (descending ? psi <= a && psi >= b : psi >= a && psi <= b) return a === b ? i : i + (psi - a) / (b - a);
  }
  return NaN;
}

/** Linear between the entries, and half a step beyond the ends as the standard allows. */
function interpolated(values: Float64Array, position: number): number {
  const last = values.length - 1;
  if (!(position >= -0.5 && position <= last + 0.5)) return NaN;
  const i = Math.min(last - 1, Math.max(0, Math.floor(position)));
  return values[i]! + (position - i) * (values[i + 1]! - values[i]!);
}
