import { settingsProblems, type AnalysisSettings } from '@foreveil/shared';
import { DomainError } from '../../common/errors/domain-error.js';

/** @throws invalid_request naming every value that is wrong, by its place in the request's body */
export function checkSettings(settings: Partial<AnalysisSettings>): void {
  const problems = settingsProblems(settings);
  if (!problems.length) return;
  const [first] = problems;
  throw new DomainError('invalid_request', `The settings cannot be used: ${first!.pointer.slice(1) || 'they'} ${first!.detail}.`, {
    errors: problems.map(({ pointer, detail }) => ({ pointer: `/settings${pointer}`, detail })),
  });
}
