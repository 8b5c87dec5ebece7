import type { ReviewState } from '@foreveil/shared';
import { memo } from 'react';
import { crossPath, FAMILY_WORD, markPath, STATE_WORD, type MarkFamily } from './marks.js';

interface BodyProps {
  family: MarkFamily;
  state: ReviewState;
  /** centre, in the units of the surrounding SVG */
  x?: number;
  y?: number;
  r?: number;
}

/** A mark inside an SVG: the shape tells the family, the body the state (outline proposed, solid accepted, crossed rejected). */
export const MarkBody = memo(function MarkBody({ family, state, x = 0, y = 0, r = 5 }: BodyProps) {
  const colour = `var(--${family})`;
  const width = family === 'telluric' ? 1.1 : 1.4;
  const path = markPath(family, x, y, r);
  if (state === 'rejected')
    return (
      <>
        <path d={path} fill="none" stroke={colour} strokeWidth={width * 0.85} strokeLinejoin="round" />
        <path d={crossPath(x, y, r)} stroke={colour} strokeWidth={1.5} />
      </>
    );
  const fill = state === 'accepted' ? colour : 'var(--mark-bg, none)';
  return <path d={path} fill={fill} stroke={colour} strokeWidth={width} strokeLinejoin="round" />;
});

interface MarkProps {
  family: MarkFamily;
  state: ReviewState;
  /** side of the square it stands in, CSS px */
  size?: number;
  /** say family and state aloud; leave out where words beside it already do */
  spoken?: boolean;
}

/** A mark standing in text or in a table cell. */
export function Mark({ family, state, size = 16, spoken = false }: MarkProps) {
  const half = size / 2;
  const name = `${FAMILY_WORD[family]}, ${STATE_WORD[state]}`;
  return (
    <svg
      width={size}
      height={size}
      viewBox={`${-half} ${-half} ${size} ${size}`}
      style={{ verticalAlign: -3, flex: 'none' }}
      {...(spoken ? { role: 'img', 'aria-label': name } : { 'aria-hidden': true })}
    >
      <MarkBody family={family} state={state} r={size * 0.31} />
    </svg>
  );
}
