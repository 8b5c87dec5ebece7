import { Select, TextInput } from '@mantine/core';
import type { SpectrumSummary, TargetSummary } from '@foreveil/shared';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import { PlacedStrip } from '../../components/PlacedStrip.js';
import { SpectralAxis } from '../../components/SpectralAxis.js';
import { foldAxis, lanes, type AxisPiece } from '../../components/spectral-axis.js';
import { Tally, TallyKey } from '../../components/Tally.js';
import { analysisWords, isAtWork } from '../../lib/analysis-words.js';
import { KIND_WORD, KINDS } from '../../lib/kinds.js';
import { count, counted, NO_NUMBER } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { ago } from '../../lib/time.js';
import { useNow } from '../../lib/useNow.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import classes from './programmes.module.css';
import { arrange, ORDERS, useTargetView, type Order } from './target-view.js';

interface Props {
  programmeId: string;
  targets: readonly TargetSummary[];
}

/** All targets with their light on one wavelength axis, so that coverage compares by eye. */
export function TargetTable({ programmeId, targets }: Props) {
  const { view, change } = useTargetView();
  const display = useWavelengthDisplay();
  // over all targets, so that the axis stays while one filters
  const axis = useMemo(() => foldAxis(targets.flatMap(({ spectra }) => spectra)), [targets]);
  const shown = useMemo(() => arrange(targets, view), [targets, view]);
  const now = useNow();
  return (
    <section className={classes.tableFrame} aria-label="Targets">
      <div className={classes.tools}>
        <TextInput
          aria-label="Show targets whose name holds"
          placeholder="Name"
          value={view.text}
          onChange={(event) => change({ text: event.currentTarget.value })}
        />
        <Select
          aria-label="Kind of target"
          w={132}
          data={[{ value: '', label: 'All kinds' }, ...KINDS.map((kind) => ({ value: kind, label: KIND_WORD[kind] }))]}
          value={view.kind}
          onChange={(kind) => change({ kind: kind ?? '' })}
        />
        <Select
          aria-label="Order of the targets"
          w={200}
          ml="auto"
          data={Object.entries(ORDERS).map(([value, label]) => ({ value, label }))}
          value={view.order}
          onChange={(order) => change({ order: order as Order })}
        />
      </div>
      <table className={classes.table} data-strips>
        <caption className={classes.unseen}>Targets with their spectra and how far their reviews are</caption>
        <thead>
          <tr>
            <th scope="col" className={classes.colName}>
              Target
            </th>
            <th scope="col" className={classes.colAxis}>
              <span className={classes.unseen}>Light, wavelengths in {display.shortLabel}</span>
              <div aria-hidden="true" title={display.shortLabel}>
                <SpectralAxis axis={axis} display={display} />
              </div>
            </th>
            {['Spectra', 'Accepted', 'Rejected', 'Open'].map((name) => (
              <th key={name} scope="col" className={classes.num}>
                {name}
              </th>
            ))}
            <th scope="col">Review</th>
            <th scope="col">Analysis</th>
            <th scope="col" className={classes.num}>
              Last spectrum
            </th>
          </tr>
        </thead>
        <tbody>
          {shown.map((target) => (
            <TargetRow key={target.id} programmeId={programmeId} target={target} axis={axis} now={now} />
          ))}
        </tbody>
      </table>
      {!shown.length && <p className={classes.nothing}>No target matches. Clear the name or choose all kinds.</p>}
      <p className={classes.tableFoot} role="status">
        {shown.length === targets.length
          ? counted(targets.length, 'target')
          : `${count(shown.length)} of ${counted(targets.length, 'target')}`}{' '}
        <TallyKey />
      </p>
    </section>
  );
}

interface RowProps {
  programmeId: string;
  target: TargetSummary;
  axis: readonly AxisPiece[];
  now: number;
}

const orDash = (n: number) => (n ? count(n) : NO_NUMBER);

function TargetRow({ programmeId, target, axis, now }: RowProps) {
  const { id, name, kind, spectra, accepted, rejected, open } = target;
  const newest = spectra
    .map(({ createdAt }) => createdAt)
    .sort()
    .at(-1);
  return (
    <tr>
      <th scope="row">
        <Link to={pagePaths.target(programmeId, id)} className={classes.rowLink}>
          {name}
        </Link>
        <span className={classes.under}>{KIND_WORD[kind]}</span>
      </th>
      <td data-light>
        <TargetLight spectra={spectra} axis={axis} />
      </td>
      <td data-label="Spectra" className={classes.num}>
        {orDash(spectra.length)}
      </td>
      <td data-label="Accepted" className={classes.num}>
        {orDash(accepted)}
      </td>
      <td data-label="Rejected" className={classes.num}>
        {orDash(rejected)}
      </td>
      <td data-label="Open" className={classes.num}>
        {open ? <b>{count(open)}</b> : NO_NUMBER}
      </td>
      <td data-label="Review">
        <Tally accepted={accepted} rejected={rejected} open={open} />
      </td>
      <td data-label="Analysis" className={classes.quiet}>
        {workWords(spectra)}
      </td>
      <td data-label="Last spectrum" className={`${classes.num} ${classes.quiet}`}>
        {newest ? ago(newest, now) : NO_NUMBER}
      </td>
    </tr>
  );
}

/** What the machine says of a target: who is at work, who failed, else that all is done. */
function workWords(spectra: readonly SpectrumSummary[]): string {
  const running = spectra.find(({ analysis }) => isAtWork(analysis));
  if (running) return analysisWords(running.analysis);
  const failed = spectra.filter(({ analysis }) => analysis?.phase === 'ERROR').length;
  if (failed) return `${counted(failed, 'analysis', 'analyses')} failed`;
  return spectra.length ? 'done' : NO_NUMBER;
}

const LIGHT_HEIGHT = 22;
const MOST_LANES = 3;

/** Strips of a target at their places; spectra of the same stretch share the height. */
function TargetLight({ spectra, axis }: { spectra: readonly SpectrumSummary[]; axis: readonly AxisPiece[] }) {
  const stacked = useMemo(() => lanes(spectra, MOST_LANES), [spectra]);
  const height = stacked.length > 1 ? Math.floor((LIGHT_HEIGHT + 8) / stacked.length) - 1 : LIGHT_HEIGHT - 2;
  return (
    <div className={classes.light} style={{ height: stacked.length > 1 ? LIGHT_HEIGHT + 8 : LIGHT_HEIGHT }}>
      {stacked.map((lane, i) =>
        lane.map((spectrum) => <PlacedStrip key={spectrum.id} spectrum={spectrum} axis={axis} height={height} top={i * (height + 1)} />),
      )}
    </div>
  );
}
