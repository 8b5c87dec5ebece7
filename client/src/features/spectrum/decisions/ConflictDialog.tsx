import { Button, Group, Modal, Text } from '@mantine/core';
import type { Identification } from '@foreveil/shared';
import { Mark } from '../../../plot/Mark.js';
import { STATE_WORD, type MarkFamily } from '../../../plot/marks.js';
import type { WavelengthDisplay } from '../../../lib/wavelength.js';
import { readingName } from '../evidence/claim-text.js';
import { shortTime } from '../format.js';
import type { Reading } from '../lines/reading.js';
import { stepsOver } from './act.js';
import type { Conflict } from './use-decisions.js';
import classes from './decisions.module.css';

const DOES = { propose: 'propose', accept: 'accept', reject: 'reject', reopen: 'put back to proposed' } as const;

const nameOf = (i: Identification, display: WavelengthDisplay) => readingName({ species: i.species, restNm: i.restNm } as Reading, display);

interface Props {
  conflict: Conflict | null;
  display: WavelengthDisplay;
  onKeepTheirs: () => void;
  onApplyMine: () => void;
}

/** Two people decided on one line: both versions side by side, and the person chooses. Nothing typed is lost. */
export function ConflictDialog({ conflict, display, onKeepTheirs, onApplyMine }: Props) {
  return (
    <Modal opened={conflict !== null} onClose={onKeepTheirs} title="A teammate decided on this line first" size="lg" centered>
      {conflict && <Versions conflict={conflict} display={display} onKeepTheirs={onKeepTheirs} onApplyMine={onApplyMine} />}
    </Modal>
  );
}

function Versions({ conflict: { theirs, mine }, display, onKeepTheirs, onApplyMine }: Props & { conflict: Conflict }) {
  const last = theirs.history.at(-1);
  const steps = stepsOver(theirs, mine);
  return (
    <>
      <div className={classes.versions}>
        <section aria-label="Their version">
          <h3>{theirs.decidedBy ?? 'A teammate'}, now</h3>
          <p className={classes.verdict}>
            <Mark family={(theirs.family as MarkFamily | null) ?? 'unidentified'} state={theirs.state} size={18} />
            <b>{STATE_WORD[theirs.state]}</b> {nameOf(theirs, display)}
          </p>
          <Text size="sm" c="dimmed">
            {theirs.decidedAt ? shortTime(theirs.decidedAt) : ''}
          </Text>
          {last?.remark && <blockquote>{last.remark}</blockquote>}
        </section>
        <section aria-label="Your version">
          <h3>You, not saved</h3>
          <p className={classes.verdict}>
            <Mark
              family={mine.reading.family}
              state={mine.action === 'accept' ? 'accepted' : mine.action === 'reject' ? 'rejected' : 'proposed'}
              size={18}
            />
            <b>{DOES[mine.action]}</b> {readingName(mine.reading, display)}
          </p>
          {mine.remark && <blockquote>{mine.remark}</blockquote>}
        </section>
      </div>
      {steps.length === 0 && <Text size="sm">Your decision does not apply to a line that is {STATE_WORD[theirs.state]}.</Text>}
      <Group justify="flex-end" mt="md">
        <Button variant="default" onClick={onKeepTheirs} data-autofocus>
          Keep theirs
        </Button>
        <Button onClick={onApplyMine} disabled={steps.length === 0}>
          {steps.length > 1 ? 'Reopen and apply mine' : 'Apply mine'}
        </Button>
      </Group>
    </>
  );
}
