import { apiPaths, type AccountPage, type AccountRow, type Problem } from '@foreveil/shared';
import request, { type Response } from 'supertest';
import { FirstAdministratorService } from '../../server/src/modules/accounts/first-administrator.service.js';
import { startApi, type Api } from '../support/api/api.js';
import { mailTo, mailedSecret, toldTo } from '../support/api/outbox.js';
import { PASSWORD, makePerson, makeTeam, personWith, signIn, type Person } from '../support/api/person.js';

let api: Api;
beforeEach(async () => {
  api = await startApi();
});
afterEach(() => api.close());

const anybody = (path: string, body: object) => request(api.url).post(path).set('X-Foreveil', '1').send(body);
const codeOf = ({ body }: Response) => (body as Problem).code;

async function administrator(): Promise<Person> {
  const person = await makePerson(api);
  await api.db('users').where({ id: person.userId }).update({ administrator: true });
  return person;
}
const change = (by: Person, of: Person, body: object) => by.patch(apiPaths.adminAccount(of.userId), body);

describe('the first administrator', () => {
  const invited = async () => (await api.app.get(FirstAdministratorService).invite())!.split('#')[1]!;
  const claim = (secret: string, email = 'first@example.org') =>
    anybody(apiPaths.claimSite, { secret, email, name: 'First Person', password: PASSWORD });

  test('opens the site with the secret that the server printed, and nobody does so again', async () => {
    const [secret, other] = [await invited(), await invited()]; // two processes started
    expect(JSON.stringify(await api.db('first_administrator_secrets').select())).not.toContain(secret);
    await claim('guessed').expect(410);
    await claim(secret).expect(204);
    const first = personWith(api, { role: 'outsider', userId: '', email: '', name: '', cookie: await signIn(api, 'first@example.org') });
    expect((await first.get(apiPaths.me)).body).toMatchObject({ administrator: true });
    for (const again of [secret, other]) await claim(again, 'second@example.org').expect(410);
    expect(await api.app.get(FirstAdministratorService).invite()).toBeNull();
  });

  test('is one person, when two claim at the same moment', async () => {
    const secret = await invited();
    const answers = await Promise.all(['a@example.org', 'b@example.org'].map((email) => claim(secret, email)));
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 410]);
    expect(await api.db('users').where({ administrator: true })).toHaveLength(1);
  });

  test('has a day to do so', async () => {
    const secret = await invited();
    await api.db('first_administrator_secrets').update({ expires_at: api.db.raw(`now() - interval '1 second'`) });
    await claim(secret).expect(410);
  });
});

