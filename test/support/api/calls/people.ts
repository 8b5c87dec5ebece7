import type { Calls } from './call.js';

export const calls: Calls = {
  'AccountsController.signIn': { body: { email: 'nobody@example.org', password: 'wrong on purpose' }, success: 401 },
  'AccountsController.signOut': { success: 204 },
  'AccountsController.me': { success: 200 },
  'ProgrammesController.list': { success: 200 },
  'ProgrammesController.create': { body: { name: 'Another programme' }, success: 201 },
  'ProgrammesController.get': { success: 200 },
  // no mail server of a demonstration in this test: what it received is tested in mail.spec.ts
  'ReceivedMailController.list': { success: 404 },
  'ReceivedMailController.get': { params: () => ({ mailId: '1' }), success: 404 },
};
