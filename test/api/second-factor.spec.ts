import { apiPaths, type Account, type Problem, type RecoveryCodes, type SecondFactorOffer } from '@foreveil/shared';
import { Secret, TOTP, URI } from 'otpauth';
import request from 'supertest';
import { startApi, type Api } from '../support/api/api.js';
import { toldTo } from '../support/api/outbox.js';
import { PASSWORD, makePerson, type Person } from '../support/api/person.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

/** What the app on the phone shows, now or `steps` half minutes away. RFC 6238 with its usual parameters. */
const codeAt = (secret: string, steps = 0) =>
  new TOTP({ secret: Secret.fromBase32(secret), digits: 6, period: 30 }).generate({ timestamp: Date.now() + steps * 30_000 });

const enter = (person: Person, code?: string) =>
  request(api.url)
    .post(apiPaths.signIn)
    .set('X-Foreveil', '1')
    .send({ email: person.email, password: PASSWORD, ...(code === undefined ? {} : { code }) });
const refusal = async (person: Person, code?: string) => ((await enter(person, code)).body as Problem).code;

/** Lets time pass without waiting: the codes that were used no longer stand in the way. */
const forgetSteps = (person: Person) => api.db('second_factors').where({ user_id: person.userId }).update({ last_step: 0 });

async function protectedPerson(): Promise<{ person: Person; secret: string; codes: string[] }> {
  const person = await makePerson(api);
  const { secret } = (await person.post(apiPaths.secondFactor, { password: PASSWORD }).expect(201)).body as SecondFactorOffer;
  const { codes } = (await person.post(apiPaths.confirmSecondFactor, { code: codeAt(secret) }).expect(200)).body as RecoveryCodes;
  await forgetSteps(person);
  return { person, secret, codes };
}

test('is offered as text and as the address of a QR code, and counts only once a code was shown', async () => {
  const person = await makePerson(api);
  await person.post(apiPaths.secondFactor, { password: 'not the right one' }).expect(403);
  const { secret, uri } = (await person.post(apiPaths.secondFactor, { password: PASSWORD }).expect(201)).body as SecondFactorOffer;
  expect(URI.parse(uri)).toMatchObject({ issuer: 'Foreveil', label: person.email, digits: 6, period: 30 });
  expect((URI.parse(uri) as TOTP).secret.base32).toBe(secret);
  await enter(person).expect(200); // not confirmed: signing in is as before
  await person.post(apiPaths.confirmSecondFactor, { code: '000000' }).expect(401);
  expect((await person.get(apiPaths.account)).body as Account).toMatchObject({ secondFactor: { on: false } });
  await person.post(apiPaths.confirmSecondFactor, { code: codeAt(secret) }).expect(200);
  expect((await person.get(apiPaths.account)).body as Account).toMatchObject({ secondFactor: { on: true, recoveryCodesLeft: 10 } });
  await person.post(apiPaths.secondFactor, { password: PASSWORD }).expect(409); // on already
  expect(await toldTo(api, person.email)).toEqual(['second_factor_on']);
});

test('is asked for after the right password only', async () => {
  const { person, secret } = await protectedPerson();
  expect(await refusal(person)).toBe('second_factor_needed');
  const wrong = await request(api.url)
    .post(apiPaths.signIn)
    .set('X-Foreveil', '1')
    .send({ email: person.email, password: 'wrong', code: codeAt(secret) });
  expect((wrong.body as Problem).code).toBe('wrong_credentials');
  expect(await refusal(person, '123456')).toBe('wrong_code');
  await enter(person, codeAt(secret)).expect(200);
});

test('takes each code once, and those of the half minutes before and after', async () => {
  const { person, secret } = await protectedPerson();
  await enter(person, codeAt(secret, -1)).expect(200);
  const now = codeAt(secret);
  await enter(person, now).expect(200);
  expect(await refusal(person, now)).toBe('wrong_code'); // seen over a shoulder
  expect(await refusal(person, codeAt(secret, -1))).toBe('wrong_code'); // older than the last one that opened
  expect(await refusal(person, codeAt(secret, 5))).toBe('wrong_code');
  const [one, two] = await Promise.all([enter(person, codeAt(secret, 1)), enter(person, codeAt(secret, 1))]);
  expect([one.status, two.status].sort()).toEqual([200, 401]);
});

test('takes each recovery code once, however it is typed, and tells its person', async () => {
  const { person, codes } = await protectedPerson();
  expect(new Set(codes).size).toBe(10);
  await enter(person, codes[0]!.toUpperCase().replace('-', ' ')).expect(200);
  expect(await refusal(person, codes[0])).toBe('wrong_code');
  expect((await person.get(apiPaths.account)).body as Account).toMatchObject({ secondFactor: { recoveryCodesLeft: 9 } });
  const { codes: fresh } = (await person.post(apiPaths.recoveryCodes, { password: PASSWORD }).expect(200)).body as RecoveryCodes;
  expect(await refusal(person, codes[1])).toBe('wrong_code'); // the old ones are gone
  await enter(person, fresh[1]).expect(200);
  expect(await toldTo(api, person.email)).toEqual([
    'second_factor_on',
    'recovery_code_used',
    'recovery_codes_renewed',
    'recovery_code_used',
  ]);
});

test('shuts for a while after many wrong codes in a row, wherever they come from', async () => {
  const { person, secret } = await protectedPerson();
  for (let i = 0; i < 10; i++) expect(await refusal(person, '123456')).toBe('wrong_code');
  const shut = await enter(person, codeAt(secret)).expect(429);
  expect(Number(shut.headers['retry-after'])).toBe(900);
  await api.db('second_factors').where({ user_id: person.userId }).update({ blocked_until: api.db.fn.now() });
  await enter(person, codeAt(secret)).expect(200);
});

test('is stored so that a copy of the database makes no codes', async () => {
  const { person, secret, codes } = await protectedPerson();
  const stored = JSON.stringify([
    await api.db('second_factors').where({ user_id: person.userId }),
    await api.db('recovery_codes').where({ user_id: person.userId }),
  ]);
  for (const text of [secret, ...codes, ...codes.map((code) => code.replace('-', ''))]) expect(stored).not.toContain(text);
});

test('is turned off with the password', async () => {
  const { person } = await protectedPerson();
  await person.post(apiPaths.endSecondFactor, { password: 'not the right one' }).expect(403);
  expect(await refusal(person)).toBe('second_factor_needed');
  await person.post(apiPaths.endSecondFactor, { password: PASSWORD }).expect(204);
  await enter(person).expect(200);
});
