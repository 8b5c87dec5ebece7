import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from '@jest/globals';
import { countsOf, inWords, sum } from './results.mjs';

/** A step whose runner reported this. */
function stepWith(report) {
  const file = join(mkdtempSync(join(tmpdir(), 'report-')), 'report.json');
  writeFileSync(file, JSON.stringify({ numPassedTests: 0, numFailedTests: 0, numPendingTests: 0, testResults: [], ...report }));
  return { report: file };
}

describe('what a step counts as', () => {
  it('is one check, passed or failed, where it has no report', () => {
    expect(countsOf({}, 0)).toEqual({ passed: 1, failed: 0, skipped: 0 });
    expect(countsOf({}, 2)).toEqual({ passed: 0, failed: 1, skipped: 0 });
  });

  it('is what the report says, skipped ones apart', () => {
    expect(countsOf(stepWith({ numPassedTests: 7, numFailedTests: 2, numPendingTests: 1, numTodoTests: 1 }), 1)).toEqual({
      passed: 7,
      failed: 2,
      skipped: 2,
    });
  });

  it('has a failure for every file that could not be loaded', () => {
    const unloadable = { status: 'failed', assertionResults: [] };
    const failing = { status: 'failed', assertionResults: [{ status: 'passed' }, { status: 'failed' }] };
    expect(countsOf(stepWith({ numPassedTests: 1, numFailedTests: 1, testResults: [unloadable, failing] }), 1).failed).toBe(2);
  });

  it('has a failure when the run ended badly, whatever the report says', () => {
    expect(countsOf(stepWith({ numPassedTests: 5 }), 1)).toEqual({ passed: 5, failed: 1, skipped: 0 });
    expect(countsOf({ report: '/no/such/report.json' }, 137)).toEqual({ passed: 0, failed: 1, skipped: 0 });
  });

  it('adds up and is said in one line', () => {
    const total = sum([
      { passed: 3, failed: 0, skipped: 0 },
      { passed: 4, failed: 1, skipped: 2 },
    ]);
    expect(inWords(total)).toBe('7 passed, 1 failed, 2 skipped');
    expect(inWords({ passed: 7, failed: 0, skipped: 0 })).toBe('7 passed, 0 failed');
  });
});
