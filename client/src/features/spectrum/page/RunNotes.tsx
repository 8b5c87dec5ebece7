import type { AnalysisSummary, MemberRole } from '@foreveil/shared';
import { Button } from '@mantine/core';
import { RoleButton } from '../../../components/RoleButton.js';
import { analysisWords, isAtWork } from '../../../lib/analysis-words.js';
import { percent } from '../../../lib/number.js';
import { ago } from '../../../lib/time.js';
import classes from './spectrum.module.css';

interface Props {
  latest: AnalysisSummary | null;
  /** whether an earlier run's results are on the page */
  hasResults: boolean;
  role: MemberRole | null;
  busy: boolean;
  now: number;
  onCancel: () => void;
  onRun: () => void;
}

const capitalised = (words: string) => words.charAt(0).toUpperCase() + words.slice(1);

/** What the newest run is doing, or why it gave nothing; silent when it ended well. */
export function RunNotes({ latest, hasResults, role, busy, now, onCancel, onRun }: Props) {
  const again = role && (
    <RoleButton have={role} need="analyst" onClick={onRun} loading={busy}>
      {latest ? 'Run again' : 'Run the analysis'}
    </RoleButton>
  );
  const kept = hasResults ? ' The results of the run before stay on the page.' : '';
  if (!latest)
    return (
      <div className={classes.note}>
        <b>Not analysed yet.</b> Curve and strip are drawn from the samples; continuum and lines come with an analysis.
        <span className={classes.push}>{again}</span>
      </div>
    );
  if (isAtWork(latest)) {
    return (
      <div className={classes.note}>
        <b>{capitalised(analysisWords(latest))}</b>
        <div
          className={classes.progress}
          role="progressbar"
          aria-label="Analysis"
          aria-valuemin={0}
          aria-valuemax={100}
          aria-valuenow={Math.round(latest.progress * 100)}
        >
          <span style={{ width: percent(latest.progress).replace(' ', '') }} />
        </div>
        <span>
          Asked for {ago(latest.requestedAt, now)} by {latest.requestedBy}.{kept} You may leave the page.
        </span>
        <span className={classes.push}>
          {role && (
            <RoleButton have={role} need="analyst" onClick={onCancel} loading={busy}>
              Cancel
            </RoleButton>
          )}
        </span>
      </div>
    );
  }
  if (latest.phase === 'COMPLETED') return null;
  return (
    <div className={classes.note} role="alert">
      <b>{latest.phase === 'ABORTED' ? 'The analysis was cancelled.' : 'The analysis failed.'}</b>
      <span>
        {latest.error ?? ''}
        {kept}
      </span>
      <span className={classes.push}>{again}</span>
    </div>
  );
}

/** Complete sentences that must be read before the numbers are trusted; the first one is always in sight. */
export function Cautions({ cautions }: { cautions: readonly string[] }) {
  const [first] = cautions;
  if (!first) return null;
  const more = cautions.length - 1;
  return (
    <details className={classes.cautions}>
      <summary>
        <b>{cautions.length === 1 ? 'Caution' : `${cautions.length} cautions`}</b>
        <span>{first}</span>
        <em>{more > 0 ? `${more} more` : 'all of it'}</em>
      </summary>
      <ul>
        {cautions.map((caution) => (
          <li key={caution}>{caution}</li>
        ))}
      </ul>
    </details>
  );
}

/** Shown where a chart has nothing to draw. */
export function EmptyCurve({ why, onRetry }: { why: string; onRetry?: () => void }) {
  return (
    <div className={classes.state}>
      <h2>Nothing to draw</h2>
      <p>{why}</p>
      {onRetry && <Button onClick={onRetry}>Try again</Button>}
    </div>
  );
}
