import type { ComparisonDetail, SpectrumSummary } from '@foreveil/shared';
import { signed } from '../../lib/number.js';
import { stripCells } from './strip-cells.js';
import { threadsOf, VEIL, veilScale, velocityTicks, type Thread, type VeilScale } from './veil-layout.js';
import { lineName, type JudgedLine } from './verdicts.js';

interface Props {
  comparison: ComparisonDetail;
  lines: readonly JudgedLine[];
  a: SpectrumSummary;
  b: SpectrumSummary;
  width: number;
  scheme: 'light' | 'dark';
  chosen: string | null;
  onChoose: (key: string) => void;
}

/** Two facing light strips; the threads of their lines gathered on one velocity axis. Where threads of both sides meet, the gas is shared. */
export function Veil({ comparison, lines, a, b, width, scheme, chosen, onChoose }: Props) {
  const result = comparison.result!;
  const gas = result.clouds.map((c) => c.velocityKmPerS);
  const air = [result.a.airKmPerS, result.b.airKmPerS].filter((v): v is number => v !== null);
  const scale = veilScale(width, [a, b], [...gas, ...air]);
  const threads = threadsOf(lines, scale);
  const first = threads.filter((t) => t.line.key !== chosen);
  const last = threads.filter((t) => t.line.key === chosen);
  return (
    <svg
      id="veil"
      width={width}
      height={VEIL.height}
      viewBox={`0 0 ${width} ${VEIL.height}`}
      role="img"
      aria-label={`${comparison.name}: ${result.clouds.map((c) => c.sentence).join(' ')}`}
      fontFamily="Inter Variable, Inter, sans-serif"
      fontSize="12"
    >
      <Strip spectrum={a} top={VEIL.stripTopA} scale={scale} scheme={scheme} />
      <Strip spectrum={b} top={VEIL.stripTopB} scale={scale} scheme={scheme} />
      <Stubs lines={lines} scale={scale} />
      {[...first, ...last].map((t) => (
        <ThreadPath key={t.key} thread={t} chosen={t.line.key === chosen} onChoose={onChoose} />
      ))}
      <VelocityAxis scale={scale} frame={result.a.frame} />
      <Clouds comparison={comparison} scale={scale} />
      <Names comparison={comparison} scale={scale} />
    </svg>
  );
}

function Strip({ spectrum, top, scale, scheme }: { spectrum: SpectrumSummary; top: number; scale: VeilScale; scheme: 'light' | 'dark' }) {
  return (
    <g>
      <rect
        x={scale.x(spectrum.fromNm)}
        y={top}
        width={scale.x(spectrum.toNm) - scale.x(spectrum.fromNm)}
        height={VEIL.stripHeight}
        fill="#05070a"
      />
      {stripCells(spectrum, scheme).map((c) => (
        <rect
          key={c.fromNm}
          x={scale.x(c.fromNm)}
          y={top}
          width={Math.max(0.6, scale.x(c.toNm) - scale.x(c.fromNm) + 0.3)}
          height={VEIL.stripHeight}
          fill={c.colour}
          opacity={c.light}
        />
      ))}
    </g>
  );
}

function Stubs({ lines, scale }: { lines: readonly JudgedLine[]; scale: VeilScale }) {
  const stub = (side: 'a' | 'b') =>
    lines
      .filter((l) => l.family === 'stellar' && l[side])
      .map(
        (l) =>
          `M${scale.x(l.restNm).toFixed(1)},${side === 'a' ? VEIL.stripTopA + VEIL.stripHeight + 1 : VEIL.stripTopB - 1}v${side === 'a' ? 7 : -7}`,
      )
      .join('');
  return <path d={stub('a') + stub('b')} stroke="var(--stellar)" fill="none" />;
}

function ThreadPath({
  thread: { path, line, width },
  chosen,
  onChoose,
}: {
  thread: Thread;
  chosen: boolean;
  onChoose: (key: string) => void;
}) {
  const air = line.family === 'telluric';
  const colour = chosen ? 'var(--ink)' : air ? 'var(--telluric)' : 'var(--interstellar)';
  return (
    <g onClick={() => onChoose(line.key)} style={{ cursor: 'pointer' }}>
      <title>{lineName(line)}</title>
      {chosen && <path d={path} fill="none" stroke="var(--ground)" strokeWidth={5} />}
      <path
        d={path}
        fill="none"
        stroke={colour}
        strokeWidth={chosen ? 2.2 : air ? 1 : width}
        strokeDasharray={air && !chosen ? '1 4' : undefined}
        strokeLinecap="round"
        opacity={chosen ? 1 : line.species === 'DIB' ? 0.7 : 0.9}
      />
      <path d={path} fill="none" stroke="transparent" strokeWidth={9} />
    </g>
  );
}

