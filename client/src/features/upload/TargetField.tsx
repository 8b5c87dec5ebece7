import { Autocomplete, Button, TextInput } from '@mantine/core';
import type { TargetSummary } from '@foreveil/shared';
import { FactRow } from '../../components/reading/FactRow.js';
import { optionsOf } from '../../components/reading/words.js';
import { Pick } from '../../components/Pick.js';
import { KIND_WORD } from '../../lib/kinds.js';
import { position, separationArcsec, separationWords } from '../../lib/position.js';
import { nearestTarget, sameTarget, type Entry, type TargetChoice } from './entry.js';
import classes from './upload.module.css';

const WHY: Record<TargetChoice['why'], string> = {
  object: 'from OBJECT',
  page: 'whose page you came from',
  file_name: 'from the file name',
  chosen: 'said by you',
  position: 'by its position, said by you',
};
/** Further from the target than this a file is likely of something else. */
const FAR_ARCSEC = 300;

interface Props {
  entry: Entry;
  targets: readonly TargetSummary[];
  onRetarget: (target: TargetChoice) => void;
}

/** A target of the programme by name, or the name of a new one; what the position in the file says of either. */
export function TargetField({ entry: { target, read }, targets, onRetarget }: Props) {
  const existing = sameTarget(target.name, targets);
  const reading = read?.ok ? read.reading : null;
  const object = reading?.objectName.value ?? null;
  const differs = target.why === 'page' && object !== null && !sameTarget(object, [{ name: target.name }]);
  const away = existing && reading ? distance(existing, reading.pointing.value) : null;
  const far = away !== null && away > FAR_ARCSEC;
  const words = [
    `${existing ? '' : 'new, '}${WHY[target.why]}`,
    ...(differs ? [`OBJECT is ${object}`] : []),
    ...(away === null ? [] : [`the file points ${separationWords(away)} away`]),
  ].join('; ');
  const near = reading && nearestTarget(reading, targets);
  const offer = near && near.target !== existing ? near : null;
  return (
    <FactRow label="Target" how={{ words, loud: target.why === 'file_name' || differs || far }}>
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
          {!existing && reading?.pointing.value && <span className={classes.quiet}>at {position(reading.raDeg, reading.decDeg)}</span>}
          {offer && (
            <Button
              variant="default"
              onClick={() => onRetarget({ name: offer.target.name, kind: offer.target.kind, why: 'position' })}
              className={classes.offer}
            >
              Use {offer.target.name}, {separationWords(offer.arcsec)} away
            </Button>
          )}
        </>
      )}
    </FactRow>
  );
}

const distance = ({ raDeg, decDeg }: TargetSummary, at: { raDeg: number; decDeg: number } | null): number | null =>
  at && raDeg !== null && decDeg !== null ? separationArcsec(at, { raDeg, decDeg }) : null;

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
