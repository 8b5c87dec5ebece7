import { describe, expect, it } from 'vitest';
import { anIdentification } from '../../../test/things.js';
import { lineRows, unidentified } from '../lines/reading.js';
import { aResult } from '../test/a-result.js';
import { actOn, decisionOf, foreseen, refusal, stepsOver, undoSteps } from './act.js';

const row = lineRows(aResult(), [])[2]!;

describe('a decision', () => {
  it('carries the version that was seen, 0 when there was none', () => {
    expect(actOn(row, 'accept').version).toBe(0);
    expect(actOn({ ...row, identification: anIdentification({ version: 7 }) }, 'accept').version).toBe(7);
  });

  it('names line and system, none for unidentified, and the remark only when there is one', () => {
    expect(decisionOf(actOn(row, 'accept'))).toEqual({ action: 'accept', lineId: 'NaI-589.158', systemId: 'cloud' });
    expect(decisionOf(actOn(row, 'accept', unidentified(0.1), 'odd'))).toEqual({
      action: 'accept',
      lineId: null,
      systemId: null,
      remark: 'odd',
    });
  });

  it('is foreseen with its place in the history', () => {
    const soon = foreseen(row, actOn(row, 'reject', row.reading, 'too broad'), 'Ana Weir', '2031-03-15T09:00:00Z');
    expect(soon).toMatchObject({ state: 'rejected', species: 'Na I', decidedBy: 'Ana Weir', featureIndex: 2 });
    expect(soon.history).toEqual([
      {
        at: '2031-03-15T09:00:00Z',
        by: 'Ana Weir',
        action: 'reject',
        from: 'proposed',
        to: 'rejected',
        reading: 'Na I',
        remark: 'too broad',
      },
    ]);
  });
});

describe('what is not offered', () => {
  it('is what the role forbids or the state does not lead to, each with its reason', () => {
    expect(refusal('accept', 'proposed', 'reviewer')).toBeNull();
    expect(refusal('accept', 'proposed', 'analyst')).toMatch(/needs the role reviewer; yours is analyst/);
    expect(refusal('propose', 'proposed', 'analyst')).toBeNull();
    expect(refusal('reject', 'accepted', 'lead')).toMatch(/accepted is put back to proposed first/);
    expect(refusal('reopen', 'accepted', 'lead')).toBeNull();
    expect(refusal('propose', 'proposed', 'reader')).toMatch(/analyst/);
    expect(refusal('accept', 'proposed', 'lead', true)).toMatch(/older run/);
  });
});

describe('undo', () => {
  it('reopens, and proposes the former reading when another was decided on', () => {
    expect(undoSteps(row, actOn(row, 'accept')).map((s) => s.action)).toEqual(['reopen']);
    const other = actOn(row, 'accept', unidentified(0.1));
    expect(undoSteps(row, other).map((s) => [s.action, s.reading.lineId])).toEqual([
      ['reopen', null],
      ['propose', 'NaI-589.158'],
    ]);
  });
  it('of a reopening is the former verdict', () => {
    const decided = { ...row, state: 'rejected' as const };
    expect(undoSteps(decided, actOn(decided, 'reopen')).map((s) => s.action)).toEqual(['reject']);
  });
});

describe('over a teammate’s version', () => {
  it('a decision applies at once where their state allows it, else after a reopening', () => {
    const mine = actOn(row, 'reject');
    expect(stepsOver(anIdentification({ state: 'proposed' }), mine).map((s) => s.action)).toEqual(['reject']);
    expect(stepsOver(anIdentification({ state: 'accepted' }), mine).map((s) => s.action)).toEqual(['reopen', 'reject']);
    expect(stepsOver(anIdentification({ state: 'accepted' }), actOn(row, 'reopen')).map((s) => s.action)).toEqual(['reopen']);
    expect(stepsOver(anIdentification({ state: 'proposed' }), actOn(row, 'reopen'))).toEqual([]);
  });
});
