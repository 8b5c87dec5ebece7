import {
  changedSettings,
  completeSettings,
  DEFAULT_SETTINGS,
  sameSetting,
  settingsProblems,
  type AnalysisDetail,
  type AnalysisSettings,
  type SettingsProblem,
} from '@foreveil/shared';
import { useCallback, useMemo, useState } from 'react';

type ListKey = { [K in keyof AnalysisSettings]: AnalysisSettings[K] extends readonly unknown[] ? K : never }[keyof AnalysisSettings];
type Entry<K extends ListKey> = AnalysisSettings[K] extends readonly (infer T)[] ? T : never;

export interface Steering {
  readonly isOpen: boolean;
  readonly open: (isOpen: boolean) => void;
  /** settings of the run on the page; the defaults when there is none */
  readonly run: AnalysisSettings;
  /** what the next run is to use */
  readonly draft: AnalysisSettings;
  /** line list chosen for the next run; null: as the run on the page */
  readonly lineListId: string | null;
  readonly chooseList: (id: string | null) => void;
  readonly isChanged: boolean;
  readonly problems: readonly SettingsProblem[];
  readonly set: (change: Partial<AnalysisSettings>) => void;
  readonly add: <K extends ListKey>(key: K, entry: Entry<K>) => void;
  /** takes one value back: an entry of a list, or the whole setting to its default */
  readonly takeBack: (key: keyof AnalysisSettings, index: number | null) => void;
  readonly undo: () => void;
  readonly canUndo: boolean;
  /** to the defaults */
  readonly reset: () => void;
  /** to what the run on the page used */
  readonly revert: () => void;
}

const MOST_STEPS = 100;

/** The settings for the next run, edited step by step over those of the run on the page; nothing happens until they are run. */
export function useSteering(analysis: AnalysisDetail | null | undefined): Steering {
  const run = useMemo(() => (analysis ? completeSettings(analysis.settings) : DEFAULT_SETTINGS), [analysis]);
  const [isOpen, open] = useState(false);
  const [lineListId, chooseList] = useState<string | null>(null);
  const [steps, setSteps] = useState<readonly AnalysisSettings[]>([]);
  const draft = steps.at(-1) ?? run;
  const push = useCallback(
    (make: (from: AnalysisSettings) => AnalysisSettings) =>
      setSteps((old) => {
        const from = old.at(-1) ?? run;
        const next = make(from);
        return sameSetting(from, next) ? old : [...(old.length ? old : [run]), next].slice(-MOST_STEPS);
      }),
    [run],
  );
  const set = useCallback((change: Partial<AnalysisSettings>) => push((from) => ({ ...from, ...change })), [push]);
  const add = useCallback(
    <K extends ListKey>(key: K, entry: Entry<K>) => push((from) => ({ ...from, [key]: [...(from[key] as readonly unknown[]), entry] })),
    [push],
  );
  const takeBack = useCallback(
    (key: keyof AnalysisSettings, index: number | null) =>
      push((from) => {
        const value = from[key];
        const rest = index !== null && Array.isArray(value) ? value.filter((_, i) => i !== index) : DEFAULT_SETTINGS[key];
        return { ...from, [key]: rest };
      }),
    [push],
  );
  const problems = useMemo(() => settingsProblems(draft), [draft]);
  return {
    isOpen,
    open,
    run,
    draft,
    lineListId,
    chooseList,
    isChanged: lineListId !== null || changedSettings(draft, run).length > 0,
    problems,
    set,
    add,
    takeBack,
    undo: useCallback(() => setSteps((old) => (old.length > 2 ? old.slice(0, -1) : [])), []),
    canUndo: steps.length > 1,
    reset: useCallback(() => push(() => DEFAULT_SETTINGS), [push]),
    revert: useCallback(() => {
      setSteps([]);
      chooseList(null);
    }, []),
  };
}
