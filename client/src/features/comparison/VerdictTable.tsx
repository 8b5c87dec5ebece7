import { NativeSelect } from '@mantine/core';
import { VERDICTS, type Family, type Verdict } from '@foreveil/shared';
import { useRef, type KeyboardEvent, type ReactNode } from 'react';
import { Mark } from '../../plot/Mark.js';
import { errorParts, MILLIANGSTROM_PER_NM, NO_NUMBER } from '../../lib/number.js';
import classes from './comparison.module.css';
import { lineName, oddsOf, VERDICT_WORD, VerdictSign, type JudgedLine } from './verdicts.js';

export interface Filter {
  readonly verdict: Verdict | 'all';
  readonly family: Family | 'all';
}

export const filtered = (lines: readonly JudgedLine[], { verdict, family }: Filter) =>
  lines.filter((l) => (verdict === 'all' || l.stands === verdict) && (family === 'all' || l.family === family));

interface Props {
  lines: readonly JudgedLine[];
  filter: Filter;
  onFilter: (filter: Filter) => void;
  chosen: string | null;
  onChoose: (key: string) => void;
  /** lines whose profiles can be drawn, and those that stand in the stack */
  drawn: ReadonlySet<string>;
  stack: ReadonlySet<string>;
  onStack: (lineId: string) => void;
}

const MOST_ROWS = 400;

/** Every line with its verdict. Arrow keys go from line to line; the chosen one is shown everywhere on the page. */
export function VerdictTable({ lines, filter, onFilter, chosen, onChoose, drawn, stack, onStack }: Props) {
  const rows = filtered(lines, filter).slice(0, MOST_ROWS);
  const body = useRef<HTMLTableSectionElement>(null);
  const onKeyDown = (event: KeyboardEvent) => {
    const at = rows.findIndex((r) => r.key === chosen);
    if (event.key === 's' && rows[at] && drawn.has(rows[at].lineId)) return onStack(rows[at].lineId);
    const step = { ArrowDown: 1, j: 1, ArrowUp: -1, k: -1 }[event.key];
    if (!step || !rows.length) return;
    event.preventDefault();
    const next = rows[Math.min(rows.length - 1, Math.max(0, at + step))]!;
    onChoose(next.key);
    body.current?.querySelector<HTMLElement>(`[data-key="${CSS.escape(next.key)}"]`)?.scrollIntoView({ block: 'nearest' });
  };
  return (
    <section aria-label="Verdicts" className={classes.verdicts}>
      <div className={classes.top}>
        <h2>Verdicts</h2>
        <NativeSelect
          aria-label="Verdicts shown"
          value={filter.verdict}
          onChange={(e) => onFilter({ ...filter, verdict: e.currentTarget.value as Filter['verdict'] })}
          data={[{ value: 'all', label: 'All verdicts' }, ...VERDICTS.map((v) => ({ value: v, label: VERDICT_WORD[v] }))]}
        />
        <NativeSelect
          aria-label="Lines shown"
          value={filter.family}
          onChange={(e) => onFilter({ ...filter, family: e.currentTarget.value as Filter['family'] })}
          data={[
            { value: 'all', label: 'All lines' },
            { value: 'interstellar', label: 'Gas between' },
            { value: 'stellar', label: 'Of the stars' },
            { value: 'telluric', label: 'Of the air' },
          ]}
        />
        <p role="status">
          {rows.length} of {lines.length} lines
        </p>
      </div>
      {/* the whole table takes the focus, so that arrow keys go from line to line in it */}
      <div
        className={classes.scroll}
        tabIndex={0}
        onKeyDown={onKeyDown}
        role="group"
        aria-label="Lines; arrow keys choose one, s puts it into the stack"
      >
        <table>
          <thead>
            <tr>
              <th scope="col">Line, nm</th>
              <th scope="col">Stack</th>
              <th scope="col">W in A, mÅ</th>
              <th scope="col">W in B, mÅ</th>
              <th scope="col">B / A</th>
              <th scope="col">v in A, km/s</th>
              <th scope="col">v in B, km/s</th>
              <th scope="col">B − A, km/s</th>
              <th scope="col">Verdict</th>
              <th scope="col">Odds</th>
            </tr>
          </thead>
          <tbody ref={body}>
            {rows.map((l) => (
              <Row key={l.key} line={l} chosen={l.key === chosen} onChoose={onChoose}>
                {drawn.has(l.lineId) && (
                  <input
                    type="checkbox"
                    aria-label={`${lineName(l)} into the stack of profiles`}
                    checked={stack.has(l.lineId)}
                    onChange={() => onStack(l.lineId)}
                    onClick={(e) => e.stopPropagation()}
                  />
                )}
              </Row>
            ))}
          </tbody>
        </table>
        {rows.length === 0 && <p className={classes.none}>No line has this verdict. Choose another above.</p>}
      </div>
    </section>
  );
}

interface RowProps {
  line: JudgedLine;
  chosen: boolean;
  onChoose: (key: string) => void;
  children: ReactNode;
}

function Row({ line, chosen, onChoose, children }: RowProps) {
  return (
    <tr data-key={line.key} aria-current={chosen || undefined} onClick={() => onChoose(line.key)}>
      <th scope="row">
        <Mark family={line.family} state={line.ruling?.verdict ? 'accepted' : 'proposed'} />{' '}
        <button type="button" onClick={() => onChoose(line.key)}>
          {lineName(line)}
        </button>
      </th>
      <td>{children}</td>
      <Width m={line.a} />
      <Width m={line.b} />
      <Num value={line.ratio} sigma={line.ratioSigma} />
      <Num value={line.a?.velocityKmPerS ?? null} sigma={line.a?.velocitySigmaKmPerS ?? null} sign />
      <Num value={line.b?.velocityKmPerS ?? null} sigma={line.b?.velocitySigmaKmPerS ?? null} sign />
      <Num value={line.differenceKmPerS} sigma={line.differenceSigmaKmPerS} sign />
      <td>
        <span className={classes.verdict}>
          <VerdictSign verdict={line.stands} />
          {VERDICT_WORD[line.stands]}
          {line.ruling?.verdict && <small>by {line.ruling.by}</small>}
        </span>
      </td>
      <td className={classes.num}>{line.verdict === 'cannot-tell' ? NO_NUMBER : oddsOf(line.probability)}</td>
    </tr>
  );
}

function Width({ m }: { m: JudgedLine['a'] }) {
  if (!m) return <td className={classes.num}>{NO_NUMBER}</td>;
  const seen = m.equivalentWidthNm > 3 * m.equivalentWidthSigmaNm;
  if (!seen) return <td className={classes.num}>&lt; {(m.limitNm * MILLIANGSTROM_PER_NM).toFixed(1)}</td>;
  return <Num value={m.equivalentWidthNm * MILLIANGSTROM_PER_NM} sigma={m.equivalentWidthSigmaNm * MILLIANGSTROM_PER_NM} />;
}

function Num({ value, sigma, sign = false }: { value: number | null; sigma: number | null; sign?: boolean }) {
  const parts = errorParts(value, sigma, sign);
  return (
    <td className={classes.num}>
      {parts.value}
      {parts.sigma && <span className={classes.error}> ± {parts.sigma}</span>}
    </td>
  );
}
