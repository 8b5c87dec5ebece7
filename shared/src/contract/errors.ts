/** Every way a request can be refused. The client's table of sentences is typed by this, so a new code needs its sentence. */
export const ERROR_CODES = [
  'not_signed_in',
  'wrong_credentials',
  'too_many_requests',
  'forbidden_role',
  'cross_site',
  'not_found',
  'method_not_allowed',
  'invalid_request',
  'version_required',
  'stale_version',
  'bad_transition',
  'name_taken',
  'too_large',
  'unreadable_spectrum',
  'duplicate_spectrum',
  'analysis_not_running',
  'analysis_not_complete',
  'unavailable',
  'internal',
] as const;
export type ErrorCode = (typeof ERROR_CODES)[number];
