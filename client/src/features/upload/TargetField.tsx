import { Autocomplete, TextInput } from '@mantine/core';
import type { TargetSummary } from '@foreveil/shared';
import { Pick } from '../../components/Pick.js';
import { KIND_WORD } from '../../lib/kinds.js';
import { sameTarget, type Entry, type TargetChoice } from './entry.js';
import { FactRow } from './FactRow.js';
import classes from './upload.module.css';
import { optionsOf } from './words.js';

const WHY: Record<TargetChoice['why'], string> = {
  object: 'from OBJECT',
  page: 'whose page you came from',
  file_name: 'from the file name',
  chosen: 'said by you',
};

interface Props {
  entry: Entry;
  targets: readonly TargetSummary[];
  onRetarget: (target: TargetChoice) => void;
}

/** A target of the programme by name, or the name of a new one. */
export function TargetField({ entry: { target, read }, targets, onRetarget }: Props) {
  const existing = sameTarget(target.name, targets);
  const object = read?.ok ? read.reading.objectName.value : null;
  const differs = target.why === 'page' && object !== null && !sameTarget(object, [{ name: target.name }]);
  const words = `${existing ? '' : 'new, '}${WHY[target.why]}${differs ? `; OBJECT is ${object}` : ''}`;
  return (
    <FactRow label="Target" how={{ words, loud: target.why === 'file_name' || differs }}>
      {(id) => (
        <>
          <Autocomplete
            aria-labelledby={id}
            data={targets.map(({ name }) => name)}
            value={target.name}
            className={classes.text}
            maxLength={120}
            limit={30}
            error={!target.name.trim() && 'Name the target.'}
            onChange={(name) => onRetarget({ name, kind: sameTarget(name, targets)?.kind ?? target.kind, why: 'chosen' })}
          />
          {!existing && (
            <Pick
              label="Kind of the new target"
              options={optionsOf(KIND_WORD)}
              value={target.kind}
              onPick={(kind) => onRetarget({ ...target, kind, why: 'chosen' })}
            />
          )}
        </>
      )}
    </FactRow>
  );
}

export const LabelField = ({ label, onRelabel }: { label: string; onRelabel: (label: string) => void }) => (
  <FactRow label="Called" how={{ words: 'as the team will see it', loud: false }}>
    {(id) => (
      <TextInput
        aria-labelledby={id}
        className={classes.text}
        value={label}
        maxLength={120}
        error={!label.trim() && 'Give it a name.'}
        onChange={(event) => onRelabel(event.currentTarget.value)}
      />
    )}
  </FactRow>
);
