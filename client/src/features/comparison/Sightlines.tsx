import { Button, NativeSelect } from '@mantine/core';
import { useElementSize } from '@mantine/hooks';
import type { ComparisonDetail, MemberRole, SpectrumSummary, VelocityProfile } from '@foreveil/shared';
import { useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import { usePalette } from '../../plot/palette.js';
import { counted, fixed, percent, signed } from '../../lib/number.js';
import { pagePaths } from '../../lib/paths.js';
import { CloudColumns } from './CloudColumns.js';
import classes from './comparison.module.css';
import { Profiles, type VelocityWindow } from './Profiles.js';
import { Ruling } from './Ruling.js';
import { Veil } from './Veil.js';
import { stackOf, toggled } from './stack.js';
import { VerdictTable, type Filter } from './VerdictTable.js';
import { judgedLines, lineName, VERDICT_WORD, type JudgedLine } from './verdicts.js';

interface Props {
  programmeId: string;
  role: MemberRole;
  comparison: ComparisonDetail;
  a: SpectrumSummary;
  b: SpectrumSummary;
}

type Layout = 'panels' | 'stack';
type Which = 'ab' | 'a' | 'b';

/** The veil, the profiles, the verdicts and the columns; one chosen line is shared by all. */
export function Sightlines({ programmeId, role, comparison, a, b }: Props) {
  const result = comparison.result!;
  const { scheme } = usePalette();
  const { ref, width } = useElementSize();
  const lines = useMemo(() => judgedLines(comparison), [comparison]);
  const [chosen, setChosen] = useState<string | null>(() => firstChosen(lines));
  const [filter, setFilter] = useState<Filter>({ verdict: 'all', family: 'interstellar' });
  const clouds = result.clouds;
  const [picked, setPicked] = useState<number | null>(null);
  const [stack, setStack] = useState<ReadonlySet<string>>(new Set());
  const [layout, setLayout] = useState<Layout>('panels');
  const drawn = useMemo(() => new Set(result.profiles.map((p) => p.lineId)), [result.profiles]);
  const line = lines.find((l) => l.key === chosen) ?? null;
  const cloud =
    picked ??
    line?.cloud ??
    Math.max(
      0,
      clouds.findIndex((c) => c.verdict === 'shared'),
    );
  return (
    <>
      <div ref={ref} className={classes.veil}>
        {width > 0 && (
          <Veil comparison={comparison} lines={lines} a={a} b={b} width={width} scheme={scheme} chosen={chosen} onChoose={setChosen} />
        )}
      </div>
      <p className={classes.teach}>
        Each thread crosses the axis at its line’s measured velocity; where threads from both sides meet, the gas is shared.
      </p>
      <VelocityPart
        comparison={comparison}
        line={line}
        lines={lines}
        onChoose={setChosen}
        layout={layout}
        onLayout={setLayout}
        stack={stack}
        onClear={() => setStack(new Set())}
      />
      <div className={classes.low}>
        <VerdictTable
          lines={lines}
          filter={filter}
          onFilter={setFilter}
          chosen={chosen}
          onChoose={(key) => (setPicked(null), setChosen(key))}
          drawn={drawn}
          stack={stack}
          onStack={(lineId) => (setStack(toggled(stack, lineId)), setLayout('stack'))}
        />
        <div className={classes.side}>
          {clouds.length > 0 && (
            <NativeSelect
              label="Cloud"
              value={String(cloud)}
              onChange={(e) => setPicked(Number(e.currentTarget.value))}
              data={clouds.map((c, i) => ({ value: String(i), label: `${signed(c.velocityKmPerS, 2)} km/s, ${VERDICT_WORD[c.verdict]}` }))}
            />
          )}
          {clouds[cloud] ? (
            <CloudColumns cloud={clouds[cloud]} />
          ) : (
            <p className={classes.note}>
              Neither spectrum shows a cloud. Name its velocity under Settings, above, as one of more clouds, and compare again to get
              limits.
            </p>
          )}
          {line && <Ruling programmeId={programmeId} comparisonId={comparison.id} role={role} line={line} />}
        </div>
      </div>
      <Offers programmeId={programmeId} comparison={comparison} />
    </>
  );
}

const firstChosen = (lines: readonly JudgedLine[]): string | null =>
  [...lines]
    .filter((l) => l.family === 'interstellar' && l.species !== 'DIB' && l.stands === 'shared')
    .sort((p, q) => widest(q) - widest(p))[0]?.key ??
  lines.find((l) => l.family === 'interstellar')?.key ??
  null;
const widest = (l: JudgedLine) => (l.a?.equivalentWidthNm ?? 0) + (l.b?.equivalentWidthNm ?? 0);

const MOST_PANELS = 8;

function VelocityPart({
  comparison,
  line,
  lines,
  onChoose,
  layout,
  onLayout,
  stack,
  onClear,
}: {
  comparison: ComparisonDetail;
  line: JudgedLine | null;
  lines: readonly JudgedLine[];
  onChoose: (key: string) => void;
  layout: Layout;
  onLayout: (layout: Layout) => void;
  /** lines that stand one above the other; empty: all */
  stack: ReadonlySet<string>;
  onClear: () => void;
}) {
  const result = comparison.result!;
  const whole = useMemo(() => wholeWindow(comparison), [comparison]);
  const [window, setWindow] = useState<VelocityWindow>(whole);
  const [cursor, setCursor] = useState<number | null>(null);
  const [which, setWhich] = useState<Which>('ab');
  const profiles = useMemo(() => ordered(result.profiles, line), [result.profiles, line]);
  if (profiles.length === 0) return null;
  const zoom = (factor: number) => {
    const middle = cursor ?? line?.velocityKmPerS ?? (window.from + window.to) / 2;
    const half = ((window.to - window.from) / 2) * factor;
    setWindow({ from: Math.max(whole.from, middle - half), to: Math.min(whole.to, middle + half) });
  };
  const choose = (lineId: string) => {
    const found =
      lines.find((l) => l.lineId === lineId && l.cloud !== null && l.cloud === line?.cloud) ?? lines.find((l) => l.lineId === lineId);
    if (found) onChoose(found.key);
  };
  return (
    <section aria-label="Profiles on one velocity scale">
      <div className={classes.tools}>
        <NativeSelect
          aria-label="Arrangement"
          value={layout}
          onChange={(e) => onLayout(e.currentTarget.value as Layout)}
          data={[
            { value: 'panels', label: 'Side by side' },
            { value: 'stack', label: 'One above the other' },
          ]}
        />
        <NativeSelect
          aria-label="Spectra drawn"
          value={which}
          onChange={(e) => setWhich(e.currentTarget.value as Which)}
          data={[
            { value: 'ab', label: 'A and B' },
            { value: 'a', label: 'A alone' },
            { value: 'b', label: 'B alone' },
          ]}
        />
        <Button onClick={() => zoom(0.5)}>Closer</Button>
        <Button onClick={() => zoom(2)}>Wider</Button>
        <Button onClick={() => setWindow(whole)}>All</Button>
        {layout === 'stack' && stack.size > 0 && <Button onClick={onClear}>Stack every line, not {counted(stack.size, 'line')}</Button>}
        <p className={classes.read}>
          {line && <b>{lineName(line)}</b>}{' '}
          {cursor === null ? `${fixed(window.from, 0)} to ${fixed(window.to, 0)} km/s` : `${signed(cursor, 1)} km/s`}
        </p>
      </div>
      <Profiles
        result={result}
        profiles={layout === 'panels' ? profiles.slice(0, MOST_PANELS) : stackOf(profiles, stack)}
        sides={which === 'ab' ? ['a', 'b'] : [which]}
        window={window}
        chosenLine={line?.lineId ?? null}
        cursor={cursor}
        stacked={layout === 'stack'}
        onCursor={setCursor}
        onChoose={choose}
      />
    </section>
  );
}

function wholeWindow({ result }: ComparisonDetail): VelocityWindow {
  const v = result!.clouds.map((c) => c.velocityKmPerS);
  if (!v.length) return { from: -60, to: 60 };
  return { from: Math.min(...v) - result!.settings.profileRangeKmPerS, to: Math.max(...v) + result!.settings.profileRangeKmPerS };
}

/** The chosen line first, then by strength of the model. */
function ordered(profiles: readonly VelocityProfile[], line: JudgedLine | null): VelocityProfile[] {
  const depth = (p: VelocityProfile) => 1 - Math.min(1, ...(p.a?.model ?? []), ...(p.b?.model ?? []));
  return [...profiles].sort((p, q) => Number(q.lineId === line?.lineId) - Number(p.lineId === line?.lineId) || depth(q) - depth(p));
}

/** What each spectrum's own page may take over: nothing is changed from here. */
function Offers({ programmeId, comparison }: { programmeId: string; comparison: ComparisonDetail }) {
  const { offers } = comparison.result!;
  if (!offers.length) return null;
  return (
    <section aria-label="Offers" className={classes.offers}>
      <h2>Readings that gain from the other sightline</h2>
      <ul>
        {offers.map((o) => (
          <li key={`${o.side} ${o.featureIndex} ${o.offered.lineId}`}>
            {o.sentence} Now first: {o.before ? `${lineName(o.before)}, ${percent(o.before.probability)}` : 'unidentified'}.{' '}
            <Link to={pagePaths.spectrum(programmeId, comparison[o.side].spectrumId)}>Decide in {o.side.toUpperCase()}</Link>
          </li>
        ))}
      </ul>
    </section>
  );
}
