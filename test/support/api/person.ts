import type { MemberRole, TokenScope } from '@foreveil/shared';
import { randomBytes } from 'node:crypto';
import request, { type Test } from 'supertest';
import { hashPassword } from '../../../server/src/common/auth/password.js';
import { hashSecret } from '../../../server/src/common/auth/one-time.js';
import type { Api } from './api.js';

export const ROLES = ['anonymous', 'outsider', 'reader', 'analyst', 'reviewer', 'lead'] as const;
export type Role = (typeof ROLES)[number];
export const MEMBERS: readonly MemberRole[] = ['reader', 'analyst', 'reviewer', 'lead'];

export const PASSWORD = 'long enough to be one';

/** Someone who sends requests: signed in, unless anonymous, and from our own pages. */
export interface Person {
  readonly role: Role;
  readonly userId: string;
  readonly email: string;
  readonly name: string;
  readonly cookie: string;
  /** of a script, instead of a cookie */
  readonly bearer?: string;
  get(path: string): Test;
  post(path: string, body?: object, headers?: Record<string, string>): Test;
  patch(path: string, body?: object, headers?: Record<string, string>): Test;
  put(path: string, body?: object, headers?: Record<string, string>): Test;
  delete(path: string, body?: object, headers?: Record<string, string>): Test;
}

/** A programme with one person in each role, an outsider, and someone who is not signed in. */
export interface Team extends Record<Role, Person> {
  readonly programmeId: string;
}

export async function makeTeam(api: Api): Promise<Team> {
  const [outsider, reader, analyst, reviewer, lead] = await Promise.all(ROLES.slice(1).map((role) => makePerson(api, role)));
  const [programme] = await api
    .db('programmes')
    .insert({ name: `Programme of ${lead!.name}`, created_by: lead!.userId })
    .returning<{ id: string }[]>('id');
  const programmeId = programme!.id;
  for (const { userId, role } of [reader!, analyst!, reviewer!, lead!]) {
    await api.db('memberships').insert({ programme_id: programmeId, user_id: userId, role });
  }
  const anonymous = personWith(api, { role: 'anonymous', userId: '', email: '', name: '', cookie: '' });
  return { programmeId, anonymous, outsider: outsider!, reader: reader!, analyst: analyst!, reviewer: reviewer!, lead: lead! };
}

/** A new account, signed in through the front door. */
export async function makePerson(api: Api, role: Role = 'outsider'): Promise<Person> {
  const name = `${role} ${randomBytes(4).toString('hex')}`;
  const email = `${name.replace(' ', '.')}@example.org`;
  const [row] = await api
    .db('users')
    .insert({ email, name, password_hash: await hashPassword(PASSWORD, api.config) })
    .returning<{ id: string }[]>('id');
  return personWith(api, { role, userId: row!.id, email, name, cookie: await signIn(api, email) });
}

/** A script of a person, with an access token of theirs. */
export async function scriptOf(api: Api, { userId, role, email, name }: Person, scope: TokenScope): Promise<Person> {
  const bearer = `fvt_${randomBytes(32).toString('base64url')}`;
  const row = { user_id: userId, name: 'script', scope, secret_hash: hashSecret(bearer) };
  await api.db('access_tokens').insert({ ...row, expires_at: new Date(Date.now() + 86_400_000) });
  return personWith(api, { role, userId, email, name, cookie: '', bearer });
}

/** @returns the session cookie, 'name=value' */
export async function signIn(api: Api, email: string, password = PASSWORD): Promise<string> {
  const answer = await request(api.url).post('/api/auth/sign-in').set('X-Foreveil', '1').send({ email, password }).expect(200);
  return answer.get('Set-Cookie')![0]!.split(';')[0]!;
}

type Facts = Pick<Person, 'role' | 'userId' | 'email' | 'name' | 'cookie' | 'bearer'>;

/** What shows who a person is. */
export const credentialsOf = ({ cookie, bearer }: Pick<Person, 'cookie' | 'bearer'>): Record<string, string> => ({
  ...(cookie ? { Cookie: cookie } : {}),
  ...(bearer ? { Authorization: `Bearer ${bearer}` } : {}),
});

export function personWith(api: Api, facts: Facts): Person {
  const dressed = (test: Test, headers: Record<string, string> = {}): Test => {
    if (!facts.bearer) void test.set('X-Foreveil', '1');
    return test.set(credentialsOf(facts)).set(headers);
  };
  return {
    ...facts,
    get: (path) => dressed(request(api.url).get(path)),
    post: (path, body, headers) => dressed(request(api.url).post(path), headers).send(body),
    patch: (path, body, headers) => dressed(request(api.url).patch(path), headers).send(body),
    put: (path, body, headers) => dressed(request(api.url).put(path), headers).send(body),
    delete: (path, body, headers) => dressed(request(api.url).delete(path), headers).send(body),
  };
}
