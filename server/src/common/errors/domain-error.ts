import type { ErrorCode, Problem } from '@foreveil/shared';

/** Status and title of every refusal. */
export const REFUSALS: Record<ErrorCode, { status: number; title: string }> = {
  not_signed_in: { status: 401, title: 'Not signed in' },
  wrong_credentials: { status: 401, title: 'Wrong e-mail or password' },
  second_factor_needed: { status: 401, title: 'Second factor needed' },
  wrong_code: { status: 401, title: 'Wrong code' },
  wrong_password: { status: 403, title: 'Wrong password' },
  weak_password: { status: 422, title: 'Password too easy to guess' },
  link_not_valid: { status: 410, title: 'Link no longer valid' },
  email_taken: { status: 409, title: 'Address already used' },
  already_member: { status: 409, title: 'Already a member' },
  last_lead: { status: 409, title: 'A programme needs a lead' },
  last_administrator: { status: 409, title: 'The site needs an administrator' },
  needs_session: { status: 403, title: 'Not for access tokens' },
  token_scope: { status: 403, title: 'Token may only read' },
  needs_administrator: { status: 403, title: 'For administrators only' },
  too_many_requests: { status: 429, title: 'Too many requests' },
  forbidden_role: { status: 403, title: 'Your role does not allow this' },
  cross_site: { status: 403, title: 'Request from another site' },
  not_found: { status: 404, title: 'Not found' },
  method_not_allowed: { status: 405, title: 'Method not allowed' },
  invalid_request: { status: 400, title: 'Invalid request' },
  version_required: { status: 428, title: 'Version required' },
  stale_version: { status: 412, title: 'Changed by someone else' },
  bad_transition: { status: 409, title: 'Not possible in this state' },
  name_taken: { status: 409, title: 'Name already used' },
  too_large: { status: 413, title: 'Too large' },
  unreadable_spectrum: { status: 422, title: 'Spectrum cannot be read' },
  duplicate_spectrum: { status: 409, title: 'File already in this programme' },
  analysis_not_running: { status: 409, title: 'Analysis is not running' },
  analysis_not_complete: { status: 409, title: 'Analysis is not complete' },
  unavailable: { status: 503, title: 'Temporarily unavailable' },
  internal: { status: 500, title: 'Internal error' },
};

interface More {
  readonly errors?: Problem['errors'];
  /** the row as it is now, or the row that stands in the way */
  readonly current?: unknown;
  /** seconds after which to try again */
  readonly retryAfter?: number;
  /** a status other than the usual one of the code */
  readonly status?: number;
}

/** A refusal with a sentence for the person; the one filter turns it into problem+json. */
export class DomainError extends Error {
  constructor(
    readonly code: ErrorCode,
    detail: string,
    readonly more: More = {},
  ) {
    super(detail);
  }
}

export const notFound = () => new DomainError('not_found', 'This does not exist, or you cannot see its programme.');
