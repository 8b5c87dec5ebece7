import type { VelocityProfile } from '@foreveil/shared';

/** The set with the line added, or without it when it was in. */
export function toggled(chosen: ReadonlySet<string>, lineId: string): ReadonlySet<string> {
  const next = new Set(chosen);
  if (!next.delete(lineId)) next.add(lineId);
  return next;
}

/** Profiles of the lines that a person put into the stack, by wavelength; all when none was chosen. */
export const stackOf = (profiles: readonly VelocityProfile[], chosen: ReadonlySet<string>): readonly VelocityProfile[] =>
  chosen.size === 0 ? profiles : profiles.filter((p) => chosen.has(p.lineId)).sort((p, q) => p.restNm - q.restNm);