describe('an administrator', () => {
  test('lists accounts by page and by name, and sees nothing of their programmes', async () => {
    const [admin, team] = [await administrator(), await makeTeam(api)];
    const rows = Array.from({ length: 120 }, (_, i) => ({
      email: `many${String(i).padStart(3, '0')}@example.org`,
      name: `Many ${i}`,
      password_hash: '-',
    }));
    await api.db('users').insert(rows);
    const first = (await admin.get(apiPaths.adminAccounts)).body as AccountPage;
    const second = (await admin.get(`${apiPaths.adminAccounts}?after=${encodeURIComponent(first.next!)}`)).body as AccountPage;
    const emails = [...first.rows, ...second.rows].map(({ email }) => email);
    expect(second.next).toBeNull();
    expect(new Set(emails).size).toBe(126);
    expect(emails).toEqual([...emails].sort());
    const found = (await admin.get(`${apiPaths.adminAccounts}?find=${encodeURIComponent(team.lead.name.toUpperCase())}`))
      .body as AccountPage;
    expect(found.rows).toEqual([expect.objectContaining({ email: team.lead.email, programmes: 1, active: true, secondFactor: false })]);
    expect(Object.keys(found.rows[0]!).sort()).toEqual([
      'active',
      'administrator',
      'createdAt',
      'email',
      'id',
      'lastSeenAt',
      'name',
      'programmes',
      'secondFactor',
    ]);
    expect(((await admin.get(`${apiPaths.adminAccounts}?find=%25`)).body as AccountPage).rows).toEqual([]);
    await admin.get(apiPaths.programme(team.programmeId)).expect(404);
    expect((await admin.get(apiPaths.programmes)).body).toEqual([]);
  });

  test('closes an account, which ends its sessions, links and tokens, and opens it again', async () => {
    const [admin, person] = [await administrator(), await makePerson(api)];
    await anybody(apiPaths.askPasswordReset, { email: person.email });
    const secret = await mailedSecret(api, 'password_reset', person.email);
    expect((await change(admin, person, { active: false }).expect(200)).body as AccountRow).toMatchObject({ active: false });
    await person.get(apiPaths.me).expect(401);
    await anybody(apiPaths.signIn, { email: person.email, password: PASSWORD }).expect(401);
    await change(admin, person, { active: true }).expect(200);
    await person.get(apiPaths.me).expect(401); // the session stays ended
    await anybody(apiPaths.resetPassword, { secret, password: 'quite another long one' }).expect(410);
    await signIn(api, person.email);
    expect(await toldTo(api, person.email)).toEqual(['password_reset', 'account_opened_again']);
  });

  test('makes others administrators; both change with a new session and are told', async () => {
    const [admin, person] = [await administrator(), await makePerson(api)];
    await change(admin, person, { administrator: true }).expect(200);
    await person.get(apiPaths.me).expect(401);
    const risen = personWith(api, { ...person, cookie: await signIn(api, person.email) });
    await risen.get(apiPaths.adminAccounts).expect(200);
    await change(risen, admin, { administrator: false }).expect(200);
    await admin.get(apiPaths.adminAccounts).expect(401);
    expect(await toldTo(api, person.email)).toEqual(['administrator_made']);
  });

  test('cannot be the last one and go, nor can two end each other at the same moment', async () => {
    const admin = await administrator();
    for (const body of [{ administrator: false }, { active: false }]) {
      expect(codeOf(await change(admin, admin, body).expect(409))).toBe('last_administrator');
    }
    const other = await administrator();
    const answers = await Promise.all([change(admin, other, { active: false }), change(other, admin, { active: false })]);
    expect(answers.filter(({ status }) => status === 200)).toHaveLength(1);
    expect(await api.db('users').where({ active: true, administrator: true })).toHaveLength(1);
  });

  test('who closes the account of an only lead leaves the programme to its strongest member', async () => {
    const [admin, team] = [await administrator(), await makeTeam(api)];
    await change(admin, team.lead, { active: false }).expect(200);
    const roles = await api.db('memberships').where({ programme_id: team.programmeId, role: 'lead' }).pluck('user_id');
    expect(roles.sort()).toEqual([team.lead.userId, team.reviewer.userId].sort());
    await team.reviewer.get(apiPaths.invitations(team.programmeId)).expect(200);
    expect((await mailTo(api, team.reviewer.email)).at(-1)!.facts.sentence).toContain('You lead');
  });

  test('invites people to the site, who then have an account and no programme', async () => {
    const admin = await administrator();
    await admin.post(apiPaths.adminInvitations, { email: 'new@example.org' }).expect(201);
    await admin.post(apiPaths.adminInvitations, { email: admin.email }).expect(409);
    const secret = await mailedSecret(api, 'invitation', 'new@example.org');
    const joined = await anybody(apiPaths.joinWithNewAccount, { secret, name: 'New', password: PASSWORD }).expect(204);
    const cookie = joined.get('Set-Cookie')![0]!.split(';')[0]!;
    expect((await request(api.url).get(apiPaths.programmes).set('Cookie', cookie)).body).toEqual([]);
    expect((await admin.get(apiPaths.adminInvitations)).body).toEqual([]);
    expect((await admin.get(apiPaths.adminMail)).body).toEqual({ waiting: 1, unconfirmed: 0, failed: 0 });
  });
});
