import { Button, TextInput } from '@mantine/core';
import type { Analysis, Candidate, MemberRole, ReviewAction } from '@foreveil/shared';
import { useId } from 'react';
import { probability } from '../../../lib/number.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { Mark } from '../../../plot/Mark.js';
import type { CurveData } from '../../../plot/curve-data.js';
import { refusal } from '../decisions/act.js';
import { choices, sameReading, type LineRow, type Reading } from '../lines/reading.js';
import { Argument } from './Argument.js';
import { Candidates } from './Candidates.js';
import { Companions } from './Companions.js';
import { How } from './How.js';
import { History } from './History.js';
import { Tested } from './Tested.js';
import { oddsLabel, together } from './odds.js';
import { claimTitle, measurement, readingName } from './claim-text.js';
import classes from './evidence.module.css';

export interface EvidenceProps {
  row: LineRow;
  /** the reading under consideration: the row's own, or one chosen from its candidates */
  chosen: Reading;
  analysis: Analysis;
  analysedAt: string | null;
  data: CurveData;
  display: WavelengthDisplay;
  frameName: string;
  role: MemberRole | null;
  /** the run on the page is not the newest: nothing is decided on it */
  isOld: boolean;
  busy: boolean;
  remark: string;
  /** of the input, so that a key can bring the focus there */
  remarkId: string;
  onChoose: (reading: Reading) => void;
  onRemark: (remark: string) => void;
  onAct: (action: ReviewAction) => void;
  onLeaveRemark: () => void;
}

/** The argument for one reading of one feature: the claim, what speaks for and against, the other readings, who decided what. */
export function EvidencePanel(props: EvidenceProps) {
  const { row, chosen, analysis, data, display } = props;
  const system = analysis.systems.find((s) => s.id === chosen.systemId) ?? null;
  const titleId = useId();
  return (
    <div className={classes.box}>
      <section className={classes.panel} aria-labelledby={titleId}>
        <div className={classes.claim}>
          <Mark family={chosen.family} state={sameReading(chosen, row.reading) ? row.state : 'proposed'} size={24} spoken />
          <div className={classes.claimWords}>
            <h2 id={titleId}>{claimTitle(chosen, system?.velocityKmPerS ?? null, display)}</h2>
            <p className={classes.measurement}>
              <How of="measurement">{measurement(row.feature, display)}</How>
            </p>
          </div>
          <Acts {...props} />
          <p className={classes.sentence}>
            {chosen.candidate ? summing(chosen.candidate) : withoutArgument(props)} <How of="probability">How computed</How>
          </p>
          {chosen.candidate?.settle && (
            <p className={classes.sentence}>
              <b>What would settle it.</b> {chosen.candidate.settle.sentence}
            </p>
          )}
        </div>
        <div className={classes.argument}>
          {chosen.candidate && <Argument candidate={chosen.candidate} />}
          <Candidates
            choices={choices(row.feature)}
            chosen={chosen}
            systems={analysis.systems}
            display={display}
            onChoose={props.onChoose}
          />
          <Tested reading={chosen} feature={row.feature} programVersion={analysis.programVersion} />
        </div>
        <div className={classes.side} tabIndex={0} role="group" aria-label="Companions and history">
          {chosen.candidate && (
            <Companions
              candidate={chosen.candidate}
              feature={row.feature}
              system={system}
              systems={analysis.systems}
              data={data}
              display={display}
              frameName={props.frameName}
            />
          )}
          <History
            identification={row.identification}
            family={row.reading.family}
            analysedAt={props.analysedAt}
            analysisProbability={row.reading.probability}
          />
          <TextInput
            id={props.remarkId}
            className={classes.remark}
            size="xs"
            maxLength={500}
            value={props.remark}
            placeholder="Remark, goes with your decision"
            aria-label="Remark, goes with your decision"
            rightSection={<kbd className={classes.key}>r</kbd>}
            onChange={(event) => props.onRemark(event.currentTarget.value)}
            onKeyDown={(event) => {
              if (event.key !== 'Escape' && event.key !== 'Enter') return;
              event.preventDefault();
              props.onLeaveRemark();
            }}
          />
        </div>
      </section>
    </div>
  );
}

/** Why it ranks where it does, and what the five factors make together. */
const summing = ({ sentence, evidence }: Candidate) =>
  evidence.length > 0 ? `${sentence} Together the odds are ${oddsLabel(together(evidence))}.` : sentence;

/** Said of 'unidentified', and of a reading that the newest analysis no longer offers. */
function withoutArgument({ row, chosen, display }: EvidenceProps): string {
  if (chosen.lineId !== null)
    return 'This reading was decided earlier; the newest analysis no longer offers it, so there is no argument for it here.';
  const [best] = row.feature.candidates;
  const listed = best
    ? `The best listed reading is ${readingName({ ...chosen, ...best }, display)} at ${probability(best.probability)}; choose it to see its argument.`
    : 'No listed line comes near it in a velocity system.';
  return `No listed line explains this feature well: ${probability(chosen.probability)}. ${listed}`;
}

const ACTS: readonly { action: ReviewAction; word: string; key: string; when: (row: LineRow) => boolean; main?: true }[] = [
  { action: 'accept', word: 'Accept', key: 'a', when: (r) => r.state === 'proposed', main: true },
  { action: 'reject', word: 'Reject', key: 'x', when: (r) => r.state === 'proposed' },
  { action: 'propose', word: 'Propose', key: 'o', when: (r) => r.state === 'proposed' },
  { action: 'reopen', word: 'Back to proposed', key: 'b', when: (r) => r.state !== 'proposed' },
];

/** Buttons for what can be done now. What the role forbids stays visible, greyed, with the reason. */
function Acts({ row, chosen, role, isOld, busy, onAct }: EvidenceProps) {
  const offered = ACTS.filter(
    ({ when, action }) =>
      when(row) && (action !== 'propose' || !sameReading(chosen, row.reading) || refusal('accept', row.state, role, isOld) !== null),
  );
  return (
    <div className={classes.acts}>
      {offered.map(({ action, word, key, main }) => {
        const why = refusal(action, row.state, role, isOld);
        return (
          <Button
            key={action}
            variant={main ? 'filled' : 'default'}
            className={main ? classes.main : undefined}
            rightSection={<kbd className={classes.key}>{key}</kbd>}
            data-disabled={why !== null || undefined}
            aria-disabled={why !== null || busy}
            title={why ?? undefined}
            onClick={() => why === null && !busy && onAct(action)}
          >
            {word}
          </Button>
        );
      })}
    </div>
  );
}
