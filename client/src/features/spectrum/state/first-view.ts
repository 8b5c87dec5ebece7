import type { CurveData } from '../../../plot/curve-data.js';
import { nearestIndex } from '../../../plot/pyramid.js';
import type { Range } from '../../../plot/view.js';
import type { LineRow } from '../lines/reading.js';

/** CSS pixels a sample gets in the first window, at least: single samples show. */
const PX_PER_SAMPLE = 1.7;
/** The window holds at least this many FWHM of the line it is about. */
const LEAST_FWHM = 12;

/** What one most likely came to see: gas in front of the star, else a nebula, else the clearest line. */
export function mostTelling(rows: readonly LineRow[]): LineRow | null {
  const rank = ({ feature, reading }: LineRow) =>
    feature.significance * (reading.family === 'interstellar' ? 1e6 : reading.family === 'nebular' ? 1e3 : 1);
  return rows.reduce<LineRow | null>((best, row) => (best === null || rank(row) > rank(best) ? row : best), null);
}

/**
 * The stretch a page opens with when its address does not say: around the most telling line; everything where there is none.
 * @param widthPx of the plot, CSS px
 */
export function firstView(data: CurveData, rows: readonly LineRow[], whole: Range, widthPx: number): Range {
  const row = mostTelling(rows);
  if (!row) return whole;
  const { wavelengthNm: nm, fwhmNm } = row.feature;
  const at = nearestIndex(data.wavelength, nm);
  const last = data.wavelength.length - 1;
  const reach = Math.max(20, Math.round(widthPx / PX_PER_SAMPLE / 2));
  const samples = data.wavelength[Math.min(last, at + reach)]! - data.wavelength[Math.max(0, at - reach)]!;
  const half = Math.max(samples, LEAST_FWHM * fwhmNm) / 2;
  return { fromNm: Math.max(whole.fromNm, nm - half), toNm: Math.min(whole.toNm, nm + half) };
}
