import type { TargetKind } from '@foreveil/shared';
import { notFound } from '../../common/errors/domain-error.js';
import type { Scope } from '../../common/scope.js';
import type { Trx } from '../../database/transaction.js';
import { findTargetIdByName, insertTarget, targetExists } from './targets.repository.js';

/** Where a spectrum goes: to a target that exists, or to the one of this name, which is made when there is none. */
export type Destination =
  | { readonly targetId: string }
  | {
      readonly targetName: string;
      readonly kind: TargetKind;
      readonly raDeg: number | null;
      readonly decDeg: number | null;
      readonly notes?: string;
      readonly simulated?: boolean;
    };

/** @returns the id of the target. @throws not_found when the programme has no target of this id */
export async function settleTarget(trx: Trx, scope: Scope, destination: Destination, userId: string): Promise<string> {
  if ('targetId' in destination) {
    if (!(await targetExists(trx, scope, destination.targetId))) throw notFound();
    return destination.targetId;
  }
  const { targetName: name, ...facts } = destination;
  return (await findTargetIdByName(trx, scope, name)) ?? (await insertTarget(trx, scope, { ...facts, name, userId }));
}
