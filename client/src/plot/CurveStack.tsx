import { useElementSize } from '@mantine/hooks';
import { useMemo } from 'react';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import { AXIS_HEIGHT, WavelengthAxis } from './WavelengthAxis.js';
import { Curve } from './Curve.js';
import { Residual, RESIDUAL_BAND, RESIDUAL_LABELS } from './Residual.js';
import { StaveHeads } from './StaveHeads.js';
import { Staves } from './Staves.js';
import { STAVE_HEIGHT, STAVES_TOP } from './stave-parts.js';
import type { CurveData } from './curve-data.js';
import { useCursor, type CursorStore } from './cursor.js';
import { TOP_ROOM } from './curve-options.js';
import { FILL_CAP, lightCss, visibility } from './light.js';
import { usePalette } from './palette.js';
import type { DueLine, PlotFeature, Stave } from './plot-feature.js';
import { scaledUnit } from './value-axis.js';
import type { Base, CurveMode } from './value-domain.js';
import { Stretches, type Stretch } from './Stretches.js';
import { useView, type Range, type ViewStore } from './view.js';
import classes from './plot.module.css';

export interface CurveStackProps {
  data: CurveData;
  staves: readonly Stave[];
  /** ascending in wavelength */
  features: readonly PlotFeature[];
  due: readonly DueLine[];
  view: ViewStore;
  cursor: CursorStore;
  display: WavelengthDisplay;
  mode: CurveMode;
  base: Base;
  emission: boolean;
  /** of the flux, typeset */
  fluxUnit: string;
  selected: number | null;
  hovered: number | null;
  alone: string | null;
  legend: boolean;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
  onAlone: (staveId: string | null) => void;
  onPick: (nm: number) => void;
  /** a drag over a stretch; true when it was taken, else it zooms */
  onDrag?: (range: Range) => boolean;
  stretches?: readonly Stretch[];
}

const NARROW_PX = 600;
/** A picture with less height than this under its staves does without the residual. */
const SHORT_PX = 130;

/** Staves, curve, residual and axis on one abscissa that never moves. */
export function CurveStack(props: CurveStackProps) {
  const { ref, width, height } = useElementSize<HTMLDivElement>();
  const { data, staves, features, view, cursor, display, mode, base, emission, selected, hovered } = props;
  const narrow = width < NARROW_PX;
  const gutter = narrow ? 44 : 112;
  const plotWidth = Math.max(0, Math.floor(width - gutter));
  const hasResidual = data.fitted !== null && data.sigma !== null && height > SHORT_PX + staves.length * STAVE_HEIGHT;
  const residualHeight = hasResidual ? (narrow ? 40 : 54) : 0;
  const curveTop = STAVES_TOP + staves.length * STAVE_HEIGHT + 4;
  const curveBottom = Math.floor(height - AXIS_HEIGHT - residualHeight - (hasResidual ? 8 : 0));
  const curveHeight = curveBottom - curveTop;
  const chosen = useMemo(() => features.find((f) => f.index === selected) ?? null, [features, selected]);
  const preview = useMemo(() => features.find((f) => f.index === hovered && f.index !== selected) ?? null, [features, hovered, selected]);
  const unit = mode === 'flux' || !data.fitted ? scaledUnit(props.fluxUnit, data.fluxExponent) : 'flux / continuum';

  return (
    <div ref={ref} className={classes.stack}>
      {plotWidth > 60 && curveHeight > 40 && (
        <>
          {hasResidual && <NoiseBand left={gutter} width={plotWidth} top={curveBottom + 8} height={residualHeight} />}
          {preview && (
            <Band feature={preview} view={view} left={gutter} width={plotWidth} height={height - AXIS_HEIGHT} colour="var(--hover)" />
          )}
          {chosen && (
            <Band feature={chosen} view={view} left={gutter} width={plotWidth} height={height - AXIS_HEIGHT} colour="var(--select)" />
          )}
          <StaveHeadsColumn {...props} short={narrow} width={gutter} />
          <div style={{ position: 'absolute', left: gutter, top: 0 }}>
            <Staves {...props} width={plotWidth} height={curveBottom} curveTop={curveTop} margin={narrow ? 14 : 22} />
          </div>
          <div className={classes.curve} style={{ top: curveTop - TOP_ROOM }}>
            <Curve
              {...{ data, features, view, cursor, mode, base, emission, gutter }}
              width={plotWidth + gutter}
              height={curveHeight + TOP_ROOM}
              onPick={props.onPick}
              onDrag={props.onDrag}
            />
          </div>
          {!narrow && (
            <div className={classes.gutterLabel} style={{ top: curveTop + curveHeight / 2 }}>
              {unit}
            </div>
          )}
          {hasResidual && (
            <ResidualRow {...props} gutter={gutter} narrow={narrow} width={plotWidth} top={curveBottom + 8} height={residualHeight} />
          )}
          <div style={{ position: 'absolute', left: gutter, bottom: 0 }}>
            <WavelengthAxis view={view} width={plotWidth} display={display} />
          </div>
          <div
            className={classes.gutterTick}
            style={{ left: 0, width: narrow ? 40 : gutter - 12, bottom: -4, textAlign: narrow ? 'left' : 'right' }}
          >
            {narrow ? display.unitLabel : display.shortLabel}
          </div>
          {props.stretches && (
            <Stretches stretches={props.stretches} view={view} left={gutter} width={plotWidth} height={height - AXIS_HEIGHT} />
          )}
          <Hair {...props} left={gutter} width={plotWidth} height={height - AXIS_HEIGHT} />
          {props.legend && !narrow && (
            <Legend {...props} style={emission ? { right: 12, top: curveTop + 6 } : { left: gutter + 12, top: curveBottom - 24 }} />
          )}
        </>
      )}
    </div>
  );
}

