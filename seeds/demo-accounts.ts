import type { MemberRole } from '@foreveil/shared';

export interface DemoAccount {
  readonly name: string;
  readonly email: string;
  readonly password: string;
  /** role in the demonstration's programme; null: an account that is not in it */
  readonly role: MemberRole | null;
  /** manages the accounts of the site */
  readonly administrator?: true;
}

/** Invented people. Their passwords are public, so these accounts exist in the demonstration only, never in production. */
export const DEMO_ACCOUNTS: readonly DemoAccount[] = [
  { name: 'Linnea Ostrava', email: 'linnea@example.org', password: 'salt marsh at low tide', role: 'lead' },
  { name: 'Teodor Vale', email: 'teodor@example.org', password: 'two waders on one leg', role: 'reviewer' },
  { name: 'Mirka Dunmore', email: 'mirka@example.org', password: 'grey plover, grey sky', role: 'analyst' },
  { name: 'Oskar Finch', email: 'oskar@example.org', password: 'watching from the dune', role: 'reader' },
  { name: 'Paula Reed', email: 'paula@example.org', password: 'another shore entirely', role: null, administrator: true },
];
