import { useMemo, type PointerEvent } from 'react';
import type { CurveData } from './curve-data.js';
import type { DueLine, PlotFeature, Stave } from './plot-feature.js';
import { nearestIndex } from './pyramid.js';
import { layoutStaves, type PlacedMark } from './stave-layout.js';
import { DueLines, rowY, SpecialMark, STAVE_HEIGHT, StaveLabels, StaveMarks, STAVES_TOP, Unlabelled } from './stave-parts.js';
import { layerOf, valueDomain, type Base, type CurveMode } from './value-domain.js';
import { useView, type Range, type ViewStore } from './view.js';
import classes from './plot.module.css';

/** A press within this distance of a mark means it: marks are smaller than a finger. */
const HIT_PX = 12;

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
