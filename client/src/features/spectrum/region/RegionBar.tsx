import { Button } from '@mantine/core';
import type { AnalysisSettings } from '@foreveil/shared';
import { useMemo, useState } from 'react';
import { fixed, MILLIANGSTROM_PER_NM, withError } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { decimalsFor, shownPerNm, shownWavelength } from '../../../plot/axis-ticks.js';
import type { CurveData } from '../../../plot/curve-data.js';
import type { Range } from '../../../plot/view.js';
import type { LineRow } from '../lines/reading.js';
import { NumberBox } from '../steering/NumberBox.js';
import type { Steering } from '../steering/use-steering.js';
import { measureRegion, type RegionNumbers } from './measure-region.js';
import { useRegion, type RegionStore } from './region-store.js';
import classes from './region.module.css';

interface Props {
  store: RegionStore;
  data: CurveData;
  display: WavelengthDisplay;
  selected: LineRow | null;
  steering: Steering;
}

/** Under the tools while a stretch is marked or the analysis is steered: what the stretch holds, and what the next run is to make of it. */
export function RegionBar({ store, data, display, selected, steering }: Props) {
  const { region, start } = useRegion(store);
  if (!region && start === null && !steering.isOpen) return null;
  return (
    <div className={classes.bar} role="region" aria-label="Marked region">
      {region ? (
        <Marked {...{ store, region, data, display, steering }} />
      ) : start !== null ? (
        <span>
          From <b>{shownWavelength(start, display, 4)}</b> {display.unitLabel}: move the cursor and press e, or s to begin anew.
        </span>
      ) : (
        <span className={classes.quiet}>Mark a stretch to mask it, move its continuum or add a feature: “Mark” and drag, or s and e.</span>
      )}
      {steering.isOpen && <ChosenLine selected={selected} steering={steering} display={display} />}
    </div>
  );
}

function Marked({ store, region, data, display, steering }: Omit<Props, 'selected'> & { region: Range }) {
  const numbers = useMemo(() => measureRegion(data, region), [data, region]);
  const [a, b] = [display.show(region.fromNm), display.show(region.toNm)];
  const print = (shown: number) => fixed(shown, decimalsFor(region.fromNm, display, 4)).replace(/\u202f/g, '');
  const put = (from: number, to: number) => store.mark(display.read(from), display.read(to));
  return (
    <>
      <NumberBox label="from" unit="" value={a} print={print} onCommit={(v) => v !== null && v > 0 && put(v, b)} />
      <NumberBox label="to" unit={display.unitLabel} value={b} print={print} onCommit={(v) => v !== null && v > 0 && put(a, v)} />
      <Numbers numbers={numbers} region={region} display={display} />
      <RegionActs region={region} steering={steering} numbers={numbers} />
      <Button size="compact-xs" onClick={() => store.clear()}>
        Clear
      </Button>
    </>
  );
}

/** What the stretch holds, each with its unit; a dash where the data do not tell. */
function Numbers({ numbers, region, display }: { numbers: RegionNumbers | null; region: Range; display: WavelengthDisplay }) {
  if (!numbers) return <span className={classes.quiet}>Nothing to measure: no good sample, or no continuum yet.</span>;
  const { equivalentWidthNm, equivalentWidthSigmaNm, centreNm, fwhmNm, snr, masked } = numbers;
  const middle = (region.fromNm + region.toNm) / 2;
  const inUnit = (nm: number) => `${fixed(nm * shownPerNm(middle, display), decimalsFor(middle, display, 4))} ${display.unitLabel}`;
  const width = withError(
    equivalentWidthNm * MILLIANGSTROM_PER_NM,
    equivalentWidthSigmaNm === null ? null : equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM,
  );
  const facts: [string, string][] = [
    ['W', `${width} mÅ`],
    ['centre', centreNm === null ? '—' : `${shownWavelength(centreNm, display, 4)} ${display.unitLabel}`],
    ['FWHM', fwhmNm === null ? '—' : inUnit(fwhmNm)],
    ['S/N', snr === null ? '—' : `${fixed(snr, 0)} a sample`],
    ['Δλ', inUnit(numbers.lengthNm)],
    ['Δv', `${fixed(numbers.lengthKmPerS, 1)} km/s`],
  ];
  return (
    <span className={classes.numbers} role="status">
      {facts.map(([name, value]) => (
        <span key={name}>
          {name} <b>{value}</b>
        </span>
      ))}
      {masked > 0 && <span>{masked} samples masked</span>}
    </span>
  );
}

/** Each changes the settings of the next run only, and opens the panel where that can be seen. */
function RegionActs({ region, steering, numbers }: { region: Range; steering: Steering; numbers: RegionNumbers | null }) {
  const [percent, setPercent] = useState<number | null>(null);
  const add = (act: () => void) => () => {
    act();
    steering.open(true);
  };
  const middle = numbers?.centreNm ?? (region.fromNm + region.toNm) / 2;
  const place = (kind: AnalysisSettings['addedFeatures'][number]['kind']) =>
    add(() =>
      steering.add('addedFeatures', { kind, wavelengthNm: rounded(middle), fwhmNm: numbers?.fwhmNm ? rounded(numbers.fwhmNm) : null }),
    );
  const ends = { fromNm: rounded(region.fromNm), toNm: rounded(region.toNm) };
  return (
    <>
      <Button size="compact-xs" onClick={add(() => steering.add('maskedRegions', ends))}>
        Mask this
      </Button>
      <span className={classes.pair}>
        <NumberBox label="Move the continuum by" unit="%" value={percent} empty="+2" onCommit={setPercent} />
        <Button
          size="compact-xs"
          disabled={percent === null || percent === 0}
          onClick={add(() => percent !== null && steering.add('continuumMoves', { ...ends, factor: rounded(1 + percent / 100) }))}
        >
          Move
        </Button>
      </span>
      <Button size="compact-xs" onClick={place('dip')}>
        Add a dip
      </Button>
      <Button size="compact-xs" onClick={place('peak')}>
        Add a peak
      </Button>
    </>
  );
}

/** A ten-thousandth of an nm is a tenth of a milliangstrom: finer than anybody points. */
const rounded = (x: number): number => Number(x.toFixed(5));

function ChosenLine({ selected, steering, display }: Pick<Props, 'selected' | 'steering' | 'display'>) {
  if (!selected) return null;
  const { kind, wavelengthNm } = selected.feature;
  const place = { kind, wavelengthNm: rounded(wavelengthNm) };
  const isNamed = (places: readonly { wavelengthNm: number; kind: string }[]) =>
    places.some((p) => p.kind === kind && Math.abs(p.wavelengthNm - wavelengthNm) <= selected.feature.fwhmNm / 2);
  const { splitFeatures, removedFeatures } = steering.draft;
  const done = isNamed(splitFeatures) || isNamed(removedFeatures);
  return (
    <span className={classes.pair}>
      <span>
        Chosen {kind} at <b>{shownWavelength(wavelengthNm, display, 3)}</b> {display.unitLabel}
      </span>
      <Button size="compact-xs" disabled={done} onClick={() => steering.add('splitFeatures', place)}>
        Split in two
      </Button>
      <Button size="compact-xs" disabled={done} onClick={() => steering.add('removedFeatures', place)}>
        Take out
      </Button>
    </span>
  );
}
