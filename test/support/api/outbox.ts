import { linkSecret, type LinkPurpose } from '../../../server/src/common/auth/one-time.js';
import type { Api } from './api.js';

interface Queued {
  readonly kind: string;
  readonly to_address: string;
  readonly facts: Record<string, string>;
}

/** What was put into the outbox for an address, oldest first. */
export const mailTo = (api: Api, address: string): Promise<Queued[]> =>
  api.db('mail_outbox').where({ to_address: address }).orderBy('created_at').select<Queued[]>('kind', 'to_address', 'facts');

/** What each letter to an address tells: its kind, and for matters of the account what changed. */
export const toldTo = async (api: Api, address: string): Promise<string[]> =>
  (await mailTo(api, address)).map(({ kind, facts }) => (kind === 'security' ? facts.what! : kind));

const KINDS: Record<LinkPurpose, string> = { invitation: 'invitation', password_reset: 'password_reset', email_change: 'email_confirm' };

/** The secret of the newest link that was mailed to an address. */
export async function mailedSecret(api: Api, purpose: LinkPurpose, address: string): Promise<string> {
  const mail = (await mailTo(api, address)).filter(({ kind }) => kind === KINDS[purpose]).at(-1);
  if (!mail) throw new Error(`no ${purpose} was mailed to ${address}`);
  return linkSecret(api.config, purpose, mail.facts.linkId!);
}
