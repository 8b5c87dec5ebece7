import { useMemo } from 'react';
import { MarkBody } from './Mark.js';
import type { CurveData } from './curve-data.js';
import type { DueLine, PlotFeature, Stave } from './plot-feature.js';
import { nearestIndex } from './pyramid.js';
import { layoutStaves, type PlacedMark, type StaveRow } from './stave-layout.js';
import { layerOf, valueDomain, type Base, type CurveMode } from './value-domain.js';
import { useView, type ViewStore } from './view.js';
import classes from './plot.module.css';

export const STAVE_HEIGHT = 24;
export const STAVES_TOP = 4;

interface Props {
  staves: readonly Stave[];
  /** ascending in wavelength */
  features: readonly PlotFeature[];
  due: readonly DueLine[];
  data: CurveData;
  view: ViewStore;
  mode: CurveMode;
  base: Base;
  selected: number | null;
  hovered: number | null;
  /** CSS px: of the staves, from the top of the staves to the bottom of the curve, and where the curve starts */
  width: number;
  height: number;
  curveTop: number;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
}

const rowY = (row: number) => STAVES_TOP + row * STAVE_HEIGHT + STAVE_HEIGHT / 2;

/** One staff per velocity system over the curve; a line sits on the staff of its system and a stem drops to its dip. */
export function Staves(props: Props) {
  const { staves, features, data, view, mode, base, selected, hovered, width, height, curveTop } = props;
  const range = useView(view);
  const rows = useMemo(() => layoutStaves(staves, features, range, width, selected), [staves, features, range, width, selected]);
  const stemEnd = useMemo(() => {
    const [low, high] = valueDomain(data, mode, base, range);
    const { curve, level } = layerOf(data, mode);
    return (f: PlotFeature) => {
      const i = nearestIndex(data.wavelength, f.wavelengthNm);
      const value = data.bad[i] ? (level?.[i] ?? high) : curve.values[i]!;
      const y = height - ((value - low) / (high - low)) * (height - curveTop);
      return Math.min(height, Math.max(curveTop, y) - 3);
    };
  }, [data, mode, base, range, height, curveTop]);

  return (
    <svg className={classes.staves} width={width} height={height} aria-hidden="true">
      {rows.map((row, i) => (
        <StaveLine key={row.stave.id} row={row} y={rowY(i)} width={width} />
      ))}
      {rows.map((row, i) => (
        <g key={row.stave.id}>
          {row.crowded && <Ticks row={row} y={rowY(i)} />}
          {row.marks
            .filter((m) => !row.crowded || m.feature.index === selected || m.feature.index === hovered)
            .map((mark) => (
              <StaveMark
                key={mark.feature.index}
                mark={mark}
                y={rowY(i)}
                stemEnd={stemEnd(mark.feature)}
                tone={mark.feature.index === selected ? 'selected' : mark.feature.index === hovered ? 'hovered' : 'plain'}
                onSelect={props.onSelect}
                onHover={props.onHover}
              />
            ))}
        </g>
      ))}
      <DueLines {...props} range={range} />
    </svg>
  );
}

function StaveLine({ row, y, width }: { row: StaveRow; y: number; width: number }) {
  return (
    <>
      <line x1={0} x2={width} y1={y} y2={y} stroke="var(--line)" />
      {row.unlabelled > 0 && (
        <text x={width - 2} y={y + 4} textAnchor="end" className={classes.quietHalo}>
          {row.crowded ? row.marks.length : `${row.unlabelled} more`}
        </text>
      )}
    </>
  );
}

function Ticks({ row, y }: { row: StaveRow; y: number }) {
  const path = row.marks.map(
    ({ x, feature }) => `M${x.toFixed(1)},${y - (feature.state === 'proposed' ? 3 : 6)}v${feature.state === 'proposed' ? 6 : 12}`,
  );
  return <path d={path.join('')} stroke={`var(--${row.stave.family})`} strokeWidth={1} />;
}

type Tone = 'plain' | 'hovered' | 'selected';

interface StaveMarkProps {
  mark: PlacedMark;
  y: number;
  stemEnd: number;
  tone: Tone;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
}

function StaveMark({ mark: { feature, x, labelled }, y, stemEnd, tone, onSelect, onHover }: StaveMarkProps) {
  const stem =
    tone === 'selected' ? { stroke: 'var(--ink)' } : { stroke: `var(--${feature.family})`, strokeOpacity: tone === 'hovered' ? 0.9 : 0.38 };
  const ground = tone === 'selected' ? 'var(--select)' : 'var(--ground)';
  return (
    <g
      transform={`translate(${x.toFixed(1)} 0)`}
      className={classes.staveMark}
      onClick={() => onSelect(feature.index)}
      onPointerEnter={() => onHover(feature.index)}
      onPointerLeave={() => onHover(null)}
    >
      <line x1={0} x2={0} y1={y + 6} y2={stemEnd} {...stem} strokeWidth={1} />
      <rect x={-11} y={y - 12} width={22} height={24} fill="transparent" />
      <circle cx={0} cy={y} r={7} fill={ground} />
      <MarkBody family={feature.family} state={feature.state} y={y} r={tone === 'plain' ? 4.6 : 5.4} />
      {(labelled || tone === 'hovered') && (
        <text x={10} y={y + 4} className={classes.halo} fontWeight={tone === 'plain' ? 420 : 600} style={{ stroke: ground }}>
          {feature.label}
        </text>
      )}
    </g>
  );
}

/** Lines that should show and do not: dashed on the staff, with the equivalent width that is due. */
function DueLines({ due, staves, range, width }: Props & { range: { fromNm: number; toNm: number } }) {
  return due
    .filter(({ nm }) => nm > range.fromNm && nm < range.toNm)
    .map(({ staveId, nm, label }) => {
      const row = staves.findIndex((s) => s.id === staveId);
      if (row < 0) return null;
      const x = ((nm - range.fromNm) / (range.toNm - range.fromNm)) * width;
      const y = rowY(row);
      const flip = x > width - 260;
      return (
        <g key={`${staveId} ${nm}`} transform={`translate(${x.toFixed(1)} 0)`}>
          <path d={`M0,${y - 6}v12`} stroke={`var(--${staves[row]!.family})`} strokeWidth={1.3} strokeDasharray="2 2" />
          <text x={flip ? -8 : 8} y={y + 4} textAnchor={flip ? 'end' : 'start'} className={classes.quietHalo}>
            {label}
          </text>
        </g>
      );
    });
}
