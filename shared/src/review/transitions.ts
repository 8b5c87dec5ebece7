import type { MemberRole } from '../contract/roles.js';

export const REVIEW_STATES = ['proposed', 'accepted', 'rejected'] as const;
export type ReviewState = (typeof REVIEW_STATES)[number];

export const REVIEW_ACTIONS = ['propose', 'accept', 'reject', 'reopen'] as const;
export type ReviewAction = (typeof REVIEW_ACTIONS)[number];

/** Where an action leads; absent: not allowed from there. Accepting another reading of an accepted line needs a reopening first. */
const NEXT: Record<ReviewState, Partial<Record<ReviewAction, ReviewState>>> = {
  proposed: { propose: 'proposed', accept: 'accepted', reject: 'rejected' },
  accepted: { reopen: 'proposed' },
  rejected: { reopen: 'proposed' },
};
export const nextState = (state: ReviewState, action: ReviewAction): ReviewState | null => NEXT[state][action] ?? null;

/** The weakest role that may take an action. */
export const ROLE_FOR: Record<ReviewAction, MemberRole> = {
  propose: 'analyst',
  accept: 'reviewer',
  reject: 'reviewer',
  reopen: 'reviewer',
};
