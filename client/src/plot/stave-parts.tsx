import { memo } from 'react';
import type { ReviewState } from '@foreveil/shared';
import { MarkBody } from './Mark.js';
import { crossPath, markPath, type MarkFamily } from './marks.js';
import type { DueLine, PlotFeature, Stave } from './plot-feature.js';
import { labelWidth, type PlacedMark, type StaveRow } from './stave-layout.js';
import type { Range } from './view.js';
import classes from './plot.module.css';

export const STAVE_HEIGHT = 24;
export const STAVES_TOP = 4;
const MARK_RADIUS = 4.6;

/** Middle of a staff, CSS px from the top. */
export const rowY = (row: number) => STAVES_TOP + row * STAVE_HEIGHT + STAVE_HEIGHT / 2;

/** How many lines of the staff carry no label. */
export function Unlabelled({ row, y, end }: { row: StaveRow; y: number; end: number }) {
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
export function StaveMarks({ row, y, stemEnd, special }: MarksProps) {
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

export function StaveLabels({ row, y, width, special }: { row: StaveRow; y: number; width: number; special: readonly (number | null)[] }) {
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
export function SpecialMark({ mark: { feature, x: place }, y, width, stemEnd, isSelected }: SpecialProps) {
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

interface DueProps {
  due: readonly DueLine[];
  staves: readonly Stave[];
  range: Range;
  width: number;
}

/** Lines that should show and do not: dashed on the staff, with the equivalent width that is due. */
export function DueLines({ due, staves, range, width }: DueProps) {
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
