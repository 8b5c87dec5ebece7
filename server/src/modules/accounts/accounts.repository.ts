import type { Knex } from 'knex';

export interface UserRow {
  readonly id: string;
  readonly email: string;
  readonly name: string;
  readonly password_hash: string;
}

export const findActiveUser = (db: Knex, email: string): Promise<UserRow | undefined> =>
  db('users').where({ email: email.toLowerCase(), active: true }).first('id', 'email', 'name', 'password_hash');

export async function insertUser(db: Knex, user: Omit<UserRow, 'id'>): Promise<string> {
  const [row] = await db('users')
    .insert({ ...user, email: user.email.toLowerCase() })
    .returning<{ id: string }[]>('id');
  return row!.id;
}

export const setPasswordHash = (db: Knex, id: string, hash: string) => db('users').where({ id }).update({ password_hash: hash });

export async function openSession(db: Knex, userId: string, hours: number): Promise<string> {
  await db('sessions').where({ user_id: userId }).whereRaw('expires_at < now()').delete();
  const [row] = await db('sessions')
    .insert({ user_id: userId, expires_at: db.raw(`now() + ? * interval '1 hour'`, [hours]) })
    .returning<{ id: string }[]>('id');
  return row!.id;
}

export const closeSession = (db: Knex, id: string) => db('sessions').where({ id }).delete();
