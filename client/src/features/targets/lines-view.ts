import { C_KM_PER_S, type Identification, type ReviewState } from '@foreveil/shared';
import { MILLIANGSTROM_PER_NM } from '../../lib/number.js';
import type { WavelengthDisplay } from '../../lib/wavelength.js';

/** Lines of one state, in order of wavelength; those in no list stand where they were seen. */
export const linesIn = (identifications: readonly Identification[], state: ReviewState): Identification[] =>
  identifications.filter((line) => line.state === state).sort((a, b) => restOrSeen(a) - restOrSeen(b));

const restOrSeen = ({ restNm, wavelengthNm }: Identification) => restNm ?? wavelengthNm;

/** km/s of a width in nm at a wavelength. */
export const widthKmPerS = ({ fwhmNm, wavelengthNm }: Identification): number => (fwhmNm / wavelengthNm) * C_KM_PER_S;

/**
 * Lines as tab-separated text with a header that names the units, full precision, for pasting into a sheet.
 * Plain hyphens for minus: the text goes to programs.
 */
export function asTsv(lines: readonly Identification[], display: WavelengthDisplay): string {
  const head = [
    'line',
    `rest wavelength (${display.shortLabel})`,
    'equivalent width (mA)',
    'error (mA)',
    'FWHM (km/s)',
    'velocity (km/s)',
    'error (km/s)',
    'seen in',
    'decided by',
    'source',
  ];
  const cell = (value: string | number | null) => (value === null ? '' : String(value).replace(/[\t\r\n]+/g, ' '));
  const rows = lines.map((line) => [
    line.species ?? 'unidentified',
    line.restNm === null ? null : display.show(line.restNm),
    line.equivalentWidthNm * MILLIANGSTROM_PER_NM,
    line.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM,
    widthKmPerS(line),
    line.velocityKmPerS,
    line.velocitySigmaKmPerS,
    line.spectrumLabel,
    line.decidedBy,
    line.lineSource,
  ]);
  return [head, ...rows].map((row) => row.map(cell).join('\t')).join('\n');
}
