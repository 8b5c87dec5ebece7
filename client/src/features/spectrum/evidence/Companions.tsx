import { useElementSize } from '@mantine/hooks';
import { useMemo } from 'react';
import { C_KM_PER_S, type Candidate, type Companion, type Feature, type VelocitySystem } from '@foreveil/shared';
import { speciesName } from '../../../lib/species.js';
import { fixed, MILLIANGSTROM_PER_NM, withError } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { shownWavelength } from '../../../plot/axis-ticks.js';
import type { CurveData } from '../../../plot/curve-data.js';
import { lightPath, stepPath, xOf, yOf, type Frame } from '../../../plot/curve-paths.js';
import { FILL_CAP, lightCss, visibility } from '../../../plot/light.js';
import { usePalette, type Palette } from '../../../plot/palette.js';
import { niceTicks } from '../../../plot/ticks.js';
import { widthKmPerS } from './claim-text.js';
import { SvgPen, velocityProfile } from './velocity-profile.js';
import classes from './evidence.module.css';

const ROW = 24;
const CHARACTER_PX = 6.3;
const LEAST_LABEL = 82;
const NUMBER = 92;
/** A panel is at least this deep, in normalised flux, so that noise stays small. */
const LEAST_DEPTH = 0.06;
const GAUSS_AREA = 1.0645;

interface Props {
  candidate: Candidate;
  /** the selected line: what its companions should look like */
  feature: Feature;
  system: VelocitySystem | null;
  systems: readonly VelocitySystem[];
  data: CurveData;
  display: WavelengthDisplay;
  /** short name of the velocity frame, 'baryc.' */
  frameName: string;
}

const expectedWidth = (c: Companion) => fixed(c.expectedNm * MILLIANGSTROM_PER_NM, c.expectedNm < 1e-3 ? 1 : 0);

/** The number at the right: what was measured, or what is due. */
function amount(c: Companion): string {
  if (c.outcome === 'not_covered') return 'not covered';
  if (c.measuredNm !== null) return withError(c.measuredNm * MILLIANGSTROM_PER_NM, (c.measuredSigmaNm ?? NaN) * MILLIANGSTROM_PER_NM);
  return c.outcome === 'missing' ? `${expectedWidth(c)} missing` : `${expectedWidth(c)} due`;
}

/** Equivalent width that should stand there, as a Gaussian as wide as the selected line: a dip, or a peak. */
function expectedPath(f: Frame, c: Companion, { system, kind, fwhmKmPerS }: Pick<RowProps, 'system' | 'kind' | 'fwhmKmPerS'>): string {
  const fwhmNm = (fwhmKmPerS / C_KM_PER_S) * c.restNm;
  const height = c.expectedNm / (GAUSS_AREA * fwhmNm);
  const depth = kind === 'dip' ? Math.min(0.98, height) : -height;
  const pen = new SvgPen();
  for (let k = 0; k <= 80; k++) {
    const v = f.fromNm + (k / 80) * (f.toNm - f.fromNm);
    const flux = 1 - depth * Math.exp(-4 * Math.LN2 * ((v - system.velocityKmPerS) / fwhmKmPerS) ** 2);
    if (k === 0) pen.moveTo(xOf(f, v), yOf(f, flux));
    else pen.lineTo(xOf(f, v), yOf(f, flux));
  }
  return pen.toString();
}

interface RowProps {
  companion: Companion;
  system: VelocitySystem;
  kind: Feature['kind'];
  fwhmKmPerS: number;
  data: CurveData;
  range: [number, number];
  y: number;
  /** CSS px: where the panel starts and how wide it is */
  left: number;
  width: number;
  palette: Palette;
}

/** Value axis of a small panel: the continuum with the whole line, and a little of the noise. */
function domainOf(good: Float32Array, kind: Feature['kind']): [number, number] {
  const [least, most] = [Math.min(...good), Math.max(...good)];
  if (kind === 'peak') return [Math.min(1 - 0.1 * (most - 1), Math.max(least, 2 - most)), Math.max(1 + LEAST_DEPTH, most)];
  const low = Math.min(1 - LEAST_DEPTH, least);
  return [low, Math.max(1 + 0.08 * (1 - low), Math.min(most, 1 + (1 - low)))];
}

function Profile({ companion, system, kind, fwhmKmPerS, data, range, y, left, width, palette }: RowProps) {
  const drawn = useMemo(() => {
    const profile = velocityProfile(data, companion.restNm, range[0], range[1], kind);
    if (!profile) return null;
    const [low, high] = domainOf(
      profile.flux.filter((_, i) => !profile.bad[i]),
      kind,
    );
    // the velocity axis takes the place of the wavelength axis
    const frame: Frame = { left, top: y + 3, width, height: ROW - 6, fromNm: range[0], toNm: range[1], low, high };
    const trace = { wavelength: profile.velocity, values: profile.flux, bad: profile.bad };
    const [curve, light] = [new SvgPen(), new SvgPen()];
    stepPath(curve, frame, trace);
    lightPath(light, frame, trace, new Float32Array(profile.flux.length).fill(1), kind === 'dip' ? 'taken' : 'given');
    const isDue = companion.outcome === 'missing' || companion.outcome === 'below_limit';
    const due = isDue ? expectedPath(frame, companion, { system, kind, fwhmKmPerS }) : null;
    return { curve: curve.toString(), light: light.toString(), due, level: yOf(frame, 1) };
  }, [companion, system, kind, fwhmKmPerS, data, range, y, left, width]);
  if (!drawn) return null;
  const colour = visibility(companion.restNm) > 0.05 ? lightCss(companion.restNm, FILL_CAP[palette.scheme]) : 'var(--hatch)';
  // an inner SVG cuts off what would run into the next row
  return (
    <svg x={left} y={y} width={width} height={ROW} viewBox={`${left} ${y} ${width} ${ROW}`}>
      {companion.outcome === 'seen' && <path d={drawn.light} fill={colour} />}
      <line x1={left} x2={left + width} y1={drawn.level} y2={drawn.level} stroke="var(--line-2)" strokeDasharray="4 3" />
      <path d={drawn.curve} fill="none" stroke="var(--curve)" strokeOpacity={companion.outcome === 'seen' ? 1 : 0.75} />
      {drawn.due && <path d={drawn.due} fill="none" stroke="var(--curve)" strokeWidth={1.2} strokeDasharray="3 2" />}
    </svg>
  );
}

