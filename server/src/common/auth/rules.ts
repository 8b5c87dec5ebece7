import { SetMetadata } from '@nestjs/common';
import type { MemberRole } from '@foreveil/shared';

/** Who may use a route. Every route states one of the three; a route without a rule is refused to all. */
export type Rule = { readonly who: 'anyone' } | { readonly who: 'signed_in' } | { readonly who: 'member'; readonly least: MemberRole };

export const RULE = 'foreveil:rule';

export const Public = () => SetMetadata(RULE, { who: 'anyone' } satisfies Rule);
export const NeedsSignIn = () => SetMetadata(RULE, { who: 'signed_in' } satisfies Rule);
/** A member of the programme in the path with at least this role. Others do not learn that the programme exists. */
export const NeedsRole = (least: MemberRole) => SetMetadata(RULE, { who: 'member', least } satisfies Rule);
