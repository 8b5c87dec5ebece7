import { RingProgress } from '@mantine/core';
import { roleAllows, type MemberRole, type TargetSummary } from '@foreveil/shared';
import { IconAlertTriangle, IconCircleDashed, IconFilePlus } from '@tabler/icons-react';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import { analysisWords } from '../../lib/analysis-words.js';
import { count, counted } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import classes from './programmes.module.css';
import { waitsForMachine, waitsForPeople, type Waiting } from './waiting.js';

const MOST = 5;

interface Props {
  programmeId: string;
  role: MemberRole;
  targets: readonly TargetSummary[];
}

/** Who waits for whom, as sentences: the first thing one wants to know of a programme. */
export function Waits({ programmeId, role, targets }: Props) {
  const people = waitsForPeople(targets, role);
  const machine = waitsForMachine(targets);
  return (
    <div className={classes.waits}>
      <section>
        <h2>{roleAllows(role, 'reviewer') ? 'Waiting for you' : 'Waiting for people'}</h2>
        <WaitList programmeId={programmeId} role={role} waits={people} none={nothingWaits(role, targets)} />
      </section>
      <section>
        <h2>At work</h2>
        {/* said when one starts or ends; the percentages would never stop talking */}
        <p role="status" className={classes.unseen}>
          {counted(machine.length, 'analysis', 'analyses')} at work
        </p>
        <WaitList programmeId={programmeId} role={role} waits={machine} none="No analysis is running." />
      </section>
    </div>
  );
}

function nothingWaits(role: MemberRole, targets: readonly TargetSummary[]): string {
  if (roleAllows(role, 'analyst')) return targets.length ? 'Nothing: every line found so far is decided.' : 'Nothing yet.';
  const open = targets.reduce((sum, target) => sum + target.open, 0);
  return open ? `${counted(open, 'line')} wait for the team. As a reader you see and export everything, and decide nothing.` : 'Nothing.';
}

interface ListProps {
  programmeId: string;
  role: MemberRole;
  waits: readonly Waiting[];
  none: string;
}

function WaitList({ programmeId, role, waits, none }: ListProps) {
  if (!waits.length) return <p className={classes.none}>{none}</p>;
  const rest = waits.length - MOST;
  return (
    <ul>
      {waits.slice(0, MOST).map((wait) => (
        <li key={'spectrum' in wait ? wait.spectrum.id : wait.target.id}>
          <WaitSentence programmeId={programmeId} role={role} wait={wait} />
        </li>
      ))}
      {rest > 0 && <li className={classes.more}>and {count(rest)} more in the table below</li>}
    </ul>
  );
}

function WaitSentence({ programmeId, role, wait }: { programmeId: string; role: MemberRole; wait: Waiting }) {
  const target = (
    <Link to={pagePaths.target(programmeId, wait.target.id)} className={classes.named}>
      {wait.target.name}
    </Link>
  );
  switch (wait.kind) {
    case 'decide':
      return (
        <Line icon={<IconCircleDashed size={18} aria-hidden />}>
          {counted(wait.lines, 'line')} in {target} {wait.lines === 1 ? 'waits' : 'wait'} for{' '}
          {roleAllows(role, 'reviewer') ? 'a decision' : 'a proposal or a decision'}
        </Line>
      );
    case 'empty':
      return (
        <Line icon={<IconFilePlus size={18} aria-hidden />}>
          {target} has no spectrum yet: <Link to={pagePaths.upload(programmeId, wait.target.id)}>add one</Link>
        </Line>
      );
    case 'failed':
      return (
        <Line icon={<IconAlertTriangle size={18} aria-hidden />}>
          The analysis of {target}, <SpectrumName programmeId={programmeId} spectrum={wait.spectrum} />, failed
        </Line>
      );
    case 'running':
      return (
        <Line
          icon={
            <RingProgress
              size={20}
              thickness={2.5}
              sections={[{ value: (wait.spectrum.analysis?.progress ?? 0) * 100, color: 'var(--ink)' }]}
            />
          }
        >
          {target}, <SpectrumName programmeId={programmeId} spectrum={wait.spectrum} />: {analysisWords(wait.spectrum.analysis)}
        </Line>
      );
  }
}

const SpectrumName = ({ programmeId, spectrum: { id, label } }: { programmeId: string; spectrum: { id: string; label: string } }) => (
  <Link to={pagePaths.spectrum(programmeId, id)} className={classes.named}>
    {label}
  </Link>
);

const Line = ({ icon, children }: { icon: ReactNode; children: ReactNode }) => (
  <>
    <span className={classes.icon}>{icon}</span>
    <span>{children}</span>
  </>
);