function VelocityAxis({ scale, frame }: { scale: VeilScale; frame: string }) {
  const { middle } = VEIL;
  return (
    <g fill="var(--ink-3)">
      <line x1={scale.left} x2={scale.right} y1={middle} y2={middle} stroke="var(--control)" />
      {velocityTicks(scale).map((v) => (
        <g key={v}>
          <line x1={scale.vx(v)} x2={scale.vx(v)} y1={middle - 4} y2={middle + 4} stroke="var(--control)" />
          <text x={scale.vx(v)} y={middle + 34} textAnchor="middle">
            {signed(v, 0)}
          </text>
        </g>
      ))}
      {scale.left > 60 && (
        <>
          <text x={0} y={middle - 4} fill="var(--ink-2)">
            velocity, km/s
          </text>
          <text x={0} y={middle + 12}>
            {frame}
          </text>
        </>
      )}
    </g>
  );
}

function Clouds({ comparison, scale }: { comparison: ComparisonDetail; scale: VeilScale }) {
  const { middle } = VEIL;
  return (
    <g stroke="var(--ground)" strokeWidth={4} paintOrder="stroke" strokeLinejoin="round">
      {comparison.result!.clouds.map((c, i) => {
        const x = scale.vx(c.velocityKmPerS);
        const words =
          c.verdict === 'shared' ? 'shared' : c.verdict === 'only-a' ? 'only A' : c.verdict === 'only-b' ? 'only B' : 'cannot tell';
        const right = x > (scale.left + scale.right) / 2 || x < scale.left + 130;
        return (
          <g key={i}>
            {c.verdict === 'shared' ? (
              <ellipse cx={x} cy={middle} rx={20} ry={6.5} fill="none" stroke="var(--ink)" strokeWidth={1.6} />
            ) : (
              <path d={`M${x - 9},${middle}h18`} stroke="var(--interstellar)" strokeWidth={4} />
            )}
            <text
              x={x + (right ? 24 : -24)}
              y={middle - 9 - 14 * (i % 2)}
              textAnchor={right ? 'start' : 'end'}
              fill="var(--ink)"
              fontWeight={600}
            >
              {words} {signed(c.velocityKmPerS, 2)}
            </text>
          </g>
        );
      })}
    </g>
  );
}

function Names({ comparison: { a, b, result }, scale }: { comparison: ComparisonDetail; scale: VeilScale }) {
  const nm: number[] = [];
  const span = scale.toNm - scale.fromNm;
  const step = [1, 2, 5, 10, 20, 50, 100, 200].find((s) => span / s <= (scale.width < 700 ? 6 : 16)) ?? 500;
  for (let l = Math.ceil(scale.fromNm / step) * step; l < scale.toNm; l += step) nm.push(l);
  const star = (v: number | null) => (v === null ? '' : `star at ${signed(v, 1)}`);
  return (
    <g fill="var(--ink-3)">
      {nm.map((l) => (
        <g key={l} textAnchor="middle">
          <text x={scale.x(l)} y={12}>
            {l}
          </text>
          <text x={scale.x(l)} y={VEIL.stripTopB + VEIL.stripHeight + 16}>
            {l}
          </text>
        </g>
      ))}
      {scale.left > 60 ? (
        <>
          <text x={0} y={12}>
            nm, vacuum
          </text>
          <text x={0} y={VEIL.stripTopA + 12} fill="var(--ink)" fontWeight={600}>
            A {a.targetName.slice(0, 14)}
          </text>
          <text x={0} y={VEIL.stripTopA + 28}>
            {star(result!.a.starKmPerS)}
          </text>
          <text x={0} y={VEIL.stripTopB + 12} fill="var(--ink)" fontWeight={600}>
            B {b.targetName.slice(0, 14)}
          </text>
          <text x={0} y={VEIL.stripTopB + 28}>
            {star(result!.b.starKmPerS)}
          </text>
        </>
      ) : (
        <>
          <text x={scale.left} y={VEIL.stripTopA + VEIL.stripHeight + 14} fill="var(--ink)">
            A
          </text>
          <text x={scale.left} y={VEIL.stripTopB - 6} fill="var(--ink)">
            B
          </text>
        </>
      )}
    </g>
  );
}
