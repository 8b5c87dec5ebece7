import { parseAxisUnit } from '../columns/axis-unit.js';
import { settleAxis } from '../columns/axis.js';
import { axisQuantity, type SpectralQuantity } from '../columns/words.js';
import type { ReadContext } from '../context.js';
import { refuse } from '../refusal.js';
import type { Hdu } from './hdu.js';
import type { Header } from './header.js';
import type { AxisPlace, ImageAxis } from './axis-place.js';
import { linear, type Step } from './wcs-step.js';

/** Axes written before Paper III, or without a code: linear or log10, the unit in CUNIT, WAT, CTYPE or nowhere. */
export function plainAxis({ hdu, k, length }: AxisPlace, ctype: string, step: Step, context: ReadContext): ImageAxis {
  const { header } = hdu;
  const attributes = watAttributes(header, k);
  if (attributes.wtype?.toLowerCase() === 'multispec') checkMultispec(hdu);
  // 'WAVELENGTH [Ang]' names the unit in the type
  const inName = /[[(]\s*([^\])]+)[\])]/.exec(ctype)?.[1] ?? '';
  const statements: [string, string][] = [
    [header.text(`CUNIT${k}`) ?? '', `CUNIT${k}`],
    [attributes.units ?? '', `WAT${k}_001`],
    [inName, `CTYPE${k}`],
  ];
  const [unit, where] = statements.find(([text]) => parseAxisUnit(text) !== null) ?? statements[0]!;
  const name = ctype === '' ? 'pixel axis' : ctype;
  const quantity = isLog10(header, ctype) ? 'log10_length' : quantityOf(ctype, attributes.label ?? '');
  return { name, axis: settleAxis(linear(step, length), { name, quantity, unit, where }, context), medium: null };
}

/** DC-FLAG = 1, the COEFF cards and WFITTYPE all mean that the axis is the decadic logarithm of the wavelength. */
function isLog10(header: Header, ctype: string): boolean {
  return (
    header.number('DC-FLAG') === 1 || header.number('COEFF1') !== null || /LOG/.test(ctype) || /^LOG/i.test(header.text('WFITTYPE') ?? '')
  );
}

function quantityOf(ctype: string, label: string): SpectralQuantity {
  const named = axisQuantity(ctype) ?? axisQuantity(label);
  return named === null || named === 'log10_length' ? 'length' : named;
}

/** Attribute strings 'wtype=linear label=Wavelength units=angstroms', as image reduction systems write them. */
function watAttributes(header: Header, k: number): Partial<Record<string, string>> {
  const text = header.text(`WAT${k}_001`) ?? '';
  return Object.fromEntries([...text.matchAll(/(\w+)\s*=\s*(?:"([^"]*)"|(\S+))/g)].map((match) => [match[1]!, match[2] ?? match[3]!]));
}

/** Types of dispersion function that CRVAL and CD describe: none, linear, log-linear. */
const DESCRIBED = new Set([-1, 0, 1]);

/** A multispec image whose dispersion function is not linear must not be read as if it were. */
function checkMultispec({ header, place }: Hdu) {
  let text = '';
  for (let n = 1; n < 1000; n++) {
    const card = header.get(`WAT2_${String(n).padStart(3, '0')}`);
    if (typeof card !== 'string') break;
    // trailing blanks of a card were taken off, although the words may end there
    text += card.padEnd(68);
  }
  const type = /spec1\s*=\s*"\s*\d+\s+\S+\s+(-?\d+)/.exec(text)?.[1];
  if (type !== undefined && !DESCRIBED.has(Number(type)))
    refuse(
      'unsupported_algorithm',
      `The dispersion function in the WAT2 cards of ${place} is not linear (type ${type}), which is not supported. Resample the spectrum or write it into a table.`,
      { card: 'WAT2_001' },
    );
}
