import { looksLikeEmission } from '../../lib/emission.js';
import { fixed } from '../../lib/number.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import { axisTicks } from '../../plot/axis-ticks.js';
import { LightStrip } from '../../plot/LightStrip.js';
import type { Face } from '../../workers/face.js';
import classes from './reading.module.css';

const HEIGHT = 92;
const BASE = 74;
const TOP = 6;
const TICKS = 6;
/** Share of the axis beyond which its unit stands. */
const UNIT_FROM = 0.86;

interface Props {
  face: Face;
  name: string;
  /** the strip alone, once there is nothing left to judge */
  small?: boolean;
}

/** What the file looks like: its light and its curve, on one axis. */
export function FileFace({ face, name, small = false }: Props) {
  const { fromNm, toNm, low, high } = face;
  const emission = looksLikeEmission(low, high);
  const what = `${name}, ${fixed(fromNm, 1)} to ${fixed(toNm, 1)} nm, ${emission ? 'bright lines' : 'dark lines or none'}`;
  return (
    <>
      <LightStrip
        wavelengthFromNm={fromNm}
        wavelengthToNm={toNm}
        low={[...low]}
        high={[...high]}
        height={18}
        emission={emission}
        label=""
      />
      {!small && <SmallCurve face={face} label={`Curve of ${what}`} />}
    </>
  );
}

function SmallCurve({ face, label }: { face: Face; label: string }) {
  const display = useWavelengthDisplay();
  const { fromNm, toNm } = face;
  const share = (nm: number) => (nm - fromNm) / (toNm - fromNm);
  // labels stand under their ticks, so none at the very start, nor where the unit stands
  const ticks = axisTicks(fromNm, toNm, display, TICKS).filter(({ nm }) => share(nm) > 0.03 && share(nm) < UNIT_FROM);
  return (
    <svg className={classes.curve} height={HEIGHT} role="img" aria-label={label}>
      <svg viewBox={`0 0 ${face.fluxHigh.length} ${HEIGHT}`} width="100%" height={HEIGHT} preserveAspectRatio="none">
        <path
          d={envelope(face)}
          fill="var(--curve)"
          stroke="var(--curve)"
          strokeWidth={0.8}
          strokeLinejoin="round"
          vectorEffect="non-scaling-stroke"
        />
      </svg>
      <line x1={0} x2="100%" y1={BASE + 0.5} y2={BASE + 0.5} stroke="var(--line-2)" />
      <text x="100%" y={HEIGHT - 3} fontSize={12} textAnchor="end" fill="var(--ink-3)">
        {display.shortLabel}
      </text>
      {ticks.map(({ nm, label: text }) => {
        const x = `${(share(nm) * 100).toFixed(2)}%`;
        return (
          <g key={nm}>
            <line x1={x} x2={x} y1={BASE} y2={BASE + 4} stroke="var(--line-2)" />
            <text x={x} y={HEIGHT - 3} fontSize={12} textAnchor="middle" fill="var(--ink-3)">
              {text}
            </text>
          </g>
        );
      })}
    </svg>
  );
}

/** Area between the least and the greatest flux of each column, one column one unit wide; zero at the base line unless the flux goes below. */
function envelope({ fluxLow, fluxHigh }: Face): string {
  const n = fluxHigh.length;
  const values = [...fluxHigh, ...fluxLow].filter((v) => v !== null).sort((a, b) => a - b);
  // one hot pixel must not flatten the rest
  const top = (values[Math.floor(0.999 * (values.length - 1))] ?? 1) * 1.02;
  const bottom = Math.min(0, values[Math.floor(0.01 * (values.length - 1))] ?? 0);
  const y = (v: number) => (BASE - ((Math.min(Math.max(v, bottom), top) - bottom) / (top - bottom || 1)) * (BASE - TOP)).toFixed(1);
  let path = '';
  for (let start = 0; start < n; start++) {
    if (fluxHigh[start] == null) continue;
    let end = start;
    while (end + 1 < n && fluxHigh[end + 1] != null) end++;
    const run = Array.from({ length: end - start + 1 }, (_, k) => start + k);
    const upper = run.map((i) => `${i + 0.5},${y(fluxHigh[i]!)}`);
    const lower = run.reverse().map((i) => `${i + 0.5},${y(fluxLow[i]!)}`);
    path += `M${upper.join('L')}L${lower.join('L')}Z`;
    start = end;
  }
  return path;
}
