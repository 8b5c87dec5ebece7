import { useCallback, useMemo, useState } from 'react';
import type { ViewStore } from '../../../plot/view.js';
import type { LineRow, Reading } from '../lines/reading.js';
import { nextUndecided } from '../lines/filters.js';
import { mostTelling } from './first-view.js';

export interface Selection {
  readonly selected: LineRow | null;
  /** the reading under consideration */
  readonly chosen: Reading | null;
  readonly hovered: number | null;
  readonly select: (index: number) => void;
  readonly choose: (reading: Reading) => void;
  readonly hover: (index: number | null) => void;
}

/** The row nearest to a wavelength, when it lies within the line. */
export function rowAt(rows: readonly LineRow[], nm: number, withinNm: (row: LineRow) => number): LineRow | null {
  const best = rows.reduce<LineRow | null>(
    (near, row) => (near === null || Math.abs(row.feature.wavelengthNm - nm) < Math.abs(near.feature.wavelengthNm - nm) ? row : near),
    null,
  );
  return best && Math.abs(best.feature.wavelengthNm - nm) <= withinNm(best) ? best : null;
}

/** Wavelength of the line that opens with the page: that of the address, else the first undecided one in view, else the most telling. */
function atFirst(rows: readonly LineRow[], lineNm: number | null, view: ViewStore): number | null {
  const asked = lineNm === null ? null : rowAt(rows, lineNm, (r) => Math.max(0.01, r.feature.fwhmNm));
  if (asked) return asked.feature.wavelengthNm;
  const { fromNm, toNm } = view.get();
  const inView = rows.filter(({ feature }) => feature.wavelengthNm >= fromNm && feature.wavelengthNm <= toNm);
  const undecided = inView.filter((r) => r.state === 'proposed');
  const row = mostTelling(undecided) ?? mostTelling(inView) ?? nextUndecided(rows, null) ?? rows[0];
  return row?.feature.wavelengthNm ?? null;
}

/** One chosen line, shared by staves, curve, table and evidence. */
export function useSelection(rows: readonly LineRow[], view: ViewStore, lineNm: number | null): Selection {
  // by wavelength, not by index: a new analysis numbers its features anew
  const [nm, setNm] = useState<number | null>(null);
  const [choice, setChoice] = useState<{ index: number; reading: Reading } | null>(null);
  const [hovered, hover] = useState<number | null>(null);
  if (nm === null && rows.length > 0) setNm(atFirst(rows, lineNm, view)); // the first rows may come later than the page
  const selected = useMemo(() => (nm === null ? null : rowAt(rows, nm, (r) => r.feature.fwhmNm)), [rows, nm]);
  const index = selected?.feature.index ?? null;
  const select = useCallback(
    (next: number) => {
      const row = rows.find((r) => r.feature.index === next);
      if (!row) return;
      setNm(row.feature.wavelengthNm);
      setChoice(null);
      view.reveal(row.feature.wavelengthNm);
    },
    [rows, view],
  );
  const choose = useCallback((reading: Reading) => index !== null && setChoice({ index, reading }), [index]);
  const chosen = selected && (choice?.index === index ? choice.reading : selected.reading);
  return { selected, chosen, hovered, select, choose, hover };
}
