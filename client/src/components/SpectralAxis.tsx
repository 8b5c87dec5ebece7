import { axisTicks } from '../plot/axis-ticks.js';
import type { WavelengthDisplay } from '../lib/wavelength.js';
import classes from './components.module.css';
import { placeOf, type AxisPiece } from './spectral-axis.js';

interface Props {
  axis: readonly AxisPiece[];
  display: WavelengthDisplay;
}

const at = (fraction: number) => `${(fraction * 100).toFixed(3)}%`;
/** Room that a tick label asks for, as a share of the axis. */
const LABEL_ROOM = 0.08;

/** Tick labels over a column of strips. */
export function SpectralAxis({ axis, display }: Props) {
  return (
    <div className={classes.axis}>
      {axis.map((piece, p) => {
        const ticks = axisTicks(piece.fromNm, piece.toNm, display, Math.max(2, Math.floor((piece.end - piece.start) / LABEL_ROOM)));
        return ticks.map(({ nm, label }, t) => (
          <span key={nm} style={{ left: at(placeOf(nm, axis) ?? piece.start) }}>
            {label}
            {p === 0 && t === 0 && <i>{display.unitLabel}</i>}
          </span>
        ));
      })}
      <Folds axis={axis} />
    </div>
  );
}

/** The slanted pairs where the axis leaves out what nobody observed. */
export function Folds({ axis }: { axis: readonly AxisPiece[] }) {
  return axis.slice(1).map((piece, i) => (
    <svg
      key={piece.start}
      aria-hidden="true"
      viewBox="0 0 12 24"
      className={classes.fold}
      style={{ left: at(((axis[i]?.end ?? 0) + piece.start) / 2) }}
    >
      <path d="M1,24L5,0M7,24L11,0" />
    </svg>
  ));
}
