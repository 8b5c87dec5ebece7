/** Roles within a programme, weakest first; each may do all that the ones before it may. */
export const MEMBER_ROLES = ['reader', 'analyst', 'reviewer', 'lead'] as const;
export type MemberRole = (typeof MEMBER_ROLES)[number];

/** Whether a member of role `have` may do what needs `need`. */
export const roleAllows = (have: MemberRole, need: MemberRole): boolean => MEMBER_ROLES.indexOf(have) >= MEMBER_ROLES.indexOf(need);
