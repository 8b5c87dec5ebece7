import type { PipeTransform } from '@nestjs/common';
import { notFound } from '../errors/domain-error.js';

/** A place in a list, 0 or more; anything else names nothing. */
export const indexParam: PipeTransform<string, number> = {
  transform(value) {
    if (!/^\d{1,9}$/.test(value)) throw notFound();
    return Number(value);
  },
};
