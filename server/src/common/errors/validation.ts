import { ValidationPipe, type ValidationError } from '@nestjs/common';
import { plainToInstance, type ClassConstructor } from 'class-transformer';
import { validateSync } from 'class-validator';
import { DomainError } from './domain-error.js';

/** Types are strict and keys that the shape does not know are refused, so nobody sets a field that is not theirs to set. */
const STRICT = { whitelist: true, forbidNonWhitelisted: true, forbidUnknownValues: true } as const;

export const validationPipe = () => new ValidationPipe({ ...STRICT, transform: true, exceptionFactory: invalid });

/** Checks a value that did not come as a JSON body, with the same rules. @param under JSON pointer of the value, '/meta' */
export function checked<T extends object>(shape: ClassConstructor<T>, value: unknown, under: string): T {
  if (typeof value !== 'object' || value === null || Array.isArray(value)) {
    throw new DomainError('invalid_request', 'A JSON object is needed.', { errors: [{ pointer: under, detail: 'must be a JSON object' }] });
  }
  const instance = plainToInstance(shape, value);
  const faults = validateSync(instance, STRICT);
  if (faults.length) throw invalid(faults, under);
  return instance;
}

function invalid(faults: ValidationError[], under = ''): DomainError {
  const errors = faults.flatMap((fault) => pointed(fault, under));
  return new DomainError('invalid_request', errors.map((e) => e.detail).join('; '), { errors });
}

function pointed(fault: ValidationError, under: string): { pointer: string; detail: string }[] {
  const pointer = `${under}/${fault.property.replaceAll('~', '~0').replaceAll('/', '~1')}`;
  const own = Object.values(fault.constraints ?? {}).map((detail) => ({ pointer, detail }));
  return [...own, ...(fault.children ?? []).flatMap((child) => pointed(child, pointer))];
}
