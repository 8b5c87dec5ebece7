import type { SpectrumDetail } from '@foreveil/shared';
import { looksLikeEmission } from '../../../lib/emission.js';

/** By its lines where they are known, else by the server's preview. */
export function isEmission({ preview }: SpectrumDetail, rows: { feature: { kind: 'dip' | 'peak' } }[]): boolean {
  if (rows.length > 0) return rows.filter((r) => r.feature.kind === 'peak').length > rows.length / 2;
  return preview !== null && looksLikeEmission(preview.low, preview.high);
}
