import {
  apiPaths,
  type AccessToken,
  type Account,
  type MadeAccessToken,
  type MailChoices,
  type Problem,
  type Session,
} from '@foreveil/shared';
import request, { type Response } from 'supertest';
import { stopMailToken } from '../../server/src/common/auth/one-time.js';
import { startApi, type Api } from '../support/api/api.js';
import { mailTo, mailedSecret, toldTo } from '../support/api/outbox.js';
import { PASSWORD, makePerson, makeTeam, personWith, scriptOf, signIn, type Person } from '../support/api/person.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

const NEW = 'a completely different phrase';
const anybody = (path: string, body: object) => request(api.url).post(path).set('X-Foreveil', '1').send(body);
const attempt = (email: string, password: string) => anybody(apiPaths.signIn, { email, password });
const codeOf = ({ body }: Response) => (body as Problem).code;
const again = async (person: Person): Promise<Person> => personWith(api, { ...person, cookie: await signIn(api, person.email) });

describe('a forgotten password', () => {
  test('is set anew with the link that comes by mail, once, and every session ends', async () => {
    const person = await makePerson(api);
    await anybody(apiPaths.askPasswordReset, { email: person.email.toUpperCase() }).expect(202);
    const secret = await mailedSecret(api, 'password_reset', person.email);
    await anybody(apiPaths.resetPassword, { secret, password: 'short' }).expect(422);
    await anybody(apiPaths.resetPassword, { secret, password: NEW }).expect(204);
    await person.get(apiPaths.me).expect(401);
    await attempt(person.email, PASSWORD).expect(401);
    await attempt(person.email, NEW).expect(200);
    expect(codeOf(await anybody(apiPaths.resetPassword, { secret, password: PASSWORD }).expect(410))).toBe('link_not_valid');
    expect(await toldTo(api, person.email)).toEqual(['password_reset', 'password_reset']);
  });

  test('answers alike for an address without an account, and sends nothing there', async () => {
    const person = await makePerson(api);
    const [known, unknown] = [
      await anybody(apiPaths.askPasswordReset, { email: person.email }),
      await anybody(apiPaths.askPasswordReset, { email: 'nobody.here@example.org' }),
    ];
    expect([unknown.status, unknown.text]).toEqual([known.status, known.text]);
    expect(await mailTo(api, 'nobody.here@example.org')).toEqual([]);
  });

  test('has a link that ends after its time, when a newer one is asked for, and with its account', async () => {
    const person = await makePerson(api);
    const ask = async () => {
      await anybody(apiPaths.askPasswordReset, { email: person.email }).expect(202);
      return mailedSecret(api, 'password_reset', person.email);
    };
    const first = await ask();
    const second = await ask();
    await anybody(apiPaths.resetPassword, { secret: first, password: NEW }).expect(410);
    const shift = (sign: string) => api.db('account_links').update({ expires_at: api.db.raw(`expires_at ${sign} interval '61 minutes'`) });
    await shift('-');
    await anybody(apiPaths.resetPassword, { secret: second, password: NEW }).expect(410);
    await shift('+');
    await api.db('users').where({ id: person.userId }).update({ active: false });
    await anybody(apiPaths.resetPassword, { secret: second, password: NEW }).expect(410);
    await api.db('users').where({ id: person.userId }).update({ active: true });
    await anybody(apiPaths.resetPassword, { secret: second, password: NEW }).expect(204);
  });

  test('lets only one of two use the link at the same time', async () => {
    const person = await makePerson(api);
    await anybody(apiPaths.askPasswordReset, { email: person.email });
    const secret = await mailedSecret(api, 'password_reset', person.email);
    const answers = await Promise.all(
      ['first of the two phrases', 'second of the two phrases'].map((password) => anybody(apiPaths.resetPassword, { secret, password })),
    );
    expect(answers.map(({ status }) => status).sort()).toEqual([204, 410]);
  });

  test('links lead where the site is, whatever host the request names, and their secrets are stored nowhere', async () => {
    const person = await makePerson(api);
    await request(api.url)
      .post(apiPaths.askPasswordReset)
      .set({ 'X-Foreveil': '1', Host: 'evil.example.net' })
      .send({ email: person.email })
      .expect(202);
    const secret = await mailedSecret(api, 'password_reset', person.email);
    const stored = JSON.stringify([await api.db('mail_outbox').select(), await api.db('account_links').select()]);
    expect(stored).not.toContain(secret);
    expect(stored).not.toContain('evil.example.net');
  });
});

