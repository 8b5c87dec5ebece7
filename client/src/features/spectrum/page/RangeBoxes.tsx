import { useId, useState } from 'react';
import { parseNumber } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import type { Range, ViewStore } from '../../../plot/view.js';
import { useSettledView } from '../state/use-settled.js';
import classes from './spectrum.module.css';

interface BoxProps {
  label: string;
  spoken: string;
  shown: string;
  /** false when it is no number */
  onCommit: (text: string) => boolean;
}

/** Keeps what a person types until Enter or leaving; then the window moves, or the text that makes no sense is dropped. */
function Box({ label, spoken, shown, onCommit }: BoxProps) {
  const id = useId();
  const [draft, setDraft] = useState<string | null>(null);
  const commit = () => {
    if (draft !== null && draft !== shown) onCommit(draft);
    setDraft(null);
  };
  return (
    <>
      <label htmlFor={id}>{label}</label>
      <input
        id={id}
        aria-label={spoken}
        inputMode="decimal"
        autoComplete="off"
        value={draft ?? shown}
        onChange={(event) => setDraft(event.currentTarget.value)}
        onFocus={(event) => event.currentTarget.select()}
        onBlur={commit}
        onKeyDown={(event) => {
          if (event.key === 'Enter') commit();
          if (event.key === 'Escape') setDraft(null);
        }}
      />
    </>
  );
}

/** The ends of the window as numbers, in the shown unit: the twin of dragging it. */
export function RangeBoxes({ view, display }: { view: ViewStore; display: WavelengthDisplay }) {
  const { fromNm, toNm } = useSettledView(view, 60);
  const decimals = toNm - fromNm < 0.5 ? 3 : 2;
  /** `put` is given the window as it is, which what is shown may be behind; its length is kept when a typed end lies beyond the other one. */
  const commit = (put: (nm: number, window: Range, length: number) => Range) => (text: string) => {
    const value = parseNumber(text);
    if (value === null || value <= 0) return false;
    const window = view.get();
    view.show(put(display.read(value), window, window.toNm - window.fromNm));
    return true;
  };
  return (
    <div className={classes.box} role="group" aria-label="Window on the spectrum, as numbers">
      <Box
        label="from"
        spoken={`From, ${display.unitLabel}`}
        shown={shownWavelength(fromNm, display, decimals)}
        onCommit={commit((nm, { toNm }, length) => ({ fromNm: nm, toNm: nm < toNm ? toNm : nm + length }))}
      />
      <Box
        label="to"
        spoken={`To, ${display.unitLabel}`}
        shown={shownWavelength(toNm, display, decimals)}
        onCommit={commit((nm, { fromNm }, length) => ({ fromNm: nm > fromNm ? fromNm : nm - length, toNm: nm }))}
      />
      <span>{display.unitLabel}</span>
    </div>
  );
}
