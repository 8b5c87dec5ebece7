import { roleAllows, type MemberRole, type SpectrumSummary, type TargetSummary } from '@foreveil/shared';
import { isAtWork } from '../../lib/analysis-words.js';

/** Something that waits, as the parts of a sentence: the page makes the names links. */
export type Waiting =
  | { readonly kind: 'decide'; readonly target: TargetSummary; readonly lines: number }
  | { readonly kind: 'empty'; readonly target: TargetSummary }
  | { readonly kind: 'failed'; readonly target: TargetSummary; readonly spectrum: SpectrumSummary }
  | { readonly kind: 'running'; readonly target: TargetSummary; readonly spectrum: SpectrumSummary };

const hasFailed = ({ analysis }: SpectrumSummary) => analysis?.phase === 'ERROR';

const mostFirst = (a: TargetSummary, b: TargetSummary) => b.open - a.open;

/** What a member of this role can bring forward, most open lines first. A reader can bring nothing forward. */
export function waitsForPeople(targets: readonly TargetSummary[], role: MemberRole): Waiting[] {
  if (!roleAllows(role, 'analyst')) return [];
  const open = targets.filter((target) => target.open > 0).sort(mostFirst);
  const failed = targets.flatMap((target) =>
    target.spectra.filter(hasFailed).map((spectrum) => ({ kind: 'failed' as const, target, spectrum })),
  );
  const empty = targets.filter(({ spectra }) => spectra.length === 0);
  return [
    ...open.map((target) => ({ kind: 'decide' as const, target, lines: target.open })),
    ...failed,
    ...empty.map((target) => ({ kind: 'empty' as const, target })),
  ];
}

/** Analyses that the machine is at, the farthest first. */
export function waitsForMachine(targets: readonly TargetSummary[]): Extract<Waiting, { kind: 'running' }>[] {
  return targets
    .flatMap((target) =>
      target.spectra.filter(({ analysis }) => isAtWork(analysis)).map((spectrum) => ({ kind: 'running' as const, target, spectrum })),
    )
    .sort((a, b) => (b.spectrum.analysis?.progress ?? 0) - (a.spectrum.analysis?.progress ?? 0));
}
