import { Button, Radio } from '@mantine/core';
import { useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { KIND_WORD } from '../../lib/kinds.js';
import { counted } from '../../lib/number.js';
import { declination, rightAscension } from '../../lib/position.js';
import type { FactName, TargetFacts } from './merge.js';
import classes from './targets.module.css';

const FACT_WORD: Record<FactName, string> = { name: 'Name', kind: 'Kind', raDeg: 'Right ascension', decDeg: 'Declination', notes: 'Notes' };

function shown(field: FactName, facts: TargetFacts): string {
  if (field === 'kind') return KIND_WORD[facts.kind];
  if (field === 'raDeg') return facts.raDeg === null ? 'none' : rightAscension(facts.raDeg);
  if (field === 'decDeg') return facts.decDeg === null ? 'none' : declination(facts.decDeg);
  return facts[field] || 'none';
}

type Side = 'theirs' | 'mine';

interface Props {
  base: TargetFacts;
  theirs: TargetFacts;
  mine: TargetFacts;
  conflicts: readonly FactName[];
  busy: boolean;
  error: Error | null;
  onCancel: () => void;
  onSave: (choices: Partial<TargetFacts>) => void;
}

/** Someone saved the same fields first. All three versions side by side; nothing is saved until each field has its choice. */
export function MergeFacts({ base, theirs, mine, conflicts, busy, error, onCancel, onSave }: Props) {
  const [choices, setChoices] = useState<Partial<Record<FactName, Side>>>({});
  const left = conflicts.filter((field) => !choices[field]).length;
  const save = () => onSave(Object.fromEntries(conflicts.map((field) => [field, (choices[field] === 'mine' ? mine : theirs)[field]])));
  return (
    <div className={classes.form}>
      <p role="alert">
        A teammate changed {conflicts.length === 1 ? 'the same field' : 'the same fields'} while you were writing. Choose what stands; your
        other changes and theirs are both kept.
      </p>
      {conflicts.map((field) => (
        <Radio.Group
          key={field}
          label={FACT_WORD[field]}
          description={`Before: ${shown(field, base)}`}
          value={choices[field] ?? ''}
          onChange={(side) => setChoices((old) => ({ ...old, [field]: side as Side }))}
        >
          <div className={classes.sides}>
            <Radio value="theirs" label={`Theirs: ${shown(field, theirs)}`} />
            <Radio value="mine" label={`Yours: ${shown(field, mine)}`} />
          </div>
        </Radio.Group>
      ))}
      {error !== null && !busy && <ErrorNote error={error} />}
      <div className={classes.formActs}>
        <span role="status" className={classes.hint}>
          {left ? `${counted(left, 'choice')} to make` : 'Ready to save'}
        </span>
        <Button onClick={onCancel}>Keep theirs, drop mine</Button>
        <Button variant="filled" disabled={left > 0} loading={busy} onClick={save}>
          Save
        </Button>
      </div>
    </div>
  );
}