describe('the own password', () => {
  test('is changed with the present one, and the other sessions end', async () => {
    const person = await makePerson(api);
    const other = await again(person);
    expect(codeOf(await person.post(apiPaths.ownPassword, { current: 'not the present one', password: NEW }).expect(403))).toBe(
      'wrong_password',
    );
    await person.post(apiPaths.ownPassword, { current: PASSWORD, password: NEW }).expect(204);
    await person.get(apiPaths.me).expect(200);
    await other.get(apiPaths.me).expect(401);
    await attempt(person.email, NEW).expect(200);
    expect(await toldTo(api, person.email)).toEqual(['password_changed']);
  });

  test.each([
    ['fourteen chars', 'has fourteen characters only'],
    ['aaaaaaaaaaaaaaaaaaaa', 'repeats one'],
    ['abcdefghijklmnopqrst', 'is the alphabet'],
    ['qwertyuiopasdfghj', 'is a row of keys'],
    ['foreveil password 2026', 'says what everybody would try'],
    ['x'.repeat(257), 'is longer than anybody types'],
  ])('%s is refused: it %s', async (password) => {
    const person = await makePerson(api);
    const answer = await person.post(apiPaths.ownPassword, { current: PASSWORD, password }).expect(422);
    expect(answer.body).toMatchObject({ code: 'weak_password', errors: [{ pointer: '/password' }] });
    await attempt(person.email, PASSWORD).expect(200);
  });

  test('may not be little more than the own name or address', async () => {
    const person = await makePerson(api);
    await person.post(apiPaths.ownPassword, { current: PASSWORD, password: `${person.email}1` }).expect(422);
    await person.post(apiPaths.ownPassword, { current: PASSWORD, password: 'Ünïcødé ist auch gut' }).expect(204);
  });
});

describe('the own address', () => {
  test('changes when the new one is confirmed, and both are told', async () => {
    const person = await makePerson(api);
    const email = `new.${person.email}`;
    await person.post(apiPaths.ownEmail, { email, password: 'not the right one' }).expect(403);
    await person.post(apiPaths.ownEmail, { email, password: PASSWORD }).expect(202);
    expect(((await person.get(apiPaths.account)).body as Account).email).toBe(person.email);
    const secret = await mailedSecret(api, 'email_change', email);
    await anybody(apiPaths.confirmEmail, { secret }).expect(204);
    expect(((await person.get(apiPaths.account)).body as Account).email).toBe(email);
    await attempt(email, PASSWORD).expect(200);
    await attempt(person.email, PASSWORD).expect(401);
    await anybody(apiPaths.confirmEmail, { secret }).expect(410);
    expect(await toldTo(api, person.email)).toEqual(['email_change_asked', 'email_changed']);
    expect(await toldTo(api, email)).toEqual(['email_confirm', 'email_changed']);
  });

  test('cannot become that of another account, which only the reader of its mail learns', async () => {
    const [person, other] = [await makePerson(api), await makePerson(api)];
    await person.post(apiPaths.ownEmail, { email: other.email, password: PASSWORD }).expect(202);
    const secret = await mailedSecret(api, 'email_change', other.email);
    expect(codeOf(await anybody(apiPaths.confirmEmail, { secret }).expect(409))).toBe('email_taken');
  });

  test.each([
    'no address',
    'a@b',
    'two@example.org, three@example.org',
    'a@example.org\r\nBcc: b@example.org',
    '"quoted"@example.org',
    'a@127.0.0.1',
    '<a@example.org>',
  ])('cannot be %j', async (email) => {
    const person = await makePerson(api);
    const answer = await person.post(apiPaths.ownEmail, { email, password: PASSWORD }).expect(400);
    expect((answer.body as Problem).errors).toEqual(expect.arrayContaining([expect.objectContaining({ pointer: '/email' })]));
    await anybody(apiPaths.askPasswordReset, { email }).expect(400);
  });
});

