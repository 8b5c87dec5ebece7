import { NotFoundException } from '@nestjs/common';
import { MulterError } from 'multer';
import { DomainError } from './domain-error.js';
import { toDomainError } from './to-domain-error.js';

const coded = (code: string) => Object.assign(new Error('select secret from users'), { code });

const known: [string, unknown, string][] = [
  ['a refusal of ours', new DomainError('name_taken', 'Taken.'), 'name_taken'],
  ['a file that is too large', new MulterError('LIMIT_FILE_SIZE'), 'too_large'],
  ['a form with too much in it', new MulterError('LIMIT_PART_COUNT'), 'invalid_request'],
  ['an address that is none', new NotFoundException(), 'not_found'],
  ['a body that is too large', { status: 413, type: 'entity.too.large' }, 'too_large'],
  ['a body that is no JSON', { status: 400, type: 'entity.parse.failed' }, 'invalid_request'],
  ['a form that breaks off', new Error('Unexpected end of form'), 'invalid_request'],
  ['a statement that took too long', coded('57014'), 'unavailable'],
  ['a lock that did not come', coded('55P03'), 'unavailable'],
  ['a database that is going down', coded('57P01'), 'unavailable'],
  ['a database that is not there', coded('ECONNREFUSED'), 'unavailable'],
  ['a pool with no connection left', Object.assign(new Error('Timeout acquiring'), { name: 'KnexTimeoutError' }), 'unavailable'],
  ['text that cannot be stored', coded('22021'), 'invalid_request'],
];

test.each(known)('%s is %s', (_, error, code) => {
  expect(toDomainError(error)?.code).toBe(code);
  expect(toDomainError(error)?.message).not.toMatch(/select|entity/);
});

test.each([new TypeError('x of undefined'), coded('23505'), coded('42P01'), { status: 500 }, null, undefined, 'text'])(
  '%p is nothing that was expected',
  (error) => {
    expect(toDomainError(error)).toBeNull();
  },
);
