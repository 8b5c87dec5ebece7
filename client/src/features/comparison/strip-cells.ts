import type { SpectrumSummary } from '@foreveil/shared';
import { lightCss, STRIP_CAP, visibility } from '../../plot/light.js';

export interface StripCell {
  readonly fromNm: number;
  readonly toNm: number;
  readonly colour: string;
  /** 0 black to 1 full light */
  readonly light: number;
}

/** Columns of a spectrum's preview as coloured cells of a drawing that can leave the screen as a file. */
export function stripCells({ fromNm, toNm, preview }: SpectrumSummary, scheme: 'light' | 'dark'): StripCell[] {
  if (!preview) return [];
  const step = (toNm - fromNm) / preview.low.length;
  return preview.low.map((low, i) => {
    const from = fromNm + i * step;
    const nm = from + step / 2;
    const light = low === null ? 0.5 : Math.max(0.06, Math.min(1, 2 * low - 1 > 0 ? 2 * low - 1 : 0.06));
    return { fromNm: from, toNm: from + step, colour: visibility(nm) > 0.3 ? lightCss(nm, STRIP_CAP[scheme]) : 'var(--hatch)', light };
  });
}
