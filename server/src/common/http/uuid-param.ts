import { Param, type PipeTransform } from '@nestjs/common';
import { isUUID } from 'class-validator';
import { notFound } from '../errors/domain-error.js';

/** A path segment that is no UUID names nothing, so it is not found, like a UUID of nothing. */
const uuid: PipeTransform<string, string> = {
  transform(value) {
    if (!isUUID(value)) throw notFound();
    return value.toLowerCase();
  },
};

export const UuidParam = (name: string) => Param(name, uuid);
