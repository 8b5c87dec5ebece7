import { ROLE_FOR, type ReviewAction } from '@foreveil/shared';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { counted } from '../../../lib/number.js';
import { STATE_WORD } from '../../../plot/marks.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import type { CurveData } from '../../../plot/curve-data.js';
import type { Range } from '../../../plot/view.js';
import { claimTitle, readingName } from '../evidence/claim-text.js';
import type { LineRow, Reading } from '../lines/reading.js';
import { readAt } from '../page/Readout.js';

export const DID: Record<ReviewAction, string> = {
  accept: 'Accepted',
  reject: 'Rejected',
  propose: 'Proposed',
  reopen: 'Back to proposed',
};
export const roleFor = (action: ReviewAction) => ROLE_FOR[action];

/** 'Accepted Na I 589.1583. Next: line 15 of 61, …' */
export const spokenAct = (action: ReviewAction, reading: Reading, display: WavelengthDisplay) =>
  `${DID[action]} ${readingName(reading, display)}.`;

export function spokenRow(row: LineRow, rows: readonly LineRow[], display: WavelengthDisplay): string {
  const place = rows.findIndex((r) => r.feature.index === row.feature.index) + 1;
  const where = place > 0 ? `Line ${place} of ${rows.length}, ` : '';
  return `${where}${shownWavelength(row.feature.wavelengthNm, display, 3)} ${display.unitLabel}: ${claimTitle(row.reading, null, display)}, ${STATE_WORD[row.state]}.`;
}

/** The data cursor in words: wavelength, flux, and the line it stands on. */
export function spokenCursor(data: CurveData, sample: number, rows: readonly LineRow[], display: WavelengthDisplay): string {
  const { wavelength, flux } = readAt(data, sample, display, null);
  const nm = data.wavelength[sample]!;
  const on = rows.findIndex(({ feature }) => Math.abs(feature.wavelengthNm - nm) <= feature.fwhmNm / 2);
  const line =
    on < 0 ? '' : `, line ${on + 1} of ${rows.length}, ${readingName(rows[on]!.reading, display)}, ${STATE_WORD[rows[on]!.state]}`;
  return `${wavelength}, flux ${flux.replace('±', 'plus or minus')}${line}`;
}

/** 'from 589.120 to 589.180 nm' */
export const spokenRange = ({ fromNm, toNm }: Range, display: WavelengthDisplay): string =>
  `from ${shownWavelength(fromNm, display, 3)} to ${shownWavelength(toNm, display, 3)} ${display.unitLabel}`;

/** One sentence in the place of the picture. */
export function summary(what: string, range: Range, rows: readonly LineRow[], display: WavelengthDisplay): string {
  const inView = rows.filter(({ feature }) => feature.wavelengthNm >= range.fromNm && feature.wavelengthNm <= range.toNm);
  const open = inView.filter((r) => r.state === 'proposed').length;
  const ends = `${shownWavelength(range.fromNm, display, 2)} and ${shownWavelength(range.toNm, display, 2)} ${display.unitLabel}`;
  return `${what} between ${ends}; ${counted(inView.length, 'line')}, ${open} to be decided. The same numbers stand in the table of lines.`;
}