describe('sessions', () => {
  test('are listed with their device and ended one by one, or all others at once', async () => {
    const person = await makePerson(api);
    const cookie = (
      await request(api.url)
        .post(apiPaths.signIn)
        .set({ 'X-Foreveil': '1', 'User-Agent': 'Phone of Mirka' })
        .send({ email: person.email, password: PASSWORD })
    )
      .get('Set-Cookie')![0]!
      .split(';')[0]!;
    const third = await again(person);
    const list = (await person.get(apiPaths.sessions)).body as Session[];
    expect(list).toHaveLength(3);
    expect(list.filter(({ current }) => current)).toHaveLength(1);
    const phone = list.find(({ device }) => device === 'Phone of Mirka')!;
    const stranger = await makePerson(api);
    await stranger.delete(apiPaths.session(phone.id)).expect(404);
    await person.delete(apiPaths.session(phone.id)).expect(204);
    await request(api.url).get(apiPaths.me).set('Cookie', cookie).expect(401);
    await third.get(apiPaths.me).expect(200);
    await person.delete(apiPaths.sessions).expect(204);
    await third.get(apiPaths.me).expect(401);
    await person.get(apiPaths.me).expect(200);
  });

  /** Lets the session's cookie be due for a new one, and asks. @returns the cookie that came, or the old one */
  async function turned(person: Person): Promise<Person> {
    await api
      .db('sessions')
      .where({ user_id: person.userId })
      .update({ rotated_at: api.db.raw(`now() - interval '1 hour'`) });
    const answer = await person.get(apiPaths.me).expect(200);
    const cookie = answer.get('Set-Cookie')?.[0]?.split(';')[0];
    return personWith(api, { ...person, cookie: cookie ?? person.cookie });
  }
  const timePasses = () =>
    api
      .db('sessions')
      .whereNotNull('confirmed_at')
      .update({ confirmed_at: api.db.raw(`now() - interval '2 minutes'`) });

  test('get a new cookie now and then; the former one is good until the new one was seen, and shortly after', async () => {
    const old = await makePerson(api);
    const fresh = await turned(old);
    expect(fresh.cookie).not.toBe(old.cookie);
    await timePasses();
    const lost = await old.get(apiPaths.me).expect(200); // the answer with the new cookie got lost: it comes again
    expect(lost.get('Set-Cookie')).toHaveLength(1);
    await fresh.get(apiPaths.me).expect(200);
    await old.get(apiPaths.me).expect(200); // on its way while the new one came into use
    expect((await fresh.get(apiPaths.me)).get('Set-Cookie')).toBeUndefined();
  });

  test('end for everybody when a cookie that is out of use is shown again', async () => {
    const stolen = await makePerson(api);
    const elsewhere = await again(stolen);
    const owner = await turned(stolen);
    await owner.get(apiPaths.me).expect(200);
    await timePasses();
    await stolen.get(apiPaths.me).expect(401);
    await owner.get(apiPaths.me).expect(401); // nobody knows which of the two was the thief
    await elsewhere.get(apiPaths.me).expect(200); // another session of the same person is not concerned
    expect(await toldTo(api, stolen.email)).toEqual(['session_replayed']);
    expect(await api.db('audit').where({ user_id: stolen.userId, action: 'session_replayed' })).toHaveLength(1);
  });

  test('are not disturbed by many requests at the moment of the change', async () => {
    const person = await makePerson(api);
    await api
      .db('sessions')
      .where({ user_id: person.userId })
      .update({ rotated_at: api.db.raw(`now() - interval '1 hour'`) });
    const answers = await Promise.all(Array.from({ length: 12 }, () => person.get(apiPaths.me)));
    expect(answers.map(({ status }) => status)).toEqual(Array(12).fill(200));
    const cookies = new Set(answers.flatMap((answer) => answer.get('Set-Cookie') ?? []).map((cookie) => cookie.split('.')[1]));
    for (const answer of answers)
      for (const cookie of answer.get('Set-Cookie') ?? [])
        await request(api.url).get(apiPaths.me).set('Cookie', cookie.split(';')[0]!).expect(200);
    expect(cookies.size).toBeGreaterThan(0);
  });
});

