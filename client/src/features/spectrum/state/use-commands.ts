import { useCallback, type KeyboardEvent } from 'react';
import type { CurveData } from '../../../plot/curve-data.js';
import type { CursorStore } from '../../../plot/cursor.js';
import type { Stave } from '../../../plot/plot-feature.js';
import { nearestIndex } from '../../../plot/pyramid.js';
import type { ViewStore } from '../../../plot/view.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { claimTitle } from '../evidence/claim-text.js';
import { choices, type LineRow } from '../lines/reading.js';
import type { RegionStore } from '../region/region-store.js';
import { commandFor, type Command } from './keys.js';
import { spokenCursor, spokenRange, spokenRow } from './spoken.js';
import type { Acting } from './use-acting.js';
import { rowAt, type Selection } from './use-selection.js';

interface Needs {
  data: CurveData;
  view: ViewStore;
  cursor: CursorStore;
  selection: Selection;
  acting: Acting;
  /** shown rows, ascending in wavelength */
  rows: readonly LineRow[];
  staves: readonly Stave[];
  display: WavelengthDisplay;
  remarkId: string;
  region: RegionStore;
  onSteer: () => void;
  say: (sentence: string) => void;
}

/** The nearest line on the staff above or below that has one. */
export function onNextStaff(rows: readonly LineRow[], staves: readonly Stave[], from: LineRow | null, direction: 1 | -1): LineRow | null {
  const at = staves.findIndex((s) => s.id === from?.staveId);
  for (let i = at < 0 ? (direction > 0 ? 0 : staves.length - 1) : at + direction; i >= 0 && i < staves.length; i += direction) {
    const kin = rows.filter((r) => r.staveId === staves[i]!.id);
    const near = from ? rowAt(kin, from.feature.wavelengthNm, () => Infinity) : kin[0];
    if (near) return near;
  }
  return null;
}

/** Carries out the keys of curve and table. */
export function useCommands(needs: Needs): (event: KeyboardEvent) => void {
  const { data, view, cursor, selection, acting, rows, staves, display, remarkId, region, onSteer, say } = needs;

  const goTo = useCallback(
    (row: LineRow | null | undefined) => {
      if (!row) return;
      selection.select(row.feature.index);
      say(spokenRow(row, rows, display));
    },
    [selection, say, rows, display],
  );

  const moveCursor = useCallback(
    (pixels: number) => {
      const { fromNm, toNm } = view.get();
      const start = cursor.get().sample ?? nearestIndex(data.wavelength, selection.selected?.feature.wavelengthNm ?? (fromNm + toNm) / 2);
      const sample = Math.max(0, Math.min(data.wavelength.length - 1, start + pixels));
      cursor.set(sample, 'keys');
      view.reveal(data.wavelength[sample]!);
      say(spokenCursor(data, sample, rows, display));
    },
    [view, cursor, data, selection.selected, rows, display, say],
  );

  const run = useCallback(
    (command: Command, target: HTMLElement) => {
      const { selected } = selection;
      switch (command.do) {
        case 'cursor':
          return moveCursor(command.pixels);
        case 'feature': {
          const at = rows.findIndex((r) => r.feature.index === selected?.feature.index);
          return goTo(rows[at < 0 ? 0 : at + command.direction]);
        }
        case 'staff':
          return goTo(onNextStaff(rows, staves, selected, command.direction));
        case 'undecided':
          return acting.goOn(command.direction);
        case 'choose': {
          const offered = selected ? choices(selected.feature) : [];
          const reading = command.candidate === 'unidentified' ? offered.at(-1) : offered.slice(0, -1)[command.candidate - 1];
          if (!reading) return;
          selection.choose(reading);
          return say(claimTitle(reading, null, display));
        }
        case 'act':
          return acting.act(command.action);
        case 'remark':
          return document.getElementById(remarkId)?.focus();
        case 'zoom': {
          const { sample } = cursor.get();
          const around = sample === null ? selected?.feature.wavelengthNm : data.wavelength[sample];
          return view.show(view.zoomed(command.factor, around));
        }
        case 'whole':
          return view.show(view.whole);
        case 'history':
          return command.direction < 0 ? view.back() : view.forward();
        case 'open': {
          const { sample } = cursor.get();
          if (sample === null) return;
          return goTo(rowAt(rows, data.wavelength[sample]!, (r) => r.feature.fwhmNm));
        }
        case 'edge': {
          const { sample } = cursor.get();
          if (sample === null) return say('Move the cursor with the arrow keys first.');
          region.edge(command.which, data.wavelength[sample]!);
          const marked = region.get().region;
          return say(marked ? `Marked ${spokenRange(marked, display)}` : 'One end is marked; mark the other one.');
        }
        case 'steer':
          return onSteer();
        case 'leave':
          cursor.set(null, 'keys');
          return target.blur();
      }
    },
    [selection, moveCursor, rows, goTo, staves, acting, remarkId, region, onSteer, cursor, data, view, say, display],
  );

  return useCallback(
    (event: KeyboardEvent) => {
      const { target, currentTarget } = event;
      // a button inside keeps Enter and Space to itself
      if (target !== currentTarget && target instanceof HTMLElement && /^(INPUT|SELECT|TEXTAREA|BUTTON)$/.test(target.tagName)) return;
      const command = commandFor(event);
      if (!command || !(currentTarget instanceof HTMLElement)) return;
      event.preventDefault();
      event.stopPropagation();
      run(command, currentTarget);
    },
    [run],
  );
}