/** The other lines of the species on one velocity axis: seen, missing (what is due is dashed), or not covered. */
export function Companions({ candidate, feature, system, systems, data, display, frameName }: Props) {
  const { ref, width } = useElementSize<HTMLDivElement>();
  const palette = usePalette();
  const { companions, family } = candidate;
  const labels = companions.map((c) => `${speciesName(c.species)} ${shownWavelength(c.restNm, display, 2)}`);
  const label = Math.max(LEAST_LABEL, ...labels.map((l) => l.length * CHARACTER_PX + 8));
  const inner = Math.max(0, width - label - NUMBER);
  const fwhmKmPerS = widthKmPerS(feature);
  const range = useMemo<[number, number]>(() => {
    const half = Math.max(40, 2.2 * Math.min(fwhmKmPerS, 600));
    const centre = system?.velocityKmPerS ?? candidate.velocityKmPerS;
    return [centre - half, centre + half];
  }, [system, candidate, fwhmKmPerS]);
  if (companions.length === 0 || !system) return <p className={classes.quiet}>No companions are listed for this reading.</p>;
  const x = (v: number) => label + ((v - range[0]) / (range[1] - range[0])) * inner;
  const bottom = companions.length * ROW + 2;
  const shown = (nm: number) => shownWavelength(nm, display, 2);
  const kin = systems.filter((s) => s.family === family && s.velocityKmPerS > range[0] && s.velocityKmPerS < range[1]);
  return (
    <div ref={ref} className={classes.companions}>
      <svg width={width || '100%'} height={bottom + 20} role="img" aria-label={spoken(candidate, shown)}>
        {inner > 30 && (
          <>
            {kin.map((s) => (
              <line
                key={s.id}
                x1={x(s.velocityKmPerS)}
                x2={x(s.velocityKmPerS)}
                y1={0}
                y2={bottom}
                stroke={`var(--${family})`}
                strokeOpacity={s.id === system.id ? 0.9 : 0.4}
              />
            ))}
            {companions.map((c, i) => (
              <g key={c.restNm}>
                <Profile
                  companion={c}
                  system={system}
                  kind={feature.kind}
                  fwhmKmPerS={fwhmKmPerS}
                  data={data}
                  range={range}
                  y={i * ROW}
                  left={label}
                  width={inner}
                  palette={palette}
                />
                <text x={0} y={i * ROW + 15} fill="var(--ink)">
                  {labels[i]}
                </text>
                <text
                  x={width}
                  y={i * ROW + 15}
                  textAnchor="end"
                  fill={c.outcome === 'seen' ? 'var(--ink)' : 'var(--ink-2)'}
                  fontWeight={c.outcome === 'missing' ? 600 : 420}
                >
                  {amount(c)}
                </text>
              </g>
            ))}
            <line x1={label} x2={label + inner} y1={bottom + 0.5} y2={bottom + 0.5} stroke="var(--line-2)" />
            {niceTicks(range[0], range[1], Math.max(2, inner / 50)).map((v) => (
              <g key={v} transform={`translate(${x(v).toFixed(1)} ${bottom})`}>
                <line y1={0} y2={4} stroke="var(--line-2)" />
                {x(v) > label + 12 && (
                  <text y={16} textAnchor="middle" fill="var(--ink-3)">
                    {fixed(v, 0)}
                  </text>
                )}
              </g>
            ))}
            <text x={0} y={bottom + 16} fill="var(--ink-3)">
              km/s{frameName && `, ${frameName}`}
            </text>
            <text x={width} y={bottom + 16} textAnchor="end" fill="var(--ink-3)">
              W, mÅ
            </text>
          </>
        )}
      </svg>
    </div>
  );
}

const OUTCOME: Record<Companion['outcome'], string> = {
  seen: 'seen',
  missing: 'missing',
  not_covered: 'not covered',
  below_limit: 'below the limit',
};

/** The panel in words, with the same numbers. */
function spoken({ companions }: Candidate, shown: (nm: number) => string): string {
  const each = companions.map((c) => {
    const width = c.outcome === 'not_covered' ? '' : c.measuredNm !== null ? `, ${amount(c)} mÅ` : `, ${expectedWidth(c)} mÅ due`;
    return `${c.species} ${shown(c.restNm)} ${OUTCOME[c.outcome]}${width}`;
  });
  return `Companions in velocity space: ${each.join('; ')}`;
}
