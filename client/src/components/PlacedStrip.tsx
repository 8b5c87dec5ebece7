import type { SpectrumSummary } from '@foreveil/shared';
import { looksLikeEmission } from '../lib/emission.js';
import { LightStrip } from '../plot/LightStrip.js';
import classes from './components.module.css';
import { placeOf, type AxisPiece } from './spectral-axis.js';

interface Props {
  spectrum: Pick<SpectrumSummary, 'fromNm' | 'toNm' | 'preview' | 'label'>;
  axis: readonly AxisPiece[];
  height: number;
  top?: number;
  /** leave empty where the words beside it name the spectrum */
  label?: string;
}

/** A light strip at its place on a shared axis. Without a preview (nothing usable, or not yet) an outline keeps the place. */
export function PlacedStrip({ spectrum: { fromNm, toNm, preview }, axis, height, top = 0, label = '' }: Props) {
  const start = placeOf(fromNm, axis) ?? 0;
  const end = placeOf(toNm, axis) ?? start;
  const style = { left: `${start * 100}%`, width: `${(end - start) * 100}%`, top, height };
  return (
    <div className={classes.placed} style={style} data-ghost={!preview || undefined}>
      {preview && (
        <LightStrip
          wavelengthFromNm={fromNm}
          wavelengthToNm={toNm}
          low={preview.low}
          high={preview.high}
          height={height}
          emission={looksLikeEmission(preview.low, preview.high)}
          label={label}
        />
      )}
    </div>
  );
}
