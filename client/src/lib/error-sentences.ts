import { ApiError, type ClientErrorCode } from './api-error.js';

/** The server's own sentence where it names facts (a row, a role, a name), else ours. */
type Sentence = (detail: string) => string;
const says =
  (fallback: string): Sentence =>
  (detail) =>
    detail || fallback;
const always =
  (sentence: string): Sentence =>
  () =>
    sentence;

/** What happened and what to do next. Typed by the codes, so a new code without a sentence does not compile. */
const SENTENCES: Record<ClientErrorCode, Sentence> = {
  not_signed_in: always('You are signed out. Sign in to go on; nothing you typed is lost.'),
  wrong_credentials: always('No account has this e-mail and password together. Check both; capital letters count.'),
  second_factor_needed: always('This account asks for a second factor. Type the code of your authenticator app, or a recovery code.'),
  wrong_code: says('The code is not right. Codes change every half minute and work once.'),
  wrong_password: always('The password is not right. Capital letters count.'),
  weak_password: says('The password is too easy to guess. Take a longer one; a sentence works well.'),
  link_not_valid: says('This link was used already, was taken back, or is too old. Ask for a new one.'),
  email_taken: says('An account with this address exists already.'),
  already_member: says('This person is a member already.'),
  last_lead: says('A programme needs a lead. Make somebody else lead first.'),
  last_administrator: always('The site needs an administrator. Make somebody else administrator first.'),
  needs_session: always('Access tokens cannot do this. Sign in with a browser.'),
  token_scope: always('This access token may only read.'),
  needs_administrator: always('Only administrators of the site may do this.'),
  too_many_requests: says('Too many attempts. Wait a little, then try again.'),
  forbidden_role: says('Your role in this programme does not allow this. Ask the lead of the programme.'),
  cross_site: always('The request did not come from this site. Reload the page and try again.'),
  not_found: always('This does not exist, or you are not a member of its programme.'),
  method_not_allowed: always('The server does not take this request. Reload the page: it may be older than the server.'),
  invalid_request: says('Something in the form is not valid. Check the marked fields.'),
  version_required: always('The page did not say which version it saw. Reload the page and try again.'),
  stale_version: says('A teammate changed this in the meantime. Look at both versions, then save again.'),
  bad_transition: says('This line was decided in the meantime. Its row shows the present state.'),
  name_taken: says('This name is already used. Choose another.'),
  too_large: says('The file is larger than this server accepts.'),
  unreadable_spectrum: says('The file cannot be read as a spectrum.'),
  duplicate_spectrum: says('This file is already in the programme.'),
  analysis_not_running: always('The analysis had already ended.'),
  analysis_not_complete: always('The analysis has not ended yet. Try again when it has.'),
  unavailable: always('The server is not ready at the moment. Try again in a few seconds.'),
  internal: says('Something went wrong on the server.'),
  no_connection: always('The server cannot be reached. Check the connection, then try again; nothing you typed is lost.'),
  strange_answer: always('The answer did not come from Foreveil. A proxy or a sign-in page of your network may stand in between.'),
};

/** One or two complete sentences for a person about anything that was thrown. */
export function errorSentence(error: unknown): string {
  if (!(error instanceof ApiError)) return 'Something unexpected happened on this page. Reload it; what was saved is safe.';
  return SENTENCES[error.code](error.problem?.detail ?? '');
}

/** The identifier under which the server logged a failure of its own; null where there is nothing to look up. */
export function traceOf(error: unknown): string | null {
  return error instanceof ApiError && error.status >= 500 ? (error.problem?.traceId ?? null) : null;
}
