import type { MemberRole, TargetKind } from '@foreveil/shared';

export const KIND_WORD: Record<TargetKind, string> = { star: 'star', nebula: 'nebula', sightline: 'sightline', other: 'other' };
export const KINDS = Object.keys(KIND_WORD) as TargetKind[];

/** What each role may do, for the list of members. */
export const ROLE_MEANS: Record<MemberRole, string> = {
  reader: 'looks and exports',
  analyst: 'uploads, analyses, proposes',
  reviewer: 'accepts and rejects',
  lead: 'manages members, lists and deletion',
};
