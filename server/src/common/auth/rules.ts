import { SetMetadata } from '@nestjs/common';
import type { MemberRole } from '@foreveil/shared';

/** Who may use a route. Every route states one of these; a route without a rule is refused to all. */
export type Rule =
  | { readonly who: 'anyone' }
  | { readonly who: 'signed_in' }
  /** signed in with a browser: access tokens are refused */
  | { readonly who: 'session' }
  /** an administrator of the site, with a browser */
  | { readonly who: 'administrator' }
  /** `staged`: also while the programme is deleted and can be had back */
  | { readonly who: 'member'; readonly least: MemberRole; readonly staged?: true };

export const RULE = 'foreveil:rule';

export const Public = () => SetMetadata(RULE, { who: 'anyone' } satisfies Rule);
export const NeedsSignIn = () => SetMetadata(RULE, { who: 'signed_in' } satisfies Rule);
export const NeedsSession = () => SetMetadata(RULE, { who: 'session' } satisfies Rule);
export const NeedsAdministrator = () => SetMetadata(RULE, { who: 'administrator' } satisfies Rule);
/** A member of the programme in the path with at least this role. Others do not learn that the programme exists. */
export const NeedsRole = (least: MemberRole, more: { staged?: true } = {}) =>
  SetMetadata(RULE, { who: 'member', least, ...more } satisfies Rule);
