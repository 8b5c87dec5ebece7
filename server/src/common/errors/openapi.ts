import { ERROR_CODES } from '@foreveil/shared';
import type { OpenAPIObject } from '@nestjs/swagger';

type Schema = NonNullable<NonNullable<OpenAPIObject['components']>['schemas']>[string];

const text = { type: 'string' } as const;

const PROBLEM: Schema = {
  type: 'object',
  description: 'RFC 9457',
  required: ['type', 'title', 'status', 'detail', 'instance', 'code', 'traceId'],
  properties: {
    ...{ type: text, title: text, status: { type: 'integer' }, detail: text, instance: text, traceId: text },
    code: { type: 'string', enum: [...ERROR_CODES] },
    errors: { type: 'array', items: { type: 'object', properties: { pointer: text, detail: text } } },
    current: { description: 'the row as it is now, or the row that stands in the way' },
  },
};

const REFUSED = {
  description: 'Refused, or failed',
  content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
};

const METHODS = ['get', 'post', 'put', 'patch', 'delete'] as const;

/** Says of every operation that it may be answered by a problem. */
export function withProblems(document: OpenAPIObject): OpenAPIObject {
  for (const path of Object.values(document.paths)) {
    for (const method of METHODS) if (path[method]) path[method].responses['default'] = REFUSED;
  }
  const schemas = { ...document.components?.schemas, Problem: PROBLEM };
  return { ...document, components: { ...document.components, schemas } };
}
