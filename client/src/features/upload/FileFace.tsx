import { useElementSize } from '@mantine/hooks';
import { looksLikeEmission } from '../../lib/emission.js';
import { fixed } from '../../lib/number.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import { axisTicks } from '../../plot/axis-ticks.js';
import { LightStrip } from '../../plot/LightStrip.js';
import type { Face } from '../../workers/face.js';
import classes from './upload.module.css';

const HEIGHT = 92;
const BASE = 74;
const TOP = 6;

interface Props {
  face: Face;
  name: string;
}

/** What the file looks like: its light and its curve, on one axis. */
export function FileFace({ face, name }: Props) {
  const { ref, width } = useElementSize();
  const { fromNm, toNm, low, high } = face;
  const emission = looksLikeEmission(low, high);
  const what = `${name}, ${fixed(fromNm, 1)} to ${fixed(toNm, 1)} nm, ${emission ? 'bright lines' : 'dark lines or none'}`;
  return (
    <div ref={ref}>
      <LightStrip
        wavelengthFromNm={fromNm}
        wavelengthToNm={toNm}
        low={[...low]}
        high={[...high]}
        height={18}
        emission={emission}
        label=""
      />
      <SmallCurve face={face} width={width} label={`Curve of ${what}`} />
    </div>
  );
}

function SmallCurve({ face, width, label }: { face: Face; width: number; label: string }) {
  const display = useWavelengthDisplay();
  const { fromNm, toNm } = face;
  const x = (nm: number) => ((nm - fromNm) / (toNm - fromNm)) * width;
  const ticks = axisTicks(fromNm, toNm, display, Math.max(2, width / 70)).filter(({ nm }) => x(nm) > 14 && x(nm) < width - 14);
  return (
    <svg className={classes.curve} height={HEIGHT} role="img" aria-label={label}>
      <path d={envelope(face, width)} fill="var(--curve)" stroke="var(--curve)" strokeWidth={0.8} strokeLinejoin="round" />
      <line x1={0} x2={width} y1={BASE + 0.5} y2={BASE + 0.5} stroke="var(--line-2)" />
      {ticks.map(({ nm, label: text }) => (
        <g key={nm}>
          <path d={`M${x(nm)},${BASE}v4`} stroke="var(--line-2)" />
          <text x={x(nm)} y={HEIGHT - 3} fontSize={12} textAnchor="middle" fill="var(--ink-3)">
            {text}
          </text>
        </g>
      ))}
      <text x={width} y={12} fontSize={12} textAnchor="end" fill="var(--ink-3)">
        {display.shortLabel}
      </text>
    </svg>
  );
}

/** Area between the least and the greatest flux of each column; zero at the base line unless the flux goes below. */
function envelope({ fluxLow, fluxHigh }: Face, width: number): string {
  const n = fluxHigh.length;
  const values = [...fluxHigh, ...fluxLow].filter((v) => v !== null).sort((a, b) => a - b);
  // one hot pixel must not flatten the rest
  const top = (values[Math.floor(0.999 * (values.length - 1))] ?? 1) * 1.02;
  const bottom = Math.min(0, values[Math.floor(0.01 * (values.length - 1))] ?? 0);
  const y = (v: number) => (BASE - ((Math.min(Math.max(v, bottom), top) - bottom) / (top - bottom || 1)) * (BASE - TOP)).toFixed(1);
  const x = (i: number) => (((i + 0.5) / n) * width).toFixed(1);
  let path = '';
  for (let start = 0; start < n; start++) {
    if (fluxHigh[start] == null) continue;
    let end = start;
    while (end + 1 < n && fluxHigh[end + 1] != null) end++;
    const run = Array.from({ length: end - start + 1 }, (_, k) => start + k);
    path += `M${run.map((i) => `${x(i)},${y(fluxHigh[i]!)}`).join('L')}L${run
      .reverse()
      .map((i) => `${x(i)},${y(fluxLow[i]!)}`)
      .join('L')}Z`;
    start = end;
  }
  return path;
}
