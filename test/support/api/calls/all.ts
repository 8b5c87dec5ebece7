import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { repoRoot } from '../../../../server/src/config/config.js';
import type { Route } from '../route-table.js';
import type { Call, Calls } from './call.js';

const FOLDER = 'test/support/api/calls';
const NOT_CALLS = new Set(['all.ts', 'call.ts']);

/** The calls of every file in this folder, so that a new module brings a file of its own. */
export async function allCalls(): Promise<ReadonlyMap<string, Call>> {
  const files = readdirSync(join(repoRoot, FOLDER)).filter((name) => name.endsWith('.ts') && !NOT_CALLS.has(name));
  const calls = new Map<string, Call>();
  for (const file of files) {
    const { calls: own } = (await import(`./${file.replace(/\.ts$/, '.js')}`)) as { calls: Calls };
    for (const [handler, call] of Object.entries(own)) {
      if (calls.has(handler)) throw new Error(`${handler} has two calls in ${FOLDER}`);
      calls.set(handler, call);
    }
  }
  return calls;
}

/** What is missing or too much, each as a sentence that says what to do. */
export function gaps(routes: readonly Route[], calls: ReadonlyMap<string, Call>): string[] {
  const handlers = new Set(routes.map(({ handler }) => handler));
  return [
    ...routes
      .filter(({ rule }) => !rule)
      .map(({ handler }) => `${handler} states no rule: give it @NeedsRole('reader') or another of common/auth/rules.ts`),
    ...routes
      .filter(({ handler }) => !calls.has(handler))
      .map(
        ({ handler, method, path }) =>
          `${method} ${path} has no call: add a line '${handler}': { success: 200 } with body, headers and params as call.ts says to a file in ${FOLDER}`,
      ),
    ...[...calls.keys()]
      .filter((handler) => !handlers.has(handler))
      .map((handler) => `${handler} is no route any more: take its line out of ${FOLDER}`),
    ...routes
      .filter(({ rule, path }) => rule?.who === 'member' && !path.startsWith('/api/programmes/:programmeId'))
      .map(({ handler }) => `${handler} asks for a member, so its path has to begin with programmes/:programmeId`),
  ];
}
