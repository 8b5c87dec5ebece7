import { hasMedium, type Medium, type WavelengthUnit } from '@foreveil/shared';
import { useEffect, useMemo, useRef, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import { useWavelengthDisplay, type WavelengthChoice } from '../../../lib/wavelength.js';
import type { Range } from '../../../plot/view.js';
import type { LineFilter } from '../lines/filters.js';
import { readPageState, writePageState, type PageState } from './url-state.js';

type Settings = Pick<PageState, 'mode' | 'base' | 'filter'>;

export interface PageSettings extends Settings {
  /** as the address had it when the page was opened */
  readonly opened: PageState;
  readonly choice: WavelengthChoice;
  readonly set: (change: Partial<Settings>) => void;
  readonly setFilter: (change: Partial<LineFilter>) => void;
}

/** View settings, taken from the address at first and kept in memory; unit and medium are the person's on every page. */
export function usePageSettings(): PageSettings {
  const choice = useWavelengthDisplay();
  const [query] = useSearchParams();
  const [opened] = useState(() => readPageState(query, choice));
  const [settings, setSettings] = useState<Settings>({ mode: opened.mode, base: opened.base, filter: opened.filter });
  useAdopted(opened.unit, opened.medium, choice);
  return useMemo(
    () => ({
      ...settings,
      opened,
      choice,
      set: (change: Partial<Settings>) => setSettings((old) => ({ ...old, ...change })),
      setFilter: (change: Partial<LineFilter>) => setSettings((old) => ({ ...old, filter: { ...old.filter, ...change } })),
    }),
    [settings, opened, choice],
  );
}

/** A link shows wavelengths as its sender saw them. */
function useAdopted(unit: WavelengthUnit, medium: Medium, choice: WavelengthChoice) {
  const adopted = useRef(false);
  useEffect(() => {
    if (adopted.current) return;
    adopted.current = true;
    if (choice.unit !== unit) choice.setUnit(unit);
    if (choice.medium !== medium && hasMedium(unit)) choice.setMedium(medium);
  }, [unit, medium, choice]);
}

/**
 * Keeps the address in step with the view, so that a reload or a copied link shows the same. The router is passed over on purpose:
 * nothing is loaded and no page changes, and a pan would start sixty navigations a second.
 */
export function useAddress({ mode, base, filter, choice }: PageSettings, range: Range, lineNm: number | null) {
  useEffect(() => {
    const query = writePageState({ mode, base, filter, unit: choice.unit, medium: choice.medium, range, lineNm });
    const address = `${window.location.pathname}?${query}${window.location.hash}`;
    window.history.replaceState(window.history.state, '', address);
  }, [mode, base, filter, choice.unit, choice.medium, range, lineNm]);
}
