import type { Knex } from 'knex';

export interface UserRow {
  readonly id: string;
  readonly email: string;
  readonly name: string;
  readonly password_hash: string;
  readonly administrator: boolean;
}

const COLUMNS = ['id', 'email', 'name', 'password_hash', 'administrator'] as const;

export const findActiveUser = (db: Knex, email: string): Promise<UserRow | undefined> =>
  db('users')
    .where({ email: email.toLowerCase(), active: true })
    .first(...COLUMNS);

export const findUserById = (db: Knex, id: string): Promise<UserRow | undefined> =>
  db('users')
    .where({ id, active: true })
    .first(...COLUMNS);

export const setPasswordHash = (db: Knex, id: string, hash: string) => db('users').where({ id }).update({ password_hash: hash });

export async function openSession(db: Knex, userId: string, device: string, hours: number): Promise<string> {
  await db('sessions').where({ user_id: userId }).whereRaw('expires_at < now()').delete();
  const [row] = await db('sessions')
    .insert({ user_id: userId, device: device.slice(0, 200), expires_at: db.raw(`now() + ? * interval '1 hour'`, [hours]) })
    .returning<{ id: string }[]>('id');
  return row!.id;
}
