import { Button } from '@mantine/core';
import { compareRuns, settingsDifference, settingsInWords, type Analysis, type AnalysisRun, type RunChanges } from '@foreveil/shared';
import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { ErrorNote } from '../../../components/ErrorNote.js';
import { analysisWords } from '../../../lib/analysis-words.js';
import { counted } from '../../../lib/number.js';
import { analysisQueries } from '../../../lib/queries/spectra.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shortTime } from '../format.js';
import { printerFor } from './words.js';
import classes from './steering.module.css';

interface Props {
  programmeId: string;
  /** newest first */
  runs: readonly AnalysisRun[];
  /** the run on the page */
  shown: { readonly id: string; readonly result: Analysis } | null;
  display: WavelengthDisplay;
  onOpen: (runId: string) => void;
  /** brings a wavelength into view */
  onShow: (nm: number) => void;
}

const MOST = 40;

/** Every run of the spectrum: who, when, what it set against the run before, and how its result differs from the one on the page. */
export function Runs({ programmeId, runs, shown, display, onOpen, onShow }: Props) {
  const [compared, setCompared] = useState<string | null>(null);
  // a run on another reading of the file speaks of other wavelengths
  const revision = runs.find(({ id }) => id === shown?.id)?.readingRevision;
  return (
    <section className={classes.section} aria-label="Runs of this spectrum">
      <h3>{counted(runs.length, 'run')}</h3>
      <ol className={classes.runs}>
        {runs.slice(0, MOST).map((run, i) => (
          <li key={run.id} aria-current={run.id === shown?.id || undefined}>
            <p>
              <b>{shortTime(run.requestedAt)}</b> {run.requestedBy}, {analysisWords(run)}
              {run.id === shown?.id && <em> on the page</em>}
            </p>
            <Difference run={run} before={runs[i + 1]} display={display} />
            {run.readingRevision !== revision && <p className={classes.quiet}>On an earlier reading of the file.</p>}
            {run.phase === 'COMPLETED' && run.id !== shown?.id && run.readingRevision === revision && (
              <div className={classes.line}>
                <Button size="compact-xs" onClick={() => onOpen(run.id)}>
                  Open
                </Button>
                <Button
                  size="compact-xs"
                  aria-expanded={compared === run.id}
                  onClick={() => setCompared(compared === run.id ? null : run.id)}
                >
                  What changed
                </Button>
              </div>
            )}
            {compared === run.id && shown && <Changes {...{ programmeId, run, shown, display, onShow }} />}
          </li>
        ))}
      </ol>
    </section>
  );
}

/** What a run set that the one before it did not. */
function Difference({ run, before, display }: { run: AnalysisRun; before: AnalysisRun | undefined; display: WavelengthDisplay }) {
  const print = printerFor(display);
  const { fresh, gone } = before
    ? settingsDifference(before.settings, run.settings, print)
    : { fresh: settingsInWords(run.settings, print).map((s) => s.sentence), gone: [] };
  const other = before && (before.programVersion !== run.programVersion || before.lineListVersion !== run.lineListVersion);
  if (fresh.length + gone.length === 0)
    return (
      <p className={classes.quiet}>
        {before ? `Settings as before${other ? ', another program or line list' : ''}.` : 'Default settings.'}
      </p>
    );
  return (
    <ul className={classes.words}>
      {fresh.map((sentence) => (
        <li key={sentence}>{sentence}</li>
      ))}
      {gone.map((sentence) => (
        <li key={sentence}>
          <s>{sentence}</s>
        </li>
      ))}
    </ul>
  );
}

interface ChangesProps extends Omit<Props, 'runs' | 'onOpen' | 'shown'> {
  run: AnalysisRun;
  shown: NonNullable<Props['shown']>;
}

/** From the chosen run to the one on the page. */
function Changes({ programmeId, run, shown, display, onShow }: ChangesProps) {
  const other = useQuery(analysisQueries.detail(programmeId, run.id));
  const result = other.data?.result;
  const changes = useMemo(() => result && compareRuns(result, shown.result), [result, shown]);
  if (other.error) return <ErrorNote error={other.error} onRetry={() => void other.refetch()} />;
  if (!changes) return <p role="status">Fetching that run …</p>;
  return <ChangeList changes={changes} display={display} onShow={onShow} />;
}

export function ChangeList({
  changes,
  display,
  onShow,
}: {
  changes: RunChanges;
  display: WavelengthDisplay;
  onShow: (nm: number) => void;
}) {
  const print = printerFor(display);
  const { gained, lost, renamed, same } = changes;
  const list = (items: readonly { nm: number; words: string }[]) => (
    <ul className={classes.words}>
      {items.slice(0, MOST).map(({ nm, words }) => (
        <li key={nm}>
          <button type="button" className={classes.link} onClick={() => onShow(nm)}>
            {print(nm)}
          </button>{' '}
          {words}
        </li>
      ))}
      {items.length > MOST && <li>{items.length - MOST} more</li>}
    </ul>
  );
  return (
    <div className={classes.changes} role="region" aria-label="What changed from that run to the one on the page">
      <p>
        <b>{gained.length}</b> gained, <b>{lost.length}</b> lost, <b>{renamed.length}</b> read otherwise, <b>{same}</b> as they were.
      </p>
      {gained.length > 0 && <h4>Gained</h4>}
      {gained.length > 0 && list(gained.map((f) => ({ nm: f.wavelengthNm, words: f.kind })))}
      {lost.length > 0 && <h4>Lost</h4>}
      {lost.length > 0 && list(lost.map((f) => ({ nm: f.wavelengthNm, words: f.kind })))}
      {renamed.length > 0 && <h4>Read otherwise</h4>}
      {renamed.length > 0 &&
        list(
          renamed.map(({ after, was, is }) => ({ nm: after.wavelengthNm, words: `${was ?? 'unidentified'} → ${is ?? 'unidentified'}` })),
        )}
    </div>
  );
}
