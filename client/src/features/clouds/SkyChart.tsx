import type { CloudSightline } from '@foreveil/shared';
import { fixed, signed } from '../../lib/number.js';
import classes from './clouds.module.css';
import { layOutSky } from './sky.js';

const FRAME = { left: 56, right: 348, top: 10, bottom: 230 };

/** Where the sightlines stand on the sky; what has no position is listed beside it. */
export function SkyChart({ sightlines }: { sightlines: readonly CloudSightline[] }) {
  const sky = layOutSky(sightlines, FRAME);
  const lost = [...new Set(sightlines.filter((s) => s.raDeg === null || s.decDeg === null).map((s) => s.targetName))];
  const { left, right, top, bottom } = FRAME;
  return (
    <section className={classes.sky} aria-label="On the sky">
      <h2>On the sky</h2>
      {sky ? (
        <svg viewBox="0 0 360 276" role="img" aria-label={`Sky chart, ICRS: ${sky.marks.map((m) => m.targetName).join(', ')}`}>
          <rect x={left} y={top} width={right - left} height={bottom - top} fill="none" stroke="var(--control)" />
          <g fill="var(--ink-2)" stroke="none">
            {sky.raTicks.map(({ deg, x }) => (
              <g key={deg}>
                <path d={`M${x},${bottom}v5`} stroke="var(--control)" />
                <text x={x} y={bottom + 18} textAnchor="middle">
                  {fixed(deg, sky.decimals)}°
                </text>
              </g>
            ))}
            {sky.decTicks.map(({ deg, y }) => (
              <g key={deg}>
                <path d={`M${left},${y}h-5`} stroke="var(--control)" />
                <text x={left - 8} y={y + 4} textAnchor="end">
                  {signed(deg, sky.decimals)}°
                </text>
              </g>
            ))}
            <text x={(left + right) / 2} y={bottom + 38} textAnchor="middle">
              right ascension, ICRS (east to the left)
            </text>
          </g>
          {sky.marks.map(({ targetId, targetName, x, y }) => (
            <g key={targetId}>
              <circle cx={x} cy={y} r={4} fill="var(--ink)" />
              <text
                x={x + (x > (left + right) / 2 ? -8 : 8)}
                y={y - 6}
                textAnchor={x > (left + right) / 2 ? 'end' : 'start'}
                fill="var(--ink)"
              >
                {targetName.slice(0, 24)}
              </text>
            </g>
          ))}
        </svg>
      ) : (
        <p className={classes.note}>No target of it has a position yet.</p>
      )}
      {lost.length > 0 && <p className={classes.note}>Without a position: {lost.join(', ')}. Add it on the page of the target.</p>}
    </section>
  );
}
