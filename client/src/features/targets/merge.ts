import type { NewTarget } from '@foreveil/shared';

export type TargetFacts = Required<NewTarget>;
export type FactName = keyof TargetFacts;
export const FACT_NAMES: readonly FactName[] = ['name', 'kind', 'raDeg', 'decDeg', 'notes'];

export const factsOf = ({ name, kind, raDeg, decDeg, notes }: TargetFacts): TargetFacts => ({ name, kind, raDeg, decDeg, notes });

export interface Merge {
  /** what both sides agree on or only one side changed */
  readonly settled: TargetFacts;
  /** fields that both sides changed, differently: a person chooses */
  readonly conflicts: readonly FactName[];
}

/** Three-way merge field by field: a field that only one side changed takes that side's value. `settled` holds theirs where in conflict. */
export function mergeFacts(base: TargetFacts, theirs: TargetFacts, mine: TargetFacts): Merge {
  const conflicts = FACT_NAMES.filter(
    (field) => mine[field] !== base[field] && theirs[field] !== base[field] && mine[field] !== theirs[field],
  );
  const settled = { ...theirs };
  for (const field of FACT_NAMES) if (theirs[field] === base[field]) Object.assign(settled, { [field]: mine[field] });
  return { settled, conflicts };
}

/** Only the fields that differ, for a request that changes nothing else. */
export function changed(from: TargetFacts, to: TargetFacts): Partial<NewTarget> {
  return Object.fromEntries(FACT_NAMES.filter((field) => from[field] !== to[field]).map((field) => [field, to[field]]));
}
