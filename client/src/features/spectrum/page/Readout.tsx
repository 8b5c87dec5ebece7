import { dopplerVelocity, type VacuumNm } from '@foreveil/shared';
import { fixed, signed, withError } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import type { CurveData } from '../../../plot/curve-data.js';
import { useCursor, type CursorStore } from '../../../plot/cursor.js';
import { nearestIndex } from '../../../plot/pyramid.js';
import { readingName } from '../evidence/claim-text.js';
import type { LineRow } from '../lines/reading.js';
import classes from './spectrum.module.css';

export interface ReadValues {
  readonly wavelength: string;
  readonly flux: string;
  readonly normalised: string | null;
  readonly velocity: string | null;
  readonly from: string | null;
}

/** What the data cursor reads at a sample; flux in the labels' power of ten. */
export function readAt(data: CurveData, sample: number, display: WavelengthDisplay, row: LineRow | null): ReadValues {
  const nm = data.wavelength[sample]!;
  const scale = 10 ** data.fluxExponent;
  const rest = row?.reading.restNm ?? null;
  return {
    wavelength: `${shownWavelength(nm, display, 4)} ${display.unitLabel}`,
    flux: data.bad[sample] ? 'masked' : withError(data.flux.values[sample]! / scale, data.sigma ? data.sigma[sample]! / scale : null),
    normalised: data.fitted && !data.bad[sample] ? fixed(data.fitted.normalised.values[sample]!, 3) : null,
    velocity: rest === null ? null : `${signed(dopplerVelocity(nm as VacuumNm, rest as VacuumNm), 1)} km/s`,
    from: rest === null || !row ? null : readingName(row.reading, display),
  };
}

interface Props {
  data: CurveData;
  cursor: CursorStore;
  display: WavelengthDisplay;
  selected: LineRow | null;
}

/** Numbers at the data cursor, or at the selected line while nothing is pointed at. */
export function Readout({ data, cursor, display, selected }: Props) {
  const { sample } = useCursor(cursor);
  const at = sample ?? (selected ? nearestIndex(data.wavelength, selected.feature.wavelengthNm) : null);
  if (at === null || at < 0) return <div className={classes.readout} />;
  const { wavelength, flux, normalised, velocity, from } = readAt(data, at, display, selected);
  return (
    <div className={classes.readout}>
      <span>
        <b>{wavelength}</b>
      </span>
      <span>
        flux <b>{flux}</b>
      </span>
      {normalised && (
        <span>
          normalised <b>{normalised}</b>
        </span>
      )}
      {velocity && (
        <span>
          v <b>{velocity}</b> from {from}
        </span>
      )}
    </div>
  );
}
