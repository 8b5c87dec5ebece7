import { Button, Select } from '@mantine/core';
import { useClipboard } from '@mantine/hooks';
import { REVIEW_STATES, type ReviewState, type Target } from '@foreveil/shared';
import { useMemo, useState } from 'react';
import { count, counted } from '../../lib/number.js';
import { useWavelengthDisplay } from '../../lib/wavelength.js';
import { asTsv, linesIn } from './lines-view.js';
import { LineTable } from './LineTable.js';
import { SYSTEM_WORD, SystemList } from './SystemList.js';
import { agreedSystems } from './systems.js';
import classes from './targets.module.css';

const TITLE: Record<ReviewState, string> = { accepted: 'Agreed lines', proposed: 'Proposed lines', rejected: 'Rejected lines' };
const NONE: Record<ReviewState, string> = {
  accepted: 'No line is agreed yet. Open a spectrum above: its features wait with their ranked readings.',
  proposed: 'No proposal waits for a reviewer.',
  rejected: 'Nothing was rejected.',
};

/** Systems left, their lines right. */
export function AgreedLines({ programmeId, target }: { programmeId: string; target: Target }) {
  const display = useWavelengthDisplay();
  const [state, setState] = useState<ReviewState>('accepted');
  const [chosen, setChosen] = useState<string | null>(null);
  const lines = useMemo(() => linesIn(target.identifications, state), [target.identifications, state]);
  const systems = useMemo(() => agreedSystems(lines), [lines]);
  const system = systems.find(({ key }) => key === chosen) ?? null;
  const shown = system ? lines.filter((line) => system.lines.includes(line)) : lines;
  const { copy, copied, error } = useClipboard();
  const title = system ? `${TITLE[state]}, ${system.family ? SYSTEM_WORD[system.family].toLowerCase() : 'in no list'}` : TITLE[state];
  return (
    <div className={classes.agreed}>
      <section className={classes.aside}>
        <h2>Velocity systems</h2>
        <SystemList systems={systems} chosen={system?.key ?? null} onChoose={setChosen} />
        <p className={classes.hint}>
          {systems.length ? 'km/s. Choose one to see only its lines.' : 'They appear with the first agreed line.'}
        </p>
      </section>
      <section className={classes.main}>
        <div className={classes.tools}>
          <h2>{title}</h2>
          <span className={classes.count}>
            {shown.length === lines.length ? counted(lines.length, 'line') : `${count(shown.length)} of ${count(lines.length)}`}
          </span>
          <Select
            aria-label="Lines shown"
            w={128}
            ml="auto"
            data={REVIEW_STATES.map((value) => ({ value, label: value }))}
            value={state}
            onChange={(value) => setState(value as ReviewState)}
          />
          <Button disabled={!shown.length} onClick={() => copy(asTsv(shown, display))}>
            Copy
          </Button>
          <span role="status" className={classes.said}>
            {copied && `${counted(shown.length, 'line')} copied`}
            {error && 'The browser did not allow copying'}
          </span>
        </div>
        {shown.length ? (
          <LineTable programmeId={programmeId} lines={shown} display={display} caption={title} />
        ) : (
          <p className={classes.nothing}>{NONE[state]}</p>
        )}
      </section>
    </div>
  );
}