describe('access tokens', () => {
  const make = async (person: Person, body: object = { name: 'nightly', scope: 'write', days: 30 }) =>
    (await person.post(apiPaths.accessTokens, body).expect(201)).body as MadeAccessToken;
  const withToken = (token: string) => personWith(api, { role: 'outsider', userId: '', email: '', name: '', cookie: '', bearer: token });

  test('are shown once, kept as a hash, and do their person’s work without a cookie', async () => {
    const { lead, programmeId } = await makeTeam(api);
    const made = await make(lead);
    expect(made.token).toMatch(/^fvt_[\w-]{43}$/);
    const list = (await lead.get(apiPaths.accessTokens)).body as AccessToken[];
    expect(list).toEqual([expect.objectContaining({ id: made.id, name: 'nightly', scope: 'write', lastUsedAt: null })]);
    expect(JSON.stringify([list, await api.db('access_tokens').select()])).not.toContain(made.token);
    await withToken(made.token).post(apiPaths.targets(programmeId), { name: 'By script', kind: 'star' }).expect(201);
    expect(((await lead.get(apiPaths.accessTokens)).body as AccessToken[])[0]!.lastUsedAt).not.toBeNull();
    expect(await toldTo(api, lead.email)).toEqual(['token_made']);
  });

  test('do not reach the account, whatever their scope', async () => {
    const person = await makePerson(api);
    const script = await scriptOf(api, person, 'write');
    expect(codeOf(await script.post(apiPaths.ownPassword, { current: PASSWORD, password: NEW }).expect(403))).toBe('needs_session');
    expect(codeOf(await script.post(apiPaths.accessTokens, { name: 'more', scope: 'write', days: 366 }).expect(403))).toBe('needs_session');
  });

  test('stop at once when they are revoked, run out, or their person’s account is closed', async () => {
    const person = await makePerson(api);
    const [revoked, old, closed] = [await make(person), await make(person), await make(person)];
    await withToken(revoked.token).get(apiPaths.me).expect(200);
    await (await makePerson(api)).delete(apiPaths.accessToken(revoked.id)).expect(404);
    await person.delete(apiPaths.accessToken(revoked.id)).expect(204);
    await withToken(revoked.token).get(apiPaths.me).expect(401);
    await api
      .db('access_tokens')
      .where({ id: old.id })
      .update({ expires_at: api.db.raw(`now() - interval '1 second'`) });
    await withToken(old.token).get(apiPaths.me).expect(401);
    await api.db('users').where({ id: person.userId }).update({ active: false });
    await withToken(closed.token).get(apiPaths.me).expect(401);
  });

  test('that are none are refused, also when a good cookie comes along', async () => {
    const person = await makePerson(api);
    for (const authorization of ['Bearer fvt_nothing', 'Bearer ', 'Basic dXNlcjpwYXNz', 'Bearer', 'fvt_x']) {
      await person.get(apiPaths.me).set('Authorization', authorization).expect(401);
    }
  });

  test('refuse what cannot be: no name, no scope, no end', async () => {
    const person = await makePerson(api);
    for (const body of [
      { scope: 'read', days: 1 },
      { name: ' ', scope: 'read', days: 1 },
      { name: 'x', scope: 'all', days: 1 },
      { name: 'x', scope: 'read', days: 0 },
      { name: 'x', scope: 'read', days: 400 },
    ]) {
      await person.post(apiPaths.accessTokens, body).expect(400);
    }
  });
});

test('mail is chosen by kind, and turned off from the foot of a mail by who holds its link, no other', async () => {
  const [person, other] = [await makePerson(api), await makePerson(api)];
  const choices = async (of: Person) => (await of.get(apiPaths.mailChoices)).body as MailChoices;
  expect(await choices(person)).toMatchObject({ mention: 'at_once', decision: 'daily' });
  await person.put(apiPaths.mailChoices, { kind: 'mention', choice: 'daily' }).expect(200);
  await person.put(apiPaths.mailChoices, { kind: 'security', choice: 'never' }).expect(400);
  const secret = stopMailToken(api.config, person.userId, 'mention');
  await anybody(apiPaths.stopMail, { secret: secret.replace('mention', 'decision') }).expect(410);
  await anybody(apiPaths.stopMail, { secret: secret.replace(person.userId, other.userId) }).expect(410);
  await anybody(apiPaths.stopMail, { secret }).expect(204);
  expect(await choices(person)).toMatchObject({ mention: 'never', decision: 'daily' });
  expect(await choices(other)).toMatchObject({ mention: 'at_once' });
});
