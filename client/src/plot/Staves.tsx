import { memo, useMemo, type PointerEvent } from 'react';
import type { ReviewState } from '@foreveil/shared';
import { MarkBody } from './Mark.js';
import type { CurveData } from './curve-data.js';
import { crossPath, markPath, type MarkFamily } from './marks.js';
import type { DueLine, PlotFeature, Stave } from './plot-feature.js';
import { nearestIndex } from './pyramid.js';
import { labelWidth, layoutStaves, type PlacedMark, type StaveRow } from './stave-layout.js';
import { layerOf, valueDomain, type Base, type CurveMode } from './value-domain.js';
import { useView, type Range, type ViewStore } from './view.js';
import classes from './plot.module.css';

export const STAVE_HEIGHT = 24;
export const STAVES_TOP = 4;
/** A press within this distance of a mark means it: marks are smaller than a finger. */
const HIT_PX = 12;
const MARK_RADIUS = 4.6;

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
  /** how far the count of unlabelled lines may reach into the page's margin, CSS px */
  margin: number;
  onSelect: (index: number) => void;
  onHover: (index: number | null) => void;
}

const rowY = (row: number) => STAVES_TOP + row * STAVE_HEIGHT + STAVE_HEIGHT / 2;

/** One staff per velocity system over the curve; a line sits on the staff of its system and a stem drops to its dip. */
export function Staves(props: Props) {
  const { staves, features, view, selected, hovered, width, height, margin, onSelect, onHover } = props;
  const range = useView(view);
  const rows = useMemo(() => layoutStaves(staves, features, range, width, selected), [staves, features, range, width, selected]);
  const stemEnd = useStemEnd(props, range);

  /** The mark under the pointer: one listener for all of them, because there may be hundreds. */
  const at = (event: PointerEvent<SVGRectElement>): number | null => {
    const box = event.currentTarget.getBoundingClientRect();
    const row = rows[Math.floor((event.clientY - box.top) / STAVE_HEIGHT)];
    const x = event.clientX - box.left;
    const nearest = row?.marks.reduce<PlacedMark | null>((best, m) => (best && Math.abs(best.x - x) <= Math.abs(m.x - x) ? best : m), null);
    return nearest && Math.abs(nearest.x - x) <= HIT_PX ? nearest.feature.index : null;
  };
  const press = (event: PointerEvent<SVGRectElement>) => {
    const index = at(event);
    if (index !== null) onSelect(index);
  };

  return (
    <svg className={classes.staves} width={width} height={height} aria-hidden="true">
      {rows.map((row, i) => (
        <line key={row.stave.id} x1={0} x2={width} y1={rowY(i)} y2={rowY(i)} stroke="var(--line)" />
      ))}
      {rows.map((row, i) => (
        <StaveMarks key={row.stave.id} row={row} y={rowY(i)} stemEnd={stemEnd} special={[selected, hovered]} />
      ))}
      {rows.map((row, i) => (
        <g key={row.stave.id}>
          <StaveLabels row={row} y={rowY(i)} width={width} special={[selected, hovered]} />
          <Unlabelled row={row} y={rowY(i)} end={width + margin} />
        </g>
      ))}
      <rect
        className={classes.hit}
        y={STAVES_TOP}
        width={width}
        height={staves.length * STAVE_HEIGHT}
        style={{ cursor: hovered === null ? undefined : 'pointer' }}
        onPointerMove={(event) => onHover(at(event))}
        onPointerLeave={() => onHover(null)}
        onPointerDown={press}
      />
      {rows.map((row, i) =>
        row.marks
          .filter(({ feature }) => feature.index === selected || feature.index === hovered)
          .sort((a) => (a.feature.index === selected ? 1 : -1))
          .map((mark) => (
            <SpecialMark
              key={mark.feature.index}
              mark={mark}
              y={rowY(i)}
              width={width}
              stemEnd={stemEnd(mark.feature)}
              isSelected={mark.feature.index === selected}
            />
          )),
      )}
      <DueLines {...props} range={range} />
    </svg>
  );
}

/** Where the stem of a feature meets the curve. */
function useStemEnd({ data, mode, base, height, curveTop }: Props, range: Range): (f: PlotFeature) => number {
  return useMemo(() => {
    const [low, high] = valueDomain(data, mode, base, range);
    const { curve, level } = layerOf(data, mode);
    return (f: PlotFeature) => {
      const i = nearestIndex(data.wavelength, f.wavelengthNm);
      const value = data.bad[i] ? (level?.[i] ?? high) : curve.values[i]!;
      const y = height - ((value - low) / (high - low)) * (height - curveTop);
      return Math.min(height, Math.max(curveTop, y) - 3);
    };
  }, [data, mode, base, range, height, curveTop]);
}

/** How many lines of the staff carry no label. */
function Unlabelled({ row, y, end }: { row: StaveRow; y: number; end: number }) {
  if (row.unlabelled === 0) return null;
  return (
    <text x={end} y={y + 4} textAnchor="end" className={classes.quietHalo}>
      +{row.unlabelled}
      <title>{`${row.unlabelled} more without a label`}</title>
    </text>
  );
}

const px = (x: number) => Math.round(x * 10) / 10;

