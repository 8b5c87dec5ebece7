import { ERROR_CODES } from '@foreveil/shared';
import { describe, expect, it } from 'vitest';
import { aProblem } from '../test/things.js';
import { ApiError, errorFrom } from './api-error.js';
import { errorSentence, traceOf } from './error-sentences.js';

describe('sentences for refusals', () => {
  it.each([...ERROR_CODES, 'no_connection', 'strange_answer'] as const)(
    '%s is a whole sentence even when the server gives no detail',
    (code) => {
      const sentence = errorSentence(new ApiError(code, 400));
      expect(sentence).toMatch(/^[A-Z].{10,}\.$/);
      expect(sentence).not.toContain(code);
    },
  );

  it('keeps the facts that the server named', () => {
    const detail = 'This file is already in the programme: "échelle" of Heron 4 A.';
    expect(errorSentence(errorFrom(409, JSON.stringify(aProblem({ code: 'duplicate_spectrum', status: 409, detail })), null))).toBe(detail);
  });

  it('does not tell a stranger which of e-mail and password was wrong, whatever the server says', () => {
    const problem = aProblem({ code: 'wrong_credentials', status: 401, detail: 'No such account.' });
    expect(errorSentence(new ApiError('wrong_credentials', 401, problem))).toContain('e-mail and password together');
  });

  it('says of an error of the page itself that what was saved is safe, and shows nothing of its inside', () => {
    expect(errorSentence(new TypeError('x is undefined'))).toMatch(/unexpected.*saved is safe/);
  });

  it('gives a trace only for failures of the server', () => {
    expect(traceOf(new ApiError('internal', 500, aProblem()))).toBe('trace-7');
    expect(traceOf(new ApiError('not_found', 404, aProblem({ status: 404 })))).toBeNull();
    expect(traceOf(new Error('no'))).toBeNull();
  });
});

describe('answers that are not ours', () => {
  it('a gateway’s page counts as unavailable, another page as a strange answer', () => {
    expect(errorFrom(502, '<html>Bad gateway</html>', null).code).toBe('unavailable');
    expect(errorFrom(403, '<html>Sign in to the network</html>', null).code).toBe('strange_answer');
    expect(errorFrom(418, JSON.stringify({ code: 'teapot' }), null).code).toBe('strange_answer');
  });

  it('reads how long to wait', () => {
    expect(errorFrom(429, JSON.stringify(aProblem({ code: 'too_many_requests' })), '30').retryAfterSeconds).toBe(30);
    expect(errorFrom(429, '', 'Wed, 21 Oct 2026 07:28:00 GMT').retryAfterSeconds).toBeNull();
  });
});
