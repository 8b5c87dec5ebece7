import {
  nextState,
  ROLE_FOR,
  roleAllows,
  type Decision,
  type Identification,
  type MemberRole,
  type ReviewAction,
  type ReviewState,
} from '@foreveil/shared';
import { sameReading, type LineRow, type Reading } from '../lines/reading.js';

/** A person's decision on its way: what, on which line, seen at which version. */
export interface Act {
  readonly action: ReviewAction;
  readonly reading: Reading;
  readonly remark: string;
  /** of the identification that was seen; 0 when there was none */
  readonly version: number;
  readonly featureIndex: number;
}

export const actOn = (row: LineRow, action: ReviewAction, reading: Reading = row.reading, remark = ''): Act => ({
  action,
  reading,
  remark,
  version: row.identification?.version ?? 0,
  featureIndex: row.feature.index,
});

export const decisionOf = ({ action, reading, remark }: Act): Decision => ({
  action,
  lineId: reading.lineId,
  systemId: reading.systemId,
  ...(remark ? { remark } : {}),
});

/** Why an older run is looked at only. */
export const OLD_RUN = 'This is an older run: go back to the newest run first.';

/** Why an action is not offered; null when it is. `isOld`: the line belongs to a run that is not the newest. */
export function refusal(action: ReviewAction, state: ReviewState, role: MemberRole | null, isOld = false): string | null {
  if (isOld) return OLD_RUN;
  if (role === null) return 'Your role in this programme is not known yet.';
  if (!roleAllows(role, ROLE_FOR[action])) return `This needs the role ${ROLE_FOR[action]}; yours is ${role}.`;
  if (nextState(state, action) === null) return `A line that is ${state} is put back to proposed first.`;
  return null;
}

/** The row as it will be when the server agrees; shown at once. */
export function foreseen(row: LineRow, act: Act, by: string, now: string): Identification {
  const { feature, identification } = row;
  const to = nextState(row.state, act.action) ?? row.state;
  const { lineId, species, restNm, systemId, velocityKmPerS, velocitySigmaKmPerS, probability } = act.reading;
  return {
    id: identification?.id ?? '',
    targetId: identification?.targetId ?? '',
    spectrumId: identification?.spectrumId ?? '',
    spectrumLabel: identification?.spectrumLabel ?? '',
    featureIndex: feature.index,
    kind: feature.kind,
    wavelengthNm: feature.wavelengthNm,
    wavelengthSigmaNm: feature.wavelengthSigmaNm,
    equivalentWidthNm: feature.equivalentWidthNm,
    equivalentWidthSigmaNm: feature.equivalentWidthSigmaNm,
    fwhmNm: feature.fwhmNm,
    lineId,
    species,
    restNm,
    lineSource: identification?.lineSource ?? null,
    family: lineId === null ? null : act.reading.family,
    systemId,
    velocityKmPerS,
    velocitySigmaKmPerS,
    probability,
    state: to,
    version: act.version,
    decidedBy: by,
    decidedAt: now,
    history: [
      ...(identification?.history ?? []),
      { at: now, by, action: act.action, from: row.state, to, reading: species ?? 'unidentified', remark: act.remark },
    ],
  };
}

/** A step of an undo; its version is looked up when it is sent. */
export interface UndoStep {
  readonly action: ReviewAction;
  readonly reading: Reading;
}

/** What brings a row back to how it was before an act. */
export function undoSteps(before: LineRow, act: Act): UndoStep[] {
  const propose: UndoStep = { action: 'propose', reading: before.reading };
  if (act.action === 'propose') return [propose];
  if (act.action === 'reopen') return [{ action: before.state === 'accepted' ? 'accept' : 'reject', reading: before.reading }];
  const reopen: UndoStep = { action: 'reopen', reading: act.reading };
  return sameReading(before.reading, act.reading) ? [reopen] : [reopen, propose];
}

/** Acts that carry out `wanted` although a teammate's version is now `current`: a decided line is reopened first. */
export function stepsOver(current: Identification, wanted: Act): UndoStep[] {
  const last: UndoStep = { action: wanted.action, reading: wanted.reading };
  if (nextState(current.state, wanted.action) !== null) return [last];
  if (nextState(current.state, 'reopen') === null || nextState('proposed', wanted.action) === null) return [];
  return [{ action: 'reopen', reading: wanted.reading }, last];
}
