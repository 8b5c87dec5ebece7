import type { ProfileSamples, SightlineComparison, VelocityProfile } from '@foreveil/shared';
import { fixed } from '../../lib/number.js';
import { lineName } from './verdicts.js';
import classes from './comparison.module.css';

export interface VelocityWindow {
  readonly from: number;
  readonly to: number;
}

interface Props {
  result: SightlineComparison;
  profiles: readonly VelocityProfile[];
  sides: readonly ('a' | 'b')[];
  window: VelocityWindow;
  chosenLine: string | null;
  /** velocity under the pointer, km/s; all panels show it */
  cursor: number | null;
  stacked: boolean;
  onCursor: (velocity: number | null) => void;
  onChoose: (lineId: string) => void;
}

/** Profiles of lines on one velocity scale, the cloud's components marked in each. */
export function Profiles({ profiles, stacked, ...more }: Props) {
  return (
    <div className={stacked ? classes.stack : classes.panels}>
      {profiles.map((p) => (
        <Panel key={p.lineId} profile={p} {...more} />
      ))}
    </div>
  );
}

const W = 240;
const H = 62;

function Panel({
  profile,
  result,
  sides,
  window,
  chosenLine,
  cursor,
  onCursor,
  onChoose,
}: Omit<Props, 'profiles' | 'stacked'> & { profile: VelocityProfile }) {
  const shown = sides.filter((s) => profile[s]);
  const lowest = lowestLight(profile, shown, window);
  const height = shown.length * H + 18;
  const x = (v: number) => ((v - window.from) / (window.to - window.from)) * W;
  const chosen = profile.lineId === chosenLine;
  const name = lineName(profile);
  return (
    <figure className={classes.panel} data-chosen={chosen || undefined}>
      <figcaption>
        <button type="button" onClick={() => onChoose(profile.lineId)} aria-pressed={chosen}>
          {name}
        </button>
        <small>
          {shown.map((s) => s.toUpperCase()).join(', ')}; foot at {fixed(lowest, 2)}
        </small>
      </figcaption>
      <svg
        viewBox={`0 0 ${W} ${height}`}
        preserveAspectRatio="none"
        role="img"
        aria-label={`${name} against velocity, ${fixed(window.from, 0)} to ${fixed(window.to, 0)} km/s`}
        onPointerMove={(e) => {
          const box = e.currentTarget.getBoundingClientRect();
          onCursor(window.from + ((e.clientX - box.left) / box.width) * (window.to - window.from));
        }}
        onPointerLeave={() => onCursor(null)}
      >
        {shown.map((s, i) => (
          <Trace key={s} samples={profile[s]!} top={i * H} lowest={lowest} x={x} window={window} />
        ))}
        {result.clouds.map((c, i) => (
          <line
            key={i}
            x1={x(c.velocityKmPerS)}
            x2={x(c.velocityKmPerS)}
            y1={0}
            y2={height - 16}
            stroke="var(--interstellar)"
            strokeDasharray={c.verdict === 'shared' ? undefined : '2 2'}
            vectorEffect="non-scaling-stroke"
          />
        ))}
        {cursor !== null && (
          <line x1={x(cursor)} x2={x(cursor)} y1={0} y2={height - 16} stroke="var(--ink-3)" vectorEffect="non-scaling-stroke" />
        )}
      </svg>
      <div className={classes.scale} aria-hidden="true">
        <span>{fixed(window.from, 0)}</span>
        <span>km/s</span>
        <span>{fixed(window.to, 0)}</span>
      </div>
    </figure>
  );
}

function Trace({
  samples,
  top,
  lowest,
  x,
  window,
}: {
  samples: ProfileSamples;
  top: number;
  lowest: number;
  x: (v: number) => number;
  window: VelocityWindow;
}) {
  const y = (f: number) => top + 8 + ((1 - f) / (1 - lowest)) * (H - 16);
  const at = samples.velocityKmPerS
    .map((v, i) => i)
    .filter((i) => samples.velocityKmPerS[i]! >= window.from && samples.velocityKmPerS[i]! <= window.to);
  let pen = 'M';
  let path = '';
  for (const i of at) {
    const f = samples.flux[i];
    if (f == null) {
      pen = 'M';
      continue;
    }
    path += `${pen}${x(samples.velocityKmPerS[i]!).toFixed(2)},${Math.min(top + H - 2, y(f)).toFixed(2)}`;
    pen = 'L';
  }
  const model = at
    .map((i, k) => `${k ? 'L' : 'M'}${x(samples.velocityKmPerS[i]!).toFixed(2)},${Math.min(top + H - 2, y(samples.model[i]!)).toFixed(2)}`)
    .join('');
  return (
    <g fill="none">
      <line x1={0} x2={W} y1={y(1)} y2={y(1)} stroke="var(--cont)" strokeDasharray="4 3" vectorEffect="non-scaling-stroke" />
      <path d={path} stroke="var(--curve)" strokeWidth={1.1} vectorEffect="non-scaling-stroke" />
      <path d={model} stroke="var(--interstellar)" strokeWidth={1.4} vectorEffect="non-scaling-stroke" />
    </g>
  );
}

/** Foot of the panel: 0 for strong lines, nearer to the continuum for weak ones. */
function lowestLight(p: VelocityProfile, sides: readonly ('a' | 'b')[], window: VelocityWindow): number {
  let least = 1;
  for (const s of sides)
    p[s]!.velocityKmPerS.forEach((v, i) => {
      if (v >= window.from && v <= window.to) least = Math.min(least, p[s]!.model[i]!);
    });
  return least < 0.6 ? 0 : Math.max(0, 1 - Math.max(0.04, 2.2 * (1 - least)));
}