function StaveHeadsColumn({ staves, alone, onAlone, short, width }: CurveStackProps & { short: boolean; width: number }) {
  return (
    <div className={classes.heads} style={{ width }}>
      <StaveHeads staves={staves} alone={alone} short={short} onAlone={onAlone} />
    </div>
  );
}

interface BandProps {
  feature: PlotFeature;
  view: ViewStore;
  left: number;
  width: number;
  height: number;
  colour: string;
}

/** The stretch of a chosen or previewed feature, behind everything. */
function Band({ feature, view, left, width, height, colour }: BandProps) {
  const { fromNm, toNm } = useView(view);
  const pxPerNm = width / (toNm - fromNm);
  const half = Math.min(width / 4, Math.max(11, 0.8 * feature.fwhmNm * pxPerNm));
  const x = (feature.wavelengthNm - fromNm) * pxPerNm;
  const [from, to] = [Math.max(0, x - half), Math.min(width, x + half)];
  if (to <= from) return null;
  return <div className={classes.band} style={{ left: left + from, width: to - from, height, background: colour }} />;
}

/** The stretch that holds 95 % of pure noise, behind the chosen feature. */
function NoiseBand({ left, width, top, height }: { left: number; width: number; top: number; height: number }) {
  const style = { left, width, top: top + RESIDUAL_BAND.from * height, height: RESIDUAL_BAND.height * height, background: 'var(--sink)' };
  return <div className={classes.band} style={style} />;
}

/** Where the data cursor is. */
function Hair({ data, view, cursor, left, width, height }: CurveStackProps & { left: number; width: number; height: number }) {
  const { fromNm, toNm } = useView(view);
  const { sample } = useCursor(cursor);
  if (sample === null) return null;
  const x = ((data.wavelength[sample]! - fromNm) / (toNm - fromNm)) * width;
  if (x < 0 || x > width) return null;
  return <div className={classes.hair} style={{ left: left + x, height }} />;
}

interface ResidualRowProps {
  gutter: number;
  narrow: boolean;
  width: number;
  top: number;
  height: number;
}

function ResidualRow({ data, view, gutter, narrow, width, top, height }: CurveStackProps & ResidualRowProps) {
  return (
    <>
      <div style={{ position: 'absolute', left: gutter, top }}>
        <Residual data={data} view={view} width={width} height={height} />
      </div>
      {!narrow && (
        <div className={classes.gutterLabel} style={{ top: top + height / 2 }}>
          residual, σ
        </div>
      )}
      {RESIDUAL_LABELS.map(({ label, at }) => (
        <div
          key={label}
          className={classes.gutterTick}
          style={{ right: `calc(100% - ${gutter - (narrow ? 6 : 12)}px)`, top: top + at * height }}
        >
          {label}
        </div>
      ))}
    </>
  );
}

/** How the curve is drawn. */
function Legend({ data, emission, view, style }: CurveStackProps & { style: React.CSSProperties }) {
  const palette = usePalette();
  const { fromNm, toNm } = view.get();
  const middle = (fromNm + toNm) / 2;
  const light = visibility(middle) > 0.05 ? lightCss(middle, FILL_CAP[palette.scheme]) : palette.hatch;
  const line = (path: string, stroke: string, width: number, dash?: string) => (
    <svg width={20} height={10} aria-hidden="true">
      <path d={path} fill="none" stroke={stroke} strokeWidth={width} strokeDasharray={dash} />
    </svg>
  );
  return (
    <div className={classes.legend} style={style}>
      <span>{line('M0,8h6v-4h6v4h6', 'var(--curve)', 1.15)}data, a step a pixel</span>
      {data.fitted && (
        <>
          <span>{line('M0,5h20', 'var(--cont)', 1.3, '7 4')}continuum</span>
          <span>{line('M0,5h20', 'var(--interstellar)', 1.7)}fit, in its family’s colour</span>
          <span>
            <svg width={14} height={10} aria-hidden="true">
              <rect x={0.4} y={0.4} width={13.2} height={9.2} fill={light} stroke="var(--curve)" strokeWidth={0.8} />
            </svg>
            {emission ? 'light given' : 'light taken'}
          </span>
        </>
      )}
    </div>
  );
}
