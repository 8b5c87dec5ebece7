import { randomUUID } from 'node:crypto';
import { PASSWORD } from '../person.js';
import type { Calls } from './call.js';

/** Past the door, then refused: the secret is that of no link. */
const SECRET = { secret: 'a secret that was never sent' };
const later = (days = 1) => new Date(Date.now() + days * 86_400_000);

export const calls: Calls = {
  'AccountsController.signIn': { body: { email: 'nobody@example.org', password: 'wrong on purpose' }, success: 401 },
  'AccountsController.signOut': { success: 204 },
  'AccountsController.me': { success: 200 },
  'LinksController.askPasswordReset': { body: { email: 'nobody@example.org' }, success: 202 },
  'LinksController.resetPassword': { body: { ...SECRET, password: PASSWORD }, success: 410 },
  'LinksController.confirmEmail': { body: SECRET, success: 410 },
  'LinksController.claimSite': { body: { ...SECRET, password: PASSWORD, name: 'First', email: 'first@example.org' }, success: 410 },
  'LinksController.stopMail': { body: SECRET, success: 410 },
  'JoiningController.look': { body: SECRET, success: 410 },
  'JoiningController.signUp': { body: { ...SECRET, name: 'New', password: PASSWORD }, success: 410 },
  'JoiningController.accept': { body: SECRET, success: 410 },

  'OwnAccountController.get': { success: 200 },
  'OwnAccountController.rename': { body: { name: 'Another Name' }, success: 200 },
  'OwnAccountController.changePassword': { body: { current: PASSWORD, password: 'quite another long one' }, success: 204 },
  'OwnAccountController.askEmailChange': { body: () => ({ email: `${randomUUID()}@example.org`, password: PASSWORD }), success: 202 },
  'OwnAccountController.sessions': { success: 200 },
  'OwnAccountController.endOtherSessions': { success: 204 },
  'OwnAccountController.endSession': {
    params: async ({ api }, { userId }) => {
      if (!userId) return { sessionId: randomUUID() };
      const [row] = await api.db('sessions').insert({ user_id: userId, expires_at: later() }).returning<{ id: string }[]>('id');
      return { sessionId: row!.id };
    },
    success: 204,
  },
  'OwnAccountController.offerSecondFactor': { body: { password: PASSWORD }, success: 201 },
  'OwnAccountController.confirmSecondFactor': { body: { code: '000000' }, success: 409 }, // past the door, then refused: not begun
  'OwnAccountController.renewRecoveryCodes': { body: { password: PASSWORD }, success: 409 }, // past the door, then refused: not on
  'OwnAccountController.endSecondFactor': { body: { password: PASSWORD }, success: 204 },
  'OwnAccountController.mailChoices': { success: 200 },
  'OwnAccountController.chooseMail': { body: { kind: 'mention', choice: 'daily' }, success: 200 },
  'TokensController.list': { success: 200 },
  'TokensController.make': { body: { name: 'script', scope: 'read', days: 30 }, success: 201 },
  'TokensController.revoke': {
    params: async ({ api }, { userId }) => {
      if (!userId) return { tokenId: randomUUID() };
      const row = { user_id: userId, name: 'to go', scope: 'read', secret_hash: randomUUID(), expires_at: later() };
      const [made] = await api.db('access_tokens').insert(row).returning<{ id: string }[]>('id');
      return { tokenId: made!.id };
    },
    success: 204,
  },

  'AdminController.accounts': { success: 200 },
  'AdminController.change': { body: { active: false }, params: ({ team }) => ({ userId: team.reader.userId }), success: 200 },
  'AdminController.open': { success: 200 },
  'AdminController.invite': { body: () => ({ email: `${randomUUID()}@example.org` }), success: 201 },
  'AdminController.mail': { success: 200 },

  'ProgrammesController.list': { success: 200 },
  'ProgrammesController.create': { body: { name: 'Another programme' }, success: 201 },
  'ProgrammesController.get': { success: 200 },
  'ProgrammesController.change': { body: { name: 'Renamed' }, headers: { 'If-Match': '"1"' }, success: 200 },
  'ProgrammesController.stage': { headers: { 'If-Match': '"1"' }, success: 204 },
  'ProgrammesController.recover': { success: 200 },
  'ProgrammesController.staged': { success: 200 },
  'MembersController.list': { success: 200 },
  'MembersController.changeRole': {
    params: ({ team }) => ({ userId: team.analyst.userId }),
    ...{ body: { role: 'reviewer' }, headers: { 'If-Match': '"1"' }, success: 200 },
  },
  'MembersController.remove': { params: ({ team }) => ({ userId: team.reader.userId }), headers: { 'If-Match': '"1"' }, success: 204 },
  'MembersController.leave': {
    // a second lead, so that the first may go
    params: async ({ api, team }) => {
      const [row] = await api
        .db('users')
        .insert({ email: `${randomUUID()}@example.org`, name: 'Second lead', password_hash: '-' })
        .returning<{ id: string }[]>('id');
      await api.db('memberships').insert({ programme_id: team.programmeId, user_id: row!.id, role: 'lead' });
      return {};
    },
    success: 204,
  },
  'InvitationsController.list': { success: 200 },
  'InvitationsController.invite': { body: () => ({ email: `${randomUUID()}@example.org`, role: 'reader' }), success: 201 },
  'InvitationsController.revoke': {
    params: async ({ api, team }) => {
      const row = { programme_id: team.programmeId, email: `${randomUUID()}@example.org`, role: 'reader', invited_by: team.lead.userId };
      const [made] = await api
        .db('invitations')
        .insert({ ...row, secret_hash: randomUUID(), expires_at: later() })
        .returning<{ id: string }[]>('id');
      return { invitationId: made!.id };
    },
    success: 204,
  },

  // no mail server of a demonstration in this test: what it received is tested in mail.spec.ts
  'ReceivedMailController.list': { success: 404 },
  'ReceivedMailController.get': { params: () => ({ mailId: '1' }), success: 404 },
};