/** All marks of a state and family as one path. */
function bodies(marks: readonly PlacedMark[], family: MarkFamily, state: ReviewState, y: number): string {
  return marks
    .filter((m) => m.feature.state === state && m.feature.family === family)
    .map((m) => markPath(family, px(m.x), y, MARK_RADIUS))
    .join('');
}

interface MarksProps {
  row: StaveRow;
  y: number;
  stemEnd: (f: PlotFeature) => number;
  /** selected and hovered, which are drawn apart */
  special: readonly (number | null)[];
}

/** Stems, marks and ticks of one staff: a handful of paths however many lines there are. */
function StaveMarks({ row, y, stemEnd, special }: MarksProps) {
  const plain = row.marks.filter((m) => !special.includes(m.feature.index));
  const marks = plain.filter((m) => m.standing !== 'tick');
  const ticks = plain.filter((m) => m.standing === 'tick');
  const stems = marks.map((m) => `M${px(m.x)},${y + 6}V${px(stemEnd(m.feature))}`).join('');
  const halos = marks.map((m) => markPath('stellar', px(m.x), y, 7)).join('');
  const colour = `var(--${row.stave.family})`;
  const families = [...new Set(marks.map((m) => m.feature.family))];
  const rejected = marks.filter((m) => m.feature.state === 'rejected');
  return (
    <g>
      {ticks.length > 0 && <path d={ticks.map((m) => `M${px(m.x)},${y - 5}v10`).join('')} stroke={colour} strokeWidth={1} />}
      {stems && <path d={stems} stroke={colour} strokeOpacity={0.38} strokeWidth={1} />}
      {halos && <path d={halos} fill="var(--ground)" />}
      {families.map((family) => {
        const width = family === 'telluric' ? 1.1 : 1.4;
        const stroke = `var(--${family})`;
        return (
          <g key={family} strokeLinejoin="round" stroke={stroke} strokeWidth={width}>
            <path d={bodies(marks, family, 'proposed', y) + bodies(marks, family, 'rejected', y)} fill="var(--mark-bg, none)" />
            <path d={bodies(marks, family, 'accepted', y)} fill={stroke} />
            <path
              d={rejected
                .filter((m) => m.feature.family === family)
                .map((m) => crossPath(px(m.x), y, MARK_RADIUS))
                .join('')}
            />
          </g>
        );
      })}
    </g>
  );
}

function StaveLabels({ row, y, width, special }: { row: StaveRow; y: number; width: number; special: readonly (number | null)[] }) {
  return row.marks
    .filter((m) => m.standing === 'labelled' && !special.includes(m.feature.index))
    .map(({ feature, x }) => <Label key={feature.index} text={feature.label} x={px(x)} y={y} width={width} />);
}

interface LabelProps {
  text: string;
  x: number;
  y: number;
  width: number;
  strong?: boolean;
  ground?: string;
}

/** Beside its mark; on the other side where it would run over the end of the staff. */
const Label = memo(function Label({ text, x, y, width, strong = false, ground = 'var(--ground)' }: LabelProps) {
  const flips = x + 10 + labelWidth(text) > width;
  return (
    <text
      x={flips ? x - 10 : x + 10}
      y={y + 4}
      textAnchor={flips ? 'end' : 'start'}
      className={classes.halo}
      fontWeight={strong ? 600 : 420}
      stroke={ground}
    >
      {text}
    </text>
  );
});

interface SpecialProps {
  mark: PlacedMark;
  y: number;
  width: number;
  stemEnd: number;
  isSelected: boolean;
}

/** The selected line, or the one the pointer is on: larger, its label always there, its stem strong. */
function SpecialMark({ mark: { feature, x: place }, y, width, stemEnd, isSelected }: SpecialProps) {
  const x = px(place);
  const ground = isSelected ? 'var(--select)' : 'var(--hover)';
  return (
    <g>
      <line x1={x} x2={x} y1={y + 6} y2={px(stemEnd)} stroke={isSelected ? 'var(--ink)' : `var(--${feature.family})`} />
      <circle cx={x} cy={y} r={7} fill={ground} />
      <Label text={feature.label} x={x} y={y} width={width} strong ground={ground} />
      <MarkBody family={feature.family} state={feature.state} x={x} y={y} r={5.4} />
    </g>
  );
}

/** Lines that should show and do not: dashed on the staff, with the equivalent width that is due. */
function DueLines({ due, staves, range, width }: Props & { range: Range }) {
  return due
    .filter(({ nm }) => nm > range.fromNm && nm < range.toNm)
    .map(({ staveId, nm, label }) => {
      const row = staves.findIndex((s) => s.id === staveId);
      if (row < 0) return null;
      const x = px(((nm - range.fromNm) / (range.toNm - range.fromNm)) * width);
      const y = rowY(row);
      const flips = x + labelWidth(label) > width;
      return (
        <g key={`${staveId} ${nm}`}>
          <path d={`M${x},${y - 6}v12`} stroke={`var(--${staves[row]!.family})`} strokeWidth={1.3} strokeDasharray="2 2" />
          <text x={flips ? x - 8 : x + 8} y={y + 4} textAnchor={flips ? 'end' : 'start'} className={classes.quietHalo}>
            {label}
          </text>
        </g>
      );
    });
}
